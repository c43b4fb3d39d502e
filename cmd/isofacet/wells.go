package main

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/readings"
	"isofacet/io/wells"
	"isofacet/triangulate"
)

// depths is what the command line says of depths: what they are counted from, and
// which of them count.
type depths struct {
	wells           typed
	wellsColumns    parsed[readings.Columns]
	statusTable     typed
	specificGravity option.Number
	depthFrom       option.Number
	round           typed

	table *wells.Table // once it is read
}

// depthOptions returns the options of every command that reads readings.
func (d *depths) depthOptions() []manual.Option {
	zero := decimal.FromInt(0)
	d.wells, d.statusTable, d.round = typed{form: "FILE"}, typed{form: "FILE"}, typed{form: "NAME"}
	d.wellsColumns = parsed[readings.Columns]{form: "LIST", parse: readings.ParseColumns}
	d.specificGravity = option.Number{Least: &zero}
	const group = "Wells and depths"
	return []manual.Option{
		{Group: group, Name: "wells", Value: &d.wells,
			Text: "table of wells, joined by id: x, y, measuring point, ground, screen, zone, specific gravity, valid-from; depths become heads"},
		{Group: group, Name: "wells-columns", Value: &d.wellsColumns, Default: "the header's words",
			Text: "what the columns of the table of wells hold, like --columns"},
		{Group: group, Name: "status-table", Value: &d.statusTable, Default: "the words of the trade",
			Text: "file with the columns status and meaning that explains further words of the status; isofacet readings --help lists the meanings"},
		{Group: group, Name: "specific-gravity", Value: &d.specificGravity, Default: "that of the row or of the well",
			Text: "specific gravity of product where neither the reading nor the table of wells has one"},
		{Group: group, Name: "depth-from", Value: &d.depthFrom,
			Text: "elevation from which depths without a measuring point are counted down: soundings below a water level or a datum"},
		{Group: group, Name: "round", Value: &d.round,
			Text: "the round to use, where the readings hold several"},
	}
}

// reduce has depths become heads. It reads the table of wells and that of statuses.
func (p *program) reduce(r *reading, opt *readings.Options) error {
	d := &r.depths
	if d.wellsColumns.text != "" && !d.wells.set {
		return status.Usage(errors.New("--wells-columns without a table of wells: expected --wells FILE"), "leave --wells-columns out")
	}
	reducer := &wells.Reducer{Gravity: typedNumber(&d.specificGravity), DepthFrom: typedNumber(&d.depthFrom)}
	if d.depthFrom.IsSet() {
		opt.DepthFrom = &readings.DepthFrom{Value: d.depthFrom.Value.Float64(), Decimals: d.depthFrom.Value.Decimals()}
	}
	opt.Reduce = reducer
	if d.statusTable.set {
		in, err := p.input(d.statusTable.text)
		if err != nil {
			return err
		}
		if reducer.Statuses, err = wells.ReadStatuses(in.Source); err != nil {
			return &besideError{err, "status-table"}
		}
	}
	if d.wells.set {
		in, err := p.input(d.wells.text)
		if err != nil {
			return err
		}
		declared := readings.Declared{Columns: d.wellsColumns.value, Missing: r.missing.value}
		if reducer.Table, err = wells.ReadTable(in.Source, declared); err != nil {
			return &besideError{err, "wells-columns"}
		}
		d.table = reducer.Table
		in.file.Layout = reducer.Table.Layout.String()
		p.report.Note(fmt.Sprintf("wells: %s: %s; %s", in.Name, counted(reducer.Table.Len(), "well"), in.file.Layout), "file", in.Name, "wells", reducer.Table.Len())
		for _, w := range reducer.Table.Warnings {
			p.report.Warn("wells", w.String(), "file", w.File, "line", w.Line)
		}
	}
	if d.round.set && !r.apart {
		opt.Select.Only = append(slices.Clone(opt.Select.Only), readings.Literal(readings.Round, d.round.text))
	}
	for _, role := range []readings.Role{readings.Round, readings.Zone} {
		if role == readings.Round && r.apart {
			continue
		}
		if !slices.ContainsFunc(opt.Select.Only, func(p readings.Pattern) bool { return p.Role == role }) {
			opt.OneOf = append(opt.OneOf, role)
		}
	}
	return nil
}

// screenMiddle is the elevation of the middle of a well's screen, if it is known.
func (d *depths) screenMiddle(id string) (float64, bool) {
	if d.table == nil {
		return 0, false
	}
	return d.table.ScreenMiddle(id)
}

// typedNumber is a number of the command line, for exact arithmetic.
func typedNumber(n *option.Number) readings.Number {
	if !n.IsSet() {
		return readings.Number{}
	}
	return readings.Number{Text: n.Value.String(), Value: n.Value.Float64(), Decimals: n.Value.Decimals()}
}

// besideError is a fault in a file beside the readings, whose columns are declared
// with another option than theirs.
type besideError struct {
	error
	option string
}

func (e *besideError) Unwrap() error { return e.error }

// checkBounds warns where the surface lies above what a dry well allows, or below
// what a flowing one does: bounds are no readings, but they know better.
func (p *program) checkBounds(l *loaded) {
	var sampler *interp.Sampler
	for i := range l.set.LeftOut {
		o := &l.set.LeftOut[i]
		c := o.Check
		if c == nil || !l.contains(c.Point) {
			continue
		}
		if sampler == nil { // a surface without wells is spared the time
			sampler = l.surface.Sampler()
		}
		s := sampler.At(c.Point)
		if s.Location.Place == triangulate.Outside {
			continue
		}
		side := ""
		switch {
		case !c.Above && s.Z > c.Z:
			side = "above"
		case c.Above && s.Z < c.Z:
			side = "below"
		default:
			continue
		}
		name := o.ID
		if name == "" {
			name = "reading"
		}
		_, z := l.digits(option.Decimals{})
		p.report.Warn("bound", fmt.Sprintf("%s:%d: %s: the surface at %v is %s %v, which it cannot be: %s", l.names[o.File], o.Line, name,
			number{s.Z, z}, side, number{c.Z, z}, o.Reason), "file", l.names[o.File], "line", o.Line, "id", o.ID, "surface", s.Z, "bound", c.Z)
	}
}

// fewReasons counts the reasons why readings are left out, in a few words, where too
// few are left for a surface.
func fewReasons(set *readings.Set) string {
	count := map[string]int{}
	var order []string
	for i := range set.LeftOut {
		short, _, _ := strings.Cut(set.LeftOut[i].Reason, ":")
		if count[short]++; count[short] == 1 {
			order = append(order, short)
		}
	}
	slices.SortFunc(order, func(a, b string) int {
		if count[a] != count[b] {
			return count[b] - count[a]
		}
		return strings.Compare(a, b)
	})
	var parts []string
	for _, short := range order[:min(len(order), 5)] {
		parts = append(parts, fmt.Sprintf("%d %s", count[short], short))
	}
	if len(parts) == 0 {
		return ""
	}
	return fmt.Sprintf(" (of %s read: %s)", counted(set.Counts.Read, "reading"), strings.Join(parts, ", "))
}
