package geojson

import (
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// depths gives the depth of positions of every type that has coordinates.
var depths = map[string]int{
	"Point": 1, "MultiPoint": 2, "LineString": 2, "MultiLineString": 3, "Polygon": 3, "MultiPolygon": 4,
}

// typeNames is what RFC 7946, section 1.4, allows as the type of a geometry.
const typeNames = "Point, MultiPoint, LineString, MultiLineString, Polygon, MultiPolygon or GeometryCollection"

// assemble makes a geometry of a type out of coordinates, with memory of its own. Coordinates without any position give
// a nil shape.
func (r *Reader) assemble(kind string, c *coordinates) (Geometry, error) {
	fault := func(at place, what, expected string) (Geometry, error) {
		return Geometry{}, r.scan.fault(at, Shape, what, "", expected, nil)
	}
	// Where line or ring i begins; not known for all if there are empty ones in front of the first position.
	where := func(i int) place {
		if len(c.places) != len(c.ends[c.depth-1]) {
			return c.at
		}
		return c.places[i]
	}
	want := depths[kind]
	if c.depth == 0 {
		if c.deepestEmpty > max(1, want-1) {
			return fault(c.at, "coordinates of a "+kind, fmt.Sprintf("positions %d brackets deep", want))
		}
		return Geometry{}, nil
	}
	if c.depth != want {
		return fault(c.at, "coordinates of a "+kind, fmt.Sprintf("positions %d brackets deep, not %d", want, c.depth))
	}
	points := slices.Clone(c.points)
	var g Geometry
	if c.withZ > 0 {
		g.Z = slices.Clone(c.z)
		if c.withZ < len(c.z) {
			r.mixed = true
		}
	}
	lines := c.ends[want-1] // of lines or rings, if the type has such
	begin := 0
	part := func(end int) []orb.Point {
		p := points[begin:end:end]
		begin = end
		return p
	}
	switch kind {
	case "LineString", "MultiLineString":
		for i, end := range lines {
			if n := end - start(lines, i); n < 2 {
				return fault(where(i), "line", "2 or more positions, not "+fmt.Sprint(n))
			}
		}
	case "Polygon", "MultiPolygon":
		for i, end := range lines {
			first := start(lines, i)
			if n := end - first; n < 4 {
				return fault(where(i), "ring", "4 or more positions, the last as the first, not "+fmt.Sprint(n))
			}
			if a, b := points[first], points[end-1]; a != b {
				return fault(where(i), fmt.Sprintf("ring that ends at (%v, %v)", b[0], b[1]), fmt.Sprintf("its first position (%v, %v) at the end", a[0], a[1]))
			}
			if a, b := c.z[first], c.z[end-1]; a != b && !(math.IsNaN(a) && math.IsNaN(b)) {
				return fault(where(i), "ring that ends at height "+height(b), "that of its first position, "+height(a))
			}
		}
	}
	switch kind {
	case "Point":
		g.Shape = points[0]
	case "MultiPoint":
		g.Shape = orb.MultiPoint(points)
	case "LineString":
		g.Shape = orb.LineString(points)
	case "MultiLineString":
		all := make(orb.MultiLineString, len(lines))
		for i, end := range lines {
			all[i] = part(end)
		}
		g.Shape = all
	case "Polygon":
		all := make(orb.Polygon, len(lines))
		for i, end := range lines {
			all[i] = part(end)
		}
		g.Shape = all
	case "MultiPolygon":
		all := make(orb.MultiPolygon, len(c.ends[2]))
		ring := 0
		for k, last := range c.ends[2] {
			if last == ring {
				return fault(c.at, fmt.Sprintf("polygon %d", k+1), "1 or more rings")
			}
			all[k] = make(orb.Polygon, 0, last-ring)
			for ; ring < last; ring++ {
				all[k] = append(all[k], part(lines[ring]))
			}
		}
		g.Shape = all
	}
	return g, nil
}

func start(ends []int, i int) int {
	if i == 0 {
		return 0
	}
	return ends[i-1]
}

func height(z float64) string {
	if math.IsNaN(z) {
		return "none"
	}
	return fmt.Sprint(z)
}
