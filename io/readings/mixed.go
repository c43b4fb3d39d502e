package readings

import (
	"cmp"
	"fmt"
	"maps"
	"slices"
	"strings"
)

// MixedError says that the readings belong to several rounds, or heads to several
// zones: what one surface through all of them would mean nobody knows.
type MixedError struct {
	Role Role
	// Texts are those that the used readings have, in order, with how many readings
	// have each.
	Texts  []string
	Counts []int
}

// mixedFew is how many texts a message names.
const mixedFew = 12

func (e *MixedError) Error() string {
	var b strings.Builder
	fmt.Fprintf(&b, "readings of %d %ss:", len(e.Texts), e.Role)
	for i, text := range e.Texts {
		if i == mixedFew {
			fmt.Fprintf(&b, ", and %d more", len(e.Texts)-i)
			break
		}
		if i > 0 {
			b.WriteByte(',')
		}
		if text == "" {
			text = "(none)"
		}
		fmt.Fprintf(&b, " %s (%d)", text, e.Counts[i])
	}
	return b.String() + ": expected one " + e.Role.String()
}

// mixed returns a *MixedError if the readings have several texts in a role of which
// Options.OneOf wants one.
func (c *collected) mixed() error {
	heads := c.Heads()
	for _, role := range c.o.OneOf {
		if !role.Kept() || role == Zone && !heads {
			continue
		}
		count := map[string]int{}
		last, n := "", 0
		for _, b := range c.blocks {
			t := &b.texts[textSlot[role]]
			if t.len() == 0 {
				// A file without the column says nothing of it.
				continue
			}
			for i := range t.len() {
				if text := t.at(i); text != last {
					if n > 0 {
						count[last] += n
					}
					last, n = text, 0
				}
				n++
			}
		}
		if n > 0 {
			count[last] += n
		}
		if len(count) < 2 {
			continue
		}
		e := &MixedError{Role: role}
		for _, text := range slices.SortedFunc(maps.Keys(count), cmp.Compare[string]) {
			e.Texts, e.Counts = append(e.Texts, strings.Clone(text)), append(e.Counts, count[text])
		}
		return e
	}
	return nil
}
