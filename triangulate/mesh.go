package triangulate

import (
	"iter"
	"sync"

	"github.com/paulmach/orb"
)

// The mesh is kept as triangles of three half-edges in one flat array, so that
// every link is an index of four bytes and needs no pointer:
//
//	half-edge h belongs to triangle h/3; the next one in that triangle is h+1,
//	or h-2 after the third; its twin runs the other way in the neighbour.
//
//	        c
//	       / \          triangle t = (a, b, c), counter-clockwise
//	  3t+2/   \3t+1     half-edge 3t   runs a→b
//	     /  t  \        half-edge 3t+1 runs b→c
//	    a-------b       half-edge 3t+2 runs c→a
//	       3t
//
// Origin and twin of a half-edge share eight bytes, so a step to a neighbour
// touches one cache line. With two triangles a vertex that is 48 bytes a vertex
// beside its 16 bytes of position.

// Vertex numbers a distinct position of a mesh, from 0.
type Vertex int32

// HalfEdge numbers one direction of an edge, within one triangle, from 0.
type HalfEdge int32

// Triangle numbers a triangle of a mesh, from 0.
type Triangle int32

// What stands where there is no vertex, half-edge or triangle.
const (
	NoVertex   Vertex   = -1
	NoHalfEdge HalfEdge = -1
	NoTriangle Triangle = -1
)

// Triangle returns the triangle that h belongs to.
func (h HalfEdge) Triangle() Triangle { return Triangle(h / 3) }

// next is the half-edge after h in its triangle.
func (h HalfEdge) next() HalfEdge {
	if h%3 == 2 {
		return h - 2
	}
	return h + 1
}

// prev is the half-edge before h in its triangle.
func (h HalfEdge) prev() HalfEdge {
	if h%3 == 0 {
		return h + 2
	}
	return h - 1
}

// HalfEdge returns the i-th half-edge of t, i in 0..2; it starts at the i-th
// of the corners that Corners returns.
func (t Triangle) HalfEdge(i int) HalfEdge { return HalfEdge(3*int32(t) + int32(i)) }

// half is one half-edge: where it starts, and the half-edge across.
type half struct {
	origin Vertex
	twin   HalfEdge
}

// Mesh is a finished triangulation. It is read-only and safe to share among
// goroutines; what changes during a query lives in a Locator.
//
// Triangles may be hidden (see Hide): they are no part of the surface and no
// method shows them, but walks still pass through them, so that finding a
// position needs no more care than in a convex mesh.
type Mesh struct {
	pos      []orb.Point // of every vertex
	half     []half      // three a triangle
	vertexOf []Vertex    // of every input point
	shown    int         // half-edges of the surface; hidden triangles follow them

	kept   bits        // of every half-edge, whether it is constrained; nil for none
	chains []chainEdge // what the segments are made of, sorted

	startsOnce sync.Once
	starts     starts // where walks begin, made when first asked for

	aroundOnce sync.Once
	around     []HalfEdge // of every vertex, the first outgoing half-edge
}

// NumVertices returns the number of distinct positions.
func (m *Mesh) NumVertices() int { return len(m.pos) }

// NumTriangles returns the number of triangles; 0 when all positions lie on one line.
func (m *Mesh) NumTriangles() int { return m.shown / 3 }

// NumHalfEdges returns three times the number of triangles.
func (m *Mesh) NumHalfEdges() int { return m.shown }

// NumInputs returns the number of points that the mesh was made from.
func (m *Mesh) NumInputs() int { return len(m.vertexOf) }

// Position returns the place of v, the very numbers of the input, but 0 for -0.
func (m *Mesh) Position(v Vertex) orb.Point { return m.pos[v] }

// Positions returns the places of all vertices. The slice is the mesh's own:
// it must not be changed.
func (m *Mesh) Positions() []orb.Point { return m.pos }

// Origin returns the vertex where h starts.
func (m *Mesh) Origin(h HalfEdge) Vertex { return m.half[h].origin }

// Dest returns the vertex where h ends.
func (m *Mesh) Dest(h HalfEdge) Vertex { return m.half[h.next()].origin }

// Apex returns the corner of h's triangle that is not on h.
func (m *Mesh) Apex(h HalfEdge) Vertex { return m.half[h.prev()].origin }

// Twin returns the half-edge that runs the other way in the neighbouring
// triangle, or NoHalfEdge where h lies on the outline.
func (m *Mesh) Twin(h HalfEdge) HalfEdge {
	t := m.half[h].twin
	if int(t) >= m.shown {
		return NoHalfEdge
	}
	return t
}

// Next returns the half-edge after h, counter-clockwise in its triangle.
func (m *Mesh) Next(h HalfEdge) HalfEdge { return h.next() }

// Prev returns the half-edge before h, counter-clockwise in its triangle.
func (m *Mesh) Prev(h HalfEdge) HalfEdge { return h.prev() }

// Corners returns the three vertices of t, counter-clockwise.
func (m *Mesh) Corners(t Triangle) [3]Vertex {
	h := m.half[3*int(t) : 3*int(t)+3]
	return [3]Vertex{h[0].origin, h[1].origin, h[2].origin}
}

// VertexOf returns the vertex at the place of the i-th input point. Several
// points at one place share one vertex.
func (m *Mesh) VertexOf(i int) Vertex { return m.vertexOf[i] }

// Inputs returns, for every vertex, the smallest index of an input point at
// its place. It makes a new slice in time O(inputs).
func (m *Mesh) Inputs() []int32 {
	in := make([]int32, len(m.pos))
	for i := len(m.vertexOf) - 1; i >= 0; i-- {
		in[m.vertexOf[i]] = int32(i)
	}
	return in
}

// Vertices ranges over all vertices in the order of their numbers, which is
// coherent in space but neither the input's order nor that of the output.
func (m *Mesh) Vertices() iter.Seq[Vertex] {
	return func(yield func(Vertex) bool) {
		for v := range m.pos {
			if !yield(Vertex(v)) {
				return
			}
		}
	}
}

// Triangles ranges over all triangles in the order of their numbers.
func (m *Mesh) Triangles() iter.Seq[Triangle] {
	return func(yield func(Triangle) bool) {
		for t := range m.shown / 3 {
			if !yield(Triangle(t)) {
				return
			}
		}
	}
}

// Around ranges over the half-edges that start at v, counter-clockwise. At a
// vertex on the outline it begins with one that has the outside on its right;
// the edge that ends the sweep there only enters v, as Prev of the sweep's last
// half-edge. (Where hidden triangles part the surface at v there are several
// sweeps.)
//
// The first call on a mesh makes an index of 4 bytes a vertex.
func (m *Mesh) Around(v Vertex) iter.Seq[HalfEdge] {
	return func(yield func(HalfEdge) bool) {
		first := m.firstAround(v)
		if first == NoHalfEdge {
			return
		}
		for h := first; ; {
			if int(h) < m.shown && !yield(h) {
				return
			}
			if h = m.turn(h); h == first {
				return
			}
		}
	}
}

// turn returns the next half-edge counter-clockwise about the origin of h,
// hidden ones included, over the outside of the hull if need be.
func (m *Mesh) turn(h HalfEdge) HalfEdge {
	if t := m.half[h.prev()].twin; t != NoHalfEdge {
		return t
	}
	return m.firstClockwise(h)
}

// firstAround returns the half-edge at which a turn about v begins: on the
// outline one with no triangle on its right, elsewhere any fixed one;
// NoHalfEdge when v has no triangle.
func (m *Mesh) firstAround(v Vertex) HalfEdge {
	m.firstAroundAll()
	return m.around[v]
}

func (m *Mesh) firstAroundAll() {
	m.aroundOnce.Do(func() {
		a := make([]HalfEdge, len(m.pos))
		for i := range a {
			a[i] = NoHalfEdge
		}
		for h := range HalfEdge(m.shown) {
			if o := m.half[h].origin; a[o] == NoHalfEdge || m.Twin(h) == NoHalfEdge {
				a[o] = h
			}
		}
		m.around = a
	})
}
