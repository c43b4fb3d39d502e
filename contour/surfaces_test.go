package contour

import (
	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/triangulate/pointsets"
)

// sample is points with values, and levels to draw.
type sample struct {
	pts    []orb.Point
	z      []float64
	levels []float64
}

// lattice is a random lattice of small whole values: plateaus, saddles, ridges and rims at the level abound.
func lattice(t *rapid.T) sample {
	cols, rows := rapid.IntRange(2, 7).Draw(t, "cols"), rapid.IntRange(2, 7).Draw(t, "rows")
	top := rapid.IntRange(1, 3).Draw(t, "top")
	values := rapid.SliceOfN(rapid.IntRange(0, top), cols*rows, cols*rows).Draw(t, "values")
	var s sample
	for i, v := range values {
		s.pts = append(s.pts, orb.Point{float64(i % cols), float64(i / cols)})
		s.z = append(s.z, float64(v))
	}
	s.levels = []float64{0.5, 1, 1.5, 2, 3}
	return s
}

// scattered is random points with small whole values.
func scattered(t *rapid.T) sample {
	n := rapid.IntRange(3, 40).Draw(t, "n")
	var s sample
	for range n {
		s.pts = append(s.pts, orb.Point{float64(rapid.IntRange(0, 10_000).Draw(t, "x")) / 1001, float64(rapid.IntRange(-5000, 5000).Draw(t, "y")) / 1003})
		s.z = append(s.z, float64(rapid.IntRange(0, 4).Draw(t, "z")))
	}
	s.levels = []float64{0.25, 1, 2, 2.5, 3, 4}
	return s
}

// wall is millimetre slivers along a wall at (430000, 5600000): its foot and its head a millimetre apart or less,
// in a slanting line, metres between the readings.
func wall(t *rapid.T) sample {
	n := rapid.IntRange(2, 9).Draw(t, "n")
	slope := rapid.Float64Range(-2, 2).Draw(t, "slope")
	var s sample
	for i := range n {
		x := float64(i) + rapid.Float64Range(0, 0.5).Draw(t, "x")
		gap := rapid.SampledFrom([]float64{0.001, 0.0005, 1e-6, 1e-8}).Draw(t, "gap")
		foot, head := rapid.IntRange(0, 20).Draw(t, "foot"), rapid.IntRange(20, 40).Draw(t, "head")
		y := slope * x
		s.pts = append(s.pts, orb.Point{430000 + x, 5600000 + y}, orb.Point{430000 + x, 5600000 + y + gap})
		s.z = append(s.z, float64(foot)/10, float64(head)/10)
	}
	for k := range 20 {
		s.levels = append(s.levels, float64(2*k+1)/10)
	}
	return s
}

// needles is readings that are on lines but for rounding, at map coordinates: along the hull, triangles thinner than the
// step between doubles.
func needles(t *rapid.T) sample {
	var s sample
	for range rapid.IntRange(1, 3).Draw(t, "lines") {
		x0, y0 := rapid.Float64Range(0, 50).Draw(t, "x0"), rapid.Float64Range(0, 50).Draw(t, "y0")
		dx, dy := rapid.Float64Range(-3, 3).Draw(t, "dx"), rapid.Float64Range(-3, 3).Draw(t, "dy")
		for i := range rapid.IntRange(2, 10).Draw(t, "n") {
			s.pts = append(s.pts, orb.Point{430000 + x0 + float64(i)*dx, 5600000 + y0 + float64(i)*dy})
			s.z = append(s.z, float64(rapid.IntRange(0, 50).Draw(t, "z"))/10)
		}
	}
	s.levels = []float64{0.05, 0.5, 1, 1.75, 2, 2.5, 3.01, 4, 4.5}
	return s
}

// crowd is readings a few steps between doubles apart, and levels next to each other: everything rounds.
func crowd(t *rapid.T) sample {
	n := rapid.IntRange(3, 30).Draw(t, "n")
	span := rapid.IntRange(1, 12).Draw(t, "span")
	var s sample
	for range n {
		x, y := rapid.IntRange(0, span).Draw(t, "x"), rapid.IntRange(0, span).Draw(t, "y")
		s.pts = append(s.pts, orb.Point{430000 + float64(x)*0x1p-34, 5600000 + float64(y)*0x1p-30})
		s.z = append(s.z, float64(rapid.IntRange(0, 12).Draw(t, "z"))/4)
	}
	s.levels = []float64{0.3, 0.5, 0.75, 0.76, 1, 1.5, 1.6, 1.7, 2, 2.25, 2.9}
	return s
}

// near is readings with values within some ulps of the levels: crossings about a reading are closer to it than
// coordinates are rounded.
func near(t *rapid.T) sample {
	n := rapid.IntRange(4, 25).Draw(t, "n")
	var s sample
	for range n {
		s.pts = append(s.pts, orb.Point{1000 + float64(rapid.IntRange(0, 20).Draw(t, "x"))/4, 2000 + rapid.Float64Range(0, 5).Draw(t, "y")})
		z := float64(rapid.IntRange(0, 3).Draw(t, "z"))
		off := rapid.SampledFrom([]float64{0, 0, 1e-16, -1e-16, 1e-15, -1e-15, 1e-13, -1e-13, 1e-12, -1e-12}).Draw(t, "off")
		s.z = append(s.z, z+off)
	}
	s.levels = []float64{0.5, 1, 1 + 1e-15, 2, 2 + 1e-13, 3}
	return s
}

// oneValue keeps the first value of points at one place, and drops the repetitions.
func (s sample) oneValue() sample {
	seen := map[orb.Point]bool{}
	out := sample{levels: s.levels}
	for i, p := range s.pts {
		if !seen[p] {
			seen[p] = true
			out.pts, out.z = append(out.pts, p), append(out.z, s.z[i])
		}
	}
	return out
}

func (s sample) levelSet() Levels {
	var levels Levels
	for _, z := range s.levels {
		levels = append(levels, levelAt(z))
	}
	return levels
}

// samples are the kinds of hard surface, by name.
var samples = map[string]func(*rapid.T) sample{
	"lattice": lattice, "scattered": scattered, "wall": wall, "needles": needles, "crowd": crowd, "near": near,
}

// rotatedLattice is a lattice turned by an angle, at map coordinates: rounding bends its rim, so that needles lie along it.
func rotatedLattice(n int) []orb.Point {
	const sin, cos = 0.42261826174069944, 0.9063077870366499 // of 25 degrees
	var pts []orb.Point
	for i := range n {
		for j := range n {
			x, y := float64(i), float64(j)
			pts = append(pts, orb.Point{430000 + (float64(x*cos) - float64(y*sin)), 5600000 + (float64(x*sin) + float64(y*cos))})
		}
	}
	pointsets.Shuffle(pts, 3)
	return pts
}
