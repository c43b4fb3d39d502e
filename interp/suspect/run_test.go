package suspect

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// walked is ground shot row by row to and fro, along by rows across apart, with the height
// noise of 0.03.
func walked(r *rand.Rand, n int, along, across float64, z func(x, y float64) float64) ground {
	perRow := int(math.Sqrt(float64(n) * across / along))
	var g ground
	for i := range n {
		row, k := i/perRow, i%perRow
		if row%2 == 1 {
			k = perRow - 1 - k
		}
		p := orb.Point{along * (float64(k) + 0.3*r.NormFloat64()), across * (float64(row) + 0.1*r.NormFloat64())}
		g.pts = append(g.pts, p)
		g.z = append(g.z, z(p[0], p[1])+0.03*r.NormFloat64())
	}
	return g
}

func sequenceOf(s *interp.Surface, n int) []triangulate.Vertex {
	vs := make([]triangulate.Vertex, n)
	for i := range vs {
		vs[i] = s.Mesh().VertexOf(i)
	}
	return vs
}

// TestRuns: of runs of 12 shots moved by 0.3, ten times the noise, nine of ten are named
// with the right first and last shot; without them there is none. The rows of shots beside a
// run, which lie off to the other side because of it, are not named, though it is moved by
// fifty times the noise.
func TestRuns(t *testing.T) {
	rolling := func(x, y float64) float64 { return 100 + 8*math.Sin(x/150)*math.Cos(y/190) + 0.02*x }
	bumpy := func(x, y float64) float64 {
		return rolling(x, y) + 1.5*math.Sin(x/13)*math.Sin(y/17) + math.Sin(x/31+y/41) + 0.4*math.Sin(x/5)*math.Sin(y/7)
	}
	plane := func(x, y float64) float64 { return 100 + 0.02*x - 0.01*y }
	kinds := []struct {
		name          string
		n             int
		along, across float64
		z             func(x, y float64) float64
		by            float64
		trials        int // the first on clean data
	}{
		{"plane of 400", 400, 10, 10, plane, 0.3, 3},
		{"plane of 400, moved far", 400, 10, 10, plane, 1.5, 3},
		{"rolling", 5000, 10, 10, rolling, 0.3, 3},
		{"rolling, moved far", 5000, 10, 10, rolling, 1.5, 3},
		{"rows far apart", 5000, 5, 15, rolling, 0.3, 3},
		{"rows close", 5000, 15, 8, rolling, 0.3, 3},
		{"bumps as wide as the rows are apart", 5000, 10, 10, bumpy, 0, 1},
	}
	for _, kind := range kinds {
		right, tried, falseClean, falseMoved := 0, 0, 0, 0
		for seed := range uint64(10) {
			for trial := range kind.trials {
				r := rand.New(rand.NewPCG(seed, 5))
				g := walked(r, kind.n, kind.along, kind.across, kind.z)
				var first int
				s := g.surface(t)
				if trial > 0 {
					for inner := false; !inner; {
						first = r.IntN(kind.n - 12)
						inner = true
						for i := first; i < first+12; i++ {
							inner = inner && !s.Mesh().Reduction().OnOutline(s.Mesh().VertexOf(i))
						}
					}
					by := kind.by
					if trial == 2 {
						by = -by
					}
					for i := first; i < first+12; i++ {
						g.z[i] += by
					}
					s = g.surface(t)
				}
				res := findIn(t, s, Options{ScaleLeast: 0.001, Sequence: sequenceOf(s, kind.n)})
				if trial == 0 {
					falseClean += len(res.Runs)
					continue
				}
				tried++
				hit := false
				for _, run := range res.Runs {
					if run.First == first && run.Last == first+11 {
						hit = true
					} else if run.Last < first || run.First > first+11 {
						falseMoved++
					}
				}
				if hit {
					right++
				} else if testing.Verbose() {
					t.Logf("%s seed %d: %d to %d, found %+v", kind.name, seed, first, first+11, res.Runs)
				}
			}
		}
		if 10*right < 9*tried || falseClean+falseMoved > 0 {
			t.Errorf("%s: want nine of ten named and none false", kind.name)
		}
		t.Logf("%s: %d of %d runs named, %d false on clean data, %d besides", kind.name, right, tried, falseClean, falseMoved)
	}
}
