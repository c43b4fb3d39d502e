package exact

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// Views2 gives the bits of Area2, with differences that have tails and that have none.
func TestViews2(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		number := rapid.OneOf(rapid.Float64Range(-1e7, 1e7), rapid.Float64Range(-1e-3, 1e-3), rapid.Map(rapid.IntRange(-8, 8), func(k int) float64 { return float64(k) / 4 }))
		var c [9]float64
		for i := range c {
			c[i] = number.Draw(t, "coordinate")
		}
		if rapid.Bool().Draw(t, "near") { // all but on one line as seen from above
			c[6], c[7] = c[0]+float64((c[3]-c[0])/3), c[1]+float64((c[4]-c[1])/3)
		}
		zy, xz, xy := Views2(c[0], c[1], c[2], c[3], c[4], c[5], c[6], c[7], c[8])
		want := [3]float64{Area2(c[2], c[1], c[5], c[4], c[8], c[7]), Area2(c[0], c[2], c[3], c[5], c[6], c[8]), Area2(c[0], c[1], c[3], c[4], c[6], c[7])}
		for i, got := range []float64{zy, xz, xy} {
			if math.Float64bits(got) != math.Float64bits(want[i]) {
				t.Fatalf("view %d: %v, Area2 %v", i, got, want[i])
			}
		}
	})
}
