package picture_test

import (
	"bytes"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/io/picture"
)

func TestProfileIsDrawnAtItsScales(t *testing.T) {
	panels := []picture.Panel{
		{Title: "ditch <1>", From: 100, To: 330, Bends: []float64{200}, Lines: []picture.ProfileLine{
			{Name: "before", Runs: []orb.LineString{{{110, 20}, {150, 24}}, {{160, 25}, {330, 20}}}},
			{Name: "after", Runs: []orb.LineString{{{100, 20}, {330, 21}}}},
		}},
		{Title: "short", From: 0, To: 115, Lines: []picture.ProfileLine{{Name: "before"}}},
	}
	var out bytes.Buffer
	r, err := picture.WriteProfiles(&out, panels, picture.ProfileOptions{Title: "two & two", Labels: grid.Labels{XYUnit: "m", ZUnit: "m"}, Along: "station"})
	if err != nil {
		t.Fatal(err)
	}
	keep(t, "profile.svg", out.Bytes())
	// 230 units on 230 mm; 5 units and their margins of a tenth each way fit 90 mm ten
	// times exaggerated, not twenty.
	if r.Along != 1 || r.Exaggeration.String() != "10" || r.Up != 0.1 {
		t.Errorf("scales %+v", r)
	}
	words, err := wellFormed(out.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"ditch <1>", "before", "after", "no surface from 100 to 110", "no surface from 150 to 160", "no surface from 0 to 115", "bend of the line at 200",
		"vertical exaggeration 10 to 1: 1 mm along is 1 m, 1 mm up is 0.1 m", "station, from 100 to 330"} {
		if !slices.Contains(words, want) {
			t.Errorf("no text %q", want)
		}
	}
	// 40 mm to the right and 40 mm up.
	if !strings.Contains(out.String(), "l40-40") {
		t.Error("the first run is not drawn at its scales")
	}
}

func TestProfileFaults(t *testing.T) {
	bad := map[string][]picture.Panel{
		"none":           nil,
		"falls":          {{From: 2, To: 1}},
		"station of NaN": {{From: math.NaN(), To: 1}},
		"height of NaN":  {{From: 0, To: 1, Lines: []picture.ProfileLine{{Runs: []orb.LineString{{{0, math.NaN()}}}}}}},
	}
	for name, panels := range bad {
		var fault *picture.InputError
		if _, err := picture.WriteProfiles(&bytes.Buffer{}, panels, picture.ProfileOptions{}); !errors.As(err, &fault) {
			t.Errorf("%s: %v", name, err)
		}
	}
	// Level ground, and none, have something to see.
	for _, z := range [][]orb.LineString{{{{0, 7}, {10, 7}}}, nil} {
		r, err := picture.WriteProfiles(&bytes.Buffer{}, []picture.Panel{{From: 0, To: 10, Lines: []picture.ProfileLine{{Runs: z}}}}, picture.ProfileOptions{})
		if err != nil || !(r.Up > 0) {
			t.Errorf("%v: %+v, %v", z, r, err)
		}
	}
}
