package readings

import (
	"bytes"
	"unicode/utf8"
)

// Records and fields.
//
// A record is a line, or several if a line end stands inside quotes. Lines end with
// LF, CRLF or CR, whichever comes. Quotes follow RFC 4180 with these additions:
// blanks around a quoted field are passed over, a quote inside a field that does
// not begin with one is a character like any other (a 6" pipe), and a quoted field
// has to close within maxQuoted bytes. One that does not is bad, and its line ends
// where its line ends: an open quote costs one line, not the rest of the file.
//
// Two readers of this grammar must agree: tokens.record, which takes a record
// apart, and cut, which only finds where records end. They meet in opensQuote and
// closeQuote.

const (
	// maxRecord is the longest line, and the longest record of several lines.
	maxRecord = 1 << 20
	// maxQuoted is the longest quoted field.
	maxQuoted = 1 << 16
)

// A format is what is needed to take lines apart.
type format struct {
	delimiter byte // ' ' stands for runs of blanks and tabs
	comment   []byte
}

func isBlank(c byte) bool { return c == ' ' || c == '\t' }

// gap reports whether c is a blank that stands beside fields, not between them.
func (f *format) gap(c byte) bool { return isBlank(c) && !f.isDelimiter(c) }

// isComment reports whether a line begins with the comment mark, behind blanks.
func (f *format) isComment(line []byte) bool {
	if len(f.comment) == 0 {
		return false
	}
	i := 0
	for i < len(line) && isBlank(line[i]) {
		i++
	}
	return bytes.HasPrefix(line[i:], f.comment)
}

// A field of a record: text[from:to] of the block unless it held doubled quotes,
// and then a copy.
type field struct {
	text   []byte
	start  int // where its first character stands, a quote included
	quoted bool
}

// A quoteError is a field whose quotes do not fit.
type quoteError struct {
	at   int  // the quote that is not closed, or the first character behind the closing one
	open bool // not closed
}

// tokens takes records apart. It owns the memory of the fields of one record.
type tokens struct {
	format
	fields []field
	copied []byte
	quote  quoteError
	bad    bool
}

// record takes apart the record that begins at pos, and returns where the next one
// begins. The fields are valid until the next call.
func (t *tokens) record(b []byte, pos int) (next int) {
	t.fields, t.copied, t.bad = t.fields[:0], t.copied[:0], false
	blanks := t.delimiter == ' '
	p := pos
	for {
		for p < len(b) && (t.gap(b[p]) || blanks && isBlank(b[p])) {
			p++
		}
		if p == len(b) || isLineEnd(b[p]) {
			if !blanks || len(t.fields) == 0 {
				t.fields = append(t.fields, field{start: p})
			}
			return behindLineEnd(b, p)
		}
		f := field{start: p}
		if b[p] == '"' {
			p = t.quotedField(b, p, &f)
		} else {
			p = t.plainField(b, p, &f)
		}
		t.fields = append(t.fields, f)
		if p == len(b) || isLineEnd(b[p]) {
			return behindLineEnd(b, p)
		}
		if !blanks {
			p++ // the delimiter
		}
	}
}

// plainField reads up to the delimiter or line end, without blanks behind.
func (t *tokens) plainField(b []byte, p int, f *field) int {
	from := p
	for p < len(b) && !isLineEnd(b[p]) && !t.isDelimiter(b[p]) {
		p++
	}
	to := p
	for to > from && isBlank(b[to-1]) {
		to--
	}
	f.text = b[from:to]
	return p
}

// quotedField reads a field that begins with a quote at p.
func (t *tokens) quotedField(b []byte, p int, f *field) int {
	closing, ok := closeQuote(b, p)
	if !ok {
		t.quoteBad(quoteError{p, true})
		return t.plainField(b, p, f)
	}
	f.quoted = true
	f.text = t.undouble(b[p+1 : closing])
	p = closing + 1
	for p < len(b) && t.gap(b[p]) {
		p++
	}
	if p < len(b) && !isLineEnd(b[p]) && !t.isDelimiter(b[p]) {
		t.quoteBad(quoteError{p, false})
		var rest field
		return t.plainField(b, p, &rest)
	}
	return p
}

func (t *tokens) quoteBad(e quoteError) {
	if !t.bad {
		t.bad, t.quote = true, e
	}
}

// isDelimiter reports whether c ends a field; of a run of blanks every one does.
func (f *format) isDelimiter(c byte) bool {
	return c == f.delimiter || f.delimiter == ' ' && c == '\t'
}

// undouble returns quoted text with every pair of quotes made one.
func (t *tokens) undouble(text []byte) []byte {
	if bytes.IndexByte(text, '"') < 0 {
		return text
	}
	from := len(t.copied)
	for {
		k := bytes.IndexByte(text, '"')
		if k < 0 {
			break
		}
		t.copied = append(t.copied, text[:k+1]...)
		text = text[k+2:]
	}
	t.copied = append(t.copied, text...)
	// If copied grew, earlier fields keep the memory they had.
	return t.copied[from:len(t.copied):len(t.copied)]
}

// closeQuote returns where the quoted field that opens at b[open] closes.
func closeQuote(b []byte, open int) (closing int, ok bool) {
	end := min(len(b), open+maxQuoted)
	for p := open + 1; ; {
		k := bytes.IndexByte(b[p:end], '"')
		if k < 0 {
			return 0, false
		}
		p += k
		if p+1 < end && b[p+1] == '"' {
			p += 2
			continue
		}
		return p, true
	}
}

// opensQuote reports whether the quote at b[q], which stands outside quotes, opens
// a field: only blanks stand between it and a delimiter, a line end or the
// beginning of b. (Behind a closing quote it does not.)
func (f *format) opensQuote(b []byte, q int) bool {
	for q > 0 && f.gap(b[q-1]) {
		q--
	}
	return q == 0 || isLineEnd(b[q-1]) || f.isDelimiter(b[q-1])
}

func isLineEnd(c byte) bool { return c == '\n' || c == '\r' }

// behindLineEnd returns where the line behind the line end at p begins.
func behindLineEnd(b []byte, p int) int {
	if p == len(b) {
		return p
	}
	if b[p] == '\r' && p+1 < len(b) && b[p+1] == '\n' {
		return p + 2
	}
	return p + 1
}

// lineEnd returns where the line that holds p ends, len(b) if it does not.
func lineEnd(b []byte, p int) int {
	if k := bytes.IndexAny(b[p:], "\r\n"); k >= 0 {
		return p + k
	}
	return len(b)
}

// countLines returns how many line ends b holds.
func countLines(b []byte) int {
	return bytes.Count(b, []byte{'\n'}) + bytes.Count(b, []byte{'\r'}) - bytes.Count(b, []byte("\r\n"))
}

// cut returns how much of b, which begins with a record, is whole records. With
// more to come, the last record may be a piece, and a CR at the end may be half a
// line end; at the end of the input everything is whole.
func (f *format) cut(b []byte, atEnd bool) int {
	if atEnd {
		return len(b)
	}
	safe, p := 0, 0 // where the last record begins; behind the last quote
	for {
		q := bytes.IndexByte(b[p:], '"')
		if q < 0 {
			return max(safe, lastLineEnd(b, p, true))
		}
		q += p
		safe = max(safe, lastLineEnd(b[:q], p, false))
		if !f.opensQuote(b, q) || f.isComment(b[safe:q]) {
			p = q + 1
			continue
		}
		closing, ok := closeQuote(b, q)
		switch {
		case ok && closing+1 < len(b):
			p = closing + 1
		case !ok && q+maxQuoted <= len(b):
			p = q + 1 // never closes: not a quote
		default:
			return safe // what follows decides
		}
	}
}

// lastLineEnd returns the position behind the last line end of b[from:], 0 if there
// is none. If more is to follow b, a CR at its end may be half a line end and does
// not count.
func lastLineEnd(b []byte, from int, more bool) int {
	start := from + bytes.LastIndexByte(b[from:], '\n') + 1
	// A CR behind it counts as well, in files that end lines so.
	end := len(b)
	if more && end > start && b[end-1] == '\r' {
		end--
	}
	if r := bytes.LastIndexByte(b[start:end], '\r'); r >= 0 {
		return start + r + 1
	}
	if start == from {
		return 0
	}
	return start
}

// position returns the line of b, from 0, and the column in characters, from 1, at
// which p stands, given that a line begins at from.
func position(b []byte, from, p int) (line, column int) {
	line = countLines(b[from:p])
	for q := p; ; q-- {
		if q == from || isLineEnd(b[q-1]) {
			return line, utf8.RuneCount(b[q:p]) + 1
		}
	}
}
