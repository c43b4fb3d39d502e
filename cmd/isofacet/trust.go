package main

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/interp/suspect"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// How far values can be trusted, beside the values themselves.
const (
	showUncertainty = "uncertainty"
	showDistance    = "distance"
	showLeaveOneOut = "leave-one-out"
)

// trustNames are what can be shown of it.
var trustNames = []string{showUncertainty, showDistance, showLeaveOneOut}

// trustLong is said in the help of every command that shows them.
const trustLong = `uncertainty is the standard uncertainty of a value, in the unit of z: the root of
the sum of the three squared weights times the squared standard uncertainties of the
readings (a column sigma, or --sigma for all). It holds the readings' own uncertainty
and nothing else: not that the ground between them is no plane. leave-one-out holds
both, from experience: what readings about a place lie off when each is expected from
the others (1.4826 times the median absolute deviation, blunders left out), between
readings along the triangles. It is rather too large than too small: without a
reading the next ones are further away. distance is that to the nearest reading or
vertex of a line, in the unit of x and y.`

// trustIncludes says in a record what a quantity includes.
func trustIncludes(name string) string {
	switch name {
	case showUncertainty:
		return "the readings' own standard uncertainties by their weights; not what the ground does between readings"
	case showDistance:
		return "the distance to the nearest reading or vertex of a line"
	case showLeaveOneOut:
		return "what readings about a place lie off when expected from the others: their own uncertainty and what the ground does between them"
	}
	return ""
}

// sigmaOptionText is what --sigma is, in every command.
const sigmaOptionText = "standard uncertainty of readings and vertices of lines that have none of their own, in the unit of z"

// trusting is what the command line says of uncertainty.
type trusting struct {
	sigma option.Number
}

func (t *trusting) trustOptions(group string) []manual.Option {
	zero := decimal.FromInt(0)
	t.sigma = option.Number{Least: &zero}
	return []manual.Option{
		{Group: group, Name: "sigma", Value: &t.sigma, Default: "the readings' column sigma",
			Text: sigmaOptionText},
	}
}

// trust gives quantities at places.
type trust struct {
	p *program
	l *loaded
	r *reading
	t *trusting

	sigma   []float64 // of every vertex, once it is wanted
	nearest *interp.Nearest
	scales  *interp.Surface
}

// prepare makes ready for one of trustNames.
func (t *trust) prepare(ctx context.Context, name string) (err error) {
	m := t.l.surface.Mesh()
	switch {
	case name == showUncertainty && t.sigma == nil:
		t.sigma, err = t.l.sigmas(t.r, t.t)
	case name == showDistance && t.nearest == nil:
		if m.HasConstraints() {
			if err := t.p.announce("the nearest readings", uint64(m.NumVertices())*(bytesVertex+bytesReading)); err != nil {
				return err
			}
		}
		t.nearest, err = t.l.surface.Nearest(ctx, triangulate.Options{Workers: t.p.workers()})
	case name == showLeaveOneOut && t.scales == nil:
		t.scales, err = t.p.localScales(ctx, t.l)
	}
	return err
}

// raster turns a raster of values, no-data outside, into one of the quantity.
func (t *trust) raster(ctx context.Context, g *grid.Grid, name string) error {
	switch name {
	case showUncertainty:
		return g.Each(ctx, t.p.workers(), func() func(orb.Point) float64 {
			at := t.l.surface.Sampler()
			return func(p orb.Point) float64 { return t.l.surface.Uncertainty(at.Next(p).Location, p, t.sigma) }
		})
	case showDistance:
		return g.Each(ctx, t.p.workers(), func() func(orb.Point) float64 {
			f := t.nearest.Finder()
			return func(p orb.Point) float64 {
				_, d := f.At(p)
				return d
			}
		})
	}
	return g.Each(ctx, t.p.workers(), func() func(orb.Point) float64 {
		at := t.scales.Sampler()
		return func(p orb.Point) float64 { return at.Next(p).Z }
	})
}

// at returns the quantity at a place of the surface whose location is known.
func (t *trust) at(name string, loc triangulate.Location, p orb.Point, finder *interp.Finder) float64 {
	switch name {
	case showUncertainty:
		return t.l.surface.Uncertainty(loc, p, t.sigma)
	case showDistance:
		_, d := finder.At(p)
		return d
	}
	return t.scales.Value(loc, p)
}

// digits returns the digits after the point of a quantity.
func trustDigits(l *loaded, d option.Decimals, name string) int {
	xy, z := l.digits(d)
	if name == showDistance {
		return xy
	}
	return z
}

// sigmas returns the standard uncertainty of every vertex.
func (l *loaded) sigmas(r *reading, t *trusting) ([]float64, error) {
	m := l.surface.Mesh()
	sigma := make([]float64, m.NumVertices())
	column := l.set.Has(readings.Sigma)
	if !column && !t.sigma.IsSet() {
		return nil, status.Usage(errors.New("uncertainty without a standard uncertainty of the readings: expected a column sigma or --sigma S"),
			"a column of another name becomes it with --columns sigma=NAME; leave-one-out needs none")
	}
	for v, i := range m.Inputs() {
		own, ok, err := 0.0, false, error(nil)
		if column && int(i) < l.set.Len() {
			own, ok, err = sigmaOf(l.set, int(i), r)
		}
		switch {
		case err != nil:
			return nil, status.With(status.WrongData, fmt.Errorf("%s: %w", l.inputPlace(int(i)), err), sigmaHint)
		case ok:
			sigma[v] = own
		case t.sigma.IsSet():
			sigma[v] = t.sigma.Value.Float64()
		default:
			return nil, status.With(status.WrongData, fmt.Errorf("%s: no sigma: expected one for every reading and vertex of a line", l.inputPlace(int(i))),
				"--sigma S says what holds where there is none")
		}
	}
	return sigma, nil
}

const sigmaHint = "a standard uncertainty has the unit of z"

// sigmaOf is what the column sigma says of a reading, if it says anything.
func sigmaOf(set *readings.Set, i int, r *reading) (sigma float64, ok bool, err error) {
	text := set.Text(readings.Sigma, i)
	if text == "" {
		return 0, false, nil
	}
	written := text
	if set.Layouts[set.Source(i)].Decimal == readings.DecimalComma {
		text = strings.Replace(text, ",", ".", 1)
	}
	s, err := strconv.ParseFloat(text, 64)
	if err != nil || !(s >= 0) || !isFinite(s) {
		return 0, false, fmt.Errorf("sigma %q: expected a number, 0 or more", written)
	}
	return r.z.Of(s), true, nil
}

// localScales is the surface of what readings lie off when expected from the others.
func (p *program) localScales(ctx context.Context, l *loaded) (*interp.Surface, error) {
	m := l.surface.Mesh()
	if err := p.announce("leaving out one reading after the other", uint64(m.NumVertices())*(bytesSuspect+bytesVertex)); err != nil {
		return nil, err
	}
	_, finish := p.display.Stage("leaving out one by one")
	defer finish()
	left, err := l.surface.LeaveOneOut(ctx, p.workers())
	if err != nil {
		return nil, err
	}
	res, err := suspect.Find(ctx, l.surface, left, suspect.Options{ScaleLeast: decimal.Float64(1, l.decimalsZ), Workers: p.workers()})
	if err != nil {
		return nil, err
	}
	if res.Judged == 0 {
		return nil, status.With(status.WrongData, fmt.Errorf("leave-one-out: of %s too few lie inside the outline: expected at least eight two and more edges from one of them", counted(l.set.Len(), "reading")),
			"distance and uncertainty need no others")
	}
	return interp.New(m, l.surface.Spread(res.Scale))
}

// parseTrust reads a list of trustNames.
func parseTrust(text string) ([]string, error) {
	var list []string
	for word := range strings.SplitSeq(text, ",") {
		if !slices.Contains(trustNames, word) || slices.Contains(list, word) {
			return nil, errors.New("some of " + strings.Join(trustNames, ", ") + ", each once, with commas between")
		}
		list = append(list, word)
	}
	return list, nil
}
