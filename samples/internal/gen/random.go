package gen

import "math/bits"

// random is SplitMix64 (Steele, Lea & Flood 2014), written out here so that
// the files never depend on another library's idea of a random number.
type random struct{ state uint64 }

func (r *random) next() uint64 {
	r.state += 0x9e3779b97f4a7c15
	z := r.state
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// between returns an integer in [lo, hi].
func (r *random) between(lo, hi int) int {
	n, _ := bits.Mul64(r.next(), uint64(hi-lo+1))
	return lo + int(n)
}

// noise returns a whole number in [-2*unit, 2*unit], mean 0, standard
// deviation about 0.58 unit: the sum of four even ones.
func (r *random) noise(unit int) int {
	n := 0
	for range 4 {
		n += r.between(-unit, unit)
	}
	return n / 2
}
