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

// A checker of bands, by exact signs and exactly accumulated areas. It shares no code with what makes them.

// bordered is a segment of a ring, with its smaller end first.
type bordered struct {
	a, b orb.Point
	ring int
}

// checkPolygon checks what OGC simple features ask of a polygon, rings that do not touch themselves, and our own rules of
// order and orientation.
func checkPolygon(p orb.Polygon) error {
	var segments []bordered
	touches := map[orb.Point][]int{} // rings at every vertex
	for i, ring := range p {
		n := len(ring)
		if n < 4 || ring[0] != ring[n-1] {
			return fmt.Errorf("ring %d does not close, or has %d points", i, n)
		}
		for k := 1; k < n; k++ {
			if ring[k] == ring[k-1] {
				return fmt.Errorf("ring %d: point %d repeats", i, k)
			}
			if exact.CompareXY(ring[k], ring[0]) < 0 {
				return fmt.Errorf("ring %d does not start at its smallest point", i)
			}
			at := touches[ring[k]]
			if slices.Contains(at, i) {
				return fmt.Errorf("ring %d comes to (%v, %v) twice", i, ring[k][0], ring[k][1])
			}
			touches[ring[k]] = append(at, i)
			a, b := ring[k-1], ring[k]
			if exact.CompareXY(a, b) > 0 {
				a, b = b, a
			}
			segments = append(segments, bordered{a, b, i})
		}
		if ccw := signedArea(ring[:n-1]) > 0; ccw != (i == 0) {
			return fmt.Errorf("ring %d: counter-clockwise %v", i, ccw)
		}
		if i > 1 && slices.CompareFunc(p[i-1], ring, comparePlaces) >= 0 {
			return fmt.Errorf("hole %d out of order", i)
		}
	}
	if err := meetOnlyAtEnds(segments, false); err != nil {
		return err
	}
	// Rings touch at vertices only, so that a point of a hole that is not on another ring tells on which side it lies; a
	// hole all of whose points are on others would be found by its segments' middles, which are not exact: take the first
	// segment's ends instead. A hole has three points or more and two rings share no two neighbouring ones.
	for i := 1; i < len(p); i++ {
		for j := range p {
			if i == j {
				continue
			}
			side := 0
			for _, q := range p[i] {
				if side = sideOfRing(p[j], q); side != 0 {
					break
				}
			}
			if j == 0 && side < 0 || j > 0 && side > 0 {
				return fmt.Errorf("hole %d lies wrong to ring %d", i, j)
			}
		}
	}
	// The inside hangs together if rings and touching points make no circle.
	sets := make([]int, len(p))
	for i := range sets {
		sets[i] = i
	}
	find := func(i int) int {
		for sets[i] != i {
			i = sets[i]
		}
		return i
	}
	for q, rings := range touches {
		for _, r := range rings[1:] {
			if find(r) == find(rings[0]) {
				return fmt.Errorf("the inside is cut in two by rings that touch, at (%v, %v) and elsewhere", q[0], q[1])
			}
			sets[find(r)] = find(rings[0])
		}
	}
	return nil
}

// sideOfRing is +1 for a place inside the ring, 0 on it, -1 outside, exactly.
func sideOfRing(ring orb.Ring, q orb.Point) int {
	inside := false
	for k := 1; k < len(ring); k++ {
		a, b := ring[k-1], ring[k]
		side := exact.Orient(a, b, q)
		if side == 0 && min(a[0], b[0]) <= q[0] && q[0] <= max(a[0], b[0]) && min(a[1], b[1]) <= q[1] && q[1] <= max(a[1], b[1]) {
			return 0
		}
		if a[1] <= q[1] != (b[1] <= q[1]) && (side > 0) == (b[1] > a[1]) {
			inside = !inside
		}
	}
	if inside {
		return 1
	}
	return -1
}

// meetOnlyAtEnds sweeps over segments (smaller end first) by x: no two may have a point in common that is not an end of both.
// With twice, two may be the same segment.
func meetOnlyAtEnds(segments []bordered, twice bool) error {
	slices.SortFunc(segments, func(s, t bordered) int { return exact.CompareXY(s.a, t.a) })
	var active []bordered
	for _, s := range segments {
		active = slices.DeleteFunc(active, func(t bordered) bool { return t.b[0] < s.a[0] })
		for _, t := range active {
			if min(t.a[1], t.b[1]) > max(s.a[1], s.b[1]) || max(t.a[1], t.b[1]) < min(s.a[1], s.b[1]) {
				continue
			}
			if s.a == t.a && s.b == t.b {
				if twice {
					continue
				}
				return fmt.Errorf("segment (%v)-(%v) twice", s.a, s.b)
			}
			sa, sb := exact.Orient(t.a, t.b, s.a), exact.Orient(t.a, t.b, s.b)
			ta, tb := exact.Orient(s.a, s.b, t.a), exact.Orient(s.a, s.b, t.b)
			bad := sa*sb < 0 && ta*tb < 0 ||
				sa == 0 && inBox(s.a, t) || sb == 0 && inBox(s.b, t) || ta == 0 && inBox(t.a, s) || tb == 0 && inBox(t.b, s)
			if bad {
				return fmt.Errorf("segments (%v)-(%v) and (%v)-(%v) meet other than at ends", s.a, s.b, t.a, t.b)
			}
		}
		active = append(active, s)
	}
	return nil
}

// inBox: p is no end of s and in its box.
func inBox(p orb.Point, s bordered) bool {
	return p != s.a && p != s.b && s.a[0] <= p[0] && p[0] <= s.b[0] &&
		min(s.a[1], s.b[1]) <= p[1] && p[1] <= max(s.a[1], s.b[1])
}

// bandNumber returns how many levels the band lies above.
func bandNumber(b Band, levels Levels) int {
	for i := range levels {
		if b.Lower != nil && *b.Lower == levels[i] {
			if upper := b.Upper; (upper == nil) != (i+1 == len(levels)) || upper != nil && *upper != levels[i+1] {
				return -1
			}
			return i + 1
		}
	}
	if b.Lower != nil || (b.Upper == nil) != (len(levels) == 0) || b.Upper != nil && *b.Upper != levels[0] {
		return -1
	}
	return 0
}

// checkBands checks P6 for the bands of s.
func checkBands(s *interp.Surface, levels Levels, bands []Band, r BandReport) error {
	numbers, err := checkTiling(s, levels, bands)
	if err != nil {
		return err
	}
	if err := checkReadings(s, levels, bands, numbers, r); err != nil {
		return err
	}
	return checkPlaces(s, levels, bands, numbers, r)
}

// checkTiling checks that bands are valid polygons that tile s. It returns the number of every band.
func checkTiling(s *interp.Surface, levels Levels, bands []Band) ([]int, error) {
	numbers := make([]int, len(bands))
	var total exact.Sum
	// Every segment with the polygon on its left: neighbours have it the other way round, with another band.
	left := map[[2]orb.Point]int{}
	var all []bordered
	for i, b := range bands {
		if numbers[i] = bandNumber(b, levels); numbers[i] < 0 {
			return nil, fmt.Errorf("polygon %d: not between neighbouring levels", i)
		}
		if i > 0 && (numbers[i] < numbers[i-1] || numbers[i] == numbers[i-1] &&
			slices.CompareFunc(bands[i-1].Polygon[0], b.Polygon[0], comparePlaces) >= 0) {
			return nil, fmt.Errorf("polygon %d out of order", i)
		}
		if err := checkPolygon(b.Polygon); err != nil {
			return nil, fmt.Errorf("polygon %d, band %d: %w", i, numbers[i], err)
		}
		for _, ring := range b.Polygon {
			addArea(&total, ring[:len(ring)-1])
			for k := 1; k < len(ring); k++ {
				key := [2]orb.Point{ring[k-1], ring[k]}
				if _, ok := left[key]; ok {
					return nil, fmt.Errorf("two polygons left of (%v)-(%v)", key[0], key[1])
				}
				left[key] = numbers[i]
				if exact.CompareXY(key[0], key[1]) > 0 {
					key[0], key[1] = key[1], key[0]
				}
				all = append(all, bordered{key[0], key[1], 0})
			}
		}
	}
	for key, band := range left {
		if other, ok := left[[2]orb.Point{key[1], key[0]}]; ok && other == band {
			return nil, fmt.Errorf("band %d on both sides of (%v)-(%v)", band, key[0], key[1])
		}
	}
	if err := meetOnlyAtEnds(all, true); err != nil {
		return nil, fmt.Errorf("between polygons: %w", err)
	}
	area, perimeter, largest := exactArea(s)
	if off, most := math.Abs(total.Value()/2-area), 1e-12*area+perimeter*ulp(largest); off > most {
		return nil, fmt.Errorf("areas add up to %v, the surface has %v: off by %v, allowed %v", total.Value()/2, area, off, most)
	}
	return numbers, nil
}

// exactArea returns the area of s, accumulated exactly, the length of its outline, and its largest coordinate.
func exactArea(s *interp.Surface) (area, perimeter, largest float64) {
	m := s.Mesh()
	var sum exact.Sum
	for t := range m.Triangles() {
		c := m.Corners(t)
		addArea(&sum, []orb.Point{m.Position(c[0]), m.Position(c[1]), m.Position(c[2])})
		for i := range 3 {
			if h := t.HalfEdge(i); m.Twin(h) == triangulate.NoHalfEdge {
				p, q := m.Position(m.Origin(h)), m.Position(m.Dest(h))
				dx, dy := q[0]-p[0], q[1]-p[1]
				perimeter += math.Sqrt(float64(dx*dx) + float64(dy*dy))
			}
			largest = max(largest, math.Abs(m.Position(c[i])[0]), math.Abs(m.Position(c[i])[1]))
		}
	}
	return sum.Value() / 2, perimeter, largest
}

// distance of q from the segment from a to b.
func distance(a, b, q orb.Point) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	t := ((q[0]-a[0])*dx + (q[1]-a[1])*dy) / (dx*dx + dy*dy)
	if t <= 0 || t >= 1 {
		return min(math.Hypot(q[0]-a[0], q[1]-a[1]), math.Hypot(q[0]-b[0], q[1]-b[1]))
	}
	return math.Abs(exact.Area2(a[0], a[1], b[0], b[1], q[0], q[1])) / math.Hypot(dx, dy)
}
