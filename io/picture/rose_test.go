package picture_test

import (
	"bytes"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"isofacet/io/picture"
)

func TestRose(t *testing.T) {
	var out bytes.Buffer
	err := picture.WriteRose(&out, []picture.RoseArrow{
		{Name: "2024-Q1", Azimuth: 90, Spread: 5, Size: 0.004},
		{Name: "2024-Q2 <", Azimuth: 180, Size: 0.002, Faint: true},
	}, picture.RoseOptions{Title: "directions", Notes: []string{"a note"}})
	if err != nil {
		t.Fatal(err)
	}
	keep(t, "rose.svg", out.Bytes())
	words, err := wellFormed(out.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"1  2024-Q1: 0.004 towards 90.0 degrees ± 5.0", "2  2024-Q2 <: 0.002 towards 180.0 degrees", "0.004", "N", "a note"} {
		if !slices.Contains(words, want) {
			t.Errorf("no text %q", want)
		}
	}
	// The middle is at (83, 77.46) less the title's row; east is 60 mm to the right of it.
	text := out.String()
	if !strings.Contains(text, "M83 ") || !strings.Contains(text, "L143 ") {
		t.Error("the arrow to the east does not end 60 mm from the middle")
	}
	for name, bad := range map[string][]picture.RoseArrow{
		"none": nil, "without size": {{Azimuth: 3}}, "NaN": {{Azimuth: math.NaN(), Size: 1}}, "infinite": {{Azimuth: 1, Size: math.Inf(1)}},
	} {
		var fault *picture.InputError
		if err := picture.WriteRose(&bytes.Buffer{}, bad, picture.RoseOptions{}); !errors.As(err, &fault) {
			t.Errorf("%s: %v", name, err)
		}
	}
}
