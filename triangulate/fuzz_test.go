package triangulate_test

import (
	"context"
	"encoding/binary"
	"errors"
	"math"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// pointsFrom makes points out of bytes. The first byte chooses the kind: small
// integers, full of ties and repeats; integers of two bytes; last places at map
// coordinates; doubles of any accepted size; any doubles at all.
func pointsFrom(data []byte) []orb.Point {
	const most = 200
	if len(data) == 0 {
		return nil
	}
	kind := data[0] % 5
	data = data[1:]
	var coordinate func() float64
	size := 0
	switch kind {
	case 0:
		size = 1
		coordinate = func() float64 { return float64(int8(data[0]) % 6) }
	case 1:
		size = 2
		coordinate = func() float64 { return float64(int16(binary.LittleEndian.Uint16(data))) }
	case 2:
		size = 1
		coordinate = func() float64 {
			return math.Float64frombits(math.Float64bits([]float64{430000.1, 5600000.3}[data[0]&1]) + uint64(data[0]>>1))
		}
	case 3:
		size = 8
		coordinate = func() float64 {
			// Exponents -199 to 198 of two are within 1e-60 to 1e60.
			u := binary.LittleEndian.Uint64(data)
			e := u >> 52 & 0x7ff
			return math.Float64frombits(u&^(0x7ff<<52) | (824+e%398)<<52)
		}
	case 4:
		size = 8
		coordinate = func() float64 { return math.Float64frombits(binary.LittleEndian.Uint64(data)) }
	}
	var pts []orb.Point
	for len(data) >= 2*size && len(pts) < most {
		var p orb.Point
		for k := range p {
			p[k] = coordinate()
			data = data[size:]
		}
		pts = append(pts, p)
	}
	return pts
}

// seeds are inputs of every kind.
func seeds(f *testing.F) {
	f.Add([]byte{})
	f.Add([]byte{0})
	f.Add([]byte("\x00\x01\x01\x01\x01\x01\x01"))
	f.Add([]byte("\x00\x00\x00\x01\x00\x00\x01\x01\x01\x02\x00\x02\x01\x02\x02\x00\x02\x01\x02"))
	f.Add([]byte("\x01\x00\x00\x00\x00\xff\x7f\x00\x80\x00\x80\xff\x7f\x01\x00\x01\x00"))
	f.Add([]byte("\x02\x00\x01\x02\x01\x02\x03\x00\x03\x04\x05\x06\x05\x04\x07\x06\x07"))
	for _, kind := range []byte{3, 4} {
		data := []byte{kind}
		for i := range 40 {
			data = binary.LittleEndian.AppendUint64(data, math.Float64bits(float64(i*i%7)*0.1+float64(i%3)*1e9))
		}
		f.Add(data)
	}
	f.Add(binary.LittleEndian.AppendUint64(binary.LittleEndian.AppendUint64([]byte{4}, math.Float64bits(math.NaN())), 1))
}

// FuzzDelaunay: either the first coordinate out of range is named, or the mesh
// passes Check, has a vertex a place, covers its hull, is the same for the points
// in falling order, and, where few, is the triangulation by definition.
func FuzzDelaunay(f *testing.F) {
	seeds(f)
	f.Fuzz(func(t *testing.T, data []byte) {
		pts := pointsFrom(data)
		bad := slices.IndexFunc(pts, func(p orb.Point) bool {
			for _, c := range p {
				if a := math.Abs(c); c != 0 && !(a >= triangulate.CoordinateLeast && a <= triangulate.CoordinateMost) {
					return true
				}
			}
			return false
		})
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if bad >= 0 {
			var pe *triangulate.PositionError
			if !errors.As(err, &pe) || pe.Index != bad {
				t.Fatalf("error %v, want point %d named", err, bad)
			}
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		if err := m.Check(); err != nil {
			t.Fatal(err)
		}
		places := distinct(pts)
		if m.NumVertices() != len(places) {
			t.Fatalf("%d vertices, want %d", m.NumVertices(), len(places))
		}
		if sum, ring := area2(m); m.NumTriangles() > 0 && sum != ring {
			t.Fatalf("triangles cover %v, the hull %v", sum/2, ring/2)
		}
		slices.SortFunc(pts, byXY)
		slices.Reverse(pts)
		sameTriangles(t, "falling order", corners(checked(t, pts, triangulate.Options{})), corners(m))
		if len(places) <= 10 {
			sameTriangles(t, "by definition", corners(m), tiedDelaunay(places))
		}
	})
}

// FuzzLocate compares with the slow definition, at places that share coordinates
// with vertices, lie in the middle of two, or anywhere.
func FuzzLocate(f *testing.F) {
	seeds(f)
	f.Fuzz(func(t *testing.T, data []byte) {
		pts := pointsFrom(data)
		if len(pts) > 20 {
			pts = pts[:20]
		}
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			return // FuzzDelaunay looks at that
		}
		l, walker := m.Locator(), m.Locator()
		for i, p := range pts {
			q := pts[(i*7+3)%len(pts)]
			for _, at := range []orb.Point{
				p, {p[0], q[1]}, {p[0]/2 + q[0]/2, p[1]/2 + q[1]/2}, {2*p[0] - q[0], 2*p[1] - q[1]}, {p[0] / 3, q[1] / 3},
			} {
				ok := true
				for k, c := range at {
					at[k] = c + 0
					a := math.Abs(c)
					ok = ok && (c == 0 || a >= triangulate.CoordinateLeast && a <= triangulate.CoordinateMost)
				}
				if !ok {
					continue
				}
				want := locateSlowly(m, at)
				if got := l.Locate(at); got != want {
					t.Fatalf("Locate(%v) = %+v, want %+v", at, got, want)
				}
				if got := walker.LocateNext(at); got != want {
					t.Fatalf("LocateNext(%v) = %+v, want %+v", at, got, want)
				}
			}
		}
	})
}

// FuzzCross compares with the slow definition on small integers.
func FuzzCross(f *testing.F) {
	f.Add([]byte("\x00\x00\x04\x00\x00\x04\x04\x04\x01\x01\x03\x02"))
	f.Add([]byte("\x00\x00\x02\x00\x04\x00\x00\x02\x02\x02\x04\x02\x00\x04\x02\x04\x04\x04\xff\xff\x05\x05"))
	f.Fuzz(func(t *testing.T, data []byte) {
		var pts []orb.Point
		for ; len(data) >= 2 && len(pts) < 40; data = data[2:] {
			pts = append(pts, orb.Point{float64(int8(data[0]) % 16), float64(int8(data[1]) % 16)})
		}
		if len(pts) < 5 {
			return
		}
		// The last points are ends of lines; some of them are vertices as well.
		n := len(pts) / 2
		m := checked(t, pts[:n+1], triangulate.Options{})
		l := m.Locator()
		for i := n; i+1 < len(pts); i++ {
			compareCross(t, "fuzz", m, l, whole(pts[i]), whole(pts[i+1]))
			compareCross(t, "fuzz", m, l, whole(pts[i+1]), whole(pts[i-n]))
		}
	})
}
