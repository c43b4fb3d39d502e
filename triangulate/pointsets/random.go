package pointsets

import "math/bits"

// random is SplitMix64: a counter put through a mixing function. Every state
// is a good one, so that seeds may be small and consecutive.
type random struct{ state uint64 }

func (r *random) next() uint64 {
	r.state += 0x9e3779b97f4a7c15
	z := r.state
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// unit returns a multiple of 2^-53 in [0, 1).
//
// The division by a power of two is exact; the conversion around it keeps the
// compiler from fusing it with a sum all the same, so that the check for fused
// products has nothing to excuse.
func (r *random) unit() float64 { return float64(float64(r.next()>>11) / (1 << 53)) }

// below returns an integer in [0, n), n > 0. Multiplying instead of dividing
// (Lemire 2019, without the rejection step) leaves a bias below n/2^64.
func (r *random) below(n int) int {
	hi, _ := bits.Mul64(r.next(), uint64(n))
	return int(hi)
}

// bell returns a number in (-2, 2) with mean 0 and standard deviation
// sqrt(1/3): four uniform numbers added, which is near enough to a normal
// distribution here and needs no logarithm.
func (r *random) bell() float64 {
	return r.unit() + r.unit() + r.unit() + r.unit() - 2
}
