package triangulate_test

import (
	"context"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// segmentIsChain walks the segment's edges in the mesh.
func segmentIsChain(m *triangulate.Mesh, a, b triangulate.Vertex) bool {
	if a == b {
		return true
	}
	cur := a
	for cur != b {
		next := triangulate.NoVertex
		look := func(h triangulate.HalfEdge, u triangulate.Vertex) {
			p, q, r := m.Position(cur), m.Position(u), m.Position(b)
			if m.IsConstrained(h) && exact.Orient(p, q, r) == 0 && exact.CompareXY(p, q) == exact.CompareXY(p, r) {
				next = u
			}
		}
		for h := range m.Around(cur) {
			look(h, m.Dest(h))
			look(m.Prev(h), m.Origin(m.Prev(h)))
		}
		if next == triangulate.NoVertex {
			return false
		}
		cur = next
	}
	return true
}

func crosses(p, q, r, s orb.Point) bool {
	return exact.Orient(p, q, r)*exact.Orient(p, q, s) < 0 && exact.Orient(r, s, p)*exact.Orient(r, s, q) < 0
}

// randomScene has points on a small integer raster and segments that do not cross.
func randomScene(rng *rand.Rand, n, segs, size int) ([]orb.Point, []triangulate.Segment) {
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{float64(rng.IntN(size)), float64(rng.IntN(size))}
	}
	var out []triangulate.Segment
	for range segs {
		s := triangulate.Segment{From: int32(rng.IntN(n)), To: int32(rng.IntN(n))}
		ok := true
		for _, o := range out {
			if crosses(pts[s.From], pts[s.To], pts[o.From], pts[o.To]) {
				ok = false
			}
		}
		if ok {
			out = append(out, s)
		}
	}
	return pts, out
}

func TestConstrainedScenes(t *testing.T) {
	for seed := range uint64(1000) {
		rng := rand.New(rand.NewPCG(seed, 7))
		size := []int{3, 6, 12, 40, 1000, 1 << 30}[seed%6]
		n := 3 + rng.IntN(60)
		pts, segs := randomScene(rng, n, 1+rng.IntN(40), size)
		m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if err := m.Check(); err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		for i, s := range segs {
			if m.NumTriangles() > 0 && !segmentIsChain(m, m.VertexOf(int(s.From)), m.VertexOf(int(s.To))) {
				t.Fatalf("seed %d: segment %d is not a chain of edges", seed, i)
			}
		}
	}
}

func BenchmarkConstrained(b *testing.B) {
	pts := pointsets.Uniform(1e6, 1)
	// Ends among the points, median length three spacings: join points to others
	// that are near in the mesh's numbering.
	rng := rand.New(rand.NewPCG(1, 2))
	m, _ := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	in := m.Inputs()
	byPlace := m.Ordered()
	_ = byPlace
	var segs []triangulate.Segment
	loc := m.Locator()
	var boxes = map[[2]int][]int32{}
	for len(segs) < 1e5 {
		v := triangulate.Vertex(rng.IntN(len(pts)))
		p := m.Position(v)
		q := orb.Point{p[0] + rng.NormFloat64()*3e-3*0.85, p[1] + rng.NormFloat64()*3e-3*0.85}
		at := loc.Locate(q)
		if at.Place == triangulate.Outside {
			continue
		}
		w := m.Corners(at.Triangle)[0]
		s := triangulate.Segment{From: in[v], To: in[w]}
		if v == w {
			continue
		}
		key := [2]int{int(p[0] * 50), int(p[1] * 50)}
		ok := true
		for dx := -1; dx <= 1 && ok; dx++ {
			for dy := -1; dy <= 1 && ok; dy++ {
				for _, o := range boxes[[2]int{key[0] + dx, key[1] + dy}] {
					if crosses(pts[s.From], pts[s.To], pts[segs[o].From], pts[segs[o].To]) {
						ok = false
						break
					}
				}
			}
		}
		if ok {
			boxes[key] = append(boxes[key], int32(len(segs)))
			segs = append(segs, s)
		}
	}
	b.Run("plain", func(b *testing.B) {
		for b.Loop() {
			triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		}
	})
	b.Run("segments", func(b *testing.B) {
		for b.Loop() {
			if _, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{}); err != nil {
				b.Fatal(err)
			}
		}
	})
}
