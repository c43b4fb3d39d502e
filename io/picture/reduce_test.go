package picture

import (
	"errors"
	"math"
	"testing"

	"isofacet/grid"
	"isofacet/grid/decimal"
)

func testGrid(t testing.TB, cols, rows int, cellX, cellY string, value func(row, col int) float64) *grid.Grid {
	t.Helper()
	g, err := grid.New(grid.Spec{CellX: decimal.MustParse(cellX), CellY: decimal.MustParse(cellY), Cols: cols, Rows: rows})
	if err != nil {
		t.Fatal(err)
	}
	for i := range g.Values {
		g.Values[i] = value(i/cols, i%cols)
	}
	return g
}

func TestSizes(t *testing.T) {
	for _, c := range []struct {
		cols, rows    int
		cellX, cellY  string
		width, height int
	}{
		{1, 1, "1", "1", 900, 900}, {30, 20, "1", "1", 900, 600}, {500, 400, "1", "1", 500, 400}, {449, 10, "1", "1", 898, 20}, {2000, 2000, "1", "1", 2000, 2000},
		{2001, 2001, "1", "1", 1001, 1001}, {4000, 2000, "1", "1", 2000, 1000}, {10_000, 10, "1", "1", 2000, 12}, {3, 6000, "0.1", "0.1", 12, 2000},
		{100, 100, "2", "1", 900, 450}, {100, 100, "1", "20", 45, 900}, {2000, 10, "1", "100", 2000, 1000},
	} {
		f, err := newField(testGrid(t, c.cols, c.rows, c.cellX, c.cellY, func(int, int) float64 { return 1 }), 2000)
		if err != nil {
			t.Fatal(err)
		}
		if f.width != c.width || f.height != c.height || f.cols > f.width || f.rows > f.height || f.cols > c.cols || f.rows > c.rows || len(f.values) != f.cols*f.rows {
			t.Errorf("%d x %d cells of %s x %s: map %d x %d of %d x %d values, want %d x %d", c.cols, c.rows, c.cellX, c.cellY, f.width, f.height, f.cols, f.rows, c.width, c.height)
		}
		for _, v := range f.values {
			if v != 1 {
				t.Fatalf("%v", v)
			}
		}
	}
}

func TestMeansOfBlocks(t *testing.T) {
	value := func(row, col int) float64 {
		if row < 2 && col < 2 || (row+col)%7 == 0 {
			return math.NaN()
		}
		return float64(row*100 + col)
	}
	g := testGrid(t, 251, 102, "1", "1", value)
	f, err := newField(g, 126)
	if err != nil {
		t.Fatal(err)
	}
	if f.cols != 126 || f.rows != 51 {
		t.Fatalf("%d x %d", f.cols, f.rows)
	}
	for row := range f.rows {
		for col := range f.cols {
			var sum, n float64
			for r := row * 102 / 51; r < (row+1)*102/51; r++ {
				for c := col * 251 / 126; c < (col+1)*251/126; c++ {
					if v := value(r, c); v == v {
						sum, n = sum+v, n+1
					}
				}
			}
			got := f.at(row, col)
			if n == 0 && got == got || n > 0 && math.Abs(got-sum/n) > 1e-9 {
				t.Fatalf("block %d, %d is %v, want the mean %v of %v", row, col, got, sum/n, n)
			}
		}
	}
	if f.at(0, 0) == f.at(0, 0) {
		t.Error("a block without a value has one")
	}
	missing := 0
	for _, v := range g.Values {
		if v != v {
			missing++
		}
	}
	if f.missing != missing || f.low != 2 || f.high != 10_350 {
		t.Errorf("missing %d, low %v, high %v", f.missing, f.low, f.high)
	}
}

func TestDirectionsAreNotAveraged(t *testing.T) {
	g := testGrid(t, 300, 300, "1", "1", func(row, col int) float64 { return float64((row + col) % 2 * 358) })
	g.Labels.Show = azimuths
	f, err := newField(g, 100)
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range f.values {
		if v != 0 && v != 358 {
			t.Fatalf("a direction of %v that no node has", v)
		}
	}
}

func TestFieldsThatCannotBeShown(t *testing.T) {
	g := testGrid(t, 2, 2, "1", "1", func(row, col int) float64 { return math.Inf(row - col) })
	_, err := newField(g, 2000)
	var ie *InputError
	if !errors.As(err, &ie) || err.Error() != "picture: value of row 1, column 1: +Inf: expected a finite number or no data" {
		t.Errorf("%v", err)
	}
	g.Values = g.Values[:3]
	var se *grid.SpecError
	if _, err := newField(g, 2000); !errors.As(err, &se) {
		t.Errorf("%v", err)
	}
	// Means of values that together overflow stay within their range.
	g = testGrid(t, 200, 200, "1", "1", func(int, int) float64 { return 1.7e308 })
	f, err := newField(g, 100)
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range f.values {
		if v != 1.7e308 {
			t.Fatalf("%v", v)
		}
	}
}
