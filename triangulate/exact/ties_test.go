package exact

import (
	"math/big"
	"slices"
	"testing"
)

// tieSets are sets full of cocircular quadruples: small lattices and all integer
// points of the circle x² + y² = 65² (reference/geometry uses the same circles),
// with and without its centre.
func tieSets() map[string][]point {
	sets := map[string][]point{}
	lattice := func(nx, ny int, cell, x0, y0 float64) []point {
		var pts []point
		for i := range nx {
			for j := range ny {
				pts = append(pts, point{x0 + float64(i)*cell, y0 + float64(j)*cell})
			}
		}
		return pts
	}
	sets["lattice 3 x 3"] = lattice(3, 3, 1, -1, -1)
	sets["lattice 4 x 3"] = lattice(4, 3, 2, 6e6, 5e5)
	sets["lattice 3 x 3 of quarters"] = lattice(3, 3, 0.25, 430000, 5600000)
	circle := func(radius int) (pts []point) {
		for x := -radius; x <= radius; x++ {
			for y := -radius; y <= radius; y++ {
				if x*x+y*y == radius*radius {
					pts = append(pts, point{float64(x), float64(y)})
				}
			}
		}
		return pts
	}
	sets["circle of radius 5"] = circle(5)
	sets["circle with centre"] = append(circle(5), point{})
	sets["circle of radius 65"] = circle(65)
	return sets
}

// tiedRat is the definition: the lifted determinant with 2^-64 in place of the
// largest infinitesimal, 2^-128 of the next and so on, small enough for these
// coordinates to stand for infinitesimals.
func tiedRat(a, b, c, d point, rank map[point]int, n int) int {
	p := [4]point{a, b, c, d}
	var lift [4]*big.Rat
	for i, q := range p {
		e := new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Lsh(big.NewInt(1), uint(64*(n-rank[q]))))
		lift[i] = e.Add(e, paraboloid(q))
	}
	return liftedRat(p, lift)
}

// TestTieRuleIsItsDefinition: every triangle of every set with every fourth point,
// in every order of the three.
func TestTieRuleIsItsDefinition(t *testing.T) {
	for name, pts := range tieSets() {
		if len(pts) > 13 {
			continue // 36 points take minutes in rationals; the next test has them
		}
		sorted := slices.SortedFunc(slices.Values(pts), func(a, b point) int { return CompareXY(a, b) })
		rank := map[point]int{}
		for i, p := range sorted {
			rank[p] = i
		}
		ties := 0
		for _, a := range pts {
			for _, b := range pts {
				for _, c := range pts {
					if CompareXY(a, b) > 0 || CompareXY(a, c) > 0 || Orient(a, b, c) <= 0 {
						continue
					}
					for _, d := range pts {
						if d == a || d == b || d == c {
							continue
						}
						want := tiedRat(a, b, c, d, rank, len(pts))
						for _, got := range []int{InCircleTied(a, b, c, d), InCircleTied(b, c, a, d), InCircleTied(c, a, b, d)} {
							if got != want || got == 0 {
								t.Fatalf("%s: InCircleTied(%v, %v, %v, %v) = %d, want %d", name, a, b, c, d, got, want)
							}
						}
						if InCircle(a, b, c, d) == 0 {
							ties++
						}
					}
				}
			}
		}
		if ties == 0 {
			t.Errorf("%s: no tie in the set", name)
		}
	}
}

// TestTieRuleGivesOneTriangulation: the triangles whose tie-broken circles are
// empty tile the hull: 2n-2-b of them, whose areas add up. Neither holds for a
// rule that contradicts itself.
func TestTieRuleGivesOneTriangulation(t *testing.T) {
	hull := map[string]struct {
		boundary int
		area2    float64
	}{
		"lattice 3 x 3":             {8, 8},
		"lattice 4 x 3":             {10, 48},
		"lattice 3 x 3 of quarters": {8, 0.5},
		// All on the hull; area by the shoelace formula. 25 = 3² + 4² and
		// 65² = 16² + 63² = 25² + 60² = 33² + 56² = 39² + 52², with mirrors and axes.
		"circle of radius 5":  {12, 0},
		"circle with centre":  {12, 0},
		"circle of radius 65": {36, 0},
	}
	for name, pts := range tieSets() {
		count, area2 := 0, 0.0
		for _, a := range pts {
			for _, b := range pts {
				for _, c := range pts {
					if CompareXY(a, b) > 0 || CompareXY(a, c) > 0 || Orient(a, b, c) <= 0 || !emptyTied(pts, a, b, c) {
						continue
					}
					count++
					area2 += (b[0]-a[0])*(c[1]-a[1]) - (b[1]-a[1])*(c[0]-a[0])
				}
			}
		}
		want := hull[name]
		if want.area2 == 0 {
			want.area2 = shoelace(pts)
		}
		if n := 2*len(pts) - 2 - want.boundary; count != n || area2 != want.area2 {
			t.Errorf("%s: %d triangles of double area %v, want %d of %v", name, count, area2, n, want.area2)
		}
	}
}

func emptyTied(pts []point, a, b, c point) bool {
	for _, d := range pts {
		if d != a && d != b && d != c && InCircleTied(a, b, c, d) > 0 {
			return false
		}
	}
	return true
}

// shoelace is twice the area of the convex polygon of the points on the circle.
func shoelace(pts []point) float64 {
	var ring []point
	for _, p := range pts {
		if p != (point{}) {
			ring = append(ring, p)
		}
	}
	o := ring[0] // the smallest: all others turn about it
	for _, p := range ring {
		if CompareXY(p, o) < 0 {
			o = p
		}
	}
	slices.SortFunc(ring, func(a, b point) int {
		if a == o || b == o {
			return CompareXY(a, b)
		}
		return -Orient(o, a, b)
	})
	area2 := 0.0
	for i, p := range ring {
		q := ring[(i+1)%len(ring)]
		area2 += p[0]*q[1] - p[1]*q[0]
	}
	return area2
}

// TestLatticeDiagonals: the diagonal of a square runs along (1, -1), for every
// order in which its corners are asked.
func TestLatticeDiagonals(t *testing.T) {
	sw, se, ne, nw := point{0, 0}, point{1, 0}, point{1, 1}, point{0, 1}
	if InCircleTied(sw, se, nw, ne) != -1 || InCircleTied(se, ne, nw, sw) != -1 {
		t.Error("the triangles beside the diagonal nw-se are not empty")
	}
	if InCircleTied(sw, se, ne, nw) != 1 || InCircleTied(sw, ne, nw, se) != 1 {
		t.Error("the triangles beside the diagonal sw-ne are empty")
	}
}
