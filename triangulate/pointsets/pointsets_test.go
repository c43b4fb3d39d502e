package pointsets

import (
	"hash/fnv"
	"math"
	"slices"
	"testing"

	"github.com/paulmach/orb"
)

// distinct counts different positions.
func distinct(pts []orb.Point) int {
	seen := make(map[orb.Point]bool, len(pts))
	for _, p := range pts {
		seen[p] = true
	}
	return len(seen)
}

func TestSplitMixIsThePublishedOne(t *testing.T) {
	// First outputs for state 1234567, from memory of the table that
	// accompanies the algorithm in collections of example programs.
	want := []uint64{6457827717110365317, 3203168211198807973, 9817491932198370423}
	r := random{1234567}
	for i, w := range want {
		if got := r.next(); got != w {
			t.Errorf("number %d = %d, want %d", i, got, w)
		}
	}
}

func TestSameArgumentsSamePoints(t *testing.T) {
	for _, d := range append(slices.Clone(All), Distribution{"kuzmin", Kuzmin}) {
		for _, n := range []int{0, 1, 2, 3, 12, 13, 1000, 20_000} {
			a, b := d.Points(n, 7), d.Points(n, 7)
			if len(a) != n {
				t.Errorf("%s: %d points, want %d", d.Name, len(a), n)
			}
			if !slices.Equal(a, b) {
				t.Errorf("%s: two calls differ at n=%d", d.Name, n)
			}
			for _, p := range a {
				if math.IsNaN(p[0]+p[1]) || math.IsInf(p[0]+p[1], 0) {
					t.Fatalf("%s: %v is not finite", d.Name, p)
				}
			}
		}
		if slices.Equal(d.Points(1000, 1), d.Points(1000, 2)) {
			t.Errorf("%s: the seed makes no difference", d.Name)
		}
	}
}

// The published tables compare machines, so the points must not depend on
// them: a change of these sums means that older raw figures no longer compare.
func TestPointsArePinned(t *testing.T) {
	want := map[string]uint64{
		"uniform":      0xcaaefb31c5846471,
		"clustered":    0x3b2f9483a20ca079,
		"scanlines":    0xa912bc300139cbb5,
		"survey":       0x1c94d79fde471648,
		"unit-lattice": 0xf66b8e8ba680bc9c,
		"lattice-0.1m": 0x629b4b97e3344abf,
		"circles":      0xdeda9810e93c78ac,
		"kuzmin":       0x1133285f80d75700,
	}
	for _, d := range append(slices.Clone(All), Distribution{"kuzmin", Kuzmin}) {
		h := fnv.New64a()
		for _, p := range d.Points(5000, 1) {
			for _, c := range p {
				u := math.Float64bits(c)
				for k := range 8 {
					h.Write([]byte{byte(u >> (8 * k))})
				}
			}
		}
		if h.Sum64() != want[d.Name] {
			t.Errorf("%s: sum %#x, want %#x", d.Name, h.Sum64(), want[d.Name])
		}
	}
}

func TestDistinctWhereStated(t *testing.T) {
	for _, c := range []struct {
		name string
		pts  []orb.Point
	}{
		{"unit-lattice", UnitLattice(10_001, 1)},
		{"lattice-0.1m", Lattice01(10_001, 1)},
		{"circles, one", Circle(2916, 1)},
		{"circles, many", Circle(10_001, 1)},
		{"scanlines", ScanLines(10_001, 1)},
	} {
		if got := distinct(c.pts); got != len(c.pts) {
			t.Errorf("%s: %d distinct of %d", c.name, got, len(c.pts))
		}
	}
}

func TestCircleIsExact(t *testing.T) {
	for n, radius := range map[int]int{12: 5, 13: 65, 108: 1105, 324: 32045, 2916: 48612265} {
		for _, p := range Circle(n, 0) {
			x, y := int(p[0]), int(p[1])
			if x*x+y*y != radius*radius {
				t.Fatalf("n=%d: (%d, %d) is not on the circle of radius %d", n, x, y, radius)
			}
		}
	}
}

func TestSurveyIsMillimetres(t *testing.T) {
	for _, p := range Survey(1000, 3) {
		for _, c := range p {
			if math.Round(c*1000)/1000 != c {
				t.Fatalf("%v is not the double nearest to a millimetre value", c)
			}
		}
		if p[0] < 500_000 || p[0] > 500_070 || p[1] < 4_600_000 || p[1] > 4_600_070 {
			t.Fatalf("%v lies outside the square of 64 m", p)
		}
	}
}

func TestSizeName(t *testing.T) {
	for n, want := range map[int]string{0: "n=0", 1: "n=1", 7: "n=7", 10: "n=1e1", 100_000: "n=1e5", 1_000_000: "n=1e6", 200_000: "n=200000"} {
		if got := SizeName(n); got != want {
			t.Errorf("SizeName(%d) = %q, want %q", n, got, want)
		}
	}
}

func TestHeights(t *testing.T) {
	pts := Survey(2000, 5)
	pts = append(pts, pts[0])
	z := Heights(pts)
	if len(z) != len(pts) || z[0] != z[len(z)-1] {
		t.Fatalf("%d heights for %d points, first %v, its copy %v", len(z), len(pts), z[0], z[len(z)-1])
	}
	lo, hi := slices.Min(z), slices.Max(z)
	if lo < 85 || hi > 115 || hi-lo < 5 {
		t.Errorf("heights run from %v to %v", lo, hi)
	}
	if one := Heights([]orb.Point{{3, 4}}); math.IsNaN(one[0]) {
		t.Error("one point has no height")
	}
}
