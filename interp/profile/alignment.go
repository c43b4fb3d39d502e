package profile

import (
	"errors"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Alignment is a line of straight legs with a station at every vertex. It is
// read-only and safe to share.
type Alignment struct {
	points   []orb.Point
	stations []float64 // of every vertex
	lengths  []float64 // of every leg
}

// ErrShort reports a line without length.
var ErrShort = errors.New("a line of one place: expected two places or more")

// NewAlignment returns the line through points, whose first has the station from.
// Points that repeat the one before are dropped; the slice is not kept.
//
// It returns ErrShort, or a *triangulate.PositionError for a coordinate that
// Delaunay would refuse.
func NewAlignment(points []orb.Point, from float64) (*Alignment, error) {
	a := &Alignment{}
	for i, p := range points {
		if !accepted(p[0]) || !accepted(p[1]) {
			return nil, &triangulate.PositionError{Index: i, Point: p}
		}
		if n := len(a.points); n == 0 || a.points[n-1] != p {
			a.points = append(a.points, p)
		}
	}
	if len(a.points) < 2 {
		return nil, ErrShort
	}
	if math.IsNaN(from) || math.IsInf(from, 0) {
		return nil, fmt.Errorf("first station %v: expected a number", from)
	}
	a.stations = append(a.stations, from)
	var sum exact.Sum
	sum.Add(from)
	for i, p := range a.points[1:] {
		l := distance(a.points[i], p)
		a.lengths = append(a.lengths, l)
		sum.Add(l)
		a.stations = append(a.stations, sum.Value())
	}
	return a, nil
}

func accepted(v float64) bool {
	size := math.Abs(v)
	return size <= triangulate.CoordinateMost && (size >= triangulate.CoordinateLeast || size == 0)
}

func distance(p, q orb.Point) float64 {
	dx, dy := q[0]-p[0], q[1]-p[1]
	return math.Sqrt(float64(dx*dx) + float64(dy*dy))
}

// Points returns the vertices. The slice is the alignment's own.
func (a *Alignment) Points() []orb.Point { return a.points }

// Stations returns the station of every vertex. The slice is the alignment's own.
func (a *Alignment) Stations() []float64 { return a.stations }

// Start and End return the stations of the ends.
func (a *Alignment) Start() float64 { return a.stations[0] }

// End returns the station of the last vertex.
func (a *Alignment) End() float64 { return a.stations[len(a.stations)-1] }

// leg returns the number of the leg that holds a station; of two the later one.
func (a *Alignment) leg(station float64) int {
	low, high := 0, len(a.lengths)-1
	for low < high {
		mid := (low + high + 1) / 2
		if a.stations[mid] <= station {
			low = mid
		} else {
			high = mid - 1
		}
	}
	return low
}

// At returns the place at a station, and the direction of the line there, of length
// 1. At a bend it is that of the bisector, unless the line turns back. Stations
// beyond the ends are on the straight continuation.
func (a *Alignment) At(station float64) (at, direction orb.Point) {
	k := a.leg(station)
	p, q := a.points[k], a.points[k+1]
	direction = a.direction(k)
	if station == a.stations[k] && k > 0 {
		before := a.direction(k - 1)
		if both := (orb.Point{before[0] + direction[0], before[1] + direction[1]}); math.Abs(both[0])+math.Abs(both[1]) > 1e-9 {
			l := math.Sqrt(float64(both[0]*both[0]) + float64(both[1]*both[1]))
			direction = orb.Point{both[0] / l, both[1] / l}
		}
	}
	switch station {
	case a.stations[k]:
		return p, direction
	case a.stations[k+1]:
		return q, direction
	}
	t := (station - a.stations[k]) / a.lengths[k]
	return orb.Point{p[0] + float64(t*(q[0]-p[0])), p[1] + float64(t*(q[1]-p[1]))}, direction
}

func (a *Alignment) direction(leg int) orb.Point {
	p, q, l := a.points[leg], a.points[leg+1], a.lengths[leg]
	return orb.Point{(q[0] - p[0]) / l, (q[1] - p[1]) / l}
}

// Beside is where a place lies beside an alignment.
type Beside struct {
	Station float64 // of the nearest place of the line
	Offset  float64 // distance from there, negative on the left of the line
	// Beyond is set where the nearest place is an end and p lies behind it, in the
	// line's direction. Station and Offset are those of the straight continuation.
	Beyond bool
}

// Locate returns where p lies beside the line. Of two legs equally near the earlier
// one counts. Time O(legs).
func (a *Alignment) Locate(p orb.Point) Beside {
	best, nearest := Beside{}, math.Inf(1)
	for k, l := range a.lengths {
		u := a.direction(k)
		wx, wy := p[0]-a.points[k][0], p[1]-a.points[k][1]
		along := float64(wx*u[0]) + float64(wy*u[1])
		across := float64(wx*u[1]) - float64(wy*u[0]) // to the right
		// How far off the nearest place of the leg is.
		past := max(0, -along, along-l)
		off := math.Sqrt(float64(across*across) + float64(past*past))
		if off >= nearest {
			continue
		}
		nearest = off
		best = Beside{a.stations[k] + along, across, false}
		switch {
		case past == 0:
		case along < 0 && k == 0, along > 0 && k == len(a.lengths)-1:
			best.Beyond = true
		case along < 0:
			best = Beside{a.stations[k], math.Copysign(off, across), false}
		default:
			best = Beside{a.stations[k+1], math.Copysign(off, across), false}
		}
	}
	return best
}

// Section is a line square to an alignment.
type Section struct {
	Station float64
	Line    *Alignment // from left to right; its stations are offsets
}

// Sections returns lines square to a at the stations given, left and right of it as
// far as told; the sum of the two must be positive. At a bend a section lies along
// the bisector. The error is that of NewAlignment, for coordinates out of range.
func (a *Alignment) Sections(stations []float64, left, right float64) ([]Section, error) {
	var all []Section
	for _, s := range stations {
		p, u := a.At(s)
		from := orb.Point{p[0] - float64(left*u[1]), p[1] + float64(left*u[0])}
		to := orb.Point{p[0] + float64(right*u[1]), p[1] - float64(right*u[0])}
		line, err := NewAlignment([]orb.Point{from, to}, -left)
		if err != nil {
			return nil, err
		}
		all = append(all, Section{s, line})
	}
	return all, nil
}

// Overlap is a pair of sections that meet, by their numbers, the first the smaller.
type Overlap struct{ First, Second int }

// Overlaps returns the pairs of sections that meet: what lies beyond is cut twice,
// as on the inside of a bend. The decision is exact. Time O(n log n) for sections
// that lie apart.
func Overlaps(sections []Section) []Overlap {
	order := byLeft(sections)
	var all []Overlap
	for i, k := range order {
		reach := bound(&sections[k]).Max[0]
		for _, n := range order[i+1:] {
			if bound(&sections[n]).Min[0] > reach {
				break
			}
			if meet(&sections[k], &sections[n]) {
				all = append(all, Overlap{min(k, n), max(k, n)})
			}
		}
	}
	return sortOverlaps(all)
}
