package profile

import (
	"context"
	"math"
	"math/rand/v2"
	"reflect"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

func surface(t testing.TB, pts []orb.Point, z func(orb.Point) float64) *interp.Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	zs := make([]float64, len(pts))
	for i, p := range pts {
		zs[i] = z(p)
	}
	s, err := interp.FromInputs(m, zs)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func line(t testing.TB, from float64, pts ...orb.Point) *Alignment {
	t.Helper()
	a, err := NewAlignment(pts, from)
	if err != nil {
		t.Fatal(err)
	}
	return a
}

func lumpy(p orb.Point) float64 { return math.Sin(p[0]*1.7) + math.Cos(p[1]*2.3) + p[0]*p[1]/50 }

// T17 of the trade's list of numbers: on a straight line from 0 to 300 east, the
// place (125, 7) has station 125 and lies 7 to the left.
func TestStationAndOffset(t *testing.T) {
	a := line(t, 0, orb.Point{0, 0}, orb.Point{300, 0})
	for _, c := range []struct {
		p    orb.Point
		want Beside
	}{
		{orb.Point{125, 7}, Beside{125, -7, false}},
		{orb.Point{125, -7}, Beside{125, 7, false}},
		{orb.Point{300, 2}, Beside{300, -2, false}},
		{orb.Point{310, 2}, Beside{310, -2, true}},
		{orb.Point{-4, -3}, Beside{-4, 3, true}},
	} {
		if got := a.Locate(c.p); got != c.want {
			t.Errorf("%v: %+v, want %+v", c.p, got, c.want)
		}
	}
	// Outside of a bend to the left the nearest place is the bend itself.
	bent := line(t, 100, orb.Point{0, 0}, orb.Point{10, 0}, orb.Point{10, 10})
	if got := bent.Locate(orb.Point{13, -4}); got != (Beside{110, 5, false}) {
		t.Errorf("beside a bend: %+v, want station 110, 5 to the right", got)
	}
	if at, u := bent.At(110); at != (orb.Point{10, 0}) || math.Abs(u[0]-math.Sqrt(.5)) > 1e-15 || u[0] != u[1] {
		t.Errorf("at the bend: %v in the direction %v", at, u)
	}
	if at, _ := bent.At(115); at != (orb.Point{10, 5}) {
		t.Errorf("station 115: %v", at)
	}
}

// T1: on a plane every height and grade is the plane's.
func TestPlane(t *testing.T) {
	plane := func(p orb.Point) float64 { return 2 + 0.03*p[0] - 0.02*p[1] }
	s := surface(t, pointsets.Uniform(500, 3), plane)
	a := line(t, 0, orb.Point{.2, .3}, orb.Point{.8, .7}, orb.Point{.3, .9})
	p := NewTracer(s, nil).Trace(a)
	for i, pt := range p.Points {
		if math.Abs(pt.Z-plane(pt.At)) > 1e-15*4 {
			t.Errorf("point %d: %v, want %v", i, pt.Z, plane(pt.At))
		}
		k := a.leg(pt.Station)
		u := a.direction(k)
		if want := 0.03*u[0] - 0.02*u[1]; pt.Ahead == Surface && math.Abs(pt.Grade-want) > 1e-9 {
			t.Errorf("point %d: grade %v, want %v", i, pt.Grade, want)
		}
	}
	if len(p.Gaps()) != 0 || len(p.Runs()) != 1 || p.Runs()[0] != (Stretch{0, a.End()}) {
		t.Errorf("gaps %v, runs %v", p.Gaps(), p.Runs())
	}
}

// kinds of lines over a set of points: between any places, between vertices, along
// an axis through a vertex, bent.
func randomLine(t testing.TB, r *rand.Rand, pts []orb.Point, b orb.Bound) *Alignment {
	t.Helper()
	any := func() orb.Point {
		return orb.Point{b.Min[0] + r.Float64()*(b.Max[0]-b.Min[0]), b.Min[1] + r.Float64()*(b.Max[1]-b.Min[1])}
	}
	vertex := func() orb.Point { return pts[r.IntN(len(pts))] }
	for {
		var places []orb.Point
		switch r.IntN(5) {
		case 0:
			places = []orb.Point{any(), any()}
		case 1:
			places = []orb.Point{vertex(), vertex()}
		case 2:
			p := vertex()
			places = []orb.Point{{b.Min[0], p[1]}, {b.Max[0], p[1]}}
		case 3:
			p := vertex()
			places = []orb.Point{{p[0], b.Max[1]}, p, {p[0], b.Min[1]}}
		default:
			places = []orb.Point{any(), vertex(), any(), any(), vertex()}
		}
		if a, err := NewAlignment(places, 0); err == nil {
			return a
		}
	}
}

// Must show: on random meshes and lines a profile equals a query at 1,000 places,
// and its breaks equal the crossings of edges bit for bit.
func TestProfileEqualsQuery(t *testing.T) {
	for _, d := range pointsets.All {
		pts := d.Points(3000, 5)
		b := orb.MultiPoint(pts).Bound()
		scale := max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1])
		s := surface(t, pts, func(p orb.Point) float64 {
			return lumpy(orb.Point{4 * (p[0] - b.Min[0]) / scale, 4 * (p[1] - b.Min[1]) / scale})
		})
		b = b.Pad(scale / 20)
		r := rand.New(rand.NewPCG(71, 72))
		tracer, sampler := NewTracer(s, nil), s.Sampler()
		for range 40 {
			a := randomLine(t, r, pts, b)
			p := tracer.Trace(a)
			checkBreaks(t, d.Name, s, a, p)
			// The largest slope a unit in the last place of a coordinate can matter by.
			steepest := 0.0
			for _, pt := range p.Points {
				if g := math.Abs(pt.Grade); g > steepest {
					steepest = g
				}
			}
			for range 1000 / 40 * 2 {
				station := a.Start() + r.Float64()*(a.End()-a.Start())
				at, _ := a.At(station)
				got, want := p.Z(station), sampler.At(at)
				if math.IsNaN(got) || math.IsNaN(want.Z) {
					continue // counted by the test of gaps
				}
				slope := steepest + slopeAt(s, want)
				size := math.Abs(at[0]) + math.Abs(at[1]) + a.End()
				if math.Abs(got-want.Z) > 1e-12+8*slope*size*0x1p-52 {
					t.Fatalf("%s: line %v, station %v: %v, a query gives %v", d.Name, a.points, station, got, want.Z)
				}
			}
		}
	}
}

func slopeAt(s *interp.Surface, at interp.Sample) float64 {
	return interp.Slope(s.Gradient(at.Location.Triangle))
}

// checkBreaks finds all crossings by asking every edge, and compares.
func checkBreaks(t *testing.T, name string, s *interp.Surface, a *Alignment, p *Profile) {
	t.Helper()
	m := s.Mesh()
	type place struct {
		at orb.Point
		z  float64
	}
	want := map[place]bool{}
	for k := range a.lengths {
		p, q := a.points[k], a.points[k+1]
		for v := range m.Vertices() {
			if at := m.Position(v); onSegment(p, q, at) {
				want[place{at, s.Z()[v]}] = true
			}
		}
		for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
			if twin := m.Twin(h); twin != triangulate.NoHalfEdge && twin < h {
				continue
			}
			u, v := m.Position(m.Origin(h)), m.Position(m.Dest(h))
			su, sv := exact.Orient(p, q, u), exact.Orient(p, q, v)
			sp, sq := exact.Orient(u, v, p), exact.Orient(u, v, q)
			if su*sv < 0 && sp*sq <= 0 {
				at := triangulate.Intersection(u, v, p, q)
				want[place{at, s.ValueOnEdge(m.Origin(h), m.Dest(h), at)}] = true
			}
			if su == 0 && sv == 0 { // ends within an edge that runs along
				for _, e := range []orb.Point{p, q} {
					if onSegment(u, v, e) && e != u && e != v {
						want[place{e, s.ValueOnEdge(m.Origin(h), m.Dest(h), e)}] = true
					}
				}
			}
		}
	}
	got := map[place]bool{}
	for i, pt := range p.Points {
		if i > 0 && pt.Station < p.Points[i-1].Station {
			t.Fatalf("%s: stations fall from %v to %v", name, p.Points[i-1].Station, pt.Station)
		}
		if pt.Place == triangulate.OnEdge || pt.Place == triangulate.OnVertex {
			got[place{pt.At, pt.Z}] = true
		} else if !pt.Bend {
			t.Fatalf("%s: point %d is neither a break nor a bend: %+v", name, i, pt)
		}
	}
	if !reflect.DeepEqual(got, want) {
		t.Fatalf("%s: line %v: %d breaks, want %d", name, a.points, len(got), len(want))
	}
}

func onSegment(p, q, at orb.Point) bool {
	return exact.Orient(p, q, at) == 0 && exact.CompareXY(p, at)*exact.CompareXY(at, q) >= 0 &&
		min(p[0], q[0]) <= at[0] && at[0] <= max(p[0], q[0]) && min(p[1], q[1]) <= at[1] && at[1] <= max(p[1], q[1])
}

// Reversed, a line meets the same places with the same heights.
func TestReversed(t *testing.T) {
	pts := pointsets.Lattice01(900, 1)
	s := surface(t, pts, lumpy)
	b := orb.MultiPoint(pts).Bound().Pad(0.35)
	r := rand.New(rand.NewPCG(73, 74))
	tracer := NewTracer(s, nil)
	for range 200 {
		a := randomLine(t, r, pts, b)
		back := append([]orb.Point{}, a.points...)
		for i := range back {
			back[i] = a.points[len(back)-1-i]
		}
		p, q := tracer.Trace(a), tracer.Trace(line(t, 0, back...))
		if len(p.Points) != len(q.Points) {
			t.Fatalf("%v: %d points, %d the other way", a.points, len(p.Points), len(q.Points))
		}
		for i := range p.Points {
			x, y := p.Points[i], q.Points[len(q.Points)-1-i]
			if x.At != y.At || x.Place != y.Place || math.Float64bits(x.Z) != math.Float64bits(y.Z) {
				t.Fatalf("%v: point %d: %+v, the other way %+v", a.points, i, x, y)
			}
		}
	}
}

// Gaps are where a query finds no surface: hull, trimmed triangles, boundary, void.
func TestGaps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(3, 60).Draw(t, "n")
		whole := rapid.Custom(func(t *rapid.T) orb.Point {
			return orb.Point{float64(rapid.IntRange(0, 12).Draw(t, "x")), float64(rapid.IntRange(0, 12).Draw(t, "y"))}
		})
		pts := rapid.SliceOfN(whole, n, n).Draw(t, "points")
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		if rapid.Bool().Draw(t, "trim") {
			m = m.Trim(4)
		}
		z := make([]float64, m.NumVertices())
		for v := range z {
			z[v] = lumpy(m.Position(triangulate.Vertex(v)))
		}
		s, err := interp.New(m, z)
		if err != nil {
			t.Fatal(err)
		}
		var region *triangulate.Region
		if rapid.Bool().Draw(t, "region") {
			var boundary, voids []orb.Ring
			if rapid.Bool().Draw(t, "boundary") {
				boundary = []orb.Ring{box(t, whole, "boundary")}
			}
			voids = []orb.Ring{box(t, whole, "void")}
			if region, err = triangulate.NewRegion(boundary, voids); err != nil {
				t.Skip(err)
			}
		}
		places := rapid.SliceOfN(whole, 2, 4).Draw(t, "line")
		a, err := NewAlignment(places, 0)
		if err != nil {
			t.Skip(err)
		}
		p := NewTracer(s, region).Trace(a)
		sampler := s.Sampler()
		for i := range p.Points[1:] {
			x, y := &p.Points[i], &p.Points[i+1]
			if y.Station < x.Station {
				t.Fatalf("stations fall: %+v, %+v", x, y)
			}
			if y.Station-x.Station < 1e-9 {
				continue
			}
			mid := orb.Point{x.At[0] + (y.At[0]-x.At[0])/2, x.At[1] + (y.At[1]-x.At[1])/2}
			got := sampler.At(mid)
			there := got.Location.Place != triangulate.Outside && (region == nil || region.Contains(mid))
			if mid[0] != math.Floor(mid[0]*4)/4 || mid[1] != math.Floor(mid[1]*4)/4 {
				// Rounded off the line: only what is clear of rims is sure.
				if clearOf(s, region, mid) && there != (x.Ahead == Surface) {
					t.Fatalf("%v on the surface: %v, the profile says %v", mid, there, x.Ahead)
				}
				continue
			}
			if there && x.Ahead != Surface && touches(s, region, x.At, y.At) {
				continue
			}
			if there != (x.Ahead == Surface) {
				t.Fatalf("%v on the surface: %v, the profile says %v", mid, there, x.Ahead)
			}
			if there && math.Abs(got.Z-(x.Z+y.Z)/2) > 1e-12 {
				t.Fatalf("%v has %v, the profile %v", mid, got.Z, (x.Z+y.Z)/2)
			}
		}
		for _, pt := range p.Points {
			if math.IsNaN(pt.Z) != (pt.Place == triangulate.Outside) {
				t.Fatalf("%+v", pt)
			}
		}
		if first, last := p.Points[0], p.Points[len(p.Points)-1]; first.At != a.points[0] || last.At != a.points[len(a.points)-1] || last.Ahead != End {
			t.Fatalf("from %+v to %+v", first, last)
		}
	})
}

// clearOf tells whether p and four places about it agree on being inside.
func clearOf(s *interp.Surface, r *triangulate.Region, p orb.Point) bool {
	n := 0
	sampler := s.Sampler()
	for _, d := range []orb.Point{{0, 0}, {1e-7, 1e-7}, {-1e-7, 1e-7}, {1e-7, -1e-7}, {-1e-7, -1e-7}} {
		q := orb.Point{p[0] + d[0], p[1] + d[1]}
		if sampler.At(q).Location.Place != triangulate.Outside && (r == nil || r.Contains(q)) {
			n++
		}
	}
	return n == 0 || n == 5
}

// touches reports whether the piece from a to b has nothing of the surface on both sides
// of its middle, at one and two hundredths of its length.
func touches(s *interp.Surface, r *triangulate.Region, a, b orb.Point) bool {
	sampler := s.Sampler()
	for _, part := range []float64{0.48, 0.49, 0.51, 0.52} {
		q := orb.Point{a[0] + float64(part*(b[0]-a[0])), a[1] + float64(part*(b[1]-a[1]))}
		if sampler.At(q).Location.Place != triangulate.Outside && (r == nil || r.Contains(q)) {
			return false
		}
	}
	return true
}

func box(t *rapid.T, whole *rapid.Generator[orb.Point], name string) orb.Ring {
	p := whole.Draw(t, name)
	w, h := float64(rapid.IntRange(1, 6).Draw(t, "w")), float64(rapid.IntRange(1, 6).Draw(t, "h"))
	if rapid.Bool().Draw(t, "diamond") {
		return orb.Ring{{p[0] - w, p[1]}, {p[0], p[1] - h}, {p[0] + w, p[1]}, {p[0], p[1] + h}, {p[0] - w, p[1]}}
	}
	return orb.Ring{{p[0], p[1]}, {p[0] + w, p[1]}, {p[0] + w, p[1] + h}, {p[0], p[1] + h}, {p[0], p[1]}}
}

// Sections are square to the line; on the inside of a bend they meet.
func TestSections(t *testing.T) {
	a := line(t, 0, orb.Point{0, 0}, orb.Point{100, 0}, orb.Point{100, 100})
	all, err := a.Sections([]float64{0, 50, 90, 100, 110, 200}, 20, 5)
	if err != nil {
		t.Fatal(err)
	}
	if got := all[1].Line.Points(); got[0] != (orb.Point{50, 20}) || got[1] != (orb.Point{50, -5}) {
		t.Errorf("at 50: %v", got)
	}
	if all[1].Line.Start() != -20 || all[1].Line.End() != 5 {
		t.Errorf("offsets from %v to %v", all[1].Line.Start(), all[1].Line.End())
	}
	want := []Overlap{{2, 3}, {2, 4}, {3, 4}}
	if got := Overlaps(all); !reflect.DeepEqual(got, want) {
		t.Errorf("overlaps %v, want %v: the bend is to the left", got, want)
	}
}

func TestFaults(t *testing.T) {
	if _, err := NewAlignment([]orb.Point{{1, 1}, {1, 1}}, 0); err != ErrShort {
		t.Error(err)
	}
	if _, err := NewAlignment([]orb.Point{{1, 1}, {1, math.NaN()}}, 0); err == nil {
		t.Error("no error for NaN")
	}
	if _, err := NewAlignment([]orb.Point{{1, 1}, {1, 2}}, math.Inf(1)); err == nil {
		t.Error("no error for a first station that is infinite")
	}
}

// Any number of workers, one result.
func TestMany(t *testing.T) {
	pts := pointsets.Uniform(5000, 8)
	s := surface(t, pts, lumpy)
	r := rand.New(rand.NewPCG(75, 76))
	var lines []*Alignment
	for range 200 {
		lines = append(lines, randomLine(t, r, pts, orb.MultiPoint(pts).Bound()))
	}
	want, err := Many(context.Background(), s, nil, lines, 1)
	if err != nil {
		t.Fatal(err)
	}
	got, err := Many(context.Background(), s, nil, lines, 7)
	if err != nil {
		t.Fatal(err)
	}
	for i := range want {
		for k := range want[i].Points {
			x, y := want[i].Points[k], got[i].Points[k]
			if x.At != y.At || math.Float64bits(x.Z) != math.Float64bits(y.Z) || x.Station != y.Station {
				t.Fatalf("line %d, point %d: %+v, want %+v", i, k, y, x)
			}
		}
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Many(ctx, s, nil, lines, 2); err == nil {
		t.Error("no error of an ended context")
	}
}
