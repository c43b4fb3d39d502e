package interp

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// bigArctan returns atan(q), 0 <= q <= 1, by halving the angle until the series
// converges fast.
func bigArctan(q *big.Float) *big.Float {
	const prec = 300
	f := func(x float64) *big.Float { return new(big.Float).SetPrec(prec).SetFloat64(x) }
	x := new(big.Float).SetPrec(prec).Set(q)
	const halvings = 8
	for range halvings { // atan x = 2 atan(x / (1 + sqrt(1+x²)))
		d := f(0).Mul(x, x)
		d.Add(d, f(1))
		d.Sqrt(d)
		x.Quo(x, d.Add(d, f(1)))
	}
	sum, power, square := f(0), f(0).Set(x), f(0).Mul(x, x)
	for n := 1; n < 60; n += 2 {
		t := f(0).Quo(power, f(float64(n)))
		if n%4 == 3 {
			t.Neg(t)
		}
		sum.Add(sum, t)
		power.Mul(power, square)
	}
	return sum.Mul(sum, f(1<<halvings))
}

// inDegrees multiplies by 180/pi, with pi from Machin's formula.
func inDegrees(rad *big.Float) *big.Float {
	f := func(x float64) *big.Float { return new(big.Float).SetPrec(300).SetFloat64(x) }
	quarter := f(4)
	quarter.Mul(quarter, bigArctan(f(0).Quo(f(1), f(5))))
	quarter.Sub(quarter, bigArctan(f(0).Quo(f(1), f(239))))
	d := f(45)
	d.Quo(d, quarter)
	return d.Mul(d, rad)
}

func TestArctanTable(t *testing.T) {
	for k, got := range arctanTable {
		want, _ := inDegrees(bigArctan(big.NewFloat(float64(k) / 16))).Float64()
		if got != want {
			t.Errorf("atan(%d/16) = %v, want %v", k, got, want)
		}
	}
}

// TestArctanError: within two ulp of the result, all over the range.
func TestArctanError(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	worst := 0.0
	for i := range 3000 {
		q := r.Float64()
		if i%3 == 0 {
			q = float64(i%16)/16 + 1.0/32 + (q-0.5)*1e-12 // where the table changes
		}
		got := arctanDegrees(q)
		e := new(big.Float).SetPrec(300).SetFloat64(got)
		e.Sub(e, inDegrees(bigArctan(new(big.Float).SetPrec(300).SetFloat64(q))))
		off, _ := e.Float64()
		worst = max(worst, math.Abs(off)/ulp(got))
	}
	t.Logf("largest error %.3f ulp", worst)
	if worst > 2 {
		t.Errorf("largest error %.3f ulp, want at most 2", worst)
	}
	for _, q := range []float64{1e-300, 1e-9, 0x1p-30} {
		near(t, "small angle", arctanDegrees(q)/q, 180/math.Pi, 1e-13)
	}
}

// TestDownhillAzimuth: against the library, to the promised 1e-13 degrees, and
// exactly in the eight directions of the compass.
func TestDownhillAzimuth(t *testing.T) {
	compass := []struct{ gx, gy, want float64 }{
		{0, -1, 0}, {-1, -1, 45}, {-2, 0, 90}, {-1, 1, 135}, {0, 3, 180}, {0.1, 0.1, 225}, {1, 0, 270}, {1, -1, 315},
		{1e-30, -1, 0}, // just west of north: not 360
	}
	for _, c := range compass {
		if got := DownhillAzimuth(c.gx, c.gy); got != c.want {
			t.Errorf("DownhillAzimuth(%v, %v) = %v, want %v", c.gx, c.gy, got, c.want)
		}
	}
	inf, nan := math.Inf(1), math.NaN()
	for _, g := range [][2]float64{{0, 0}, {math.Copysign(0, -1), 0}, {nan, 1}, {1, nan}, {inf, inf}} {
		if got := DownhillAzimuth(g[0], g[1]); !math.IsNaN(got) {
			t.Errorf("DownhillAzimuth(%v, %v) = %v, want NaN", g[0], g[1], got)
		}
	}
	r := rand.New(rand.NewPCG(15, 16))
	for range 100000 {
		gx := (r.Float64() - 0.5) * math.Pow(10, r.Float64()*20-10)
		gy := (r.Float64() - 0.5) * math.Pow(10, r.Float64()*20-10)
		want := math.Atan2(-gx, -gy) * (180 / math.Pi)
		if want < 0 {
			want += 360
		}
		got := DownhillAzimuth(gx, gy)
		if got < 0 || got >= 360 {
			t.Fatalf("DownhillAzimuth(%v, %v) = %v, want from 0 to below 360", gx, gy, got)
		}
		if off := math.Abs(got - want); off > 1e-13 && off < 359 {
			t.Fatalf("DownhillAzimuth(%v, %v) = %.15g, want %.15g", gx, gy, got, want)
		}
	}
}
