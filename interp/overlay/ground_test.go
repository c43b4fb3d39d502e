package overlay

import (
	"context"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

var star = orb.Ring{{1, 1}, {5, 3}, {9, 1.5}, {7, 5}, {9.5, 9}, {5, 7}, {0.5, 9}, {3, 5}, {1, 1}}

// A surface raised by a binary fraction within an irregular boundary: the fraction
// times the area (1e-12).
func TestRaisedWithin(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 1))
	for _, shift := range []float64{0, 431250} {
		p, z := scatter(r, 3000, shift, shift, 10, 200, 5, 1.0/1024)
		low := surface(t, p, z)
		for i := range z {
			z[i] += 0.375
		}
		ring := make(orb.Ring, len(star))
		for i, q := range star {
			ring[i] = orb.Point{q[0] + shift, q[1] + shift}
		}
		region, err := triangulate.NewRegion([]orb.Ring{ring}, nil)
		if err != nil {
			t.Fatal(err)
		}
		f, err := Compare(context.Background(), Ground{Surface: low}, Ground{Surface: surface(t, p, z)}, region, Options{Weights: true})
		if err != nil {
			t.Fatal(err)
		}
		if f.Cut != (Part{}) {
			t.Errorf("cut %+v", f.Cut)
		}
		near(t, "raised", f.Fill.Volume, 0.375*f.Fill.Area, 1e-12*f.Fill.Volume)
		near(t, "area", f.Fill.Area, f.AreaFrom, 1e-12*f.AreaFrom)
		// What the heights count, handed on to the readings: the sum is the area, and a
		// level rises with all of them.
		sum, volume := 0.0, 0.0
		for v, w := range f.Weights.To.All {
			sum += w
			volume += w * (low.Z()[v] + 0.375 - 200)
		}
		near(t, "weights", sum, f.Fill.Area, 1e-9)
		g, err := Compare(context.Background(), Ground{Level: 200}, Ground{Surface: surface(t, p, z)}, region, Options{})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "volume by weights", volume, g.Net, 1e-8)
	}
}

// A cone cut off level, on a slope: by the plane through its toe, by the toe's
// triangles, and by a level below it all.
func TestToe(t *testing.T) {
	ground := Slope{At: orb.Point{50, 50}, Z: 100, DzDx: 0.05, DzDy: -0.02}
	r := rand.New(rand.NewPCG(9, 2))
	p, z := scatter(r, 400, 0, 0, 100, 0, 0, 1.0/64)
	for i, q := range p {
		z[i] = ground.Height(q)
	}
	ring := orb.Ring{{40, 40}, {60, 42}, {62, 58}, {45, 63}, {40, 40}}
	// A pyramid whose top is 8 above the ground at its middle.
	top := orb.Point{51, 50.5}
	var pts []orb.Point
	var zs []float64
	region, err := triangulate.NewRegion([]orb.Ring{ring}, nil)
	if err != nil {
		t.Fatal(err)
	}
	for i, q := range p {
		if !region.Contains(q) {
			pts, zs = append(pts, q), append(zs, z[i])
		}
	}
	toeZ := make([]float64, len(ring))
	for i, q := range ring {
		toeZ[i] = ground.Height(q)
		if i+1 < len(ring) {
			pts, zs = append(pts, q), append(zs, toeZ[i])
		}
	}
	pts, zs = append(pts, top), append(zs, ground.Height(top)+8)
	segs := []triangulate.Segment{}
	n := int32(len(pts) - 1)
	for k := range int32(4) {
		segs = append(segs, triangulate.Segment{From: n - 4 + k, To: n - 4 + (k+1)%4}, triangulate.Segment{From: n - 4 + k, To: n})
	}
	s := constrained(t, pts, segs, zs)
	area := 0.0
	for i := range 4 {
		area += (ring[i][0]*ring[i+1][1] - ring[i+1][0]*ring[i][1]) / 2
	}
	for _, base := range []Base{BasePlane, BaseRing} {
		f, err := (&Toe{Ring: ring, Z: toeZ, Base: base}).Measure(context.Background(), s, Options{})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "pile", f.Fill.Volume, area*8/3, 1e-9)
		near(t, "below", f.Cut.Volume, 0, 1e-9)
		near(t, "off", f.Off, 0, 1e-12)
	}
	f, err := (&Toe{Ring: ring, Base: BaseLevel, Level: 90}).Measure(context.Background(), s, Options{})
	if err != nil {
		t.Fatal(err)
	}
	c := 0.0 // the ground's mean height within the ring, at its centroid
	var cx, cy float64
	for i := range 4 {
		w := ring[i][0]*ring[i+1][1] - ring[i+1][0]*ring[i][1]
		cx += (ring[i][0] + ring[i+1][0]) * w / (6 * area)
		cy += (ring[i][1] + ring[i+1][1]) * w / (6 * area)
	}
	c = ground.Height(orb.Point{cx, cy}) - 90
	near(t, "above a level", f.Fill.Volume, area*(8.0/3+c), 1e-8)
}
