package rule

import (
	"errors"
	"math"
	"testing"
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
