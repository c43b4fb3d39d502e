package lines

import (
	"fmt"
	"math"

	"isofacet/io/readings"
)

// Strings.
//
// A line in the readings themselves is the readings that share its name, strung in
// the order of their file: the k-th vertex is the k-th such row. Nothing else says
// how the points of a crest follow each other. A reading that was merged with others at
// its place passes its membership on to the one that stands for it, so that a ring whose
// first place was shot again at the end is closed, and lines that meet in one
// place meet in one reading.

// Strung makes lines of readings: of those that share a text in the role line, and
// if table is not nil, of those that it calls a line, by code and number, from mark to
// mark. A reading with the name of a line is not asked for its code. Files are kept
// apart. Line.Readings tells the readings, each of which is used once, whatever
// number of lines run through it. Heights are those of the readings, zeros too.
//
// A reading that was left out is missing in its line, its marks included.
//
// Errors are *Faults. Time and memory are linear in the readings on lines.
func Strung(set *readings.Set, table *CodeTable) (*Set, error) {
	s := stringer{checker: newChecker("line", UseZeros), readings: set, table: table}
	if table != nil && !set.Has(readings.Code) {
		file := ""
		if len(set.Layouts) > 0 {
			file = set.Layouts[0].File
		}
		s.checker.add(&Fault{Place: Place{File: file}, Kind: NoCodeColumn, Seen: "no column for code", Expected: "one to look up in " + table.Name})
		s.endSource()
		return s.result()
	}
	s.withIDs = set.Has(readings.ID)
	used, merged := 0, 0
	for file := range set.Layouts {
		s.begin(set.Layouts[file].File)
		// Used and merged readings rise by line in each file: take them in turn.
		for {
			usedRow, mergedRow := uint32(math.MaxUint32), uint32(math.MaxUint32)
			if used < set.Len() && set.Source(used) == file {
				usedRow = set.Lines[used]
			}
			if merged < len(set.Merged) && int(set.Merged[merged].File) == file {
				mergedRow = set.Merged[merged].Line
			}
			if usedRow == math.MaxUint32 && mergedRow == math.MaxUint32 {
				break
			}
			if usedRow < mergedRow {
				s.add(shot{used, usedRow, set.ID(used), set.Text(readings.Line, used), set.Text(readings.Code, used)})
				used++
				continue
			}
			m := &set.Merged[merged]
			s.add(shot{m.Into, mergedRow, m.ID, m.LineName, m.Code})
			merged++
		}
		s.end()
	}
	return s.result()
}

// shot is a reading as it was read, and the used reading that stands for it.
type shot struct {
	reading  int
	row      uint32
	id       string
	on, code string
}

// stringer strings the readings of one file at a time.
type stringer struct {
	*checker
	readings *readings.Set
	table    *CodeTable
	withIDs  bool

	file   string
	list   []*Line
	byName map[string]*Line
	coded  map[string]Coded
	states map[[2]string]*stringState
}

// stringState is where the strings of a code and number are at.
type stringState struct {
	open  *Line
	count int // begun so far
	ended uint32
}

func (s *stringer) begin(file string) {
	s.file, s.list = file, nil
	s.byName = make(map[string]*Line)
	s.coded = make(map[string]Coded)
	s.states = make(map[[2]string]*stringState)
}

func (s *stringer) end() {
	for _, l := range s.list {
		s.keep(l)
	}
	s.endSource()
}

func (s *stringer) add(p shot) {
	if p.on != "" {
		l := s.byName[p.on]
		if l == nil {
			l = s.start(p.on)
			s.byName[l.Name] = l
		}
		s.extend(l, p)
		return
	}
	if s.table == nil {
		return
	}
	c, ok := s.coded[p.code]
	if !ok {
		c = s.table.Take(p.code)
		s.coded[p.code] = c
	}
	if c.Use == OnLine {
		s.addCoded(p, &c)
	}
}

func (s *stringer) addCoded(p shot, c *Coded) {
	key := [2]string{c.Code, c.Number}
	st := s.states[key]
	if st == nil {
		st = &stringState{}
		s.states[key] = st
	}
	if st.open == nil || c.Begin {
		name := s.table.stringName(c)
		if st.count++; st.count > 1 {
			name = fmt.Sprintf("%s (%d)", name, st.count)
		}
		st.open = s.start(name)
		if st.ended > 0 && !c.Begin {
			s.set.warn(s.file, int(p.row), fmt.Sprintf("%s goes on behind its end in row %d without a mark: taken as a new line", called("line", s.table.stringName(c)), st.ended))
		}
		st.ended = 0
	}
	s.extend(st.open, p)
	if c.Close {
		s.close(st.open, p)
	}
	if c.Close || c.End {
		st.open, st.ended = nil, p.row
	}
}

// start begins a line.
func (s *stringer) start(name string) *Line {
	l := &Line{Name: name, File: s.file}
	s.list = append(s.list, l)
	return l
}

// extend adds a reading at the end of a line.
func (s *stringer) extend(l *Line, p shot) {
	l.Points = append(l.Points, s.readings.Points[p.reading])
	l.Z = append(l.Z, s.readings.Z[p.reading])
	l.numbers = append(l.numbers, p.row)
	l.Readings = append(l.Readings, int32(p.reading))
	if s.withIDs {
		l.ids = append(l.ids, p.id)
	}
}

// close runs a line back to its first reading, unless it is there.
func (s *stringer) close(l *Line, p shot) {
	if distinctOf(l) < 3 {
		s.checker.add(&Fault{Place: Place{File: s.file, Row: int(p.row)}, Name: l.Name, Kind: FewCorners,
			Seen: fmt.Sprintf("%s is closed by a mark, with %s", called("line", l.Name), counted(distinctOf(l), "distinct position")), Expected: "at least 3"})
		return
	}
	if l.Readings[len(l.Readings)-1] == l.Readings[0] {
		return
	}
	first := shot{reading: int(l.Readings[0]), row: l.numbers[0]}
	if s.withIDs {
		first.id = l.ids[0]
	}
	s.extend(l, first)
}

// distinctOf counts the distinct places of a line in which neighbours may repeat,
// up to 3.
func distinctOf(l *Line) int {
	a, b := l.Readings[0], int32(-1)
	for _, r := range l.Readings {
		switch {
		case r == a || r == b:
		case b < 0:
			b = r
		default:
			return 3
		}
	}
	if b < 0 {
		return 1
	}
	return 2
}
