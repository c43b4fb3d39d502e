package geojson

import (
	"errors"
	"io"
	"strconv"
	"unicode/utf8"

	"isofacet/io/numtext"
)

// scanner takes the text of an io.Reader apart into JSON tokens. It holds one buffer, whatever the text holds, and knows the
// line and column of every byte.
type scanner struct {
	src      io.Reader
	file     string
	buf      []byte
	pos, end int   // the next byte, and the end of what has been read
	base     int64 // place of buf[0] in the text
	err      error // of src, io.EOF included

	line      int
	lineStart int64 // place of the first byte of the line
	hidden    int64 // bytes of the line so far that begin no character
}

const (
	scanBuffer = 1 << 16
	// numberMost is the longest number in bytes. A double in full has at most some 770 digits; 400 are more than any
	// program writes, and fit into the buffer many times.
	numberMost = 400
)

// place is where something stands.
type place struct{ line, column int }

func (s *scanner) here() place {
	return place{s.line, int(s.base+int64(s.pos)-s.lineStart-s.hidden) + 1}
}

// more reads on when nothing is left in the buffer. It reports false at the end of the text and on errors.
func (s *scanner) more() bool {
	if s.pos < s.end {
		return true
	}
	s.base += int64(s.end)
	s.pos, s.end = 0, 0
	return s.read()
}

// read appends to the buffer.
func (s *scanner) read() bool {
	for empty := 0; s.err == nil && empty < 100; empty++ {
		var n int
		n, s.err = s.src.Read(s.buf[s.end:])
		s.end += n
		if n > 0 {
			return true
		}
	}
	if s.err == nil {
		s.err = io.ErrNoProgress
	}
	return false
}

// ahead makes at least n bytes stand in the buffer unless the text ends before.
func (s *scanner) ahead(n int) {
	if s.end-s.pos >= n {
		return
	}
	copy(s.buf, s.buf[s.pos:s.end])
	s.base += int64(s.pos)
	s.end -= s.pos
	s.pos = 0
	for s.end < n && s.read() {
	}
}

// peek skips blanks and returns the next byte without taking it, or an error of kind Ended that says what was expected.
func (s *scanner) peek(expected string) (byte, error) {
	for {
		for ; s.pos < s.end; s.pos++ {
			switch c := s.buf[s.pos]; c {
			case ' ', '\t', '\r':
			case '\n':
				s.line++
				s.lineStart, s.hidden = s.base+int64(s.pos)+1, 0
			default:
				return c, nil
			}
		}
		if !s.more() {
			return 0, s.ended(expected)
		}
	}
}

// ended is the error at the end of the text.
func (s *scanner) ended(expected string) error {
	if !errors.Is(s.err, io.EOF) {
		return s.fault(s.here(), Unreadable, "text", "", "", s.err)
	}
	return s.fault(s.here(), Ended, "end of the text", "", expected, nil)
}

func (s *scanner) fault(at place, kind Kind, what, seen, expected string, err error) *PositionError {
	return &PositionError{File: s.file, Line: at.line, Column: at.column, Kind: kind, What: what, Seen: shorten(seen), Expected: expected, Err: err}
}

// quoted are the marks of JSON as messages show them.
var quoted = [256]string{'{': "'{'", '}': "'}'", '[': "'['", ']': "']'", ':': "':'"}

// take takes the next byte, which must be c.
func (s *scanner) take(c byte) error {
	got, err := s.peek(quoted[c])
	if err != nil {
		return err
	}
	if got != c {
		return s.unexpected(quoted[c])
	}
	s.pos++
	return nil
}

// unexpected is the error of something at the next byte that does not belong there.
func (s *scanner) unexpected(expected string) error {
	at := s.here()
	seen := s.word()
	return s.fault(at, Syntax, "", seen, expected, nil)
}

// word returns the next characters as far as they look like one thing, for a message.
func (s *scanner) word() string {
	s.ahead(80)
	n := 0
	for s.pos+n < s.end && n < 60 {
		c := s.buf[s.pos+n]
		if !(c >= '0' && c <= '9' || c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c == '.' || c == '-' || c == '+' || c == '_' || c == '#' || c >= utf8.RuneSelf) {
			break
		}
		n++
	}
	if n == 0 && s.pos < s.end {
		n = 1
	}
	return string(s.buf[s.pos : s.pos+n])
}

// shorten cuts a seen text to a length that fits a message.
func shorten(text string) string {
	const most = 60
	n := 0
	for i := range text {
		if n == most {
			return text[:i] + "..."
		}
		n++
	}
	return text
}

// next goes on in a list: it takes a comma and returns true, or takes end and returns false. first is true before
// the first part, where there is no comma.
func (s *scanner) next(first bool, end byte) (bool, error) {
	expected := "a comma or ']'"
	if end == '}' {
		expected = "a comma or '}'"
	}
	c, err := s.peek(expected)
	switch {
	case err != nil:
		return false, err
	case c == end:
		s.pos++
		return false, nil
	case first:
		return true, nil
	case c != ',':
		return false, s.unexpected(expected)
	}
	s.pos++
	return true, nil
}

// member goes on in an object: it returns the name of the next member, whose value comes next, or false at the end of the object.
func (s *scanner) member(first bool, dst []byte, most int) (name []byte, at place, ok bool, err error) {
	if ok, err = s.next(first, '}'); !ok || err != nil {
		return dst, at, false, err
	}
	if _, err = s.peek("the name of a member"); err != nil {
		return dst, at, false, err
	}
	at = s.here()
	if name, err = s.text(dst, most, "the name of a member"); err != nil {
		return dst, at, false, err
	}
	return name, at, true, s.take(':')
}

// literal takes a word, such as true, of which the first byte is known to be the next.
func (s *scanner) literal(word string) error {
	at := s.here()
	if seen := s.word(); seen != word {
		return s.fault(at, Syntax, "", seen, word, nil)
	}
	s.pos += len(word)
	return nil
}

// number takes a number. literal is its text, valid until the next call; whole tells that it has neither point nor exponent.
func (s *scanner) number(what string) (v float64, literal []byte, whole bool, err error) {
	if _, err = s.peek("a number"); err != nil {
		return 0, nil, false, err
	}
	s.ahead(numberMost + 1)
	b := s.buf[s.pos:s.end]
	i := 0
	if len(b) > 0 && b[0] == '-' {
		i++
	}
	first := i
	for i < len(b) && b[i]-'0' <= 9 {
		i++
	}
	good := i > first && (b[first] != '0' || i == first+1) // JSON has no leading zeros
	whole = true
	if good && i < len(b) && b[i] == '.' {
		whole = false
		i++
		first = i
		for i < len(b) && b[i]-'0' <= 9 {
			i++
		}
		good = i > first
	}
	if good && i < len(b) && b[i]|0x20 == 'e' {
		whole = false
		i++
		if i < len(b) && (b[i] == '-' || b[i] == '+') {
			i++
		}
		first = i
		for i < len(b) && b[i]-'0' <= 9 {
			i++
		}
		good = i > first
	}
	// What follows a number is a blank or a mark.
	if good && i < len(b) && (b[i] > ',' && b[i] != ']' && b[i] != '}' && b[i] != ':') {
		good = false
	}
	if i > numberMost {
		return 0, nil, false, s.fault(s.here(), TooBig, what, string(b[:40])+"...", "a number of at most "+strconv.Itoa(numberMost)+" characters", nil)
	}
	if !good {
		return 0, nil, false, s.badNumber(what)
	}
	literal = b[:i]
	v, ok := numtext.Parse(literal)
	if !ok {
		return 0, nil, false, s.fault(s.here(), BadNumber, what, string(literal), "a number within the range of doubles", nil)
	}
	s.pos += i
	return v, literal, whole, nil
}

func (s *scanner) badNumber(what string) error {
	at := s.here()
	kind, expected := Syntax, "a number such as 12.4"
	seen := ""
	switch c := s.buf[s.pos]; c {
	case '"':
		text, err := s.text(nil, 1000, what)
		if err != nil {
			return err
		}
		kind, seen, expected = BadNumber, string(text), "a number such as 12.4, not a text"
	case '[', '{':
		kind, seen = Structure, string(c)
	default:
		seen = s.word()
		switch seen {
		case "NaN", "-NaN", "nan", "Infinity", "-Infinity", "inf", "-inf", "Inf", "-Inf":
			kind, expected = BadNumber, "a finite number such as 12.4"
		case "null":
			kind = BadNumber
		}
	}
	return s.fault(at, kind, what, seen, expected, nil)
}

// discard, in place of a number of bytes, lets text keep nothing of what it takes.
const discard = -1

// text takes a string and appends what it says to dst, at most most bytes of it.
func (s *scanner) text(dst []byte, most int, what string) ([]byte, error) {
	if c, err := s.peek("a text in quotes"); err != nil {
		return dst, err
	} else if c != '"' {
		return dst, s.unexpected(what + " in double quotes")
	}
	begin := s.here()
	s.pos++
	start := len(dst)
	for {
		if !s.more() {
			if errors.Is(s.err, io.EOF) {
				return dst, s.fault(begin, Ended, "text", string(dst[start:]), "a closing quote", nil)
			}
			return dst, s.ended("")
		}
		if most == discard {
			dst = dst[:start]
		} else if len(dst)-start > most {
			return dst, s.fault(begin, TooBig, "text", string(dst[start:]), "at most "+strconv.Itoa(most)+" bytes", nil)
		}
		c := s.buf[s.pos]
		switch {
		case c == '"':
			s.pos++
			return dst, nil
		case c == '\\':
			var err error
			if dst, err = s.escape(dst); err != nil {
				return dst, err
			}
		case c < 0x20:
			return dst, s.fault(s.here(), Syntax, "text", string(rune(c)), "control characters written as \\u00"+hexByte(c), nil)
		case c < utf8.RuneSelf:
			dst = append(dst, c)
			s.pos++
		default:
			s.ahead(utf8.UTFMax)
			r, n := utf8.DecodeRune(s.buf[s.pos:s.end])
			if r == utf8.RuneError && n == 1 {
				return dst, s.fault(s.here(), Encoding, "byte", "0x"+hexByte(c), "UTF-8", nil)
			}
			dst = append(dst, s.buf[s.pos:s.pos+n]...)
			s.pos += n
			s.hidden += int64(n - 1)
		}
	}
}

func hexByte(c byte) string {
	const hex = "0123456789abcdef"
	return string([]byte{hex[c>>4], hex[c&15]})
}

// escape takes \n, \u00e9 and the like. A half of a surrogate pair without the other is refused: it is no character.
func (s *scanner) escape(dst []byte) ([]byte, error) {
	s.ahead(12)
	b := s.buf[s.pos:s.end]
	bad := func(n int) error {
		return s.fault(s.here(), Syntax, "escape", string(b[:min(n, len(b))]), `one of \" \\ \/ \b \f \n \r \t \uXXXX`, nil)
	}
	if len(b) < 2 {
		return dst, bad(2)
	}
	simple := func(c byte) ([]byte, error) { s.pos += 2; return append(dst, c), nil }
	switch b[1] {
	case '"', '\\', '/':
		return simple(b[1])
	case 'b':
		return simple('\b')
	case 'f':
		return simple('\f')
	case 'n':
		return simple('\n')
	case 'r':
		return simple('\r')
	case 't':
		return simple('\t')
	case 'u':
		r, ok := hexRune(b)
		if !ok {
			return dst, bad(6)
		}
		n := 6
		if r >= 0xd800 && r < 0xe000 {
			low, ok := hexRune(b[6:])
			if r >= 0xdc00 || !ok || low < 0xdc00 || low >= 0xe000 {
				return dst, s.fault(s.here(), Encoding, "escape", string(b[:6]), "a pair of surrogates", nil)
			}
			r = (r-0xd800)<<10 + (low - 0xdc00) + 0x10000
			n = 12
		}
		s.pos += n
		return utf8.AppendRune(dst, r), nil
	}
	return dst, bad(2)
}

// hexRune reads \uXXXX at the beginning of b.
func hexRune(b []byte) (r rune, ok bool) {
	if len(b) < 6 || b[0] != '\\' || b[1] != 'u' {
		return 0, false
	}
	for _, c := range b[2:6] {
		switch {
		case c >= '0' && c <= '9':
			c -= '0'
		case c|0x20 >= 'a' && c|0x20 <= 'f':
			c = c | 0x20 - 'a' + 10
		default:
			return 0, false
		}
		r = r<<4 | rune(c)
	}
	return r, true
}
