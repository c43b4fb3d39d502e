package suspect

import (
	"math"

	"isofacet/triangulate"
)

// onLine is a vertex with constrained edges.
type onLine struct {
	miss                     // from the line between its two neighbours along it
	a, b  triangulate.Vertex // those, NoVertex unless there are two
	count int
}

func (l *onLine) joins() bool { return l != nil && l.count == 2 }

// lines are the vertices with constrained edges.
type lines map[triangulate.Vertex]*onLine

func linesOf(m *triangulate.Mesh) lines {
	ls := lines{}
	if !m.HasConstraints() {
		return ls
	}
	add := func(v, w triangulate.Vertex) {
		l := ls[v]
		if l == nil {
			l = &onLine{miss{math.NaN(), math.NaN()}, triangulate.NoVertex, triangulate.NoVertex, 0}
			ls[v] = l
		}
		l.count++
		l.a, l.b = l.b, w
	}
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if t := m.Twin(h); m.IsConstrained(h) && (t == triangulate.NoHalfEdge || h < t) {
			add(m.Origin(h), m.Dest(h))
			add(m.Dest(h), m.Origin(h))
		}
	}
	for _, l := range ls {
		if l.count != 2 {
			l.a, l.b = triangulate.NoVertex, triangulate.NoVertex
		}
	}
	return ls
}

// alongLine is the height that v has on the way along its line from the one neighbour
// to the other.
func (f *finder) alongLine(v triangulate.Vertex, l *onLine) float64 {
	a, b := f.apart(v, l.a), f.apart(v, l.b)
	if b < a || a == b && f.z[l.b] < f.z[l.a] { // one way round, whichever comes first
		return f.z[l.b] + float64(b/(a+b)*(f.z[l.a]-f.z[l.b]))
	}
	return f.z[l.a] + float64(a/(a+b)*(f.z[l.b]-f.z[l.a]))
}

// apart is the distance of two vertices.
func (f *finder) apart(v, w triangulate.Vertex) float64 {
	p, q := f.near.pos[v], f.near.pos[w]
	dx, dy := q[0]-p[0], q[1]-p[1]
	return math.Sqrt(float64(dx*dx) + float64(dy*dy))
}

// missLine sets how far v lies from its line.
func (f *finder) missLine(v triangulate.Vertex) {
	l := f.lines[v]
	if !l.joins() || f.near.r.OnOutline(v) {
		return
	}
	a, b := f.apart(v, l.a), f.apart(v, l.b)
	l.miss = miss{f.own[v] - f.alongLine(v, l), math.Sqrt(a * b)}
}
