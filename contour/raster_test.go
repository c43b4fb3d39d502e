package contour

import (
	"context"
	"fmt"
	"maps"
	"math"
	"math/big"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/triangulate/exact"
)

// rasterOf makes a raster of rows of values, the first row in the north, spaced by one, corners on whole numbers.
func rasterOf(t interface{ Fatal(...any) }, rows ...[]float64) *grid.Grid {
	one := decimal.MustParse("1")
	g, err := grid.New(grid.Spec{CellX: one, CellY: one, Cols: len(rows[0]), Rows: len(rows), ValuesAt: grid.Corners})
	if err != nil {
		t.Fatal(err)
	}
	g.Values = slices.Concat(rows...)
	return g
}

// oracleRasterLines follows lines by a map from side to side; a side is two nodes, the one above first where a line enters.
func oracleRasterLines(g *grid.Grid, level Level) []Line {
	cols, z := g.Spec.Cols, g.Values
	above := func(n int) bool { return z[n] >= level.Z }
	type side [2]int
	next := map[side]side{}
	for row := range g.Spec.Rows - 1 {
		for col := range cols - 1 {
			nw := row*cols + col
			c := []int{nw + cols, nw + cols + 1, nw + 1, nw} // counter-clockwise
			var in, out []side
			data := true
			mean := new(big.Rat)
			for i := range c {
				if math.IsNaN(z[c[i]]) {
					data = false
					break
				}
				mean.Add(mean, new(big.Rat).SetFloat64(z[c[i]]))
				switch a, b := c[i], c[(i+1)%4]; {
				case above(a) && !above(b):
					in = append(in, side{a, b})
				case !above(a) && above(b):
					out = append(out, side{a, b})
				}
			}
			if !data {
				continue
			}
			switch {
			case len(in) == 1:
				next[in[0]] = out[0]
			case len(in) == 2:
				// The corners above are joined: each line goes round a corner below, from the side before it to the one after.
				joined := mean.Cmp(new(big.Rat).Mul(big.NewRat(4, 1), new(big.Rat).SetFloat64(level.Z))) >= 0
				for _, s := range in {
					for _, o := range out {
						if joined && o[0] == s[1] || !joined && o[1] == s[0] {
							next[s] = o
						}
					}
				}
			}
		}
	}
	place := func(n int) orb.Point { return orb.Point{g.Spec.X(n % cols), g.Spec.Y(n / cols)} }
	at := func(s side) orb.Point { return edgeCrossing(place(s[0]), z[s[0]], place(s[1]), z[s[1]], level.Z) }
	var lines []Line
	done := map[side]bool{}
	twins := map[side]bool{} // sides through which a line comes from a neighbour
	for _, o := range next {
		twins[side{o[1], o[0]}] = true
	}
	for _, outline := range []bool{true, false} {
		for s := range next {
			if done[s] || outline == twins[s] {
				continue
			}
			var points []orb.Point
			closed := false
			for h := s; ; {
				done[h] = true
				points = append(points, at(h))
				o := next[h]
				h = side{o[1], o[0]}
				if _, ok := next[h]; !ok {
					points = append(points, at(h))
					break
				}
				if h == s {
					closed = true
					break
				}
			}
			if !closed {
				points = slowReduce(points, false)
				closed = len(points) > 1 && points[0] == points[len(points)-1]
			}
			if closed {
				if points = slowReduce(points, true); len(points) >= 3 {
					points = append(points, points[0])
					lines = append(lines, Line{level, true, signedArea(points) < 0, points})
				}
			} else if len(points) > 1 {
				lines = append(lines, Line{level, false, false, points})
			}
		}
	}
	slices.SortFunc(lines, func(a, b Line) int { return slices.CompareFunc(a.Points, b.Points, comparePlaces) })
	return lines
}

// checkRasterBands checks bands of a raster: valid, as large as the squares with data, and whether they hold their nodes.
func checkRasterBands(g *grid.Grid, levels Levels, bands []Band, r BandReport) error {
	var total exact.Sum
	numbers := make([]int, len(bands))
	for i, b := range bands {
		numbers[i] = bandNumber(b, levels)
		if err := checkPolygon(b.Polygon); err != nil {
			return fmt.Errorf("polygon %d: %w", i, err)
		}
		for _, ring := range b.Polygon {
			addArea(&total, ring[:len(ring)-1])
		}
	}
	want := 0.0
	nodes := map[Narrow]bool{}
	node := func(row, col int) { nodes[Narrow{orb.Point{g.Spec.X(col), g.Spec.Y(row)}, g.At(row, col)}] = true }
	for row := range g.Spec.Rows - 1 {
		for col := range g.Spec.Cols - 1 {
			if !math.IsNaN(g.At(row, col) + g.At(row+1, col) + g.At(row, col+1) + g.At(row+1, col+1)) {
				want += (g.Spec.X(col+1) - g.Spec.X(col)) * (g.Spec.Y(row) - g.Spec.Y(row+1))
				node(row, col)
				node(row, col+1)
				node(row+1, col)
				node(row+1, col+1)
			}
		}
	}
	if got := total.Value() / 2; math.Abs(got-want) > 1e-12*want {
		return fmt.Errorf("areas add up to %v, squares with data to %v", got, want)
	}
	return checkList(slices.Collect(maps.Keys(nodes)), levels.values(), bands, numbers, r)
}

// TestRasterLines compares with the oracle on small rasters with gaps, plateaus and saddles, for several numbers of
// workers, and checks the bands.
func TestRasterLines(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		cols, rows := rapid.IntRange(1, 9).Draw(t, "cols"), rapid.IntRange(1, 9).Draw(t, "rows")
		values := rapid.SliceOfN(rapid.IntRange(-1, 4), cols*rows, cols*rows).Draw(t, "values")
		// Some nodes all but at a level: lines about them are closer than coordinates are rounded.
		offs := rapid.SliceOfN(rapid.SampledFrom([]float64{0, 0, 0, 1e-15, -1e-15}), cols*rows, cols*rows).Draw(t, "offs")
		sx, sy := decimal.MustParse("0.1"), decimal.MustParse("0.3")
		g, err := grid.New(grid.Spec{West: decimal.MustParse("430000"), CellX: sx, CellY: sy, Cols: cols, Rows: rows})
		if err != nil {
			t.Fatal(err)
		}
		for i, v := range values {
			if v >= 0 {
				g.Values[i] = float64(v) + offs[i]
			}
		}
		levels := Levels{levelAt(0.5), levelAt(1), levelAt(1.5), levelAt(2), levelAt(2.25), levelAt(3), levelAt(4)}
		var want []Line
		for _, l := range levels {
			want = append(want, oracleRasterLines(g, l)...)
		}
		for _, workers := range []int{1, 2, 3} {
			opt := Options{Workers: workers, unitPieces: int64(workers)}
			lines, _, err := RasterLines(context.Background(), g, levels, opt)
			if err != nil {
				t.Fatal(err)
			}
			if !sameLines(lines, want) {
				t.Fatalf("%d workers: lines %+v\nwant %+v", workers, lines, want)
			}
			for i, l := range lines {
				if err := checkForm(l); err != nil {
					t.Fatalf("line %d: %v", i, err)
				}
			}
		}
		bands, report, err := RasterBands(context.Background(), g, levels, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkRasterBands(g, levels, bands, report); err != nil {
			t.Fatal(err)
		}
	})
}

// TestRasterSaddle: the mean of the four decides, equal to the level counts as above.
func TestRasterSaddle(t *testing.T) {
	for _, c := range []struct {
		high float64
		want []orb.LineString
	}{
		// 0 and 2 in turn: the mean is 1, the corners above, (0, 1) and (1, 0), are joined.
		{2, []orb.LineString{{{0, 0.5}, {0.5, 0}}, {{1, 0.5}, {0.5, 1}}}},
		// 0 and 1.5: the mean is below, each corner above is cut off.
		{1.5, []orb.LineString{{{0, 1 - (1 - 1/1.5)}, {1 - 1/1.5, 1}}, {{1, 1 - 1/1.5}, {1 / 1.5, 0}}}},
	} {
		g := rasterOf(t, []float64{c.high, 0}, []float64{0, c.high})
		lines, _, err := RasterLines(context.Background(), g, Levels{levelAt(1)}, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if len(lines) != 2 {
			t.Fatalf("corners of %v: %d lines, want 2", c.high, len(lines))
		}
		for i := range lines {
			for k := range 2 {
				p, q := lines[i].Points[k], c.want[i][k]
				if math.Abs(p[0]-q[0]) > 1e-15 || math.Abs(p[1]-q[1]) > 1e-15 {
					t.Errorf("corners of %v: line %d is %v, want %v", c.high, i, lines[i].Points, c.want[i])
				}
			}
		}
	}
}

// TestRasterSaddleIsExact: a mean that differs from the level by less than doubles show in the sum.
func TestRasterSaddleIsExact(t *testing.T) {
	for _, c := range []struct {
		corner float64
		joined bool
	}{{1, true}, {1 + 0x1p-52, true}, {1 - 0x1p-53, false}} {
		// 1e8, corner, 1e8 and the rest so that the sum is 4 x 5e7 but for the corner's difference from 1.
		g := rasterOf(t, []float64{1e8, c.corner}, []float64{-1, 1e8})
		src, err := newRaster(g)
		if err != nil {
			t.Fatal(err)
		}
		if got := src.middleAbove(0, 5e7); got != c.joined {
			t.Errorf("corner %v: joined %v, want %v", c.corner, got, c.joined)
		}
	}
}

// TestRasterGaps: lines end at squares with a corner that has no data, and bands leave them out.
func TestRasterGaps(t *testing.T) {
	nan := math.NaN()
	g := rasterOf(t,
		[]float64{0, 0, 0, 0, 0},
		[]float64{0, 1, 1, 1, 0},
		[]float64{0, 1, 1, 1, 0},
		[]float64{0, 1, 1, 1, nan},
		[]float64{0, 0, 0, 0, 0})
	lines, _, err := RasterLines(context.Background(), g, Levels{levelAt(0.5)}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if len(lines) != 1 || lines[0].Closed || lines[0].Points[0] != (orb.Point{3.5, 2}) || lines[0].Points[len(lines[0].Points)-1] != (orb.Point{3, 0.5}) {
		t.Errorf("%+v, want one open line round by the north and west, from (3.5, 2) to (3, 0.5)", lines)
	}
	levels := Levels{levelAt(0.5)}
	bands, report, err := RasterBands(context.Background(), g, levels, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if err := checkRasterBands(g, levels, bands, report); err != nil || len(bands) != 2 {
		t.Errorf("%d bands, %v", len(bands), err)
	}
}

func TestRasterRefused(t *testing.T) {
	g := rasterOf(t, []float64{0, 1}, []float64{math.Inf(1), 1})
	if _, _, err := RasterLines(context.Background(), g, Levels{levelAt(0.5)}, Options{}); err == nil || !strings.Contains(err.Error(), "raster row 2, column 1, value +Inf") {
		t.Errorf("an infinite value: %v", err)
	}
	g.Values = g.Values[:3]
	if _, _, err := RasterBands(context.Background(), g, nil, Options{}); err == nil {
		t.Error("a value missing: no error")
	}
}
