package option

import (
	"math"
	"strconv"
	"strings"
)

// At is where a surface is asked: places typed as X,Y, or files of places.
type At struct {
	Places []Place
	Files  []string // "-" is standard input
}

// A Place is a position with the text it was typed as.
type Place struct {
	X, Y         float64
	TextX, TextY string
}

// Set reads X,Y, or takes the text as a file name.
func (a *At) Set(text string) error {
	if text == "" {
		return &BadValue{text, "X,Y such as 431.5,-20, or a file of places"}
	}
	tx, ty, ok := strings.Cut(text, ",")
	if !ok {
		if _, err := strconv.ParseFloat(text, 64); err == nil {
			return &BadValue{text, "two numbers X,Y, such as 431.5,-20"}
		}
		a.Files = append(a.Files, text)
		return nil
	}
	x, errX := strconv.ParseFloat(tx, 64)
	y, errY := strconv.ParseFloat(ty, 64)
	if errX != nil && errY != nil {
		// A comma in a file name: neither half is a number.
		a.Files = append(a.Files, text)
		return nil
	}
	if errX != nil || errY != nil {
		return &BadValue{text, "two numbers X,Y, such as 431.5,-20"}
	}
	if !accepted(x) || !accepted(y) {
		return &BadValue{text, "two numbers X,Y of 0 or from 1e-60 to 1e60 in size"}
	}
	// Adding 0 makes -0 into 0.
	a.Places = append(a.Places, Place{x + 0, y + 0, tx, ty})
	return nil
}

// accepted reports whether v is a coordinate that the surface decides exactly; NaN
// and infinities are none.
func accepted(v float64) bool {
	size := math.Abs(v)
	return size == 0 || size >= 1e-60 && size <= 1e60
}

// String writes the places and files as they are typed, separated by blanks.
func (a *At) String() string {
	var words []string
	for _, p := range a.Places {
		words = append(words, p.TextX+","+p.TextY)
	}
	return strings.Join(append(words, a.Files...), " ")
}

// Type names the form in help pages.
func (a *At) Type() string { return "X,Y|FILE" }
