package geojsontest_test

import (
	"strings"
	"testing"

	"isofacet/io/geojson/geojsontest"
)

func TestCheck(t *testing.T) {
	feature := func(geometry string) string {
		return `{"type":"Feature","geometry":` + geometry + `,"properties":{}}`
	}
	for _, c := range []struct {
		name, text, wrong string // wrong: what the error contains
	}{
		// The examples of RFC 7946, section 1.5 and appendix A, shortened.
		{"collection", `{"type":"FeatureCollection","features":[{"type":"Feature","geometry":{"type":"Point","coordinates":[102.0,0.5]},"properties":{"prop0":"value0"}},{"type":"Feature","geometry":{"type":"LineString","coordinates":[[102.0,0.0],[103.0,1.0]]},"properties":{"prop0":"value0","prop1":0.0}}]}`, ""},
		{"polygon with a hole", `{"type":"Polygon","coordinates":[[[100.0,0.0],[101.0,0.0],[101.0,1.0],[100.0,1.0],[100.0,0.0]],[[100.8,0.8],[100.8,0.2],[100.2,0.2],[100.2,0.8],[100.8,0.8]]]}`, ""},
		{"collection of geometries", `{"type":"GeometryCollection","geometries":[{"type":"Point","coordinates":[100.0,0.0]},{"type":"LineString","coordinates":[[101.0,0.0],[102.0,1.0]]}]}`, ""},
		{"foreign members", `{"type":"FeatureCollection","coordinates_in":"x","features":[]}`, ""},
		{"no geometry", feature("null"), ""},

		{"not JSON", `{"type":`, "EOF"},
		{"NaN", `{"type":"Point","coordinates":[NaN,0]}`, "invalid character"},
		{"two objects", `{"type":"Point","coordinates":[1,0]} {}`, "behind"},
		{"not UTF-8", "{\"type\":\"Point\",\"coordinates\":[1,0],\"a\":\"\xff\"}", "UTF-8"},
		{"unknown type", `{"type":"Circle","coordinates":[1,0]}`, "validation"},
		{"type in small letters", `{"type":"point","coordinates":[1,0]}`, "validation"},
		{"null coordinate", `{"type":"Point","coordinates":[1,null]}`, "validation"},
		{"one number", `{"type":"Point","coordinates":[1]}`, "validation"},
		{"four numbers", `{"type":"Point","coordinates":[1,2,3,4]}`, "validation"},
		{"short line", `{"type":"LineString","coordinates":[[1,2]]}`, "validation"},
		{"short ring", `{"type":"Polygon","coordinates":[[[0,0],[1,0],[0,0]]]}`, "validation"},
		{"open ring", `{"type":"Polygon","coordinates":[[[0,0],[1,0],[0,1],[0,2]]]}`, "ends at"},
		{"clockwise ring", `{"type":"Polygon","coordinates":[[[0,0],[0,1],[1,0],[0,0]]]}`, "wrong way"},
		{"clockwise in a feature", feature(`{"type":"MultiPolygon","coordinates":[[[[0,0],[0,1],[1,0],[0,0]]]]}`), "wrong way"},
		{"counter-clockwise hole", `{"type":"Polygon","coordinates":[[[0,0],[9,0],[0,9],[0,0]],[[1,1],[2,1],[1,2],[1,1]]]}`, "ring 1 goes the wrong way"},
		// The double nearest to 0.1 + 0.2 is not 0.3: only exact arithmetic sees that this ring is flat.
		{"flat ring", `{"type":"Polygon","coordinates":[[[0,0],[0.1,0.1],[0.3,0.3],[0,0]]]}`, "no area"},
		{"no properties", `{"type":"Feature","geometry":null}`, "validation"},
		{"geometry in a collection", `{"type":"FeatureCollection","features":[],"geometry":null}`, "validation"},
		{"coordinates in a feature", `{"type":"Feature","geometry":null,"properties":null,"coordinates":[]}`, "validation"},
		{"crs", `{"type":"FeatureCollection","features":[],"crs":null}`, "validation"},
		{"bbox of five", `{"type":"FeatureCollection","features":[],"bbox":[1,2,3,4,5]}`, "validation"},
		{"id null", `{"type":"Feature","id":null,"geometry":null,"properties":null}`, "validation"},
	} {
		err := geojsontest.Check([]byte(c.text), geojsontest.RefuseFlat)
		switch {
		case c.wrong == "" && err != nil:
			t.Errorf("%s: %v", c.name, err)
		case c.wrong != "" && (err == nil || !strings.Contains(err.Error(), c.wrong)):
			t.Errorf("%s: %v, want %q", c.name, err, c.wrong)
		}
		if c.name == "flat ring" {
			if err := geojsontest.Check([]byte(c.text), geojsontest.AllowFlat); err != nil {
				t.Errorf("%s allowed: %v", c.name, err)
			}
		}
	}
}
