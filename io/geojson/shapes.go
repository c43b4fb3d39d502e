package geojson

import (
	"fmt"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
)

// shape appends the geometry object of s.
func (e *encoder) shape(dst []byte, s orb.Geometry, h *heights) (_ []byte, err *WriteError) {
	open := func(name string) { dst = append(append(append(dst, `{"type":"`...), name...), `","coordinates":`...) }
	switch s := s.(type) {
	case orb.Point:
		open("Point")
		dst, err = e.positions(dst, []orb.Point{s}, h.next(1), forward)
	case orb.MultiPoint:
		open("MultiPoint")
		dst = append(dst, '[')
		if len(s) > 0 {
			dst, err = e.positions(dst, s, h.next(len(s)), forward)
		}
		dst = append(dst, ']')
	case orb.LineString:
		open("LineString")
		dst, err = e.line(dst, s, h)
	case orb.MultiLineString:
		open("MultiLineString")
		dst, err = list(dst, s, func(dst []byte, line orb.LineString) ([]byte, *WriteError) { return e.line(dst, line, h) })
	case orb.Ring:
		open("Polygon")
		dst, err = e.polygon(dst, orb.Polygon{s}, h)
	case orb.Polygon:
		open("Polygon")
		dst, err = e.polygon(dst, s, h)
	case orb.MultiPolygon:
		open("MultiPolygon")
		dst, err = list(dst, s, func(dst []byte, p orb.Polygon) ([]byte, *WriteError) { return e.polygon(dst, p, h) })
	case orb.Collection:
		dst = append(dst, `{"type":"GeometryCollection","geometries":`...)
		dst, err = list(dst, s, func(dst []byte, part orb.Geometry) ([]byte, *WriteError) { return e.shape(dst, part, h) })
	default:
		err = &WriteError{What: "geometry", Seen: fmt.Sprintf("%T", s), Expected: "a point, line, polygon, several of them, or a collection"}
	}
	return append(dst, '}'), err
}

// list appends [one,two,...].
func list[T any](dst []byte, parts []T, one func([]byte, T) ([]byte, *WriteError)) ([]byte, *WriteError) {
	dst = append(dst, '[')
	for i, part := range parts {
		if i > 0 {
			dst = append(dst, ',')
		}
		var err *WriteError
		if dst, err = one(dst, part); err != nil {
			if len(parts) > 1 {
				err.What = fmt.Sprintf("part %d: %s", i+1, err.What)
			}
			return dst, err
		}
	}
	return append(dst, ']'), nil
}

func (e *encoder) line(dst []byte, line orb.LineString, h *heights) ([]byte, *WriteError) {
	if len(line) < 2 {
		return dst, &WriteError{What: "line", Seen: counted(len(line), "position", "positions"), Expected: "2 or more"}
	}
	dst, err := e.positions(append(dst, '['), line, h.next(len(line)), forward)
	if err == nil && oneSpot(line, e.xyPlaces) {
		e.flattened++
	}
	return append(dst, ']'), err
}

// polygon turns rings where RFC 7946, section 3.1.6, asks for it: the first counter-clockwise, the others clockwise. A ring
// that decimals leave without area keeps the way it would have had in full.
func (e *encoder) polygon(dst []byte, p orb.Polygon, h *heights) ([]byte, *WriteError) {
	if len(p) == 0 {
		return dst, &WriteError{What: "polygon", Seen: "no ring", Expected: "1 or more"}
	}
	dst = append(dst, '[')
	for i, ring := range p {
		z := h.next(len(ring))
		if err := checkRing(ring, z); err != nil {
			err.What = strings.TrimSuffix(fmt.Sprintf("ring %d: %s", i+1, err.What), ": ")
			return dst, err
		}
		way := turn(ring, e.xyPlaces)
		if way == 0 {
			e.flattened++
			way = turn(ring, numtext.Shortest)
		}
		want := forward
		if way < 0 != (i > 0) && way != 0 {
			want = backward
		}
		if i > 0 {
			dst = append(dst, ',')
		}
		var err *WriteError
		if dst, err = e.positions(append(dst, '['), ring, z, want); err != nil {
			err.What = fmt.Sprintf("ring %d: %s", i+1, err.What)
			return dst, err
		}
		dst = append(dst, ']')
	}
	return append(dst, ']'), nil
}

func checkRing(ring orb.Ring, z []float64) *WriteError {
	if len(ring) < 4 {
		return &WriteError{Seen: counted(len(ring), "position", "positions"), Expected: "4 or more, the last as the first"}
	}
	for i, p := range ring {
		if !finite(p) {
			return notFinite(i, p)
		}
	}
	last := len(ring) - 1
	if first, end := ring[0], ring[last]; first != end {
		return &WriteError{Seen: fmt.Sprintf("ends at (%v, %v)", end[0], end[1]), Expected: fmt.Sprintf("its first position (%v, %v)", first[0], first[1])}
	}
	if len(z) > 1 && z[0] != z[last] && (z[0] == z[0] || z[last] == z[last]) {
		return &WriteError{Seen: fmt.Sprintf("ends at height %v", z[last]), Expected: fmt.Sprintf("that of its first position, %v", z[0])}
	}
	return nil
}

// finite reports whether both coordinates are: a difference with itself is 0 unless it is of NaN or infinities.
func finite(p orb.Point) bool { return p[0]-p[0] == 0 && p[1]-p[1] == 0 }

func notFinite(i int, p orb.Point) *WriteError {
	return &WriteError{What: fmt.Sprintf("position %d", i+1), Seen: fmt.Sprintf("(%v, %v)", p[0], p[1]), Expected: "finite coordinates"}
}

// direction is a way through a list of positions.
type direction bool

const (
	forward  direction = false
	backward direction = true
)

// positions appends [x,y],[x,y,z],...
func (e *encoder) positions(dst []byte, points []orb.Point, z []float64, way direction) ([]byte, *WriteError) {
	i, step := 0, 1
	if way == backward {
		i, step = len(points)-1, -1
	}
	for range points {
		x, y := points[i][0], points[i][1]
		if !finite(points[i]) {
			return dst, notFinite(i, points[i])
		}
		e.min[0], e.max[0] = min(e.min[0], x), max(e.max[0], x)
		e.min[1], e.max[1] = min(e.min[1], y), max(e.max[1], y)
		dst = append(dst, '[')
		dst = numtext.Append(dst, x, e.xyPlaces)
		dst = append(dst, ',')
		dst = numtext.Append(dst, y, e.xyPlaces)
		if len(z) > 0 {
			h := z[0]
			if len(z) > 1 {
				h = z[i]
			}
			switch {
			case h-h == 0:
				e.min[2], e.max[2] = min(e.min[2], h), max(e.max[2], h)
				dst = append(dst, ',')
				dst = numtext.Append(dst, h, e.zPlaces)
			case h != h:
				e.flat++
			default:
				return dst, &WriteError{What: fmt.Sprintf("position %d", i+1), Seen: fmt.Sprintf("height %v", h), Expected: "a finite one"}
			}
		}
		dst = append(dst, ']', ',')
		i += step
	}
	e.all += len(points)
	if len(z) == 0 {
		e.flat += len(points)
	}
	return dst[:len(dst)-1], nil
}
