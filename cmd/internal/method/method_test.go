package method

import (
	"strings"
	"testing"
)

func written(t *testing.T, f *Facts) string {
	t.Helper()
	var b strings.Builder
	if err := f.Write(&b); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// What is known stands in the text, and nothing of it among what is missing.
func TestGroundwater(t *testing.T) {
	f := &Facts{
		Groundwater: true, Product: "contours", Program: "isofacet 1.0", Files: []string{"gauging.csv", "wells.csv"},
		Rounds: []string{"2024-Q1"}, Zones: []string{"shallow"}, First: "2024-03-12T08:10", Last: "2024-03-12T10:50",
		Read: 6, Used: 4, Merged: 1, IDs: []string{"MW-1", "MW-2", "MW-3", "MW-4"}, NotUsed: []NotUsed{{"MW-5", "left out", "dry"}, {"MW-6", "merged", "at the place of line 3"}},
		HorizontalDatum: "NAD 83", VerticalDatum: "NAVD 88", XYUnit: "ft-us", ZUnit: "ft-us",
		Interval: "0.5", Triangles: 3, ZMin: "403.34", ZMax: "415.63", SameSpot: "mean", Exclusions: "decisions.csv", Inferred: "200", GradientAndArrow: true,
		Reduced: true, Floating: []string{"MW-2"}, Values: []Value{{"MW-1", "415.63", ""}, {"MW-2", "403.34", "420.00 - 16.99 + 0.40 x 0.83 = 403.342"}},
	}
	const want = `METHOD

4 readings of groundwater levels were used, of 6 read from gauging.csv, wells.csv. 2 readings were not used; each is listed below with its reason. A level is the elevation of the measuring point minus the depth to water. Where product floats, its thickness times its specific gravity was added: MW-2. Where several readings stand at one place, the rule "mean" applied (1 merged). Decisions to leave readings out are recorded in decisions.csv. The surface between them is made of planes over triangles that join neighbouring readings (Delaunay triangulation) and passes through every reading; it has 3 triangles. It ends at the convex hull of the readings; nothing is drawn outside. Contours at an interval of 0.5 ft-us follow the planes by straight-line interpolation; none was smoothed. Made with isofacet 1.0.

CAPTION

Contours of groundwater levels, zone shallow, round 2024-Q1. Measured from 2024-03-12T08:10 to 2024-03-12T10:50. 4 values from 403.34 to 415.63 ft-us. Used: MW-1, MW-2, MW-3, MW-4. Contour interval 0.5 ft-us. Dashed where further than 200 ft-us from a reading: inferred. Heights refer to NAVD 88. Horizontal datum NAD 83. Between the readings the surface is straight-line interpolation and may miss what nobody measured. Levels are those of the time stated; seasons, pumping and tides change them. A licensed professional has to review and sign this before it is relied on.

VALUES

- MW-1: 415.63 ft-us
- MW-2: 403.34 ft-us
  420.00 - 16.99 + 0.40 x 0.83 = 403.342

NOT USED

- MW-5: left out: dry
- MW-6: merged: at the place of line 3

MISSING

- title of the project
- north arrow, bar scale, numeric scale, source of the base map
- names of those who drew, checked and approved; seal where one is required
`
	if got := written(t, f); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

// Each thing that is not known is on the list of what is missing, and no sentence
// speaks of it.
func TestMissing(t *testing.T) {
	ground := written(t, &Facts{Product: "raster", Used: 3, Read: 3, Cell: "2", Breaklines: 1})
	for _, want := range []string{
		"Every reading was used.", "1 breakline was kept", "cells of 2 ", "- vertical datum or benchmark", "- horizontal datum", "- unit of the values", "- date of the measurements",
		"- accuracy, tested against checkpoints", "- boundary of the survey", "- client", "Have buried lines marked before digging.",
	} {
		if !strings.Contains(ground, want) {
			t.Errorf("no %q in\n%s", want, ground)
		}
	}
	wells := written(t, &Facts{Groundwater: true, Product: "contours", Zones: []string{"deep", "shallow"}, Interval: "1"})
	for _, want := range []string{"- which round", "- one zone: deep, shallow are mixed", "- the wells' names", "- gradient and direction", "- whether any part is inferred"} {
		if !strings.Contains(wells, want) {
			t.Errorf("no %q in\n%s", want, wells)
		}
	}
	if strings.Contains(wells, "refer to") || strings.Contains(wells, "Measured") {
		t.Errorf("speaks of what is not known:\n%s", wells)
	}
	limited := written(t, &Facts{Product: "raster", Boundary: 1, Voids: 2, LongestEdge: "50", AccuracyRMSE: "0.07", AccuracyOf: 38})
	for _, want := range []string{"It is limited by a surveyed boundary, 2 voids, a longest outer edge of 50;", "Against 38 checkpoints that the surface was not made from, the root mean square error is 0.07."} {
		if !strings.Contains(limited, want) {
			t.Errorf("no %q in\n%s", want, limited)
		}
	}
}
