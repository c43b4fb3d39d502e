package grid

import (
	"errors"
	"fmt"
	"math"
	"math/big"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/grid/decimal"
)

func dec(text string) decimal.Number { return decimal.MustParse(text) }

func extent(xmin, ymin, xmax, ymax string) Extent {
	return Extent{XMin: dec(xmin), YMin: dec(ymin), XMax: dec(xmax), YMax: dec(ymax)}
}

func bound(xmin, ymin, xmax, ymax float64) orb.Bound {
	return orb.Bound{Min: orb.Point{xmin, ymin}, Max: orb.Point{xmax, ymax}}
}

func ratOf(n decimal.Number) *big.Rat {
	r, ok := new(big.Rat).SetString(n.String())
	if !ok {
		panic(n.String())
	}
	return r
}

func TestSpecFromExtent(t *testing.T) {
	for _, c := range []struct {
		name   string
		e      Extent
		cell   string
		at     NodePlace
		cols   int
		rows   int
		x0, y0 float64 // node of row 0, column 0
	}{
		{"centres", extent("100", "50", "103", "52"), "1", Centres, 3, 2, 100.5, 51.5},
		{"corners", extent("100", "50", "103", "52"), "1", Corners, 4, 3, 100, 52},
		{"tenths", extent("0.3", "-0.2", "0.7", "0.1"), "0.1", Centres, 4, 3, 0.35, 0.05},
		{"quarters", extent("0", "0", "5", "6"), "0.25", Corners, 21, 25, 0, 6},
		{"below zero", extent("-3", "-3", "-1", "-1"), "2", Corners, 0, 0, 0, 0},
		{"one column", extent("5", "0", "5", "10"), "5", Corners, 1, 3, 5, 10},
		{"thousands", extent("4000", "5600000", "6000", "5602000"), "1e3", Centres, 2, 2, 4500, 5601500},
	} {
		s, err := SpecFromExtent(c.e, dec(c.cell), dec(c.cell), c.at)
		if c.cols == 0 {
			var m *MultipleError
			if !errors.As(err, &m) || !errors.Is(err, ErrSpec) || m.Side != "xmin" || m.Below != dec("-4") || m.Above != dec("-2") {
				t.Errorf("%s: error %v, want the multiples -4 and -2", c.name, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if s.Cols != c.cols || s.Rows != c.rows || s.X(0) != c.x0 || s.Y(0) != c.y0 {
			t.Errorf("%s: %d x %d from (%v, %v), want %d x %d from (%v, %v)", c.name, s.Cols, s.Rows, s.X(0), s.Y(0), c.cols, c.rows, c.x0, c.y0)
		}
		want := Extent{c.e.XMin.Normal(), c.e.YMin.Normal(), c.e.XMax.Normal(), c.e.YMax.Normal()}
		if got := s.Extent(); got != want {
			t.Errorf("%s: extent %v, want %v", c.name, got, want)
		}
	}
}

func TestExtentOffTheMultiplesIsRefusedWithTheTwoNearest(t *testing.T) {
	_, err := SpecFromExtent(extent("100", "50", "120.3", "52"), dec("0.5"), dec("0.5"), Centres)
	const want = "extent xmax 120.3: expected a whole multiple of the cell 0.5, such as 120 or 120.5"
	if err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	// Grown outward it is accepted.
	s, err := SpecOutward(extent("100.1", "49.9", "120.3", "52"), dec("0.5"), dec("0.5"), Centres)
	if err != nil || s.Extent() != extent("100", "49.5", "120.5", "52") {
		t.Errorf("outward: %v, %v", s.Extent(), err)
	}
}

func TestSpecRefused(t *testing.T) {
	one := dec("1")
	good := Spec{CellX: one, CellY: one, Cols: 2, Rows: 2}
	for name, make := range map[string]func() error{
		"cell of zero": func() error { _, err := SpecFor(bound(0, 0, 1, 1), dec("0"), one, Centres); return err },
		"negative cell": func() error {
			_, err := SpecFromExtent(extent("0", "0", "1", "1"), one, dec("-1"), Centres)
			return err
		},
		"no readings":      func() error { _, err := SpecFor(bound(1, 1, -1, -1), one, one, Centres); return err },
		"not a number":     func() error { _, err := SpecFor(bound(math.NaN(), 0, 1, 1), one, one, Centres); return err },
		"infinite":         func() error { _, err := SpecFor(bound(0, 0, math.Inf(1), 1), one, one, Centres); return err },
		"beyond 1e60":      func() error { _, err := SpecFor(bound(0, 0, 2e60, 1), dec("1e59"), one, Centres); return err },
		"sides exchanged":  func() error { _, err := SpecFromExtent(extent("5", "0", "1", "1"), one, one, Centres); return err },
		"no width":         func() error { _, err := SpecFromExtent(extent("5", "0", "5", "1"), one, one, Centres); return err },
		"too many columns": func() error { _, err := SpecFor(bound(0, 0, 1e30, 1), dec("1e-30"), one, Centres); return err },
		"nodes coincide":   func() error { _, err := SpecFor(bound(5e6, 0, 5e6, 1), dec("0.000000001"), one, Corners); return err },
		"no rows":          func() error { s := good; s.Rows = 0; return s.Validate() },
		"no columns":       func() error { s := good; s.Cols = -1; return s.Validate() },
		"no such place":    func() error { s := good; s.ValuesAt = 2; return s.Validate() },
	} {
		err := make()
		var se *SpecError
		if !errors.Is(err, ErrSpec) || !errors.As(err, &se) || se.What == "" || se.Seen == "" || se.Expected == "" {
			t.Errorf("%s: error %v, want a SpecError with its parts", name, err)
		}
	}
	if err := good.Validate(); err != nil {
		t.Errorf("the lattice that the others differ from: %v", err)
	}
}

func TestNodePlaceText(t *testing.T) {
	for _, p := range []NodePlace{Centres, Corners} {
		if got, err := ParseNodePlace(p.String()); err != nil || got != p {
			t.Errorf("ParseNodePlace(%q) = %v, %v", p.String(), got, err)
		}
	}
	if _, err := ParseNodePlace("center"); !errors.Is(err, ErrSpec) {
		t.Errorf("center: %v", err)
	}
}

// drawSpec draws a lattice as users make them: from an extent in doubles and a short decimal cell.
func drawSpec(t *rapid.T) (Spec, orb.Bound) {
	number := func(label string) decimal.Number {
		n, err := decimal.New(rapid.Int64Range(1, 999).Draw(t, label), rapid.IntRange(-2, 4).Draw(t, label+" scale"))
		if err != nil {
			t.Fatal(err)
		}
		return n
	}
	cx, cy := number("cell x"), number("cell y")
	coordinate := rapid.OneOf(rapid.Float64Range(-1, 1), rapid.Float64Range(-6e6, 6e6), rapid.Float64Range(430000, 430001))
	side := func(label string, cell decimal.Number) (lo, hi float64) {
		lo = coordinate.Draw(t, label)
		hi = lo + cell.Float64()*rapid.Float64Range(0, 50).Draw(t, label+" width")
		for _, f := range []*float64{&lo, &hi} {
			if math.Abs(*f) < 1e-60 {
				*f = 0 // such readings are refused at the door
			}
		}
		return lo, hi
	}
	x0, x1 := side("x", cx)
	y0, y1 := side("y", cy)
	b := bound(x0, y0, x1, y1)
	s, err := SpecFor(b, cx, cy, rapid.SampledFrom([]NodePlace{Centres, Corners}).Draw(t, "values at"))
	if err != nil {
		t.Fatal(err)
	}
	return s, b
}

func TestNodePlacesAreExactDecimalsRoundedOnce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s, _ := drawSpec(t)
		xs, ys := s.Xs(), s.Ys()
		half := new(big.Rat)
		if s.ValuesAt == Centres {
			half.SetFrac64(1, 2)
		}
		place := func(origin, cell decimal.Number, k int) *big.Rat {
			r := new(big.Rat).SetInt64(int64(k))
			r.Add(r, half).Mul(r, ratOf(cell))
			return r.Add(r, ratOf(origin))
		}
		for col, x := range xs {
			want := place(s.West, s.CellX, col)
			f, _ := want.Float64()
			if x != f || x != s.X(col) || ratOf(s.XDecimal(col)).Cmp(want) != 0 {
				t.Fatalf("column %d: %v, X %v, decimal %v; want %s", col, x, s.X(col), s.XDecimal(col), want.FloatString(20))
			}
			if col > 0 && xs[col-1] >= x {
				t.Fatalf("columns %d and %d at %v and %v", col-1, col, xs[col-1], x)
			}
		}
		for row, y := range ys {
			want := place(s.South, s.CellY, s.Rows-1-row)
			f, _ := want.Float64()
			if y != f || y != s.Y(row) || ratOf(s.YDecimal(row)).Cmp(want) != 0 {
				t.Fatalf("row %d: %v, Y %v, decimal %v; want %s", row, y, s.Y(row), s.YDecimal(row), want.FloatString(20))
			}
			if row > 0 && ys[row-1] <= y {
				t.Fatalf("rows %d and %d at %v and %v", row-1, row, ys[row-1], y)
			}
		}
	})
}

func TestSpecForIsTheSmallestThatCovers(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s, b := drawSpec(t)
		e := s.Extent()
		axis := func(name string, lo, hi decimal.Number, cell decimal.Number, from, to float64, n int) {
			if !lo.IsMultipleOf(cell) || !hi.IsMultipleOf(cell) {
				t.Fatalf("%s: sides %v and %v are not multiples of %v", name, lo, hi, cell)
			}
			if lo.Float64() > from || hi.Float64() < to {
				t.Fatalf("%s: %v to %v does not cover %v to %v", name, lo, hi, from, to)
			}
			if n == 1 {
				return // one cell less would be none
			}
			lo2, err1 := lo.Add(cell)
			hi2, err2 := hi.Sub(cell)
			first, err3 := decimal.FromFloat(from)
			last, err4 := decimal.FromFloat(to)
			if err := errors.Join(err1, err2, err3, err4); err != nil {
				t.Fatal(err)
			}
			if lo2.Cmp(first) <= 0 || hi2.Cmp(last) >= 0 {
				t.Fatalf("%s: %v to %v is larger than %v to %v needs", name, lo, hi, from, to)
			}
		}
		axis("x", e.XMin, e.XMax, s.CellX, b.Min[0], b.Max[0], s.Cols)
		axis("y", e.YMin, e.YMax, s.CellY, b.Min[1], b.Max[1], s.Rows)

		// The same lattice comes from its own extent, either way.
		if again, err := SpecFromExtent(e, s.CellX, s.CellY, s.ValuesAt); err != nil || !again.Equal(s) {
			t.Fatalf("from its own extent: %+v, %v; want %+v", again, err, s)
		}
		first := s.NodeExtent()
		at := PlaceOf(first.XMin, first.YMin, s.CellX, s.CellY)
		if again, err := SpecFromNodes(first.XMin, first.YMin, s.CellX, s.CellY, s.Cols, s.Rows, at); err != nil || again != s {
			t.Fatalf("from its nodes: %+v, %v; want %+v", again, err, s)
		}
		if again, err := SpecOutward(e, s.CellX, s.CellY, s.ValuesAt); err != nil || again != s {
			t.Fatalf("outward from its own extent: %+v, %v; want %+v", again, err, s)
		}
	})
}

// The double 0.3 lies below 3/10; readings from 0.3 on must not gain an empty column at 0.2.
func TestDataOnAnEdgeStartThere(t *testing.T) {
	s, err := SpecFor(bound(0.3, 0.1, 0.7, 0.6), dec("0.1"), dec("0.1"), Centres)
	if err != nil || s.Cols != 4 || s.Rows != 5 || s.West != dec("0.3") {
		t.Errorf("%+v, %v; want 4 x 5 cells from 0.3", s, err)
	}
	// No width, on an edge: one column of cells.
	s, err = SpecFor(bound(5, 5, 5, 5), dec("1"), dec("1"), Centres)
	if err != nil || s.Cols != 1 || s.Rows != 1 || s.X(0) != 5.5 {
		t.Errorf("%+v, %v; want one cell", s, err)
	}
	s, err = SpecFor(bound(5, 5, 5, 5), dec("1"), dec("1"), Corners)
	if err != nil || s.Cols != 1 || s.Rows != 1 || s.X(0) != 5 {
		t.Errorf("%+v, %v; want one node", s, err)
	}
}

func TestCheckNamesNodesBytesLimitAndACellThatFits(t *testing.T) {
	// trade.md 10.1 M12: cell 0.1 over 40 x 60 km gives 2.4e11 cells.
	s, err := SpecFromExtent(extent("0", "0", "40000", "60000"), dec("0.1"), dec("0.1"), Centres)
	if err != nil {
		t.Fatal(err)
	}
	err = s.Check(8e9)
	var se *SizeError
	if !errors.As(err, &se) || !errors.Is(err, ErrTooBig) {
		t.Fatalf("error %v, want a SizeError", err)
	}
	if se.Nodes != 2.4e11 || se.LimitBytes != 8e9 || se.FitX != dec("2") || se.FitY != dec("2") {
		t.Errorf("%+v", se)
	}
	const want = "cell 0.1 over 40000 x 60000 makes 2.4e+11 nodes (1.92 TB): expected to fit the limit of 8 GB"
	if err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	fit, err := SpecFromExtent(s.Extent(), se.FitX, se.FitY, Centres)
	if err != nil || fit.Check(8e9) != nil {
		t.Errorf("the cell %v does not fit: %v", se.FitX, err)
	}
	if err := s.Check(s.Bytes()); err != nil {
		t.Errorf("a limit of just its size: %v", err)
	}
	if err := s.Check(s.Bytes() - 1); !errors.Is(err, ErrTooBig) {
		t.Errorf("a limit one byte short: %v", err)
	}
	var none *SizeError
	if err := s.Check(8); !errors.As(err, &none) || none.FitX.Sign() != 0 {
		t.Errorf("a limit that nothing fits: %+v", err)
	}
	// Node counts beyond an int saturate and are refused, not wrapped.
	huge, err := SpecFromExtent(extent("0", "0", "1e12", "1e12"), dec("0.001"), dec("0.001"), Corners)
	if err != nil {
		t.Fatal(err)
	}
	if huge.NumNodes() != math.MaxInt || huge.Bytes() != math.MaxInt64 {
		t.Errorf("%d nodes, %d bytes", huge.NumNodes(), huge.Bytes())
	}
	if err := huge.Check(math.MaxInt64 - 1); !errors.Is(err, ErrTooBig) {
		t.Errorf("1e30 nodes: %v", err)
	}
	if _, err := New(huge); !errors.Is(err, ErrTooBig) {
		t.Errorf("New of 1e30 nodes: %v", err)
	}
}

func TestFittingCellFits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s, _ := drawSpec(t)
		limit := rapid.Int64Range(72, 8*2500).Draw(t, "limit")
		var e *SizeError
		if !errors.As(s.Check(limit), &e) || e.FitX.Sign() == 0 {
			return
		}
		fit, err := SpecOutward(s.Extent(), e.FitX, e.FitY, s.ValuesAt)
		if err != nil || fit.Bytes() > limit {
			t.Fatalf("cell %v makes %d bytes, limit %d: %v", e.FitX, fit.Bytes(), limit, err)
		}
	})
}

func TestMethodsPanicOnWhatValidateRefuses(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("no panic")
		}
	}()
	Spec{Cols: 1, Rows: 1}.X(0)
}

func TestGridBasics(t *testing.T) {
	s, err := SpecFromExtent(extent("0", "0", "3", "2"), dec("1"), dec("1"), Centres)
	if err != nil {
		t.Fatal(err)
	}
	g, err := New(s)
	if err != nil {
		t.Fatal(err)
	}
	for i, v := range g.Values {
		if !math.IsNaN(v) {
			t.Errorf("value %d of a new grid is %v", i, v)
		}
		g.Values[i] = float64(i)
	}
	if g.At(1, 2) != 5 || g.Row(1)[0] != 3 || len(g.Row(0)) != 3 {
		t.Errorf("At(1, 2) = %v, Row(1) = %v", g.At(1, 2), g.Row(1))
	}
	if err := g.Validate(); err != nil {
		t.Error(err)
	}
	g.Values = g.Values[:5]
	if err := g.Validate(); !errors.Is(err, ErrSpec) {
		t.Errorf("five values for six nodes: %v", err)
	}
	func() {
		defer func() {
			if recover() == nil {
				t.Error("At beyond the last column does not panic")
			}
		}()
		g.At(0, 3)
	}()
}

func BenchmarkXs(b *testing.B) {
	s, err := SpecFromExtent(extent("430000", "5600000", "430400", "5600400"), dec("0.1"), dec("0.1"), Centres)
	if err != nil {
		b.Fatal(err)
	}
	b.Run("n=4e3", func(b *testing.B) {
		for b.Loop() {
			s.Xs()
		}
		b.ReportMetric(float64(s.Cols)*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
	})
}

func Example() {
	cell := decimal.MustParse("0.5")
	spec, err := SpecFor(orb.Bound{Min: orb.Point{100.2, 50}, Max: orb.Point{180.7, 90}}, cell, cell, Centres)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(spec.Cols, spec.Rows, spec.X(0), spec.Y(0))
	_, err = SpecFromExtent(Extent{XMin: decimal.MustParse("100.2"), XMax: decimal.MustParse("180"), YMax: decimal.MustParse("90")}, cell, cell, Centres)
	fmt.Println(err)
	// Output:
	// 162 80 100.25 89.75
	// extent xmin 100.2: expected a whole multiple of the cell 0.5, such as 100 or 100.5
}
