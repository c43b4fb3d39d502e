package triangulate_test

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// rebuilt is the triangulation of the vertices of m without those in out, from the
// start: the constrained edges between vertices that stay are segments, and joined are
// more of them.
func rebuilt(t testing.TB, m *triangulate.Mesh, out map[triangulate.Vertex]bool, edges, joined [][2]triangulate.Vertex) (*triangulate.Mesh, error) {
	t.Helper()
	var pts []orb.Point
	at := map[triangulate.Vertex]int32{}
	for v := range m.Vertices() {
		if !out[v] {
			at[v] = int32(len(pts))
			pts = append(pts, m.Position(v))
		}
	}
	var segs []triangulate.Segment
	for _, e := range slices.Concat(edges, joined) {
		if !out[e[0]] && !out[e[1]] {
			segs = append(segs, triangulate.Segment{From: at[e[0]], To: at[e[1]]})
		}
	}
	return triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
}

// edgesOf lists the constrained edges of m by their vertices.
func edgesOf(m *triangulate.Mesh) (all [][2]triangulate.Vertex) {
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if tw := m.Twin(h); m.IsConstrained(h) && (tw == triangulate.NoHalfEdge || h < tw) {
			all = append(all, [2]triangulate.Vertex{m.Origin(h), m.Dest(h)})
		}
	}
	return all
}

// bruteWithout is where v lies in the mesh that is built without it.
func bruteWithout(t testing.TB, m *triangulate.Mesh, edges [][2]triangulate.Vertex, v triangulate.Vertex) (place triangulate.Place, corners []orb.Point, joint triangulate.Joint, rest *triangulate.Mesh) {
	t.Helper()
	var ends []triangulate.Vertex
	for _, e := range edges {
		switch v {
		case e[0]:
			ends = append(ends, e[1])
		case e[1]:
			ends = append(ends, e[0])
		}
	}
	out := map[triangulate.Vertex]bool{v: true}
	var joined [][2]triangulate.Vertex
	switch len(ends) {
	case 0:
		joint = triangulate.NoLine
	case 1:
		joint = triangulate.LineEnd
	case 2:
		joint = triangulate.Joined
		joined = append(joined, [2]triangulate.Vertex{ends[0], ends[1]})
	default:
		joint = triangulate.Meeting
	}
	rest, err := rebuilt(t, m, out, edges, joined)
	if _, crossing := errors.AsType[*triangulate.CrossingError](err); crossing {
		joint = triangulate.Parted
		rest, err = rebuilt(t, m, out, edges, nil)
	}
	if err != nil {
		t.Fatal(err)
	}
	loc := rest.Locator().Locate(m.Position(v))
	switch loc.Place {
	case triangulate.Inside:
		for _, c := range rest.Corners(loc.Triangle) {
			corners = append(corners, rest.Position(c))
		}
	case triangulate.OnEdge:
		corners = []orb.Point{rest.Position(rest.Origin(loc.Edge)), rest.Position(rest.Dest(loc.Edge))}
	}
	slices.SortFunc(corners, byXY)
	return loc.Place, corners, joint, rest
}

func cornersOfLeft(m *triangulate.Mesh, l triangulate.Left) (c []orb.Point) {
	for _, v := range l.Corners {
		if v != triangulate.NoVertex {
			c = append(c, m.Position(v))
		}
	}
	slices.SortFunc(c, byXY)
	return c
}

// onHull tells which vertices are on the outline.
func onHull(m *triangulate.Mesh) map[triangulate.Vertex]bool {
	on := map[triangulate.Vertex]bool{}
	for _, ring := range m.Outline() {
		for _, v := range ring {
			on[m.Origin(v)] = true
		}
	}
	return on
}

// TestWithout: where a vertex would lie without itself is where a mesh built without it
// has it.
func TestWithout(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 5))
	joints := map[triangulate.Joint]int{}
	check := func(name string, m *triangulate.Mesh) {
		t.Helper()
		r, edges, hull := m.Reduction(), edgesOf(m), onHull(m)
		for v := range m.Vertices() {
			left := r.Without(v)
			if hull[v] || m.NumTriangles() == 0 {
				if left.Place != triangulate.Outside || !r.OnOutline(v) {
					t.Fatalf("%s: vertex %d on the outline: %v", name, v, left)
				}
				continue
			}
			place, corners, joint, _ := bruteWithout(t, m, edges, v)
			joints[joint]++
			if left.Place != place || left.Joint != joint || !slices.Equal(cornersOfLeft(m, left), corners) {
				t.Fatalf("%s: vertex %d at %v: %v %v %v, want %v %v %v", name, v, m.Position(v), left.Place, left.Joint, cornersOfLeft(m, left), place, joint, corners)
			}
		}
	}
	for _, d := range pointsets.All {
		check(d.Name, checked(t, d.Points(250, 3), triangulate.Options{}))
	}
	for k := range 60 {
		pts, segs := randomScene(rng, 10+rng.IntN(60), 1+rng.IntN(30), 3+rng.IntN(30))
		m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		check(fmt.Sprint("scene ", k), m)
	}
	for j := triangulate.NoLine; j <= triangulate.Parted; j++ {
		if joints[j] == 0 {
			t.Errorf("no vertex of joint %d among the cases: %v", j, joints)
		}
	}
}

// TestRemove: taking vertices out one after the other leaves the mesh that is built
// without all of them, and Locate finds the places of those taken out in it.
func TestRemove(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	for k := range 60 {
		pts, segs := randomScene(rng, 10+rng.IntN(60), rng.IntN(30), 3+rng.IntN(30))
		m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		r := m.Reduction()
		edges := edgesOf(m)
		out := map[triangulate.Vertex]bool{}
		for range m.NumVertices() / 2 {
			v := triangulate.Vertex(rng.IntN(m.NumVertices()))
			if r.OnOutline(v) || out[v] {
				continue
			}
			// What the lines of the reduction are by now.
			var ends []triangulate.Vertex
			rest := edges[:0:0]
			for _, e := range edges {
				switch v {
				case e[0]:
					ends = append(ends, e[1])
				case e[1]:
					ends = append(ends, e[0])
				default:
					rest = append(rest, e)
				}
			}
			left := r.Remove(v)
			out[v] = true
			edges = rest
			if left.Joint == triangulate.Joined {
				edges = append(edges, [2]triangulate.Vertex{ends[0], ends[1]})
			}
			want, err := rebuilt(t, m, out, edges, nil)
			if err != nil {
				t.Fatal(err)
			}
			edges = edges[:0:0]
			back := map[orb.Point]triangulate.Vertex{}
			for u := range m.Vertices() {
				back[m.Position(u)] = u
			}
			for _, e := range edgesOf(want) {
				edges = append(edges, [2]triangulate.Vertex{back[want.Position(e[0])], back[want.Position(e[1])]})
			}
			for u := range m.Vertices() {
				if out[u] || r.OnOutline(u) {
					continue
				}
				var got, expected []orb.Point
				for _, w := range r.Neighbours(nil, u) {
					got = append(got, m.Position(w))
				}
				for x := range want.Vertices() {
					if want.Position(x) != m.Position(u) {
						continue
					}
					for h := range want.Around(x) {
						expected = append(expected, want.Position(want.Dest(h)))
					}
				}
				slices.SortFunc(got, byXY)
				slices.SortFunc(expected, byXY)
				if !slices.Equal(got, expected) {
					t.Fatalf("scene %d, without %v: neighbours of %v are %v, want %v", k, out, m.Position(u), got, expected)
				}
			}
			locator := want.Locator()
			for u := range out {
				loc, l := locator.Locate(m.Position(u)), r.Locate(u)
				if l.Place != loc.Place {
					t.Fatalf("scene %d: %v is %v, want %v", k, m.Position(u), l.Place, loc.Place)
				}
				if loc.Place == triangulate.Inside {
					var c []orb.Point
					for _, x := range want.Corners(loc.Triangle) {
						c = append(c, want.Position(x))
					}
					slices.SortFunc(c, byXY)
					if !slices.Equal(c, cornersOfLeft(m, l)) {
						t.Fatalf("scene %d: %v lies in %v, want %v", k, m.Position(u), cornersOfLeft(m, l), c)
					}
				}
			}
		}
	}
}

// TestWithoutAll: several vertices are taken out together and stay in.
func TestWithoutAll(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 9))
	for k := range 60 {
		pts, segs := randomScene(rng, 20+rng.IntN(60), rng.IntN(8), 5+rng.IntN(30))
		m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		edges, lined := edgesOf(m), map[triangulate.Vertex]bool{}
		for _, e := range edges {
			lined[e[0]], lined[e[1]] = true, true
		}
		r := m.Reduction()
		before := map[triangulate.Vertex]bool{}
		for range 3 { // some are out for good
			if v := triangulate.Vertex(rng.IntN(m.NumVertices())); !r.OnOutline(v) && !lined[v] && !before[v] {
				r.Remove(v)
				before[v] = true
			}
		}
		for range 10 {
			var vs []triangulate.Vertex
			out := map[triangulate.Vertex]bool{}
			for v := range before {
				out[v] = true
			}
			for _, i := range rng.Perm(m.NumVertices())[:1+rng.IntN(m.NumVertices()/2)] {
				v := triangulate.Vertex(i)
				vs = append(vs, v)
				if !r.OnOutline(v) && !lined[v] {
					out[v] = true
				}
			}
			rest, err := rebuilt(t, m, out, edges, nil)
			if err != nil {
				t.Fatal(err)
			}
			locator := rest.Locator()
			for i, left := range r.WithoutAll(nil, vs) {
				if !out[vs[i]] {
					if left.Place != triangulate.Outside {
						t.Fatalf("scene %d: %v stays, but lies %v", k, m.Position(vs[i]), left.Place)
					}
					continue
				}
				loc := locator.Locate(m.Position(vs[i]))
				var c []orb.Point
				switch loc.Place {
				case triangulate.Inside:
					for _, x := range rest.Corners(loc.Triangle) {
						c = append(c, rest.Position(x))
					}
				case triangulate.OnEdge:
					c = []orb.Point{rest.Position(rest.Origin(loc.Edge)), rest.Position(rest.Dest(loc.Edge))}
				}
				slices.SortFunc(c, byXY)
				if left.Place != loc.Place || !slices.Equal(c, cornersOfLeft(m, left)) {
					t.Fatalf("scene %d: %v lies %v of %v, want %v of %v", k, m.Position(vs[i]), left.Place, cornersOfLeft(m, left), loc.Place, c)
				}
			}
		}
	}
}

// TestReset: after Reset a reduction is like a new one.
func TestReset(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 8))
	for range 40 {
		pts, segs := randomScene(rng, 10+rng.IntN(60), rng.IntN(30), 3+rng.IntN(30))
		m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		r, fresh := m.Reduction(), m.Reduction()
		for range 3 {
			for v := range m.Vertices() {
				if rng.IntN(3) == 0 && !r.OnOutline(v) {
					r.Remove(v)
				}
			}
			r.Reset()
			for v := range m.Vertices() {
				if got, want := r.Without(v), fresh.Without(v); got != want || r.Removed(v) {
					t.Fatalf("vertex %d without itself: %+v, before anything was taken out %+v", v, got, want)
				}
			}
		}
	}
}
