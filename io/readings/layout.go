package readings

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// A Delimiter separates the fields of a line: an ASCII character, or Blanks.
type Delimiter byte

// The delimiters with a name. Any other printable ASCII character that is no
// letter, digit, quote, sign or decimal mark may serve as well.
const (
	DetectDelimiter Delimiter = 0
	Comma           Delimiter = ','
	Semicolon       Delimiter = ';'
	Tab             Delimiter = '\t'
	Blanks          Delimiter = ' ' // runs of blanks and tabs
)

// ParseDelimiter reads comma, semicolon, tab, blanks, detect or the character
// itself. Errors are *OptionError.
func ParseDelimiter(text string) (Delimiter, error) {
	switch strings.ToLower(text) {
	case "", "detect":
		return DetectDelimiter, nil
	case "comma":
		return Comma, nil
	case "semicolon":
		return Semicolon, nil
	case "tab", `\t`:
		return Tab, nil
	case "blanks", "blank":
		return Blanks, nil
	}
	if len(text) == 1 && Delimiter(text[0]).valid() {
		return Delimiter(text[0]), nil
	}
	return 0, &OptionError{"delimiter", text, "comma, semicolon, tab, blanks or one character such as |"}
}

func (d Delimiter) valid() bool {
	switch {
	case d == DetectDelimiter, d == Tab, d == Blanks:
		return true
	case d <= ' ', d >= 0x7f, d >= '0' && d <= '9', d >= 'A' && d <= 'Z', d >= 'a' && d <= 'z':
		return false
	}
	return !strings.ContainsRune(`"'.+-#<`, rune(d))
}

func (d Delimiter) String() string {
	switch d {
	case DetectDelimiter:
		return "detect"
	case Comma:
		return "comma"
	case Semicolon:
		return "semicolon"
	case Tab:
		return "tab"
	case Blanks:
		return "blanks"
	}
	return string(rune(d))
}

// A Decimal is the mark between the whole and the fraction of a number.
type Decimal byte

// The decimal marks.
const (
	DetectDecimal Decimal = 0
	DecimalPoint  Decimal = '.'
	DecimalComma  Decimal = ','
)

// ParseDecimal reads point, comma, detect or the mark itself. Errors are
// *OptionError.
func ParseDecimal(text string) (Decimal, error) {
	switch strings.ToLower(text) {
	case "", "detect":
		return DetectDecimal, nil
	case "point", ".":
		return DecimalPoint, nil
	case "comma", ",":
		return DecimalComma, nil
	}
	return 0, &OptionError{"decimal", text, "point or comma"}
}

func (d Decimal) String() string {
	switch d {
	case DecimalPoint:
		return "point"
	case DecimalComma:
		return "comma"
	}
	return "detect"
}

// A Declared layout is what the caller says about the text of the files. The zero
// value has everything detected, for each file by itself.
type Declared struct {
	Columns   Columns
	Delimiter Delimiter
	Decimal   Decimal
	// Comment is the text that begins a line to be passed over. Empty: "#", if the
	// first line of the file begins with it; "none": there are none.
	Comment string
	// SkipRows is how many lines at the top of each file are passed over before
	// anything else is looked at.
	SkipRows int
	// Missing are texts that stand for "no value" in x, y or z. One that is a
	// number counts in z alone, whatever way it is written (-9999 and -9999.00 are
	// the same); "blank" stands for an empty field. Case does not matter. A line
	// with one of them is left out, with that reason.
	Missing []string
}

// ParseMissing splits -9999,NM,blank at the commas.
func ParseMissing(text string) []string {
	var marks []string
	for _, m := range strings.Split(text, ",") {
		if m = strings.TrimSpace(m); m != "" {
			marks = append(marks, m)
		}
	}
	return marks
}

// check reports the first setting that makes no sense.
func (d *Declared) check() error {
	switch {
	case !d.Delimiter.valid():
		return &OptionError{"delimiter", string(rune(d.Delimiter)), "a character that no number holds"}
	case d.Decimal != DetectDecimal && d.Decimal != DecimalPoint && d.Decimal != DecimalComma:
		return &OptionError{"decimal", string(rune(d.Decimal)), "point or comma"}
	case d.SkipRows < 0:
		return &OptionError{"skip-rows", fmt.Sprint(d.SkipRows), "a number of lines from 0"}
	case !utf8.ValidString(d.Comment) || len(d.Comment) > 16 || strings.ContainsAny(d.Comment, " \t\r\n\x00\""):
		return &OptionError{"comment", d.Comment, "a short mark without blanks and quotes, such as #"}
	}
	for _, m := range d.Missing {
		if !utf8.ValidString(m) || strings.ContainsAny(m, "\r\n\x00") {
			return &OptionError{"missing", m, "a text that can stand in a field"}
		}
	}
	return nil
}

// A Layout is how a file was read: what was declared and what was detected.
type Layout struct {
	File      string
	Encoding  string // "UTF-8", "UTF-8 with a byte order mark", "UTF-16 little-endian", "UTF-16 big-endian"
	Delimiter Delimiter
	Decimal   Decimal
	Comment   string // empty: none
	SkipRows  int
	// HeaderLine is the line number of the header, 0 if there is none.
	HeaderLine int
	// Columns are the columns of the file in order.
	Columns []Column
	// Heads is true if z was called head: heads of unlike wells are never merged.
	Heads bool
	// Down is true if depths were counted from Options.DepthFrom.
	Down bool
	// Note is what was assumed, in words; empty if nothing was.
	Note string

	DelimiterDeclared, DecimalDeclared, CommentDeclared, ColumnsDeclared bool
}

// A Column of a file.
type Column struct {
	Name string // from the header; empty without one
	Role Role   // NoRole: passed over
}

// Has reports whether a column of the file has the role.
func (l *Layout) Has(r Role) bool {
	for _, c := range l.Columns {
		if c.Role == r && r != NoRole {
			return true
		}
	}
	return false
}

// String tells the layout in one line, for people.
func (l *Layout) String() string {
	var b strings.Builder
	said := func(declared bool) string {
		if declared {
			return "declared"
		}
		return "detected"
	}
	fmt.Fprintf(&b, "%s, delimiter %s (%s), decimal %s (%s), ", l.Encoding,
		l.Delimiter, said(l.DelimiterDeclared), l.Decimal, said(l.DecimalDeclared))
	if l.HeaderLine > 0 {
		fmt.Fprintf(&b, "header in line %d, ", l.HeaderLine)
	} else {
		b.WriteString("no header, ")
	}
	if l.Comment != "" {
		fmt.Fprintf(&b, "comment mark %s (%s), ", l.Comment, said(l.CommentDeclared))
	}
	if l.SkipRows > 0 {
		fmt.Fprintf(&b, "%s skipped, ", lines(l.SkipRows))
	}
	b.WriteString("columns ")
	for i, c := range l.Columns {
		if i > 0 {
			b.WriteByte(',')
		}
		switch {
		case c.Role != NoRole && c.Name != "" && !strings.EqualFold(c.Name, c.Role.String()):
			fmt.Fprintf(&b, "%s=%s", c.Role, c.Name)
		default:
			b.WriteString(c.Role.String())
		}
	}
	fmt.Fprintf(&b, " (%s)", said(l.ColumnsDeclared))
	if l.Note != "" {
		b.WriteString("; " + l.Note)
	}
	return b.String()
}
