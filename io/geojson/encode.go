package geojson

import (
	"fmt"
	"math"
	"strconv"

	"isofacet/io/numtext"
)

// placesMost is the largest number of digits after a point.
const placesMost = 20

// encoder turns features into text and keeps account of what it wrote. One a goroutine; accounts are merged in the order of
// the features.
type encoder struct {
	xyPlaces, zPlaces int
	tally
}

// tally is what is known about features only once they are written.
type tally struct {
	min, max       [3]float64 // as written
	flat, all      int        // positions without a height, positions
	flattened      int        // lines and rings without length or area
	firstFlattened int        // the feature of the first
	outside        int        // features with a position that no longitude and latitude has
	firstOutside   int
}

func newTally() tally {
	inf := math.Inf(1)
	return tally{min: [3]float64{inf, inf, inf}, max: [3]float64{-inf, -inf, -inf}}
}

// add counts u, of features behind those of t, in.
func (t *tally) add(u *tally) {
	for k := range t.min {
		t.min[k], t.max[k] = min(t.min[k], u.min[k]), max(t.max[k], u.max[k])
	}
	t.flat += u.flat
	t.all += u.all
	if t.flattened == 0 {
		t.firstFlattened = u.firstFlattened
	}
	if t.outside == 0 {
		t.firstOutside = u.firstOutside
	}
	t.flattened += u.flattened
	t.outside += u.outside
}

// feature appends the text of f, or returns a *WriteError. number counts from 1.
func (e *encoder) feature(dst []byte, f *Feature, number int) ([]byte, error) {
	own := encoder{xyPlaces: e.xyPlaces, zPlaces: e.zPlaces, tally: newTally()}
	dst, err := own.record(dst, f)
	if err != nil {
		err.Feature = number
		return dst, err
	}
	if own.flattened > 0 {
		own.firstFlattened = number
	}
	if own.all > 0 && (own.min[0] < -180 || own.max[0] > 180 || own.min[1] < -90 || own.max[1] > 90) {
		own.outside, own.firstOutside = 1, number
	}
	e.add(&own.tally)
	return dst, nil
}

func (e *encoder) record(dst []byte, f *Feature) ([]byte, *WriteError) {
	dst = append(dst, `{"type":"Feature",`...)
	switch {
	case f.ID.kind == Absent:
	case f.ID.canBeID():
		dst = append(dst, `"id":`...)
		var err *WriteError
		if dst, err = appendValue(dst, f.ID, "id"); err != nil {
			return dst, err
		}
		dst = append(dst, ',')
	default:
		return dst, &WriteError{What: "id", Seen: string(mustValue(f.ID)), Expected: "a string or a number"}
	}
	dst = append(dst, `"geometry":`...)
	dst, err := e.geometry(dst, f.Geometry)
	if err != nil {
		return dst, err
	}
	dst = append(dst, `,"properties":{`...)
	if dst, err = appendMembers(dst, f.Properties); err != nil {
		return dst, err
	}
	return append(dst, '}', '}'), nil
}

// appendMembers appends "name":value,... without the braces.
func appendMembers(dst []byte, properties []Property) ([]byte, *WriteError) {
	first := true
	for i := range properties {
		p := &properties[i]
		if p.Value.kind == Absent {
			continue
		}
		for k := range properties[:i] {
			if properties[k].Name == p.Name && properties[k].Value.kind != Absent {
				return dst, &WriteError{What: "property " + strconv.Quote(p.Name), Seen: "given twice", Expected: "unlike names"}
			}
		}
		if !first {
			dst = append(dst, ',')
		}
		first = false
		dst = append(appendString(dst, p.Name), ':')
		var err *WriteError
		if dst, err = appendValue(dst, p.Value, p.Name); err != nil {
			return dst, err
		}
	}
	return dst, nil
}

func appendValue(dst []byte, v Value, name string) ([]byte, *WriteError) {
	switch v.kind {
	case BoolKind:
		return strconv.AppendBool(dst, v.whole != 0), nil
	case NumberKind:
		if math.IsInf(v.number, 0) {
			return dst, &WriteError{What: "property " + strconv.Quote(name), Seen: fmt.Sprint(v.number), Expected: "a finite number"}
		}
		return numtext.Append(dst, v.number, int(v.places)), nil
	case IntKind:
		return strconv.AppendInt(dst, v.whole, 10), nil
	case StringKind:
		return appendString(dst, v.text), nil
	case JSONKind:
		return append(dst, v.text...), nil
	}
	return append(dst, "null"...), nil
}

func mustValue(v Value) []byte {
	text, _ := appendValue(nil, v, "")
	return text
}

func (e *encoder) geometry(dst []byte, g Geometry) ([]byte, *WriteError) {
	if g.Shape == nil {
		if g.Z != nil {
			return dst, &WriteError{What: "heights", Seen: strconv.Itoa(len(g.Z)), Expected: "none where there is no shape"}
		}
		return append(dst, "null"...), nil
	}
	h := heights{z: g.Z}
	if len(g.Z) != 0 {
		if n := g.NumPositions(); len(g.Z) != 1 && len(g.Z) != n {
			return dst, &WriteError{What: "heights", Seen: strconv.Itoa(len(g.Z)), Expected: fmt.Sprintf("1 or %d, as there are positions", n)}
		}
		h.one = len(g.Z) == 1
	}
	return e.shape(dst, g.Shape, &h)
}

// heights hands out the heights of a geometry in order.
type heights struct {
	z   []float64
	one bool // z[0] is the height of every position
}

// next returns the heights of the next n positions: nil if they have none, a single one if all share it.
func (h *heights) next(n int) []float64 {
	if len(h.z) == 0 || h.one {
		return h.z
	}
	part := h.z[:n]
	h.z = h.z[n:]
	return part
}
