package rule

import (
	"context"
	"errors"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/interp/profile"
	"isofacet/triangulate"
)

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: %v, want %v", what, got, want)
	}
}

// Contour areas of two reservoirs. Source: question-and-answer pages of civil
// engineers, where 773 890 and 3 464 778 m3 are printed; prismoidal and conic by the
// formulas.
func TestReservoirs(t *testing.T) {
	first := []float64{1800, 7650, 25360, 57870, 85420, 123570, 172350}
	at := []float64{100, 102, 104, 106, 108, 110, 112}
	v, err := AverageEndArea(at, first)
	if err != nil || v != 773890 {
		t.Errorf("average end area %v, %v", v, err)
	}
	v, averaged, err := Prismoidal(at, first)
	if err != nil || averaged != 0 {
		t.Errorf("%d reaches averaged, %v", averaged, err)
	}
	near(t, "prismoidal", v, 768046.666667, 1e-11)
	c, err := Conic(at, first)
	if err != nil {
		t.Error(err)
	}
	near(t, "conic", c, 765881.20181, 1e-11)

	second := []float64{350, 12500, 45000, 154100, 272000, 383500, 575302}
	at = []float64{440, 443, 446, 449, 452, 455, 458}
	if v, err = AverageEndArea(at, second); err != nil || v != 3464778 {
		t.Errorf("average end area %v, %v", v, err)
	}
	if c, err = Conic(at, second); err != nil {
		t.Error(err)
	}
	near(t, "conic", c, 3416350.96752, 1e-11)
	// The printed columns, level by level.
	for i, want := range []float64{0, 14941.6500663, 96158.7325176, 378532.377808, 1009364.39778, 1987838.08091, 3416350.96752} {
		v, err := Conic(at[:i+1], second[:i+1])
		if err != nil {
			t.Error(err)
		}
		near(t, "conic so far", v, want, 1e-11)
	}
}

// A pyramid of 100 m2, 30 m high: 1,000 m3, by average end areas 1,500. Source:
// elementary geometry.
func TestPyramid(t *testing.T) {
	if v, err := AverageEndArea([]float64{0, 30}, []float64{100, 0}); err != nil || v != 1500 {
		t.Error(v, err)
	}
	if v, err := Conic([]float64{0, 30}, []float64{100, 0}); err != nil || v != 1000 {
		t.Error(v, err)
	}
	if v, n, err := Prismoidal([]float64{0, 15, 30}, []float64{100, 25, 0}); err != nil || v != 1000 || n != 0 {
		t.Error(v, n, err)
	}
	// One reach is left over.
	if v, n, err := Prismoidal([]float64{0, 15, 30, 40}, []float64{100, 25, 0, 10}); err != nil || v != 1050 || n != 1 {
		t.Error(v, n, err)
	}
}

// Spot heights dug to 100 m and a pad filled to 90 ft. Source: a question-and-answer
// page (first cell 12.775 m deep), and engineering examination practice (199 yd3).
func TestFourCorners(t *testing.T) {
	spots := [][]float64{{10.24, 12.15, 14.21}, {12.96, 15.75, 16.32}, {16.98, 20.03, 15.34}}
	v, err := FourCorners(spots, 100)
	if err != nil {
		t.Error(err)
	}
	near(t, "spots", v, 6067.25, 1e-14)
	v, err = FourCorners([][]float64{spots[0][:2], spots[1][:2]}, 1)
	if err != nil {
		t.Error(err)
	}
	near(t, "first cell", v, 12.775, 1e-14)
	if v, err = FourCorners([][]float64{{2.4, 2.4}, {2.4, 1.4}}, 2500); err != nil {
		t.Error(err)
	}
	near(t, "pad", v/27, 199.074074, 1e-8)
}

func TestErrors(t *testing.T) {
	for _, c := range []struct{ at, areas []float64 }{
		{[]float64{0, 1}, []float64{1}},
		{[]float64{0, 0}, []float64{1, 2}},
		{[]float64{0, 1}, []float64{1, -2}},
		{[]float64{0, 1}, []float64{1, math.NaN()}},
	} {
		_, err1 := AverageEndArea(c.at, c.areas)
		_, err2 := Conic(c.at, c.areas)
		_, _, err3 := Prismoidal(c.at, c.areas)
		for _, err := range []error{err1, err2, err3} {
			if !errors.Is(err, ErrSections) {
				t.Errorf("%v: %v", c, err)
			}
		}
	}
	if _, err := FourCorners([][]float64{{1, 2}, {3}}, 1); !errors.Is(err, ErrSections) {
		t.Error(err)
	}
}

// Sections of a pyramid over level ground: base 20 x 20, 6 high. Across its middle the
// section is a triangle of 60; each is that of the closed form. Source: elementary
// geometry.
func TestSections(t *testing.T) {
	pts := []orb.Point{{0, 0}, {20, 0}, {20, 20}, {0, 20}, {10, 10}, {-10, 5}, {30, 5}}
	m, err := triangulate.Constrained(context.Background(), pts, []triangulate.Segment{{From: 0, To: 1}, {From: 1, To: 2}, {From: 2, To: 3}, {From: 3, To: 0}}, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, []float64{0, 0, 0, 0, 6, 0, 0})
	if err != nil {
		t.Fatal(err)
	}
	line, err := profile.NewAlignment([]orb.Point{{0, 10}, {20, 10}}, 0)
	if err != nil {
		t.Fatal(err)
	}
	list, err := Sections(context.Background(), s, line, 2.5, 12, 12, 0)
	if err != nil {
		t.Fatal(err)
	}
	var at, fill []float64
	for _, x := range list {
		at, fill = append(at, x.Station), append(fill, x.Fill)
		if x.Cut != 0 {
			t.Errorf("cut %v at %v", x.Cut, x.Station)
		}
	}
	if len(list) != 9 || list[8].Station != 20 {
		t.Fatalf("%d sections", len(list))
	}
	// At distance d from the middle the pyramid is 6 min(1-|y|/10, 1-d/10) high: a
	// plateau 2d wide with slopes beside it.
	for _, x := range list {
		d := math.Abs(x.Station - 10)
		top := 6 * (1 - d/10)
		want := top*2*d + top*(10-d)
		if math.Abs(x.Fill-want) > 1e-12 {
			t.Errorf("at %v: %v, want %v", x.Station, x.Fill, want)
		}
	}
	average, err := AverageEndArea(at, fill)
	if err != nil {
		t.Error(err)
	}
	prismoidal, _, err := Prismoidal(at, fill)
	if err != nil {
		t.Error(err)
	}
	near(t, "prismoidal", prismoidal, 800, 1e-12)
	if !(average < 800 && average > 780) {
		t.Errorf("average end area %v", average)
	}
}
