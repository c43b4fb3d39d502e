package profile

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// benchLines are 10,000 lines of about 1,000 crossings each over a million
// readings: all directions, or sections along a line, left and right of it.
func benchLines(b *testing.B) (s *interp.Surface, kinds map[string][]*Alignment) {
	pts := pointsets.Uniform(1_000_000, 1)
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		b.Fatal(err)
	}
	if s, err = interp.FromInputs(m, pointsets.Heights(pts)); err != nil {
		b.Fatal(err)
	}
	box := orb.MultiPoint(pts).Bound()
	w, h := box.Max[0]-box.Min[0], box.Max[1]-box.Min[1]
	// A line of length l crosses some 2.55 l sqrt(n / area) edges (Bose and
	// Devroye 2007 give the order; the constant is measured).
	l := 1000 / 2.55 * math.Sqrt(w*h/1e6)
	r := rand.New(rand.NewPCG(5, 6))
	kinds = map[string][]*Alignment{}
	for i := range 10_000 {
		a := 2 * math.Pi * r.Float64()
		p := orb.Point{box.Min[0] + w*(0.2+0.6*r.Float64()), box.Min[1] + h*(0.2+0.6*r.Float64())}
		dx, dy := math.Cos(a)*l/2, math.Sin(a)*l/2
		any, err := NewAlignment([]orb.Point{{p[0] - dx, p[1] - dy}, {p[0] + dx, p[1] + dy}}, 0)
		if err != nil {
			b.Fatal(err)
		}
		x := box.Min[0] + w*(0.1+0.8*float64(i)/10_000)
		across, err := NewAlignment([]orb.Point{{x, box.Min[1] + h/2 - l/2}, {x + l/50, box.Min[1] + h/2 + l/2}}, 0)
		if err != nil {
			b.Fatal(err)
		}
		kinds["any"], kinds["sections"] = append(kinds["any"], any), append(kinds["sections"], across)
	}
	return s, kinds
}

// BenchmarkProfiles beside its floor, the walk alone that finds the edges.
func BenchmarkProfiles(b *testing.B) {
	s, kinds := benchLines(b)
	for _, kind := range []string{"any", "sections"} {
		lines := kinds[kind]
		b.Run("floor=walk/"+kind+"/n=1e6", func(b *testing.B) {
			crossings := 0
			for b.Loop() {
				l := s.Mesh().Locator()
				for _, a := range lines {
					for range l.Cross(a.points[0], a.points[1]) {
						crossings++
					}
				}
			}
			b.ReportMetric(float64(crossings)/b.Elapsed().Seconds(), "crossings/s")
		})
		b.Run("profiles/"+kind+"/n=1e6", func(b *testing.B) {
			crossings := 0
			for b.Loop() {
				all, err := Many(context.Background(), s, nil, lines, 0)
				if err != nil {
					b.Fatal(err)
				}
				for i := range all {
					crossings += len(all[i].Points) - 2
				}
			}
			b.ReportMetric(float64(crossings)/b.Elapsed().Seconds(), "crossings/s")
			b.ReportMetric(float64(crossings)/float64(b.N)/float64(len(lines)), "crossings/line")
		})
	}
}
