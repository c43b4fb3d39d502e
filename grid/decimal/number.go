package decimal

import (
	"errors"
	"fmt"
	"math"
	"math/bits"
	"strconv"
)

// Number is Unscaled x 10^-Scale: {Unscaled: 125, Scale: 1} is 12.5 and {Unscaled: 1, Scale: -3} is 1000.
// The zero value is 0.
type Number struct {
	Unscaled int64
	Scale    int8
}

// MaxScale bounds the size of Scale either way in what this package returns. It leaves room around the coordinates
// accepted (1e-60 to 1e60) for the 17 digits of a double.
const MaxScale = 90

var (
	// ErrSyntax says that a text is not a plain decimal number.
	ErrSyntax = errors.New("not a decimal number")
	// ErrRange says that a number needs more digits or a larger power of ten than a Number holds.
	ErrRange = errors.New("more digits than can be held exactly")
	// ErrStep says that a step is zero or negative.
	ErrStep = errors.New("step is not positive")
)

// New returns unscaled x 10^-scale in normal form. It returns ErrRange if the normal form's scale is beyond MaxScale.
func New(unscaled int64, scale int) (Number, error) {
	neg, mag := split(unscaled)
	return fit(neg, 0, mag, scale)
}

// FromInt returns n as a Number.
func FromInt(n int64) Number {
	neg, mag := split(n)
	d, _ := fit(neg, 0, mag, 0) // an int64 always fits
	return d
}

// FromFloat returns the shortest decimal that reads back to the double f: FromFloat(0.1) is 0.1, not the
// 55 digits of the double. It returns ErrRange for NaN, infinities, and sizes beyond about 1e±90.
func FromFloat(f float64) (Number, error) {
	if math.IsNaN(f) || math.IsInf(f, 0) {
		return Number{}, fmt.Errorf("%v: %w", f, ErrRange)
	}
	var buf [32]byte
	n, err := parse(strconv.AppendFloat(buf[:0], f, 'e', -1, 64))
	if err != nil {
		return Number{}, fmt.Errorf("%v: %w", f, err)
	}
	return n, nil
}

// Normal returns n in normal form. Only a Number made by hand can need it.
func (n Number) Normal() Number {
	for n.Unscaled != 0 && n.Unscaled%10 == 0 && n.Scale > math.MinInt8 {
		n.Unscaled /= 10
		n.Scale--
	}
	if n.Unscaled == 0 {
		n.Scale = 0
	}
	return n
}

// Sign returns -1, 0 or +1.
func (n Number) Sign() int {
	switch {
	case n.Unscaled < 0:
		return -1
	case n.Unscaled > 0:
		return 1
	}
	return 0
}

// Decimals returns how many digits after the point n needs: 2 for 0.25, 0 for 1000.
func (n Number) Decimals() int { return max(0, int(n.Normal().Scale)) }

// Neg returns -n. It returns ErrRange for the one Number whose negative does not fit, -2^63.
func (n Number) Neg() (Number, error) {
	n = n.Normal()
	neg, mag := split(n.Unscaled)
	return fit(!neg, 0, mag, int(n.Scale))
}

// Times returns k n exactly, or ErrRange if that does not fit.
func (n Number) Times(k int64) (Number, error) {
	negN, magN := split(n.Unscaled)
	negK, magK := split(k)
	hi, lo := bits.Mul64(magN, magK)
	return fit(negN != negK, hi, lo, int(n.Scale))
}

// Add returns n + m exactly, or ErrRange if that does not fit.
func (n Number) Add(m Number) (Number, error) {
	n, m = n.Normal(), m.Normal()
	switch {
	case n.Unscaled == 0:
		return fitInt(m)
	case m.Unscaled == 0:
		return fitInt(n)
	}
	if n.Scale > m.Scale {
		n, m = m, n // n is the coarser
	}
	// Bring n to the scale of m. If they differ, m's last digit is not zero and stays the last digit of the
	// sum: the sum has no factor of ten to strip, so beyond 10^19 (more than the 2 x 2^63 that m could take back) it cannot fit.
	gap := int(m.Scale) - int(n.Scale)
	if gap >= len(pow10) {
		return Number{}, ErrRange
	}
	negN, magN := split(n.Unscaled)
	negM, magM := split(m.Unscaled)
	hi, lo := bits.Mul64(magN, pow10[gap])
	if hi != 0 {
		return Number{}, ErrRange
	}
	if negN == negM {
		sum, carry := bits.Add64(lo, magM, 0)
		return fit(negN, carry, sum, int(m.Scale))
	}
	if lo >= magM {
		return fit(negN, 0, lo-magM, int(m.Scale))
	}
	return fit(negM, 0, magM-lo, int(m.Scale))
}

// Sub returns n - m exactly, or ErrRange if that does not fit.
func (n Number) Sub(m Number) (Number, error) {
	minus, err := m.Neg()
	if err != nil {
		return Number{}, err
	}
	return n.Add(minus)
}

// Cmp returns -1, 0 or +1 as n is less than, equal to or greater than m. It is exact for every pair.
func (n Number) Cmp(m Number) int {
	if n.Sign() != m.Sign() {
		return sign(n.Sign() - m.Sign())
	}
	if n.Sign() == 0 {
		return 0
	}
	n, m = n.Normal(), m.Normal()
	_, magN := split(n.Unscaled)
	_, magM := split(m.Unscaled)
	return n.Sign() * cmpMagnitude(magN, int(n.Scale), magM, int(m.Scale))
}

// cmpMagnitude compares a x 10^-sa with b x 10^-sb, both positive.
func cmpMagnitude(a uint64, sa int, b uint64, sb int) int {
	if sa > sb {
		return -cmpMagnitude(b, sb, a, sa)
	}
	gap := sb - sa
	if gap >= len(pow10) {
		return 1 // a x 10^20 is above every uint64
	}
	hi, lo := bits.Mul64(a, pow10[gap])
	switch {
	case hi != 0 || lo > b:
		return 1
	case lo < b:
		return -1
	}
	return 0
}

func sign(i int) int { return min(1, max(-1, i)) }

// pow10 holds the powers of ten that a uint64 can.
var pow10 = [20]uint64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19}

// split returns sign and size of u; the size of -2^63 fits a uint64.
func split(u int64) (neg bool, mag uint64) {
	if u < 0 {
		return true, -uint64(u)
	}
	return false, uint64(u)
}

// fit returns ±(hi 2^64 + lo) x 10^-scale in normal form, or ErrRange.
func fit(neg bool, hi, lo uint64, scale int) (Number, error) {
	if hi == 0 && lo == 0 {
		return Number{}, nil
	}
	for {
		q, r := hi/10, hi%10
		low, rem := bits.Div64(r, lo, 10)
		if rem != 0 {
			break
		}
		hi, lo, scale = q, low, scale-1
	}
	limit := uint64(math.MaxInt64)
	if neg {
		limit++
	}
	if hi != 0 || lo > limit || scale < -MaxScale || scale > MaxScale {
		return Number{}, ErrRange
	}
	u := int64(lo)
	if neg {
		u = -u // for 2^63 the conversion above gave -2^63, its own negative
	}
	return Number{Unscaled: u, Scale: int8(scale)}, nil
}

func fitInt(n Number) (Number, error) { return New(n.Unscaled, int(n.Scale)) }
