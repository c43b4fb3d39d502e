package interp

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Surface is a mesh with a value at every vertex, and the planes between them. It
// is read-only and safe to share among goroutines.
type Surface struct {
	mesh *triangulate.Mesh
	pos  []orb.Point // of the mesh
	z    []float64   // of every vertex
}

// CountError reports that the number of values does not fit the mesh.
type CountError struct {
	Values, Want int
	Per          string // "vertex" or "input point"
}

func (e *CountError) Error() string {
	return fmt.Sprintf("%d values: expected one per %s, %d", e.Values, e.Per, e.Want)
}

// ValueError reports a value that cannot be worked with.
type ValueError struct {
	Index int // of the vertex, or of the input point for FromInputs
	Value float64
}

func (e *ValueError) Error() string {
	return fmt.Sprintf("value %d is %v: expected 0 or a number from 1e-60 to 1e60 in size", e.Index, e.Value)
}

// SameSpotError reports input points at one place with unlike values.
type SameSpotError struct {
	First, Second           int // input points, First the smaller
	FirstValue, SecondValue float64
	At                      orb.Point
}

func (e *SameSpotError) Error() string {
	return fmt.Sprintf("points %d and %d at (%v, %v) have values %v and %v: expected one value at one place",
		e.First, e.Second, e.At[0], e.At[1], e.FirstValue, e.SecondValue)
}

// New returns the surface of mesh m with value z[v] at vertex v. It keeps z, which
// must not be changed afterwards. Time O(len(z)), to check the values; no memory.
//
// It returns a *CountError or a *ValueError.
func New(m *triangulate.Mesh, z []float64) (*Surface, error) {
	if len(z) != m.NumVertices() {
		return nil, &CountError{len(z), m.NumVertices(), "vertex"}
	}
	for i, v := range z {
		if !accepted(v) {
			return nil, &ValueError{i, v}
		}
	}
	return &Surface{m, m.Positions(), z}, nil
}

// FromInputs returns the surface of mesh m with value z[i] at the i-th point that
// the mesh was made from. Points at one place must have equal values. It does not
// keep z. 8 bytes a vertex.
//
// It returns a *CountError, a *ValueError, or a *SameSpotError for the first point
// that disagrees with an earlier one.
func FromInputs(m *triangulate.Mesh, z []float64) (*Surface, error) {
	if len(z) != m.NumInputs() {
		return nil, &CountError{len(z), m.NumInputs(), "input point"}
	}
	first := m.Inputs()
	zv := make([]float64, m.NumVertices())
	for i, x := range z {
		if !accepted(x) {
			return nil, &ValueError{i, x}
		}
		v := m.VertexOf(i)
		f := int(first[v])
		if f == i {
			zv[v] = x
		} else if zv[v] != x {
			return nil, &SameSpotError{f, i, z[f], x, m.Position(v)}
		}
	}
	return &Surface{m, m.Positions(), zv}, nil
}

// accepted reports whether x is of the numbers that doc.go promises for.
func accepted(x float64) bool {
	size := math.Abs(x)
	return size <= triangulate.CoordinateMost && (size >= triangulate.CoordinateLeast || size == 0)
}

// Mesh returns the mesh below s.
func (s *Surface) Mesh() *triangulate.Mesh { return s.mesh }

// Z returns the value of every vertex. It is the surface's own slice: it must not
// be changed.
func (s *Surface) Z() []float64 { return s.z }

// canonical returns the corners of t counter-clockwise, the smallest in (x, y)
// order first. Every computation over a triangle takes them in this order, so that
// results do not depend on how the mesh numbers things.
func (s *Surface) canonical(t triangulate.Triangle) (i, j, k triangulate.Vertex) {
	e := triangulate.HalfEdge(3 * t)
	i, j, k = s.mesh.Origin(e), s.mesh.Origin(e+1), s.mesh.Origin(e+2)
	pi, pj, pk := &s.pos[i], &s.pos[j], &s.pos[k]
	xi, xj, xk := pi[0], pj[0], pk[0]
	if xi != xj && xj != xk && xk != xi {
		// Which corner comes first is anybody's guess, so no branch decides: the
		// three comparisons choose a row of a table.
		at := bit(xj < xi) | bit(xk < xj)<<1 | bit(xk < xi)<<2
		turn := [8]uint8{0, 1, 0, 2, 0, 1, 2, 2}[at&7]
		c := [8]triangulate.Vertex{i, j, k, i, j}
		return c[turn], c[turn+1], c[turn+2]
	}
	if before(pj, pi) {
		if before(pk, pj) {
			return k, i, j
		}
		return j, k, i
	}
	if before(pk, pi) {
		return k, i, j
	}
	return i, j, k
}

// bit is 1 for true.
func bit(b bool) uint8 {
	var i uint8
	if b {
		i = 1
	}
	return i
}

func before(p, q *orb.Point) bool {
	return p[0] < q[0] || p[0] == q[0] && p[1] < q[1]
}

// area2 is twice the plan area of the triangle i, j, k.
func (s *Surface) area2(i, j, k triangulate.Vertex) float64 {
	pi, pj, pk := &s.pos[i], &s.pos[j], &s.pos[k]
	return exact.Area2(pi[0], pi[1], pj[0], pj[1], pk[0], pk[1])
}
