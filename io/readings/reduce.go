package readings

import (
	"bytes"
	"strings"

	"github.com/paulmach/orb"
)

// Rows that hold no value yet.
//
// A gauging table has depths, and what they are counted from may stand in another
// file. A Reducer makes a place and a value of such a row; everything else (choosing,
// excluding, merging, the account of every line) is the same for all readings.

// A Reducer makes readings of rows that lack a place or a value. Its methods, Begin
// excepted, are called by several goroutines at a time.
type Reducer interface {
	// Begin is told the layout of each file before its rows, and says whether they are
	// to be reduced. It may set Heads and Note. An error about a column that is missing
	// or not understood needs no place.
	Begin(l *Layout) (reduce bool, err *PositionError)
	// Uses reports whether Reduce looks at a role.
	Uses(r Role) bool
	// Provides reports whether Join adds a text in a role that a file has no column for.
	Provides(r Role) bool
	// Join adds texts to a row, before anything is chosen by them.
	Join(row *Row)
	// Reduce makes a reading of a row.
	Reduce(row *Row) Reduced
}

// A Row is one record as text, by role.
type Row struct {
	Layout *Layout
	texts  [roleCount][]byte
	w      *worker
}

// Text returns the text of the row in a role, empty if there is none.
func (r *Row) Text(role Role) string { return string(r.texts[role]) }

// Set gives the row a text in a role that its file has no column for.
func (r *Row) Set(role Role, text string) { r.texts[role] = []byte(text) }

// Number reads the text in a role as a number.
func (r *Row) Number(role Role) Number {
	var z []missingValue
	if role == Z || role == Depth {
		z = r.w.missingZ
	}
	return readNumber(r.texts[role], r.w.decimal, r.w.missingText, z)
}

// A Number is a field read as a number.
type Number struct {
	Kind     Kind   // 0 if it is one, or what stands there
	Mark     string // the missing mark that it is
	Text     string // the number with a minus and a point of ASCII: what rational arithmetic reads
	Value    float64
	Decimals int
	// Sign is '<' or '>' where Kind is Bound and a number follows; Text and Value are
	// that number then.
	Sign byte
}

// OK reports whether there is a number.
func (n *Number) OK() bool { return n.Kind == 0 && n.Mark == "" }

// longestExact is the longest number that is kept as text for exact arithmetic: far
// more digits than anything measures, far fewer than would take time.
const longestExact = 80

func readNumber(text []byte, decimal byte, missing map[string]string, missingZ []missingValue) (n Number) {
	t := trimSpaces(text)
	if len(missing) > 0 {
		if mark, ok := missing[markKey(string(t))]; ok {
			n.Mark = mark
			return n
		}
	}
	n.Value, n.Decimals, n.Kind = parseNumber(t, decimal)
	if n.Kind == Bound {
		rest := t[1:]
		n.Sign = t[0]
		for _, sign := range []string{"≤", "≥"} {
			if after, ok := bytes.CutPrefix(t, []byte(sign)); ok {
				rest, n.Sign = after, map[string]byte{"≤": '<', "≥": '>'}[sign]
			}
		}
		t = bytes.TrimSpace(bytes.TrimPrefix(rest, []byte("=")))
		var kind Kind
		if n.Value, n.Decimals, kind = parseNumber(t, decimal); kind != 0 {
			n.Sign = 0
			return n
		}
	}
	if n.Kind != 0 && n.Kind != Bound {
		return n
	}
	if len(t) > longestExact {
		n.Kind = OutOfRange
		return n
	}
	rest, negative := cutSign(t)
	n.Text = strings.Replace(string(rest), string(rune(decimal)), ".", 1)
	if negative {
		n.Text = "-" + n.Text
	}
	for i := range missingZ {
		if n.Kind == 0 && missingZ[i].v == n.Value {
			n.Mark = missingZ[i].mark
		}
	}
	return n
}

// Reduced is what became of a row. One of LeftOut and Err is set if it is no reading.
type Reduced struct {
	Point                 orb.Point
	Z                     float64
	DecimalsXY, DecimalsZ int

	Placed  bool   // whether Point is known though there is no value
	LeftOut string // why the row is not used
	// Err says what is wrong with the row's text in a role; its place is filled in.
	Err  *PositionError
	Role Role

	// Check is what the row says of the surface without being a value, if anything.
	Check *Check
	// Warning is something to be told of a reading that is used.
	Warning string
	// Work is the arithmetic, kept if Options.Account is set.
	Work any
}

// A Check is a place where the surface is known to lie below Z, or above it.
type Check struct {
	Point orb.Point
	Z     float64
	Above bool // the surface lies above Z
}

// A KeptRow is what was read of a row that is not used, for an account of it.
type KeptRow struct {
	Placed, Valued bool // whether Point and Z are known
	Point          orb.Point
	Z              float64
	texts          [textSlots]string
	Work           any
}

// Text returns the text in a kept role.
func (k *KeptRow) Text(r Role) string {
	if k == nil || !r.Kept() {
		return ""
	}
	return k.texts[textSlot[r]]
}

// reduceRecord is record for a row that the reducer makes a reading of.
func (w *worker) reduceRecord(b []byte, p int) {
	row := &w.reduced
	*row = Row{Layout: &w.layout, w: w}
	for r, i := range w.fieldOf {
		if i >= 0 && Role(r) != NoRole {
			row.texts[r] = w.tokens.fields[i].text
		}
	}
	for _, slot := range w.slots {
		w.current[slot] = row.texts[keptRoles[slot]]
	}
	w.placed = true
	for _, slot := range w.slots {
		if i := w.fieldOf[keptRoles[slot]]; i >= 0 {
			if e := checkText(w.tokens.fields[i]); e != nil {
				e.What = keptRoles[slot].String()
				w.refuseField(b, p, i, e)
				return
			}
		}
	}
	w.reducer.Join(row)
	for _, slot := range w.slots {
		w.current[slot] = row.texts[keptRoles[slot]]
	}
	why := w.chosen()
	if why != "" && !w.account {
		w.leaveOut(why)
		return
	}
	r := w.reducer.Reduce(row)
	r.Placed = r.Placed || r.Err == nil && r.LeftOut == ""
	if w.transform != nil && r.Placed {
		if r.Check != nil {
			r.Check.Point, r.Check.Z = w.transform(r.Point, r.Check.Z)
		}
		r.Point, r.Z = w.transform(r.Point, r.Z)
	}
	if why == "" && w.exclude != nil {
		// Where the place is not known, an id alone may still leave the row out.
		if k := w.exclude.find(w.current[textSlot[ID]], r.Point, w.hit); k >= 0 && (r.Placed || !w.exclude.rows[k].hasPlace) {
			why = w.exclude.reasonOf(k)
		}
	}
	switch {
	case why != "":
		w.leaveOutRow(why, &r)
	case r.Err != nil:
		i := w.fieldOf[r.Role]
		w.refuseField(b, p, i, r.Err)
	case r.LeftOut != "":
		w.leaveOutRow(r.LeftOut, &r)
		w.blk.LeftOut[len(w.blk.LeftOut)-1].Check = r.Check
	default:
		if r.Warning != "" {
			w.blk.warnings = append(w.blk.warnings, Warning{Line: w.line, Text: r.Warning})
		}
		w.accept([3]float64{r.Point[0], r.Point[1], r.Z}, [3]int{r.DecimalsXY, 0, r.DecimalsZ}, nil)
		if w.account {
			w.blk.work = append(w.blk.work, r.Work)
		}
	}
}

// refuseField notes a bad line by one of its fields, by the line if i is negative.
func (w *worker) refuseField(b []byte, p, i int, e *PositionError) {
	if i < 0 {
		e.ID = string(w.current[idSlot])
		w.refuse(b, p, p, e)
		e.Column = 0
		return
	}
	e.Field, e.ID = i+1, string(w.current[idSlot])
	w.refuse(b, p, w.tokens.fields[i].start, e)
}

// leaveOutRow is leaveOut with what is known of the row.
func (w *worker) leaveOutRow(why string, r *Reduced) {
	w.leaveOut(why)
	if w.account {
		k := w.blk.LeftOut[len(w.blk.LeftOut)-1].Row
		k.Placed, k.Point, k.Work = r.Placed, r.Point, r.Work
		k.Valued, k.Z = r.Placed && r.LeftOut == "" && r.Err == nil, r.Z
	}
}

// keptRow copies the texts of the current row.
func (w *worker) keptRow() *KeptRow {
	k := &KeptRow{}
	for _, slot := range w.slots {
		k.texts[slot] = string(w.current[slot])
	}
	return k
}
