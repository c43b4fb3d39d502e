package main

import (
	"encoding/json"
	"math"

	"isofacet/io/numtext"
)

// A number is a value with its digits after the point (-1 for the shortest text
// that reads back to it), for people and for JSON.
type number struct {
	v      float64
	digits int
}

// String writes no data as a hyphen.
func (n number) String() string {
	if !isFinite(n.v) {
		return "-"
	}
	return string(numtext.Append(nil, n.v, n.digits))
}

// MarshalJSON writes no data as null.
func (n number) MarshalJSON() ([]byte, error) {
	if !isFinite(n.v) {
		return []byte("null"), nil
	}
	return numtext.Append(nil, n.v, n.digits), nil
}

var _ json.Marshaler = number{}

func isFinite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
