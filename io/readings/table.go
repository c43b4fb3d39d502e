package readings

import (
	"fmt"
	"strings"
)

// A Table is a small file that stands beside the readings, such as a table of wells,
// kept as text: each field can be read as a number and complained about by its place.
// Read-only once read.
type Table struct {
	Name     string
	Layout   Layout
	Warnings []Warning

	decimal byte
	missing map[string]string
	rows    []tableRow
	fieldOf []int // of a column, by role or by its number among those asked for
	data    []byte
	what    []string
}

type tableRow struct {
	line   int
	from   int // in data
	fields []string
	at     []int // where the fields stand in data
}

// maxTable bounds the size of such a file: it is kept in memory, and a person or an
// office wrote it.
const maxTable = 64 << 20

// ReadRoles reads a table whose columns play roles, found as Read finds its columns;
// any role is a role here. A role of need that no column has is an error. Lines
// that hold nothing are passed over; a line that cannot be taken apart is an error,
// since nobody would notice what it failed to say. Errors: *PositionError,
// *BadLines, *OptionError.
func ReadRoles(src Source, d Declared, need []Role) (*Table, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	b, skipped, perr := readWhole(src, d.SkipRows, maxTable)
	if perr != nil {
		perr.File = src.Name
		return nil, perr
	}
	s := newSniffer(&d, needTable, Layout{File: src.Name, Encoding: "UTF-8", SkipRows: d.SkipRows})
	s.line, s.tableNeeds = skipped, need
	p, passed, perr := s.sniff(b, true)
	if perr != nil {
		return nil, perr
	}
	for range passed {
		b = b[behindLineEnd(b, lineEnd(b, 0)):]
	}
	t := &Table{Name: src.Name, Layout: p.layout, Warnings: s.warnings, decimal: p.decimal, missing: p.missingText}
	t.fieldOf = p.fieldOf[:]
	for r := range roleCount {
		t.what = append(t.what, r.String())
	}
	return t, t.take(b, s.line+passed, p.format, len(p.acts))
}

// A Word is a column of a table by the words that its header may have, lower-case
// letters and digits alone: "fromx" stands for "From X" and "from_x". The first is
// what messages call it.
type Word struct {
	Names    []string
	Optional bool
}

// ReadWords reads a table whose header has words of its own; column k of the Table
// is words[k], other columns are passed over. Delimiter, decimal mark and comment
// mark are those of d, or detected by the header. Errors as in ReadRoles.
func ReadWords(src Source, d Declared, words []Word) (*Table, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	b, skipped, perr := readWhole(src, d.SkipRows, maxTable)
	if perr != nil {
		perr.File = src.Name
		return nil, perr
	}
	s := newSniffer(&d, needTable, Layout{File: src.Name, Encoding: "UTF-8"})
	s.line = skipped
	start := s.passOver(b)
	if start == len(b) {
		return nil, s.nothing()
	}
	s.line += countLines(b[:start])
	b = b[start:]
	t := &Table{Name: src.Name, fieldOf: make([]int, len(words)), decimal: '.'}
	best := -1
	for _, delimiter := range []byte("\t;|, ") {
		if d.Delimiter != DetectDelimiter {
			delimiter = byte(d.Delimiter)
		}
		header := take(b, 0, format{delimiter, s.format.comment}, 1)
		if len(header) == 0 {
			return nil, s.nothing() // delimiters alone
		}
		if found := t.find(header[0].fields, words); found > best {
			best, s.format.delimiter = found, delimiter
		}
	}
	header := take(b, 0, s.format, 1)[0]
	t.find(header.fields, words)
	var expected []string
	lacks := false
	for k, w := range words {
		t.what = append(t.what, w.Names[0])
		lacks = lacks || t.fieldOf[k] < 0 && !w.Optional
		if !w.Optional {
			expected = append(expected, w.Names[0])
		}
	}
	if lacks {
		return nil, s.atField(b, header, -1, &PositionError{Kind: UnknownHeader, What: "header", Seen: shorten(strings.Join(header.fields, ", ")),
			Expected: "columns " + strings.Join(expected, ", ")})
	}
	if d.Decimal != DetectDecimal {
		t.decimal = byte(d.Decimal)
	}
	s.layout.HeaderLine, s.layout.Delimiter, s.layout.Decimal = s.line+1, Delimiter(s.format.delimiter), Decimal(t.decimal)
	for _, name := range header.fields {
		s.layout.Columns = append(s.layout.Columns, Column{Name: name})
	}
	t.Layout = s.layout
	return t, t.take(b[header.next:], s.line+countLines(b[:header.next]), s.format, len(header.fields))
}

// find looks the words up in a header and returns how many it has.
func (t *Table) find(header []string, words []Word) (found int) {
	for k := range words {
		t.fieldOf[k] = -1
		for i, name := range header {
			key := wordKey(name)
			for _, w := range words[k].Names {
				if key == w && t.fieldOf[k] < 0 {
					t.fieldOf[k] = i
					found++
				}
			}
		}
	}
	return found
}

// take takes the rows apart. line is how many lines stand before b.
func (t *Table) take(b []byte, line int, f format, width int) error {
	t.data = b
	bad := &BadLines{}
	tok := tokens{format: f}
	for p := 0; p < len(b); {
		if f.isComment(b[p:]) {
			p = behindLineEnd(b, lineEnd(b, p))
			line++
			continue
		}
		next := tok.record(b, p)
		n := len(tok.fields)
		switch {
		case tok.bad:
			e := quoteTrouble(tok.quote)
			l, column := position(b, p, tok.quote.at)
			e.File, e.Line, e.Column = t.Name, line+l+1, column
			bad.add(e)
		case allEmpty(tok.fields):
		case n < width || !allEmpty(tok.fields[width:]):
			bad.add(&PositionError{File: t.Name, Line: line + 1, Kind: FieldCount, What: fields(n), Expected: fmt.Sprintf("%d, as in the header", width)})
		default:
			r := tableRow{line: line + 1, from: p}
			for _, field := range tok.fields[:width] {
				r.fields, r.at = append(r.fields, string(trimSpaces(field.text))), append(r.at, field.start)
			}
			t.rows = append(t.rows, r)
			bad.Good++
		}
		line += countLines(b[p:next])
		p = next
	}
	if bad.Total > 0 {
		return bad
	}
	return nil
}

// add notes a bad line.
func (e *BadLines) add(p *PositionError) {
	if e.Total++; len(e.First) < firstFew {
		e.First = append(e.First, p)
	}
}

// Len returns how many rows there are.
func (t *Table) Len() int { return len(t.rows) }

// Line returns the line of a row.
func (t *Table) Line(row int) int { return t.rows[row].line }

// Has reports whether the table has a column: a role of ReadRoles, or the number of
// a word of ReadWords.
func (t *Table) Has(column int) bool { return t.fieldOf[column] >= 0 }

// Text returns a field, empty if the table has no such column.
func (t *Table) Text(row, column int) string {
	i := t.fieldOf[column]
	if i < 0 {
		return ""
	}
	return t.rows[row].fields[i]
}

// Number reads a field as a number.
func (t *Table) Number(row, column int) Number {
	return readNumber([]byte(t.Text(row, column)), t.decimal, t.missing, nil)
}

// Fault is an error about a field.
func (t *Table) Fault(row, column int, kind Kind, expected string) *PositionError {
	r := &t.rows[row]
	e := &PositionError{File: t.Name, Line: r.line, Kind: kind, What: t.what[column], Seen: shorten(t.Text(row, column)), Expected: expected}
	if i := t.fieldOf[column]; i >= 0 {
		e.Field = i + 1
		_, e.Column = position(t.data, r.from, r.at[i])
	}
	return e
}

// NumberFault is the error of a field that is no number.
func (t *Table) NumberFault(row, column int, kind Kind) *PositionError {
	return t.Fault(row, column, kind, expectedNumber(kind, t.decimal))
}
