package units

import (
	"math"
	"testing"
)

// Factors by their definitions: 1 yd3 is 0.764554857984 m3, 1 acre-ft 1233.48183754752
// m3, 1 acre 4046.8564224 m2 exactly, with the international foot (NIST Special
// Publication 811, appendix B.8).
func TestVolumeFactor(t *testing.T) {
	for _, c := range []struct {
		xy, z Unit
		to    Volume
		want  float64
	}{
		{Metre, Metre, CubicMetre, 1},
		{Metre, Metre, CubicYard, 1 / 0.764554857984},
		{Metre, Metre, AcreFoot, 1 / 1233.48183754752},
		{FootInternational, FootInternational, CubicYard, 1.0 / 27},
		{FootUS, FootUS, CubicYard, 1.0 / 27},
		{FootUS, FootUS, AcreFoot, 1.0 / 43560},
		{FootInternational, FootInternational, CubicMetre, 0.028316846592},
		{FootInternational, Metre, CubicFoot, 1 / 0.3048},
		{Metre, FootInternational, CubicMetre, 0.3048},
		{FootUS, Metre, CubicMetre, (1200.0 / 3937) * (1200.0 / 3937)},
	} {
		f, ok := VolumeFactor(c.xy, c.z, c.to)
		if got := f.Float64(); !ok || math.Abs(got/c.want-1) > 4e-16 {
			t.Errorf("%v, %v to %v: %v, want %v", c.xy, c.z, c.to, got, c.want)
		}
	}
	for _, c := range []struct {
		xy   Unit
		to   Area
		want float64
	}{
		{Metre, Hectare, 1e-4}, {Metre, Acre, 1 / 4046.8564224}, {FootUS, Acre, 1.0 / 43560},
		{FootInternational, SquareFoot, 1}, {FootInternational, SquareMetre, 0.09290304},
	} {
		f, ok := AreaFactor(c.xy, c.to)
		if got := f.Float64(); !ok || math.Abs(got/c.want-1) > 4e-16 {
			t.Errorf("%v to %v: %v, want %v", c.xy, c.to, got, c.want)
		}
	}
	if _, ok := VolumeFactor(Metre, Unstated, CubicYard); ok {
		t.Error("an unstated unit is converted")
	}
	if f, ok := VolumeFactor(Unstated, Unstated, OwnVolume); !ok || f.Of(3.25) != 3.25 {
		t.Error("volumes change without a unit")
	}
	for _, word := range []string{"m3", "ft3", "yd3", "acre-ft"} {
		if v, err := ParseVolume(word); err != nil || v.String() != word {
			t.Error(word, v, err)
		}
	}
	if _, err := ParseArea(""); err == nil {
		t.Error("no area is one")
	}
}
