package exact

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// allOrients asks every stage that accepts the points and fails if two differ.
func allOrients(t testing.TB, a, b, c point) int {
	t.Helper()
	got := Orient(a, b, c)
	stages := map[string]int{
		"OrientXY":  OrientXY(a[0], a[1], b[0], b[1], c[0], c[1]),
		"slow":      orientSlow(a[0], a[1], b[0], b[1], c[0], c[1]),
		"expansion": orientExpansion(a[0], a[1], b[0], b[1], c[0], c[1]),
		"rotated":   Orient(b, c, a),
		"swapped":   -Orient(b, a, c),
	}
	if det, bound := OrientEstimate(a[0], a[1], b[0], b[1], c[0], c[1]); math.Abs(det) > bound {
		stages["estimate"] = signOf(det)
	}
	for name, s := range stages {
		if s != got {
			t.Fatalf("Orient(%v, %v, %v): %d, but %s gives %d", a, b, c, got, name, s)
		}
	}
	return got
}

// allInCircles does the same for InCircle.
func allInCircles(t testing.TB, a, b, c, d point) int {
	t.Helper()
	got := InCircle(a, b, c, d)
	stages := map[string]int{
		"XY":        InCircleXY(a[0], a[1], b[0], b[1], c[0], c[1], d[0], d[1]),
		"slow":      inCircleSlow(a[0], a[1], b[0], b[1], c[0], c[1], d[0], d[1]),
		"expansion": inCircleExpansion(a[0], a[1], b[0], b[1], c[0], c[1], d[0], d[1]),
		"rotated":   InCircle(b, c, a, d),
		"swapped":   -InCircle(b, a, c, d),
		"other":     -InCircle(a, b, d, c),
	}
	exact := true
	var e [6]float64
	for i, p := range []point{a, b, c} {
		for k := range 2 {
			e[2*i+k] = p[k] - d[k]
			exact = exact && exactDiff(p[k], d[k], e[2*i+k])
		}
	}
	if exact {
		stages["differences"] = inCircleDifferences(e[0], e[1], e[2], e[3], e[4], e[5])
		if s, ok := inCircleInteger(e[0], e[1], e[2], e[3], e[4], e[5]); ok {
			stages["integer"] = s
		}
	}
	for name, s := range stages {
		if s != got {
			t.Fatalf("InCircle(%v, %v, %v, %v): %d, but %s gives %d", a, b, c, d, got, name, s)
		}
	}
	return got
}

// TestSignsAgainstRationals: every stage against the definitions on points made
// to be hard.
func TestSignsAgainstRationals(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	var zero [2]int
	for range 6000 {
		p := hardPoints(r, 4)
		if got, want := allOrients(t, p[0], p[1], p[2]), orientRat(p[0], p[1], p[2]); got != want {
			t.Fatalf("Orient(%v, %v, %v) = %d, want %d", p[0], p[1], p[2], got, want)
		} else if got == 0 {
			zero[0]++
		}
		if got, want := allInCircles(t, p[0], p[1], p[2], p[3]), inCircleRat(p[0], p[1], p[2], p[3]); got != want {
			t.Fatalf("InCircle(%v) = %d, want %d", p, got, want)
		} else if got == 0 {
			zero[1]++
		}
	}
	if zero[0] < 100 || zero[1] < 100 {
		t.Errorf("only %d and %d of the values were zero: the points are not hard", zero[0], zero[1])
	}
}

// TestExtremes: the ends of the accepted range neither overflow nor underflow.
func TestExtremes(t *testing.T) {
	coords := []float64{0, 1e-60, -1e-60, math.Nextafter(1e-60, 1), 1e60, -1e60, math.Nextafter(1e60, 0), 1, 1 + 1.0/(1<<52)}
	r := rand.New(rand.NewPCG(3, 4))
	at := func() point { return point{coords[r.IntN(len(coords))], coords[r.IntN(len(coords))]} }
	for range 3000 {
		a, b, c, d := at(), at(), at(), at()
		if got, want := allOrients(t, a, b, c), orientRat(a, b, c); got != want {
			t.Fatalf("Orient(%v, %v, %v) = %d, want %d", a, b, c, got, want)
		}
		if got, want := allInCircles(t, a, b, c, d), inCircleRat(a, b, c, d); got != want {
			t.Fatalf("InCircle(%v, %v, %v, %v) = %d, want %d", a, b, c, d, got, want)
		}
	}
}

// TestIntegerStageSizes drives the integer stage to both ends of both of its
// widths: differences of exactly k bits, cocircular and one unit off.
func TestIntegerStageSizes(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for k := 2; k <= 62; k++ {
		for range 40 {
			// At most 53 bits long, the first k bits set, so that |d| < 2^k is as
			// large as it gets.
			long := float64(uint64(1)<<k - 1)
			if k > 53 {
				long = math.Ldexp(1<<53-1, k-53)
			}
			e := [6]float64{long, long, -long, long, -long, -long}
			for i := range e {
				if r.IntN(3) == 0 {
					e[i] = float64(r.IntN(8) - 4)
				}
				if r.IntN(2) == 0 {
					e[i] = -e[i]
				}
			}
			got, ok := inCircleInteger(e[0], e[1], e[2], e[3], e[4], e[5])
			if !ok {
				t.Fatalf("k = %d: %v was not accepted", k, e)
			}
			if want := inCircleRat(point{e[0], e[1]}, point{e[2], e[3]}, point{e[4], e[5]}, point{}); got != want {
				t.Fatalf("k = %d: %v gives %d, want %d", k, e, got, want)
			}
			if d := inCircleDifferences(e[0], e[1], e[2], e[3], e[4], e[5]); d != got {
				t.Fatalf("k = %d: %v gives %d as expansion, %d as integers", k, e, d, got)
			}
		}
	}
	if _, ok := inCircleInteger(1<<62, 1, 1, 1, 1, 2); ok {
		t.Error("63 bits were accepted, want false")
	}
	if s, ok := inCircleInteger(0, 0, 0, 0, 0, 0); !ok || s != 0 {
		t.Errorf("zeros give %d, %v, want 0, true", s, ok)
	}
}

// Published failure cases and those of the trade.
func TestNamedCases(t *testing.T) {
	orients := []struct {
		name    string
		a, b, c point
		want    int
	}{
		// Kettner, Mehlhorn, Pion, Schirra, Yap 2008, fig. 2: plain floating point gives
		// every sign in this neighbourhood; the exact ones follow from x - y of the first.
		{"near collinear, on the line", point{0.5, 0.5}, point{12, 12}, point{24, 24}, 0},
		{"near collinear, one last place above", point{0.5, 0.5 + 1.0/(1<<53)}, point{12, 12}, point{24, 24}, 1},
		{"near collinear, one last place right", point{0.5 + 1.0/(1<<53), 0.5}, point{12, 12}, point{24, 24}, -1},
		// Three shots along a wall in national coordinates: in decimals on one line, in
		// binary not. Signs by rationals of the float64 values.
		{"wall, millimetres", point{4500004.571, 5400092.964}, point{4500005.572, 5400093.965}, point{4500006.573, 5400094.966}, orientRat(point{4500004.571, 5400092.964}, point{4500005.572, 5400093.965}, point{4500006.573, 5400094.966})},
		{"large next to small", point{1e9, 1e-9}, point{-1e9, 1e-9}, point{0, 1e-9}, 0},
		{"large next to small, bent", point{1e9, 1e-9}, point{-1e9, 1e-9}, point{0, 1.0000001e-9}, -1},
		{"mixed signs through the origin", point{-0.1, -0.3}, point{0.1, 0.3}, point{0, 0}, 0},
		{"equal points", point{7, 8}, point{7, 8}, point{1, 2}, 0},
	}
	for _, c := range orients {
		if got := allOrients(t, c.a, c.b, c.c); got != c.want {
			t.Errorf("%s: %d, want %d", c.name, got, c.want)
		}
	}
}

// TestTiltedLattices: lattices turned by every whole degree, on which nearly
// every test is undecided by the filter; and walls with wide gaps.
func TestTiltedLattices(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for deg := range 90 {
		sin, cos := math.Sincos(float64(deg) * math.Pi / 180)
		at := func(i, j int) point {
			return point{430000 + float64(i)*cos - float64(j)*sin, 5600000 + float64(i)*sin + float64(j)*cos}
		}
		for range 12 {
			i, j := r.IntN(100), r.IntN(100)
			a, b, c, d := at(i, j), at(i+1, j), at(i+1, j+1), at(i, j+1)
			if got, want := allInCircles(t, a, b, c, d), inCircleRat(a, b, c, d); got != want {
				t.Fatalf("%d degrees, cell %d, %d: InCircle %d, want %d", deg, i, j, got, want)
			}
			k := 1 + r.IntN(3000)
			a, b, c = at(i, j), at(i+1, j), at(i+k, j) // on one line, as drawn
			if got, want := allOrients(t, a, b, c), orientRat(a, b, c); got != want {
				t.Fatalf("%d degrees, row %d: Orient %d, want %d", deg, j, got, want)
			}
			for _, p := range []*point{&a, &b, &c} { // the same wall, in whole millimetres
				p[0], p[1] = math.Round(p[0]*1000)/1000, math.Round(p[1]*1000)/1000
			}
			if got, want := allOrients(t, a, b, c), orientRat(a, b, c); got != want {
				t.Fatalf("%d degrees, wall in mm: Orient %d, want %d", deg, got, want)
			}
		}
	}
}

// referenceRows reads a table of the reference folder, which holds data that must
// not be copied here.
func referenceRows(t *testing.T, name string) [][]float64 {
	t.Helper()
	dir := os.Getenv("ISOFACET_REFERENCE")
	if dir == "" {
		t.Skip("ISOFACET_REFERENCE is not set: the reference folder is needed for " + name)
	}
	f, err := os.Open(filepath.Join(dir, "geometry", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows [][]float64
	for i, rec := range records[1:] {
		row := make([]float64, len(rec))
		for k, s := range rec {
			if row[k], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatalf("%s:%d:%d: %v", name, i+2, k+1, err)
			}
		}
		rows = append(rows, row)
	}
	return rows
}

// TestReferenceOrient: fixtures of npm robust-predicates 3.0.3 after Nanevski et
// al. 2001, signs derived again by rationals (reference/geometry).
func TestReferenceOrient(t *testing.T) {
	rows := referenceRows(t, "predicate_orient2d.csv")
	if len(rows) != 1000 {
		t.Fatalf("%d rows, want 1000", len(rows))
	}
	for i, r := range rows {
		if got := allOrients(t, point{r[0], r[1]}, point{r[2], r[3]}, point{r[4], r[5]}); got != int(r[6]) {
			t.Errorf("row %d: %d, want %v", i+2, got, r[6])
		}
	}
}

// TestReferenceInCircle: as TestReferenceOrient; the sign is that of the raw
// determinant, with a, b, c clockwise in 484 rows.
func TestReferenceInCircle(t *testing.T) {
	rows := referenceRows(t, "predicate_incircle.csv")
	if len(rows) != 1000 {
		t.Fatalf("%d rows, want 1000", len(rows))
	}
	for i, r := range rows {
		if got := allInCircles(t, point{r[0], r[1]}, point{r[2], r[3]}, point{r[4], r[5]}, point{r[6], r[7]}); got != int(r[8]) {
			t.Errorf("row %d: %d, want %v", i+2, got, r[8])
		}
	}
}

// TestReferenceNearCollinear: the grid of Kettner et al. 2008, fig. 2 (set-up from
// memory of the paper, signs exact).
func TestReferenceNearCollinear(t *testing.T) {
	for i, r := range referenceRows(t, "near_collinear_a.csv") {
		if got := allOrients(t, point{r[2], r[3]}, point{r[4], r[5]}, point{r[6], r[7]}); got != int(r[8]) {
			t.Errorf("row %d: %d, want %v", i+2, got, r[8])
		}
	}
}

func TestCompareXY(t *testing.T) {
	cases := []struct {
		a, b point
		want int
	}{
		{point{1, 2}, point{1, 2}, 0},
		{point{1, 2}, point{1, 3}, -1},
		{point{1, 2}, point{0, 3}, 1},
		{point{0, 1}, point{math.Copysign(0, -1), 1}, 0},
	}
	for _, c := range cases {
		if got := CompareXY(c.a, c.b); got != c.want {
			t.Errorf("CompareXY(%v, %v) = %d, want %d", c.a, c.b, got, c.want)
		}
		if got := CompareXY(c.b, c.a); got != -c.want {
			t.Errorf("CompareXY(%v, %v) = %d, want %d", c.b, c.a, got, -c.want)
		}
	}
}

// TestNoAllocations: nothing goes to the heap, whichever stage decides.
func TestNoAllocations(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	var sum Sum
	for range 200 {
		p := hardPoints(r, 4)
		n := testing.AllocsPerRun(10, func() {
			Orient(p[0], p[1], p[2])
			orientExpansion(p[0][0], p[0][1], p[1][0], p[1][1], p[2][0], p[2][1])
			InCircleTied(p[0], p[1], p[2], p[3])
			inCircleDifferences(p[0][0], p[0][1], p[1][0], p[1][1], p[2][0], p[2][1])
			inCircleExpansion(p[0][0], p[0][1], p[1][0], p[1][1], p[2][0], p[2][1], p[3][0], p[3][1])
			sum.Add(p[0][0])
			sum.AddProduct(p[1][0], p[1][1])
			sum.Value()
		})
		if n != 0 {
			t.Fatalf("%v allocations a run for %v, want 0", n, p)
		}
	}
}

func FuzzOrient(f *testing.F) {
	f.Add(0.5, 0.5, 12.0, 12.0, 24.0, 24.0)
	f.Add(430000.0, 5600000.0, 430000.1, 5600000.1, 430000.2, 5600000.2)
	f.Add(1e-60, 1e60, -1e60, 0.0, 1e9, 1e-9)
	f.Fuzz(func(t *testing.T, ax, ay, bx, by, cx, cy float64) {
		if !accepted(ax, ay, bx, by, cx, cy) {
			return
		}
		a, b, c := point{ax, ay}, point{bx, by}, point{cx, cy}
		if got, want := allOrients(t, a, b, c), orientRat(a, b, c); got != want {
			t.Fatalf("Orient(%v, %v, %v) = %d, want %d", a, b, c, got, want)
		}
	})
}

func FuzzInCircle(f *testing.F) {
	f.Add(0.0, 0.0, 1.0, 0.0, 1.0, 1.0, 0.0, 1.0)
	f.Add(430000.0, 5600000.0, 430000.1, 5600000.0, 430000.1, 5600000.1, 430000.0, 5600000.1)
	f.Add(-0.1, -0.1, 0.1, -0.1, 0.1, 0.1, -0.1, 0.1)
	f.Fuzz(func(t *testing.T, ax, ay, bx, by, cx, cy, dx, dy float64) {
		if !accepted(ax, ay, bx, by, cx, cy, dx, dy) {
			return
		}
		a, b, c, d := point{ax, ay}, point{bx, by}, point{cx, cy}, point{dx, dy}
		if got, want := allInCircles(t, a, b, c, d), inCircleRat(a, b, c, d); got != want {
			t.Fatalf("InCircle(%v, %v, %v, %v) = %d, want %d", a, b, c, d, got, want)
		}
		if orientRat(a, b, c) > 0 && d != a && d != b && d != c {
			if got, want := InCircleTied(a, b, c, d), inCircleRat(a, b, c, d); got == 0 || want != 0 && got != want {
				t.Fatalf("InCircleTied(%v, %v, %v, %v) = %d, exact value %d", a, b, c, d, got, want)
			}
		}
	})
}

// accepted reports whether all coordinates are of those that doc.go promises for.
func accepted(coords ...float64) bool {
	for _, c := range coords {
		if size := math.Abs(c); c != 0 && !(size >= 1e-60 && size <= 1e60) {
			return false
		}
	}
	return true
}
