package readings

import (
	"bytes"
	"fmt"
	"strings"
)

// Detection.
//
// What is not declared is read off the first lines of each file, and told in its
// Layout. Where two readings of the same text are possible (decimal comma or
// thousands, depth or elevation, two columns for one role) it is asked, not
// guessed.

// sampleRows is how many records detection looks at.
const sampleRows = 256

// sniffer looks at the beginning of a file.
type sniffer struct {
	declared *Declared
	need     need
	layout   Layout
	format   format
	line     int    // lines passed over before b
	counts   Counts // what these lines are
	warnings []Warning

	// decided is true once it is known whether lines may be comments; hashed if
	// that was taken from the # that the first line begins with.
	decided, hashed bool

	reducer    Reducer    // nil: rows without a value are an error
	depthFrom  *DepthFrom // what depths are counted from, if it is one number
	tableNeeds []Role     // with needTable
	reduce     bool       // this file's rows
}

func newSniffer(d *Declared, n need, l Layout) *sniffer {
	s := &sniffer{declared: d, need: n, layout: l}
	switch d.Comment {
	case "":
	case "none":
		s.decided = true
	default:
		s.decided = true
		s.format.comment = []byte(d.Comment)
	}
	s.layout.CommentDeclared = s.decided
	s.layout.ColumnsDeclared = !d.Columns.IsZero()
	s.layout.DelimiterDeclared = d.Delimiter != DetectDelimiter
	s.layout.DecimalDeclared = d.Decimal != DetectDecimal
	return s
}

// A row of the sample, its fields copied.
type row struct {
	fields []string
	at     []int // where the fields stand
	next   int   // where the row behind begins
}

// sniff makes a plan from b, the first bytes of a file behind what was passed over
// already. It returns how many lines at the beginning of b hold no readings. A nil
// plan without an error means that all lines of b are such and more is to come.
func (s *sniffer) sniff(b []byte, atEnd bool) (p *plan, passed int, err *PositionError) {
	whole := b
	if !atEnd {
		whole = b[:lastLineEnd(b, 0, true)]
	}
	if k := bytes.IndexByte(b, 0); k >= 0 {
		return nil, 0, s.at(b, k, binaryError())
	}
	if len(whole) == 0 && !atEnd {
		e := tooLong(b)
		return nil, 0, s.at(b, 0, e)
	}
	t, _, _ := readable(whole)
	counts := s.counts
	start := s.passOver(t)
	if start == len(t) {
		if atEnd {
			return nil, 0, s.nothing()
		}
		n := countLines(t)
		s.line += n
		return nil, n, nil
	}
	s.format.delimiter = s.delimiter(t[start:])
	rows := take(t, start, s.format, sampleRows)
	if s.hashed && s.line == s.declared.SkipRows && s.hashIsData(t, rows) {
		s.hashed, s.format.comment, s.counts = false, nil, counts
		start = s.passOver(t)
		rows = take(t, start, s.format, sampleRows)
	}
	if len(rows) == 0 {
		// Delimiters alone, as below a table from a spreadsheet.
		if atEnd {
			return nil, 0, s.nothing()
		}
		s.passRows(t, start, len(t))
		n := countLines(t)
		s.line += n
		return nil, n, nil
	}
	s.layout.Delimiter = Delimiter(s.format.delimiter)
	s.layout.Comment = string(s.format.comment)
	headers, err := s.columns(t, rows)
	if err != nil {
		return nil, 0, err
	}
	if err := s.decimal(t, rows[headers:]); err != nil {
		return nil, 0, err
	}
	s.counts.Headers = headers
	end := start
	if headers > 0 {
		end = rows[headers-1].next
		s.passRows(t, start, end)
	}
	passed = countLines(t[:end])
	if end == len(t) && !isLineEnd(t[end-1]) {
		passed++ // a last line without a line end
	}
	p = newPlan(s.layout, s.declared, s.format, s.need)
	if p.reduce = s.reduce; p.reduce {
		p.reducer = s.reducer
	}
	if s.layout.Down {
		p.down = s.depthFrom
	}
	switch {
	case headers > 0:
		p.source = "as in the header"
		if s.layout.ColumnsDeclared && !s.declared.Columns.named {
			p.source = "as declared"
		}
	case s.layout.ColumnsDeclared && !s.declared.Columns.named:
		p.source = "as declared"
	default:
		p.source = fmt.Sprintf("as in line %d", s.line+countLines(t[:start])+1)
	}
	return p, passed, nil
}

// at fills in the place of an error that stands at b[p].
func (s *sniffer) at(b []byte, p int, e *PositionError) *PositionError {
	line, column := position(b, 0, p)
	e.File, e.Line, e.Column = s.layout.File, s.line+line+1, column
	return e
}

// atField fills in the place of an error about a field of a row, or about the whole
// row if field is -1.
func (s *sniffer) atField(b []byte, r row, field int, e *PositionError) *PositionError {
	if field < 0 {
		s.at(b, r.at[0], e)
		e.Column = 0
		return e
	}
	e.Field = field + 1
	return s.at(b, r.at[field], e)
}

// nothing is the error of a file that ends before its first reading.
func (s *sniffer) nothing() *PositionError {
	if s.hashed {
		return &PositionError{File: s.layout.File, Kind: WhichComment, What: "every line begins with", Seen: "#",
			Expected: `readings, or a comment mark to be declared ("none" if these are readings)`}
	}
	return &PositionError{File: s.layout.File, Kind: Empty, What: "no line to read", Expected: "readings"}
}

// passOver returns where the first line begins that is neither blank nor a comment,
// and counts those before it.
func (s *sniffer) passOver(b []byte) int {
	p := 0
	for p < len(b) {
		end := lineEnd(b, p)
		line := bytes.TrimSpace(b[p:end])
		switch {
		case len(line) == 0:
			s.counts.BlankLines++
		default:
			if !s.decided {
				s.decided = true
				if s.hashed = line[0] == '#'; s.hashed {
					s.format.comment = []byte{'#'}
				}
			}
			if !s.format.isComment(b[p:end]) {
				return p
			}
			s.counts.Comments++
		}
		p = behindLineEnd(b, end)
	}
	return p
}

// passRows counts the comments and blank rows of b[from:to].
func (s *sniffer) passRows(b []byte, from, to int) {
	t := tokens{format: s.format}
	for p := from; p < to; {
		if s.format.isComment(b[p:]) {
			s.counts.Comments++
			p = behindLineEnd(b, lineEnd(b, p))
			continue
		}
		if p = t.record(b, p); allEmpty(t.fields) {
			s.counts.BlankLines++
		}
	}
}

// take takes apart the first records of b from start on, blank ones and comments
// left out.
func take(b []byte, start int, f format, most int) (rows []row) {
	t := tokens{format: f}
	for p := start; p < len(b) && len(rows) < most; {
		if f.isComment(b[p:]) {
			p = behindLineEnd(b, lineEnd(b, p))
			continue
		}
		next := t.record(b, p)
		r := row{next: next}
		empty := true
		for _, field := range t.fields {
			empty = empty && len(field.text) == 0
			r.fields = append(r.fields, string(field.text))
			r.at = append(r.at, field.start)
		}
		if !empty {
			rows = append(rows, r)
		}
		p = next
	}
	return rows
}

// delimiter returns the declared delimiter, or the first of tab, semicolon, bar,
// comma, blanks that cuts most lines into the same number of fields, at least two
// of them numbers. If none does (a header alone), it is the one that finds most
// known words in the first line.
func (s *sniffer) delimiter(b []byte) byte {
	if s.declared.Delimiter != DetectDelimiter {
		return byte(s.declared.Delimiter)
	}
	best, bestScore := byte(','), 0
	for _, d := range []byte("\t;|, ") {
		rows := take(b, 0, format{d, s.format.comment}, sampleRows)
		if cutsWell(rows, d) {
			return d
		}
		if len(rows) == 0 || len(rows[0].fields) < 2 {
			continue
		}
		score := 1
		for _, name := range rows[0].fields {
			if key := wordKey(name); headerWords[key].role != NoRole || levelWords[key] {
				score += 2
			}
		}
		if score > bestScore {
			best, bestScore = d, score
		}
	}
	return best
}

func cutsWell(rows []row, d byte) bool {
	counts := make(map[int]int)
	usual := 0
	for _, r := range rows {
		n := len(r.fields)
		counts[n]++
		if counts[n] > counts[usual] || counts[n] == counts[usual] && n > usual {
			usual = n
		}
	}
	if usual < 2 {
		return false
	}
	withNumbers := 0
	for _, r := range rows {
		if len(r.fields) != usual {
			continue
		}
		numbers := 0
		for _, f := range r.fields {
			if isNumber(f) {
				numbers++
			} else if d == ',' && severalNumbers(f) {
				return false // decimal commas between blanks: 1,5 2,5
			}
		}
		if numbers >= 2 {
			withNumbers++
		}
	}
	return withNumbers > 0 && 2*counts[usual] >= len(rows) && 2*withNumbers >= len(rows)-1
}

// isNumber reports whether text is a number with one or the other decimal mark.
func isNumber(text string) bool {
	if _, _, kind := parseNumber([]byte(text), '.'); kind == 0 || kind == OutOfRange {
		return true
	}
	_, _, kind := parseNumber([]byte(text), ',')
	return kind == 0 || kind == OutOfRange
}

func severalNumbers(text string) bool {
	parts := strings.Fields(text)
	if len(parts) < 2 {
		return false
	}
	for _, p := range parts {
		if !isNumber(p) {
			return false
		}
	}
	return true
}

// hashIsData reports whether the first line, which begins with #, looks like the
// readings behind it: as many fields, and numbers where they have numbers. Then #
// is part of a name, and no line is passed over.
func (s *sniffer) hashIsData(b []byte, rows []row) bool {
	plain := take(b, 0, format{delimiter: s.format.delimiter}, 1)
	if len(plain) == 0 || len(rows) == 0 {
		return false
	}
	hash, last := plain[0], rows[len(rows)-1]
	if len(hash.fields) != len(last.fields) {
		return false
	}
	numbers := 0
	for i, f := range last.fields {
		if isNumber(f) && isNumber(hash.fields[i]) {
			numbers++
		}
	}
	return numbers >= 2
}

// decimal settles the decimal mark from the columns that hold numbers.
func (s *sniffer) decimal(b []byte, rows []row) *PositionError {
	if s.declared.Decimal != DetectDecimal {
		s.layout.Decimal = s.declared.Decimal
		return nil
	}
	points, commas, clear := 0, 0, 0
	var asked *PositionError
	for _, r := range rows {
		for i, c := range s.layout.Columns {
			if !s.isNumeric(c.Role) || i >= len(r.fields) {
				continue
			}
			text := r.fields[i]
			switch {
			case strings.Contains(text, "."):
				if _, _, kind := parseNumber([]byte(text), '.'); kind == 0 {
					points++
				}
			case strings.Contains(text, ","):
				if _, _, kind := parseNumber([]byte(text), ','); kind != 0 {
					continue
				}
				commas++
				if !grouped([]byte(strings.TrimLeft(text, "+-")), '.') || strings.HasPrefix(strings.TrimLeft(text, "+-"), "0") {
					clear++
				} else if asked == nil {
					asked = s.atField(b, r, i, &PositionError{Kind: WhichDecimal, What: c.Role.String(), Seen: shorten(text),
						Expected: "to be told whether the comma is the decimal mark or stands between thousands"})
				}
			}
		}
	}
	s.layout.Decimal = DecimalPoint
	if commas > points {
		if clear == 0 {
			return asked
		}
		s.layout.Decimal = DecimalComma
	}
	return nil
}

// isNumeric reports whether a role is read as a number.
func (s *sniffer) isNumeric(r Role) bool {
	switch r {
	case X, Y:
		return true
	case Z:
		return s.need != needPlace
	case Depth:
		return s.reducer != nil || s.depthFrom != nil || s.need == needTable
	case MeasuringPoint, Product, ProductDepth, SpecificGravity, Ground, ScreenTop, ScreenBottom:
		return s.reducer != nil && s.reducer.Uses(r) || s.need == needTable
	}
	return false
}
