package triangulate

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
)

// meetCases are four points each, made to be easy, hard and degenerate.
func meetCases(r *rand.Rand) map[string]func() [4]orb.Point {
	some := func(f func() float64) func() [4]orb.Point {
		return func() (c [4]orb.Point) {
			for i := range c {
				c[i] = orb.Point{f(), f()}
			}
			return c
		}
	}
	return map[string]func() [4]orb.Point{
		"unit square":     some(r.Float64),
		"small lattice":   some(func() float64 { return float64(r.IntN(9)) }),
		"tenths":          some(func() float64 { return float64(r.IntN(90)) / 10 }),
		"map coordinates": some(func() float64 { return 5_600_000 + math.Round(r.Float64()*1e6)/1000 }),
		"all sizes":       some(func() float64 { return (r.Float64() - 0.5) * math.Pow(2, float64(r.IntN(120)-60)) }),
		"extremes":        some(func() float64 { return (r.Float64() - 0.5) * math.Pow(10, float64(r.IntN(118)-59)) }),
		"nearly parallel": func() [4]orb.Point {
			a := orb.Point{400_000 + 100*r.Float64(), 100 * r.Float64()}
			d := orb.Point{r.Float64(), r.Float64()}
			at := func(t float64) orb.Point {
				return orb.Point{math.Nextafter(a[0]+t*d[0], float64(r.IntN(2))*1e9), a[1] + t*d[1]}
			}
			return [4]orb.Point{a, at(1), at(0.3), at(0.7)}
		},
		"half-way between doubles": func() [4]orb.Point {
			// Crosses at x = 2^52 + k + 1/2, y = 0.
			k := float64(1<<52 + r.IntN(1000))
			return [4]orb.Point{{k, -1}, {k + 1, 1}, {k - 3, 0}, {k + 5, 0}}
		},
	}
}

// Twice the precision gives what rationals give, bit for bit, or does not answer;
// it answers nearly always where coordinates are those of maps.
func TestIntersectionIsTheExactPlaceRoundedOnce(t *testing.T) {
	r := rand.New(rand.NewPCG(61, 62))
	for name, next := range meetCases(r) {
		asked, answered := 0, 0
		for range 3_000 {
			c := next()
			dx, dy := ratSub(c[1][0], c[0][0]), ratSub(c[1][1], c[0][1])
			ex, ey := ratSub(c[3][0], c[2][0]), ratSub(c[3][1], c[2][1])
			if ratCross(dx, dy, ex, ey).Sign() == 0 {
				if at, ok := meet(c[0], c[1], c[2], c[3]); ok {
					t.Fatalf("%s: parallel lines %v meet at %v", name, c, at)
				}
				continue
			}
			asked++
			want, _, _ := intersect(c[0], c[1], c[2], c[3])
			got, ok := meet(c[0], c[1], c[2], c[3])
			if !ok {
				continue
			}
			answered++
			if got != want || math.Signbit(got[0]) != math.Signbit(want[0]) || math.Signbit(got[1]) != math.Signbit(want[1]) {
				t.Fatalf("%s: %v meet at %v, want %v", name, c, got, want)
			}
		}
		t.Logf("%s: %d of %d decided", name, answered, asked)
		if name == "map coordinates" && answered < asked*999/1000 {
			t.Errorf("%s: %d of %d decided: rationals are slow", name, answered, asked)
		}
	}
}

func BenchmarkIntersection(b *testing.B) {
	r := rand.New(rand.NewPCG(63, 64))
	for _, name := range []string{"map coordinates", "small lattice"} {
		next := meetCases(r)[name]
		var cases [1024][4]orb.Point
		for i := range cases {
			for ok := false; !ok; {
				cases[i] = next()
				_, ok = meet(cases[i][0], cases[i][1], cases[i][2], cases[i][3])
			}
		}
		b.Run(name, func(b *testing.B) {
			i := 0
			for b.Loop() {
				c := &cases[i&1023]
				Intersection(c[0], c[1], c[2], c[3])
				i++
			}
		})
	}
}
