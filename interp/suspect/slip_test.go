package suspect

import (
	"strings"
	"testing"
)

// TestSlips: usual mistakes are named first among those that fit.
func TestSlips(t *testing.T) {
	for _, c := range []struct {
		z, expected, tolerance float64
		decimals               int
		want                   string
	}{
		{22.892, 212.87, 0.1, 3, "a digit dropped: 212.892"},
		{203.988, 202.80, 0.1, 3, "a rod 1.2 longer than noted"},
		{121.35, 112.30, 0.2, 2, "two digits swapped: 112.35"},
		{-3.2, 3.15, 0.2, 1, "the sign"},
		{2125, 212.4, 0.2, 0, "the point moved: by 10"},
		{1128.35, 128.3, 0.2, 2, "a digit too many: 128.35"},
		{328.08, 100.02, 0.1, 2, "feet for metres"},
		{117.25, 110.2, 0.1, 2, "one digit wrong: 110.25"},
		{100.3, 100.0048, 0.01, 1, "a rod 0.3048 longer than noted"},
		{100, 101.77, 0.1, 0, ""},
		{100, 100.05, 0.1, 0, ""},
	} {
		got := ""
		if s := Slips(c.z, c.expected, c.tolerance, c.decimals); len(s) > 0 {
			got = s[0].What
			for _, x := range s {
				if d := x.Would - c.expected; d > c.tolerance || -d > c.tolerance {
					t.Errorf("%v: %v is not within %v of %v", c.z, x, c.tolerance, c.expected)
				}
			}
		}
		if !strings.HasPrefix(got, c.want) || c.want == "" && got != "" {
			t.Errorf("%v for %v: %q, want %q", c.z, c.expected, got, c.want)
		}
	}
}
