package contour

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// latticeSurface makes a surface of rows of values, the first row in the south, spaced by one.
func latticeSurface(t testing.TB, rows ...[]float64) *interp.Surface {
	var pts []orb.Point
	var z []float64
	for y, row := range rows {
		for x, v := range row {
			pts = append(pts, orb.Point{float64(x), float64(y)})
			z = append(z, v)
		}
	}
	return surfaceOf(t, pts, z, 1)
}

func linesOf(t testing.TB, s *interp.Surface, levels ...float64) ([]Line, Report) {
	t.Helper()
	var set Levels
	for _, z := range levels {
		set = append(set, levelAt(z))
	}
	lines, r, err := Lines(context.Background(), s, set, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if err := checkLines(s, set, lines, r); err != nil {
		t.Fatal(err)
	}
	return lines, r
}

func bandsOf(t testing.TB, s *interp.Surface, levels ...float64) []Band {
	t.Helper()
	var set Levels
	for _, z := range levels {
		set = append(set, levelAt(z))
	}
	bands, report, err := Bands(context.Background(), s, set, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if err := checkBands(s, set, bands, report); err != nil {
		t.Fatal(err)
	}
	return bands
}

// wantLines compares the points of lines.
func wantLines(t *testing.T, lines []Line, want ...orb.LineString) {
	t.Helper()
	if len(lines) != len(want) {
		t.Fatalf("%d lines %v, want %v", len(lines), lines, want)
	}
	for i := range want {
		if !slices.Equal(lines[i].Points, want[i]) {
			t.Errorf("line %d: %v, want %v", i, lines[i].Points, want[i])
		}
	}
}

// TestVectorT1 draws z = 2 + 0.03 x - 0.02 y, on random points (trade, section 11): every level is one straight line
// from rim to rim, perpendicular to the slope, the higher ground on its left.
func TestVectorT1(t *testing.T) {
	pts := pointsets.Uniform(500, 7)
	z := make([]float64, len(pts))
	for i := range pts {
		pts[i][0], pts[i][1] = 100*pts[i][0], 100*pts[i][1]
		z[i] = 2 + float64(0.03*pts[i][0]) - float64(0.02*pts[i][1])
	}
	lines, _ := linesOf(t, surfaceOf(t, pts, z, 1), 1, 1.5, 2, 2.5, 3, 3.5, 4)
	if len(lines) != 7 {
		t.Fatalf("%d lines, want 7", len(lines))
	}
	for _, l := range lines {
		if l.Closed || len(l.Points) < 3 {
			t.Errorf("level %v: closed %v, %d points", l.Level.Number, l.Closed, len(l.Points))
		}
		first, last := l.Points[0], l.Points[len(l.Points)-1]
		// Along (0.02, 0.03) is level; with (0.03, -0.02) upwards on its left it runs the other way.
		if dx, dy := last[0]-first[0], last[1]-first[1]; dx*0.03-dy*0.02 > 1e-11 || dx*-0.02+dy*-0.03 <= 0 {
			t.Errorf("level %v runs by (%v, %v)", l.Level.Number, dx, dy)
		}
		for _, p := range l.Points {
			if off := math.Abs(2+0.03*p[0]-0.02*p[1]-l.Level.Z) / 0.036; off > 1e-12 {
				t.Errorf("level %v: %v is off by %v", l.Level.Number, p, off)
			}
		}
	}
}

// TestVectorT7 draws 0.5 on the unit square with 0, 1, 0, 1 round its corners (trade, section 11). The tie rule takes the
// diagonal from (0, 1) to (1, 0), whose ends are both 1: two lines cut off the other corners, and do not cross.
func TestVectorT7(t *testing.T) {
	lines, _ := linesOf(t, latticeSurface(t, []float64{0, 1}, []float64{1, 0}), 0.5)
	wantLines(t, lines, orb.LineString{{0, 0.5}, {0.5, 0}}, orb.LineString{{1, 0.5}, {0.5, 1}})
	// The other way up the diagonal is the low one.
	lines, _ = linesOf(t, latticeSurface(t, []float64{1, 0}, []float64{0, 1}), 0.5)
	wantLines(t, lines, orb.LineString{{0.5, 0}, {0, 0.5}}, orb.LineString{{0.5, 1}, {1, 0.5}})
}

// TestVectorT12 draws 1.0 round a flat top of 2 x 2 in 4 x 4 (trade, section 11): one clean ring along its edge.
func TestVectorT12(t *testing.T) {
	s := latticeSurface(t, []float64{0, 0, 0, 0}, []float64{0, 1, 1, 0}, []float64{0, 1, 1, 0}, []float64{0, 0, 0, 0})
	lines, r := linesOf(t, s, 1)
	wantLines(t, lines, orb.LineString{{1, 1}, {2, 1}, {2, 2}, {1, 2}, {1, 1}})
	if !lines[0].Closed || lines[0].Depression || r.WithoutLength != 0 || lines[0].Length() != 4 {
		t.Errorf("%+v, %+v", lines[0], r)
	}
	bands := bandsOf(t, s, 1)
	if len(bands) != 2 || len(bands[0].Polygon) != 2 || !slices.Equal(bands[1].Polygon[0], orb.Ring(lines[0].Points)) {
		t.Errorf("bands %+v", bands)
	}
}

// TestDepression: round a hollow the line has the lower ground inside, clockwise.
func TestDepression(t *testing.T) {
	lines, _ := linesOf(t, latticeSurface(t, []float64{2, 2, 2}, []float64{2, 0, 2}, []float64{2, 2, 2}), 1)
	if len(lines) != 1 || !lines[0].Closed || !lines[0].Depression {
		t.Errorf("%+v", lines)
	}
}

// TestEqualCountsAsAbove: what a level that meets readings draws.
func TestEqualCountsAsAbove(t *testing.T) {
	t.Run("rim, lower inside", func(t *testing.T) {
		lines, _ := linesOf(t, latticeSurface(t, []float64{1, 1, 1}, []float64{0, 0, 0}), 1)
		wantLines(t, lines, orb.LineString{{2, 0}, {1, 0}, {0, 0}})
	})
	t.Run("rim, higher inside", func(t *testing.T) {
		lines, _ := linesOf(t, latticeSurface(t, []float64{1, 1, 1}, []float64{2, 2, 2}), 1)
		wantLines(t, lines)
	})
	t.Run("summit that just reaches", func(t *testing.T) {
		s := latticeSurface(t, []float64{0, 0, 0}, []float64{0, 1, 0}, []float64{0, 0, 0})
		lines, r := linesOf(t, s, 1)
		wantLines(t, lines)
		if r.WithoutLength != 1 {
			t.Errorf("%d lines without length, want 1", r.WithoutLength)
		}
		if bands := bandsOf(t, s, 1); len(bands) != 1 || len(bands[0].Polygon) != 1 {
			t.Errorf("bands %+v, want the lower one alone", bands)
		}
	})
	t.Run("ridge nowhere wide", func(t *testing.T) {
		lines, r := linesOf(t, latticeSurface(t, []float64{0, 0, 0, 0}, []float64{0, 1, 1, 0}, []float64{0, 0, 0, 0}), 1)
		wantLines(t, lines)
		if r.WithoutLength != 1 {
			t.Errorf("%d lines without length, want 1", r.WithoutLength)
		}
	})
	t.Run("hollow that just reaches down", func(t *testing.T) {
		lines, r := linesOf(t, latticeSurface(t, []float64{2, 2, 2}, []float64{2, 1, 2}, []float64{2, 2, 2}), 1)
		wantLines(t, lines)
		if r.WithoutLength != 0 {
			t.Errorf("%d lines without length, want none: nothing is below", r.WithoutLength)
		}
	})
	t.Run("plateau that touches the rim", func(t *testing.T) {
		// By the sides passed the line goes from rim to rim, at one place: it closes.
		pts := []orb.Point{{0, 0}, {2, 0}, {4, 0}, {1, 2}, {3, 2}, {0, 4}, {4, 4}}
		lines, _ := linesOf(t, surfaceOf(t, pts, []float64{0, 1, 0, 1, 1, 0, 0}, 1), 1)
		wantLines(t, lines, orb.LineString{{1, 2}, {2, 0}, {3, 2}, {1, 2}})
		if !lines[0].Closed || lines[0].Depression {
			t.Errorf("%+v", lines[0])
		}
	})
	t.Run("ridge between plateaus", func(t *testing.T) {
		s := latticeSurface(t,
			[]float64{0, 0, 0, 0, 0, 0, 0, 0},
			[]float64{0, 1, 1, 0, 0, 1, 1, 0},
			[]float64{0, 1, 1, 1, 1, 1, 1, 0},
			[]float64{0, 0, 0, 0, 0, 0, 0, 0})
		lines, _ := linesOf(t, s, 1)
		// One line, which runs along the ridge (2, 2) to (5, 2) on either side: but for the slope of the diagonals
		// (1, -1) the ridge would be alone.
		if len(lines) != 1 || !lines[0].Closed {
			t.Errorf("lines %+v", lines)
		}
		bands := bandsOf(t, s, 1)
		if bands[0].Lower != nil || bands[len(bands)-1].Upper != nil {
			t.Errorf("bands %+v", bands)
		}
	})
}

// TestBandsWithoutLevels: with no level in the range the surface is one polygon, with the neighbouring levels.
func TestBandsWithoutLevels(t *testing.T) {
	s := latticeSurface(t, []float64{1, 2}, []float64{2, 3})
	bands := bandsOf(t, s)
	if len(bands) != 1 || bands[0].Lower != nil || bands[0].Upper != nil || len(bands[0].Polygon[0]) != 5 {
		t.Errorf("%+v", bands)
	}
	bands = bandsOf(t, s, 0, 5, 10)
	if len(bands) != 1 || bands[0].Lower.Z != 0 || bands[0].Upper.Z != 5 {
		t.Errorf("%+v", bands)
	}
	line := surfaceOf(t, []orb.Point{{0, 0}, {1, 1}, {2, 2}}, []float64{0, 1, 2}, 1)
	if bands := bandsOf(t, line, 1); len(bands) != 0 {
		t.Errorf("bands of readings on one line: %+v", bands)
	}
	if lines, _ := linesOf(t, line, 1); len(lines) != 0 {
		t.Errorf("lines of readings on one line: %+v", lines)
	}
}

// TestCrossing: the same bits from both ends, an end at the level itself, monotone along the edge, and no further off
// than its comment says.
func TestCrossing(t *testing.T) {
	r := pointsets.Uniform(4000, 5)
	for i := 0; i+3 < len(r); i += 4 {
		a := orb.Point{430000 + 100*r[i][0], 5600000 + 100*r[i][1]}
		b := orb.Point{430000 + 100*r[i+1][0], 5600000 + 100*r[i+1][1]}
		za, zb := 100*r[i+2][0], 100*r[i+2][1]
		last := Crossing(a, za, b, zb, za)
		if last != a || Crossing(a, za, b, zb, zb) != b {
			t.Fatalf("%v %v %v %v: ends are not kept", a, za, b, zb)
		}
		for k := 1; k < 50; k++ {
			level := za + float64(k)/50*(zb-za)
			p := Crossing(a, za, b, zb, level)
			if q := Crossing(b, zb, a, za, level); q != p {
				t.Fatalf("%v from one side, %v from the other", p, q)
			}
			for axis := range p {
				if (p[axis]-last[axis])*(b[axis]-a[axis]) < 0 {
					t.Fatalf("%v after %v on the way from %v to %v", p, last, a, b)
				}
				// Against rational arithmetic, by the exact accumulator: f (zb - za) - a (zb - level) - b (level - za).
				var off exact.Sum
				off.AddProduct(p[axis], zb)
				off.AddProduct(-p[axis], za)
				off.AddProduct(-a[axis], zb)
				off.AddProduct(a[axis], level)
				off.AddProduct(-b[axis], level)
				off.AddProduct(b[axis], za)
				err := math.Abs(off.Value() / (zb - za))
				if most := ulp(p[axis])/2 + 0x1p-51*math.Abs(b[axis]-a[axis]); err > most {
					t.Fatalf("%v is off by %v, allowed %v", p, err, most)
				}
			}
			last = p
		}
	}
}

// TestCrossingsAreRounding counts proper crossings of lines of hard surfaces, and compares how deep they are with the
// bound in doc.go.
func TestCrossingsAreRounding(t *testing.T) {
	count, deepest := map[string]int{}, map[string]float64{}
	for _, name := range []string{"wall", "needles", "crowd", "near", "lattice"} {
		t.Run(name, func(t *testing.T) {
			eachOf(t, name, func(s *interp.Surface, levels Levels) error {
				lines, _, err := Lines(context.Background(), s, levels, Options{Workers: 1})
				if err != nil {
					return err
				}
				n, deep, err := countCrossings(s, lines)
				count[name] += n
				deepest[name] = max(deepest[name], deep)
				return err
			})
			t.Logf("%d crossings, the deepest %.2f of the bound", count[name], deepest[name])
		})
	}
	if count["lattice"] > 0 {
		t.Errorf("%d crossings on lattices of whole numbers, where nothing is rounded but places on sides", count["lattice"])
	}
	if count["needles"]+count["crowd"]+count["near"]+count["wall"] == 0 {
		t.Error("no surface with crossings: the test shows nothing")
	}
}

// countCrossings returns the number of pairs of segments that cross, and how deep at most, as a share of the bound.
func countCrossings(s *interp.Surface, lines []Line) (n int, deepest float64, err error) {
	_, _, largest := exactArea(s)
	longest := 0.0
	m := s.Mesh()
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		a, b := m.Position(m.Origin(h)), m.Position(m.Dest(h))
		longest = max(longest, math.Hypot(b[0]-a[0], b[1]-a[1]))
	}
	bound := 2 * math.Sqrt2 * (ulp(largest)/2 + 4*0x1p-53*longest)
	var all [][2]orb.Point
	for _, l := range lines {
		for k := 1; k < len(l.Points); k++ {
			all = append(all, [2]orb.Point{l.Points[k-1], l.Points[k]})
		}
	}
	for i, s := range all {
		for _, t := range all[:i] {
			if exact.Orient(s[0], s[1], t[0])*exact.Orient(s[0], s[1], t[1]) >= 0 ||
				exact.Orient(t[0], t[1], s[0])*exact.Orient(t[0], t[1], s[1]) >= 0 {
				continue
			}
			deep := min(distance(s[0], s[1], t[0]), distance(s[0], s[1], t[1]), distance(t[0], t[1], s[0]), distance(t[0], t[1], s[1]))
			n++
			deepest = max(deepest, deep/bound)
			if deep > bound {
				err = errors.New("a crossing deeper than rounding explains")
			}
		}
	}
	return n, deepest, err
}

// TestShortest lists what was left out.
func TestShortest(t *testing.T) {
	s := latticeSurface(t,
		[]float64{0, 0, 0, 0, 0, 0}, []float64{0, 3, 0, 0, 0, 0}, []float64{0, 0, 0, 2, 2, 0}, []float64{0, 0, 0, 2, 2, 0}, []float64{0, 0, 0, 0, 0, 0})
	levels := Levels{levelAt(1), levelAt(2.5)}
	all, _, err := Lines(context.Background(), s, levels, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != 3 {
		t.Fatalf("%d lines, want 3", len(all))
	}
	limit := all[1].Length() // the plateau's; the peak's two are shorter
	kept, r, err := Lines(context.Background(), s, levels, Options{Shortest: limit})
	if err != nil {
		t.Fatal(err)
	}
	if !sameLines(kept, all[1:2]) || len(r.TooShort) != 2 || r.Lines != 1 {
		t.Fatalf("kept %+v, report %+v", kept, r)
	}
	for i, short := range r.TooShort {
		l := all[2*i]
		if want := (Short{l.Level, l.Length(), l.Closed, l.Points[0]}); short != want {
			t.Errorf("left out %+v, want %+v", short, want)
		}
	}
}

// TestRefusals: too many pieces, an end of the context, an error of the receiver.
func TestRefusals(t *testing.T) {
	pts := pointsets.Uniform(2000, 3)
	s := surfaceOf(t, pts, pointsets.Heights(pts), 0)
	levels := Levels{levelAt(96), levelAt(99), levelAt(100), levelAt(102)}
	_, r, err := Lines(context.Background(), s, levels, Options{})
	if err != nil {
		t.Fatal(err)
	}
	var many *PiecesError
	if _, _, err := Lines(context.Background(), s, levels, Options{PiecesMost: r.Pieces - 1}); !errors.As(err, &many) || many.Pieces != r.Pieces || !errors.Is(err, ErrTooMany) {
		t.Errorf("error %v, want %d pieces refused", err, r.Pieces)
	}
	if _, _, err := Lines(context.Background(), s, levels, Options{PiecesMost: r.Pieces}); err != nil {
		t.Error(err)
	}
	for _, when := range []int64{0, 1} {
		ctx, cancel := context.WithCancel(context.Background())
		opt := Options{Workers: 2, unitPieces: 10, Progress: func(done, total int64) {
			if total != r.Pieces || done > total {
				t.Errorf("progress %d of %d, want of %d", done, total, r.Pieces)
			}
			cancel()
		}}
		if when == 0 {
			cancel()
		}
		if lines, _, err := Lines(ctx, s, levels, opt); !errors.Is(err, context.Canceled) || lines != nil {
			t.Errorf("error %v with %d lines, want a cancelled context", err, len(lines))
		}
		if bands, _, err := Bands(ctx, s, levels, opt); !errors.Is(err, context.Canceled) || bands != nil {
			t.Errorf("error %v with %d bands, want a cancelled context", err, len(bands))
		}
		cancel()
	}
	stop := errors.New("stop")
	calls := 0
	_, err = EachLine(context.Background(), s, levels, Options{}, func(Line) error { calls++; return stop })
	if !errors.Is(err, stop) || calls != 1 {
		t.Errorf("error %v after %d calls, want the receiver's after 1", err, calls)
	}
}
