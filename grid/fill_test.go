package grid_test

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// wave is a smooth height for tests, in units of the place.
func wave(pts []orb.Point, scale float64) []float64 {
	z := make([]float64, len(pts))
	for i, p := range pts {
		x, y := p[0]/scale, p[1]/scale
		z[i] = x*x - y + x*y*y
	}
	return z
}

func surfaceOf(t testing.TB, pts []orb.Point, z []float64) *interp.Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// tilted is a lattice turned by the angle of a 3-4-5 triangle: nodes of a raster
// lie exactly on slanted edges, on vertices and on the outline.
func tilted(n int) []orb.Point {
	var pts []orb.Point
	for i := range n {
		for j := range n {
			pts = append(pts, orb.Point{float64(4*i - 3*j), float64(3*i + 4*j)})
		}
	}
	return pts
}

// P4: grid equals query bit for bit at every node, and one triangle owns each.
func TestFillEqualsQuery(t *testing.T) {
	for _, c := range []struct {
		name  string
		pts   []orb.Point
		scale float64
		cell  string
		at    grid.NodePlace
	}{
		{"tilted lattice, nodes on edges", tilted(14), 50, "0.5", grid.Corners},
		{"tilted lattice, centres", tilted(14), 50, "1", grid.Centres},
		{"unit lattice, nodes on vertices", pointsets.UnitLattice(400, 1), 20, "0.25", grid.Corners},
		{"lattice of 0.1 m far from the origin", pointsets.Lattice01(400, 1), 1, "0.05", grid.Corners},
		{"uniform", pointsets.Uniform(3000, 2), 1, "0.01", grid.Centres},
		{"survey", pointsets.Survey(3000, 3), 1000, "1", grid.Centres},
		{"scan lines", pointsets.ScanLines(3000, 3), 1, "0.5", grid.Corners},
		{"cocircular", pointsets.Circle(100, 3), 1000, "30", grid.Corners},
		{"cells near the rounding of coordinates", []orb.Point{{1e6, 1e6}, {1e6 + 3e-9, 1e6 + 1e-9}, {1e6 + 1e-9, 1e6 + 4e-9}}, 1e6, "0.0000000003", grid.Corners},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := surfaceOf(t, c.pts, wave(c.pts, c.scale))
			cell := decimal.MustParse(c.cell)
			spec, err := grid.SpecFor(orb.MultiPoint(c.pts).Bound(), cell, cell, c.at)
			if err != nil {
				t.Fatal(err)
			}
			for _, show := range []grid.Show{grid.Value, grid.Slope, grid.DownhillAzimuth} {
				g, err := grid.Fill(context.Background(), spec, s, grid.Options{Show: show, Workers: 2})
				if err != nil {
					t.Fatal(err)
				}
				loc := s.Mesh().Locator()
				inside := 0
				xs, ys := spec.Xs(), spec.Ys()
				for row := range spec.Rows {
					for col := range spec.Cols {
						p := orb.Point{xs[col], ys[row]}
						at := loc.Locate(p)
						want := math.NaN()
						if at.Place != triangulate.Outside {
							inside++
							switch show {
							case grid.Value:
								want = s.Value(at, p)
							case grid.Slope:
								want = interp.Slope(s.Gradient(at.Triangle))
							case grid.DownhillAzimuth:
								want = interp.DownhillAzimuth(s.Gradient(at.Triangle))
							}
						}
						if got := g.At(row, col); math.Float64bits(got) != math.Float64bits(want) && !(math.IsNaN(got) && math.IsNaN(want)) {
							t.Fatalf("%v at row %d, column %d, place %v (%v): %v, query says %v", show, row, col, p, at, got, want)
						}
					}
				}
				if inside == 0 {
					t.Fatal("no node inside")
				}
			}
		})
	}
}

// Blocks are filled apart: triangles that cross many of them and triangles far smaller
// than a cell give what a query gives (P4), for any number of workers.
func TestFillAcrossBlocks(t *testing.T) {
	for _, c := range []struct {
		name string
		pts  []orb.Point
	}{
		{"two triangles", []orb.Point{{-3, -2}, {803, 11}, {790, 301}, {1, 296}}},
		{"corners on nodes and rims of blocks", []orb.Point{{0, 0}, {256, 0}, {512, 128}, {256, 128}, {0, 299}, {799, 299}, {799, 0}}},
		{"smaller than cells", scaled(pointsets.Uniform(20000, 3), 780, 290)},
	} {
		s := surfaceOf(t, c.pts, wave(c.pts, 100))
		one := decimal.FromInt(1)
		spec := grid.Spec{CellX: one, CellY: one, Cols: 800, Rows: 300}
		places := make([]orb.Point, 0, spec.NumNodes())
		for row := range spec.Rows {
			for col := range spec.Cols {
				places = append(places, orb.Point{spec.X(col), spec.Y(row)})
			}
		}
		want, err := s.Query(context.Background(), places, 0)
		if err != nil {
			t.Fatal(err)
		}
		for _, workers := range []int{1, 2, 7} {
			g, err := grid.Fill(context.Background(), spec, s, grid.Options{Workers: workers})
			if err != nil {
				t.Fatal(err)
			}
			values := 0
			for i, got := range g.Values {
				if math.Float64bits(got) != math.Float64bits(want[i].Z) && !(math.IsNaN(got) && math.IsNaN(want[i].Z)) {
					t.Fatalf("%s, %d workers, %v: %v, query says %v", c.name, workers, places[i], got, want[i].Z)
				}
				if !math.IsNaN(got) {
					values++
				}
			}
			if values < len(places)/2 {
				t.Errorf("%s: %d of %d nodes have a value", c.name, values, len(places))
			}
		}
	}
}

func scaled(pts []orb.Point, x, y float64) []orb.Point {
	for i, p := range pts {
		pts[i] = orb.Point{float64(p[0] * x), float64(p[1] * y)}
	}
	return pts
}

func BenchmarkFill(b *testing.B) {
	for _, d := range []struct {
		name string
		cell string
		make func(int, uint64) []orb.Point
	}{{"uniform", "0.00025", pointsets.Uniform}, {"unit-lattice", "0.25", pointsets.UnitLattice}, {"survey", "0.5", pointsets.Survey}} {
		pts := d.make(1_000_000, 1)
		bound := orb.MultiPoint(pts).Bound()
		s := surfaceOf(b, pts, wave(pts, bound.Max[0]))
		cell := decimal.MustParse(d.cell)
		spec := grid.Spec{CellX: cell, CellY: cell, Cols: 4000, Rows: 4000}
		spec.West, _ = decimal.FromInt(int64(bound.Min[0])).FloorMultiple(cell)
		spec.South, _ = decimal.FromInt(int64(bound.Min[1])).FloorMultiple(cell)
		b.Run(d.name+"/n=1e6", func(b *testing.B) {
			for b.Loop() {
				if _, err := grid.Fill(context.Background(), spec, s, grid.Options{}); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(spec.NumNodes())*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
		})
	}
	b.Run("floor/one-value-a-node", func(b *testing.B) {
		for b.Loop() {
			g := make([]float64, 16_000_000)
			for i := range g {
				g[i] = math.NaN()
			}
		}
	})
}
