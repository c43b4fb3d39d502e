package flow

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

func heights(pts []orb.Point, f func(orb.Point) float64) []float64 {
	z := make([]float64, len(pts))
	for i, p := range pts {
		z[i] = f(p)
	}
	return z
}

// On a plane a flow line is straight, at the plane's azimuth, to the outline.
func TestFlowOnAPlane(t *testing.T) {
	r := rand.New(rand.NewPCG(91, 92))
	for _, d := range pointsets.All {
		pts := d.Points(2000, 4)
		b := orb.MultiPoint(pts).Bound()
		size := max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1])
		gx, gy := 0.4, -0.3 // exact enough at large coordinates about the corner
		s := surface(t, pts, heights(pts, func(p orb.Point) float64 { return gx*(p[0]-b.Min[0])/size + gy*(p[1]-b.Min[1])/size }))
		tracer := NewTracer(s)
		for range 20 {
			from := orb.Point{b.Min[0] + r.Float64()*(b.Max[0]-b.Min[0]), b.Min[1] + r.Float64()*(b.Max[1]-b.Min[1])}
			line, ok := tracer.Trace(from)
			if !ok {
				continue
			}
			if line.Ending != Outline {
				t.Errorf("%s: ends at %v", d.Name, line.Ending)
			}
			// Slivers carry heights that are rounded, so their planes differ.
			off := 0.0
			for _, p := range line.Points {
				off = max(off, math.Abs((p[0]-from[0])*-gy+(p[1]-from[1])*gx)/0.5)
			}
			if off > 1e-6*size {
				t.Errorf("%s: %v from the straight line on a site of %v", d.Name, off, size)
			}
		}
	}
	// On an exact one, whose heights and places are small binary fractions, it is
	// straight to a few units in the last place.
	pts := pointsets.UnitLattice(400, 1)
	s := surface(t, pts, heights(pts, func(p orb.Point) float64 { return p[0]/4 + p[1]/2 }))
	b := orb.MultiPoint(pts).Bound()
	from := orb.Point{b.Max[0] - 0.3, b.Max[1] - 0.1}
	line, _ := NewTracer(s).Trace(from)
	for _, p := range line.Points {
		if off := (p[0]-from[0])*0.5 - (p[1]-from[1])*0.25; math.Abs(off) > 1e-12*b.Max[1] {
			t.Errorf("at %v: off by %v", p, off)
		}
	}
	if end := line.Points[len(line.Points)-1]; end[1] != b.Min[1] && end[0] != b.Min[0] {
		t.Errorf("ends at %v, not on the outline", end)
	}
}

// A cone of facets, exactly: from a facet's middle line straight down it; into a
// funnel, down a facet to the gutter between two and along it to the bottom.
func TestFlowOnFacets(t *testing.T) {
	at := []orb.Point{{0, 0}, {8, 0}, {0, 8}, {-8, 0}, {0, -8}}
	cone := surface(t, at, []float64{8, 0, 0, 0, 0})
	line, ok := NewTracer(cone).Trace(orb.Point{1, 3})
	if want := (orb.LineString{{1, 3}, {3, 5}}); !ok || !line.Points.Equal(want) || line.Ending != Outline || line.Z[1] != 0 {
		t.Errorf("cone: %+v, want %v to the outline", line, want)
	}
	funnel := surface(t, at, []float64{0, 8, 8, 8, 8})
	line, _ = NewTracer(funnel).Trace(orb.Point{1, 3})
	if want := (orb.LineString{{1, 3}, {0, 2}, {0, 0}}); !line.Points.Equal(want) || line.Ending != Pit {
		t.Errorf("funnel: %+v, want %v to the pit", line, want)
	}
	// From the cone's top the steepest of four equal ways is the first from north.
	line, _ = NewTracer(cone).Trace(orb.Point{0, 0})
	if want := (orb.LineString{{0, 0}, {4, 4}}); !line.Points.Equal(want) {
		t.Errorf("from the top: %v, want %v", line.Points, want)
	}
	// From a crest down the first of two planes that are equally steep.
	line, _ = NewTracer(cone).Trace(orb.Point{0, 4})
	if want := (orb.LineString{{0, 4}, {2, 6}}); !line.Points.Equal(want) {
		t.Errorf("from a crest: %v, want %v", line.Points, want)
	}
	if d := Divides(cone); len(d) != 4 || len(Drains(cone)) != 0 {
		t.Errorf("cone: %d divides, %d drains", len(d), len(Drains(cone)))
	}
	if d := Drains(funnel); len(d) != 4 || len(Divides(funnel)) != 0 {
		t.Errorf("funnel: %d drains, %d divides", len(d), len(Divides(funnel)))
	}
}

// The stated rules, one by one.
func TestFlowRules(t *testing.T) {
	lattice := func(z func(x, y float64) float64) *interp.Surface {
		var pts []orb.Point
		for x := range 5 {
			for y := range 5 {
				pts = append(pts, orb.Point{float64(x), float64(y)})
			}
		}
		return surface(t, pts, heights(pts, func(p orb.Point) float64 { return z(p[0], p[1]) }))
	}
	for _, c := range []struct {
		name   string
		z      func(x, y float64) float64
		from   orb.Point
		want   orb.LineString
		ending Ending
	}{
		{"down to level ground", func(x, y float64) float64 { return max(x, 2) }, orb.Point{3.25, 2.5}, orb.LineString{{3.25, 2.5}, {3, 2.5}, {2.5, 2.5}, {2, 2.5}}, Flat},
		{"begun on level ground", func(x, y float64) float64 { return max(x, 2) }, orb.Point{0.6, 0.7}, orb.LineString{{0.6, 0.7}}, Flat},
		{"along edges, the way the plane runs", func(x, y float64) float64 { return x }, orb.Point{3, 2}, orb.LineString{{3, 2}, {2, 2}, {1, 2}, {0, 2}}, Outline},
		{"along the outline, the way the plane runs", func(x, y float64) float64 { return x }, orb.Point{3, 0}, orb.LineString{{3, 0}, {2, 0}, {1, 0}, {0, 0}}, Outline},
		{"down a gutter", func(x, y float64) float64 { return math.Abs(y-2)*4 + x }, orb.Point{2.5, 2}, orb.LineString{{2.5, 2}, {2, 2}, {1, 2}, {0, 2}}, Outline},
		{"into a level gutter", func(x, y float64) float64 { return math.Abs(y - 2) }, orb.Point{2.5, 2.5}, orb.LineString{{2.5, 2.5}, {2.5, 2}}, Flat},
		{"begun on the outline, out of it", func(x, y float64) float64 { return x }, orb.Point{0, 1.5}, orb.LineString{{0, 1.5}}, Outline},
		{"begun in a pit", func(x, y float64) float64 { return (x-2)*(x-2) + (y-2)*(y-2) }, orb.Point{2, 2}, orb.LineString{{2, 2}}, Pit},
	} {
		line, ok := NewTracer(lattice(c.z)).Trace(c.from)
		if !ok || !line.Points.Equal(c.want) || line.Ending != c.ending {
			t.Errorf("%s: %v, %v; want %v, %v", c.name, line.Points, line.Ending, c.want, c.ending)
		}
	}
	if _, ok := NewTracer(lattice(func(x, y float64) float64 { return x })).Trace(orb.Point{-1, 2}); ok {
		t.Error("a line from outside")
	}
}

// Must show: never uphill, whatever the heights; and every line ends.
func TestNeverUphill(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(3, 50).Draw(r, "n")
		small := rapid.Bool().Draw(r, "lattice")
		pts, z := make([]orb.Point, n), []float64{}
		for i := range pts {
			if small {
				pts[i] = orb.Point{float64(rapid.IntRange(0, 6).Draw(r, "x")), float64(rapid.IntRange(0, 6).Draw(r, "y"))}
			} else {
				pts[i] = orb.Point{rapid.Float64Range(0, 10).Draw(r, "x"), rapid.Float64Range(0, 10).Draw(r, "y")}
				for k := range pts[i] {
					if pts[i][k] < 1e-9 {
						pts[i][k] = 0
					}
				}
			}
		}
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			r.Fatal(err)
		}
		for range m.NumVertices() {
			z = append(z, float64(rapid.IntRange(0, 4).Draw(r, "z")))
		}
		s, err := interp.New(m, z)
		if err != nil {
			r.Fatal(err)
		}
		tracer, sampler := NewTracer(s), s.Sampler()
		for range 5 {
			from := orb.Point{float64(rapid.IntRange(0, 48).Draw(r, "fx")) / 8, float64(rapid.IntRange(0, 48).Draw(r, "fy")) / 8}
			line, ok := tracer.Trace(from)
			if !ok {
				continue
			}
			if line.Ending == Stopped {
				r.Fatalf("from %v: given up after %d points", from, len(line.Points))
			}
			for i := range line.Points {
				if i > 0 && line.Z[i] > line.Z[i-1] {
					r.Fatalf("uphill from %v to %v", line.Z[i-1], line.Z[i])
				}
				// The heights told are the surface's, to what a rounded place can matter.
				at := sampler.At(line.Points[i])
				if at.Location.Place == triangulate.Outside {
					continue
				}
				slope := 0.0
				for h := range m.Around(nearestCorner(m, at.Location, line.Points[i])) {
					slope = max(slope, tracer.gradient(h.Triangle()).Size())
				}
				if math.Abs(at.Z-line.Z[i]) > 1e-9+slope*1e-12 {
					r.Fatalf("at %v height %v, the surface has %v", line.Points[i], line.Z[i], at.Z)
				}
			}
			checkEnd(r, s, &line)
		}
	})
}

func nearestCorner(m *triangulate.Mesh, loc triangulate.Location, p orb.Point) triangulate.Vertex {
	best, off := triangulate.NoVertex, math.Inf(1)
	for _, v := range m.Corners(loc.Triangle) {
		q := m.Position(v)
		if d := math.Hypot(q[0]-p[0], q[1]-p[1]); d < off {
			best, off = v, d
		}
	}
	return best
}

// checkEnd checks that a pit has nothing lower beside it.
func checkEnd(r *rapid.T, s *interp.Surface, l *Line) {
	if l.Ending != Pit {
		return
	}
	at := s.Sampler().At(l.Points[len(l.Points)-1])
	if at.Location.Place != triangulate.OnVertex {
		r.Fatalf("a pit at %v, no vertex", l.Points[len(l.Points)-1])
	}
	for h := range s.Mesh().Around(at.Location.Vertex) {
		if s.Z()[s.Mesh().Dest(h)] < at.Z {
			r.Fatal("a pit with a lower neighbour")
		}
	}
}

// Must show: on a triangulated cone and a saddle the error halves with the edges.
// The true line on a cone is a ray; on z = x² - y² water from (a, b) runs along x y =
// a b. Places of the mesh are irregular, as wells are, and the error is the mean over
// many lines.
func TestErrorHalves(t *testing.T) {
	type kind struct {
		name string
		z    func(orb.Point) float64
		off  func(from, at orb.Point) float64
	}
	kinds := []kind{
		{"cone", func(p orb.Point) float64 { return -math.Hypot(p[0], p[1]) }, func(from, at orb.Point) float64 {
			return math.Abs(from[0]*at[1]-from[1]*at[0]) / math.Hypot(from[0], from[1])
		}},
		{"funnel", func(p orb.Point) float64 { return math.Hypot(p[0], p[1]) }, func(from, at orb.Point) float64 {
			return math.Abs(from[0]*at[1]-from[1]*at[0]) / math.Hypot(from[0], from[1])
		}},
		{"saddle", func(p orb.Point) float64 { return p[0]*p[0] - p[1]*p[1] }, func(from, at orb.Point) float64 {
			// The distance from x y = c, to the first order.
			return math.Abs(at[0]*at[1]-from[0]*from[1]) / math.Hypot(at[0], at[1])
		}},
	}
	for _, k := range kinds {
		var errs []float64
		for _, n := range []int{16, 32, 64, 128} {
			sum, lines := 0.0, 0
			for seed := range uint64(4) {
				r := rand.New(rand.NewPCG(95, seed))
				var pts []orb.Point
				for i := range n + 1 {
					for j := range n + 1 {
						p := orb.Point{-1 + 2*float64(i)/float64(n), -1 + 2*float64(j)/float64(n)}
						if i > 0 && i < n && j > 0 && j < n {
							p[0] += (r.Float64() - 0.5) / float64(n)
							p[1] += (r.Float64() - 0.5) / float64(n)
						}
						pts = append(pts, p)
					}
				}
				s := surface(t, pts, heights(pts, k.z))
				tracer := NewTracer(s)
				starts := rand.New(rand.NewPCG(97, 98)) // the same for every mesh
				for range 60 {
					a := 2 * math.Pi * starts.Float64()
					from := orb.Point{0.3 * math.Cos(a), 0.3 * math.Sin(a)}
					if k.name == "funnel" {
						from = orb.Point{0.9 * math.Cos(a), 0.9 * math.Sin(a)}
					}
					line, ok := tracer.Trace(from)
					if !ok {
						t.Fatal("outside")
					}
					most := 0.0
					for _, at := range line.Points {
						if k.name == "funnel" && math.Hypot(at[0], at[1]) < 0.3 {
							break // near the bottom the mesh is coarse
						}
						most = max(most, k.off(from, at))
					}
					sum += most
					lines++
				}
			}
			errs = append(errs, sum/float64(lines))
		}
		t.Logf("%s: mean of the largest distances %.4f", k.name, errs)
		for i := 1; i < len(errs); i++ {
			if ratio := errs[i] / errs[i-1]; ratio > 0.62 {
				t.Errorf("%s: error %v after %v: ratio %.2f, want about a half", k.name, errs[i], errs[i-1], ratio)
			}
		}
	}
}

// The flow of a fitted plane runs straight to the outline.
func TestStraight(t *testing.T) {
	at := []orb.Point{{0, 0}, {100, 0}, {100, 100}, {0, 100}}
	z := []float64{10, 9, 9, 10}
	p, err := Fit(at, z, math.NaN())
	if err != nil {
		t.Fatal(err)
	}
	line, ok := p.Straight(surface(t, at, z), orb.Point{25, 40})
	if want := (orb.LineString{{25, 40}, {100, 40}}); !ok || !line.Points.Equal(want) || math.Abs(line.Z[1]-9) > 1e-12 {
		t.Errorf("%+v, want %v", line, want)
	}
	if _, ok := p.Straight(surface(t, at, z), orb.Point{-1, 40}); ok {
		t.Error("from outside")
	}
}

func TestLattice(t *testing.T) {
	step, err := decimal.Parse("0.1")
	if err != nil {
		t.Fatal(err)
	}
	got, _ := Lattice(orb.Bound{Min: orb.Point{0.25, -0.05}, Max: orb.Point{0.5, 0.1}}, step)
	want := []orb.Point{{0.3, 0}, {0.4, 0}, {0.5, 0}, {0.3, 0.1}, {0.4, 0.1}, {0.5, 0.1}}
	if len(got) != len(want) {
		t.Fatalf("%v, want %v", got, want)
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("%v, want %v", got, want)
		}
	}
	if _, n := Lattice(orb.Bound{Max: orb.Point{1e6, 1e6}}, step); n < 1e13 {
		t.Error("too many, and not said")
	}
}
