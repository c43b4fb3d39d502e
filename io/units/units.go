package units

import (
	"fmt"
	"strings"
)

// A Unit is a unit of length.
type Unit uint8

// The units. The zero value is a unit that nobody stated: it is never converted.
const (
	Unstated Unit = iota
	Metre
	FootInternational
	FootUS
	count
)

var names = [count]string{"unstated", "m", "ft-int", "ft-us"}

// String returns the word that Parse reads, or "unstated".
func (u Unit) String() string {
	if u < count {
		return names[u]
	}
	return "unknown unit"
}

// ratios are the units in metres.
var ratios = [count][2]uint64{Metre: {1, 1}, FootInternational: {3048, 10000}, FootUS: {1200, 3937}}

// An Error is a word that names no unit, or more than one.
type Error struct {
	Seen string
	// Ambiguous is true for words such as "ft", which could be either foot.
	Ambiguous bool
}

func (e *Error) Error() string { return fmt.Sprintf("unit %q: expected %s", e.Seen, e.Expected()) }

// Expected says what could have been meant.
func (e *Error) Expected() string {
	if e.Ambiguous {
		return "which foot: ft-int (international, 0.3048 m) or ft-us (US survey, 1200/3937 m)"
	}
	return "m, ft-int (international foot) or ft-us (US survey foot)"
}

// Parse reads m, ft-int or ft-us. Other words are an *Error, "ft" and "feet" among
// them: they do not say which foot.
func Parse(text string) (Unit, error) {
	switch w := strings.ToLower(strings.TrimSpace(text)); w {
	case "m":
		return Metre, nil
	case "ft-int":
		return FootInternational, nil
	case "ft-us":
		return FootUS, nil
	case "ft", "foot", "feet", "'":
		return Unstated, &Error{text, true}
	}
	return Unstated, &Error{Seen: text}
}
