package readings

import (
	"fmt"
	"slices"
	"strings"
	"sync"
)

// rolePatterns are the patterns for one role.
type rolePatterns struct {
	slot     int8
	patterns []string
	said     string
	known    map[string]bool // answers for texts met before
	dropped  bool            // some of them were forgotten
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
		g.dropped = true
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

// unmet collects the patterns of Selection.Only that no record has met, and what the
// records have instead.
type unmet struct {
	mu     sync.Mutex
	groups []unmetGroup
}

type unmetGroup struct {
	said  string
	met   bool // or it is not known
	texts map[string]bool
}

// add takes over what a worker has seen.
func (u *unmet) add(w *worker) {
	u.mu.Lock()
	defer u.mu.Unlock()
	if u.groups == nil {
		u.groups = make([]unmetGroup, len(w.only))
	}
	for i := range w.only {
		g, all := &w.only[i], &u.groups[i]
		if all.texts == nil {
			all.texts = map[string]bool{}
		}
		all.said = g.said
		all.met = all.met || g.dropped
		for text, hit := range g.known {
			all.met = all.met || hit
			all.texts[text] = true
		}
	}
}

// warnings says which patterns were met by none.
func (u *unmet) warnings(file string) (list []Warning) {
	for _, g := range u.groups {
		if g.met || len(g.texts) == 0 {
			continue
		}
		var texts []string
		for text := range g.texts {
			if text == "" {
				text = "(none)"
			}
			texts = append(texts, text)
		}
		slices.Sort(texts)
		more := ""
		if n := len(texts) - mixedFew; n > 0 {
			texts, more = texts[:mixedFew], fmt.Sprintf(" and %d more", n)
		}
		list = append(list, Warning{file, 0, fmt.Sprintf("nothing is %s: there are %s%s", g.said, strings.Join(texts, ", "), more)})
	}
	return list
}
