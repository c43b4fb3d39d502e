package contour

import (
	"cmp"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Line is one isoline: a part of a level's lines in one piece.
type Line struct {
	Level Level
	// Closed: the last of the points repeats the first.
	Closed bool
	// Depression: closed, with lower ground inside.
	Depression bool
	// Points has at least two points, no two in a row equal. Higher ground is on the left. A closed line starts at its
	// smallest point in (x, y) order.
	Points orb.LineString
}

// Length returns the length of l in the unit of its coordinates: the lengths of its segments added exactly and
// rounded once, so that the sum does not depend on where a closed line starts. Some 15 ns a point.
func (l *Line) Length() float64 {
	var sum exact.Sum
	addLengths(&sum, l.Points)
	return sum.Value()
}

// addLengths adds the lengths of the segments between points to sum.
func addLengths(sum *exact.Sum, points []orb.Point) {
	for i := 1; i < len(points); i++ {
		dx, dy := points[i][0]-points[i-1][0], points[i][1]-points[i-1][1]
		sum.Add(math.Sqrt(float64(dx*dx) + float64(dy*dy)))
	}
}

// TotalLength returns the length of all lines together, added exactly and rounded once.
func TotalLength(lines []Line) float64 {
	var sum exact.Sum
	for i := range lines {
		addLengths(&sum, lines[i].Points)
	}
	return sum.Value()
}

// comparePoints orders point sequences by their first point, then the second, and so on.
func comparePoints(a, b []orb.Point) int {
	for i := range min(len(a), len(b)) {
		if c := exact.CompareXY(a[i], b[i]); c != 0 {
			return c
		}
	}
	return cmp.Compare(len(a), len(b))
}

// clockwise reports whether the ring (its last point repeats the first, or not) goes round clockwise in all: whether
// its signed area is below zero, exactly.
func clockwise(ring []orb.Point) bool {
	// Areas relative to the first point, as a fan. With e = 2^-53, n terms whose products have sizes that add up to
	// m: differences, products, their difference and the additions are off by (n + 4) e m at most.
	var area, size float64
	o := ring[0]
	for i := 2; i < len(ring); i++ {
		ux, uy := ring[i-1][0]-o[0], ring[i-1][1]-o[1]
		vx, vy := ring[i][0]-o[0], ring[i][1]-o[1]
		p, q := float64(ux*vy), float64(uy*vx)
		area += p - q
		size += math.Abs(p) + math.Abs(q)
	}
	if math.Abs(area) > float64(len(ring)+8)*0x1p-52*size {
		return area < 0
	}
	var sum exact.Sum
	last := ring[len(ring)-1]
	for _, p := range ring {
		sum.AddProduct(last[0], p[1])
		sum.AddProduct(-last[1], p[0])
		last = p
	}
	return sum.Value() < 0
}
