package readings

import (
	"fmt"
	"strings"
	"sync/atomic"

	"github.com/paulmach/orb"
)

// Exclusions are the rows of a file that says which readings to leave out, and why.
// Columns, by the names in its header: id, or x and y (or all three), then decision
// and reason. Only the decision "leave out" with a reason counts.
type Exclusions struct {
	Name string
	// Other is how many rows have another decision, or none; NoReason are the lines
	// of rows that would leave out and do not say why. Neither count.
	Other    int
	NoReason []int

	rows    []exclusion
	byID    map[string][]int
	byPlace map[orb.Point][]int // rows without an id
}

type exclusion struct {
	line            int
	id              string
	place           orb.Point
	hasID, hasPlace bool
	reason          string
}

// Len returns how many rows count.
func (e *Exclusions) Len() int { return len(e.rows) }

// maxExclusions bounds the size of an exclusion file: it is kept in memory and was
// written by a person, or by a page a person clicked on.
const maxExclusions = 64 << 20

// ReadExclusions reads an exclusion file. Of d it uses the delimiter, the decimal
// mark, the comment mark and the rows to skip. A row that cannot be read is an
// error: nobody would notice what it failed to leave out.
func ReadExclusions(src Source, d Declared) (*Exclusions, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	b, skipped, perr := readWhole(src, d.SkipRows, maxExclusions)
	if perr != nil {
		perr.File = src.Name
		return nil, perr
	}
	d.Columns = Columns{}
	s := newSniffer(&d, needPlace, Layout{File: src.Name})
	s.line = skipped
	start := s.passOver(b)
	if start == len(b) {
		return nil, s.nothing()
	}
	s.format.delimiter = s.exclusionDelimiter(b[start:])
	s.line += countLines(b[:start])
	b = b[start:]
	t := tokens{format: s.format}
	next := t.record(b, 0)
	where, perr := s.exclusionHeader(b, t.fields)
	if perr != nil {
		return nil, perr
	}
	e := &Exclusions{Name: src.Name, byID: make(map[string][]int), byPlace: make(map[orb.Point][]int)}
	bad := &BadLines{}
	for {
		// s.line and b move on together, so that places count from the record.
		s.line += countLines(b[:next])
		if b = b[next:]; len(b) == 0 {
			break
		}
		if s.format.isComment(b) {
			next = behindLineEnd(b, lineEnd(b, 0))
			continue
		}
		if next = t.record(b, 0); allEmpty(t.fields) {
			continue
		}
		perr := s.exclusionRow(e, b, &t, where)
		if perr == nil {
			bad.Good++
			continue
		}
		if bad.Total++; len(bad.First) < firstFew {
			bad.First = append(bad.First, perr)
		}
	}
	if bad.Total > 0 {
		return nil, bad
	}
	return e, nil
}

// exclusionColumns are the numbers of the columns, -1 for none.
type exclusionColumns struct{ id, x, y, decision, reason, count int }

// exclusionDelimiter finds the delimiter by the words of the header: there may be
// no numbers to go by.
func (s *sniffer) exclusionDelimiter(b []byte) byte {
	if s.declared.Delimiter != DetectDelimiter {
		return byte(s.declared.Delimiter)
	}
	for _, d := range []byte("\t;|, ") {
		for _, r := range take(b, 0, format{d, s.format.comment}, 1) {
			for _, name := range r.fields {
				if strings.EqualFold(name, "decision") {
					return d
				}
			}
		}
	}
	return ','
}

func (s *sniffer) exclusionHeader(b []byte, header []field) (w exclusionColumns, err *PositionError) {
	w = exclusionColumns{-1, -1, -1, -1, -1, len(header)}
	var names []string
	for i, f := range header {
		name := string(f.text)
		names = append(names, name)
		switch key := wordKey(name); {
		case key == "decision":
			w.decision = i
		case key == "reason":
			w.reason = i
		case headerWords[key].role == ID && (w.id < 0 || !headerWords[key].weak):
			w.id = i
		case headerWords[key].role == X:
			w.x = i
		case headerWords[key].role == Y:
			w.y = i
		}
	}
	if w.decision < 0 || w.reason < 0 || w.id < 0 && (w.x < 0 || w.y < 0) {
		e := s.at(b, 0, &PositionError{Kind: UnknownHeader, What: "header", Seen: shorten(strings.Join(names, ", ")),
			Expected: "columns decision, reason and id (or x and y)"})
		e.Column = 0
		return w, e
	}
	return w, nil
}

// exclusionRow takes a row into e.
func (s *sniffer) exclusionRow(e *Exclusions, b []byte, t *tokens, w exclusionColumns) *PositionError {
	if t.bad {
		return s.at(b, t.quote.at, quoteTrouble(t.quote))
	}
	if n := len(t.fields); n != w.count {
		err := s.at(b, 0, &PositionError{Kind: FieldCount, What: fields(n), Expected: fmt.Sprintf("%d, as in the header", w.count)})
		err.Column = 0
		return err
	}
	if !strings.EqualFold(string(t.fields[w.decision].text), "leave out") {
		e.Other++
		return nil
	}
	x := exclusion{line: s.line + 1, reason: string(t.fields[w.reason].text)}
	if w.id >= 0 {
		x.id = string(t.fields[w.id].text)
		x.hasID = x.id != ""
	}
	if w.x >= 0 && w.y >= 0 && (len(t.fields[w.x].text) > 0 || len(t.fields[w.y].text) > 0) {
		for k, i := range [2]int{w.x, w.y} {
			v, kind := s.place(t.fields[i].text)
			if kind != 0 {
				return s.at(b, t.fields[i].start, &PositionError{Field: i + 1, Kind: kind, What: [2]string{"x", "y"}[k],
					Seen: shorten(string(t.fields[i].text)), Expected: expectedNumber(kind, byte(max(s.declared.Decimal, '.')))})
			}
			x.place[k] = v
		}
		x.hasPlace = true
	}
	if !x.hasID && !x.hasPlace {
		return s.at(b, 0, &PositionError{Kind: MissingRole, What: "decision to leave out what", Expected: "an id, or x and y"})
	}
	if x.reason == "" {
		e.NoReason = append(e.NoReason, x.line)
		return nil
	}
	if x.hasID {
		e.byID[x.id] = append(e.byID[x.id], len(e.rows))
	} else {
		e.byPlace[x.place] = append(e.byPlace[x.place], len(e.rows))
	}
	e.rows = append(e.rows, x)
	return nil
}

// place reads a coordinate with the declared decimal mark, or the point, or behind
// a semicolon or tab the comma.
func (s *sniffer) place(t []byte) (v float64, kind Kind) {
	if s.declared.Decimal != DetectDecimal {
		v, _, kind = parseNumber(t, byte(s.declared.Decimal))
		return v, kind
	}
	v, _, kind = parseNumber(t, '.')
	if kind == DecimalMark && !grouped(t, '.') {
		v, _, kind = parseNumber(t, ',')
	}
	return v, kind
}

// find returns the first row that leaves a reading out, -1 if none does, and marks
// in hit every row that matches it.
func (e *Exclusions) find(id []byte, place orb.Point, hit []atomic.Bool) int {
	found := -1
	try := func(rows []int) {
		for _, k := range rows {
			if r := &e.rows[k]; !r.hasID || !r.hasPlace || r.place == place {
				hit[k].Store(true)
				if found < 0 || k < found {
					found = k
				}
			}
		}
	}
	if len(id) > 0 {
		try(e.byID[string(id)])
	}
	if len(e.byPlace) > 0 {
		try(e.byPlace[place])
	}
	return found
}

// reasonOf says why row k leaves a reading out.
func (e *Exclusions) reasonOf(k int) string {
	return fmt.Sprintf("%s (%s:%d)", e.rows[k].reason, e.Name, e.rows[k].line)
}

// warnings tells of rows that match no reading, and of those that give no reason.
func (e *Exclusions) warnings(hit []atomic.Bool) []Warning {
	var all []Warning
	for k := range e.rows {
		if hit[k].Load() {
			continue
		}
		r := &e.rows[k]
		what := "no reading matches"
		if r.hasID {
			what += fmt.Sprintf(" id %q", r.id)
		}
		if r.hasPlace {
			what += fmt.Sprintf(" at %s,%s", plain(r.place[0]), plain(r.place[1]))
		}
		all = append(all, Warning{e.Name, r.line, what})
	}
	for _, line := range e.NoReason {
		all = append(all, Warning{e.Name, line, "leaves out without a reason: not followed"})
	}
	return all
}

func allEmpty(fields []field) bool {
	for i := range fields {
		if len(fields[i].text) > 0 {
			return false
		}
	}
	return true
}

// quoteTrouble is the error for quotes that do not fit; its place is that of q.
func quoteTrouble(q quoteError) *PositionError {
	if q.open {
		return &PositionError{Kind: Quote, What: "quote that is not closed", Expected: "a closing quote within 65,536 bytes"}
	}
	return &PositionError{Kind: Quote, What: "text behind a closing quote", Expected: `the end of the field; a quote inside quotes is written ""`}
}
