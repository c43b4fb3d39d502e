package interp

import (
	"math"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/triangulate"
)

// A function with known summits, pits and saddles: cos x + cos y on a lattice that has
// them at vertices.
func TestSpotsOfAKnownFunction(t *testing.T) {
	var pts []orb.Point
	n := 8 // steps in a quarter of a period
	for i := -1; i <= 8*n+1; i++ {
		for k := -1; k <= 8*n+1; k++ {
			pts = append(pts, orb.Point{float64(i), float64(k)})
		}
	}
	w := math.Pi / 2 / float64(n)
	s := surfaceOf(t, pts, heights(pts, func(x, y float64) float64 { return math.Cos(x*w) + math.Cos(y*w) }))
	count := map[SpotKind]int{}
	for _, spot := range s.Spots() {
		count[spot.Kind]++
		p, z := s.Mesh().Position(spot.Vertex), s.Z()[spot.Vertex]
		want := map[SpotKind]float64{Summit: 2, Hollow: -2, Saddle: 0}[spot.Kind]
		if math.Abs(z-want) > 1e-12 {
			t.Errorf("%v at %v has height %v, want %v", spot.Kind, p, z, want)
		}
	}
	// Two periods each way, ends included: cos is 1 at three places and -1 at two.
	if count[Summit] != 9 || count[Hollow] != 4 || count[Saddle] != 12 {
		t.Errorf("%v, want 9 summits, 4 pits, 12 saddles", count)
	}
}

// Summits and pits less saddles are 1 where the outline is below all else, whatever the
// heights inside, level parts among them.
func TestSpotsAddUp(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		pts := []orb.Point{{-40, -40}, {40, -40}, {40, 40}, {-40, 40}}
		seen := map[orb.Point]bool{}
		for range rapid.IntRange(1, 60).Draw(r, "n") {
			p := orb.Point{float64(rapid.IntRange(-9, 9).Draw(r, "x")), float64(rapid.IntRange(-9, 9).Draw(r, "y"))}
			if !seen[p] {
				seen[p] = true
				pts = append(pts, p)
			}
		}
		z := make([]float64, len(pts))
		for i := 4; i < len(z); i++ {
			z[i] = float64(rapid.IntRange(1, 5).Draw(r, "z"))
		}
		s := surfaceOf(t, pts, z)
		sum := 0
		for _, spot := range s.Spots() {
			switch spot.Kind {
			case Saddle:
				sum -= spot.Folds - 1
			default:
				sum++
			}
		}
		if sum != 1 {
			r.Fatalf("summits and pits less saddles are %d, want 1", sum)
		}
	})
}

// Nothing on the outline, and nothing without triangles.
func TestNoSpotsOnTheOutline(t *testing.T) {
	s := surfaceOf(t, []orb.Point{{0, 0}, {1, 0}, {0, 1}}, []float64{1, 2, 3})
	if got := s.Spots(); len(got) != 0 {
		t.Errorf("%v on the outline", got)
	}
	m := s.Mesh().Hide(func(triangulate.Triangle) bool { return true })
	none, err := New(m, s.Z())
	if err != nil {
		t.Fatal(err)
	}
	if got := none.Spots(); len(got) != 0 {
		t.Errorf("%v without triangles", got)
	}
}
