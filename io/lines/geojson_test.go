package lines

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// collection makes a file of features, each given as geometry|properties.
func collection(features ...string) string {
	var all []string
	for _, f := range features {
		geometry, properties, ok := strings.Cut(f, "|")
		if !ok {
			properties = "null"
		}
		all = append(all, fmt.Sprintf(`{"type":"Feature","geometry":%s,"properties":%s}`, geometry, properties))
	}
	return `{"type":"FeatureCollection","features":[` + strings.Join(all, ",\n") + "]}\n"
}

func geometry(kind, coordinates string) string {
	return fmt.Sprintf(`{"type":%q,"coordinates":%s}`, kind, coordinates)
}

var good = geometry("LineString", "[[0,0,1],[4,0,2]]")

// The files are called a.geojson.
var faultyFeatures = []faulty{
	{name: "no heights", text: collection(good, geometry("LineString", "[[0,0],[4,0]]")+`|{"line":"toe"}`),
		want: `a.geojson: feature 2: line "toe" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "no heights, no name", text: collection(geometry("LineString", "[[0,0],[4,0]]")),
		want: `a.geojson: feature 1: line has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "no heights in a polygon", text: collection(geometry("Polygon", "[[[0,0],[4,0],[0,4],[0,0]]]")),
		want: `a.geojson: feature 1: line has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "a height missing", text: collection(good, geometry("LineString", "[[0,0,5],[4,0],[8,0,5]]")+`|{"name":"toe"}`),
		want: `a.geojson: feature 2, position 2: line "toe" has no height here, but at 2 of its 3 vertices: expected a height at every vertex`},
	{name: "heights in one part of two", text: collection(geometry("MultiLineString", "[[[0,0,5],[4,0,5]],[[0,9],[4,9]]]") + `|{"id":7}`),
		want: `a.geojson: feature 1, part 2: line "7 (2)" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "heights all zero", text: collection(geometry("LineString", "[[0,0,0],[4,0,0.0],[8,0,-0]]")),
		want: `a.geojson: feature 1: line has height 0 at all 3 vertices: expected measured heights, or to be told that 0 is meant`},
	{name: "heights of a boundary all zero", text: collection(geometry("Polygon", "[[[0,0,0],[4,0,0],[0,4,0],[0,0,0]]]")), rings: true,
		want: `a.geojson: feature 1: ring has height 0 at all 4 vertices: expected measured heights, none, or to be told that 0 is meant`},
	{name: "one place twice", text: collection(geometry("LineString", "[[3,4,5],[3,4,5]]")),
		want: `a.geojson: feature 1: line has one position, (3, 4): expected at least two`},
	{name: "two heights", text: collection(geometry("LineString", "[[3,4,5],[3,4,5.5],[9,9,9]]")),
		want: `a.geojson: feature 1, position 2: line has height 5.5 at the place of position 1, which has 5: expected one height at one place`},
	{name: "boundary not closed", text: collection(geometry("LineString", "[[0,0],[4,0],[4,4.5],[0,4.1]]") + `|{"name":"site"}`), rings: true,
		want: `a.geojson: feature 1, position 4: ring "site" is not closed: gap 4.1 to its beginning, position 1: expected the first position again at the end of a ring`},
	{name: "a part not closed", text: collection(geometry("MultiLineString", "[[[0,0],[4,0],[0,4],[0,0]],[[9,9],[8,9],[8,8]]]")), rings: true,
		want: `a.geojson: feature 1, part 2, position 3: ring is not closed: gap 1.414 to its beginning, position 1: expected the first position again at the end of a ring`},
	{name: "polygon not closed", text: collection(geometry("Polygon", "[[[0,0],[4,0],[4,4.5],[0,4.1]]]")), rings: true,
		want: `a.geojson:1:103: feature 1: ring that ends at (0, 4.1): expected its first position (0, 0) at the end`},
	{name: "ring of two places", text: collection(geometry("Polygon", "[[[0,0],[4,0],[4,0],[0,0]]]")), rings: true,
		want: `a.geojson: feature 1: ring has 2 distinct positions: expected at least 3`},
	{name: "a point", text: collection(good, geometry("Point", "[1,2,3]")),
		want: `a.geojson: feature 2: a point without a property line: expected a line, or points that name theirs`},
	{name: "one point of a line", text: collection(good, geometry("Point", "[1,2,3]")+`|{"line":"toe","id":"P7"}`),
		want: `a.geojson: feature 2: line "toe" has one position, (1, 2): expected at least two`},
	{name: "points of two heights", text: collection(geometry("Point", "[1,2,3]")+`|{"line":"toe","id":"P7"}`, geometry("Point", "[1,2,4]")+`|{"line":"toe"}`),
		want: `a.geojson: feature 2: line "toe" has height 4 at the place of P7 (feature 1), which has 3: expected one height at one place`},
	{name: "several points", text: collection(geometry("MultiPoint", "[[1,2,3],[4,5,6]]")),
		want: `a.geojson: feature 1: a MultiPoint: expected a line`},
	{name: "a point among lines", text: collection(fmt.Sprintf(`{"type":"GeometryCollection","geometries":[%s,%s]}`, good, geometry("Point", "[1,2,3]"))), rings: true,
		want: `a.geojson: feature 1: a Point: expected a polygon, or a line that is closed`},
	{name: "no geometry", text: collection(good, "null"),
		want: `a.geojson: feature 2: no geometry: expected a line`},
	{name: "no position", text: collection(good, geometry("LineString", "[]")), rings: true,
		want: "a.geojson: feature 1: ring has 2 distinct positions: expected at least 3\na.geojson: feature 2: no geometry: expected a polygon, or a line that is closed"},
	{name: "no features", text: collection(),
		want: `a.geojson: no line: expected at least one`},
	{name: "not finite", text: collection(geometry("LineString", "[[0,0,NaN],[4,0,1]]")),
		want: `a.geojson:1:111: feature 1: z "NaN": expected a finite number such as 12.4`},
	{name: "beyond doubles", text: collection(geometry("LineString", "[[0,0,1],[1e999,0,1]]")),
		want: `a.geojson:1:115: feature 1: x "1e999": expected a number within the range of doubles`},
	{name: "too large for a coordinate", text: collection(geometry("LineString", "[[0,0,1],[1e61,0,1]]")),
		want: `a.geojson:1:115: feature 1: x "1e61": expected 0 or a number from 1e-60 to 1e60 in size`},
	{name: "a text for a number", text: collection(geometry("LineString", `[[0,0,1],["4",0,1]]`)),
		want: `a.geojson:1:115: feature 1: x "4": expected a number such as 12.4, not a text`},
	{name: "line of one position", text: collection(geometry("LineString", "[[0,0,1]]")),
		want: `a.geojson:1:105: feature 1: line: expected 2 or more positions, not 1`},
	{name: "another kind of JSON", text: `{"lines":[[0,0,1],[4,0,1]]}`,
		want: `a.geojson:1:1: object: expected a member "type"`},
	{name: "cut off", text: collection(good)[:100],
		want: `a.geojson:1:91: feature 1: text "coordinat": expected a closing quote`},
}

func TestFaultyFeatures(t *testing.T) { checkFaulty(t, "a.geojson", faultyFeatures) }

func TestFeatures(t *testing.T) {
	for _, c := range []struct {
		name, text string
		rings      bool
		want       string
	}{
		{name: "a line", text: collection(good), want: "feature 1 0,0,1 4,0,2"},
		{name: "a bare geometry", text: "\n" + good, want: "feature 1 0,0,1 4,0,2"},
		{name: "names", text: collection(good+`|{"Name":"a","LINE":"b"}`, good+`|{"line":"","name":"c"}`, good+`|{"line":null,"id":12}`, good+`|{"name":1.5}`),
			want: "b 0,0,1 4,0,2;c 0,0,1 4,0,2;12 0,0,1 4,0,2;1.5 0,0,1 4,0,2"},
		{name: "the id of the feature", text: strings.Replace(collection(good), `"geometry"`, `"id":"x7","geometry"`, 1), want: "x7 0,0,1 4,0,2"},
		{name: "several lines", text: collection(geometry("MultiLineString", "[[[0,0,1],[4,0,2]],[[0,4,3],[4,4,3],[4,4,3]]]") + `|{"line":"a"}`),
			want: "a 0,0,1 4,0,2;a (2) 0,4,3 4,4,3"},
		{name: "a polygon with a hole is two closed lines", text: collection(geometry("Polygon", "[[[0,0,1],[9,0,1],[0,9,1],[0,0,1]],[[1,1,2],[2,1,2],[1,2,2],[1,1,2]]]") + `|{"line":"a"}`),
			want: "a closed 0,0,1 9,0,1 0,9,1 0,0,1;a (2) closed 1,1,2 2,1,2 1,2,2 1,1,2"},
		{name: "boundary of polygons", rings: true, text: collection(geometry("MultiPolygon", "[[[[0,0],[9,0],[0,9],[0,0]],[[1,1],[2,1],[1,2],[1,1]]],[[[20,0],[29,0],[20,9],[20,0]]]]")),
			want: "feature 1 closed 0,0 9,0 0,9 0,0;feature 1 (2) closed 1,1 2,1 1,2 1,1;feature 1 (3) closed 20,0 29,0 20,9 20,0"},
		{name: "boundary of a closed line", rings: true, text: collection(geometry("LineString", "[[0,0,5],[9,0,5],[0,9,5],[0,0,5]]")), want: "feature 1 closed 0,0,5 9,0,5 0,9,5 0,0,5"},
		{name: "points", text: collection(geometry("Point", "[1,2,3]")+`|{"line":"toe"}`, good+`|{"line":"toe"}`, geometry("Point", "[5,5,5]")+`|{"line":7}`,
			geometry("Point", "[2,2,3]")+`|{"line":"toe"}`, geometry("Point", "[6,5,5]")+`|{"line":7}`),
			want: "toe 1,2,3 2,2,3;toe 0,0,1 4,0,2;7 5,5,5 6,5,5"},
		{name: "a collection", text: collection(fmt.Sprintf(`{"type":"GeometryCollection","geometries":[%s,%s]}`, good, geometry("Polygon", "[[[0,0,1],[9,0,1],[0,9,1],[0,0,1]]]"))),
			want: "feature 1 0,0,1 4,0,2;feature 1 (2) closed 0,0,1 9,0,1 0,9,1 0,0,1"},
	} {
		t.Run(c.name, func(t *testing.T) {
			read := breaklines
			if c.rings {
				read = rings
			}
			s := read(t, "a.geojson", c.text, Options{})
			if got := strings.Join(dump(s), ";"); got != c.want {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
			if len(s.Layouts) != 0 {
				t.Errorf("layouts of GeoJSON: %v", s.Layouts)
			}
		})
	}
}

func TestPlacesOfFeatures(t *testing.T) {
	s := breaklines(t, "b.geojson", collection(geometry("MultiLineString", "[[[0,0,1],[0,0,1],[4,0,2]],[[0,4,3],[4,4,3]]]")+`|{"line":"a"}`,
		geometry("Point", "[1,2,3]")+`|{"line":"toe","id":"P7"}`, geometry("Point", "[2,2,3]")+`|{"line":"toe"}`, good), Options{})
	a, a2, toe, last := &s.Lines[0], &s.Lines[1], &s.Lines[2], &s.Lines[3]
	for _, c := range []struct{ got, want string }{
		{a.At(1).String(), "b.geojson: feature 1, part 1, position 3"}, {a2.PointName(0), "b.geojson: feature 1, part 2, position 1"},
		{toe.At(1).String(), "b.geojson: feature 3"}, {toe.PointName(0), "P7"}, {toe.PointName(1), "b.geojson: feature 3"},
		{last.At(0).String(), "b.geojson: feature 4, position 1"}, {toe.spot(0), "P7 (feature 2)"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
	if s.Repeated != 1 {
		t.Errorf("%d repeated", s.Repeated)
	}
}

func TestFeatureWarnings(t *testing.T) {
	text := strings.Replace(collection(geometry("LineString", "[[0,0,1],[1,0,1],[2,0,0],[3,0,1],[90,0,1]]")+`|{"line":"a"}`, geometry("LineString", "[[0,0,1,7],[1,0,1]]")),
		`"features"`, `"coordinates_in":"EPSG:25832","features"`, 1)
	s := breaklines(t, "a.geojson", text, Options{})
	var got []string
	for _, w := range s.Warnings {
		got = append(got, w.String())
	}
	want := []string{
		`a.geojson: member coordinates_in says "EPSG:25832": coordinates read as they are`,
		`a.geojson: 1 position has more than three numbers: only x, y and z kept, the first in feature 2 at 2:66`,
		`a.geojson: feature 1, position 3: line "a" has height 0 at 1 of its 5 vertices; the others are from 1 to 1`,
		`a.geojson: feature 1, position 4: line "a" has a segment of 87 from position 4 to position 5, 87 times the median of its 4 segments, 1`,
	}
	if !slices.Equal(got, want) {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}
