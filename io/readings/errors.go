package readings

import (
	"fmt"
	"strconv"
	"strings"
)

// A Kind says what sort of trouble a PositionError is, so that a program can choose
// its advice without reading the text.
type Kind uint8

// The kinds, each with an input that leads to it.
const (
	_ Kind = iota
	// Lines.
	NotNumber    // "abc" where a number belongs, DRY and ND among them
	Blank        // nothing where a number belongs
	NotFinite    // NaN, Inf
	Bound        // "<25": a bound, not a value
	DecimalMark  // "12,4" in a file whose decimal mark is the point, or the reverse
	Thousands    // "1,234.5" or "1 234.5": a mark between thousands
	OutOfRange   // a number that is neither 0 nor from 1e-60 to 1e60 in size
	FieldCount   // more or fewer fields than the header or the first line has
	Quote        // a quote that is not closed, or text behind a closing quote
	LongText     // a name or code of more than 1,024 bytes
	BadCharacter // a control character inside a kept text
	// Files.
	Binary        // a NUL byte
	LongLine      // a line of a mebibyte
	Empty         // a file without a line to read
	Unreadable    // the file cannot be opened or read
	TooMany       // more readings than can be numbered
	TooManyBad    // lenient reading of a file that is mostly bad lines
	NoHeader      // no header line, and the columns are not declared
	UnknownHeader // a header without a known word
	DepthOrLevel  // "water level": depth or elevation?
	TwoColumns    // two columns claim one role
	MissingRole   // x, y or z has no column, or a selection asks for a role that none has
	UnusedRole    // a declared role that is not used here
	MissingColumn // a declared column name or number that the file does not have
	WhichDecimal  // "1,234" everywhere: 1.234 or 1234?
	DepthAlone    // a depth, and nothing that it is counted from
	UnknownStatus // a word of the status that no table explains
	Impossible    // numbers that contradict each other
	WhichComment  // every line begins with the comment mark
	kindCount
)

// A PositionError is one trouble at one place of an input.
//
// It prints as file:line:column: what "seen": expected ..., and leaves out what it
// does not know. Lines and columns count from 1; a column counts characters.
type PositionError struct {
	File   string
	Line   int // 0: the whole file
	Column int // 0: the whole line
	Field  int // number of the field in its line, 0 if the error is about no field

	Kind     Kind
	What     string // what stands there: a role, "line", "header", ...
	Seen     string // the text as read, shortened
	Expected string
	Err      error  // the cause, for Unreadable
	ID       string // of the reading, if it could be read
}

func (e *PositionError) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d", e.Line)
		if e.Column > 0 {
			fmt.Fprintf(&b, ":%d", e.Column)
		}
	}
	b.WriteString(": ")
	b.WriteString(e.message())
	return b.String()
}

// message is the error without its place.
func (e *PositionError) message() string {
	var b strings.Builder
	b.WriteString(e.What)
	if e.Seen != "" || e.Kind == Blank {
		if b.Len() > 0 {
			b.WriteByte(' ')
		}
		b.WriteString(strconv.Quote(e.Seen))
	}
	if e.Err != nil {
		if b.Len() > 0 {
			b.WriteString(": ")
		}
		b.WriteString(e.Err.Error())
	}
	if e.Expected != "" {
		b.WriteString(": expected ")
		b.WriteString(e.Expected)
	}
	return b.String()
}

func (e *PositionError) Unwrap() error { return e.Err }

// BadLines says which lines could not be read. Reading goes on behind a bad line,
// so that one does not hide the next: First holds the first few, Total how many
// there are.
type BadLines struct {
	First []*PositionError
	Total int
	// Good is how many lines held a reading (used or left out by a rule).
	Good int
}

// firstFew is how many bad lines, and places in conflict, an error shows.
const firstFew = 5

func (e *BadLines) Error() string {
	var b strings.Builder
	for i, p := range e.First {
		if i > 0 {
			b.WriteByte('\n')
		}
		b.WriteString(p.Error())
	}
	if more := e.Total - len(e.First); more > 0 {
		fmt.Fprintf(&b, "\nand %d more bad lines", more)
	}
	fmt.Fprintf(&b, "\n%s bad, %s good", lines(e.Total), strconv.Itoa(e.Good))
	return b.String()
}

func lines(n int) string {
	if n == 1 {
		return "1 line"
	}
	return strconv.Itoa(n) + " lines"
}

// Unwrap gives errors.As the first bad line.
func (e *BadLines) Unwrap() []error {
	all := make([]error, len(e.First))
	for i, p := range e.First {
		all[i] = p
	}
	return all
}

// An OptionError is a value that a caller or a user gave for one of the settings of
// this package.
type OptionError struct {
	Option   string // columns, delimiter, decimal, ...
	Seen     string
	Expected string
}

func (e *OptionError) Error() string {
	return fmt.Sprintf("%s %q: expected %s", e.Option, e.Seen, e.Expected)
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
