package accuracy

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
	"pgregory.net/rapid"
)

// near fails unless got is want within tolerance.
func near(t interface {
	Helper()
	Errorf(string, ...any)
}, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s is %v, want %v within %v", name, got, want, tolerance)
	}
}

// annexD is the worked example of annex D of the ASPRS Positional Accuracy
// Standards for Digital Geospatial Data, edition 1, version 1.0, November 2014
// (PE&RS 81(3), 2015, A1-A26): measured easting, northing, height, then surveyed
// ones. From memory; that means, errors and both figures at 95 % follow from the
// points supports the recollection. Residuals are measured less surveyed.
const annexD = `359584.394 5142449.934 477.127 359584.534 5142450.004 477.198
359872.190 5147939.180 412.406 359872.290 5147939.280 412.396
395893.089 5136979.824 487.292 395893.072 5136979.894 487.190
359927.194 5151084.129 393.591 359927.264 5151083.979 393.691
372737.074 5151675.999 451.305 372736.944 5151675.879 451.218`

func annexDResiduals(t *testing.T) (e, n, h []float64) {
	for line := range strings.SplitSeq(annexD, "\n") {
		var v [6]float64
		for i, f := range strings.Fields(line) {
			var err error
			if v[i], err = strconv.ParseFloat(f, 64); err != nil {
				t.Fatal(err)
			}
		}
		e, n, h = append(e, v[0]-v[3]), append(n, v[1]-v[4]), append(h, v[2]-v[5])
	}
	return e, n, h
}

// TestWorkedExampleOf2014 comes to the printed digits, and to figures computed from
// the points by other means (NumPy) where the print is not remembered.
func TestWorkedExampleOf2014(t *testing.T) {
	e, n, h := annexDResiduals(t)
	east, north, up := Describe(e), Describe(n), Describe(h)
	horizontal, alike := NSSDAHorizontal(east.RMSE, north.RMSE)
	if !alike {
		t.Error("the errors along the axes are alike, 0.102 and 0.106")
	}
	for _, c := range []struct {
		name    string
		got     float64
		printed string
	}{
		{"mean E", east.Mean, "-0.033"}, {"mean N", north.Mean, "0.006"}, {"mean H", up.Mean, "0.006"},
		{"RMSE E", east.RMSE, "0.102"}, {"RMSE N", north.RMSE, "0.106"}, {"RMSE H", up.RMSE, "0.081"},
		{"radial", Radial(east.RMSE, north.RMSE), "0.147"},
		{"horizontal at 95 %", horizontal, "0.255"}, {"vertical at 95 %", NSSDAVertical(up.RMSE), "0.160"},
	} {
		if got := strconv.FormatFloat(c.got, 'f', 3, 64); got != c.printed {
			t.Errorf("%s is %s, printed %s", c.name, got, c.printed)
		}
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"std E", east.StdDev, 0.10767451}, {"std N", north.StdDev, 0.11886968}, {"std H", up.StdDev, 0.09077059},
		{"g1 E", east.Skewness, 0.63221565}, {"g1 N", north.Skewness, 0.39914653}, {"g1 H", up.Skewness, -0.071666367},
		{"G1 E", east.SampleSkewness, 0.94245144}, {"G1 N", north.SampleSkewness, 0.59501252}, {"G1 H", up.SampleSkewness, -0.10683391},
		{"g2 E", east.ExcessKurtosis, -0.99897558}, {"g2 N", north.ExcessKurtosis, -1.7606086}, {"g2 H", up.ExcessKurtosis, -1.6694438},
		{"G2 E", east.SampleExcessKurtosis, 0.0040976624}, {"G2 N", north.SampleExcessKurtosis, -3.0424343}, {"G2 H", up.SampleExcessKurtosis, -2.6777752},
	} {
		near(t, c.name, c.got, c.want, 1e-6)
	}
}

// Figures of one quality are what the definitions say, whatever the residuals: gonum
// works them out in another way.
func TestDescribeAgainstGonum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := rapid.SliceOfN(rapid.Float64Range(-3, 3), 4, 60).Draw(t, "residuals")
		s := Describe(r)
		mean, std := stat.MeanStdDev(r, nil)
		near(t, "mean", s.Mean, mean, 1e-13)
		near(t, "standard deviation", s.StdDev, std, 1e-12)
		if std < 1e-3 {
			return // higher moments are lost in rounding
		}
		near(t, "G1", s.SampleSkewness, stat.Skew(r, nil), 1e-6)
		near(t, "G2", s.SampleExcessKurtosis, stat.ExKurtosis(r, nil), 1e-5)
		near(t, "RMSE", float64(s.RMSE*s.RMSE), stat.Moment(2, r, nil)+mean*mean, 1e-12)

		shuffled := slices.Clone(r)
		slices.Reverse(shuffled)
		if Describe(shuffled) != s {
			t.Error("the order of the residuals shows")
		}
	})
}

// Twenty-five checkpoints that are all 0.05 off: mean and error 0.05, 0.098 at 95 %.
func TestAllAlike(t *testing.T) {
	r := slices.Repeat([]float64{0.05}, 25)
	s := Describe(r)
	if s.Count != 25 || s.Mean != 0.05 || s.Median != 0.05 || s.Percentile95 != 0.05 || s.StdDev != 0 {
		t.Errorf("statistics are %+v", s)
	}
	near(t, "RMSE", s.RMSE, 0.05, 1e-17)
	near(t, "at 95 %", NSSDAVertical(s.RMSE), 0.098, 1e-16)
	if !math.IsNaN(s.Skewness) || !math.IsNaN(s.ExcessKurtosis) {
		t.Errorf("equal residuals have skewness %v and kurtosis %v", s.Skewness, s.ExcessKurtosis)
	}
}

// What few residuals do not allow is not a number.
func TestFew(t *testing.T) {
	if s := Describe(nil); s.Count != 0 || !math.IsNaN(s.Mean) || !math.IsNaN(s.RMSE) || !math.IsNaN(s.Percentile95) {
		t.Errorf("of none: %+v", s)
	}
	if s := Describe([]float64{-2}); s.Mean != -2 || s.RMSE != 2 || s.MeanSize != 2 || s.Percentile95 != 2 || !math.IsNaN(s.StdDev) {
		t.Errorf("of one: %+v", s)
	}
	if s := Describe([]float64{1, 3}); s.StdDev != math.Sqrt2 || s.Median != 2 || !math.IsNaN(s.Skewness) {
		t.Errorf("of two: %+v", s)
	}
	if s := Describe([]float64{1, 2, 9}); math.IsNaN(s.SampleSkewness) || !math.IsNaN(s.SampleExcessKurtosis) {
		t.Errorf("of three: %+v", s)
	}
}

// TestFactors: the printed factors are the roundings of what they stand for. Normal
// quantiles come from gonum; the circular ones are square roots of -2 ln(1-p).
func TestFactors(t *testing.T) {
	circular := math.Sqrt(-2 * math.Log(0.05))
	near(t, "1.9600", Factor95, distuv.UnitNormal.Quantile(0.975), 5e-5)
	near(t, "2.4477", FactorCircularAxis, circular, 5e-5)
	near(t, "1.7308", Factor95Circular, circular/math.Sqrt2, 5e-5)
	// Half an interval holds 90 %: interval = 2 x 1.6449 x error.
	near(t, "3.2898", IntervalNMAS(1), 2*distuv.UnitNormal.Quantile(0.95), 1.5e-4)
}

// TestClasses2014: the table of vertical classes of the standard (from memory), in
// centimetres.
func TestClasses2014(t *testing.T) {
	for _, c := range []struct{ rmse, nva, vva, within, between, most, interval1990, intervalNMAS float64 }{
		{1, 1.96, 3, 0.6, 0.8, 1.6, 3, 3.2898},
		{2.5, 4.9, 7.5, 1.5, 2, 4, 7.5, 8.2245},
		{5, 9.8, 15, 3, 4, 8, 15, 16.449},
		{10, 19.6, 30, 6, 8, 16, 30, 32.898},
		{15, 29.4, 45, 9, 12, 24, 45, 49.347},
		{20, 39.2, 60, 12, 16, 32, 60, 65.796},
		{33.3, 65.268, 99.9, 19.98, 26.64, 53.28, 99.9, 109.55},
		{66.7, 130.732, 200.1, 40.02, 53.36, 106.72, 200.1, 219.43},
		{100, 196, 300, 60, 80, 160, 300, 328.98},
		{333.3, 653.268, 999.9, 199.98, 266.64, 533.28, 999.9, 1096.49},
	} {
		got := Class2014(c.rmse)
		for _, v := range [][2]float64{
			{got.RMSE, c.rmse}, {got.NonVegetated95, c.nva}, {got.Vegetated95, c.vva}, {got.WithinSwath, c.within},
			{got.BetweenSwaths, c.between}, {got.BetweenSwathsMost, c.most}, {Interval1990(c.rmse), c.interval1990},
		} {
			near(t, "class "+strconv.FormatFloat(c.rmse, 'g', -1, 64), v[0], v[1], 1e-12*c.most)
		}
		near(t, "interval of 1947", IntervalNMAS(c.rmse), c.intervalNMAS, 5e-6*c.intervalNMAS)
	}
}

func TestCombined(t *testing.T) {
	if got := Combined(0.3, 0.4); got != 0.5 {
		t.Errorf("0.3 and 0.4 make %v", got)
	}
	if got := Combined(0.07, 0); got != 0.07 {
		t.Errorf("without an error of its own: %v", got)
	}
}

func TestUsualInterval(t *testing.T) {
	for _, c := range [][2]float64{
		{0.15, 0.2}, {0.2, 0.2}, {0.201, 0.5}, {0.51, 1}, {1, 1}, {1.0001, 2}, {3.2898, 5}, {5.1, 10}, {0.0301, 0.05}, {700, 1000}, {1e-9, 1e-9},
	} {
		if got := Usual(c[0]); got != c[1] {
			t.Errorf("%v is rounded up to %v, want %v", c[0], got, c[1])
		}
	}
	for _, v := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if got := Usual(v); !math.IsNaN(got) {
			t.Errorf("%v is rounded up to %v", v, got)
		}
	}
}

func TestAsked2023(t *testing.T) {
	for _, c := range []struct {
		area float64
		want int
	}{{0.14, 30}, {1000, 30}, {1000.5, 40}, {2000, 40}, {9999, 120}, {50000, 120}} {
		if got := Asked2023(c.area); got != c.want {
			t.Errorf("%v square kilometres ask for %d, want %d", c.area, got, c.want)
		}
	}
}

func TestSpread(t *testing.T) {
	area := orb.Bound{Max: orb.Point{60, 80}}
	even := []orb.Point{{10, 10}, {50, 10}, {10, 70}, {50, 70}, {30, 40}}
	s := SpreadOf(even, area)
	if s.Quadrants != [4]int{1, 1, 1, 2} || s.Diagonal != 100 || math.Abs(s.Closest-math.Hypot(20, 30)) > 1e-12 || !s.Even() {
		t.Errorf("spread is %+v, even %v", s, s.Even())
	}
	if s := SpreadOf(append(even, orb.Point{30, 45}), area); s.Closest != 5 || s.Even() {
		t.Errorf("two close to each other: %+v, even %v", s, s.Even())
	}
	if s := SpreadOf(even[:3], area); s.Even() {
		t.Error("a quadrant without any counts as even")
	}
	if s := SpreadOf(nil, area); s.Even() || !math.IsNaN(s.Closest) {
		t.Error("none count as even")
	}
}
