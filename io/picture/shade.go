package picture

import "math"

// Relief is shaded after Lambert: the light that a matt surface sends back is the cosine of the angle between its normal
// and the direction to the light. The light comes from the north-west, 45 degrees high.
//
// With slopes p to the east and q to the north the normal is (-p, -q, 1) and the light (-1/2, 1/2, 1/sqrt 2), both east, north, up:
//
//	shade = (p/2 - q/2 + 1/sqrt 2) / sqrt(p² + q² + 1)

// slopes returns the rise to the east and to the north at a value, from the neighbours on both sides, or from one side and the value itself.
// What has no neighbour counts as level.
func (f *field) slopes(row, col int) (p, q float64) {
	v := f.at(row, col)
	p = between(f.at(row, col-1), v, f.at(row, col+1)) / f.cellX
	q = between(f.at(row+1, col), v, f.at(row-1, col)) / f.cellY
	return p, q
}

// between returns the rise a step at b, between a and c a step away.
func between(a, b, c float64) float64 {
	switch {
	case a == a && c == c:
		return (c - a) / 2
	case c == c:
		return c - b
	case a == a:
		return b - a
	}
	return 0
}

// wantedSlope is the mean slope at which relief reads well (tried).
const wantedSlope = 0.35

// exaggeration returns the round number that heights are multiplied by for the shading: such that the mean slope
// comes near wantedSlope, and at least 1. It is 1 for a level surface.
func (f *field) exaggeration() float64 {
	sum, n := 0.0, 0
	for row := range f.rows {
		for col := range f.cols {
			if v := f.at(row, col); v == v {
				p, q := f.slopes(row, col)
				if s := length(p, q); isFinite(s) {
					sum += s
					n++
				}
			}
		}
	}
	if mean := sum / float64(max(n, 1)); mean > 0 && mean < wantedSlope {
		return max(1, roundDown(wantedSlope/mean).Float64())
	}
	return 1
}

// level is the shade of level ground, the sine of 45 degrees.
var level = math.Sqrt(0.5)

// shade returns the light at a value, in parts of that of level ground times fullLight: from 0 to sqrt 2 of it.
func (f *field) shade(row, col int, times float64) uint32 {
	p, q := f.slopes(row, col)
	p, q = float64(p*times), float64(q*times)
	s := (float64(0.5*p) - float64(0.5*q) + level) / math.Sqrt(float64(p*p)+float64(q*q)+1)
	if !(s > 0) { // turned away, or a slope beyond numbers
		return 0
	}
	return uint32(math.RoundToEven(float64(fullLight * (s / level))))
}

// shaded returns a colour under a shade: darker down to a quarter, lighter towards white, and itself on level ground.
func shaded(l lights, shade uint32) lights {
	if shade <= fullLight {
		return mix(lights{l[0] / 4, l[1] / 4, l[2] / 4}, l, shade, fullLight)
	}
	// sqrt 2 of level light mixes in a third of white.
	return mix(l, lights{fullLight, fullLight, fullLight}, (shade-fullLight)*4/5, fullLight)
}
