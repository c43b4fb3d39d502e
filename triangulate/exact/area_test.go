package exact

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// TestArea2RelativeError: below 2^-51 of the exact area on every kind of hard
// points, and below 2^-58 in two parts; slivers on which first-order corrections vanish are among them.
func TestArea2RelativeError(t *testing.T) {
	r := rand.New(rand.NewPCG(17, 18))
	worst, worstParts, thin := 0.0, 0.0, 0
	try := func(a, b, c point) {
		got := Area2(a[0], a[1], b[0], b[1], c[0], c[1])
		one := big.NewRat(1, 1)
		want := ratDet([][]*big.Rat{{rat(a[0]), rat(a[1]), one}, {rat(b[0]), rat(b[1]), one}, {rat(c[0]), rat(c[1]), one}})
		if want.Sign() == 0 || got == 0 {
			if got != 0 || want.Sign() != 0 {
				t.Fatalf("Area2(%v, %v, %v) = %v, want %v", a, b, c, got, want.FloatString(20))
			}
			return
		}
		e := new(big.Rat).Sub(rat(got), want)
		rel, _ := e.Quo(e, want).Float64()
		worst = max(worst, math.Abs(rel))
		area, rest := Area2Parts(a[0], a[1], b[0], b[1], c[0], c[1])
		if area+rest != area {
			t.Fatalf("Area2Parts(%v, %v, %v): %v is not %v rounded", a, b, c, area, area+rest)
		}
		e.Sub(e.Add(rat(area), rat(rest)), want)
		rel, _ = e.Quo(e, want).Float64()
		worstParts = max(worstParts, math.Abs(rel))
		if math.Abs(got) < 0x1p-40*math.Abs((b[0]-a[0])*(c[1]-a[1])) {
			thin++
		}
	}
	for range 20000 {
		p := hardPoints(r, 3)
		try(p[0], p[1], p[2])
		// A sliver through the origin: the third corner beside the line of the two.
		u, v := r.Float64()-0.5, r.Float64()-0.5
		s := math.Ldexp(r.Float64(), -r.IntN(150))
		try(point{u, v}, point{-u, -v}, point{s * u, math.Nextafter(s*v, 1)})
	}
	t.Logf("largest relative error %.2f x 2^-53, in parts %.2f x 2^-58; %d thin slivers", worst*(1<<53), worstParts*(1<<58), thin)
	if worst >= 0x1p-51 {
		t.Errorf("relative error %g, want below 2^-51", worst)
	}
	if worstParts >= 0x1p-58 {
		t.Errorf("relative error in parts %g, want below 2^-58", worstParts)
	}
	if thin < 5000 {
		t.Errorf("only %d thin slivers: the case is not tested", thin)
	}
}
