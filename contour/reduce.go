package contour

import (
	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// The lines that follow the triangles are right by the edges that they pass. In coordinates several edges may be
// crossed at one place: where a reading equals the level (all edges at it are crossed in it) or where rounding makes
// places equal. What is then left to do is to take out pieces without length, and spikes:
//
//	a-----b       the way a b a goes there and back: b is taken out, and then one a.
//	a---c-b       the same if the way back ends on the way there, which only rounding does.
//
// Taking out spikes changes neither the area that closed lines and the outline enclose nor the order of what is left.

// isSpike reports whether the way from a to b turns back at b on itself towards c. The points a, b differ.
func isSpike(a, b, c orb.Point) bool {
	ux, uy := b[0]-a[0], b[1]-a[1]
	vx, vy := c[0]-b[0], c[1]-b[1]
	// Of a way back the product is far from zero: rounding cannot change its sign.
	return float64(ux*vx)+float64(uy*vy) < 0 && exact.OrientXY(a[0], a[1], b[0], b[1], c[0], c[1]) == 0
}

// reduceOpen takes equal neighbours and spikes out of the line, in place, from its start on. What is left has one
// point if the line has no length.
func reduceOpen(points []orb.Point) []orb.Point {
	if len(points) == 0 {
		return points
	}
	n := 1
	for _, p := range points[1:] {
		for n >= 2 && isSpike(points[n-2], points[n-1], p) {
			n--
		}
		if p != points[n-1] {
			points[n] = p
			n++
		}
	}
	return points[:n]
}

// reduceClosed does the same for a closed line whose last point does not repeat the first, and turns it so that it
// starts at its smallest point. What is left is empty if the line encloses nothing. The result does not depend
// on the point at which the line is given to start.
func reduceClosed(points []orb.Point) []orb.Point {
	for len(points) > 1 && points[len(points)-1] == points[0] {
		points = points[:len(points)-1]
	}
	if len(points) < 3 {
		return nil
	}
	rotate(points, smallestStart(points))
	if hasSpike(points) {
		if points = reduceTurned(points); len(points) < 3 {
			return nil
		}
		rotate(points, smallestStart(points))
	}
	return points
}

// hasSpike reports whether the closed line has equal neighbours or a spike.
func hasSpike(points []orb.Point) bool {
	a, b := points[len(points)-2], points[len(points)-1]
	for _, c := range points {
		if b == c || isSpike(a, b, c) {
			return true
		}
		a, b = b, c
	}
	return false
}

// reduceTurned is reduceClosed for a line that starts at its smallest point.
func reduceTurned(points []orb.Point) []orb.Point {
	points = reduceOpen(points)
	// What spans the end and the start.
	for {
		n := len(points)
		switch {
		case n < 3:
			return nil
		case points[n-1] == points[0] || isSpike(points[n-2], points[n-1], points[0]):
			points = points[:n-1]
		case isSpike(points[n-1], points[0], points[1]):
			points = points[1:]
		default:
			return points
		}
	}
}

// smallestStart returns the place of the smallest point of a closed line. If the line visits it several times, the
// way on from it decides.
func smallestStart(points []orb.Point) int {
	at := 0
	for i := 1; i < len(points); i++ {
		c := exact.CompareXY(points[i], points[at])
		if c < 0 || c == 0 && smallerWay(points, i, at) {
			at = i
		}
	}
	return at
}

// smallerWay reports whether the closed line read from i on comes before the same read from j on.
func smallerWay(points []orb.Point, i, j int) bool {
	for range points {
		if c := exact.CompareXY(points[i], points[j]); c != 0 {
			return c < 0
		}
		if i++; i == len(points) {
			i = 0
		}
		if j++; j == len(points) {
			j = 0
		}
	}
	return false
}

// rotate turns points round in place so that number first becomes number 0.
func rotate(points []orb.Point, first int) {
	if first == 0 {
		return
	}
	reverse(points[:first])
	reverse(points[first:])
	reverse(points)
}

func reverse(points []orb.Point) {
	for i, j := 0, len(points)-1; i < j; i, j = i+1, j-1 {
		points[i], points[j] = points[j], points[i]
	}
}
