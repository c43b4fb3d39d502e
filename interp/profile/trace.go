package profile

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Ahead says what follows a point of a profile.
type Ahead uint8

// What may follow.
const (
	End     Ahead = iota // nothing: the line ends
	Surface              // a straight piece of the surface
	Gap                  // no surface
)

// String returns the word that outputs use.
func (a Ahead) String() string { return [...]string{"end", "surface", "gap"}[a] }

// Point is one place of a profile.
type Point struct {
	Station float64
	At      orb.Point
	Z       float64 // NaN where there is no surface
	// Grade is the rise over run of the piece ahead; NaN if there is none.
	Grade float64
	// Place is where the point lies in the mesh: OnEdge where the line crosses an
	// edge or a rim, Inside for an end or a bend in a triangle.
	Place triangulate.Place
	Ahead Ahead
	Bend  bool // the point is a vertex of the line, its ends included
}

// Profile is a surface along a line, from its first vertex to its last.
type Profile struct {
	Points []Point
}

// Stretch is a part of a line between two stations.
type Stretch struct{ From, To float64 }

// Gaps returns the parts of the line without surface, in order.
func (p *Profile) Gaps() []Stretch { return p.stretches(Gap) }

// Runs returns the parts of the line with surface, in order.
func (p *Profile) Runs() []Stretch { return p.stretches(Surface) }

func (p *Profile) stretches(kind Ahead) []Stretch {
	var all []Stretch
	open := false
	for i := range p.Points {
		pt := &p.Points[i]
		if open {
			all[len(all)-1].To = pt.Station
		}
		if pt.Ahead == kind && !open {
			all = append(all, Stretch{pt.Station, pt.Station})
		}
		open = pt.Ahead == kind
	}
	return all
}

// Z returns the height at a station, by the straight line between the points on
// either side; NaN in gaps and beyond the ends.
func (p *Profile) Z(station float64) float64 {
	low, high := 0, len(p.Points)
	for low < high { // the first point beyond
		mid := (low + high) / 2
		if p.Points[mid].Station > station {
			high = mid
		} else {
			low = mid + 1
		}
	}
	if low == 0 {
		return math.NaN()
	}
	a := &p.Points[low-1]
	if a.Station == station {
		return a.Z
	}
	if a.Ahead != Surface || low == len(p.Points) {
		return math.NaN()
	}
	b := &p.Points[low]
	t := (station - a.Station) / (b.Station - a.Station)
	z := a.Z + float64(t*(b.Z-a.Z))
	return min(max(z, min(a.Z, b.Z)), max(a.Z, b.Z))
}

// Tracer makes profiles of one surface. One goroutine uses it at a time.
type Tracer struct {
	s       *interp.Surface
	m       *triangulate.Mesh
	locator *triangulate.Locator
	limit   *limit

	events []event // of the leg at hand, reused
	merged []event
	points []Point // of the line at hand, reused
}

// event is a point with what carries the piece ahead: a triangle, or an edge along
// which the line runs.
type event struct {
	Point
	into  triangulate.Triangle
	along triangulate.HalfEdge
}

// NewTracer returns a tracer of s, which region limits if it is not nil.
func NewTracer(s *interp.Surface, region *triangulate.Region) *Tracer {
	t := &Tracer{s: s, m: s.Mesh(), locator: s.Mesh().Locator()}
	if region != nil {
		t.limit = newLimit(region)
	}
	return t
}

// Trace returns the profile along a line.
func (t *Tracer) Trace(a *Alignment) *Profile {
	t.points = t.Append(t.points[:0], a)
	return &Profile{slices.Clone(t.points)}
}

// Append appends the points of the profile along a line to dst, for many lines
// without much memory of their own.
func (t *Tracer) Append(dst []Point, a *Alignment) []Point {
	last := len(a.lengths) - 1
	at := t.locator.Locate(a.points[0])
	for k := range a.lengths {
		next := t.locator.Locate(a.points[k+1])
		t.leg(a, k, at, next)
		events := t.events
		if t.limit != nil {
			events = t.within(a, k)
		}
		if k < last {
			events = events[:len(events)-1] // the next leg begins with it
		} else {
			e := &events[len(events)-1]
			e.Ahead, e.Grade = End, math.NaN()
		}
		for i := range events {
			dst = append(dst, events[i].Point)
		}
		at = next
	}
	return dst
}

// leg collects the events of one leg, from its first vertex to its last, which lie
// where from and to say.
func (t *Tracer) leg(al *Alignment, k int, from, to triangulate.Location) {
	a, b := al.points[k], al.points[k+1]
	run := newRuler(al, k)
	t.events = t.events[:0]
	if from.Place == triangulate.Outside || from.Place == triangulate.Inside {
		t.add(&run, a, t.s.Value(from, a), from.Place, from.Triangle, triangulate.NoHalfEdge)
	}
	onward := from.Place == triangulate.Inside
	for c := range t.locator.Cross(a, b) {
		at, z := a, 0.0
		if c.Place == triangulate.OnVertex {
			at, z = t.m.Position(c.Vertex), t.s.Z()[c.Vertex]
		} else {
			o, d := t.m.Origin(c.Edge), t.m.Dest(c.Edge)
			if c.Along == triangulate.NoHalfEdge { // else the line begins there
				at = triangulate.Intersection(t.m.Position(o), t.m.Position(d), a, b)
			}
			z = t.s.ValueOnEdge(o, d, at)
		}
		t.add(&run, at, z, c.Place, c.Into, c.Along)
		onward = c.Into != triangulate.NoTriangle || c.Along != triangulate.NoHalfEdge
	}
	if onward || to.Place == triangulate.Outside {
		t.add(&run, b, t.s.Value(to, b), to.Place, triangulate.NoTriangle, triangulate.NoHalfEdge)
	}
	t.events[0].Bend = true
	end := &t.events[len(t.events)-1]
	end.Bend, end.Station = true, al.stations[k+1]
}

// add adds an event.
func (t *Tracer) add(run *ruler, at orb.Point, z float64, place triangulate.Place, into triangulate.Triangle, along triangulate.HalfEdge) {
	// Filled in place: a literal is made elsewhere and copied.
	n := len(t.events)
	t.events = slices.Grow(t.events, 1)[:n+1]
	e := &t.events[n]
	e.Station, e.At, e.Z, e.Grade = run.station(at), at, z, math.NaN()
	e.Place, e.Ahead, e.Bend = place, Gap, false
	e.into, e.along = into, along
	switch {
	case into != triangulate.NoTriangle:
		dzdx, dzdy := t.s.Gradient(into)
		e.Grade, e.Ahead = float64(dzdx*run.u[0])+float64(dzdy*run.u[1]), Surface
	case along != triangulate.NoHalfEdge:
		e.Grade, e.Ahead = t.gradeAlong(along, run.u), Surface
	}
}

// gradeAlong is the grade of an edge in the direction u, which it has or has
// reversed.
func (t *Tracer) gradeAlong(h triangulate.HalfEdge, u orb.Point) float64 {
	o, d := t.m.Origin(h), t.m.Dest(h)
	p, q := t.m.Position(o), t.m.Position(d)
	rise := (t.s.Z()[d] - t.s.Z()[o]) / distance(p, q)
	if float64((q[0]-p[0])*u[0])+float64((q[1]-p[1])*u[1]) < 0 {
		rise = -rise
	}
	return rise + 0
}

// ruler measures stations along one leg.
//
// They are measured along the longer axis of the leg: rounding keeps the order of
// exact places on it, and every operation below keeps it too, so that stations never
// fall.
type ruler struct {
	axis        int
	from, per   float64 // coordinate at the first vertex, and its length
	start, l    float64
	u           orb.Point
	first, last float64 // stations of the ends
}

func newRuler(a *Alignment, k int) ruler {
	p, q := a.points[k], a.points[k+1]
	r := ruler{start: a.stations[k], l: a.lengths[k], u: a.direction(k), first: a.stations[k], last: a.stations[k+1]}
	if math.Abs(q[1]-p[1]) > math.Abs(q[0]-p[0]) {
		r.axis = 1
	}
	r.from, r.per = p[r.axis], q[r.axis]-p[r.axis]
	return r
}

func (r *ruler) station(p orb.Point) float64 {
	t := (p[r.axis] - r.from) / r.per
	return min(max(r.start+float64(t*r.l), r.first), r.last)
}
