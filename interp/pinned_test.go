package interp

import (
	"context"
	"encoding/binary"
	"hash/fnv"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// TestBitsArePinned: P2. All numbers that a surface can give, hashed: they must be
// the same on every processor (run it with GOAMD64=v1 and v3, and elsewhere). The
// heights use no function of package math and no product that could be fused.
func TestBitsArePinned(t *testing.T) {
	want := map[string]uint64{
		"uniform":      0x6a4e0772b6b8352a,
		"clustered":    0xc9ad02934b801fcd,
		"scanlines":    0x123078c6afd47100,
		"survey":       0xe49f86afec7fe417,
		"unit-lattice": 0xb393b1223d12ac62,
		"lattice-0.1m": 0xd6335e9b2ae0c8c0,
		"circles":      0x43d07505270950a4,
	}
	for _, d := range pointsets.All {
		pts := d.Points(3000, 11)
		b := orb.MultiPoint(pts).Bound()
		unit := func(x, y float64) (u, v float64) {
			return (x - b.Min[0]) / (b.Max[0] - b.Min[0]), (y - b.Min[1]) / (b.Max[1] - b.Min[1])
		}
		s := surfaceOf(t, pts, heights(pts, func(x, y float64) float64 {
			u, v := unit(x, y)
			return 100 + float64(20*u) - float64(30*float64(v*v)) + float64(15*float64(u*float64(u*v)))
		}))
		places := pointsets.Uniform(2000, 12)
		for i, p := range places {
			places[i] = orb.Point{
				b.Min[0] + float64(p[0]*(b.Max[0]-b.Min[0])),
				b.Min[1] + float64(p[1]*(b.Max[1]-b.Min[1])),
			}
		}
		places = append(places, pts[:50]...)
		for t := range triangulate.Triangle(300) { // middles of edges, many of them exact
			c := s.Mesh().Corners(t)
			p, q := s.Mesh().Position(c[0]), s.Mesh().Position(c[1])
			places = append(places, orb.Point{(p[0] + q[0]) / 2, (p[1] + q[1]) / 2})
		}
		samples, err := s.Query(context.Background(), places, 0)
		if err != nil {
			t.Fatal(err)
		}
		h := fnv.New64a()
		put := func(xs ...float64) {
			for _, x := range xs {
				if math.IsNaN(x) {
					x = -1 // the bits of NaN are the processor's own
				}
				var bytes [8]byte
				binary.LittleEndian.PutUint64(bytes[:], math.Float64bits(x))
				h.Write(bytes[:])
			}
		}
		v := s.Volumes(97.5)
		put(s.Area(), s.SurfaceArea(), s.VolumeAboveZero(), v.Above, v.Below, v.Net, v.AreaAbove, v.AreaBelow)
		for i, sample := range samples {
			put(sample.Z)
			if sample.Location.Place != triangulate.Outside {
				gx, gy := s.Gradient(sample.Location.Triangle)
				_, w := s.Weights(sample.Location, places[i])
				put(gx, gy, Slope(gx, gy), DownhillAzimuth(gx, gy), w[0], w[1], w[2])
			}
		}
		if got := h.Sum64(); got != want[d.Name] {
			t.Errorf("%s: %#x, want %#x", d.Name, got, want[d.Name])
		}
	}
}
