package interp

import (
	"context"
	"errors"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// A surface written as triangles and made of them again is the same: also one with
// breaklines and parts left out, whose edges Delaunay would not choose.
func TestFromTriangles(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	var pts []orb.Point
	var z []float64
	for range 300 {
		pts = append(pts, orb.Point{r.Float64() * 10, r.Float64() * 3})
		z = append(z, r.Float64())
	}
	mesh, err := triangulate.Constrained(context.Background(), pts, []triangulate.Segment{{From: 3, To: 200}}, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	mesh = mesh.Trim(1.5)
	want, err := FromInputs(mesh, z)
	if err != nil {
		t.Fatal(err)
	}
	var list [][3]int32
	inputs := mesh.Inputs()
	for tri := range mesh.Triangles() {
		c := mesh.Corners(tri)
		list = append(list, [3]int32{inputs[c[2]], inputs[c[0]], inputs[c[1]]})
	}
	r.Shuffle(len(list), func(i, j int) { list[i], list[j] = list[j], list[i] })
	got, err := FromTriangles(context.Background(), pts, z, list, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if got.Mesh().NumTriangles() != want.Mesh().NumTriangles() || got.Area() != want.Area() ||
		got.VolumeAboveZero() != want.VolumeAboveZero() || got.SurfaceArea() != want.SurfaceArea() {
		t.Errorf("%d triangles of area %v, want %d of %v", got.Mesh().NumTriangles(), got.Area(), want.Mesh().NumTriangles(), want.Area())
	}
}

func TestFromTrianglesRefuses(t *testing.T) {
	pts := []orb.Point{{0, 0}, {4, 0}, {4, 4}, {0, 4}, {2, 1}, {2, 0}}
	z := make([]float64, len(pts))
	for _, c := range []struct {
		list [][3]int32
		want string
	}{
		{[][3]int32{{0, 1, 2}, {0, 1, 3}}, "edges cross"},
		{[][3]int32{{0, 1, 2}}, "others lie in it"}, // 4 lies inside
		{[][3]int32{{0, 4, 3}, {3, 0, 4}}, "there twice"},
		{[][3]int32{{0, 1, 5}}, "no area"},
		{[][3]int32{{0, 1, 9}}, "exists"},
	} {
		_, err := FromTriangles(context.Background(), pts, z, c.list, triangulate.Options{})
		var e *TriangleError
		if !errors.As(err, &e) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%v: %v, want %q", c.list, err, c.want)
		}
	}
}
