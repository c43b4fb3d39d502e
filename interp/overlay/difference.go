package overlay

import (
	"context"
	"runtime"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Difference returns to less from as a surface, where both are: its vertices are those
// of both surfaces and the crossings of their edges, so that it is the difference
// itself, and not only equal to it at some places. Isolines, bands and rasters of it
// are those of the change. Crossings are rounded to coordinates: for volumes take
// Between, which does not need them.
//
// Time: some microseconds a crossing. It returns errors of package triangulate, and
// ctx.Err().
func Difference(ctx context.Context, from, to *interp.Surface, opt Options) (*interp.Surface, error) {
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	d := &differ{from: newSide(from, workers), to: newSide(to, workers)}
	d.fromEdges = d.edges(d.from, 0)
	d.toEdges = d.edges(d.to, len(d.from.pos))
	pts := append(append(make([]orb.Point, 0, len(d.from.pos)+len(d.to.pos)), d.from.pos...), d.to.pos...)
	split, err := triangulate.SplitCrossings(ctx, pts, append(append([]triangulate.Segment{}, d.fromEdges...), d.toEdges...))
	if err != nil {
		return nil, err
	}
	mesh, err := triangulate.Constrained(ctx, split.Points, split.Pieces, triangulate.Options{Workers: workers})
	if err != nil {
		return nil, err
	}
	z := d.heights(mesh, split)
	fromLoc, toLoc := d.from.mesh.Locator(), d.to.mesh.Locator()
	on := func(loc *triangulate.Locator, x *side, p orb.Point) bool {
		at := loc.LocateNext(p)
		return at.Place != triangulate.Outside && at.Triangle < x.shown
	}
	mesh = mesh.Hide(func(t triangulate.Triangle) bool {
		p := middle(mesh, t)
		return !on(fromLoc, d.from, p) || !on(toLoc, d.to, p)
	})
	return interp.New(mesh, z)
}

func middle(m *triangulate.Mesh, t triangulate.Triangle) orb.Point {
	v := m.Corners(t)
	a, b, c := m.Position(v[0]), m.Position(v[1]), m.Position(v[2])
	return orb.Point{a[0] + ((b[0]-a[0])+(c[0]-a[0]))/3, a[1] + ((b[1]-a[1])+(c[1]-a[1]))/3}
}

type differ struct {
	from, to           *side
	fromEdges, toEdges []triangulate.Segment
}

// edges lists the edges of the triangles shown; first is the number of the side's
// first point.
func (d *differ) edges(x *side, first int) []triangulate.Segment {
	var list []triangulate.Segment
	for t := range x.shown {
		for k := range 3 {
			h := t.HalfEdge(k)
			if twin := x.mesh.Twin(h); twin != triangulate.NoHalfEdge && twin < h && twin.Triangle() < x.shown {
				continue
			}
			list = append(list, triangulate.Segment{From: int32(first + int(x.mesh.Origin(h))), To: int32(first + int(x.mesh.Dest(h)))})
		}
	}
	return list
}

// heights returns the difference at every vertex of the mesh of both.
func (d *differ) heights(mesh *triangulate.Mesh, split *triangulate.Split) []float64 {
	z := make([]float64, mesh.NumVertices())
	nFrom := len(d.from.pos)
	n := nFrom + len(d.to.pos)
	fromLoc, toLoc := d.from.mesh.Locator(), d.to.mesh.Locator()
	// Crossings first: a vertex of a surface that is at their place has the last word.
	for _, made := range split.Made {
		z[mesh.VertexOf(int(made.Point))] = d.atCrossing(&made, split.Points[made.Point], fromLoc, toLoc)
	}
	for i := n - 1; i >= 0; i-- {
		v := mesh.VertexOf(i)
		if i < nFrom {
			if at := toLoc.LocateNext(d.from.pos[i]); at.Place != triangulate.Outside {
				z[v] = d.to.above(&at, &d.from.pos[i], d.from.z[i])
			}
			continue
		}
		k := i - nFrom
		if at := fromLoc.LocateNext(d.to.pos[k]); at.Place != triangulate.Outside {
			z[v] = -d.from.above(&at, &d.to.pos[k], d.to.z[k])
		}
	}
	return z
}

// atCrossing is the difference where segments cross: on an edge of each side.
func (d *differ) atCrossing(made *triangulate.Made, p orb.Point, fromLoc, toLoc *triangulate.Locator) float64 {
	if s := made.Segments; len(s) == 2 {
		i, j := int(s[0]), int(s[1])-len(d.fromEdges)
		if i < len(d.fromEdges) && j >= 0 {
			a, b := d.ends(d.from, d.fromEdges[i], 0)
			c, e := d.ends(d.to, d.toEdges[j], len(d.from.pos))
			pa, pb, pc, pe := &d.from.pos[a], &d.from.pos[b], &d.to.pos[c], &d.to.pos[e]
			t := part(area2(pa, pb, pc), area2(pa, pb, pe))
			u := part(area2(pc, pe, pa), area2(pc, pe, pb))
			za, zb, zc, ze := d.from.z[a], d.from.z[b], d.to.z[c], d.to.z[e]
			return (zc - za) + (float64(t*(ze-zc)) - float64(u*(zb-za)))
		}
	}
	// Several edges run together here, or rounding made a crossing of pieces.
	zero := 0.0
	if at := toLoc.LocateNext(p); at.Place != triangulate.Outside {
		zero = d.to.above(&at, &p, 0)
	}
	if at := fromLoc.LocateNext(p); at.Place != triangulate.Outside {
		return zero - d.from.above(&at, &p, 0)
	}
	return zero
}

// ends returns the vertices of an edge in (x, y) order.
func (d *differ) ends(x *side, s triangulate.Segment, first int) (lo, hi triangulate.Vertex) {
	lo, hi = triangulate.Vertex(int(s.From)-first), triangulate.Vertex(int(s.To)-first)
	if !before(&x.pos[lo], &x.pos[hi]) {
		lo, hi = hi, lo
	}
	return lo, hi
}
