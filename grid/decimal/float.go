package decimal

import "strconv"

// exact10 are the powers of ten that a double holds exactly.
var exact10 = [23]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// Float64 returns the double nearest to n, ties to even.
func (n Number) Float64() float64 { return Float64(n.Unscaled, int(n.Scale)) }

// Float64 returns the double nearest to unscaled x 10^-scale, ties to even; ±Inf beyond the range of doubles.
//
// Where both the integer and the power of ten are doubles, one division or multiplication of them is one rounding
// of the exact quotient (Clinger 1990, the fast path); elsewhere the standard library's parser rounds.
func Float64(unscaled int64, scale int) float64 {
	const exactInt = 1 << 53
	if -exactInt <= unscaled && unscaled <= exactInt {
		switch {
		case scale == 0:
			return float64(unscaled)
		case 0 < scale && scale < len(exact10):
			return float64(unscaled) / exact10[scale]
		case scale < 0 && -scale < len(exact10):
			return float64(unscaled) * exact10[-scale]
		}
	}
	var buf [48]byte
	b := strconv.AppendInt(buf[:0], unscaled, 10)
	b = append(b, 'e')
	b = strconv.AppendInt(b, -int64(scale), 10)
	f, _ := strconv.ParseFloat(string(b), 64) // beyond the range it returns ±Inf, as promised
	return f
}
