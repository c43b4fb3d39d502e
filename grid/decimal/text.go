package decimal

import (
	"fmt"
	"strconv"
)

// ParseError is what Parse returns. Err is ErrSyntax or ErrRange.
type ParseError struct {
	Text string
	Err  error
}

func (e *ParseError) Error() string {
	text := e.Text
	if len(text) > 40 {
		text = text[:40] + "..."
	}
	if e.Err == ErrRange {
		return fmt.Sprintf("%q: expected a number of at most 18 digits", text)
	}
	return fmt.Sprintf("%q: expected a number such as 12.5", text)
}

func (e *ParseError) Unwrap() error { return e.Err }

// Parse reads an optional sign, digits with at most one point among or around them, and an optional exponent:
// "12.5", "-0.05", ".5", "3.", "+1e3". Blanks, digit separators, "inf" and "nan" are not numbers here. Zeros
// that add nothing, before or behind, may be as many as one likes. It returns the normal form, or a *ParseError.
func Parse(text string) (Number, error) {
	n, err := parse(text)
	if err != nil {
		return Number{}, &ParseError{Text: text, Err: err}
	}
	return n, nil
}

// MustParse is Parse for constants of a program; it panics if text is not a decimal number.
func MustParse(text string) Number {
	n, err := Parse(text)
	if err != nil {
		panic("decimal: " + err.Error())
	}
	return n
}

func parse[T string | []byte](text T) (Number, error) {
	i, neg := 0, false
	if i < len(text) && (text[i] == '+' || text[i] == '-') {
		neg = text[i] == '-'
		i++
	}
	// mag holds the digits up to the last one that is not zero; zeros behind it wait in pending until a digit
	// follows that makes them count.
	var mag uint64
	var scale, pending int
	digits, point, tooLong := false, false, false
	for ; i < len(text); i++ {
		c := text[i]
		if c == '.' && !point {
			point = true
			continue
		}
		if c < '0' || c > '9' {
			break
		}
		digits = true
		if point {
			scale++
		}
		if c == '0' {
			pending++
			continue
		}
		if mag == 0 {
			pending = 0 // zeros before the first digit
		}
		if pending >= len(pow10)-1 {
			tooLong = true
		}
		for ; pending >= 0 && !tooLong; pending-- {
			if mag > (1<<63)/10 {
				tooLong = true
				break
			}
			mag *= 10
		}
		mag += uint64(c - '0')
		pending = 0
	}
	if !digits {
		return Number{}, ErrSyntax
	}
	exponent := 0
	if i < len(text) && (text[i] == 'e' || text[i] == 'E') {
		var ok bool
		if exponent, ok = parseExponent(text[i+1:]); !ok {
			return Number{}, ErrSyntax
		}
		i = len(text)
	}
	if i < len(text) {
		return Number{}, ErrSyntax
	}
	if mag == 0 {
		return Number{}, nil
	}
	if tooLong {
		return Number{}, ErrRange
	}
	return fit(neg, 0, mag, scale-pending-exponent)
}

// parseExponent reads a signed integer, held at ±1e9: far outside what fits, whatever the digits before it.
func parseExponent[T string | []byte](text T) (e int, ok bool) {
	i, neg := 0, false
	if len(text) > 0 && (text[0] == '+' || text[0] == '-') {
		neg = text[0] == '-'
		i++
	}
	if i == len(text) {
		return 0, false
	}
	for ; i < len(text); i++ {
		if text[i] < '0' || text[i] > '9' {
			return 0, false
		}
		e = min(10*e+int(text[i]-'0'), 1e9)
	}
	if neg {
		e = -e
	}
	return e, true
}

// String returns plain decimal text without an exponent: "-0.05", "1000". Parse reads it back.
func (n Number) String() string { return string(n.Append(nil)) }

// Append appends the text of n to dst and returns it.
func (n Number) Append(dst []byte) []byte {
	n = n.Normal()
	neg, mag := split(n.Unscaled)
	if neg {
		dst = append(dst, '-')
	}
	var buf [20]byte
	digits := strconv.AppendUint(buf[:0], mag, 10)
	scale := int(n.Scale)
	switch {
	case scale <= 0:
		dst = append(dst, digits...)
		for ; scale < 0; scale++ {
			dst = append(dst, '0')
		}
	case scale >= len(digits):
		dst = append(dst, '0', '.')
		for i := len(digits); i < scale; i++ {
			dst = append(dst, '0')
		}
		dst = append(dst, digits...)
	default:
		dst = append(dst, digits[:len(digits)-scale]...)
		dst = append(dst, '.')
		dst = append(dst, digits[len(digits)-scale:]...)
	}
	return dst
}

// MarshalText and UnmarshalText let a Number stand in JSON (as a string, so that no reader rounds it) and in other text encodings.
func (n Number) MarshalText() ([]byte, error) { return n.Append(nil), nil }

// UnmarshalText is Parse.
func (n *Number) UnmarshalText(text []byte) error {
	p, err := Parse(string(text))
	if err != nil {
		return err
	}
	*n = p
	return nil
}
