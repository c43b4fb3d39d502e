package main

import (
	"errors"

	"isofacet/cmd/internal/status"
	"isofacet/io/geojson"
	"isofacet/io/lines"
	"isofacet/triangulate"
)

// lineHints says what helps against each kind of trouble in a file of lines.
var lineHints = map[lines.Kind]string{
	lines.NoLines:      "is it the right file? lines are features of GeoJSON, or rows with the columns line, x, y and z",
	lines.NoLineColumn: "give every row the name of its line in a column called line",
	lines.NoName:       "give every row the name of its line",
	lines.TooLarge:     "cut the file into several and name each",
	lines.NotALine:     "leave features that are no lines out of the file",
	lines.LooseReading: "points belong among the readings, or need a property line with the name of their line",
	lines.NoPlace:      "give every vertex an x and a y",
	lines.TwoHeights:   "a line has one height at a place: mend one, or shift the foot of a wall by a millimetre from its top",
	lines.HeightsCount: "give every vertex of the line a height, or none of a ring",
	lines.NoHeights:    "add heights to the line; without them it can be a boundary or a void, no breakline",
	lines.ZeroHeights:  "if the heights really are 0, say --lines-z use",
	lines.OnePosition:  "a line needs two places: add a vertex, or leave the line out",
	lines.NotClosed:    "repeat the first position as the last",
	lines.FewCorners:   "a ring needs three places that are not one: mend it, or leave it out",
	lines.NoCodeColumn: "say which column of the readings holds the codes, as in --columns code=Desc",
}

func explainLines(err error) (status.Code, string, bool) {
	if e, ok := errors.AsType[*lines.Faults](err); ok {
		hint := ""
		if len(e.First) > 0 {
			hint = lineHints[e.First[0].Kind]
		}
		return status.WrongData, hint, true
	}
	if _, ok := errors.AsType[*lines.TableError](err); ok {
		return status.WrongData, "keys are ground, line, leave-out, others, parts and marks; patterns are lists of texts, as in line = [\"TOE*\", \"CR\"]", true
	}
	if _, ok := errors.AsType[*lines.UnknownCodes](err); ok {
		return status.WrongData, "add the codes to the table, or say what becomes of others there: others = \"leave-out\"", true
	}
	if _, ok := errors.AsType[*geojson.PositionError](err); ok {
		return status.WrongData, "the file may be damaged, or no GeoJSON (RFC 7946)", true
	}
	if errors.Is(err, triangulate.ErrCrossingsRemain) {
		return status.WrongData, "some lines run almost along each other: mend them, or say --touch-within with the width that they share", true
	}
	return 0, "", false
}
