package accuracy

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// A Spread says how checkpoints lie in the area they stand for.
type Spread struct {
	// Quadrants counts them: south-west, south-east, north-west, north-east. A
	// place on a middle line counts east of it, or north.
	Quadrants [4]int
	// Closest is the distance of the two closest, Diagonal that of the area's
	// opposite corners. Closest is NaN for fewer than two.
	Closest, Diagonal float64
}

// Even reports what the NSSDA asks for where it is not known how errors are
// distributed over the area: a fifth of the checkpoints in each quadrant, and no two
// closer than a tenth of the diagonal.
func (s Spread) Even() bool {
	all := s.Quadrants[0] + s.Quadrants[1] + s.Quadrants[2] + s.Quadrants[3]
	for _, n := range s.Quadrants {
		if 5*n < all {
			return false
		}
	}
	return all > 0 && float64(10*s.Closest) >= s.Diagonal
}

// SpreadOf looks at the places of checkpoints within an area. Cost: n log n unless
// many share one x.
func SpreadOf(places []orb.Point, area orb.Bound) Spread {
	s := Spread{Closest: math.NaN(), Diagonal: length(area.Max[0]-area.Min[0], area.Max[1]-area.Min[1])}
	middle := area.Center()
	for _, p := range places {
		k := 0
		if p[0] >= middle[0] {
			k++
		}
		if p[1] >= middle[1] {
			k += 2
		}
		s.Quadrants[k]++
	}
	sorted := sortedByX(places)
	closest := math.Inf(1)
	for i, p := range sorted {
		for _, q := range sorted[i+1:] {
			if q[0]-p[0] >= closest {
				break
			}
			closest = min(closest, length(q[0]-p[0], q[1]-p[1]))
		}
	}
	if len(places) > 1 {
		s.Closest = closest
	}
	return s
}

func length(dx, dy float64) float64 { return math.Sqrt(float64(dx*dx) + float64(dy*dy)) }

func sortedByX(places []orb.Point) []orb.Point {
	sorted := slices.Clone(places)
	slices.SortFunc(sorted, func(a, b orb.Point) int { return cmp.Compare(a[0], b[0]) })
	return sorted
}
