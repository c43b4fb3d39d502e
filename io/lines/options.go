package lines

import (
	"isofacet/io/readings"
)

// Options steer Breaklines and Rings. The zero value detects the layout of every text
// and takes no zero for a height without being told.
type Options struct {
	// Declared is what is known about the text files; it does not matter for
	// GeoJSON. Without Columns they come from the header, or are line, x, y and z in
	// this order.
	readings.Declared
	Zeros   Zeros
	Workers int // for parsing text; 0 is one per processor, and does not change the result
}

// Zeros says what heights mean that are all zero. Programs that draw in the plane
// write them.
type Zeros uint8

const (
	// RefuseZeros takes them for heights that are missing. The default.
	RefuseZeros Zeros = iota
	// UseZeros takes them for heights.
	UseZeros
)

// ParseZeros reads use; the empty string is RefuseZeros. Errors are
// *readings.OptionError.
func ParseZeros(text string) (Zeros, error) {
	switch text {
	case "":
		return RefuseZeros, nil
	case "use":
		return UseZeros, nil
	}
	return 0, &readings.OptionError{Option: "lines-z", Seen: text, Expected: "use, which takes heights for heights that are all 0"}
}
