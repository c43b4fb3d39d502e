package interp

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// TriangleError reports triangles that are no surface.
type TriangleError struct {
	Triangle int // of those given, -1 where it is about edges
	Reason   string
	At       orb.Point
}

func (e *TriangleError) Error() string {
	if e.Triangle < 0 {
		return fmt.Sprintf("near (%v, %v): %s", e.At[0], e.At[1], e.Reason)
	}
	return fmt.Sprintf("triangle %d at (%v, %v): %s", e.Triangle+1, e.At[0], e.At[1], e.Reason)
}

// FromTriangles returns the surface of the triangles given, each by three indices of
// points, in any order and turn: a surface that was triangulated elsewhere, Delaunay or
// not. Points that no triangle has are vertices without one. Its mesh's edges are all
// constrained, and its inputs are pts.
//
// It returns a *TriangleError for triangles without area, twice the same, that overlap
// or have a point of another inside, and the errors of FromInputs and Constrained.
//
// Time: that of triangulating the points with all edges as constraints.
func FromTriangles(ctx context.Context, pts []orb.Point, z []float64, triangles [][3]int32, opt triangulate.Options) (*Surface, error) {
	segs := make([]triangulate.Segment, 0, 3*len(triangles)/2)
	type edge struct{ a, b int32 }
	edges := make([]edge, 0, 3*len(triangles))
	for i, t := range triangles {
		for k := range 3 {
			a, b := t[k], t[(k+1)%3]
			if a < 0 || int(a) >= len(pts) {
				return nil, &TriangleError{Triangle: i, Reason: fmt.Sprintf("corner %d of %d points: expected one that exists", a, len(pts))}
			}
			edges = append(edges, edge{min(a, b), max(a, b)})
		}
	}
	slices.SortFunc(edges, func(p, q edge) int {
		if p.a != q.a {
			return int(p.a - q.a)
		}
		return int(p.b - q.b)
	})
	for _, e := range slices.Compact(edges) {
		segs = append(segs, triangulate.Segment{From: e.a, To: e.b})
	}
	mesh, err := triangulate.Constrained(ctx, pts, segs, opt)
	var crossing *triangulate.CrossingError
	if errors.As(err, &crossing) && len(crossing.Pairs) > 0 {
		return nil, &TriangleError{Triangle: -1, At: pts[segs[crossing.Pairs[0].A].From], Reason: "edges cross: expected triangles that do not overlap"}
	}
	if err != nil {
		return nil, err
	}
	shown, err := findTriangles(mesh, pts, triangles)
	if err != nil {
		return nil, err
	}
	return FromInputs(mesh.Hide(func(t triangulate.Triangle) bool { return !shown[t] }), z)
}

// findTriangles tells which triangles of the mesh are those given; all of them must be
// there.
func findTriangles(mesh *triangulate.Mesh, pts []orb.Point, triangles [][3]int32) ([]bool, error) {
	n := mesh.NumVertices()
	// The triangles given, by their smallest vertex: those of vertex v are
	// order[first[v]:first[v+1]].
	keys := make([][3]triangulate.Vertex, len(triangles))
	first := make([]int32, n+1)
	for i, t := range triangles {
		keys[i] = sorted([3]triangulate.Vertex{mesh.VertexOf(int(t[0])), mesh.VertexOf(int(t[1])), mesh.VertexOf(int(t[2]))})
		first[keys[i][0]+1]++
	}
	for v := range n {
		first[v+1] += first[v]
	}
	order := make([]int32, len(triangles))
	next := slices.Clone(first)
	for i := range triangles {
		v := keys[i][0]
		order[next[v]] = int32(i)
		next[v]++
	}
	shown, found := make([]bool, mesh.NumTriangles()), make([]bool, len(triangles))
	for t := range mesh.Triangles() {
		key := sorted(mesh.Corners(t))
		for _, i := range order[first[key[0]]:first[key[0]+1]] {
			if keys[i] != key {
				continue
			}
			if shown[t] {
				return nil, &TriangleError{Triangle: int(i), At: pts[triangles[i][0]], Reason: "is there twice: expected every triangle once"}
			}
			shown[t], found[i] = true, true
		}
	}
	for i := range found {
		if !found[i] {
			return nil, &TriangleError{Triangle: i, At: pts[triangles[i][0]], Reason: "has no area, or others lie in it: expected triangles that meet along whole edges only"}
		}
	}
	return shown, nil
}

func sorted(v [3]triangulate.Vertex) [3]triangulate.Vertex {
	slices.Sort(v[:])
	return v
}
