package localgrid

import (
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"isofacet/io/readings"
)

// siteToGrid is a known similarity: turned 12.5 degrees, 100 ppm short, far away.
func siteToGrid(p orb.Point) orb.Point {
	s, c := math.Sincos(12.5 * math.Pi / 180)
	const k = 0.9999
	return orb.Point{431000 + k*(c*p[0]-s*p[1]), 5621000 + k*(s*p[0]+c*p[1])}
}

// A known turn and scale come back, to 1e-9 (closed form).
func TestKnownSimilarity(t *testing.T) {
	var pairs []Pair
	for _, p := range []orb.Point{{1000, 2000}, {1350, 2010}, {1340, 2440}, {990, 2400}, {1170, 2200}} {
		pairs = append(pairs, Pair{From: p, To: siteToGrid(p)})
	}
	for _, m := range []Model{Similarity, Affine} {
		f, err := Make(pairs, m)
		if err != nil {
			t.Fatal(err)
		}
		factor, turn := f.Scale()
		if math.Abs(factor-0.9999) > 1e-9 || math.Abs(turn-12.5) > 1e-9*180 || f.Largest > 2e-9 {
			t.Errorf("%v: scale %.12f, turned %.12f, residual %g", m, factor, turn, f.Largest)
		}
		want := siteToGrid(orb.Point{1200, 2300})
		if got := f.Transform.Of(orb.Point{1200, 2300}); math.Hypot(got[0]-want[0], got[1]-want[1]) > 4e-9 {
			t.Errorf("%v: a place comes to %v, want %v", m, got, want)
		}
	}
}

// The solution is that of an independent least-squares solver (gonum, QR).
func TestFitAgainstLeastSquares(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(4, 6).Draw(t, "pairs")
		var pairs []Pair
		number := rapid.Map(rapid.IntRange(-500000, 500000), func(mm int) float64 { return float64(mm) / 1000 })
		for range n {
			p := orb.Point{number.Draw(t, "x"), number.Draw(t, "y")}
			to := orb.Point{1.1*p[0] + 0.2*p[1] + number.Draw(t, "dx")/1000, -0.1*p[0] + 0.9*p[1] + number.Draw(t, "dy")/1000}
			pairs = append(pairs, Pair{From: p, To: to})
		}
		for _, m := range []Model{Similarity, Affine} {
			f, err := Make(pairs, m)
			if err != nil {
				t.Skip("no fit")
			}
			width := 4
			if m == Affine {
				width = 6
			}
			a, b := mat.NewDense(2*n, width, nil), mat.NewVecDense(2*n, nil)
			for i, p := range pairs {
				x, y := p.From[0], p.From[1]
				if m == Similarity {
					a.SetRow(2*i, []float64{x, -y, 1, 0})
					a.SetRow(2*i+1, []float64{y, x, 0, 1})
				} else {
					a.SetRow(2*i, []float64{x, y, 1, 0, 0, 0})
					a.SetRow(2*i+1, []float64{0, 0, 0, x, y, 1})
				}
				b.SetVec(2*i, p.To[0])
				b.SetVec(2*i+1, p.To[1])
			}
			var qr mat.QR
			qr.Factorize(a)
			var solution mat.VecDense
			if err := qr.SolveVecTo(&solution, false, b); err != nil {
				t.Skip("badly conditioned")
			}
			var at, r mat.VecDense
			at.MulVec(a, &solution)
			r.SubVec(b, &at)
			for i := range pairs {
				for k := range 2 {
					if d := f.Residuals[i][k] - r.AtVec(2*i+k); math.Abs(d) > 1e-8 {
						t.Fatalf("%v: residual %d is %v off", m, i, d)
					}
				}
				got := f.Transform.Of(pairs[i].From)
				if d := got[0] - at.AtVec(2*i); math.Abs(d) > 1e-8 {
					t.Fatalf("%v: place %d is %v off", m, i, d)
				}
			}
		}
	})
}

func TestWhatMakesNoFit(t *testing.T) {
	in := func(p ...orb.Point) (pairs []Pair) {
		for _, p := range p {
			pairs = append(pairs, Pair{From: p, To: p})
		}
		return pairs
	}
	for _, c := range []struct {
		pairs []Pair
		model Model
		says  string
	}{
		{in(orb.Point{1, 1}), Similarity, "at least 2"},
		{in(orb.Point{1, 1}, orb.Point{1, 1}), Similarity, "one place"},
		{in(orb.Point{1, 1}, orb.Point{2, 2}), Affine, "at least 3"},
		{in(orb.Point{1, 1}, orb.Point{2, 2}, orb.Point{3, 3}), Affine, "one line"},
		{make([]Pair, PairsMost+1), Similarity, "at most"},
	} {
		_, err := Make(c.pairs, c.model)
		if e, ok := errors.AsType[*Error](err); !ok || !strings.Contains(e.Error(), c.says) {
			t.Errorf("%v, want %q", err, c.says)
		}
	}
	two, err := Make(in(orb.Point{1, 1}, orb.Point{2, 5}), Similarity)
	if err != nil || two.Spare != 0 || two.Largest != 0 {
		t.Errorf("two pairs: %+v, %v", two, err)
	}
}

func TestReadPairs(t *testing.T) {
	pairs, err := ReadPairs(readings.FromBytes("p.csv", []byte("point;From X;From Y;To X;To Y\nCP1;1,5;2;3;4\n")))
	if err == nil {
		t.Errorf("a decimal comma is read without being declared: %v", pairs)
	}
	pairs, err = ReadPairs(readings.FromBytes("p.csv", []byte("# control\nto_easting,to_northing,from_easting,from_northing,id\n3,4,1.5,2,CP1\n")))
	if err != nil || len(pairs) != 1 || pairs[0] != (Pair{"CP1", 3, orb.Point{1.5, 2}, orb.Point{3, 4}}) {
		t.Errorf("%+v, %v", pairs, err)
	}
}

func FuzzReadPairs(f *testing.F) {
	f.Add("id,from_x,from_y,to_x,to_y\nA,1,2,3,4\nB,2,3,4,5\n")
	f.Add("from_x;from_y;to_x;to_y\n\"1;2;3;4\n")
	f.Fuzz(func(t *testing.T, text string) {
		pairs, err := ReadPairs(readings.FromBytes("p", []byte(text)))
		if err != nil || len(pairs) > 50 {
			return
		}
		_, _ = Make(pairs, Affine)
	})
}
