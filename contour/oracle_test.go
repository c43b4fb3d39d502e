package contour

import (
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// The oracle follows lines in the slow obvious way: every triangle's piece from its definition, pieces joined by a map,
// places computed by a formula of its own, spikes taken out one at a time.

// edgeCrossing is the definition of Crossing: ends in (x, y) order, an end at the level is the place.
func edgeCrossing(a orb.Point, za float64, b orb.Point, zb, level float64) orb.Point {
	if exact.CompareXY(a, b) > 0 {
		a, b, za, zb = b, a, zb, za
	}
	switch level {
	case za:
		return a
	case zb:
		return b
	}
	t := (level - za) / (zb - za)
	var p orb.Point
	for i := range p {
		lo, hi := min(a[i], b[i]), max(a[i], b[i])
		p[i] = min(max(math.FMA(t, b[i]-a[i], a[i]), lo), hi)
	}
	return p
}

// pieces returns, for every half-edge through which the level enters a triangle, the half-edge of that triangle
// through which it leaves.
func pieces(s *interp.Surface, level float64) map[triangulate.HalfEdge]triangulate.HalfEdge {
	m, z := s.Mesh(), s.Z()
	out := map[triangulate.HalfEdge]triangulate.HalfEdge{}
	for t := range m.Triangles() {
		in, leave := triangulate.NoHalfEdge, triangulate.NoHalfEdge
		for i := range 3 {
			h := t.HalfEdge(i)
			from, to := z[m.Origin(h)] >= level, z[m.Dest(h)] >= level
			if from && !to {
				in = h
			}
			if !from && to {
				leave = h
			}
		}
		if in != triangulate.NoHalfEdge {
			out[in] = leave
		}
	}
	return out
}

// oracleLines returns the lines of one level in output order, and how many were left without length.
func oracleLines(s *interp.Surface, level Level) (lines []Line, withoutLength int64) {
	m, z := s.Mesh(), s.Z()
	next := pieces(s, level.Z)
	at := func(h triangulate.HalfEdge) orb.Point {
		a, b := m.Origin(h), m.Dest(h)
		return edgeCrossing(m.Position(a), z[a], m.Position(b), z[b], level.Z)
	}
	entries := make([]triangulate.HalfEdge, 0, len(next))
	for h := range next {
		entries = append(entries, h)
	}
	slices.Sort(entries)
	done := map[triangulate.HalfEdge]bool{}
	follow := func(h triangulate.HalfEdge) (points []orb.Point, closed bool) {
		for first := h; ; {
			done[h] = true
			points = append(points, at(h))
			out := next[h]
			if h = m.Twin(out); h == triangulate.NoHalfEdge {
				return append(points, at(out)), false
			}
			if h == first {
				return points, true
			}
		}
	}
	for _, onlyOutline := range []bool{true, false} {
		for _, h := range entries {
			if done[h] || onlyOutline && m.Twin(h) != triangulate.NoHalfEdge {
				continue
			}
			points, closed := follow(h)
			if !closed {
				points = slowReduce(points, false)
				closed = len(points) > 1 && points[0] == points[len(points)-1]
			}
			if closed {
				points = slowReduce(points, true)
			}
			switch {
			case closed && len(points) < 3 || len(points) < 2:
				withoutLength++
			case closed:
				points = append(points, points[0])
				lines = append(lines, Line{level, true, signedArea(points) < 0, points})
			default:
				lines = append(lines, Line{level, false, false, points})
			}
		}
	}
	slices.SortFunc(lines, func(a, b Line) int { return slices.CompareFunc(a.Points, b.Points, comparePlaces) })
	return lines, withoutLength
}

func comparePlaces(a, b orb.Point) int { return exact.CompareXY(a, b) }

// slowReduce takes out repeated points and spikes, one at a time, from the start on; closed lines are turned to their smallest
// start before and after.
func slowReduce(points []orb.Point, closed bool) []orb.Point {
	points = slices.CompactFunc(slices.Clone(points), func(a, b orb.Point) bool { return a == b })
	if closed {
		if len(points) > 1 && points[0] == points[len(points)-1] {
			points = points[1:]
		}
		points = slowTurn(points)
	}
	for {
		n := len(points)
		out := -1
		for i := 1; i < n-1 && out < 0; i++ {
			if turnsBack(points[i-1], points[i], points[i+1]) {
				out = i
			}
		}
		if out < 0 && closed && n > 1 {
			if points[n-1] == points[0] || turnsBack(points[n-2], points[n-1], points[0]) {
				out = n - 1
			} else if turnsBack(points[n-1], points[0], points[1]) {
				out = 0
			}
		}
		if out < 0 {
			break
		}
		points = slices.Delete(points, out, out+1)
		points = slices.CompactFunc(points, func(a, b orb.Point) bool { return a == b })
	}
	if closed {
		points = slowTurn(points)
	}
	return points
}

// turnsBack: exactly collinear, and backwards.
func turnsBack(a, b, c orb.Point) bool {
	if exact.Orient(a, b, c) != 0 {
		return false
	}
	var dot exact.Sum
	for i := range a {
		// (b - a)(c - b) expanded, exactly
		dot.AddProduct(b[i], c[i])
		dot.AddProduct(-b[i], b[i])
		dot.AddProduct(-a[i], c[i])
		dot.AddProduct(a[i], b[i])
	}
	return dot.Value() < 0
}

// slowTurn returns the rotation that comes first.
func slowTurn(points []orb.Point) []orb.Point {
	best := points
	for i := range points {
		r := append(slices.Clone(points[i:]), points[:i]...)
		if slices.CompareFunc(r, best, comparePlaces) < 0 {
			best = r
		}
	}
	return slices.Clone(best)
}

// signedArea is twice the area of a ring, exactly up to one rounding.
func signedArea(ring []orb.Point) float64 {
	var sum exact.Sum
	addArea(&sum, ring)
	return sum.Value()
}

func addArea(sum *exact.Sum, ring []orb.Point) {
	for i := range ring {
		p, q := ring[i], ring[(i+1)%len(ring)]
		sum.AddProduct(p[0], q[1])
		sum.AddProduct(-p[1], q[0])
	}
}

// checkLines compares lines, of one surface and some levels, with the oracle's, and checks what P5 promises of the form:
// every side between above and below is passed once, sides otherwise never; lines close or end on the outline; every point is a
// side's crossing, bit for bit; no piece without length, no spike.
func checkLines(s *interp.Surface, levels Levels, lines []Line, r Report) error {
	var want []Line
	var without int64
	for _, l := range levels {
		ls, w := oracleLines(s, l)
		want = append(want, ls...)
		without += w
	}
	if r.WithoutLength != without {
		return fmt.Errorf("%d lines without length, want %d", r.WithoutLength, without)
	}
	for i := range min(len(lines), len(want)) {
		g, w := lines[i], want[i]
		if g.Level != w.Level || g.Closed != w.Closed || g.Depression != w.Depression || !slices.Equal(g.Points, w.Points) {
			return fmt.Errorf("line %d: got %+v\nwant %+v", i, g, w)
		}
	}
	if len(lines) != len(want) {
		return fmt.Errorf("%d lines, want %d", len(lines), len(want))
	}
	for i, l := range lines {
		if err := checkForm(l); err != nil {
			return fmt.Errorf("line %d: %w", i, err)
		}
	}
	return nil
}

// checkForm checks a line by itself.
func checkForm(l Line) error {
	n := len(l.Points)
	if n < 2 {
		return fmt.Errorf("%d points", n)
	}
	if closed := l.Points[0] == l.Points[n-1]; closed != l.Closed {
		return fmt.Errorf("closed %v, ends say %v", l.Closed, closed)
	}
	for k := 1; k < n; k++ {
		if l.Points[k] == l.Points[k-1] {
			return fmt.Errorf("point %d repeats", k)
		}
		if k+1 < n && turnsBack(l.Points[k-1], l.Points[k], l.Points[k+1]) {
			return fmt.Errorf("spike at point %d", k)
		}
	}
	if !l.Closed {
		return nil
	}
	if turnsBack(l.Points[n-2], l.Points[0], l.Points[1]) {
		return fmt.Errorf("spike at the start")
	}
	for _, p := range l.Points {
		if exact.CompareXY(p, l.Points[0]) < 0 {
			return fmt.Errorf("does not start at its smallest point")
		}
	}
	return nil
}

// checkPassing checks the half-edges that were passed at one level: each between above and below exactly once and no
// other, and after each the one across from where the line leaves, unless the line ends there or closes.
func checkPassing(s *interp.Surface, level float64, passed []triangulate.HalfEdge) error {
	m := s.Mesh()
	next := pieces(s, level)
	seen := map[triangulate.HalfEdge]bool{}
	first := triangulate.NoHalfEdge
	for i, h := range passed {
		out, ok := next[h]
		if !ok {
			return fmt.Errorf("half-edge %d passed, which the level does not enter through", h)
		}
		if seen[h] {
			return fmt.Errorf("half-edge %d passed twice", h)
		}
		seen[h] = true
		if first == triangulate.NoHalfEdge {
			first = h
		}
		across := m.Twin(out)
		switch {
		case across == triangulate.NoHalfEdge || across == first: // ends, or closes
			first = triangulate.NoHalfEdge
		case i+1 == len(passed) || passed[i+1] != across:
			return fmt.Errorf("after half-edge %d the line breaks off inside the surface", h)
		}
	}
	if len(seen) != len(next) {
		return fmt.Errorf("%d half-edges passed, want %d", len(seen), len(next))
	}
	return nil
}
