package flow

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Ending says why a flow line ends.
type Ending uint8

// Endings.
const (
	Outline Ending = iota // it leaves the surface
	Pit                   // nothing about it is lower
	Flat                  // level ground
	Stopped               // it was given up: see stepsMost
)

// String returns the word that outputs use.
func (e Ending) String() string { return [...]string{"outline", "pit", "flat", "stopped"}[e] }

// Line is a line of steepest descent.
type Line struct {
	Points orb.LineString
	Z      []float64 // at every point; never rising
	Ending Ending
}

// Length returns the length in plan.
func (l *Line) Length() float64 {
	sum := 0.0
	for i := 1; i < len(l.Points); i++ {
		dx, dy := l.Points[i][0]-l.Points[i-1][0], l.Points[i][1]-l.Points[i-1][1]
		sum += math.Sqrt(float64(dx*dx) + float64(dy*dy))
	}
	return sum
}

// Tracer traces flow lines on one surface. One goroutine uses it at a time.
type Tracer struct {
	s       *interp.Surface
	m       *triangulate.Mesh
	z       []float64
	locator *triangulate.Locator
	line    Line
}

// NewTracer returns a tracer of s.
func NewTracer(s *interp.Surface) *Tracer {
	return &Tracer{s: s, m: s.Mesh(), z: s.Z(), locator: s.Mesh().Locator()}
}

func (t *Tracer) gradient(of triangulate.Triangle) Gradient {
	dzdx, dzdy := t.s.Gradient(of)
	return Gradient{DzDx: dzdx, DzDy: dzdy}
}

// stepsMost bounds a line by this many steps a triangle. Exact arithmetic could not
// go round for ever; rounded places come near it on level ground that is not quite
// level.
const stepsMost = 16

// Trace returns the flow line from a place, and false if that is outside the surface.
func (t *Tracer) Trace(from orb.Point) (Line, bool) {
	at := t.locator.Locate(from)
	if at.Place == triangulate.Outside {
		return Line{}, false
	}
	t.line = Line{}
	t.add(from, t.s.Value(at, from))
	next := t.begin(at, from)
	for steps := stepsMost*t.m.NumTriangles() + 1000; next != nil && steps > 0; steps-- {
		next = next.step(t)
		if steps == 1 && next != nil {
			t.line.Ending = Stopped
		}
	}
	return t.line, true
}

// add adds a point. Its height is kept from rising where it is rounded up.
func (t *Tracer) add(p orb.Point, z float64) {
	n := len(t.line.Points)
	if n > 0 {
		z = min(z, t.line.Z[n-1])
		if t.line.Points[n-1] == p {
			t.line.Z[n-1] = z
			return
		}
	}
	t.line.Points, t.line.Z = append(t.line.Points, p), append(t.line.Z, z)
}

func (t *Tracer) last() orb.Point { return t.line.Points[len(t.line.Points)-1] }

// A state is where the line is and what it does next; nil is its end.
type state interface{ step(t *Tracer) state }

// begin is the state of a line that begins at p.
func (t *Tracer) begin(at triangulate.Location, p orb.Point) state {
	switch at.Place {
	case triangulate.OnVertex:
		return vertex(at.Vertex)
	case triangulate.OnEdge:
		return t.beginOnEdge(at.Edge)
	}
	g := t.gradient(at.Triangle)
	if g.DzDx == 0 && g.DzDy == 0 {
		return t.end(Flat)
	}
	return crossing{at.Triangle, triangulate.NoHalfEdge}
}

func (t *Tracer) end(e Ending) state {
	t.line.Ending = e
	return nil
}

// beginOnEdge begins between the ends of h.
func (t *Tracer) beginOnEdge(h triangulate.HalfEdge) state {
	best := noWay
	for _, side := range [2]triangulate.HalfEdge{h, t.m.Twin(h)} {
		if side != triangulate.NoHalfEdge && t.drains(side) < 0 {
			if w := t.down(side); w.better(&best) {
				best = w
			}
		}
	}
	if best.into != triangulate.NoHalfEdge {
		return crossing{best.into.Triangle(), best.into}
	}
	if t.m.Twin(h) == triangulate.NoHalfEdge && t.drains(h) > 0 {
		return t.end(Outline)
	}
	return t.alongEdge(h)
}

// alongEdge goes down the edge of h to its lower end.
func (t *Tracer) alongEdge(h triangulate.HalfEdge) state {
	a, b := t.m.Origin(h), t.m.Dest(h)
	switch {
	case t.z[a] < t.z[b]:
		return t.reach(a)
	case t.z[b] < t.z[a]:
		return t.reach(b)
	}
	return t.end(Flat)
}

// reach arrives at a vertex.
func (t *Tracer) reach(v triangulate.Vertex) state {
	t.add(t.m.Position(v), t.z[v])
	return vertex(v)
}

// arrive comes to half-edge h from its own triangle, which leads out over it.
func (t *Tracer) arrive(h triangulate.HalfEdge) state {
	twin := t.m.Twin(h)
	if twin == triangulate.NoHalfEdge {
		return t.end(Outline)
	}
	if t.drains(twin) < 0 {
		return crossing{twin.Triangle(), twin}
	}
	return t.alongEdge(h)
}

// vertex is a line at a vertex.
type vertex triangulate.Vertex

func (v vertex) step(t *Tracer) state {
	best, open, flat := t.fromVertex(triangulate.Vertex(v))
	switch {
	case best.into != triangulate.NoHalfEdge:
		return crossing{best.into.Triangle(), best.into}.fromCorner(t)
	case best.along != triangulate.NoHalfEdge:
		return t.alongEdge(best.along)
	case open:
		return t.end(Outline)
	case flat:
		return t.end(Flat)
	}
	return t.end(Pit)
}

// crossing is a line in a triangle, come in over a half-edge of it, or begun inside.
type crossing struct {
	in   triangulate.Triangle
	over triangulate.HalfEdge
}

// fromCorner crosses from the origin of c.over to the opposite edge.
func (c crossing) fromCorner(t *Tracer) state { return t.leave(t.m.Next(c.over), c.in) }

func (c crossing) step(t *Tracer) state {
	if c.over == triangulate.NoHalfEdge {
		return c.fromInside(t)
	}
	next, prev := t.m.Next(c.over), t.m.Prev(c.over)
	out, back := t.drains(next) > 0, t.drains(prev) > 0
	if out != back {
		if out {
			return t.leave(next, c.in)
		}
		return t.leave(prev, c.in)
	}
	// The apex lies to the left of the way, to its right, or on it.
	switch s := t.sideOf(c.in, t.m.Apex(c.over)); {
	case s > 0:
		return t.leave(next, c.in)
	case s < 0:
		return t.leave(prev, c.in)
	}
	return t.reach(t.m.Apex(c.over))
}

// fromInside finds the edge that a line from inside leaves over: its origin is on the
// right of the way, its destination on the left.
func (c crossing) fromInside(t *Tracer) state {
	best, off := triangulate.NoHalfEdge, math.Inf(1)
	for i := range 3 {
		h := c.in.HalfEdge(i)
		if t.drains(h) <= 0 {
			continue
		}
		o, d := t.sideOf(c.in, t.m.Origin(h)), t.sideOf(c.in, t.m.Dest(h))
		if wrong := max(o, -d, 0); wrong < off {
			best, off = h, wrong
		}
	}
	if best == triangulate.NoHalfEdge {
		return t.end(Flat)
	}
	return t.leave(best, c.in)
}

// sideOf is on which side of the way down triangle c, from the last place, v lies: its
// size is the distance times the gradient.
func (t *Tracer) sideOf(c triangulate.Triangle, v triangulate.Vertex) float64 {
	g, p, q := t.gradient(c), t.last(), t.m.Position(v)
	return difference(-g.DzDx, q[1]-p[1], -g.DzDy, q[0]-p[0])
}

// leave goes down triangle c to its half-edge h, and on from there.
func (t *Tracer) leave(h triangulate.HalfEdge, c triangulate.Triangle) state {
	o, d := t.m.Origin(h), t.m.Dest(h)
	so, sd := t.sideOf(c, o), t.sideOf(c, d)
	switch {
	case so >= 0 && t.z[o] <= t.line.Z[len(t.line.Z)-1]:
		return t.reach(o)
	case sd <= 0 && t.z[d] <= t.line.Z[len(t.line.Z)-1]:
		return t.reach(d)
	}
	f := min(max(so/(so-sd), 0), 1)
	p, q := t.m.Position(o), t.m.Position(d)
	at := orb.Point{between(p[0], q[0], f), between(p[1], q[1], f)}
	switch at {
	case p:
		return t.reach(o)
	case q:
		return t.reach(d)
	}
	t.add(at, t.s.ValueOnEdge(o, d, at))
	return t.arrive(h)
}

// between returns a + f (b-a), kept from a to b.
func between(a, b, f float64) float64 {
	v := a + float64(f*(b-a))
	return min(max(v, min(a, b)), max(a, b))
}
