package wells

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
	"time"

	"isofacet/io/readings"
)

// A Table is what is known of wells, by id. Read-only once read.
type Table struct {
	Name     string
	Layout   readings.Layout
	Warnings []readings.Warning

	wells  map[string]*well
	folded map[string]string // ids without case, for advice
	has    map[readings.Role]bool
}

// well is the rows of one id, the earliest first.
type well struct{ rows []state }

// state is what one row says.
type state struct {
	line    int
	from    time.Time
	dated   bool
	said    string // the date as it is written
	numbers [len(numberRoles)]value
	zone    string
}

// numberRoles are the numbers of a row, in the order of state.numbers.
var numberRoles = [...]readings.Role{readings.X, readings.Y, readings.MeasuringPoint, readings.Ground,
	readings.ScreenTop, readings.ScreenBottom, readings.SpecificGravity}

func slot(r readings.Role) int { return slices.Index(numberRoles[:], r) }

// ReadTable reads a table of wells. Of d it uses everything that is declared. Numbers
// may be missing; text in their place is an error. Errors are those of
// readings.ReadRoles, of several lines joined.
func ReadTable(src readings.Source, d readings.Declared) (*Table, error) {
	raw, err := readings.ReadRoles(src, d, []readings.Role{readings.ID})
	if err != nil {
		return nil, err
	}
	t := &Table{Name: src.Name, Layout: raw.Layout, Warnings: raw.Warnings, wells: map[string]*well{},
		folded: map[string]string{}, has: map[readings.Role]bool{}}
	for _, r := range append(numberRoles[:], readings.Zone, readings.ValidFrom) {
		t.has[r] = raw.Has(int(r))
	}
	var faults []error
	for row := range raw.Len() {
		if err := t.add(raw, row); err != nil && len(faults) < faultsMost {
			faults = append(faults, err)
		}
	}
	return t, errors.Join(faults...)
}

// faultsMost is how many faults of a table are told.
const faultsMost = 5

// add adds a row.
func (t *Table) add(raw *readings.Table, row int) error {
	id := raw.Text(row, int(readings.ID))
	if id == "" {
		return raw.Fault(row, int(readings.ID), readings.Blank, "the name of a well")
	}
	s := state{line: raw.Line(row), said: raw.Text(row, int(readings.ValidFrom)), zone: raw.Text(row, int(readings.Zone))}
	if s.said != "" {
		if s.from, s.dated = ParseTime(s.said); !s.dated {
			return raw.Fault(row, int(readings.ValidFrom), readings.NotNumber, ExpectedTime)
		}
	}
	for k, r := range numberRoles {
		n := raw.Number(row, int(r))
		switch {
		case n.OK():
			s.numbers[k] = exactly(n)
		case n.Kind != readings.Blank && n.Mark == "":
			return raw.NumberFault(row, int(r), n.Kind)
		}
	}
	w := t.wells[id]
	if w == nil {
		w = &well{}
		t.wells[id] = w
		t.folded[strings.ToLower(id)] = id
	}
	at, twice := slices.BinarySearchFunc(w.rows, s, before)
	if twice {
		return raw.Fault(row, int(readings.ID), readings.Impossible,
			fmt.Sprintf("one row a well and date; line %d is one too", w.rows[at].line))
	}
	w.rows = slices.Insert(w.rows, at, s)
	return nil
}

// before orders the rows of a well: those without a date first.
func before(a, b state) int {
	if a.dated != b.dated {
		if b.dated {
			return -1
		}
		return 1
	}
	return a.from.Compare(b.from)
}

// Len returns how many wells there are.
func (t *Table) Len() int { return len(t.wells) }

// ScreenMiddle returns the elevation of the middle of a well's screen, by its latest row, and
// whether both ends are known.
func (t *Table) ScreenMiddle(id string) (float64, bool) {
	w := t.wells[id]
	if w == nil {
		return 0, false
	}
	last := &w.rows[len(w.rows)-1]
	top, bottom := last.numbers[slot(readings.ScreenTop)], last.numbers[slot(readings.ScreenBottom)]
	if !top.known() || !bottom.known() {
		return 0, false
	}
	return top.plus(bottom).times(value{big.NewRat(1, 2), 0}).float(), true
}

// valid returns the number of the row that counts at a time, -1 if none does yet.
func (w *well) valid(when time.Time) int {
	k := -1
	for i := range w.rows {
		if !w.rows[i].dated || !w.rows[i].from.After(when) {
			k = i
		}
	}
	return k
}

// undated reports whether the well has one row, without a date: it holds always.
func (w *well) undated() bool { return len(w.rows) == 1 && !w.rows[0].dated }

// number returns a number that holds with row k: its own, or of the rows before it
// the latest, or else of those behind it the first.
func (w *well) number(r readings.Role, k int) value {
	i := slot(r)
	for j := k; j >= 0; j-- {
		if w.rows[j].numbers[i].known() {
			return w.rows[j].numbers[i]
		}
	}
	for j := max(k, 0); j < len(w.rows); j++ {
		if w.rows[j].numbers[i].known() {
			return w.rows[j].numbers[i]
		}
	}
	return value{}
}

// zone returns the zone that holds with row k.
func (w *well) zone(k int) string {
	for j := k; j >= 0; j-- {
		if w.rows[j].zone != "" {
			return w.rows[j].zone
		}
	}
	for j := max(k, 0); j < len(w.rows); j++ {
		if w.rows[j].zone != "" {
			return w.rows[j].zone
		}
	}
	return ""
}

// dates says in words which dates the measuring points have.
func (w *well) dates() string {
	if len(w.rows) == 1 {
		return "a measuring point valid from " + w.rows[0].said
	}
	return fmt.Sprintf("%d measuring points of unlike dates", len(w.rows))
}

// Has reports whether the table has a column for a role.
func (t *Table) Has(r readings.Role) bool { return t.has[r] }
