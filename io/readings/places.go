package readings

import (
	"cmp"
	"math"
	"math/bits"
	"slices"
	"sync"
	"sync/atomic"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Places that repeat.
//
// Nearly all places of a survey stand once, so the question is which do not. Every
// place sets the bit of its hash in a table of some 16 to 32 bits a place; a bit
// that is set twice goes into a second table. Only places whose bit stands in the
// second table, the repeated ones and a few that share a bit by chance, are sorted
// and compared. Setting bits is free of order, so several goroutines may do it. A
// plain hash table of all places costs three times as much, a sort ten times.

// samePlaces finds the groups of equal places. Coordinates must not be NaN, and
// zero must be +0.
func samePlaces(points []orb.Point, workers int) groups {
	n := len(points)
	if n < 2 {
		return groups{}
	}
	f := newFilter(n)
	parts := min(max(workers, 1), n/sliceLeast+1)
	inParts(n, parts, func(_, from, to int) {
		if parts == 1 {
			for _, p := range points {
				f.add(hashPlace(p) >> f.shift)
			}
			return
		}
		for _, p := range points[from:to] {
			f.addShared(hashPlace(p) >> f.shift)
		}
	})
	found := make([][]candidate, parts)
	inParts(n, parts, func(part, from, to int) {
		var mine []candidate
		for i, p := range points[from:to] {
			if hash := hashPlace(p); f.twice(hash >> f.shift) {
				mine = append(mine, candidate{hash, int32(from + i)})
			}
		}
		found[part] = mine
	})
	c := slices.Concat(found...)
	// Once more by other bits of the hash: those that met by chance part here.
	f = newFilter(len(c))
	mask := uint64(1)<<(64-f.shift) - 1
	for i := range c {
		f.add(c[i].hash & mask)
	}
	c = slices.DeleteFunc(c, func(c candidate) bool { return !f.twice(c.hash & mask) })
	return groupCandidates(points, c)
}

// filter knows which bits were set once, and which more than once.
type filter struct {
	onceBits, twiceBits []uint64
	shift               int // of a hash, to be the number of a bit
}

// newFilter makes a filter with at least 16 bits for each of n numbers.
func newFilter(n int) *filter {
	size := max(bits.Len(uint(16*n)), 6)
	return &filter{make([]uint64, 1<<(size-6)), make([]uint64, 1<<(size-6)), 64 - size}
}

func (f *filter) add(h uint64) {
	if bit := uint64(1) << (h & 63); f.onceBits[h>>6]&bit != 0 {
		f.twiceBits[h>>6] |= bit
	} else {
		f.onceBits[h>>6] |= bit
	}
}

// addShared is add for several goroutines at a time.
func (f *filter) addShared(h uint64) {
	if bit := uint64(1) << (h & 63); atomic.OrUint64(&f.onceBits[h>>6], bit)&bit != 0 {
		atomic.OrUint64(&f.twiceBits[h>>6], bit)
	}
}

func (f *filter) twice(h uint64) bool { return f.twiceBits[h>>6]&(1<<(h&63)) != 0 }

// sliceLeast is how many places are worth a goroutine.
const sliceLeast = 1 << 15

type candidate struct {
	hash  uint64
	index int32
}

// groupCandidates keeps the candidates that have company. The groups come in the
// order of their first members.
func groupCandidates(points []orb.Point, c []candidate) (g groups) {
	slices.SortFunc(c, func(a, b candidate) int {
		if a.hash != b.hash {
			return cmp.Compare(a.hash, b.hash)
		}
		if d := exact.CompareXY(points[a.index], points[b.index]); d != 0 {
			return d
		}
		return cmp.Compare(a.index, b.index)
	})
	var runs [][2]int
	for i := 0; i < len(c); {
		j := i + 1
		for j < len(c) && c[j].hash == c[i].hash && points[c[j].index] == points[c[i].index] {
			j++
		}
		if j > i+1 {
			runs = append(runs, [2]int{i, j})
		}
		i = j
	}
	if len(runs) == 0 {
		return g
	}
	slices.SortFunc(runs, func(a, b [2]int) int { return cmp.Compare(c[a[0]].index, c[b[0]].index) })
	g.start = append(g.start, 0)
	for _, r := range runs {
		for _, m := range c[r[0]:r[1]] {
			g.members = append(g.members, m.index)
		}
		g.start = append(g.start, int32(len(g.members)))
	}
	return g
}

// hashPlace mixes the bits of a place so that every bit of the result depends on
// all of them (multiply and fold, as in wyhash).
func hashPlace(p orb.Point) uint64 {
	hi, lo := bits.Mul64(math.Float64bits(p[0])^0xa0761d6478bd642f, math.Float64bits(p[1])^0xe7037ed1a0b428db)
	hi, lo = bits.Mul64(hi^lo^0x8ebc6af09c88c6e3, 0x589965cc75374cc3)
	return hi ^ lo
}

// inParts runs f over [0, n) cut into parts, at the same time.
func inParts(n, parts int, f func(part, from, to int)) {
	if parts == 1 {
		f(0, 0, n)
		return
	}
	var wg sync.WaitGroup
	for part := range parts {
		wg.Go(func() { f(part, n*part/parts, n*(part+1)/parts) })
	}
	wg.Wait()
}
