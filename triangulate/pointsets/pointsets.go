package pointsets

import (
	"math"
	"strconv"

	"github.com/paulmach/orb"
)

// A Distribution is a named way to make points.
type Distribution struct {
	Name   string                               // as it stands in benchmark names
	Points func(n int, seed uint64) []orb.Point // n points; same arguments, same points
}

// All lists the distributions that every stage is measured on, in the order
// of the published tables.
var All = []Distribution{
	{"uniform", Uniform},
	{"clustered", Clustered},
	{"scanlines", ScanLines},
	{"survey", Survey},
	{"unit-lattice", UnitLattice},
	{"lattice-0.1m", Lattice01},
	{"circles", Circle},
}

// Sizes returns the numbers of points that benchmarks run at: 1e5, 1e6 and,
// when huge is set, 1e7.
func Sizes(huge bool) []int {
	if huge {
		return []int{1e5, 1e6, 1e7}
	}
	return []int{1e5, 1e6}
}

// SizeName returns the last part of a benchmark's name: "n=1e6" for a power
// of ten, "n=1234" for any other number.
func SizeName(n int) string {
	zeros := 0
	for m := n; m >= 10 && m%10 == 0; m /= 10 {
		if zeros++; m == 10 {
			return "n=1e" + strconv.Itoa(zeros)
		}
	}
	return "n=" + strconv.Itoa(n)
}

// Uniform fills the unit square [0, 1) x [0, 1) evenly.
func Uniform(n int, seed uint64) []orb.Point {
	r := random{seed}
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{r.unit(), r.unit()}
	}
	return pts
}

// Clustered gathers the points about centres that lie evenly in the unit
// square, one centre for every thousand points. Half of the clusters are
// 2^-4 wide, a quarter 2^-5 and so on down to 2^-20, so that the density
// varies by many powers of ten, as it does where a site is surveyed in detail
// and its surroundings are not.
func Clustered(n int, seed uint64) []orb.Point {
	r := random{seed}
	type cluster struct{ x, y, size float64 }
	clusters := make([]cluster, n/1000+4)
	for i := range clusters {
		size := 1.0 / 16
		for size > 1.0/(1<<20) && r.next()&1 == 1 {
			size /= 2
		}
		clusters[i] = cluster{r.unit(), r.unit(), size}
	}
	pts := make([]orb.Point, n)
	for i := range pts {
		c := clusters[r.below(len(clusters))]
		pts[i] = orb.Point{
			c.x + float64(c.size*r.bell()),
			c.y + float64(c.size*r.bell()),
		}
	}
	return pts
}

// Kuzmin puts the points into one disc about the origin whose density falls
// with the 3/2 power of 1 + distance squared: most are within a few units,
// the farthest at about n.
func Kuzmin(n int, seed uint64) []orb.Point {
	r := random{seed}
	pts := make([]orb.Point, n)
	for i := range pts {
		// The share of points within distance d is 1 - 1/sqrt(1+d²).
		s := 1 / (1 - r.unit())
		d := math.Sqrt(float64(s*s) - 1)
		// A direction without sine and cosine: a place in the unit disc,
		// taken by rejection, pushed out to the circle.
		for {
			x, y := float64(2*r.unit())-1, float64(2*r.unit())-1
			if q := float64(x*x) + float64(y*y); q > 0 && q <= 1 {
				d /= math.Sqrt(q)
				pts[i] = orb.Point{d * x, d * y}
				break
			}
		}
	}
	return pts
}

// ScanLines follows parallel lines to and fro, as a sonar or a mower does:
// 0.25 m from point to point, 5 m from line to line, wandering up to 0.1 m
// to each side, written to the millimetre. The field is about square; points
// come in the order of travel.
func ScanLines(n int, seed uint64) []orb.Point {
	const along, across, wander = 250, 5000, 100 // millimetres
	r := random{seed}
	perLine := max(1, int(math.Sqrt(float64(n)*across/along)))
	pts := make([]orb.Point, n)
	for i := range pts {
		line, k := i/perLine, i%perLine
		if line%2 == 1 {
			k = perLine - 1 - k
		}
		x := k*along + r.below(along/2) // never out of turn
		y := line*across + r.below(2*wander+1)
		pts[i] = orb.Point{float64(x) / 1000, float64(y) / 1000}
	}
	return pts
}

// Survey spreads shots evenly over a square whose lower left corner is at
// (500000, 4600000), one for every four square metres on average, written to
// the millimetre. A few may coincide.
func Survey(n int, seed uint64) []orb.Point {
	const x0, y0 = 500_000_000, 4_600_000_000 // millimetres
	r := random{seed}
	side := 1 + int(2000*math.Sqrt(float64(n)))
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{
			float64(x0+r.below(side)) / 1000,
			float64(y0+r.below(side)) / 1000,
		}
	}
	return pts
}

// UnitLattice holds the first n nodes, row by row, of a square lattice with
// step 1 at the origin. Seed 0 keeps them in that order; any other seed
// shuffles them. All are distinct, and every cell's corners lie on a circle.
func UnitLattice(n int, seed uint64) []orb.Point {
	return lattice(n, seed, 0, 0, 1)
}

// Lattice01 is like UnitLattice with a step of 0.1 m and its first node at
// (430000, 5600000). In doubles its cells are not quite square: every
// in-circle test is nearly, but not always, a tie.
func Lattice01(n int, seed uint64) []orb.Point {
	return lattice(n, seed, 4_300_000, 56_000_000, 10)
}

func lattice(n int, seed uint64, x0, y0, perUnit int) []orb.Point {
	cols := 0
	for cols*cols < n {
		cols++
	}
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{
			float64(x0+i%cols) / float64(perUnit),
			float64(y0+i/cols) / float64(perUnit),
		}
	}
	if seed != 0 {
		Shuffle(pts, seed)
	}
	return pts
}

// Shuffle puts pts into an order that only its length and the seed decide
// (Fisher and Yates).
func Shuffle(pts []orb.Point, seed uint64) {
	r := random{seed}
	for i := len(pts) - 1; i > 0; i-- {
		j := r.below(i + 1)
		pts[i], pts[j] = pts[j], pts[i]
	}
}

// Heights returns one smooth value for each point, 90 to 110 or so, written
// to the millimetre: a saddle with a hill over the bounding box of pts. Equal
// positions get equal heights.
func Heights(pts []orb.Point) []float64 {
	b := orb.MultiPoint(pts).Bound()
	w, h := b.Max[0]-b.Min[0], b.Max[1]-b.Min[1]
	z := make([]float64, len(pts))
	for i, p := range pts {
		u, v := 0.0, 0.0 // -1 to 1 over the box
		if w > 0 {
			u = float64(2*((p[0]-b.Min[0])/w)) - 1
		}
		if h > 0 {
			v = float64(2*((p[1]-b.Min[1])/h)) - 1
		}
		uu, vv := float64(u*u), float64(v*v)
		mm := 100_000 + float64(4000*(float64(uu*u)-float64(u*vv))) + 6000/(1+float64(8*(uu+vv)))
		z[i] = math.Round(mm) / 1000
	}
	return z
}
