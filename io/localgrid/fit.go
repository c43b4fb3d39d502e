package localgrid

import (
	"fmt"
	"math"
	"math/big"

	"github.com/paulmach/orb"
)

// A Model is what a fit may do.
type Model uint8

// The models.
const (
	Similarity Model = iota
	Affine
)

func (m Model) String() string {
	if m == Affine {
		return "affine"
	}
	return "similarity"
}

// least is how many pairs settle a model.
func (m Model) least() int {
	if m == Affine {
		return 3
	}
	return 2
}

// A Pair is one place in both grids.
type Pair struct {
	ID       string
	Line     int // of its file, 0 without one
	From, To orb.Point
}

// A Transform leads places across: matrix times (p - From) plus To.
type Transform struct {
	// XX, XY, YX, YY are the rows of the matrix.
	XX, XY, YX, YY float64
	From, To       orb.Point
}

// Of leads a place across.
func (t *Transform) Of(p orb.Point) orb.Point {
	dx, dy := p[0]-t.From[0], p[1]-t.From[1]
	return orb.Point{
		t.To[0] + (float64(t.XX*dx) + float64(t.XY*dy)),
		t.To[1] + (float64(t.YX*dx) + float64(t.YY*dy)),
	}
}

// A Fit is a Transform with its account.
type Fit struct {
	Model     Model
	Transform Transform
	Pairs     []Pair
	// Residuals are, for each pair, where it should come to lie less where it does.
	Residuals []orb.Point
	// Largest is the longest residual, of pair Worst. RMS is the root of the mean of
	// their squared lengths.
	Largest, RMS float64
	Worst        int
	// Spare is how many coordinates there are beyond those that settle the model: 0
	// means that the residuals check nothing.
	Spare int
}

// Scale returns the factor by which lengths grow, of an affine map the root of that
// of areas, and the angle in degrees by which the grid is turned counter-clockwise.
// The angle is for people: it is not rounded alike on every processor.
func (f *Fit) Scale() (factor, turn float64) {
	t := &f.Transform
	factor = math.Sqrt(math.Abs(float64(t.XX*t.YY) - float64(t.XY*t.YX)))
	return factor, math.Atan2(t.YX-t.XY, t.XX+t.YY) * 180 / math.Pi
}

// An Error says why pairs do not make a fit.
type Error struct{ What, Expected string }

func (e *Error) Error() string { return e.What + ": expected " + e.Expected }

// PairsMost is how many pairs are taken: control of a site has dozens.
const PairsMost = 10000

// Make fits a model to pairs. Errors are *Error: too few pairs, too many, or such
// that do not settle the model (all at one place, or for an affine map in one line).
func Make(pairs []Pair, m Model) (*Fit, error) {
	switch n := len(pairs); {
	case n < m.least():
		return nil, &Error{fmt.Sprintf("%d pairs", n), fmt.Sprintf("at least %d, which settle a fit (%s), and more to check it", m.least(), m)}
	case n > PairsMost:
		return nil, &Error{fmt.Sprintf("%d pairs", n), fmt.Sprintf("at most %d", PairsMost)}
	}
	s := centre(pairs)
	matrix, ok := s.similarity()
	if m == Affine {
		matrix, ok = s.affine()
	}
	if !ok {
		if m == Affine {
			return nil, &Error{"pairs that lie in one line", "pairs around the site"}
		}
		return nil, &Error{"pairs that all lie at one place", "pairs around the site"}
	}
	f := &Fit{Model: m, Pairs: pairs, Residuals: make([]orb.Point, len(pairs)), Spare: 2 * (len(pairs) - m.least())}
	// The place that From rounds to is led across exactly, and only then rounded.
	from := [2]*big.Rat{}
	for k := range from {
		f.Transform.From[k] = float(s.from[k])
		from[k] = rat(f.Transform.From[k])
	}
	to := s.across(matrix, from)
	f.Transform.To = orb.Point{float(to[0]), float(to[1])}
	f.Transform.XX, f.Transform.XY = float(matrix[0][0]), float(matrix[0][1])
	f.Transform.YX, f.Transform.YY = float(matrix[1][0]), float(matrix[1][1])
	sum := new(big.Rat)
	longest := new(big.Rat)
	for i, p := range pairs {
		at := s.across(matrix, [2]*big.Rat{rat(p.From[0]), rat(p.From[1])})
		square := new(big.Rat)
		for k := range at {
			d := new(big.Rat).Sub(rat(p.To[k]), at[k])
			f.Residuals[i][k] = float(d)
			square.Add(square, d.Mul(d, d))
		}
		sum.Add(sum, square)
		if square.Cmp(longest) > 0 {
			longest, f.Worst = square, i
		}
	}
	f.Largest = math.Sqrt(float(longest))
	f.RMS = math.Sqrt(float(sum.Quo(sum, big.NewRat(int64(len(pairs)), 1))))
	return f, nil
}

func rat(v float64) *big.Rat { return new(big.Rat).SetFloat64(v) }

func float(r *big.Rat) float64 {
	f, _ := r.Float64()
	return f
}

type matrix [2][2]*big.Rat

// sums are the centroids, and the sums of products of what is counted from them.
type sums struct {
	from, to [2]*big.Rat
	own      matrix // own[j][k]: of coordinates j and k in the first grid
	cross    matrix // cross[j][k]: of coordinate j in the second and k in the first
}

// centre forms the sums.
func centre(pairs []Pair) *sums {
	s := &sums{}
	n := big.NewRat(int64(len(pairs)), 1)
	for k := range 2 {
		s.from[k], s.to[k] = new(big.Rat), new(big.Rat)
		for _, p := range pairs {
			s.from[k].Add(s.from[k], rat(p.From[k]))
			s.to[k].Add(s.to[k], rat(p.To[k]))
		}
		s.from[k].Quo(s.from[k], n)
		s.to[k].Quo(s.to[k], n)
	}
	for j := range 2 {
		for k := range 2 {
			s.own[j][k], s.cross[j][k] = new(big.Rat), new(big.Rat)
			for _, p := range pairs {
				x := new(big.Rat).Sub(rat(p.From[k]), s.from[k])
				y := new(big.Rat).Sub(rat(p.From[j]), s.from[j])
				z := new(big.Rat).Sub(rat(p.To[j]), s.to[j])
				s.own[j][k].Add(s.own[j][k], y.Mul(y, x))
				s.cross[j][k].Add(s.cross[j][k], z.Mul(z, x))
			}
		}
	}
	return s
}

// similarity solves for a matrix of the form (a, -b; b, a).
func (s *sums) similarity() (m matrix, ok bool) {
	size := new(big.Rat).Add(s.own[0][0], s.own[1][1])
	if size.Sign() == 0 {
		return m, false
	}
	a := new(big.Rat).Add(s.cross[0][0], s.cross[1][1])
	b := new(big.Rat).Sub(s.cross[1][0], s.cross[0][1])
	a.Quo(a, size)
	b.Quo(b, size)
	return matrix{{a, new(big.Rat).Neg(b)}, {b, a}}, true
}

// affine solves for any matrix: cross times the inverse of own.
func (s *sums) affine() (m matrix, ok bool) {
	mul := func(a, b *big.Rat) *big.Rat { return new(big.Rat).Mul(a, b) }
	det := mul(s.own[0][0], s.own[1][1])
	det.Sub(det, mul(s.own[0][1], s.own[1][0]))
	if det.Sign() == 0 {
		return m, false
	}
	for j := range 2 {
		x := mul(s.cross[j][0], s.own[1][1])
		x.Sub(x, mul(s.cross[j][1], s.own[1][0]))
		y := mul(s.cross[j][1], s.own[0][0])
		y.Sub(y, mul(s.cross[j][0], s.own[0][1]))
		m[j] = [2]*big.Rat{x.Quo(x, det), y.Quo(y, det)}
	}
	return m, true
}

// across leads a place across, exactly.
func (s *sums) across(m matrix, p [2]*big.Rat) (to [2]*big.Rat) {
	dx, dy := new(big.Rat).Sub(p[0], s.from[0]), new(big.Rat).Sub(p[1], s.from[1])
	for j := range to {
		x, y := new(big.Rat).Mul(m[j][0], dx), new(big.Rat).Mul(m[j][1], dy)
		to[j] = x.Add(x, y).Add(x, s.to[j])
	}
	return to
}
