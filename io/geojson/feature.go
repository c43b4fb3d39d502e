package geojson

import "github.com/paulmach/orb"

// Feature is one record: a shape and what is known about it.
type Feature struct {
	ID         Value // a string or a number, or Absent
	Geometry   Geometry
	Properties []Property // written in this order; names are unlike
}

// Geometry is a shape in the plane and the heights of its positions.
type Geometry struct {
	// Shape is an orb Point, MultiPoint, LineString, MultiLineString, Polygon, MultiPolygon or a Collection of these; a Ring
	// is written as a polygon. nil is no geometry (null).
	Shape orb.Geometry
	// Z holds the heights: one a position in the order in which the shape holds them, or a single one for all. nil: no
	// heights. NaN: this position has none.
	Z []float64
}

// NumPositions returns how many positions the shape holds, those that close rings included.
func (g Geometry) NumPositions() int { return countPositions(g.Shape) }

func countPositions(shape orb.Geometry) int {
	n := 0
	switch s := shape.(type) {
	case orb.Point:
		n = 1
	case orb.MultiPoint:
		n = len(s)
	case orb.LineString:
		n = len(s)
	case orb.Ring:
		n = len(s)
	case orb.MultiLineString:
		for _, line := range s {
			n += len(line)
		}
	case orb.Polygon:
		n = countRings(s)
	case orb.MultiPolygon:
		for _, p := range s {
			n += countRings(p)
		}
	case orb.Collection:
		for _, part := range s {
			n += countPositions(part)
		}
	}
	return n
}

func countRings(p orb.Polygon) int {
	n := 0
	for _, ring := range p {
		n += len(ring)
	}
	return n
}
