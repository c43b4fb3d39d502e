package readings

import "strings"

// A plan is how the lines of one file are read: what sniff made of what was
// declared and what the first lines show. It does not change afterwards and serves
// every worker.
type plan struct {
	format
	layout  Layout
	decimal byte
	// acts say what to do with each field of a line; a line has as many fields.
	acts []act
	// source says where the number of fields comes from, for messages.
	source string
	// need are the roles that a line must hold as numbers.
	need need

	fieldOf [roleCount]int // number of the field of a role from 0, -1 without one

	missingText map[string]string // by markKey: what to call it
	missingZ    []missingValue
	// raw keeps every record as it is written (positions).
	raw bool
	// reduce has the reducer make readings of the rows; down takes a depth for z.
	reduce  bool
	reducer Reducer
	down    *DepthFrom
}

// act is what becomes of a field.
type act struct {
	kind actKind
	slot int8 // of a text, or 0, 1, 2 for x, y, z
}

type actKind uint8

const (
	pass actKind = iota
	number
	text
)

// need is what makes a line whole.
type need uint8

const (
	needPlace need = 2 // x and y
	needValue need = 3 // x, y and z
	needTable need = 4 // what the caller names
)

// newPlan turns a layout into a plan.
func newPlan(l Layout, d *Declared, f format, n need) *plan {
	p := &plan{format: f, layout: l, decimal: byte(l.Decimal), need: n, raw: n == needPlace}
	for r := range p.fieldOf {
		p.fieldOf[r] = -1
	}
	p.acts = make([]act, len(l.Columns))
	for i, c := range l.Columns {
		switch {
		case c.Role == NoRole:
			continue
		case n == needTable:
		case c.Role == X, c.Role == Y, c.Role == Z && n == needValue:
			p.acts[i] = act{number, int8(c.Role - X)}
		case c.Role == Depth && l.Down:
			p.acts[i] = act{number, 2}
		case c.Role.Kept() && n == needValue:
			p.acts[i] = act{text, textSlot[c.Role]}
		}
		p.fieldOf[c.Role] = i
	}
	p.missingText = make(map[string]string)
	for _, m := range d.Missing {
		if v, ok := markNumber(m); ok {
			p.missingZ = append(p.missingZ, missingValue{v, m})
		} else if strings.EqualFold(m, blankMark) {
			p.missingText[""] = "blank"
		} else {
			p.missingText[markKey(m)] = m
		}
	}
	return p
}

// roleOf is the role of the column that is read into slot 0, 1 or 2.
func (p *plan) roleOf(slot int8) Role {
	if slot == 2 && p.down != nil {
		return Depth
	}
	return X + Role(slot)
}

// missingValue is a mark that is a number.
type missingValue struct {
	v    float64
	mark string
}

// missing returns the mark that a value of z is, "" if it is none.
func (p *plan) missing(z float64) string {
	for i := range p.missingZ {
		if p.missingZ[i].v == z {
			return p.missingZ[i].mark
		}
	}
	return ""
}

// blankMark stands for the empty field among missing marks.
const blankMark = "blank"
