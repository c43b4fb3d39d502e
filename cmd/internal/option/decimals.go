package option

import "strconv"

// Decimals says how many digits after the point the numbers of a text output
// have. The zero value is auto.
type Decimals struct {
	mode   decimalsMode
	digits int
}

type decimalsMode uint8

const (
	auto decimalsMode = iota
	full
	fixed
)

// decimalsMax keeps a typing slip from filling a disk; a double has no more
// than 17 significant digits, and heights above 1e-17 need no further place.
const decimalsMax = 20

// Set reads auto, full, or a number of digits from 0 to 20.
func (d *Decimals) Set(text string) error {
	switch text {
	case "auto":
		*d = Decimals{mode: auto}
		return nil
	case "full":
		*d = Decimals{mode: full}
		return nil
	}
	n, err := strconv.Atoi(text)
	if err != nil || n < 0 || n > decimalsMax {
		return &BadValue{text, "auto, full, or a number of digits from 0 to 20"}
	}
	*d = Decimals{fixed, n}
	return nil
}

// Resolve returns the digits after the point for a quantity that would have
// automatic digits of its own; -1 means the shortest text that reads back to
// the same double.
func (d Decimals) Resolve(automatic int) int {
	switch d.mode {
	case full:
		return -1
	case fixed:
		return d.digits
	}
	return min(automatic, decimalsMax)
}

// String writes the value as it is typed.
func (d Decimals) String() string {
	switch d.mode {
	case full:
		return "full"
	case fixed:
		return strconv.Itoa(d.digits)
	}
	return "auto"
}

// Type names the form in help pages.
func (d *Decimals) Type() string { return "auto|full|N" }
