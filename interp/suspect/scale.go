package suspect

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// nearMost is how many vertices about one are asked for their residuals, and
// seenMost how many are looked at for that; both bound the work where one vertex has
// very many neighbours.
const (
	nearMost = 48
	seenMost = 240
)

// fewest is how many residuals a scale is taken from at least.
const fewest = 8

// Rings of neighbours that are asked. Vertices of lines lie further apart from each
// other.
const (
	depthMost      = 3
	depthMostLined = 6
)

// normal makes the median of absolute values of normal errors their standard deviation:
// one over the third quartile of the normal distribution.
const normal = 1.482602218505602

// usualReach is the part of the reaches about a reading that count as usual there.
const usualReach = 0.9

// surroundings finds the vertices about one, ring by ring. One goroutine at a time.
type surroundings struct {
	r    *triangulate.Reduction
	pos  []orb.Point
	seen vertexSet

	ring, next, link []triangulate.Vertex
	about            []triangulate.Vertex
	values, reaches  []float64
}

func newSurroundings(m *triangulate.Mesh) *surroundings {
	return &surroundings{r: m.Reduction(), pos: m.Positions()}
}

// neighbours returns the neighbours of v, in an order that depends on their places
// alone: counter-clockwise from the smallest in (x, y) order. Of a vertex on the outline
// there are none.
func (s *surroundings) neighbours(v triangulate.Vertex) []triangulate.Vertex {
	if s.r.OnOutline(v) || s.r.Removed(v) {
		return nil
	}
	s.link = s.r.Neighbours(s.link[:0], v)
	least := 0
	for i := range s.link {
		if exact.CompareXY(s.pos[s.link[i]], s.pos[s.link[least]]) < 0 {
			least = i
		}
	}
	slices.Reverse(s.link[:least])
	slices.Reverse(s.link[least:])
	slices.Reverse(s.link)
	return s.link
}

// gather puts those vertices into about that lie two and more edges from v and are of
// use, at most nearMost, until a ring is complete that brings their number to enough.
// The neighbours of v are not among them: each of them may be expected where it is
// because of v.
func (s *surroundings) gather(v triangulate.Vertex, depths, enough int, use func(triangulate.Vertex) bool) {
	s.seen.reset()
	s.about = s.about[:0]
	s.seen.add(v)
	s.ring = append(s.ring[:0], v)
	for depth := 1; depth <= depths && (depth <= depthMost || len(s.about) < enough); depth++ {
		s.next = s.next[:0]
		for _, u := range s.ring {
			for _, w := range s.neighbours(u) {
				if s.seen.count == seenMost {
					break
				}
				if !s.seen.add(w) {
					continue
				}
				s.next = append(s.next, w)
				if depth > 1 && len(s.about) < nearMost && use(w) {
					s.about = append(s.about, w)
				}
			}
		}
		s.ring, s.next = s.next, s.ring
	}
}

// A miss is how far a reading lies from what is expected, and how far that reaches.
type miss struct{ residual, reach float64 }

// scale returns the middle and the scale of the misses of the vertices that gather found,
// for a prediction that reaches as far as given; NaN of too few.
//
// The middle is the median of the residuals, the scale their median distance from it
// times normal (the median absolute deviation; Hampel 1974): up to half of them may be
// wrong. A prediction that reaches further than is usual about it is worse as the square
// of its reach, as it is on curved ground: so is the scale.
func (s *surroundings) scale(of func(triangulate.Vertex) miss, reach float64) (middle, scale float64) {
	s.values, s.reaches = s.values[:0], s.reaches[:0]
	for _, v := range s.about {
		if m := of(v); m.residual == m.residual {
			s.values, s.reaches = append(s.values, m.residual), append(s.reaches, m.reach)
		}
	}
	n := len(s.values)
	if n < fewest {
		return math.NaN(), math.NaN()
	}
	middle = median(s.values)
	for i, r := range s.values {
		s.values[i] = math.Abs(r - middle)
	}
	scale = normal * median(s.values)
	slices.Sort(s.reaches)
	return middle, scale * stretch(reach, s.reaches[int(usualReach*float64(n))])
}

// stretch is how many times worse than usual a prediction is that reaches as far as given.
func stretch(reach, usual float64) float64 {
	if !(reach > usual) {
		return 1
	}
	return float64(reach/usual) * (reach / usual)
}

// median sorts values and returns the middle one, or the mean of the middle two.
func median(values []float64) float64 {
	slices.Sort(values)
	n := len(values)
	if n%2 == 1 {
		return values[n/2]
	}
	return float64(values[n/2-1]/2) + float64(values[n/2]/2)
}

// vertexSet holds up to seenMost vertices, in a table that need not be cleared: an entry
// counts if it has the stamp of now.
type vertexSet struct {
	vertex [1 << 9]triangulate.Vertex
	stamp  [1 << 9]uint32
	now    uint32
	count  int
}

func (s *vertexSet) reset() {
	if s.now++; s.now == 0 {
		clear(s.stamp[:])
		s.now = 1
	}
	s.count = 0
}

// add tells whether v is new.
func (s *vertexSet) add(v triangulate.Vertex) bool {
	i := uint32(v) * 2654435769 >> 23
	for s.stamp[i] == s.now {
		if s.vertex[i] == v {
			return false
		}
		i = (i + 1) & (1<<9 - 1)
	}
	s.vertex[i], s.stamp[i] = v, s.now
	s.count++
	return true
}
