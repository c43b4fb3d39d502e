package geojson

import "isofacet/io/numtext"

// A ValueKind says what a Value holds.
type ValueKind uint8

const (
	Absent ValueKind = iota // nothing: a property or id that is not written
	NullKind
	BoolKind
	NumberKind
	IntKind
	StringKind
	// JSONKind is any other JSON value as text: an object, an array, or an integer that an int64 does not hold.
	JSONKind
)

// A Value is what a property or an id holds. The zero value is Absent.
type Value struct {
	text   string
	number float64
	whole  int64
	places int8
	kind   ValueKind
}

// Property is a name and its value.
type Property struct {
	Name  string
	Value Value
}

// Number holds v, written with the shortest text that reads back to the same double. NaN is no data and becomes null.
func Number(v float64) Value { return Fixed(v, -1) }

// Fixed holds v, written with places digits after the point (0 to 20; -1: the shortest text). NaN becomes null.
func Fixed(v float64, places int) Value {
	if v != v {
		return Null()
	}
	return Value{kind: NumberKind, number: v, places: int8(max(-1, min(places, placesMost)))}
}

// Int holds a whole number.
func Int(v int64) Value { return Value{kind: IntKind, whole: v} }

// String holds a text.
func String(s string) Value { return Value{kind: StringKind, text: s} }

// Bool holds true or false.
func Bool(b bool) Value {
	v := Value{kind: BoolKind}
	if b {
		v.whole = 1
	}
	return v
}

// Null holds null: the property exists and has no value.
func Null() Value { return Value{kind: NullKind} }

// Kind says which of the methods below is the one to ask.
func (v Value) Kind() ValueKind { return v.kind }

// Float returns a number, whole or not, and whether v holds one. Of an integer that an int64 does not hold it is the nearest double.
func (v Value) Float() (float64, bool) {
	switch v.kind {
	case NumberKind:
		return v.number, true
	case IntKind:
		return float64(v.whole), true
	case JSONKind:
		return numtext.Parse([]byte(v.text))
	}
	return 0, false
}

// Whole returns the number of Int, and whether v holds one.
func (v Value) Whole() (int64, bool) {
	if v.kind != IntKind {
		return 0, false
	}
	return v.whole, true
}

// Truth returns the truth of Bool, and whether v holds one.
func (v Value) Truth() (value, ok bool) {
	ok = v.kind == BoolKind
	return ok && v.whole != 0, ok
}

// Text returns the text of a string, or of other JSON without blanks between its parts, and whether v holds either.
func (v Value) Text() (string, bool) { return v.text, v.kind == StringKind || v.kind == JSONKind }
