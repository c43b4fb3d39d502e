package numtext

import (
	"math"
	"strconv"
)

// Parse reads an optional sign, digits with at most one point among or around them, and an optional exponent, and returns the
// nearest double. Blanks, digit groups, a decimal comma, hexadecimal numbers, "nan" and "inf" are no numbers; nor is a
// number beyond the largest double.
func Parse(text []byte) (v float64, ok bool) {
	i, neg := 0, false
	if len(text) > 0 && (text[0] == '-' || text[0] == '+') {
		neg = text[0] == '-'
		i = 1
	}
	// Up to 19 digits fit a uint64; the exact path needs the number below 2^53 anyway.
	var mant uint64
	first := i
	for ; i < len(text); i++ {
		c := text[i] - '0'
		if c > 9 {
			break
		}
		mant = 10*mant + uint64(c)
	}
	digits, decimals := i-first, 0
	if i < len(text) && text[i] == '.' {
		i++
		point := i
		for ; i < len(text); i++ {
			c := text[i] - '0'
			if c > 9 {
				break
			}
			mant = 10*mant + uint64(c)
		}
		decimals = i - point
		digits += decimals
	}
	if i < len(text) || digits == 0 || digits > 19 || mant > 1<<53 || decimals >= len(pow10) {
		return parseSlowly(text)
	}
	v = float64(mant)
	if decimals > 0 {
		v /= pow10[decimals] // both exact: one rounding
	}
	if neg {
		v = -v
	}
	return v, true
}

func parseSlowly(text []byte) (float64, bool) {
	for _, c := range text {
		switch {
		case '0' <= c && c <= '9':
		case c == '+', c == '-', c == '.', c == 'e', c == 'E':
		default:
			return 0, false // the standard library would take names, 0x and underscores
		}
	}
	v, err := strconv.ParseFloat(string(text), 64)
	return v, err == nil && !math.IsInf(v, 0)
}
