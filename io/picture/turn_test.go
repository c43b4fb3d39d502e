package picture

import (
	"math"
	"testing"
)

func TestTurn(t *testing.T) {
	for a := -360.0; a <= 720; a += 0.37 {
		s, c := math.Sincos(math.Mod(a, 360) * math.Pi / 180)
		if e, n := turn(a); math.Abs(e-s) > 4e-15 || math.Abs(n-c) > 4e-15 {
			t.Fatalf("%v degrees: %v, %v; want %v, %v", a, e, n, s, c)
		}
	}
	for a, want := range map[float64][2]float64{0: {0, 1}, 90: {1, 0}, 180: {0, -1}, 270: {-1, 0}, 360: {0, 1}} {
		if e, n := turn(a); e != want[0] || n != want[1] {
			t.Errorf("%v degrees: %v, %v; want %v", a, e, n, want)
		}
	}
}
