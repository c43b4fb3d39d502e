package lines

import (
	"fmt"
	"strconv"
	"strings"
)

// A Kind says what sort of trouble a Fault is, so that a program can choose its
// advice without reading the text.
type Kind uint8

// The kinds.
const (
	_ Kind = iota
	// Of files.
	NoLines      // a source without a line or ring
	NoLineColumn // a text that does not say which line a row belongs to
	NoName       // a row without the name of a line
	TooLarge     // more bytes than are read
	// Of features.
	NotALine     // a geometry that is no line or ring, or none at all
	LooseReading // a point feature that does not name its line
	// Of vertices.
	NoPlace      // a row whose x or y is missing
	TwoHeights   // two heights at one place of a line
	HeightsCount // a height here and none there
	// Of lines.
	NoHeights   // a breakline without heights
	ZeroHeights // heights that are all 0
	OnePosition // a line that goes nowhere
	NotClosed   // a ring whose end is not its beginning
	FewCorners  // a ring with fewer than three places
	// Of strings of coded readings.
	NoCodeColumn // nothing to look up in the table
	kindCount
)

// A Fault is one trouble with one line, at one place.
//
// It prints as file:row: line "name" what was seen: expected ..., and leaves out
// what it does not know.
type Fault struct {
	Place
	Name     string // of the line or ring, as far as known
	Kind     Kind
	Seen     string
	Expected string
}

func (f *Fault) Error() string {
	var b strings.Builder
	b.WriteString(f.Place.String())
	b.WriteString(": ")
	b.WriteString(f.Seen)
	if f.Expected != "" {
		b.WriteString(": expected ")
		b.WriteString(f.Expected)
	}
	return b.String()
}

// Faults are the troubles of all sources of one call. Checking goes on behind a bad
// line, so that one does not hide the next: First holds the first few, Total how
// many there are.
type Faults struct {
	First []*Fault
	Total int
}

// firstFew is how many faults an error shows.
const firstFew = 5

func (e *Faults) Error() string {
	var b strings.Builder
	for i, f := range e.First {
		if i > 0 {
			b.WriteByte('\n')
		}
		b.WriteString(f.Error())
	}
	if more := e.Total - len(e.First); more > 0 {
		fmt.Fprintf(&b, "\nand %d more faults", more)
	}
	return b.String()
}

// Unwrap gives errors.As the first faults.
func (e *Faults) Unwrap() []error {
	all := make([]error, len(e.First))
	for i, f := range e.First {
		all[i] = f
	}
	return all
}

func (e *Faults) add(f *Fault) {
	if e.Total++; len(e.First) < firstFew {
		e.First = append(e.First, f)
	}
}

// err is e if there is a fault.
func (e *Faults) err() error {
	if e.Total == 0 {
		return nil
	}
	return e
}

// called is a line or ring as messages call it: line "toe".
func called(what, name string) string {
	if name == "" {
		return what
	}
	return what + " " + strconv.Quote(shorten(name))
}

// shorten cuts a seen text to a length that fits a message.
func shorten(s string) string {
	const most = 60
	n := 0
	for i := range s {
		if n == most {
			return s[:i] + "..."
		}
		n++
	}
	return s
}

// plain writes a coordinate or a height as a person would.
func plain(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// rough writes a length that nobody needs in full: four digits.
func rough(v float64) string {
	digits := strconv.FormatFloat(v, 'g', 4, 64)
	if r, err := strconv.ParseFloat(digits, 64); err == nil && r >= 1e-4 && r < 1e9 {
		return plain(r)
	}
	return digits
}

func counted(n int, one string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + one + "s"
}
