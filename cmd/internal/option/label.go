package option

import (
	"strings"
	"unicode"
)

// Label is a name that is carried into every output, such as that of a height
// datum. It holds no control characters, so that it cannot break a line of an
// output.
type Label string

// Set takes a text of at least one character.
func (l *Label) Set(text string) error {
	if strings.TrimSpace(text) == "" || strings.ContainsFunc(text, unicode.IsControl) {
		return &BadValue{text, "a name, such as NAVD88, without line breaks"}
	}
	*l = Label(text)
	return nil
}

func (l Label) String() string { return string(l) }

// Type names the form in help pages.
func (l *Label) Type() string { return "LABEL" }

// System is the code of a coordinate system in the EPSG register, such as
// EPSG:25832. It is a label: nothing is projected.
type System string

// Set reads EPSG: and a number.
func (s *System) Set(text string) error {
	number, ok := strings.CutPrefix(text, "EPSG:")
	if !ok || len(number) < 4 || len(number) > 6 || strings.Trim(number, "0123456789") != "" || number[0] == '0' {
		return &BadValue{text, "EPSG: and the number of a coordinate system, such as EPSG:25832"}
	}
	*s = System(text)
	return nil
}

func (s System) String() string { return string(s) }

// Type names the form in help pages.
func (s *System) Type() string { return "EPSG:n" }
