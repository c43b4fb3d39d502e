package triangulate

import (
	"context"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"
)

// A reordered mesh is the mesh of the points in that order: the same triangles, and
// every input at its own place. Other places are told from the same.
func TestReordered(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		points := rapid.SliceOfNDistinct(rapid.Custom(func(t *rapid.T) orb.Point {
			return orb.Point{float64(rapid.IntRange(-9, 9).Draw(t, "x")), float64(rapid.IntRange(-9, 9).Draw(t, "y"))}
		}), 3, 40, func(p orb.Point) orb.Point { return p }).Draw(t, "points")
		m, err := Delaunay(context.Background(), points, Options{})
		if err != nil {
			t.Fatal(err)
		}
		other := rapid.Permutation(points).Draw(t, "order")
		got, ok := m.Reordered(other, ByPlace(other))
		if !ok {
			t.Fatal("not the same places")
		}
		for i, p := range other {
			if got.Position(got.VertexOf(i)) != p {
				t.Fatalf("input %d at %v is at %v", i, p, got.Position(got.VertexOf(i)))
			}
		}
		want, err := Delaunay(context.Background(), other, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if g, w := placesOf(got), placesOf(want); !slices.Equal(g, w) {
			t.Fatalf("triangles %v, want %v", g, w)
		}
		moved := slices.Clone(other)
		moved[0][0] += 0.5
		if _, ok := m.Reordered(moved, ByPlace(moved)); ok {
			t.Fatal("other places pass for the same")
		}
		if _, ok := m.Reordered(other[1:], ByPlace(other[1:])); ok {
			t.Fatal("fewer places pass for the same")
		}
	})
}

// placesOf lists the corners of the triangles in the order of writing.
func placesOf(m *Mesh) []orb.Point {
	var all []orb.Point
	for _, c := range m.CanonicalTriangles(m.Rank()) {
		all = append(all, m.Position(c[0]), m.Position(c[1]), m.Position(c[2]))
	}
	return all
}
