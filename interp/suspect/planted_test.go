package suspect

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// ground is a survey of known ground: shots and lines.
type ground struct {
	pts   []orb.Point
	z     []float64
	lines []interp.Breakline
}

const shots = 5000
const side = 1000.0

// smooth is rolling ground shot at random, with noise of 0.03.
func smooth(r *rand.Rand) ground {
	var g ground
	for range shots {
		p := orb.Point{side * r.Float64(), side * r.Float64()}
		g.pts = append(g.pts, p)
		g.z = append(g.z, 100+8*math.Sin(p[0]/150)*math.Cos(p[1]/190)+0.02*p[0]+0.03*r.NormFloat64())
	}
	return g
}

// rough is ground whose roughness itself differs tenfold from place to place: hummocks
// of many sizes, the smallest below the spacing of the shots.
func rough(r *rand.Rand) ground {
	type wave struct{ kx, ky, phase, size float64 }
	var waves []wave
	for length := 400.0; length > 8; length /= 1.5 {
		for range 4 {
			a := 2 * math.Pi * r.Float64()
			waves = append(waves, wave{2 * math.Pi / length * math.Cos(a), 2 * math.Pi / length * math.Sin(a), 2 * math.Pi * r.Float64(), 0.01 * length})
		}
	}
	var g ground
	for range shots {
		p := orb.Point{side * r.Float64(), side * r.Float64()}
		z := 0.0
		for _, w := range waves {
			z += w.size * math.Sin(w.kx*p[0]+w.ky*p[1]+w.phase)
		}
		g.pts = append(g.pts, p)
		g.z = append(g.z, 100+z*(0.1+0.9*p[0]/side)+0.03*r.NormFloat64())
	}
	return g
}

// terraced is a hillside of benches: crest and toe of every face are surveyed as
// breaklines, whose vertices count as shots.
func terraced(r *rand.Rand) ground {
	const steps, benchRise, face = 8, 6.0, 8.0
	crest := func(i int, x float64) float64 { // northing of the crest of face i
		return (float64(i)+0.7)*side/steps + 15*math.Sin(x/120+float64(i))
	}
	height := func(p orb.Point) float64 {
		z := 50 + 0.01*p[0]
		for i := range steps {
			c := crest(i, p[0])
			z += benchRise * min(1, max(0, (p[1]-c+face)/face)) // the toe is south of the crest
		}
		return z
	}
	var g ground
	for i := range steps {
		for _, offset := range []float64{0, -face} {
			l := interp.Breakline{Name: fmt.Sprint(i, offset)}
			for x, last := 0.0, false; !last; x += 20 + 5*r.Float64() {
				if last = x > side-15; last {
					x = side
				}
				p := orb.Point{x, crest(i, x) + offset}
				l.Points = append(l.Points, p)
				l.Z = append(l.Z, height(p)+0.03*r.NormFloat64())
			}
			g.lines = append(g.lines, l)
		}
	}
	count := 0
	for _, l := range g.lines {
		count += len(l.Points)
	}
	for range shots - count {
		p := orb.Point{side * r.Float64(), side * r.Float64()}
		g.pts = append(g.pts, p)
		g.z = append(g.z, height(p)+0.03*r.NormFloat64())
	}
	return g
}

func (g *ground) surface(t testing.TB) *interp.Surface {
	t.Helper()
	s, _, err := interp.WithBreaklines(context.Background(), g.pts, g.z, g.lines, interp.BreaklineOptions{Crossing: interp.SplitCrossings, CrossingSpreadMax: 99, SpotSpreadMax: 99})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// move adds to the height of input i of the surface.
func (g *ground) move(i int, by float64) {
	if i < len(g.z) {
		g.z[i] += by
		return
	}
	i -= len(g.z)
	for k := range g.lines {
		if n := len(g.lines[k].Z); i < n {
			g.lines[k].Z[i] += by
			return
		} else {
			i -= n
		}
	}
}

func findIn(t testing.TB, s *interp.Surface, opt Options) *Result {
	t.Helper()
	left, err := s.LeaveOneOut(context.Background(), opt.Workers)
	if err != nil {
		t.Fatal(err)
	}
	res, err := Find(context.Background(), s, left, opt)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// localScale is 1.4826 times the median size of the leave-one-out residuals of the 25
// vertices nearest to v.
func localScale(s *interp.Surface, l *interp.LeftOut, v triangulate.Vertex) float64 {
	type near struct{ d, r float64 }
	var all []near
	at := s.Mesh().Position(v)
	for u := range s.Mesh().Vertices() {
		p := s.Mesh().Position(u)
		if r := l.Residual(u); r == r {
			all = append(all, near{(p[0]-at[0])*(p[0]-at[0]) + (p[1]-at[1])*(p[1]-at[1]), math.Abs(r)})
		}
	}
	slices.SortFunc(all, func(a, b near) int {
		if a.d < b.d {
			return -1
		}
		return 1
	})
	all = all[:25]
	slices.SortFunc(all, func(a, b near) int {
		if a.r < b.r {
			return -1
		}
		return 1
	})
	return 1.4826 * all[12].r
}

// TestT13: of 500 readings on a plane the one that is 5 too high is the first suspect, and
// the only one.
func TestT13(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 13))
	var g ground
	for range 500 {
		p := orb.Point{100 * r.Float64(), 100 * r.Float64()}
		g.pts, g.z = append(g.pts, p), append(g.z, 20+0.1*p[0]-0.2*p[1])
	}
	middle := 0
	for i, p := range g.pts {
		if math.Hypot(p[0]-50, p[1]-50) < math.Hypot(g.pts[middle][0]-50, g.pts[middle][1]-50) {
			middle = i
		}
	}
	g.z[middle] += 5
	s := g.surface(t)
	for _, least := range []float64{0, 0.001} {
		res := findIn(t, s, Options{ScaleLeast: least})
		if len(res.Suspects) == 0 || res.Suspects[0].Vertex != s.Mesh().VertexOf(middle) || math.Abs(res.Suspects[0].Residual-5) > 1e-9 {
			t.Errorf("least scale %v: suspects %+v, want the reading that is 5 too high first", least, res.Suspects)
		}
		if len(res.Suspects) != 1 {
			t.Errorf("%d suspects, want 1", len(res.Suspects))
		}
	}
}

// TestGroups: shots on the tops of things are named by their code.
func TestGroups(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	g := smooth(r)
	s := g.surface(t)
	group := make([]int32, s.Mesh().NumVertices())
	for k := range 60 { // codes 1 and 2: the one a metre up, the other on the ground
		v := s.Mesh().VertexOf(17 + 80*k)
		group[v] = int32(1 + k%2)
		if k%2 == 0 {
			g.z[17+80*k] += 1 + 0.2*r.Float64()
		}
	}
	s = g.surface(t)
	res := findIn(t, s, Options{ScaleLeast: 0.001, Group: group})
	if len(res.Groups) != 1 || res.Groups[0].Group != 1 || math.Abs(res.Groups[0].Amount-1.1) > 0.1 {
		t.Errorf("groups %+v, want group 1 about 1.1 up", res.Groups)
	}
}

// TestFindIsTheSame whatever the number of goroutines and the order of input.
func TestFindIsTheSame(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 3))
	g := terraced(r)
	for range 30 {
		g.move(r.IntN(len(g.pts)), 3*r.NormFloat64())
	}
	type seen struct {
		at                             orb.Point
		expected, residual, scale, off float64
	}
	find := func(g *ground, workers int) (all []seen) {
		s := g.surface(t)
		res := findIn(t, s, Options{Workers: workers})
		for _, x := range res.Suspects {
			all = append(all, seen{s.Mesh().Position(x.Vertex), x.Expected, x.Residual, x.Scale, x.Off})
		}
		return all
	}
	want := find(&g, 1)
	if len(want) < 20 {
		t.Fatalf("%d suspects", len(want))
	}
	for workers := 2; workers < 4; workers++ {
		r.Shuffle(len(g.pts), func(i, j int) { g.pts[i], g.pts[j] = g.pts[j], g.pts[i]; g.z[i], g.z[j] = g.z[j], g.z[i] })
		r.Shuffle(len(g.lines), func(i, j int) { g.lines[i], g.lines[j] = g.lines[j], g.lines[i] })
		if got := find(&g, workers); !slices.Equal(got, want) {
			t.Errorf("%d goroutines, another order:\n%v\nwant\n%v", workers, got, want)
		}
	}
}

// TestPlanted: of 40 errors of 8 to 50 times the local scale nearly all are listed, and
// next to nothing besides.
func TestPlanted(t *testing.T) {
	for _, kind := range []struct {
		name string
		make func(*rand.Rand) ground
	}{{"smooth", smooth}, {"rough", rough}, {"terraced", terraced}} {
		found, planted, alarms := 0, 0, 0
		for seed := range uint64(10) {
			r := rand.New(rand.NewPCG(seed, 77))
			g := kind.make(r)
			s := g.surface(t)
			l, err := s.LeaveOneOut(context.Background(), 0)
			if err != nil {
				t.Fatal(err)
			}
			inputs := s.Mesh().Inputs()
			bad := map[triangulate.Vertex]float64{}
			for len(bad) < 40 {
				v := triangulate.Vertex(r.IntN(s.Mesh().NumVertices()))
				if _, ok := bad[v]; ok || math.IsNaN(l.Expected[v]) {
					continue
				}
				by := (8 + 42*r.Float64()) * localScale(s, l, v)
				if r.IntN(2) == 0 {
					by = -by
				}
				bad[v] = by
				g.move(int(inputs[v]), by)
			}
			s = g.surface(t)
			res := findIn(t, s, Options{ScaleLeast: 0.001})
			hit := map[triangulate.Vertex]bool{}
			for _, x := range res.Suspects {
				if _, ok := bad[x.Vertex]; ok {
					hit[x.Vertex] = true
				} else {
					alarms++
					if testing.Verbose() && seed < 2 {
						t.Logf("%s: false %+v %v", kind.name, x, s.Mesh().Position(x.Vertex))
					}
				}
			}
			found += len(hit)
			planted += len(bad)
			for v, by := range bad {
				if !hit[v] && testing.Verbose() {
					t.Logf("%s seed %d: missed %v scale %v (%.1f)", kind.name, seed, by, res.Scale[v], by/res.Scale[v])
				}
			}
		}
		if found < planted*95/100 || alarms > 10*shots/200 {
			t.Errorf("%s: want at least 95 %% found and at most 0.5 %% of shots false", kind.name)
		}
		t.Logf("%s: %d of %d found (%.1f %%), %d false (%.2f %%)", kind.name, found, planted, 100*float64(found)/float64(planted), alarms, 100*float64(alarms)/10/shots)
	}
}
