package numtext

import (
	"math"
	"strconv"
)

// Shortest asks Append for the shortest text that reads back to the same double.
const Shortest = -1

// Append appends v with the given number of decimals, zeros at the end included, or for Shortest (any negative number) as the
// shortest text that reads back, with an exponent below 1e-6 and from 1e21 on, where zeros would fill the line: 1e21, 2.5e-7.
// It panics if v is NaN or infinite.
func Append(dst []byte, v float64, decimals int) []byte {
	if v-v != 0 {
		panic("numtext: " + strconv.FormatFloat(v, 'g', -1, 64) + " has no text")
	}
	if v == 0 {
		v = 0 // without the sign
	}
	if decimals < 0 {
		return shortest(dst, v)
	}
	if n, ok := units(v, decimals); ok {
		return fixed(dst, n, decimals)
	}
	first := len(dst)
	dst = strconv.AppendFloat(dst, v, 'f', decimals, 64)
	return unsignZero(dst, first)
}

var pow10 = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// units returns v 10^decimals rounded to the nearest integer, unless it takes more than a product to tell which.
func units(v float64, decimals int) (n int64, ok bool) {
	if decimals >= len(pow10) {
		return 0, false
	}
	// t = fl(v 10^d) is off by at most half an ulp of t, and t, its nearest integer r and 1/2 are multiples of that ulp
	// below 2^52. So unless |t - r| = 1/2 exactly, |t - r| is at least an ulp from 1/2, and the exact product rounds to r too.
	t := float64(v * pow10[decimals])
	if !(math.Abs(t) < 1<<51) {
		return 0, false
	}
	const shift = 3 << 51 // adding it leaves no bits for a fraction: rounds to an integer, ties to even
	r := float64(t+shift) - shift
	return int64(r), math.Abs(t-r) != 0.5
}

// Rounded returns the double that a reader gets from Append's text: v rounded to so many decimals, or v itself for Shortest.
// It never falls when v rises.
func Rounded(v float64, decimals int) float64 {
	if v == 0 {
		return 0 // without the sign
	}
	if decimals < 0 {
		return v
	}
	if n, ok := units(v, decimals); ok {
		return float64(n) / pow10[decimals] // both exact: one rounding, as in Parse
	}
	var buf [32]byte
	r, _ := Parse(Append(buf[:0], v, decimals)) // Append writes nothing else than numbers within the range of doubles
	return r
}

func shortest(dst []byte, v float64) []byte {
	if size := math.Abs(v); size == 0 || 1e-6 <= size && size < 1e21 {
		return strconv.AppendFloat(dst, v, 'f', -1, 64)
	}
	dst = strconv.AppendFloat(dst, v, 'e', -1, 64)
	// The standard library writes e+21 and e-07.
	e := len(dst) - 1
	for dst[e] != 'e' {
		e--
	}
	e++
	digits := e + 1
	if dst[digits] == '0' {
		digits++
	}
	if dst[e] == '-' {
		e++
	}
	return append(dst[:e], dst[digits:]...)
}

const digitPairs = "00010203040506070809101112131415161718192021222324252627282930313233343536373839404142434445464748495051525354555657585960616263646566676869707172737475767778798081828384858687888990919293949596979899"

// fixed appends n 10^-decimals.
func fixed(dst []byte, n int64, decimals int) []byte {
	var buf [48]byte // 16 digits, or a zero, a point and 22 decimals, and a sign
	i := len(buf)
	u := uint64(max(n, -n))
	// Decimals from the right, then the point, then the rest.
	d := decimals
	for ; d >= 2; d -= 2 {
		i -= 2
		p := 2 * (u % 100)
		u /= 100
		buf[i], buf[i+1] = digitPairs[p], digitPairs[p+1]
	}
	if d == 1 {
		i--
		buf[i] = byte('0' + u%10)
		u /= 10
	}
	if decimals > 0 {
		i--
		buf[i] = '.'
	}
	for u >= 100 {
		i -= 2
		p := 2 * (u % 100)
		u /= 100
		buf[i], buf[i+1] = digitPairs[p], digitPairs[p+1]
	}
	if u >= 10 {
		i -= 2
		buf[i], buf[i+1] = digitPairs[2*u], digitPairs[2*u+1]
	} else {
		i--
		buf[i] = byte('0' + u)
	}
	if n < 0 {
		i--
		buf[i] = '-'
	}
	return append(dst, buf[i:]...)
}

// unsignZero removes the sign of a number without a digit above zero.
func unsignZero(dst []byte, first int) []byte {
	if dst[first] != '-' {
		return dst
	}
	for _, c := range dst[first+1:] {
		if c != '0' && c != '.' {
			return dst
		}
	}
	return append(dst[:first], dst[first+1:]...)
}
