package exact

import "math"

// An expansion is a sum of float64 of increasing size whose bits do not overlap;
// zeros are left out, except that the expansion of zero is one zero. Its last
// term has its sign. (Shewchuk 1997, section 2; the routines below are its
// Fast-Expansion-Sum and Scale-Expansion with elimination of zeros, which keep
// the terms strongly non-overlapping under rounding to even.)
//
// Callers hand in destination slices of stack arrays that are large enough: m+n
// terms for a sum of m and n terms, 2n for a product with one float64. No result
// may share memory with an argument.

// twoSum returns a+b as rounded sum and error.
func twoSum(a, b float64) (s, e float64) {
	s = a + b
	bv := s - a
	return s, (a - (s - bv)) + (b - bv)
}

// fastTwoSum is twoSum for |a| >= |b|, or a = 0.
func fastTwoSum(a, b float64) (s, e float64) {
	s = a + b
	return s, b - (s - a)
}

// twoProduct returns ab as rounded product and error.
func twoProduct(a, b float64) (p, e float64) {
	p = float64(a * b)
	return p, math.FMA(a, b, -p)
}

// crossProduct stores ax by - ay bx as an expansion of four terms, zeros included
// (addExpansions takes them out).
func crossProduct(dst *[4]float64, ax, ay, bx, by float64) {
	p1, p0 := twoProduct(ax, by)
	q1, q0 := twoProduct(ay, bx)
	// Two-Two-Diff: (p1, p0) - (q1, q0).
	i, d0 := twoSum(p0, -q0)
	j, r := twoSum(p1, i)
	k, d1 := twoSum(r, -q1)
	d3, d2 := twoSum(j, k)
	dst[0], dst[1], dst[2], dst[3] = d0, d1, d2, d3
}

// addExpansions stores e+f and returns the number of terms, at least one. Zeros
// in e and f are allowed.
func addExpansions(dst, e, f []float64) int {
	n, i, j := 0, 0, 0
	var q float64
	for i < len(e) || j < len(f) {
		var t float64
		if j == len(f) || i < len(e) && math.Abs(e[i]) < math.Abs(f[j]) {
			t = e[i]
			i++
		} else {
			t = f[j]
			j++
		}
		if t == 0 {
			continue
		}
		var r float64
		q, r = twoSum(q, t)
		if r != 0 {
			dst[n] = r
			n++
		}
	}
	if q != 0 || n == 0 {
		dst[n] = q
		n++
	}
	return n
}

// scaleExpansion stores e times b and returns the number of terms, at least one.
func scaleExpansion(dst, e []float64, b float64) int {
	n := 0
	var q float64
	for i, t := range e {
		p1, p0 := twoProduct(t, b)
		if i == 0 {
			q = p1
			if p0 != 0 {
				dst[n] = p0
				n++
			}
			continue
		}
		s, r := twoSum(q, p0)
		if r != 0 {
			dst[n] = r
			n++
		}
		q, r = fastTwoSum(p1, s)
		if r != 0 {
			dst[n] = r
			n++
		}
	}
	if q != 0 || n == 0 {
		dst[n] = q
		n++
	}
	return n
}

// signOf returns the sign of x.
func signOf(x float64) int { return compare(x, 0) }
