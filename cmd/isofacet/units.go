package main

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/io/lines"
	"isofacet/io/localgrid"
	"isofacet/io/readings"
	"isofacet/io/units"
)

// measures is what the command line says of units, and of the grid of a site.
type measures struct {
	xyUnit, zUnit     parsed[units.Unit]
	toXYUnit, toZUnit parsed[units.Unit]
	fit               typed
	fitModel          option.Choice
	fitWithin         option.Number

	// mixedSettled is set where a command deals with z in another unit than x and y.
	mixedSettled bool

	xy, z units.Conversion
	local *localgrid.Fit
}

// groupUnits is the group of the units.
const groupUnits = "Units and local grids"

// measureOptions returns the options of every command that reads readings.
func (m *measures) measureOptions() []manual.Option {
	zero := decimal.FromInt(0)
	for _, u := range []*parsed[units.Unit]{&m.xyUnit, &m.zUnit, &m.toXYUnit, &m.toZUnit} {
		*u = parsed[units.Unit]{form: "m|ft-int|ft-us", parse: parseUnit}
	}
	m.fit, m.fitWithin = typed{form: "PAIRS"}, option.Number{Least: &zero}
	m.fitModel = option.NewChoice(localgrid.Similarity.String(), localgrid.Affine.String())
	const group = groupUnits
	return []manual.Option{
		{Group: group, Name: "xy-unit", Value: &m.xyUnit, Default: "unstated",
			Text: "unit of x and y in readings, lines and the table of wells: metre, international foot (0.3048 m) or US survey foot (1200/3937 m)"},
		{Group: group, Name: "z-unit", Value: &m.zUnit, Default: "unstated", Text: "unit of heights and depths there"},
		{Group: group, Name: "to-xy-unit", Value: &m.toXYUnit, Default: "that of --xy-unit",
			Text: "convert x and y to this unit, in which outputs, places asked for and all other options are"},
		{Group: group, Name: "to-z-unit", Value: &m.toZUnit, Default: "that of --z-unit", Text: "convert heights to this unit, likewise"},
		{Group: group, Name: "fit", Value: &m.fit,
			Text: "lead x and y to another grid by a file of pairs with the columns id, from_x, from_y, to_x, to_y; their residuals are printed"},
		{Group: group, Name: "fit-model", Value: &m.fitModel, Text: "similarity: turn, shift and one scale; affine: stretch and skew as well"},
		{Group: group, Name: "fit-within", Value: &m.fitWithin, Text: "the largest residual of --fit to accept, in the unit of the pairs' second grid"},
	}
}

func parseUnit(text string) (units.Unit, error) {
	u, err := units.Parse(text)
	if e, ok := errors.AsType[*units.Error](err); ok {
		return u, errors.New(e.Expected())
	}
	return u, nil
}

// xyOut and zOut are the units of the outputs, empty where unstated.
func (m *measures) xyOut() string { return unitLabel(m.xyUnit.value, m.toXYUnit.value) }
func (m *measures) zOut() string  { return unitLabel(m.zUnit.value, m.toZUnit.value) }

func unitLabel(from, to units.Unit) string {
	if to != units.Unstated {
		from = to
	}
	if from == units.Unstated {
		return ""
	}
	return from.String()
}

// settleUnits works out the conversions and the fit, before anything is read.
func (p *program) settleUnits(m *measures) error {
	for _, u := range []struct {
		name     string
		from, to units.Unit
		c        *units.Conversion
	}{{"xy", m.xyUnit.value, m.toXYUnit.value, &m.xy}, {"z", m.zUnit.value, m.toZUnit.value, &m.z}} {
		if u.to == units.Unstated {
			continue
		}
		c, ok := units.Between(u.from, u.to)
		if !ok {
			return status.Usage(fmt.Errorf("--to-%s-unit %s without --%s-unit: expected the unit that the readings have", u.name, u.to, u.name),
				"an unstated unit is never converted: say --"+u.name+"-unit as well")
		}
		if *u.c = c; c.Changes() {
			by, over := c.Ratio()
			p.report.Note(fmt.Sprintf("units: %s from %s to %s: times %d/%d, exactly", u.name, u.from, u.to, by, over), "axis", u.name, "from", u.from.String(), "to", u.to.String())
		}
	}
	if xy, z := m.xyOut(), m.zOut(); xy != z && xy != "" && z != "" && !m.mixedSettled {
		p.report.Warn("mixed-units", fmt.Sprintf("x and y are in %s and z is in %s: slopes, areas and volumes mix the two", xy, z), "xy", xy, "z", z)
	}
	return p.settleFit(m)
}

// settleFit reads the pairs and makes the fit.
func (p *program) settleFit(m *measures) error {
	switch {
	case !m.fit.set && m.fitWithin.IsSet():
		return status.Usage(errors.New("--fit-within without --fit: expected a file of pairs"), "leave --fit-within out")
	case !m.fit.set:
		return nil
	case !m.fitWithin.IsSet():
		return status.Usage(errors.New("--fit without --fit-within: expected the largest residual to accept"), "as in --fit-within 0.05; a fit that is not looked at moves a whole job")
	case m.xy.Changes():
		return status.Usage(errors.New("--fit with --to-xy-unit: expected one of them: the pairs hold the scale"), "leave --to-xy-unit out, or convert first and fit then")
	}
	in, err := p.input(m.fit.text)
	if err != nil {
		return err
	}
	pairs, err := localgrid.ReadPairs(in.Source)
	if err != nil {
		code, _ := explain(err)
		return status.With(code, err, "a file of pairs has a header with id, from_x, from_y, to_x and to_y, and a row a place that is known in both grids")
	}
	model := localgrid.Similarity
	if m.fitModel.Word() == localgrid.Affine.String() {
		model = localgrid.Affine
	}
	f, err := localgrid.Make(pairs, model)
	if err != nil {
		return status.With(status.WrongData, fmt.Errorf("%s: %w", in.Name, err), "add places that are known in both grids")
	}
	p.tellFit(in.Name, f)
	if within := m.fitWithin.Value.Float64(); f.Largest > within {
		return status.With(status.WrongData, fmt.Errorf("%s:%d: pair %s: residual %s: expected at most %s", in.Name, f.Pairs[f.Worst].Line, pairName(f, f.Worst),
			length(f.Largest), m.fitWithin.Value), "look at the residuals: one that stands out is a wrong place or a wrong name; all of them large, a wrong unit or exchanged columns")
	}
	m.local = f
	return nil
}

// length writes a length for people.
func length(v float64) string { return fmt.Sprintf("%.4g", v) }

func pairName(f *localgrid.Fit, i int) string {
	if id := f.Pairs[i].ID; id != "" {
		return id
	}
	return fmt.Sprint(i + 1)
}

// tellFit prints the fit and the table of its residuals.
func (p *program) tellFit(name string, f *localgrid.Fit) {
	factor, turn := f.Scale()
	p.report.Note(fmt.Sprintf("fit: %s: %s of %s: scale %.9f (%+.1f ppm), turned %.6f degrees counter-clockwise, residuals %s in the mean square, %s at most",
		name, f.Model, counted(len(f.Pairs), "pair"), factor, (factor-1)*1e6, turn, length(f.RMS), length(f.Largest)),
		"model", f.Model.String(), "pairs", len(f.Pairs), "scale", factor, "turned", turn, "rms", f.RMS, "largest", f.Largest)
	for i, r := range f.Residuals {
		p.report.Note(fmt.Sprintf("fit: pair %s: residual %+.4f, %+.4f: %s", pairName(f, i), r[0], r[1], length(math.Sqrt(float64(r[0]*r[0])+float64(r[1]*r[1])))),
			"pair", pairName(f, i), "dx", r[0], "dy", r[1])
	}
	if f.Spare == 0 {
		p.report.Warn("unchecked-fit", fmt.Sprintf("%s: %s settle a fit (%s) and check nothing: one wrong place would go unnoticed", name, counted(len(f.Pairs), "pair"), f.Model))
	}
}

// transform returns what places and values go through, nil if they stay as they are.
func (m *measures) transform() func(orb.Point, float64) (orb.Point, float64) {
	if !m.xy.Changes() && !m.z.Changes() && m.local == nil {
		return nil
	}
	return func(p orb.Point, z float64) (orb.Point, float64) {
		if m.local != nil {
			p = m.local.Transform.Of(p)
		} else {
			p = orb.Point{m.xy.Of(p[0]), m.xy.Of(p[1])}
		}
		return p, m.z.Of(z)
	}
}

// measureLines has lines of files go through what readings go through.
func (m *measures) measureLines(set *lines.Set) {
	transform := m.transform()
	if transform == nil {
		return
	}
	for i := range set.Lines {
		l := &set.Lines[i]
		for k, p := range l.Points {
			z := 0.0
			if l.Z != nil {
				z = l.Z[k]
			}
			l.Points[k], z = transform(p, z)
			if l.Z != nil {
				l.Z[k] = z
			}
		}
	}
}

// unitsInHeaders warns where a header names another unit than the command line.
func (p *program) unitsInHeaders(m *measures, set *readings.Set) {
	for i := range set.Layouts {
		l := &set.Layouts[i]
		for _, c := range l.Columns {
			var u units.Unit
			switch c.Role {
			case readings.X, readings.Y:
				u = m.xyUnit.value
			case readings.Z, readings.Depth, readings.MeasuringPoint:
				u = m.zUnit.value
			}
			said := readings.UnitOf(c.Name)
			if u == units.Unstated || said == "" || said == "m" == (u == units.Metre) {
				continue
			}
			p.report.Warn("unit-in-header", fmt.Sprintf("%s:%d: column %q says %s, the command line %s", l.File, l.HeaderLine, c.Name, said, u), "file", l.File, "column", c.Name)
		}
	}
}

// unitsLine says which units the numbers are in.
func (m *measures) unitsLine() string {
	xy, z := m.xyOut(), m.zOut()
	if xy == "" && z == "" {
		return "unstated; nothing is converted"
	}
	var parts []string
	for _, u := range []struct {
		axis, out string
		from      units.Unit
		c         units.Conversion
	}{{"x and y", xy, m.xyUnit.value, m.xy}, {"z", z, m.zUnit.value, m.z}} {
		text := u.axis + " unstated"
		if u.out != "" {
			text = u.axis + " in " + u.out
		}
		if u.c.Changes() {
			text += ", converted from " + u.from.String()
		}
		parts = append(parts, text)
	}
	return strings.Join(slices.Compact(parts), "; ")
}
