package geojson

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
	"isofacet/triangulate/exact"
)

// turn returns the direction of a closed ring as a reader of the text sees it, that is after rounding to places: +1
// counter-clockwise, -1 clockwise, 0 if no area is left.
//
// The area is that of the fan about the first position o. With e = 2^-53 and the sizes of all products adding up to m, the n
// differences, products and additions are off by at most (n + 4) e m together. What that bound does not decide, an
// exact sum does.
func turn(ring []orb.Point, places int) int {
	var area, size float64
	o := rounded(ring[0], places)
	var ux, uy float64
	for i := 1; i < len(ring); i++ {
		p := rounded(ring[i], places)
		vx, vy := p[0]-o[0], p[1]-o[1]
		a, b := float64(ux*vy), float64(uy*vx)
		area += a - b
		size += math.Abs(a) + math.Abs(b)
		ux, uy = vx, vy
	}
	if math.Abs(area) > float64(len(ring)+8)*0x1p-52*size {
		return sign(area)
	}
	var sum exact.Sum
	last := rounded(ring[len(ring)-1], places)
	for i := range ring {
		p := rounded(ring[i], places)
		sum.AddProduct(last[0], p[1])
		sum.AddProduct(-last[1], p[0])
		last = p
	}
	return sign(sum.Value())
}

func rounded(p orb.Point, places int) orb.Point {
	return orb.Point{numtext.Rounded(p[0], places), numtext.Rounded(p[1], places)}
}

func sign(v float64) int {
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}

// oneSpot reports whether all positions of a line are written alike. It looks no further than the first that is not.
func oneSpot(line []orb.Point, places int) bool {
	first := rounded(line[0], places)
	for _, p := range line[1:] {
		if rounded(p, places) != first {
			return false
		}
	}
	return true
}
