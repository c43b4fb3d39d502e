package wells

import (
	"fmt"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/readings"
)

// A Reducer makes heads of depths: it is given to readings.Options. The zero value
// reduces rows that hold everything themselves. Its fields must not change while
// readings are read.
type Reducer struct {
	Table    *Table    // may be nil
	Statuses *Statuses // nil: the usual ones
	// Gravity is the specific gravity of product where neither the row nor the table
	// states one, as a decimal number; empty: none.
	Gravity readings.Number
	// DepthFrom is what depths without a measuring point count from; empty: nothing.
	DepthFrom readings.Number
}

// Work is the arithmetic of one reading, as decimal texts, empty where there is
// nothing: Head = MeasuringPoint - Depth + Product x SpecificGravity.
type Work struct {
	MeasuringPoint, ValidFrom, Depth, ProductDepth, Product, SpecificGravity, Head string
	Status                                                                         string // what it means
	// Bound is what the reading says of the head without being a level: "<402.00".
	Bound string
	// WellLine is the line of the table that was used, 0 for none.
	WellLine int
}

// String writes the arithmetic in one line.
func (w *Work) String() string {
	if w.Head == "" || w.Depth == "" {
		return ""
	}
	product := ""
	if w.Product != "" {
		product = " + " + w.Product + " x " + w.SpecificGravity
	}
	return w.MeasuringPoint + " - " + negativeInBrackets(w.Depth) + product + " = " + w.Head
}

func negativeInBrackets(s string) string {
	if s[0] == '-' {
		return "(" + s + ")"
	}
	return s
}

// used are the roles that Reduce looks at.
var used = map[readings.Role]bool{
	readings.Depth: true, readings.MeasuringPoint: true, readings.Product: true, readings.ProductDepth: true,
	readings.SpecificGravity: true, readings.Ground: true, readings.ScreenBottom: true,
}

// Uses reports whether Reduce looks at a role beside x, y, z and texts.
func (r *Reducer) Uses(role readings.Role) bool { return used[role] }

// Provides reports whether the table of wells has texts in a role.
func (r *Reducer) Provides(role readings.Role) bool {
	return role == readings.Zone && r.Table != nil && r.Table.has[role]
}

// Begin decides for a file: its rows are reduced if they have depths and no values,
// or no places, or heads with a status or of wells in the table.
func (r *Reducer) Begin(l *readings.Layout) (bool, *readings.PositionError) {
	placed := l.Has(readings.X) && l.Has(readings.Y)
	depth := l.Has(readings.Depth) && !l.Has(readings.Z)
	switch {
	case depth, l.Heads && (r.Table != nil || l.Has(readings.Status)), l.Has(readings.Z) && !placed && r.Table != nil:
	default:
		return false, nil
	}
	if r.Table != nil && !l.Has(readings.ID) {
		return false, &readings.PositionError{Kind: readings.MissingRole, What: "no column for id", Expected: "one to find the well in " + r.Table.Name + " by"}
	}
	if !placed && (r.Table == nil || !r.Table.has[readings.X] || !r.Table.has[readings.Y]) {
		return false, r.noPlace(l)
	}
	counted := l.Has(readings.MeasuringPoint) || r.Table != nil && r.Table.has[readings.MeasuringPoint] || r.DepthFrom.Text != ""
	if depth && !counted {
		return false, &readings.PositionError{Kind: readings.DepthAlone, What: "a depth and no measuring point",
			Expected: "the elevation from which the depth is counted: a column measuring-point here or in a table of wells"}
	}
	l.Heads = l.Heads || !depth || r.Table != nil || l.Has(readings.MeasuringPoint)
	if depth {
		l.Note = joinNotes(l.Note, "depths are reduced to heads")
	}
	return true, nil
}

func (r *Reducer) noPlace(l *readings.Layout) *readings.PositionError {
	e := &readings.PositionError{Kind: readings.MissingRole, What: "no columns for x and y", Expected: "them here, or a table of wells that has them"}
	if r.Table != nil {
		e.Expected = "them here or in " + r.Table.Name
	}
	return e
}

func joinNotes(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// Join gives a row the zone of its well.
func (r *Reducer) Join(row *readings.Row) {
	if r.Table == nil || row.Text(readings.Zone) != "" {
		return
	}
	if w := r.Table.wells[row.Text(readings.ID)]; w != nil {
		when, _ := ParseTime(row.Text(readings.Time))
		row.Set(readings.Zone, w.zone(max(w.valid(when), 0)))
	}
}

// reduction is the work on one row.
type reduction struct {
	*Reducer
	row  *readings.Row
	out  readings.Reduced
	work *Work

	well    *well
	k       int // the row of the well that counts
	meaning Meaning
	said    string // the status
}

// Reduce makes a head of a row, or says why there is none.
func (r *Reducer) Reduce(row *readings.Row) readings.Reduced {
	d := &reduction{Reducer: r, row: row, work: &Work{}, k: -1}
	d.out.Work = d.work
	d.run()
	if d.out.Err != nil || d.out.LeftOut != "" {
		d.out.Z, d.out.DecimalsZ = 0, 0
	}
	return d.out
}

// run goes through the steps until one of them ends the work.
func (d *reduction) run() {
	for _, step := range []func() bool{d.status, d.find, d.place, d.measure} {
		if !step() {
			return
		}
	}
}

// leaveOut ends the work with a reason.
func (d *reduction) leaveOut(format string, values ...any) bool {
	d.out.LeftOut = fmt.Sprintf(format, values...)
	return false
}

// refuse ends the work: the text in a role is wrong.
func (d *reduction) refuse(role readings.Role, kind readings.Kind, what, expected string) bool {
	seen := d.row.Text(role)
	if what == "" {
		what = role.String()
	}
	d.out.Err, d.out.Role = &readings.PositionError{Kind: kind, What: what, Seen: seen, Expected: expected}, role
	return false
}

// refuseNumber ends the work: the text in a role is no number.
func (d *reduction) refuseNumber(role readings.Role, kind readings.Kind) bool {
	return d.refuse(role, kind, "", readings.ExpectedNumber(kind, d.row.Layout.Decimal))
}

// status finds out what the status means. A word in the place of the value is one too.
func (d *reduction) status() bool {
	statuses := d.Statuses
	if statuses == nil {
		statuses = usual
	}
	role := readings.Status
	d.said = d.row.Text(role)
	value := readings.Depth
	if d.row.Layout.Has(readings.Z) {
		value = readings.Z
	}
	if n := d.row.Number(value); n.Kind == readings.NotNumber {
		if m, ok := statuses.Of(d.row.Text(value)); ok && m != Measured && statusKey(d.said) == "" {
			d.said, role = d.row.Text(value), value
		}
	}
	var ok bool
	if d.meaning, ok = statuses.Of(d.said); !ok {
		return d.refuse(role, readings.UnknownStatus, "", "a word that says whether the level counts, such as measured, dry, obstructed or pumping")
	}
	if d.said != "" {
		d.work.Status = d.meaning.String()
	}
	return true
}

var usual = Usual()

// find finds the well and the row that counts at the time of the reading.
func (d *reduction) find() bool {
	if d.Table == nil {
		return true
	}
	id := d.row.Text(readings.ID)
	if d.well = d.Table.wells[id]; d.well == nil {
		advice := ""
		if near := d.Table.folded[strings.ToLower(id)]; near != "" {
			advice = fmt.Sprintf(" (%s is)", near)
		}
		if d.row.Text(readings.MeasuringPoint) != "" || d.row.Layout.Has(readings.Z) {
			return true // the row may hold what is needed
		}
		return d.leaveOut("no well: %q is not in %s%s", id, d.Table.Name, advice)
	}
	if d.well.undated() {
		d.k = 0
		return true
	}
	said := d.row.Text(readings.Time)
	if d.row.Layout.Has(readings.Z) {
		// A head needs no measuring point, only what does not change with it.
		d.k = len(d.well.rows) - 1
		if when, ok := ParseTime(said); ok {
			d.k = max(d.well.valid(when), 0)
		}
		return true
	}
	if said == "" {
		return d.leaveOut("no date: %s has %s, and the reading has no time", id, d.well.dates())
	}
	when, ok := ParseTime(said)
	if !ok {
		return d.refuse(readings.Time, readings.NotNumber, "", ExpectedTime)
	}
	if d.k = d.well.valid(when); d.k < 0 {
		return d.leaveOut("no measuring point: none of %s is valid on %s, the first is from %s", id, said, d.well.rows[0].said)
	}
	return true
}

// number returns a number of the row, or else of its well. ok is false if the row has
// text in its place.
func (d *reduction) number(role readings.Role) (v value, ok bool) {
	if d.row.Text(role) != "" {
		n := d.row.Number(role)
		if n.OK() {
			return exactly(n), true
		}
		if n.Mark == "" {
			return v, d.refuseNumber(role, n.Kind)
		}
	}
	if d.well != nil && slot(role) >= 0 {
		v = d.well.number(role, d.k)
	}
	return v, true
}

// place finds x and y.
func (d *reduction) place() bool {
	var at [2]value
	for i, role := range [...]readings.Role{readings.X, readings.Y} {
		var ok bool
		if at[i], ok = d.number(role); !ok {
			return false
		}
		if !at[i].known() {
			if d.well == nil && d.Table != nil {
				return d.leaveOut("no place: %q is not in %s", d.row.Text(readings.ID), d.Table.Name)
			}
			if d.Table == nil || d.row.Layout.Has(role) && d.row.Number(role).Mark != "" {
				return d.leaveOut("no place: %s is empty", role)
			}
			return d.leaveOut("no place: %s has none for %s", d.Table.Name, d.row.Text(readings.ID))
		}
		d.out.DecimalsXY = max(d.out.DecimalsXY, at[i].decimals)
	}
	d.out.Point = orb.Point{at[0].float(), at[1].float()}
	d.out.Placed = true
	return true
}
