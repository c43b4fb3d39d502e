package gridcsv

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"isofacet/grid"
	"isofacet/grid/decimal"
)

func dec(text string) decimal.Number { return decimal.MustParse(text) }

var nan = math.NaN()

// small is the raster of the golden files.
func small() *grid.Grid {
	return &grid.Grid{
		Spec:   grid.Spec{West: dec("100"), South: dec("50"), CellX: dec("1"), CellY: dec("1"), Cols: 3, Rows: 2},
		Values: []float64{12.25, 12.5, nan, 12, 12.125, -0.0625},
	}
}

func TestGoldenFiles(t *testing.T) {
	for _, c := range []struct {
		file string
		opt  Options
	}{
		{"matrix.csv", Options{Matrix, 1, 3, "", 1}},
		{"matrix_no_data.csv", Options{Matrix, 1, 2, "-9999", 1}},
		{"list.csv", Options{List, All, All, "", 1}},
	} {
		want, err := os.ReadFile(filepath.Join("testdata", c.file))
		if err != nil {
			t.Fatal(err)
		}
		var got bytes.Buffer
		if err := Write(&got, small(), c.opt); err != nil {
			t.Errorf("%s: %v", c.file, err)
		}
		if diff := cmp.Diff(string(want), got.String()); diff != "" {
			t.Errorf("%s:\n%s", c.file, diff)
		}
		back, err := Read(bytes.NewReader(want), ReadOptions{Name: c.file, NoData: c.opt.NoData})
		if err != nil {
			t.Errorf("%s: %v", c.file, err)
			continue
		}
		if !back.Spec.Equal(small().Spec) {
			t.Errorf("%s: lattice %+v", c.file, back.Spec)
		}
		for i, v := range back.Values {
			if want := small().Values[i]; math.Abs(v-want) > 0.00501 || math.IsNaN(v) != math.IsNaN(want) {
				t.Errorf("%s: value %d reads %v, want %v", c.file, i, v, want)
			}
		}
	}
}

// drawGrid draws a raster such as surveys give: short decimal cells, any doubles as values.
func drawGrid(t *rapid.T) *grid.Grid {
	number := func(label string, lo, hi int64, scale int) decimal.Number {
		n, err := decimal.New(rapid.Int64Range(lo, hi).Draw(t, label), scale)
		if err != nil {
			t.Fatal(err)
		}
		return n
	}
	scale := rapid.IntRange(-2, 3).Draw(t, "scale")
	s := grid.Spec{
		CellX: number("cell x", 1, 300, scale), CellY: number("cell y", 1, 300, scale),
		Cols: rapid.IntRange(1, 12).Draw(t, "columns"), Rows: rapid.IntRange(1, 12).Draw(t, "rows"),
		ValuesAt: rapid.SampledFrom([]grid.NodePlace{grid.Centres, grid.Corners}).Draw(t, "values at"),
	}
	var errX, errY error
	s.West, errX = s.CellX.Times(rapid.Int64Range(-20000, 20000).Draw(t, "west"))
	s.South, errY = s.CellY.Times(rapid.Int64Range(-20000, 20000).Draw(t, "south"))
	if err := errors.Join(errX, errY); err != nil {
		t.Fatal(err)
	}
	g, err := grid.New(s)
	if err != nil {
		t.Fatal(err)
	}
	value := rapid.OneOf(rapid.Float64Range(-1e6, 1e6), rapid.Float64(), rapid.Just(nan))
	for i := range g.Values {
		if g.Values[i] = value.Draw(t, "value"); math.IsInf(g.Values[i], 0) {
			g.Values[i] = nan
		}
	}
	return g
}

func checkSame(t rapid.TB, got, want *grid.Grid) {
	t.Helper()
	if !got.Spec.Equal(want.Spec) {
		t.Fatalf("lattice %+v, want %+v", got.Spec, want.Spec)
	}
	for i, v := range got.Values {
		if w := want.Values[i]; v != w && !(math.IsNaN(v) && math.IsNaN(w)) {
			t.Fatalf("value %d is %v, want %v", i, v, w)
		}
	}
}

func TestMatrixReadsBackToTheSameBits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := drawGrid(t)
		var text bytes.Buffer
		if err := Write(&text, g, Options{Matrix, All, All, "", 1}); err != nil {
			t.Fatal(err)
		}
		// A single row or column shows no cell of its own.
		back, err := Read(&text, ReadOptions{CellX: g.Spec.CellX, CellY: g.Spec.CellY, ValuesAt: &g.Spec.ValuesAt})
		if err != nil {
			t.Fatalf("%v\n%s", err, text.String())
		}
		checkSame(t, back, g)
		if g.Spec.Cols > 1 && g.Spec.Rows > 1 {
			text.Reset()
			if err := Write(&text, g, Options{Matrix, g.Spec.Decimals(), All, "", 1}); err != nil {
				t.Fatal(err)
			}
			back, err := Read(&text, ReadOptions{})
			if err != nil {
				t.Fatal(err)
			}
			checkSame(t, back, g) // nothing told: where values stand is inferred
		}
	})
}

func TestListReadsBackToTheSameBits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := drawGrid(t)
		// With values in all corners and next to one, the list shows the whole lattice.
		last := len(g.Values) - 1
		for _, i := range []int{0, min(1, last), g.Spec.Cols - 1, last, min(g.Spec.Cols, last)} {
			g.Values[i] = float64(i)
		}
		var text bytes.Buffer
		if err := Write(&text, g, Options{List, All, All, "", 1}); err != nil {
			t.Fatal(err)
		}
		lines := strings.SplitAfter(text.String(), "\n")
		opt := ReadOptions{CellX: g.Spec.CellX, CellY: g.Spec.CellY, ValuesAt: &g.Spec.ValuesAt}
		back, err := Read(&text, opt)
		if err != nil {
			t.Fatalf("%v\n%s", err, lines)
		}
		checkSame(t, back, g)
		// The order of lines does not matter.
		body := lines[1 : len(lines)-1]
		shuffled := rapid.Permutation(body).Draw(t, "shuffled")
		back, err = Read(strings.NewReader(lines[0]+strings.Join(shuffled, "")), opt)
		if err != nil {
			t.Fatal(err)
		}
		checkSame(t, back, g)
	})
}

func TestWorkersDoNotChangeBytes(t *testing.T) {
	g := surface(301, 207)
	for _, layout := range []Layout{Matrix, List} {
		var want bytes.Buffer
		if err := Write(&want, g, Options{layout, All, All, "", 1}); err != nil {
			t.Fatal(err)
		}
		for _, workers := range []int{0, 2, 3, 8} {
			var got bytes.Buffer
			if err := Write(&got, g, Options{layout, All, All, "", workers}); err != nil {
				t.Fatal(err)
			}
			if !bytes.Equal(got.Bytes(), want.Bytes()) {
				t.Errorf("%v, %d workers: other bytes", layout, workers)
			}
			back, err := Read(&got, ReadOptions{Workers: workers})
			if err != nil {
				t.Fatal(err)
			}
			checkSame(t, back, g)
		}
	}
}

// surface is a smooth raster with a hole.
func surface(cols, rows int) *grid.Grid {
	g, err := grid.New(grid.Spec{West: dec("430000"), South: dec("5600000"), CellX: dec("0.5"), CellY: dec("0.5"), Cols: cols, Rows: rows})
	if err != nil {
		panic(err)
	}
	for row := range rows {
		for col := range cols {
			x, y := float64(col)/50, float64(row)/40
			if x*x+y*y > 1 {
				g.Row(row)[col] = 100 + 3*x*y - 7*x + y/3
			}
		}
	}
	return g
}

func TestZeroHasNoSign(t *testing.T) {
	g := small()
	g.Values = []float64{math.Copysign(0, -1), -0.0004, 0, -0.6, nan, -1e-300}
	var got bytes.Buffer
	if err := Write(&got, g, Options{Matrix, 1, 2, "", 1}); err != nil {
		t.Fatal(err)
	}
	const want = "y\\x,100.5,101.5,102.5\n51.5,0.00,0.00,0.00\n50.5,-0.60,,0.00\n"
	if got.String() != want {
		t.Errorf("got\n%swant\n%s", got.String(), want)
	}
}

func TestWriteRefuses(t *testing.T) {
	for _, c := range []struct {
		name string
		make func(g *grid.Grid, opt *Options)
		want string
	}{
		{"infinite", func(g *grid.Grid, opt *Options) { g.Values[4] = math.Inf(-1) }, "row 2, column 2: -Inf: expected a finite value"},
		{"no-data is a value", func(g *grid.Grid, opt *Options) { opt.NoData = "12.5" },
			"row 1, column 2: value 12.500 reads like no-data 12.5: expected a no-data number that no value has"},
		{"no-data is a rounded value", func(g *grid.Grid, opt *Options) { opt.NoData, g.Values[0] = "-9999", -9999.0004 },
			"row 1, column 1: value -9999.000 reads like no-data -9999: expected a no-data number that no value has"},
		{"no-data is no number", func(g *grid.Grid, opt *Options) { opt.NoData = "NM" }, `no-data "NM": expected a number such as -9999`},
		{"too few decimals", func(g *grid.Grid, opt *Options) { g.Spec.CellX, opt.CoordinateDecimals = dec("0.1"), 0 },
			"0 decimals write x 100 for two neighbouring nodes: expected enough decimals to tell nodes apart"},
		{"too few values", func(g *grid.Grid, opt *Options) { g.Values = g.Values[1:] }, "values 5: expected 6, one a node of 3 columns and 2 rows"},
		{"no rows", func(g *grid.Grid, opt *Options) { g.Spec.Rows, g.Values = 0, nil }, "rows 0: expected at least 1"},
	} {
		for _, workers := range []int{1, 3} {
			g, opt := small(), Options{Matrix, 1, 3, "", workers}
			c.make(g, &opt)
			if err := Write(&bytes.Buffer{}, g, opt); err == nil || err.Error() != c.want {
				t.Errorf("%s: got  %v\nwant %s", c.name, err, c.want)
			}
		}
	}
	// A no-data number near values but not read like one is fine.
	g := small()
	if err := Write(&bytes.Buffer{}, g, Options{Matrix, 1, 3, "12.0005", 1}); err != nil {
		t.Error(err)
	}
}

func TestReadTakes(t *testing.T) {
	want := small()
	for name, text := range map[string]string{
		"CR LF":             "y\\x,100.5,101.5,102.5\r\n51.5,12.25,12.5,\r\n50.5,12,12.125,-0.0625\r\n",
		"byte order mark":   "\ufeffy\\x,100.5,101.5,102.5\n51.5,12.25,12.5,\n50.5,12,12.125,-0.0625",
		"blanks":            "y\\x, 100.5, 101.50, 102.5\n51.5, 12.25,\t12.5, \n 50.5,12 ,12.125,-0.0625\n\n\n",
		"exponents":         "y\\x,1.005e2,101.5,102.5\n51.5,1225e-2,12.5,\n50.5,12,12.125,-6.25e-2\n",
		"list":              "x,y,z\n102.5,50.5,-0.0625\n100.5,51.5,12.25\n101.50,51.5,12.5\n101.5,50.5,12.125\n100.5,50.5,12\n",
		"list, capitals":    "X, Y, Z\r\n102.5,50.5,-0.0625\r\n100.5,51.5,12.25\r\n101.5,51.50,12.5\r\n101.5,50.5,12.125\r\n100.5,50.5,12\r\n",
		"list, empty z":     "x,y,z\n102.5,50.5,-0.0625\n100.5,51.5,12.25\n101.5,51.5,12.5\n102.5,51.5,\n101.5,50.5,12.125\n100.5,50.5,12",
		"list, told number": "x,y,z\n102.5,50.5,-0.0625\n100.5,51.5,12.25\n101.5,51.5,12.5\n102.5,51.5,-99\n101.5,50.5,12.125\n100.5,50.5,12",
	} {
		got, err := Read(strings.NewReader(text), ReadOptions{NoData: "-99.0"})
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		checkSame(t, got, want)
	}
}

func TestCellOfASingleRowOrColumn(t *testing.T) {
	centres := grid.Centres
	for _, c := range []struct {
		text string
		opt  ReadOptions
		x, y string // cell
		err  string
	}{
		{"y\\x,1,3\n5,7,8\n", ReadOptions{}, "2", "2", ""},
		{"y\\x,1,3\n5,7,8\n", ReadOptions{CellY: dec("4")}, "2", "4", ""},
		{"y\\x,1\n5,7\n2,8\n", ReadOptions{}, "3", "3", ""},
		{"y\\x,1\n5,7\n2,8\n", ReadOptions{CellX: dec("0.5")}, "0.5", "3", ""},
		{"y\\x,1\n5,7\n", ReadOptions{CellX: dec("0.5")}, "0.5", "0.5", ""},
		{"y\\x,1\n5,7\n", ReadOptions{CellY: dec("0.5")}, "0.5", "0.5", ""},
		{"x,y,z\n1,5,7\n", ReadOptions{CellX: dec("1"), CellY: dec("2")}, "1", "2", ""},
		{"y\\x,1\n5,7\n", ReadOptions{Name: "a.csv"}, "", "", "a.csv: a single node: expected at least two, or to be told the cell"},
	} {
		c.opt.ValuesAt = &centres
		g, err := Read(strings.NewReader(c.text), c.opt)
		switch {
		case c.err != "":
			if err == nil || err.Error() != c.err {
				t.Errorf("%q: %v", c.text, err)
			}
		case err != nil:
			t.Errorf("%q: %v", c.text, err)
		case g.Spec.CellX != dec(c.x) || g.Spec.CellY != dec(c.y):
			t.Errorf("%q: cell %v x %v, want %s x %s", c.text, g.Spec.CellX, g.Spec.CellY, c.x, c.y)
		}
	}
}

// A list skips columns that hold nothing; a column of no data between others comes back.
func TestListWithGaps(t *testing.T) {
	g, err := Read(strings.NewReader("x,y,z\n0,0,1\n1,0,2\n4,0,3\n0,3,4\n"), ReadOptions{CellY: dec("1")})
	if err != nil {
		t.Fatal(err)
	}
	if g.Spec.Cols != 5 || g.Spec.Rows != 2 || g.At(1, 4) != 3 || !math.IsNaN(g.At(1, 2)) || g.At(0, 0) != 4 || g.Spec.ValuesAt != grid.Corners {
		t.Errorf("%+v %v", g.Spec, g.Values)
	}
}

func TestReadRefuses(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", `f:1:1: first line "": expected y\x and the x of each column, or x,y,z`},
		{"points", "id,x,y,z\n1,2,3,4\n", `f:1:1: first line "id,x,y,z": expected y\x and the x of each column, or x,y,z`},
		{"no columns", "y\\x\n1\n", `f:1:1: no columns: expected the x of each behind y\x`},
		{"no rows", "y\\x,1,2\n", `f:1:8: no further line: expected rows of the raster`},
		{"no nodes", "x,y,z\n", `f:1:6: no further line: expected nodes, one a line`},
		{"x no number", "y\\x,1,two\n1,1,1\n", `f:1:7: x "two": expected a number such as 100.5`},
		{"x falling", "y\\x,2,1\n1,1,1\n", `f:1:7: x 1: expected places rising from 2`},
		{"x twice", "y\\x,2,2\n1,1,1\n", `f:1:7: x 2: expected places rising from 2`},
		{"x uneven", "y\\x,1,2,3.01\n1,1,1,1\n", `f:1:9: x 3.01: expected 3, one step of 1 from 2`},
		{"y no number", "y\\x,1,2\n1;5,1,1\n", `f:2:1: y "1;5": expected a number such as 50.5`},
		{"y rising", "y\\x,1,2\n1,1,1\n2,1,1\n", `f:3:1: y 2: expected places falling from 1`},
		{"y uneven", "y\\x,1,2\n5,1,1\n4,1,1\n2,1,1\n", `f:4:1: y 2: expected 3, one step of -1 from 4`},
		{"value no number", "y\\x,1,2\n5,1,1\n4,1,abc\n", `f:3:5: value "abc": expected a number, or nothing for no data`},
		{"value nan", "y\\x,1,2\n5,1,NaN\n4,1,1\n", `f:2:5: value "NaN": expected a number, or nothing for no data`},
		{"value beyond doubles", "y\\x,1,2\n5,1e999,1\n4,1,1\n", `f:2:3: value "1e999": expected a number, or nothing for no data`},
		{"row short", "y\\x,1,2\n5,1,1\n4,1\n", `f:3:1: row of 2 fields: expected 3: y and a value for each column`},
		{"row long", "y\\x,1,2\n5,1,1,1\n4,1,1\n", `f:2:1: row of 4 fields: expected 3: y and a value for each column`},
		{"blank line", "y\\x,1,2\n5,1,1\n\n4,1,1\n", `f:3:1: y "": expected a number such as 50.5`},
		{"wide head, many short rows", "y\\x" + strings.Repeat(",1", 9) + "\n" + strings.Repeat("1\n", 90), `f:1:7: x 1: expected places rising from 1`},
		{"wide head, short rows", "y\\x,1,2,3,4,5,6,7,8,9\n" + strings.Repeat("1\n", 90), `f:2:1: row of 1 fields: expected 10: y and a value for each column`},
		{"list, fields", "x,y,z\n1,2,3\n2,2\n", `f:3:1: row of 2 fields: expected 3: x, y and z`},
		{"list, more fields", "x,y,z\n1,2,3\n2,2,3,4\n", `f:3:1: row of 4 fields: expected 3: x, y and z`},
		{"list, x", "x,y,z\n1,2,3\nx,2,3\n", `f:3:1: x "x": expected a number such as 100.5`},
		{"list, y", "x,y,z\n1,2,3\n1,y,3\n", `f:3:3: y "y": expected a number such as 100.5`},
		{"list, z", "x,y,z\n1,2,3\n2,2,z\n", `f:3:5: value "z": expected a number, or nothing for no data`},
		{"list, uneven", "x,y,z\n1,2,3\n2,2,3\n3.5,2,3\n", `f:4:1: x 3.5: expected a whole number of steps from 1; the smallest step is 1`},
		{"list, twice", "x,y,z\n1,2,3\n2,2,3\n1.0,2,4\n", `f:4:1: node 1.0, 2 again: expected each node once; line 2 has it`},
	} {
		g, err := Read(strings.NewReader(c.text), ReadOptions{Name: "f"})
		var re *ReadError
		if g != nil || !errors.As(err, &re) || err.Error() != c.want {
			t.Errorf("%s:\ngot  %v\nwant %s", c.name, err, c.want)
		}
	}
}

func TestReadKeepsToItsLimit(t *testing.T) {
	// Two nodes far apart: a lattice of 1e9 columns from 30 bytes.
	for name, text := range map[string]string{
		"list":   "x,y,z\n0,0,1\n1,0,1\n1000000000,0,1\n",
		"matrix": "y\\x,1,2,3\n2,1,1,1\n1,1,1,1\n",
		"text":   "y\\x,1,2\n" + strings.Repeat(" ", 200) + "2,1,1\n1,1,1\n",
	} {
		if _, err := Read(strings.NewReader(text), ReadOptions{LimitBytes: 40, CellY: dec("1")}); !errors.Is(err, grid.ErrTooBig) {
			t.Errorf("%s: error %v", name, err)
		}
	}
	if _, err := Read(strings.NewReader("y\\x,1,2\n2,1,1\n1,1,1\n"), ReadOptions{LimitBytes: 32}); err != nil {
		t.Errorf("just at the limit: %v", err)
	}
	if _, err := Read(strings.NewReader("y\\x,1\n1,1"), ReadOptions{NoData: "none"}); err == nil {
		t.Error("a no-data mark that is no number is taken")
	}
}

func FuzzRead(f *testing.F) {
	for _, file := range []string{"matrix.csv", "matrix_no_data.csv", "list.csv"} {
		b, err := os.ReadFile(filepath.Join("testdata", file))
		if err != nil {
			f.Fatal(err)
		}
		f.Add(b)
	}
	f.Add([]byte("x,y,z\n0,0,1\n1e9,0,1\n1,1,\n"))
	f.Add([]byte("\ufeffy\\x,1,2\r\n2,,\r\n1,3,4\r\n\r\n"))
	f.Fuzz(func(t *testing.T, text []byte) {
		g, err := Read(bytes.NewReader(text), ReadOptions{LimitBytes: 1 << 20, CellX: dec("1"), Workers: 2})
		if err != nil {
			var re *ReadError
			if !errors.As(err, &re) && !errors.Is(err, grid.ErrTooBig) && !errors.Is(err, grid.ErrSpec) {
				t.Fatalf("untyped error %v", err)
			}
			return
		}
		if err := g.Validate(); err != nil {
			t.Fatal(err)
		}
		// What was read is written and read as the same. Places of 17 digits may not survive as doubles: then it is an error.
		var again bytes.Buffer
		if err := Write(&again, g, Options{Matrix, All, All, "", 1}); err != nil {
			t.Fatal(err)
		}
		back, err := Read(&again, ReadOptions{CellX: g.Spec.CellX, CellY: g.Spec.CellY, ValuesAt: &g.Spec.ValuesAt})
		if err != nil {
			var re *ReadError
			if g.Spec.Decimals() < 10 && errors.As(err, &re) && g.Spec.NodeExtent().XMax.Cmp(dec("1e4")) < 0 && g.Spec.NodeExtent().XMin.Cmp(dec("-1e4")) > 0 &&
				g.Spec.NodeExtent().YMax.Cmp(dec("1e4")) < 0 && g.Spec.NodeExtent().YMin.Cmp(dec("-1e4")) > 0 {
				t.Fatal(err)
			}
			return
		}
		if back.Spec.Cols != g.Spec.Cols || back.Spec.Rows != g.Spec.Rows {
			t.Fatalf("lattice %+v, want %+v", back.Spec, g.Spec)
		}
	})
}

func BenchmarkWrite(b *testing.B) {
	g := surface(1000, 1000)
	r := rand.New(rand.NewPCG(1, 2))
	for i := range g.Values {
		g.Values[i] = 100 + 20*r.NormFloat64()
	}
	rate := func(b *testing.B) {
		b.ReportMetric(float64(len(g.Values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
	}
	var sink discard
	for _, c := range []struct {
		name string
		opt  Options
	}{
		{"matrix-3", Options{Matrix, 2, 3, "", 1}},
		{"matrix-full", Options{Matrix, All, All, "", 1}},
		{"list-3", Options{List, 2, 3, "", 1}},
		{"list-3/workers=2", Options{List, 2, 3, "", 2}},
		{"matrix-full/workers=2", Options{Matrix, All, All, "", 2}},
	} {
		b.Run(c.name+"/n=1e6", func(b *testing.B) {
			for b.Loop() {
				if err := Write(&sink, g, c.opt); err != nil {
					b.Fatal(err)
				}
			}
			rate(b)
		})
	}
	b.Run("floor-copy/n=1e6", func(b *testing.B) { // text of the same length, copied
		text := []byte("100.000,")
		buf := make([]byte, 0, len(text)*len(g.Values))
		for b.Loop() {
			buf = buf[:0]
			for range g.Values {
				buf = append(buf, text...)
			}
			sink.Write(buf)
		}
		rate(b)
	})
}

type discard struct{ n int }

func (d *discard) Write(p []byte) (int, error) { d.n += len(p); return len(p), nil }

func BenchmarkRead(b *testing.B) {
	g := surface(1000, 1000)
	for _, c := range []struct {
		name    string
		opt     Options
		workers int
	}{
		{"matrix-3", Options{Matrix, 2, 3, "", 0}, 1},
		{"matrix-full", Options{Matrix, All, All, "", 0}, 1},
		{"list-3", Options{List, 2, 3, "", 0}, 1},
		{"list-3/workers=2", Options{List, 2, 3, "", 0}, 2},
	} {
		var text bytes.Buffer
		if err := Write(&text, g, c.opt); err != nil {
			b.Fatal(err)
		}
		b.Run(c.name+"/n=1e6", func(b *testing.B) {
			for b.Loop() {
				if _, err := Read(bytes.NewReader(text.Bytes()), ReadOptions{Workers: c.workers}); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(len(g.Values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
		})
	}
}

func Example() {
	g := &grid.Grid{
		Spec:   grid.Spec{West: decimal.FromInt(100), South: decimal.FromInt(50), CellX: decimal.FromInt(1), CellY: decimal.FromInt(1), Cols: 3, Rows: 2},
		Values: []float64{12.25, 12.5, math.NaN(), 12, 12.125, 12.25},
	}
	var text bytes.Buffer
	if err := Write(&text, g, Options{Layout: Matrix, CoordinateDecimals: 1, ValueDecimals: 2}); err != nil {
		fmt.Println(err)
		return
	}
	fmt.Print(text.String())
	back, err := Read(&text, ReadOptions{Name: "surface.csv"})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(back.Spec.West, back.Spec.CellX, back.Spec.ValuesAt, back.At(0, 1))
	// Output:
	// y\x,100.5,101.5,102.5
	// 51.5,12.25,12.50,
	// 50.5,12.00,12.12,12.25
	// 100 1 centres 12.5
}
