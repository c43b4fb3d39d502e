package contour

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
)

// A Part is a piece of a line that is measured or inferred as a whole.
type Part struct {
	// Points has at least two points. A closed line that is all of one kind is one
	// closed part; else parts are open and follow each other along the line, each
	// beginning where the one before ends.
	Points   orb.LineString
	Closed   bool
	Inferred bool
}

// A Splitter divides lines where they come further than a distance from the nearest
// reading, or vertex of a line: from there on they are inferred. One goroutine at a time
// may use it.
type Splitter struct {
	beyond float64
	finder *interp.Finder

	near []stretch
}

// stretch is a part of a segment, by distances from its beginning.
type stretch struct{ from, to float64 }

// NewSplitter returns a splitter for the readings that nearest knows.
func NewSplitter(nearest *interp.Nearest, beyond float64) *Splitter {
	return &Splitter{beyond: beyond, finder: nearest.Finder()}
}

// Split returns the parts of l. At the distance itself a line still counts as measured.
//
// On each segment, the circles of that radius about the readings leave out what is
// inferred; the ends of what they cover are computed from the circle, so that a division
// is off by some ulp of the coordinates, more where a circle is just touched. Parts that
// have no length in the coordinates are joined to their neighbours. A closed line is
// divided where its kind changes only, not where it begins.
//
// Time O(1) for each segment of which every place is within the distance of the reading
// nearest to its beginning, or further from any; else O(readings within the distance of
// the segment).
func (s *Splitter) Split(l *Line) []Part {
	var parts []Part
	add := func(a, b orb.Point, inferred bool) {
		if a == b {
			return
		}
		if n := len(parts); n > 0 && parts[n-1].Inferred == inferred {
			parts[n-1].Points = append(parts[n-1].Points, b)
			return
		}
		parts = append(parts, Part{Points: orb.LineString{a, b}, Inferred: inferred})
	}
	for i := 1; i < len(l.Points); i++ {
		a, b := l.Points[i-1], l.Points[i]
		length := math.Sqrt(squared(a, b))
		at, here := a, 0.0
		for _, c := range s.covered(a, b, length) {
			if c.from > here {
				p := along(a, b, c.from/length)
				add(at, p, true)
				at = p
			}
			p := b
			if c.to < length {
				p = along(a, b, c.to/length)
			}
			add(at, p, false)
			at, here = p, c.to
		}
		if here < length {
			add(at, b, true)
		}
	}
	switch n := len(parts); {
	case !l.Closed || n == 0:
	case n == 1:
		parts[0].Points, parts[0].Closed = l.Points, true
	case parts[0].Inferred == parts[n-1].Inferred:
		parts[0].Points = append(parts[n-1].Points, parts[0].Points[1:]...)
		parts = parts[:n-1]
	}
	return parts
}

// covered returns what of the segment from a to b lies within the distance of readings,
// in turn and apart from each other.
func (s *Splitter) covered(a, b orb.Point, length float64) []stretch {
	s.near = s.near[:0]
	v, d := s.finder.At(a)
	if d <= s.beyond && squared(v, b) <= float64(s.beyond*s.beyond) {
		return append(s.near, stretch{0, length}) // a circle holds all between two places in it
	}
	middle := along(a, b, 0.5)
	if d > s.beyond+length {
		return nil
	}
	ux, uy := (b[0]-a[0])/length, (b[1]-a[1])/length
	s.finder.Within(middle, s.beyond+float64(length*(0.5+1e-12)), func(v orb.Point) {
		vx, vy := v[0]-a[0], v[1]-a[1]
		foot := float64(vx*ux) + float64(vy*uy)
		aside := float64(vx*uy) - float64(vy*ux)
		half := float64((s.beyond - aside) * (s.beyond + aside))
		if half < 0 {
			return
		}
		half = math.Sqrt(half)
		if from, to := max(0, foot-half), min(length, foot+half); from <= to {
			s.near = append(s.near, stretch{from, to})
		}
	})
	slices.SortFunc(s.near, func(p, q stretch) int {
		switch {
		case p.from < q.from || p.from == q.from && p.to < q.to:
			return -1
		case p == q:
			return 0
		}
		return 1
	})
	merged := s.near[:0]
	for _, c := range s.near {
		if n := len(merged); n > 0 && c.from <= merged[n-1].to {
			merged[n-1].to = max(merged[n-1].to, c.to)
			continue
		}
		merged = append(merged, c)
	}
	return merged
}

// along is the place a part t of the way from a to b.
func along(a, b orb.Point, t float64) orb.Point {
	return orb.Point{a[0] + float64(t*(b[0]-a[0])), a[1] + float64(t*(b[1]-a[1]))}
}

func squared(a, b orb.Point) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	return float64(dx*dx) + float64(dy*dy)
}
