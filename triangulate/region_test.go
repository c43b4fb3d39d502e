package triangulate_test

import (
	"errors"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// Common practice: even-odd, rims included. The slow definition counts the edges
// that a ray crosses, with integers.
func TestRegionContains(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	dirs := [][2]int{{1, 0}, {2, 1}, {1, 1}, {1, 2}, {0, 1}, {-1, 2}, {-1, 1}, {-2, 1}, {-1, 0}, {-2, -1}, {-1, -1}, {-1, -2}, {0, -1}, {1, -2}, {1, -1}, {2, -1}}
	star := func() orb.Ring { // star-shaped about a centre: does not cross itself
		cx, cy := rng.IntN(10), rng.IntN(10)
		var r orb.Ring
		for _, d := range dirs {
			k := 1 + rng.IntN(4)
			r = append(r, orb.Point{float64(cx + k*d[0]), float64(cy + k*d[1])})
		}
		return append(r, r[0])
	}
	for range 300 {
		b, v := []orb.Ring{star(), star()}, []orb.Ring{star()}
		r, err := triangulate.NewRegion(b, v)
		if err != nil {
			t.Fatal(err)
		}
		for x := -8; x < 20; x++ {
			for y := -8; y < 20; y++ {
				p := orb.Point{float64(x), float64(y)}
				if got, want := r.Contains(p), slowInside(b, p, true) && !slowInside(v, p, false); got != want {
					t.Fatalf("%v: got %v, want %v; boundary %v, void %v", p, got, want, b, v)
				}
			}
		}
	}
}

func slowInside(rings []orb.Ring, p orb.Point, rim bool) bool {
	odd := false
	for _, r := range rings {
		for i := 1; i < len(r); i++ {
			a, b := r[i-1], r[i]
			cross := (b[0]-a[0])*(p[1]-a[1]) - (b[1]-a[1])*(p[0]-a[0])
			if cross == 0 && p[0] >= min(a[0], b[0]) && p[0] <= max(a[0], b[0]) && p[1] >= min(a[1], b[1]) && p[1] <= max(a[1], b[1]) {
				return rim
			}
			if (a[1] <= p[1]) != (b[1] <= p[1]) && (cross < 0) == (b[1] > a[1]) {
				odd = !odd
			}
		}
	}
	return odd
}

func TestRingsRefused(t *testing.T) {
	for _, c := range []struct {
		name string
		ring orb.Ring
		want string
	}{
		{"open", orb.Ring{{0, 0}, {1, 0}, {1, 1}}, "expected a closed ring"},
		{"empty", orb.Ring{}, "has 0 positions"},
		{"flat", orb.Ring{{0, 0}, {1, 1}, {2, 2}, {0, 0}}, "enclose no area"},
		{"bow tie", orb.Ring{{0, 0}, {2, 2}, {2, 0}, {0, 2}, {0, 0}}, "crosses itself there, between its edges from vertices 1 and 3"},
		{"crosses at a vertex", orb.Ring{{0, 0}, {2, 2}, {4, 4}, {4, 0}, {2, 2}, {0, 4}, {0, 0}}, "crosses itself"},
		{"crosses through an edge at a vertex", orb.Ring{{0, 0}, {4, 4}, {4, 0}, {2, 2}, {0, 4}, {0, 0}}, "crosses itself"},
	} {
		_, err := triangulate.NewRegion(nil, []orb.Ring{c.ring})
		var re *triangulate.RingError
		if !errors.As(err, &re) || !strings.Contains(err.Error(), c.want) || !re.Void {
			t.Errorf("%s: %v", c.name, err)
		}
	}
	for name, ring := range map[string]orb.Ring{
		"touches at a vertex": {{0, 0}, {4, 0}, {2, 2}, {4, 4}, {0, 4}, {2, 2}, {0, 0}},
		"touches an edge":     {{0, 0}, {4, 0}, {4, 4}, {2, 0}, {0, 4}, {0, 0}},
		"repeats a vertex":    {{0, 0}, {4, 0}, {4, 0}, {4, 4}, {0, 0}, {0, 0}},
		"spike":               {{0, 0}, {4, 0}, {6, 0}, {4, 0}, {4, 4}, {0, 0}},
	} {
		if _, err := triangulate.NewRegion([]orb.Ring{ring}, nil); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}
