package picture

import (
	"math"
	"testing"
)

// The oracle is the published formula with package math.
func TestLightOfBytes(t *testing.T) {
	for i, got := range lightOf {
		b := float64(i) / 255
		want := b / 12.92
		if b > 0.04045 {
			want = math.Pow((b+0.055)/1.055, 2.4)
		}
		if math.Abs(float64(got)-fullLight*want) > 0.5+1e-6 {
			t.Errorf("light of byte %d: %d, want %v", i, got, fullLight*want)
		}
	}
	if lightOf[0] != 0 || lightOf[255] != fullLight {
		t.Errorf("ends %d, %d", lightOf[0], lightOf[255])
	}
}

func TestBytesOfLight(t *testing.T) {
	table := bytesOf()
	for i, light := range lightOf {
		if int(table[light]) != i && lightOf[table[light]] != light {
			t.Errorf("byte %d comes back as %d", i, table[light])
		}
	}
	for light, b := range table {
		miss := math.Abs(float64(light) - float64(lightOf[b]))
		for _, other := range []int{int(b) - 1, int(b) + 1} {
			if other >= 0 && other < 256 && math.Abs(float64(light)-float64(lightOf[other])) < miss {
				t.Fatalf("light %d is byte %d, and nearer to %d", light, b, other)
			}
		}
	}
}

// lightness is L* of CIE 1976 (from memory; the cube root holds above 0.008856).
func lightness(c rgb) float64 {
	y := float64(c.lights().brightness()) / fullLight
	if y <= 216.0/24389 {
		return y * 24389 / 27
	}
	return 116*math.Cbrt(y) - 16
}

func TestHigherIsLighter(t *testing.T) {
	before := uint32(0)
	for i := range tintSteps + 1 {
		b := heightTint.light(uint32(i), tintSteps).brightness()
		if b <= before {
			t.Fatalf("step %d of %d is no lighter than the one before: %d, %d", i, tintSteps, b, before)
		}
		before = b
	}
	// In bytes too, and evenly enough: no tenth of the range has less than half of its share of the lightness.
	l := func(i int) float64 {
		r, g, b := heightTint.at(uint32(i), 100)
		return lightness(rgb{r, g, b})
	}
	span := l(100) - l(0)
	for i := 1; i <= 100; i++ {
		if l(i) <= l(i-1) {
			t.Errorf("at %d%% the colour is no lighter than before: %v, %v", i, l(i), l(i-1))
		}
		if i >= 10 && l(i)-l(i-10) < span/20 {
			t.Errorf("from %d%% to %d%% lightness rises by %.1f of %.1f", i-10, i, l(i)-l(i-10), span)
		}
	}
	// Room for shading at both ends.
	if l(0) < 30 || l(100) > 96 || span < 45 {
		t.Errorf("lightness from %.1f to %.1f", l(0), l(100))
	}
}

func TestRoundTintCloses(t *testing.T) {
	if roundTint[0] != roundTint[len(roundTint)-1] {
		t.Error("north has two colours")
	}
	light := func(i uint32) uint32 { return roundTint.light(i, 360).brightness() }
	if !(light(0) > light(90) && light(90) > light(180) && light(180) < light(270) && light(270) < light(360)) {
		t.Errorf("north %d, east %d, south %d, west %d: want lightest in the north, darkest in the south", light(0), light(90), light(180), light(270))
	}
}

func TestMix(t *testing.T) {
	a, b := lights{0, 100, fullLight}, lights{fullLight, 100, 0}
	if mix(a, b, 0, 7) != a || mix(a, b, 7, 7) != b || mix(a, b, 1, 2) != (lights{fullLight / 2, 100, fullLight / 2}) {
		t.Errorf("%v %v %v", mix(a, b, 0, 7), mix(a, b, 7, 7), mix(a, b, 1, 2))
	}
	if got := mix(a, b, math.MaxUint32, math.MaxUint32); got != b {
		t.Errorf("%v", got)
	}
}

func TestShaded(t *testing.T) {
	c := rgb{108, 156, 112}.lights()
	if shaded(c, fullLight) != c {
		t.Error("level ground changes its colour")
	}
	before := uint32(0)
	for shade := uint32(0); shade <= fullLight*1414/1000; shade += 64 {
		b := shaded(c, shade).brightness()
		if b < before {
			t.Fatalf("more light makes %d after %d", b, before)
		}
		before = b
	}
}

func TestLambert(t *testing.T) {
	// Planes z = p x + q y on a 5 x 5 lattice, cells of 2 by 1; the oracle is the cosine of the angle to the light.
	for _, c := range []struct{ p, q, times float64 }{{0, 0, 1}, {-1, 1, 1}, {1, -1, 1}, {0.5, 0.25, 1}, {-3, 0, 2}, {10, -10, 1}, {-10, 10, 1}} {
		f := &field{cols: 5, rows: 5, cellX: 2, cellY: 1}
		for row := range 5 {
			for col := range 5 {
				f.values = append(f.values, c.p*2*float64(col)-c.q*float64(row))
			}
		}
		nx, ny, nz := -c.p*c.times, -c.q*c.times, 1.0
		cosine := (-nx/2 + ny/2 + nz*math.Sqrt2/2) / math.Sqrt(nx*nx+ny*ny+nz*nz)
		want := max(0, cosine) / (math.Sqrt2 / 2) * fullLight
		for _, at := range [][2]int{{2, 2}, {0, 0}, {4, 1}} { // inside, and at rims where one side is missing
			if got := f.shade(at[0], at[1], c.times); math.Abs(float64(got)-want) > 1 {
				t.Errorf("plane %v %v at %v: shade %d, want %.0f", c.p, c.q, at, got, want)
			}
		}
	}
	// A slope that faces the light is brighter than level ground: ground that falls to the north-west.
	f := &field{cols: 2, rows: 2, cellX: 1, cellY: 1, values: []float64{0, 1, 1, 2}}
	if f.shade(0, 0, 1) <= fullLight {
		t.Error("a slope to the north-west is not lit")
	}
}

func TestExaggeration(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name   string
		values []float64
		want   float64
	}{
		{"level", []float64{1, 1, 1, 1}, 1}, {"steep", []float64{0, 9, 0, 9}, 1}, {"gentle", []float64{0, 0.002, 0, 0.002}, 100},
		{"no data", []float64{nan, nan, nan, nan}, 1}, {"one value", []float64{nan, 5, nan, nan}, 1}, {"huge", []float64{-1e308, 1e308, -1e308, 1e308}, 1},
	} {
		f := &field{cols: 2, rows: 2, cellX: 1, cellY: 1, values: c.values}
		if got := f.exaggeration(); got != c.want {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}
