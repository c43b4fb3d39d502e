package readings

import (
	"bytes"
	"strconv"
	"unicode/utf8"
	"unsafe"
)

// Numbers.
//
// A number is a sign, digits with at most one decimal mark among or around them,
// and perhaps a decimal exponent: -12.40, .5, 3., 1.2e-3. The minus may be one of
// the dashes that word processors put in its place. Nothing else is a number: no
// thousands marks, no hexadecimal, no underscores, no NaN.
//
// Most field numbers have at most 15 digits. Their digits, read as an integer, and
// the power of ten they are divided by are both exact in a double, so that one
// division rounds once and gives what a correctly rounding parser gives (Clinger
// 1990). The others go to package strconv.

// powersOfTen are exact in a double.
var powersOfTen = [...]float64{
	1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
}

const exactIntegers = 1 << 53 // integers up to here are exact in a double

// mostDecimals is where counting decimals stops; a double has no use for more.
const mostDecimals = 255

// parseNumber reads a whole text as a number and counts its decimals. kind is 0 if
// it is one, or says what stands there.
func parseNumber(text []byte, decimal byte) (v float64, decimals int, kind Kind) {
	t, negative := cutSign(text)
	var m uint64 // the digits as an integer, while there are at most 19
	digits, fraction, exponent := 0, 0, 0
	significant, isZero := 0, true
	i, inFraction, hasExponent := 0, false, false
scan:
	for ; i < len(t); i++ {
		c := t[i]
		switch {
		case c >= '0' && c <= '9':
			digits++
			if c != '0' {
				isZero = false
			}
			if !isZero {
				significant++
			}
			if significant <= 19 {
				m = m*10 + uint64(c-'0')
			}
			if inFraction {
				fraction++
			}
		case c == decimal && !inFraction:
			inFraction = true
		default:
			break scan
		}
	}
	if digits == 0 {
		return 0, 0, classify(text, decimal)
	}
	mantissaEnd := i
	if i < len(t) && (t[i] == 'e' || t[i] == 'E') {
		var ok bool
		if exponent, ok = parseExponent(t[i+1:]); ok {
			hasExponent = true
			i = len(t)
		}
	}
	if i < len(t) {
		return 0, 0, classify(text, decimal)
	}
	decimals = min(max(fraction-exponent, 0), mostDecimals)
	if isZero {
		return 0, decimals, 0
	}
	power := exponent - fraction
	switch {
	case significant <= 19 && m <= exactIntegers && power >= -22 && power <= 22:
		if v = float64(m); power < 0 {
			v /= powersOfTen[-power]
		} else {
			v *= powersOfTen[power]
		}
	default:
		v = parseLong(t, mantissaEnd, decimal, exponent, hasExponent)
	}
	if v < smallest || v > largest {
		return 0, 0, OutOfRange
	}
	if negative {
		v = -v
	}
	return v, decimals, 0
}

// parseExponent reads the digits behind an e. Exponents beyond any double are cut,
// which keeps their sense.
func parseExponent(t []byte) (e int, ok bool) {
	negative := false
	if len(t) > 0 && (t[0] == '+' || t[0] == '-') {
		negative = t[0] == '-'
		t = t[1:]
	} else if rest, dash := cutDash(t); dash {
		negative, t = true, rest
	}
	if len(t) == 0 {
		return 0, false
	}
	for _, c := range t {
		if c < '0' || c > '9' {
			return 0, false
		}
		if e < 1<<28 {
			e = e*10 + int(c-'0')
		}
	}
	if negative {
		e = -e
	}
	return e, true
}

// parseLong reads a number with more digits than fit the exact way: mantissa
// t[:end] and exponent. The size is that of the digits, not of the exponent.
func parseLong(t []byte, end int, decimal byte, exponent int, hasExponent bool) float64 {
	buf := t[:end]
	if hasExponent || decimal != '.' {
		buf = make([]byte, 0, end+16)
		buf = append(buf, t[:end]...)
		if k := bytes.IndexByte(buf, decimal); k >= 0 {
			buf[k] = '.'
		}
		if hasExponent {
			buf = append(buf, 'e')
			buf = strconv.AppendInt(buf, int64(exponent), 10)
		}
	}
	// The grammar is checked: the only error left is ErrRange, with the value Inf.
	// A number too small for a double comes back as 0. Both are refused by size.
	v, _ := strconv.ParseFloat(unsafe.String(&buf[0], len(buf)), 64)
	return v
}

// cutSign takes the sign off.
func cutSign(t []byte) (rest []byte, negative bool) {
	if len(t) == 0 {
		return t, false
	}
	switch t[0] {
	case '-':
		return t[1:], true
	case '+':
		return t[1:], false
	}
	return cutDash(t)
}

// cutDash takes off a minus sign outside ASCII: U+2212, or one of the hyphens and
// the en dash, U+2010 to U+2013, or the small and the wide one.
func cutDash(t []byte) (rest []byte, dash bool) {
	if len(t) < 3 || t[0] < 0xe0 {
		return t, false
	}
	r, n := utf8.DecodeRune(t)
	if r == 0x2212 || r >= 0x2010 && r <= 0x2013 || r == 0xfe63 || r == 0xff0d {
		return t[n:], true
	}
	return t, false
}

// classify says what a text is that is not a number.
func classify(text []byte, decimal byte) Kind {
	if len(text) == 0 {
		return Blank
	}
	r, _ := utf8.DecodeRune(text)
	if r == '<' || r == '>' || r == '≤' || r == '≥' {
		return Bound
	}
	t, _ := cutSign(text)
	switch string(bytes.ToLower(t[:min(len(t), 16)])) {
	case "nan", "inf", "infinity", "1.#inf", "1.#qnan", "1.#ind", "#nan", "#n/a", "#num!", "#div/0!", "#value!":
		return NotFinite
	}
	other := byte('.')
	if decimal == '.' {
		other = ','
	}
	if bytes.Count(t, []byte{other}) == 1 && bytes.IndexByte(t, decimal) < 0 {
		swapped := bytes.Clone(t)
		swapped[bytes.IndexByte(t, other)] = decimal
		if _, _, kind := parseNumber(swapped, decimal); kind == 0 || kind == OutOfRange {
			return DecimalMark
		}
	}
	if grouped(t, decimal) || grouped(t, other) {
		return Thousands
	}
	return NotNumber
}

// grouped reports whether t is digits in groups of three behind the first, with one
// and the same mark between them, and perhaps a fraction.
func grouped(t []byte, decimal byte) bool {
	if k := bytes.LastIndexByte(t, decimal); k >= 0 {
		if !isDigits(string(t[k+1:])) && k+1 < len(t) {
			return false
		}
		t = t[:k]
	}
	var mark rune
	groups, n := 0, 0
	for i := 0; i < len(t); {
		r, size := utf8.DecodeRune(t[i:])
		i += size
		if r >= '0' && r <= '9' {
			n++
			continue
		}
		switch r {
		case ',', '.', '\'', '’', ' ', '_', 0xa0, 0x2009, 0x202f:
		default:
			return false
		}
		if groups > 0 && (r != mark || n != 3) || groups == 0 && (n < 1 || n > 3) {
			return false
		}
		mark, n = r, 0
		groups++
	}
	return groups > 0 && n == 3
}

// ExpectedNumber says what belongs in place of a text of a kind, for messages.
func ExpectedNumber(kind Kind, decimal Decimal) string { return expectedNumber(kind, byte(decimal)) }

// expectedNumber says what belongs in place of a text of a kind.
func expectedNumber(kind Kind, decimal byte) string {
	example := "12.4"
	if decimal == ',' {
		example = "12,4"
	}
	switch kind {
	case OutOfRange:
		return "0 or a number from 1e-60 to 1e60 in size"
	case Thousands:
		return "a number without marks between thousands, such as " + example
	case Bound:
		return "a value such as " + example + ", not a bound"
	case NotFinite:
		return "a finite number such as " + example
	}
	return "a number such as " + example
}
