package readings

import (
	"strconv"
	"unsafe"

	"github.com/paulmach/orb"
)

// quick reads records as long as they are of the usual kind: the expected number of
// fields, no quotes, numbers of at most 19 digits without exponents. It returns
// where it stopped: at the end of b, or at a record for worker.row.
//
// b ends with a line end, so that every loop over a field stops.
func (w *worker) quick(b []byte, p int) int {
	blk := w.blk
	for p < len(b) {
		next := w.quickRow(b, p, blk)
		if next == 0 {
			return p
		}
		p = next
		w.line++
	}
	return p
}

// span is where a text stands in a block; a block is shorter than 2^31.
type span struct{ from, to int32 }

// quickRow reads one record, or returns 0 and has done nothing.
func (w *worker) quickRow(b []byte, p int, blk *Block) (next int) {
	if len(w.comment) > 0 {
		q := p
		for isBlank(b[q]) {
			q++
		}
		if b[q] == w.comment[0] {
			return 0
		}
	}
	var v [3]float64
	var decimals [3]int
	var spans [textSlots]span
	blanks := w.delimiter == ' '
	last := len(w.acts) - 1
	for i, a := range w.acts {
		for b[p] == ' ' || blanks && b[p] == '\t' {
			p++
		}
		start := p
		if a.kind == number {
			var m uint64
			c := b[p]
			if c == '-' {
				p++
				c = b[p]
			}
			whole := p
			for c -= '0'; c <= 9; c = b[p] - '0' {
				m = m*10 + uint64(c)
				p++
			}
			n, fraction := p-whole, 0
			if b[p] == w.decimal {
				p++
				part := p
				for c = b[p] - '0'; c <= 9; c = b[p] - '0' {
					m = m*10 + uint64(c)
					p++
				}
				fraction = p - part
				n += fraction
			}
			if uint(n-1) >= 19 {
				return 0
			}
			f := float64(m)
			if m > exactIntegers {
				if w.decimal != '.' {
					return 0
				}
				f, _ = strconv.ParseFloat(unsafe.String(&b[whole], p-whole), 64)
			} else if fraction > 0 {
				f /= powersOfTen[fraction]
			}
			if whole > start && m != 0 {
				f = -f
			}
			v[a.slot], decimals[a.slot] = f, fraction
			for b[p] == ' ' && !blanks {
				p++
			}
		} else {
			for !w.stop[b[p]] {
				p++
			}
			end := p
			for end > start && b[end-1] == ' ' {
				end--
			}
			if end-start > maxText || blanks && end == start {
				return 0
			}
			if a.kind == text {
				spans[a.slot] = span{int32(start), int32(end)}
			}
		}
		if i == last {
			break
		}
		if !w.isDelimiter(b[p]) {
			return 0
		}
		p++
	}
	for blanks && isBlank(b[p]) {
		p++
	}
	// A delimiter behind the last field is passed over by row as well.
	if b[p] == w.delimiter && !blanks {
		p++
	}
	switch {
	case b[p] == '\n':
		p++
	case b[p] == '\r':
		if p++; p < len(b) && b[p] == '\n' {
			p++
		}
	default:
		return 0
	}
	if w.missing(v[2]) != "" {
		return 0
	}
	if w.down != nil || w.transform != nil {
		v = w.settled(v, decimals[2])
	}
	if w.choosing {
		for slot, s := range spans {
			w.current[slot] = b[s.from:s.to]
		}
		why := w.chosen()
		if why == "" && w.exclude != nil {
			if k := w.exclude.find(w.current[textSlot[ID]], orb.Point{v[0], v[1]}, w.hit); k >= 0 {
				why = w.exclude.reasonOf(k)
			}
		}
		if why != "" {
			blk.Counts.Read++
			w.leaveOut(why)
			return p
		}
	}
	blk.Counts.Read++
	blk.Points = append(blk.Points, orb.Point{v[0], v[1]})
	blk.Z = append(blk.Z, v[2])
	blk.Lines = append(blk.Lines, uint32(w.line))
	blk.DecimalsXY = max(blk.DecimalsXY, decimals[0], decimals[1])
	blk.DecimalsZ = max(blk.DecimalsZ, decimals[2])
	if w.part != nil {
		blk.noteDecimals(decimals)
	}
	for _, slot := range w.slots {
		blk.texts[slot].addFrom(b, int(spans[slot].from), int(spans[slot].to))
	}
	return p
}
