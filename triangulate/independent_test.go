package triangulate_test

import (
	"bufio"
	"cmp"
	"context"
	"encoding/json"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// independentScene is a line of testdata/independent/scenes.jsonl.
type independentScene struct {
	Points   []orb.Point
	Segments [][2]int32
	Edges    [][2]int32 // of the whole triangulation, by numbers of points, smaller first, sorted
}

func independentScenes(t *testing.T) []independentScene {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", "independent", "scenes.jsonl"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var scenes []independentScene
	for lines := bufio.NewScanner(f); lines.Scan(); {
		var s independentScene
		if err := json.Unmarshal(lines.Bytes(), &s); err != nil {
			t.Fatalf("scene %d: %v", len(scenes), err)
		}
		scenes = append(scenes, s)
	}
	return scenes
}

// edgesByPoint lists the edges of m by numbers of input points.
func edgesByPoint(m *triangulate.Mesh) [][2]int32 {
	in := m.Inputs()
	var edges [][2]int32
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		a, b := in[m.Origin(h)], in[m.Dest(h)]
		edges = append(edges, [2]int32{min(a, b), max(a, b)})
	}
	slices.SortFunc(edges, func(p, q [2]int32) int {
		return cmp.Or(cmp.Compare(p[0], q[0]), cmp.Compare(p[1], q[1]))
	})
	return slices.Compact(edges)
}

// P8: the edges are those that two independent libraries found (which, and how the
// scenes were made, is told in testdata/independent/README.md). The scenes have
// no ties, which is looked at again here, and lines that do something: without
// them the edges differ.
func TestIndependentAgreement(t *testing.T) {
	scenes := independentScenes(t)
	if len(scenes) != 200 {
		t.Fatalf("%d scenes, want 200", len(scenes))
	}
	changed, differ := 0, 0
	for i, s := range scenes {
		var segs []triangulate.Segment
		for _, e := range s.Segments {
			segs = append(segs, triangulate.Segment{From: e[0], To: e[1]})
		}
		m, err := triangulate.Constrained(context.Background(), s.Points, segs, triangulate.Options{})
		if err != nil {
			t.Fatalf("scene %d: %v", i, err)
		}
		if err := m.Check(); err != nil {
			t.Fatalf("scene %d: %v", i, err)
		}
		got := edgesByPoint(m)
		if !slices.Equal(got, s.Edges) {
			draw(t, m)
			t.Fatalf("scene %d: edges %v, want %v", i, got, s.Edges)
		}
		for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
			u := m.Twin(h)
			if u == triangulate.NoHalfEdge || m.IsConstrained(h) {
				continue
			}
			a, b, c, d := m.Position(m.Origin(h)), m.Position(m.Dest(h)), m.Position(m.Apex(h)), m.Position(m.Apex(u))
			if exact.InCircle(a, b, c, d) == 0 {
				t.Errorf("scene %d: %v, %v, %v and %v lie on one circle", i, a, b, c, d)
			}
		}
		free := edgesByPoint(mustDelaunay(t, s.Points))
		if !slices.Equal(got, free) {
			changed++
		}
		for _, e := range got {
			if !slices.Contains(free, e) {
				differ++
			}
		}
	}
	if changed < len(scenes) || differ < 5000 {
		t.Errorf("segments change %d scenes of %d and make %d edges that Delaunay does not have: too few to show anything", changed, len(scenes), differ)
	}
}
