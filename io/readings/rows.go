package readings

import (
	"bytes"
	"fmt"
	"strings"
	"sync/atomic"
	"unicode"
	"unicode/utf8"

	"github.com/paulmach/orb"
)

// Rows, the careful way.
//
// worker.row reads one record by every rule: quotes, missing marks, selection, and
// a message for whatever is wrong. worker.quick reads the usual record without any
// of that, and leaves to row whatever surprises it. Both read a record alike: a
// test holds one against the other.

// worker parses blocks by one plan.
type worker struct {
	*plan
	lenient bool
	tokens  tokens
	blk     *Block
	line    int // of the record, from 0 in the block

	only, without []rolePatterns
	part          Parter
	placed        bool // whether current holds the texts of the record
	byCode        func(code []byte) string
	exclude       *Exclusions
	hit           []atomic.Bool     // rows of exclude that matched
	reasons       map[string]string // reasons met, each kept once
	current       [textSlots][]byte // texts of the record

	reduced   Row       // the row that is being reduced
	stop      [256]bool // bytes at which a plain text ends
	slots     []int8    // of the text columns
	choosing  bool      // by patterns or exclusions
	careful   bool      // never be quick
	account   bool      // keep what was read of rows that are not used
	transform func(orb.Point, float64) (orb.Point, float64)
	perRow    float64 // bytes a reading took in the last block
}

func newWorker(p *plan, o *Options, hit []atomic.Bool) *worker {
	w := &worker{plan: p, lenient: o.Lenient, tokens: tokens{format: p.format}, reasons: make(map[string]string),
		exclude: o.Select.Exclude, hit: hit}
	w.only = groupPatterns(o.Select.Only)
	w.without = groupPatterns(o.Select.Without)
	for c := range w.stop {
		w.stop[c] = c < ' ' || c == 0x7f || c == '"' || p.isDelimiter(byte(c))
	}
	for _, a := range p.acts {
		if a.kind == text {
			w.slots = append(w.slots, a.slot)
		}
	}
	w.part = o.part
	if p.reduce {
		for slot, r := range keptRoles {
			if p.fieldOf[r] < 0 && p.reducer.Provides(r) {
				w.slots = append(w.slots, int8(slot))
			}
		}
	}
	w.account, w.transform = o.Account, o.Transform
	w.byCode = o.Select.Code
	w.choosing = len(w.only)+len(w.without) > 0 || w.byCode != nil || w.exclude != nil
	// With one comma for both, numbers stand in quotes, which quick does not read.
	w.careful = p.raw || o.careful || o.Account || p.reduce || p.delimiter == p.decimal
	return w
}

// parse reads a block that ends with a line end, or with the file.
func (w *worker) parse(blk *Block, b []byte) {
	w.blk, w.line = blk, 0
	if k := bytes.IndexByte(b, 0); k >= 0 {
		line, column := position(b, 0, k)
		blk.fatal = binaryError()
		blk.fatal.Line, blk.fatal.Column = line, column
		b = b[:k]
		b = b[:lastLineEnd(b, 0, false)]
	}
	b, blk.converted, blk.first = readable(b)
	if len(b) == 0 {
		return
	}
	if !isLineEnd(b[len(b)-1]) {
		b = append(b, '\n') // so that no loop needs to look for the end
	}
	w.makeRoom(len(b))
	for p := 0; p < len(b); {
		if !w.careful {
			if p = w.quick(b, p); p == len(b) {
				break
			}
		}
		p = w.row(b, p)
	}
	blk.lines = w.line
	blk.Counts.Used = len(blk.Points)
	if n := len(blk.Points); n > 0 {
		w.perRow = float64(len(b)) / float64(n)
	}
}

// makeRoom allocates what the last block needed, and a little more.
func (w *worker) makeRoom(size int) {
	if w.perRow == 0 {
		return
	}
	n := int(float64(size)/w.perRow*1.05) + 16
	w.blk.Points = make([]orb.Point, 0, n)
	w.blk.Lines = make([]uint32, 0, n)
	if w.need == needValue {
		w.blk.Z = make([]float64, 0, n)
	}
	for _, slot := range w.slots {
		w.blk.texts[slot].ends = make([]uint32, 0, n)
	}
}

// row reads the record at b[p:] into the block and returns where the next begins.
func (w *worker) row(b []byte, p int) (next int) {
	if w.isComment(b[p:]) {
		w.blk.Counts.Comments++
		w.line++
		return behindLineEnd(b, lineEnd(b, p))
	}
	next = w.tokens.record(b, p)
	if allEmpty(w.tokens.fields) && !w.tokens.bad {
		w.blk.Counts.BlankLines++
	} else {
		w.blk.Counts.Read++
		w.record(b, p, next)
	}
	w.line += countLines(b[p:next])
	return next
}

// record reads the record that is taken apart in w.tokens.
func (w *worker) record(b []byte, p, next int) {
	w.placed = false
	if w.tokens.bad {
		w.refuse(b, p, w.tokens.quote.at, quoteTrouble(w.tokens.quote))
		return
	}
	found := w.tokens.fields
	if n := len(found); n != len(w.acts) {
		if n < len(w.acts) || !allEmpty(found[len(w.acts):]) {
			w.refuse(b, p, p, &PositionError{Kind: FieldCount, What: fields(n), Expected: fmt.Sprintf("%d, %s", len(w.acts), w.source)})
			return
		}
	}
	if w.raw && next-p > maxRow {
		w.refuse(b, p, p, &PositionError{Kind: LongText, What: "row", Expected: "at most 65,535 bytes"})
		return
	}
	if w.reduce {
		w.reduceRecord(b, p)
		return
	}
	var trouble *PositionError
	troubleAt, why := 0, ""
	complain := func(i int, e *PositionError) {
		if trouble == nil {
			e.Field, trouble, troubleAt = i+1, e, found[i].start
		}
	}
	for i, a := range w.acts {
		if a.kind != text {
			continue
		}
		w.current[a.slot] = found[i].text
		if e := checkText(found[i]); e != nil {
			e.What = keptRoles[a.slot].String()
			complain(i, e)
		}
	}
	w.placed = true
	if trouble == nil {
		// Chosen by text first: a line without a value may be left out by its status.
		if why = w.chosen(); why != "" && !w.account {
			w.leaveOut(why)
			return
		}
	}
	var v [3]float64
	var decimals [3]int
	missing := ""
	placed, valued := true, true
	for i, a := range w.acts {
		if a.kind != number {
			continue
		}
		role := w.roleOf(a.slot)
		t := trimSpaces(found[i].text)
		if len(w.missingText) > 0 {
			if mark, ok := w.missingText[markKey(string(t))]; ok {
				missing = fmt.Sprintf("%s is %s", role, mark)
				placed, valued = placed && a.slot == 2, false
				continue
			}
		}
		value, d, kind := parseNumber(t, w.decimal)
		if kind != 0 {
			placed, valued = placed && a.slot == 2, false
			complain(i, &PositionError{Kind: kind, What: role.String(), Seen: shorten(string(t)), Expected: expectedNumber(kind, w.decimal)})
			continue
		}
		if mark := w.missing(value); mark != "" && a.slot == 2 {
			missing, valued = fmt.Sprintf("%s is %s", role, mark), false
			continue
		}
		v[a.slot], decimals[a.slot] = value, d
	}
	v = w.settled(v, decimals[2])
	if why == "" && placed && w.exclude != nil {
		if k := w.exclude.find(w.current[textSlot[ID]], orb.Point{v[0], v[1]}, w.hit); k >= 0 {
			why = w.exclude.reasonOf(k)
		}
	}
	if why == "" && trouble != nil {
		trouble.ID = string(w.current[idSlot])
		w.refuse(b, p, troubleAt, trouble)
		return
	}
	if why == "" {
		why = missing
	}
	switch {
	case why != "":
		w.leaveOut(why)
		if w.account {
			k := w.blk.LeftOut[len(w.blk.LeftOut)-1].Row
			k.Placed, k.Valued, k.Point, k.Z = placed, placed && valued, orb.Point{v[0], v[1]}, v[2]
		}
	default:
		w.accept(v, decimals, b[p:next])
	}
}

// settled turns a place and a value as they are written into what they stand for:
// a depth into an elevation, one unit into another.
func (w *worker) settled(v [3]float64, decimals int) [3]float64 {
	if w.down != nil {
		v[2] = w.down.below(v[2], decimals)
	}
	if w.transform != nil {
		var p orb.Point
		p, v[2] = w.transform(orb.Point{v[0], v[1]}, v[2])
		v[0], v[1] = p[0], p[1]
	}
	return v
}

// accept adds a reading to the block.
func (w *worker) accept(v [3]float64, decimals [3]int, record []byte) {
	blk := w.blk
	blk.Points = append(blk.Points, orb.Point{v[0], v[1]})
	blk.Lines = append(blk.Lines, uint32(w.line))
	blk.DecimalsXY = max(blk.DecimalsXY, decimals[0], decimals[1])
	if w.raw {
		for len(record) > 0 && isLineEnd(record[len(record)-1]) {
			record = record[:len(record)-1]
		}
		blk.raw.add(record)
		return
	}
	blk.Z = append(blk.Z, v[2])
	blk.DecimalsZ = max(blk.DecimalsZ, decimals[2])
	if w.part != nil {
		blk.noteDecimals(decimals)
	}
	for _, slot := range w.slots {
		blk.texts[slot].add(w.current[slot])
	}
}

// leaveOut notes a reading that is readable but not to be used.
func (w *worker) leaveOut(why string) {
	kept, ok := w.reasons[why]
	if !ok {
		kept = why
		w.reasons[why] = why
	}
	w.blk.Counts.LeftOut++
	if w.part != nil {
		w.placed = true // quick has looked at the texts, too
		w.blk.leftParts = append(w.blk.leftParts, w.partOfRecord())
	}
	w.blk.LeftOut = append(w.blk.LeftOut, LeftOut{Line: uint32(w.line), ID: string(w.current[idSlot]), Reason: kept})
	if w.account {
		w.blk.LeftOut[len(w.blk.LeftOut)-1].Row = w.keptRow()
	}
}

// refuse notes a bad line. The trouble stands at b[at], the record at b[p].
func (w *worker) refuse(b []byte, p, at int, e *PositionError) {
	w.blk.Counts.Refused++
	if !w.lenient && len(w.blk.Refused) == firstFew {
		return
	}
	line, column := position(b, p, at)
	e.Line = w.line + line
	if e.Kind != FieldCount {
		e.Column = column
	}
	w.blk.Refused = append(w.blk.Refused, e)
	if w.part != nil {
		w.blk.refusedParts = append(w.blk.refusedParts, w.partOfRecord())
	}
}

// partOfRecord returns the part of a record that is not used, nil if it could not be
// taken apart.
func (w *worker) partOfRecord() *string {
	if !w.placed {
		return nil
	}
	name := w.part(func(r Role) string { return string(w.current[textSlot[r]]) })
	return &name
}

// maxRow is the longest row that is carried along: 2^16 of them fill a page of
// texts.
const maxRow = 1<<16 - 1

// checkText reports a text that is not fit to be kept.
func checkText(f field) *PositionError {
	if len(f.text) > maxText {
		return &PositionError{Kind: LongText, Seen: shorten(string(f.text)), Expected: "at most 1,024 bytes"}
	}
	for _, c := range f.text {
		if c == 0x7f || c < ' ' && c != '\t' && !(f.quoted && isLineEnd(c)) {
			return &PositionError{Kind: BadCharacter, Seen: shorten(string(f.text)), Expected: "text without control characters"}
		}
	}
	return nil
}

// trimSpaces takes off what tables put around numbers: no-break spaces and their kin.
func trimSpaces(t []byte) []byte {
	if len(t) == 0 || t[0] < utf8.RuneSelf && t[len(t)-1] < utf8.RuneSelf && !isBlank(t[0]) && !isBlank(t[len(t)-1]) {
		return t
	}
	return bytes.TrimFunc(t, unicode.IsSpace)
}

// markKey is how missing marks and fields are compared.
func markKey(m string) string { return strings.ToUpper(m) }

// markNumber reads a missing mark as a number.
func markNumber(m string) (float64, bool) {
	for _, decimal := range []byte(".,") {
		if v, _, kind := parseNumber([]byte(m), decimal); kind == 0 {
			return v, true
		}
	}
	return 0, false
}
