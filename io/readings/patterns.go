package readings

import "strings"

// rolePatterns are the patterns for one role.
type rolePatterns struct {
	slot     int8
	patterns []string
	said     string
	known    map[string]bool // answers for texts met before
}

// knownMost bounds the memory of answers: codes and zones are few, ids are many.
const knownMost = 1024

// groupPatterns groups patterns by role, in the order of the roles.
func groupPatterns(list []Pattern) (groups []rolePatterns) {
	for _, r := range keptRoles {
		g := rolePatterns{slot: textSlot[r], known: make(map[string]bool)}
		var said []string
		for _, p := range list {
			if p.Role == r {
				g.patterns = append(g.patterns, p.Text)
				said = append(said, p.String())
			}
		}
		if len(said) > 0 {
			g.said = strings.Join(said, ", ")
			groups = append(groups, g)
		}
	}
	return groups
}

func (g *rolePatterns) match(text []byte) bool {
	if hit, ok := g.known[string(text)]; ok {
		return hit
	}
	hit := false
	for _, p := range g.patterns {
		if match(p, string(text)) {
			hit = true
			break
		}
	}
	if len(g.known) >= knownMost {
		clear(g.known)
	}
	g.known[string(text)] = hit
	return hit
}

// chosen says why the patterns or the code leave the current record out, "" if they
// do not.
func (w *worker) chosen() string {
	for i := range w.only {
		if g := &w.only[i]; !g.match(w.current[g.slot]) {
			return "not among " + g.said
		}
	}
	for i := range w.without {
		if g := &w.without[i]; g.match(w.current[g.slot]) {
			return "among " + g.said
		}
	}
	if w.byCode != nil {
		return w.byCode(w.current[textSlot[Code]])
	}
	return ""
}
