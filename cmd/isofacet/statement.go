package main

import (
	"cmp"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/method"
	"isofacet/io/outfile"
	"isofacet/io/readings"
	"isofacet/io/wells"
)

// idsMost is how many readings a caption names.
const idsMost = 60

// remember keeps what a method statement says of the readings.
func (p *program) remember(r *reading, l *loaded) {
	set := l.set
	f := &method.Facts{
		Groundwater: set.Heads() || set.Has(readings.Round) || set.Has(readings.Zone),
		Read:        set.Counts.Read, Used: set.Counts.Used, Merged: set.Counts.Merged,
		System:          r.crs.String(),
		HorizontalDatum: r.horizontalDatum.String(), VerticalDatum: r.verticalDatum.String(),
		Triangles: l.shown().Mesh().NumTriangles(), Breaklines: len(l.drawn.lines),
		Boundary: l.drawn.rings.boundaries, Voids: l.drawn.rings.voids,
		Exclusions: r.exclude.text,
	}
	f.Rounds, _ = distinct(set, readings.Round, set.Len())
	f.Zones, _ = distinct(set, readings.Zone, set.Len())
	if ids, few := distinct(set, readings.ID, idsMost); few {
		f.IDs = ids
	}
	if set.Has(readings.Time) {
		f.First, f.Last = timesOf(set)
	}
	if r.edges.maxEdge.IsSet() {
		f.LongestEdge = r.edges.maxEdge.String()
	}
	f.SameSpot = r.spotRule.text
	if f.SameSpot == "" {
		f.SameSpot = "mean of those that agree"
	}
	z := l.decimalsZ // as measured: no more digits than that in prose
	f.ZMin, f.ZMax = number{l.zRange[0], z}.String(), number{l.zRange[1], z}.String()
	p.rememberValues(f, set, z)
	p.facts = f
}

// distinct returns the texts that readings have in a role, sorted, unless there are more
// than most: a survey of a million shots is not listed, nor looked through.
func distinct(set *readings.Set, role readings.Role, most int) (texts []string, few bool) {
	if !set.Has(role) {
		return nil, true
	}
	seen, last := map[string]bool{}, ""
	for i := range set.Len() {
		text := set.Text(role, i)
		if text == last || seen[text] {
			continue
		}
		if len(seen) == most {
			return nil, false
		}
		seen[text], last = true, text
		texts = append(texts, text)
	}
	return method.Sorted(texts), true
}

// rememberValues keeps the levels of wells with their arithmetic, if they are few.
func (p *program) rememberValues(f *method.Facts, set *readings.Set, digits int) {
	if !f.Groundwater || f.IDs == nil {
		return
	}
	for i := range set.Len() {
		v := method.Value{ID: set.ID(i), Z: number{set.Z[i], digits}.String()}
		if w, ok := set.Work(i).(*wells.Work); ok && w.String() != "" {
			f.Reduced = true
			v.Work = w.String()
			if w.Product != "" {
				f.Floating = append(f.Floating, v.ID)
			}
		}
		f.Values = append(f.Values, v)
	}
	slices.SortStableFunc(f.Values, func(a, b method.Value) int { return cmp.Or(cmp.Compare(a.ID, b.ID), cmp.Compare(a.Work, b.Work)) })
	f.Floating = method.Sorted(f.Floating)
}

// stating reports whether a method statement is asked for, which wants the arithmetic
// of levels.
func stating(cmd *cobra.Command) bool {
	_, wells := changedFlag(cmd, "wells")
	_, statement := changedFlag(cmd, "method-statement")
	return wells && statement
}

// writeStatement writes the method statement of what was done.
func (p *program) writeStatement(file *outfile.File) error {
	f := p.facts
	if f == nil {
		f = &method.Facts{}
	}
	rec := p.rec.Stable
	f.Product = products[rec.Command]
	if f.Product == "" {
		f.Product = rec.Command
	}
	f.Program = strings.TrimSpace("isofacet " + rec.Version + " " + rec.Commit)
	for _, in := range rec.Inputs {
		f.Files = append(f.Files, in.Name)
	}
	if rec.Readings != nil {
		for _, n := range rec.Readings.NotUsed {
			if strings.HasPrefix(n.Reason, "not among round=") {
				f.Read-- // of another map
				continue
			}
			who := n.ID
			if who == "" {
				who = n.File
			}
			f.NotUsed = append(f.NotUsed, method.NotUsed{ID: who, What: n.What, Reason: n.Reason})
		}
	}
	for _, s := range rec.Settings {
		if s.Value == "" {
			continue
		}
		switch s.Option {
		case "interval":
			f.Interval = s.Value
		case "levels":
			f.Levels = s.Value
		case "cell":
			f.Cell = s.Value
		case "bands":
			f.Bands = s.Given
		case "inferred-beyond":
			if s.Given {
				f.Inferred = s.Value
			}
		case "xy-unit":
			if s.Given {
				f.XYUnit = s.Value
			}
		case "z-unit":
			if s.Given {
				f.ZUnit = s.Value
			}
		case "to-xy-unit", "to-z-unit":
		}
	}
	for _, s := range rec.Settings { // what is converted has the unit it is converted to
		if s.Given && s.Option == "to-xy-unit" {
			f.XYUnit = s.Value
		}
		if s.Given && s.Option == "to-z-unit" {
			f.ZUnit = s.Value
		}
	}
	if a, ok := rec.Result.(*accuracyReport); ok && a.All != nil {
		f.AccuracyRMSE, f.AccuracyOf = a.All.RMSE.String(), a.All.Count
	}
	f.GradientAndArrow = slices.Contains([]string{"flow"}, rec.Command)
	return f.Write(file)
}

// products are what commands make, in a caption's words.
var products = map[string]string{
	"contour": "contours", "grid": "raster", "triangles": "triangulated surface", "query": "values at places",
	"profile": "profile", "volume": "volumes", "change": "change", "accuracy": "accuracy", "flow": "gradient and direction of flow",
	"inspect": "summary", "readings": "table",
}
