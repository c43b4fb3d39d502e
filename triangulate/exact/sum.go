package exact

import (
	"math"
	"math/bits"
)

// The accumulator is one long integer in units of 2^-2150: long enough for the
// product of any two float64. It is kept in chunks of 32 bits, each in an int64,
// so that a thousand numbers can be added before carries have to move; the number
// of bit position p (worth 2^(p-2150)) is chunk p/32.
const (
	sumBias   = 2150
	sumChunks = 135
	// A chunk is below 2^32 in size after carrying, an addition changes it by less
	// than 2^53: after 1000 of them it is below 2^63.
	sumAdditions = 1000
)

// Sum is an exact accumulator of float64 numbers and products of two. The zero
// value is an empty sum. It holds the exact value, so the order of additions, and
// how they were spread over several Sums that are merged, does not matter to the
// last bit.
//
// Every finite argument is taken exactly, subnormal numbers included, and no
// product or partial sum overflows or underflows inside. Up to 2^60 numbers fit.
// Infinities and NaN behave as in a plain sum, in any order: one infinity or
// several of one sign give that infinity, both signs or a NaN give NaN, and so
// does zero times infinity.
//
// A Sum is 1.1 kB; Add takes a few nanoseconds, Value and Merge some hundred. It
// is not safe for use by several goroutines at once (Value rearranges it).
//
// Source: the small superaccumulator of Neal 2015, stretched to hold products.
type Sum struct {
	chunk [sumChunks]int64
	// pending counts additions since carries were last moved.
	pending int
	special specials
}

// specials are the kinds of non-finite numbers that were added.
type specials uint8

const (
	hasPosInf specials = 1 << iota
	hasNegInf
	hasNaN
)

// Add adds x.
func (s *Sum) Add(x float64) {
	b := math.Float64bits(x)
	e := int(b >> 52 & 0x7ff)
	m := b & (1<<52 - 1)
	switch e {
	case 0:
		e = 1 // subnormal: no hidden bit
	case 0x7ff:
		s.addSpecial(x)
		return
	default:
		m |= 1 << 52
	}
	if s.pending == sumAdditions {
		s.carry()
	}
	s.pending++
	// The last bit of m is worth 2^(e-1075).
	p := e + (sumBias - 1075)
	i, shift := uint(p)>>5, uint(p)&31
	sign := int64(b) >> 63 // 0 or -1
	low := int64(m << shift & (1<<32 - 1))
	high := int64(m >> (32 - shift)) // below 2^53
	c := s.chunk[i : i+2 : i+2]
	c[0] += (low ^ sign) - sign
	c[1] += (high ^ sign) - sign
}

// AddProduct adds the product of x and y without rounding it.
func (s *Sum) AddProduct(x, y float64) {
	bx, by := math.Float64bits(x), math.Float64bits(y)
	ex, ey := int(bx>>52&0x7ff), int(by>>52&0x7ff)
	if ex == 0x7ff || ey == 0x7ff {
		s.addSpecial(x * y)
		return
	}
	mx, my := bx&(1<<52-1), by&(1<<52-1)
	if ex == 0 {
		ex = 1
	} else {
		mx |= 1 << 52
	}
	if ey == 0 {
		ey = 1
	} else {
		my |= 1 << 52
	}
	if s.pending == sumAdditions {
		s.carry()
	}
	s.pending++
	// 106 bits, the last of them worth 2^(ex-1075 + ey-1075) = 2^(ex+ey-sumBias).
	hi, lo := bits.Mul64(mx, my)
	p := uint(ex + ey)
	i, shift := p>>5, p&31
	top := hi >> (64 - shift) // the bits of hi that the shift pushes out, at most 10
	hi = hi<<shift | lo>>(64-shift)
	lo <<= shift
	sign := int64(bx^by) >> 63
	c := s.chunk[i : i+5 : i+5]
	c[0] += (int64(lo&(1<<32-1)) ^ sign) - sign
	c[1] += (int64(lo>>32) ^ sign) - sign
	c[2] += (int64(hi&(1<<32-1)) ^ sign) - sign
	c[3] += (int64(hi>>32) ^ sign) - sign
	c[4] += (int64(top) ^ sign) - sign
}

func (s *Sum) addSpecial(x float64) {
	switch {
	case x > 0:
		s.special |= hasPosInf
	case x < 0:
		s.special |= hasNegInf
	default:
		s.special |= hasNaN
	}
}

// Merge adds the value of o to s. o keeps its value; s and o must be different.
func (s *Sum) Merge(o *Sum) {
	s.carry()
	o.carry()
	for i, c := range o.chunk {
		s.chunk[i] += c
	}
	s.pending = 1
	s.special |= o.special
}

// Subtract takes the value of o from s. o keeps its value; s and o must be
// different.
func (s *Sum) Subtract(o *Sum) {
	s.carry()
	o.carry()
	for i, c := range o.chunk {
		s.chunk[i] -= c
	}
	s.pending = 1
	s.special |= o.special & hasNaN
	if o.special&hasPosInf != 0 {
		s.special |= hasNegInf
	}
	if o.special&hasNegInf != 0 {
		s.special |= hasPosInf
	}
}

// carry moves what exceeds 32 bits to the next chunk: all chunks but the last are
// from 0 to 2^32-1 after it, and the last has the sign of the sum.
func (s *Sum) carry() {
	if s.pending == 0 {
		return
	}
	var c int64
	for i := range sumChunks - 1 {
		t := s.chunk[i] + c
		s.chunk[i] = t & (1<<32 - 1)
		c = t >> 32
	}
	s.chunk[sumChunks-1] += c
	s.pending = 0
}

// Value returns the sum, rounded once, to the nearest float64 (ties to even): 0
// for an empty sum and for one that cancels exactly (never -0), an infinity if the
// exact sum rounds to one.
func (s *Sum) Value() float64 {
	return s.Mean(1)
}

// Mean returns the sum divided by n > 0, rounded once as by Value. It panics if
// n is not positive.
func (s *Sum) Mean(n int) float64 {
	if n <= 0 {
		panic("exact: Mean needs a positive count")
	}
	switch s.special {
	case 0:
	case hasPosInf:
		return math.Inf(1)
	case hasNegInf:
		return math.Inf(-1)
	default:
		return math.NaN()
	}
	s.carry()
	size, negative := s.magnitude()
	inexact := false
	if n > 1 {
		inexact = divide(&size, uint64(n))
	}
	v := round(&size, inexact)
	if negative && v != 0 {
		return -v
	}
	return v
}

// magnitude returns the absolute value of carried chunks.
func (s *Sum) magnitude() (size [sumChunks]uint32, negative bool) {
	negative = s.chunk[sumChunks-1] < 0
	sign := int64(0)
	if negative {
		sign = -1
	}
	c := -sign // negate as complement plus one
	for i, t := range s.chunk {
		t = (t ^ sign) & (1<<32 - 1)
		t += c
		size[i] = uint32(t)
		c = t >> 32
	}
	return size, negative
}

// divide divides a by n in place and reports whether a rest was left.
func divide(a *[sumChunks]uint32, n uint64) bool {
	var rest uint64
	for i := sumChunks - 1; i >= 0; i-- {
		var q uint64
		q, rest = bits.Div64(rest>>32, rest<<32|uint64(a[i]), n)
		a[i] = uint32(q)
	}
	return rest != 0
}

// round returns the float64 nearest to the number in a, plus a little if inexact.
func round(a *[sumChunks]uint32, inexact bool) float64 {
	top := sumChunks - 1
	for top > 0 && a[top] == 0 {
		top--
	}
	// high is the position of the highest bit, unit that of the last bit kept: 52
	// below it, but not below 2^-1074.
	high := 32*top + bits.Len32(a[top]) - 1
	unit := max(high-52, sumBias-1074)
	bit := func(p int) uint64 { return uint64(a[p/32] >> (p % 32) & 1) }
	var m uint64
	for p := high; p >= unit; p-- {
		m = m<<1 | bit(p)
	}
	if bit(unit-1) == 1 && (m&1 == 1 || inexact || anyBelow(a, unit-1)) {
		m++
	}
	return math.Ldexp(float64(m), unit-sumBias)
}

// anyBelow reports whether a bit below position p is set.
func anyBelow(a *[sumChunks]uint32, p int) bool {
	for _, c := range a[:p/32] {
		if c != 0 {
			return true
		}
	}
	return a[p/32]&(1<<(p%32)-1) != 0
}
