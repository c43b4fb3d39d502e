package main

import (
	"bufio"
	"bytes"
	"cmp"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
	"isofacet/io/numtext"
	"isofacet/io/readings"
	"isofacet/io/wells"
)

// account is the table of all readings.
type account struct {
	rows  []accountRow
	roles []readings.Role // of the texts
	work  bool            // whether there is arithmetic
	xy, z int             // digits
}

// accountRow is one reading.
type accountRow struct {
	file        int
	name        string // of the file
	line        int
	id          string
	placed      bool
	at          orb.Point
	z           float64 // NaN: none
	use, reason string
	text        func(readings.Role) string
	work        *wells.Work
}

// accountNames are the columns of every table.
var accountNames = []string{"file", "line", "id", "x", "y", "z", "use", "reason"}

// workColumns are those of the arithmetic.
var workColumns = []struct {
	name string
	of   func(*wells.Work) string
}{
	{"measuring_point", func(w *wells.Work) string { return w.MeasuringPoint }},
	{"valid_from", func(w *wells.Work) string { return w.ValidFrom }},
	{"depth", func(w *wells.Work) string { return w.Depth }},
	{"product_depth", func(w *wells.Work) string { return w.ProductDepth }},
	{"product", func(w *wells.Work) string { return w.Product }},
	{"specific_gravity", func(w *wells.Work) string { return w.SpecificGravity }},
	{"head", func(w *wells.Work) string { return w.Head }},
	{"bound", func(w *wells.Work) string { return w.Bound }},
	{"arithmetic", (*wells.Work).String},
}

// accountOf puts the table together, in the order of the files and their lines.
func (a *accountCommand) accountOf(l *loaded) *account {
	set := l.set
	t := &account{rows: make([]accountRow, 0, set.Counts.Read)}
	t.xy, t.z = l.digits(a.decimals)
	into := map[int]int{}
	for i := range set.Merged {
		into[set.Merged[i].Into]++
	}
	noText := func(readings.Role) string { return "" }
	for i := range set.Len() {
		r := accountRow{file: set.Source(i), line: int(set.Lines[i]), id: set.ID(i), placed: true, at: set.Points[i], z: set.Z[i], use: "used",
			text: func(role readings.Role) string { return set.Text(role, i) }}
		r.work, _ = set.Work(i).(*wells.Work)
		if n := into[i]; n > 0 {
			r.reason = fmt.Sprintf("stands for %d readings at its place (%s)", n+1, a.spotWord())
		}
		t.rows = append(t.rows, r)
	}
	for i := range set.Merged {
		m := &set.Merged[i]
		r := accountRow{file: int(m.File), line: int(m.Line), id: m.ID, placed: true, at: m.Point, z: m.Z, use: "merged", text: m.Row.Text}
		r.reason = mergedInto(set, m, l.names[set.Source(m.Into)])
		r.work, _ = m.Row.Work.(*wells.Work)
		t.rows = append(t.rows, r)
	}
	for i := range set.LeftOut {
		o := &set.LeftOut[i]
		r := accountRow{file: int(o.File), line: int(o.Line), id: o.ID, placed: o.Row.Placed, at: o.Row.Point, z: noNumber, use: "left out", reason: o.Reason, text: o.Row.Text}
		if o.Row.Valued {
			r.z = o.Row.Z
		}
		r.work, _ = o.Row.Work.(*wells.Work)
		t.rows = append(t.rows, r)
	}
	for _, e := range set.Refused {
		t.rows = append(t.rows, accountRow{file: slices.Index(l.names, e.File), line: e.Line, id: e.ID, z: noNumber, use: "refused", reason: refusal(e), text: noText})
	}
	slices.SortStableFunc(t.rows, func(a, b accountRow) int { return cmp.Or(cmp.Compare(a.file, b.file), cmp.Compare(a.line, b.line)) })
	for i := range t.rows {
		r := &t.rows[i]
		r.name = l.names[r.file]
		t.work = t.work || r.work != nil
	}
	for _, role := range readings.Roles() {
		if role == readings.ID || !role.Kept() {
			continue
		}
		if slices.ContainsFunc(t.rows, func(r accountRow) bool { return r.text(role) != "" }) {
			t.roles = append(t.roles, role)
		}
	}
	return t
}

// spotWord is the rule for several readings at one place, in a word.
func (r *reading) spotWord() string {
	if w := r.spotRule.value; w != readings.SpotAgree {
		return w.String()
	}
	return readings.SpotMean.String()
}

// mergedInto says which reading stands for one that is merged.
func mergedInto(set *readings.Set, m *readings.Merged, file string) string {
	if int(m.File) == set.Source(m.Into) {
		return fmt.Sprintf("at the place of line %d", set.Lines[m.Into])
	}
	return fmt.Sprintf("at the place of %s:%d", file, set.Lines[m.Into])
}

// refusal says why a line was refused.
func refusal(e *readings.PositionError) string {
	reason := e.What
	if e.Seen != "" || e.Kind == readings.Blank {
		reason = fmt.Sprintf("%s %q", e.What, e.Seen)
	}
	return reason + ": expected " + e.Expected
}

// names are the names of the columns.
func (t *account) names() []string {
	names := slices.Clone(accountNames)
	for _, r := range t.roles {
		names = append(names, r.String())
	}
	if t.work {
		for _, c := range workColumns {
			names = append(names, c.name)
		}
	}
	return names
}

// write writes the table as CSV.
func (t *account) write(w io.Writer) error {
	b := bufio.NewWriter(w)
	row := bytes.TrimSuffix(appendFields(nil, t.names()), []byte(","))
	b.Write(append(row, '\n'))
	for i := range t.rows {
		r := &t.rows[i]
		row = appendField(row[:0], r.name)
		row = append(row, ',')
		row = strconv.AppendInt(row, int64(r.line), 10)
		row = append(row, ',')
		row = appendField(row, r.id)
		row = t.appendNumbers(append(row, ','), r)
		row = append(row, ',')
		row = appendField(row, r.use)
		row = append(row, ',')
		row = appendField(row, r.reason)
		for _, role := range t.roles {
			row = appendField(append(row, ','), r.text(role))
		}
		if t.work {
			for _, c := range workColumns {
				row = append(row, ',')
				if r.work != nil {
					row = appendField(row, c.of(r.work))
				}
			}
		}
		if _, err := b.Write(append(row, '\n')); err != nil {
			return err
		}
	}
	return b.Flush()
}

// appendNumbers appends x, y and z, empty where they are not known.
func (t *account) appendNumbers(row []byte, r *accountRow) []byte {
	if r.placed {
		row = numtext.Append(row, r.at[0], t.xy)
	}
	row = append(row, ',')
	if r.placed {
		row = numtext.Append(row, r.at[1], t.xy)
	}
	row = append(row, ',')
	if !math.IsNaN(r.z) {
		row = numtext.Append(row, r.z, t.z)
	}
	return row
}

// features writes the readings as points, with the value as height where there is
// one, without geometry where the place is not known.
func (t *account) features(w *geojson.Writer) error {
	names := t.names()
	for i := range t.rows {
		r := &t.rows[i]
		f := geojson.Feature{}
		if r.placed {
			f.Geometry.Shape = r.at
			if !math.IsNaN(r.z) {
				f.Geometry.Z = []float64{r.z}
			}
		}
		add := func(v geojson.Value) {
			f.Properties = append(f.Properties, geojson.Property{Name: names[len(f.Properties)], Value: v})
		}
		add(geojson.String(r.name))
		add(geojson.Int(int64(r.line)))
		add(geojson.String(r.id))
		for _, v := range []struct {
			v      float64
			known  bool
			digits int
		}{{r.at[0], r.placed, t.xy}, {r.at[1], r.placed, t.xy}, {r.z, !math.IsNaN(r.z), t.z}} {
			if !v.known {
				add(geojson.Null())
				continue
			}
			add(geojson.Fixed(v.v, v.digits))
		}
		add(geojson.String(r.use))
		add(geojson.String(r.reason))
		for _, role := range t.roles {
			add(geojson.String(r.text(role)))
		}
		if t.work {
			for _, c := range workColumns {
				if r.work == nil || c.of(r.work) == "" {
					add(geojson.Null())
					continue
				}
				add(geojson.String(c.of(r.work)))
			}
		}
		if err := w.Write(&f); err != nil {
			return err
		}
	}
	return nil
}
