package lines

import (
	"slices"
	"strings"

	"isofacet/io/readings"
)

// A Use is what a code table makes of a reading by its code.
type Use uint8

// The uses.
const (
	Unknown  Use = iota // no pattern fits
	Ground              // a place of the surface
	OnLine              // one that belongs to a line as well
	LeaveOut            // no part of the surface
)

var useNames = []string{"unknown", "ground", "line", "leave-out"}

// String returns the word by which a table calls the use.
func (u Use) String() string { return useNames[u] }

// A CodeTable says what codes mean: what is a place of the ground, what belongs to
// a line, what is left out, and how a code is taken apart into the code itself, the
// number of a string and marks that begin, end and close it. Offices differ in
// all of this, so nothing is taken for granted. See ReadCodeTable for how it is written.
// Read-only and safe to share.
type CodeTable struct {
	Name string

	patterns  []codePattern
	others    Use
	separator string // blanks stand for runs of them; empty: a code is one part
	number    numberPlace
	mark      markPlace
	marks     map[string]markKind
}

type codePattern struct {
	use Use
	readings.Pattern
}

// numberPlace says where the number of a string stands.
type numberPlace uint8

const (
	numberNone   numberPlace = iota
	numberBehind             // TOE1
	numberPart               // TOE 1
)

// markPlace says where marks stand.
type markPlace uint8

const (
	markNone  markPlace = iota
	markFirst           // B TOE1
	markLast            // TOE1 B
)

type markKind uint8

const (
	markBegin markKind = 1 << iota
	markEnd
	markClose
)

// Coded is a code taken apart.
type Coded struct {
	// Code is what the patterns are compared with, Number the number of the string as
	// it is written: 01 is not 1.
	Code, Number      string
	Begin, End, Close bool
	Use               Use
	// Clash holds two patterns of unlike uses if both fit; Use is Unknown then.
	Clash [2]string
}

// Take takes the text of a code apart and looks it up.
//
// The text is divided at the separator. Marks are taken off the end (or the
// beginning) as long as parts are left, then a last part of digits as the number; what
// remains is the code, or the code with the number behind its last part.
func (t *CodeTable) Take(text string) Coded {
	var c Coded
	parts := t.parts(text)
	for t.mark != markNone && len(parts) > 1 {
		k := 0
		if t.mark == markLast {
			k = len(parts) - 1
		}
		kind := t.marks[parts[k]]
		if kind == 0 {
			break
		}
		c.Begin = c.Begin || kind == markBegin
		c.End = c.End || kind == markEnd
		c.Close = c.Close || kind == markClose
		parts = slices.Delete(parts, k, k+1)
	}
	if n := len(parts); t.number == numberPart && n > 1 && leadingOther(parts[n-1]) == "" {
		c.Number = parts[n-1]
		parts = parts[:n-1]
	}
	separator := t.separator
	if t.blanks() {
		separator = " "
	}
	c.Code = strings.Join(parts, separator)
	if n := len(parts); t.number == numberBehind && n > 0 {
		if digits := len(parts[n-1]) - len(leadingOther(parts[n-1])); digits < len(parts[n-1]) {
			k := len(c.Code) - digits
			c.Code, c.Number = c.Code[:k], c.Code[k:]
		}
	}
	t.lookUp(&c)
	return c
}

// parts divides a code. Empty parts are none.
func (t *CodeTable) parts(text string) []string {
	if t.separator == "" {
		return []string{strings.TrimSpace(text)}
	}
	if t.blanks() {
		return strings.Fields(text)
	}
	parts := strings.Split(text, t.separator)
	for i := range parts {
		parts[i] = strings.TrimSpace(parts[i])
	}
	return slices.DeleteFunc(parts, func(p string) bool { return p == "" })
}

func (t *CodeTable) blanks() bool { return t.separator != "" && strings.TrimSpace(t.separator) == "" }

// leadingOther returns a text without the digits at its end.
func leadingOther(text string) string { return strings.TrimRight(text, "0123456789") }

// lookUp finds the use of a code.
func (t *CodeTable) lookUp(c *Coded) {
	found := ""
	for i := range t.patterns {
		p := &t.patterns[i]
		if !p.Match(c.Code) {
			continue
		}
		if found != "" && p.use != c.Use {
			c.Clash = [2]string{found, told(p)}
			c.Use = Unknown
			return
		}
		found, c.Use = told(p), p.use
	}
	if found == "" {
		c.Use = t.others
	}
}

// told is a pattern with its use, as a table writes it.
func told(p *codePattern) string { return p.use.String() + " " + codeText(p.Text) }

// stringName is what a line of readings with a code and number is called.
func (t *CodeTable) stringName(c *Coded) string {
	if t.number == numberPart && c.Number != "" {
		return c.Code + " " + c.Number
	}
	return c.Code + c.Number
}
