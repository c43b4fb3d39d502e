package geojson

import (
	"fmt"
	"strconv"
)

// A WarningKind says what a Warning is about.
type WarningKind uint8

const (
	_ WarningKind = iota

	// Of a Writer.

	// NotDegrees: the coordinates are not longitude and latitude, the only ones that RFC 7946 knows. Label is what the member
	// coordinates_in says.
	NotDegrees
	// OutsideDegrees: Label says longitude and latitude, and Count features have a position beyond 180 or 90 degrees.
	OutsideDegrees
	// Flattened: Count lines or rings have no length or area at the decimals written.
	Flattened

	// Of a Reader.

	// OldSystem: the file has a crs member, as GeoJSON had it before RFC 7946. Label is its name.
	OldSystem
	// OtherSystem: the file has a member coordinates_in, as a Writer leaves it. Label is what it says.
	OtherSystem
	// MixedHeights: in Count features some positions have a height and some have none.
	MixedHeights
	// ExtraNumbers: Count positions have more than three numbers. The others were left out.
	ExtraNumbers
	// NoGeometry: Count features, or parts of collections, have no geometry, or one without a position.
	NoGeometry
)

// A Warning is something to know about a file that was written or read all the same.
type Warning struct {
	Kind  WarningKind
	Label string
	Count int
	// Feature, counting from 1, is the first one concerned, or 0; Line and Column are where a Reader found it.
	Feature, Line, Column int
}

func (w Warning) String() string {
	first := ""
	if w.Feature > 0 {
		first = ", the first in feature " + strconv.Itoa(w.Feature)
		if w.Line > 0 {
			first += fmt.Sprintf(" at %d:%d", w.Line, w.Column)
		}
	}
	switch w.Kind {
	case NotDegrees:
		return fmt.Sprintf("GeoJSON is for longitude and latitude (RFC 7946, section 4): coordinates written as they are, with a member coordinates_in that says %q", w.Label)
	case OutsideDegrees:
		return fmt.Sprintf("%s beyond 180 degrees of longitude or 90 of latitude, in a file that says %s%s", counted(w.Count, "feature lies", "features lie"), w.Label, first)
	case Flattened:
		return counted(w.Count, "line or ring has", "lines or rings have") + " no length or area at the decimals written" + first
	case OldSystem:
		return fmt.Sprintf("member crs, withdrawn by RFC 7946, names %q: coordinates read as they are", w.Label)
	case OtherSystem:
		return fmt.Sprintf("member coordinates_in says %q: coordinates read as they are", w.Label)
	case MixedHeights:
		return counted(w.Count, "feature has", "features have") + " positions with a height and positions without" + first
	case ExtraNumbers:
		return counted(w.Count, "position has", "positions have") + " more than three numbers: only x, y and z kept" + first
	case NoGeometry:
		return counted(w.Count, "feature or part has", "features or parts have") + " no position" + first
	}
	return fmt.Sprintf("WarningKind(%d)", w.Kind)
}

func counted(n int, one, more string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + more
}
