package triangulate

// bits is a set of small numbers, one bit each.
type bits []uint64

func newBits(n int) bits { return make(bits, (n+63)/64) }

func (b bits) get(i int) bool { return b[i>>6]&(1<<(i&63)) != 0 }

func (b bits) set(i int) { b[i>>6] |= 1 << (i & 63) }

func (b bits) put(i int, on bool) {
	if on {
		b[i>>6] |= 1 << (i & 63)
	} else {
		b[i>>6] &^= 1 << (i & 63)
	}
}
