package units

import (
	"math"
	"math/bits"
)

// A Conversion multiplies by a ratio. The zero value leaves numbers as they are.
type Conversion struct{ by, over uint64 }

// Between returns the conversion from one unit to another. ok is false if one of
// them is unstated and the other is not.
func Between(from, to Unit) (c Conversion, ok bool) {
	if from == to {
		return c, true
	}
	if from == Unstated || to == Unstated {
		return c, false
	}
	by, over := ratios[from][0]*ratios[to][1], ratios[from][1]*ratios[to][0]
	g := gcd(by, over)
	return Conversion{by / g, over / g}, true
}

func gcd(a, b uint64) uint64 {
	for b > 0 {
		a, b = b, a%b
	}
	return a
}

// Changes reports whether the conversion does anything.
func (c Conversion) Changes() bool { return c.over != 0 }

// Ratio returns the factor as a ratio of whole numbers.
func (c Conversion) Ratio() (by, over uint64) {
	if !c.Changes() {
		return 1, 1
	}
	return c.by, c.over
}

// Of converts a length: the double nearest to v times the ratio. v must be finite and
// of a size that readings accept, so that nothing overflows or loses digits to
// underflow.
func (c Conversion) Of(v float64) float64 {
	if !c.Changes() || v == 0 {
		return v
	}
	fraction, exponent := math.Frexp(math.Abs(v))
	m := uint64(fraction * (1 << 53)) // exact: 53 bits
	hi, lo := bits.Mul64(m, c.by)
	// The ratios have less than 2^21 above and below, and lie between 1/4 and 4: with 8
	// more bits the quotient has 58 to 63, and its high part is less than what divides it.
	const more = 8
	hi, lo = hi<<more|lo>>(64-more), lo<<more
	q, rest := bits.Div64(hi, lo, c.over)
	drop := bits.Len64(q) - 53
	kept := q >> drop
	half := uint64(1) << (drop - 1)
	if low := q & (half<<1 - 1); low > half || low == half && (rest > 0 || kept&1 == 1) {
		kept++
	}
	return math.Copysign(math.Ldexp(float64(kept), exponent-53-more+drop), v)
}
