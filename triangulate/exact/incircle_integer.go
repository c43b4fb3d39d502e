package exact

import (
	"math"
	"math/bits"
)

// Exact differences of map coordinates are multiples of one power of two, the
// place of the lowest bit set in any of them, and seldom longer than 45 bits: at
// (430000, 5600000) the coarsest last place is 2^-30, so differences of a hundred
// metres have 37 bits. As integers they turn the determinant into a handful of
// machine multiplications. The filter leaves every in-circle test of a lattice to
// this stage, because its true value is zero.

// Differences below 2^30 keep lifts and crosses in 61 bits and the determinant
// below 3 x 2^122; below 2^62 they take 125 bits and the determinant stays below
// 3 x 2^250.
const (
	smallBits = 30
	largeBits = 62
)

// inCircleInteger returns the sign of the determinant of exact differences, or
// false if they span more than 62 bits.
func inCircleInteger(adx, ady, bdx, bdy, cdx, cdy float64) (sign int, ok bool) {
	low := min(lowBit(adx), lowBit(ady), lowBit(bdx), lowBit(bdy), lowBit(cdx), lowBit(cdy))
	if low == noBit {
		return 0, true
	}
	// 2^-low, a normal number: accepted differences have -252 <= low <= 201.
	scale := math.Float64frombits(uint64(1023-low) << 52)
	size := scale * max(math.Abs(adx), math.Abs(ady), math.Abs(bdx), math.Abs(bdy), math.Abs(cdx), math.Abs(cdy))
	switch {
	case size < 1<<smallBits:
		return inCircleSmall(
			int64(adx*scale), int64(ady*scale), int64(bdx*scale),
			int64(bdy*scale), int64(cdx*scale), int64(cdy*scale)), true
	case size < 1<<largeBits:
		return inCircleLarge(
			int64(adx*scale), int64(ady*scale), int64(bdx*scale),
			int64(bdy*scale), int64(cdx*scale), int64(cdy*scale)), true
	}
	return 0, false
}

// noBit is lowBit of zero.
const noBit = 1 << 20

// lowBit returns the k for which x is an odd multiple of 2^k; x is zero or normal.
func lowBit(x float64) int {
	if x == 0 {
		return noBit
	}
	b := math.Float64bits(x)
	return int(b>>52&0x7ff) - 1075 + bits.TrailingZeros64(b|1<<52)
}

// inCircleSmall is the determinant of integers below 2^30.
func inCircleSmall(ax, ay, bx, by, cx, cy int64) int {
	ah, al := mulLift(ax*ax+ay*ay, bx*cy-cx*by)
	bh, bl := mulLift(bx*bx+by*by, cx*ay-ax*cy)
	ch, cl := mulLift(cx*cx+cy*cy, ax*by-bx*ay)
	lo, carry := bits.Add64(al, bl, 0)
	hi := ah + bh + carry
	lo, carry = bits.Add64(lo, cl, 0)
	hi += ch + carry
	if int64(hi) < 0 {
		return -1
	}
	if hi|lo == 0 {
		return 0
	}
	return 1
}

// mulLift multiplies a lift (not negative) by a cross: 128 bits in two's
// complement.
func mulLift(lift, cross int64) (hi, lo uint64) {
	hi, lo = bits.Mul64(uint64(lift), uint64(cross))
	// A negative cross was read as cross + 2^64.
	return hi - uint64(cross>>63&lift), lo
}

// wide is an integer of 128 bits in two's complement.
type wide struct{ hi, lo uint64 }

// wideProduct returns ab.
func wideProduct(a, b int64) wide {
	hi, lo := bits.Mul64(uint64(a), uint64(b))
	return wide{hi - uint64(a>>63&b) - uint64(b>>63&a), lo}
}

func (a wide) plus(b wide) wide {
	lo, carry := bits.Add64(a.lo, b.lo, 0)
	return wide{a.hi + b.hi + carry, lo}
}

func (a wide) minus(b wide) wide {
	lo, borrow := bits.Sub64(a.lo, b.lo, 0)
	return wide{a.hi - b.hi - borrow, lo}
}

// inCircleLarge is the determinant of integers below 2^62: products of 128 bits,
// added up in 256 bits of two's complement, lowest word first.
func inCircleLarge(ax, ay, bx, by, cx, cy int64) int {
	var det [4]uint64
	addLifted(&det, wideProduct(ax, ax).plus(wideProduct(ay, ay)), wideProduct(bx, cy).minus(wideProduct(cx, by)))
	addLifted(&det, wideProduct(bx, bx).plus(wideProduct(by, by)), wideProduct(cx, ay).minus(wideProduct(ax, cy)))
	addLifted(&det, wideProduct(cx, cx).plus(wideProduct(cy, cy)), wideProduct(ax, by).minus(wideProduct(bx, ay)))
	if int64(det[3]) < 0 {
		return -1
	}
	if det[0]|det[1]|det[2]|det[3] == 0 {
		return 0
	}
	return 1
}

// addLifted adds lift times cross to det; lift is not negative.
func addLifted(det *[4]uint64, lift, cross wide) {
	var p [4]uint64
	h, l := bits.Mul64(lift.lo, cross.lo)
	p[0], p[1] = l, h
	h, l = bits.Mul64(lift.hi, cross.hi)
	p[2], p[3] = l, h
	var carry uint64
	h, l = bits.Mul64(lift.lo, cross.hi)
	p[1], carry = bits.Add64(p[1], l, 0)
	p[2], carry = bits.Add64(p[2], h, carry)
	p[3] += carry
	h, l = bits.Mul64(lift.hi, cross.lo)
	p[1], carry = bits.Add64(p[1], l, 0)
	p[2], carry = bits.Add64(p[2], h, carry)
	p[3] += carry
	// A negative cross was read as cross + 2^128.
	negative := uint64(int64(cross.hi) >> 63)
	var borrow uint64
	p[2], borrow = bits.Sub64(p[2], lift.lo&negative, 0)
	p[3], _ = bits.Sub64(p[3], lift.hi&negative, borrow)

	det[0], carry = bits.Add64(det[0], p[0], 0)
	det[1], carry = bits.Add64(det[1], p[1], carry)
	det[2], carry = bits.Add64(det[2], p[2], carry)
	det[3], _ = bits.Add64(det[3], p[3], carry)
}
