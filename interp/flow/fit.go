package flow

import (
	"errors"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Plane is the least squares plane through heads.
type Plane struct {
	Wells    int
	Centre   orb.Point // the mean place
	Head     float64   // of the plane there: the mean head
	Gradient Gradient
	// Range is the highest head less the lowest.
	Range float64
	// Misfit is the standard deviation of the heads about the plane, the root of the
	// sum of squared residuals over Wells - 3; NaN for three wells. RMS divides by
	// Wells.
	Misfit, RMS float64
	// Worst is the well with the largest residual, head less plane, of several the first
	// by place.
	Worst         int
	WorstResidual float64
	// Across is the spread of the wells square to their longest direction, as a part
	// of that along it: 1 for wells all around, 0 for wells in line.
	Across float64
	// Sigma is the standard uncertainty of a head that the covariance rests on: the
	// one given or the misfit, whichever is larger; FromMisfit tells which.
	Sigma      float64
	FromMisfit bool
	given      float64 // the uncertainty given
}

// ErrInLine reports wells that are fewer than three or exactly in line.
var ErrInLine = errors.New("wells in line, or fewer than three: expected three that are not in line")

// Fit returns the plane with the least sum of squared residuals. sigma is the standard
// uncertainty of a head, NaN if unknown: then it is taken from the misfit, if there
// are more than three wells. Where the misfit is larger than sigma the plane does
// not describe the heads to their uncertainty, and the misfit is used as well: a
// direction is no more certain than the model.
//
// It returns ErrInLine. Time O(wells).
func Fit(wells []orb.Point, heads []float64, sigma float64) (*Plane, error) {
	return fit(wells, heads, sigma, nil)
}

// FitEach is Fit for heads that have an uncertainty each. The plane is the same; its
// covariance is that of a sum of heads of unlike uncertainty. Sigma is the root of their
// mean square.
func FitEach(wells []orb.Point, heads, sigmas []float64) (*Plane, error) {
	if len(sigmas) != len(heads) {
		panic("flow: as many uncertainties as heads expected")
	}
	if len(sigmas) == 0 {
		return nil, ErrInLine
	}
	if alike(sigmas) {
		return fit(wells, heads, sigmas[0], nil)
	}
	return fit(wells, heads, rootMeanSquare(sigmas), sigmas)
}

func alike(sigmas []float64) bool {
	for _, s := range sigmas {
		if s != sigmas[0] {
			return false
		}
	}
	return true
}

func rootMeanSquare(sigmas []float64) float64 {
	var sum exact.Sum
	for _, s := range sigmas {
		sum.AddProduct(s, s)
	}
	return math.Sqrt(sum.Value() / float64(len(sigmas)))
}

// fit is Fit, or FitEach if there are sigmas.
func fit(wells []orb.Point, heads []float64, sigma float64, sigmas []float64) (*Plane, error) {
	if len(wells) != len(heads) {
		panic("flow: as many heads as wells expected")
	}
	if inLine(wells) {
		return nil, ErrInLine
	}
	n := len(wells)
	p := &Plane{Wells: n, Sigma: sigma, given: sigma}
	p.Centre = orb.Point{mean(n, func(i int) float64 { return wells[i][0] }), mean(n, func(i int) float64 { return wells[i][1] })}
	p.Head = mean(n, func(i int) float64 { return heads[i] })

	// About the mean, rounded: what rounding left is corrected below.
	var su, sv, sw, suu, suv, svv, suw, svw exact.Sum
	low, high := math.Inf(1), math.Inf(-1)
	for i, at := range wells {
		u, v, w := at[0]-p.Centre[0], at[1]-p.Centre[1], heads[i]-p.Head
		su.Add(u)
		sv.Add(v)
		sw.Add(w)
		suu.AddProduct(u, u)
		suv.AddProduct(u, v)
		svv.AddProduct(v, v)
		suw.AddProduct(u, w)
		svw.AddProduct(v, w)
		low, high = min(low, heads[i]), max(high, heads[i])
	}
	p.Range = high - low
	about := func(s, a, b *exact.Sum) float64 { return s.Value() - float64(a.Value()*b.Value())/float64(n) }
	uu, uv, vv := about(&suu, &su, &su), about(&suv, &su, &sv), about(&svv, &sv, &sv)
	uw, vw := about(&suw, &su, &sw), about(&svw, &sv, &sw)
	det := difference(uu, vv, uv, uv)
	if !(det > 0) {
		return nil, ErrInLine
	}
	p.Gradient = Gradient{
		DzDx: difference(uw, vv, vw, uv) / det,
		DzDy: difference(vw, uu, uw, uv) / det,
		VarX: vv / det, VarY: uu / det, Cov: -uv / det,
	}
	p.Across = across(uu, uv, vv, det)
	p.residuals(wells, heads)
	p.settleSigma(sigma)
	if sigmas != nil && !p.FromMisfit {
		p.propagate(wells, sigmas, uu, uv, vv, det)
	}
	return p, nil
}

// Residual returns the head less that of the plane.
func (p *Plane) Residual(well orb.Point, head float64) float64 {
	return (head - p.Head) - (float64(p.Gradient.DzDx*(well[0]-p.Centre[0])) + float64(p.Gradient.DzDy*(well[1]-p.Centre[1])))
}

func (p *Plane) residuals(wells []orb.Point, heads []float64) {
	var sum exact.Sum
	p.Worst = -1
	for i, at := range wells {
		r := p.Residual(at, heads[i])
		sum.AddProduct(r, r)
		size, worst := math.Abs(r), math.Abs(p.WorstResidual)
		if p.Worst < 0 || size > worst || size == worst && exact.CompareXY(at, wells[p.Worst]) < 0 {
			p.Worst, p.WorstResidual = i, r
		}
	}
	p.RMS = math.Sqrt(sum.Value() / float64(p.Wells))
	p.Misfit = math.NaN()
	if p.Wells > 3 {
		p.Misfit = math.Sqrt(sum.Value() / float64(p.Wells-3))
	}
}

func (p *Plane) settleSigma(sigma float64) {
	if p.Misfit > sigma || math.IsNaN(sigma) {
		p.Sigma, p.FromMisfit = p.Misfit, p.Wells > 3
	}
	p.Gradient = p.Gradient.scaled(float64(p.Sigma * p.Sigma))
}

// propagate sets the covariance of the gradient from uncertainties of heads: the
// gradient is the sum of head times c_i, with c_i = (vv u - uv v, uu v - uv u) / det about
// the centre, and its covariance that of sigma_i² c_i c_iᵀ.
func (p *Plane) propagate(wells []orb.Point, sigmas []float64, uu, uv, vv, det float64) {
	var xx, yy, xy exact.Sum
	for i, at := range wells {
		u, v := at[0]-p.Centre[0], at[1]-p.Centre[1]
		cx := difference(vv, u, uv, v) / det * sigmas[i]
		cy := difference(uu, v, uv, u) / det * sigmas[i]
		xx.AddProduct(cx, cx)
		yy.AddProduct(cy, cy)
		xy.AddProduct(cx, cy)
	}
	p.Gradient.VarX, p.Gradient.VarY, p.Gradient.Cov = xx.Value(), yy.Value(), xy.Value()
}

// Noise is the standard uncertainty of a head that Fit was given; NaN if none. FitEach
// was given that of every head: then it is the root of their mean square.
func (p *Plane) Noise() float64 { return p.given }

// across is the root of the smaller eigenvalue over the larger one.
func across(uu, uv, vv, det float64) float64 {
	half := float64((uu + vv) / 2)
	d := (uu - vv) / 2
	large := half + math.Sqrt(float64(d*d)+float64(uv*uv))
	return math.Sqrt(det) / large // the product of the two is det
}

func mean(n int, value func(i int) float64) float64 {
	var s exact.Sum
	for i := range n {
		s.Add(value(i))
	}
	return s.Mean(n)
}

// inLine tells, exactly, whether there are no three places that make a triangle.
func inLine(places []orb.Point) bool {
	if len(places) < 3 {
		return true
	}
	a := places[0]
	for i, b := range places {
		if b == a {
			continue
		}
		for _, c := range places[i+1:] {
			if exact.Orient(a, b, c) != 0 {
				return false
			}
		}
		return true
	}
	return true
}

// Verdict says what a gradient is worth.
type Verdict uint8

// Verdicts, the most telling first.
const (
	Sound      Verdict = iota
	Level              // all heads are equal: no direction
	BelowNoise         // the heads differ by less than three times their uncertainty
	InLine             // the wells lie nearly in line: the part across is not known
	Vague              // the direction is less certain than 30 degrees
)

// String returns the words that outputs use.
func (v Verdict) String() string {
	return [...]string{"sound", "level", "head range below noise", "wells nearly in line", "direction uncertain"}[v]
}

// The limits of verdicts: common practice and rules of thumb.
const (
	// NoiseFactor times the uncertainty of a head is what heads must differ by.
	NoiseFactor = 3
	// AcrossLeast is the least spread across, as a part of that along: an angle of some
	// six degrees.
	AcrossLeast = 0.1
	// AzimuthSigmaMost is the largest standard uncertainty of a direction in degrees.
	AzimuthSigmaMost = 30
)

// Judge returns the verdict on a gradient from heads of a range, wells with a spread
// across, and the uncertainty of a head, NaN if unknown.
func Judge(g Gradient, headRange, across, sigma float64) Verdict {
	switch {
	case headRange == 0:
		return Level
	case headRange < float64(NoiseFactor*sigma):
		return BelowNoise
	case across < AcrossLeast:
		return InLine
	case g.AzimuthSigma() > AzimuthSigmaMost:
		return Vague
	}
	return Sound
}

// Verdict returns that on the plane. Noise is the uncertainty that Fit was given: that
// the plane misses the heads makes its direction vague.
func (p *Plane) Verdict() Verdict { return Judge(p.Gradient, p.Range, p.Across, p.given) }
