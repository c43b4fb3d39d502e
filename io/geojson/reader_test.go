package geojson_test

import (
	"errors"
	"fmt"
	"io"
	"math"
	"reflect"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
)

// read returns everything that a Reader says about a text.
func read(src io.Reader, opt geojson.ReadOptions) (features []geojson.Feature, r *geojson.Reader, err error) {
	r = geojson.NewReader(src, opt)
	for {
		f, err := r.Next()
		if err == io.EOF {
			return features, r, nil
		}
		if err != nil {
			return features, r, err
		}
		features = append(features, *f)
	}
}

func ExampleReader() {
	text := `{"type": "FeatureCollection", "coordinates_in": "EPSG:25832", "features": [
		{"type": "Feature", "properties": {"name": "crest"}, "geometry": {"type": "LineString", "coordinates": [[10, 5, 101.5], [20, 5, 102]]}},
		{"type": "Feature", "properties": {"name": "toe"}, "geometry": {"type": "LineString", "coordinates": [[10, 9]]}}
	]}`
	r := geojson.NewReader(strings.NewReader(text), geojson.ReadOptions{File: "breaks.geojson"})
	for {
		f, err := r.Next()
		if err != nil {
			fmt.Println(err)
			break
		}
		name, _ := f.Properties[0].Value.Text()
		fmt.Println(name, f.Geometry.Shape, f.Geometry.Z)
	}
	fmt.Println(r.Warnings()[0])
	// Output:
	// crest [[10 5] [20 5]] [101.5 102]
	// breaks.geojson:3:104: feature 2: line: expected 2 or more positions, not 1
	// member coordinates_in says "EPSG:25832": coordinates read as they are
}

func TestReadShapes(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name, text string
		shape      orb.Geometry
		z          []float64
		warnings   string
	}{
		{"point", `{"type":"Point","coordinates":[1,2]}`, orb.Point{1, 2}, nil, "[]"},
		{"type last", `{"coordinates":[1,2.5e1,-3],"type":"Point"}`, orb.Point{1, 25}, []float64{-3}, "[]"},
		{"negative zero", `{"type":"Point","coordinates":[-0,-0.0e5]}`, orb.Point{0, 0}, nil, "[]"},
		{"blanks", "\n\t{ \"type\" :\r\n \"Point\" , \"coordinates\" : [ 1 , 2 ] }\n ", orb.Point{1, 2}, nil, "[]"},
		{"byte order mark", "\ufeff{\"type\":\"Point\",\"coordinates\":[1,2]}", orb.Point{1, 2}, nil, "[]"},
		{"escaped type", `{"t\u0079pe":"P\u006fint","coordinates":[1,2]}`, orb.Point{1, 2}, nil, "[]"},
		{"points", `{"type":"MultiPoint","coordinates":[[1,2],[3,4]]}`, orb.MultiPoint{{1, 2}, {3, 4}}, nil, "[]"},
		{"line", `{"type":"LineString","coordinates":[[1,2],[3,4]]}`, orb.LineString{{1, 2}, {3, 4}}, nil, "[]"},
		{"mixed heights", `{"type":"LineString","coordinates":[[1,2],[3,4,5]]}`, orb.LineString{{1, 2}, {3, 4}}, []float64{nan, 5}, "[1 feature has positions with a height and positions without, the first in feature 1 at 1:1]"},
		{"four numbers", `{"type":"LineString","coordinates":[[1,2,3,4],[5,6,7,8,9]]}`, orb.LineString{{1, 2}, {5, 6}}, []float64{3, 7}, "[2 positions have more than three numbers: only x, y and z kept, the first in feature 1 at 1:37]"},
		{"lines", `{"type":"MultiLineString","coordinates":[[[1,2,0],[3,4,1]],[[5,6,2],[7,8,3],[9,9,4]]]}`, orb.MultiLineString{{{1, 2}, {3, 4}}, {{5, 6}, {7, 8}, {9, 9}}}, []float64{0, 1, 2, 3, 4}, "[]"},
		{"polygon", `{"type":"Polygon","coordinates":[[[0,0],[0,4],[4,0],[0,0]],[[1,1],[1,2],[2,1],[1,1]]]}`, orb.Polygon{{{0, 0}, {0, 4}, {4, 0}, {0, 0}}, {{1, 1}, {1, 2}, {2, 1}, {1, 1}}}, nil, "[]"},
		{"polygons", `{"type":"MultiPolygon","coordinates":[[[[0,0],[0,4],[4,0],[0,0]],[[1,1],[1,2],[2,1],[1,1]]],[[[9,9],[8,9],[8,8],[9,9]]]]}`,
			orb.MultiPolygon{{{{0, 0}, {0, 4}, {4, 0}, {0, 0}}, {{1, 1}, {1, 2}, {2, 1}, {1, 1}}}, {{{9, 9}, {8, 9}, {8, 8}, {9, 9}}}}, nil, "[]"},
		{"collection", `{"type":"GeometryCollection","geometries":[{"type":"Point","coordinates":[1,2]},{"type":"GeometryCollection","geometries":[{"coordinates":[[3,4,5],[6,7,8]],"type":"LineString"}]}]}`,
			orb.Collection{orb.Point{1, 2}, orb.Collection{orb.LineString{{3, 4}, {6, 7}}}}, []float64{nan, 5, 8}, "[1 feature has positions with a height and positions without, the first in feature 1 at 1:1]"},
		{"feature", `{"type":"Feature","geometry":{"type":"Point","coordinates":[1,2]},"properties":null}`, orb.Point{1, 2}, nil, "[]"},
		{"feature, type last", `{"properties":null,"geometry":{"type":"Point","coordinates":[1,2]},"type":"Feature"}`, orb.Point{1, 2}, nil, "[]"},
		{"in a collection", `{"features":[{"geometry":{"coordinates":[1,2],"type":"Point"},"type":"Feature"}],"type":"FeatureCollection"}`, orb.Point{1, 2}, nil, "[]"},
		{"bbox and foreign members are passed over", `{"type":"Feature","bbox":[0,0,1,1],"a":{"b":[1,{"c":"d\n"}]},"geometry":{"type":"Point","coordinates":[1,2],"bbox":[],"x":"y"},"properties":{}}`, orb.Point{1, 2}, nil, "[]"},
		{"null", `{"type":"Feature","geometry":null,"properties":null}`, nil, nil, "[1 feature or part has no position, the first in feature 1 at 1:1]"},
		{"empty point", `{"type":"Point","coordinates":[]}`, nil, nil, "[1 feature or part has no position, the first in feature 1 at 1:1]"},
		{"empty polygon", `{"type":"Polygon","coordinates":[[]]}`, nil, nil, "[1 feature or part has no position, the first in feature 1 at 1:1]"},
		{"empty part", `{"type":"GeometryCollection","geometries":[{"type":"MultiPoint","coordinates":[]},{"type":"Point","coordinates":[1,2]}]}`, orb.Collection{orb.Point{1, 2}}, nil, "[1 feature or part has no position, the first in feature 1 at 1:44]"},
		{"old system", `{"type":"Point","coordinates":[1,2],"crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::25832"}}}`, orb.Point{1, 2}, nil, `[member crs, withdrawn by RFC 7946, names "urn:ogc:def:crs:EPSG::25832": coordinates read as they are]`},
		{"old system null", `{"type":"Point","coordinates":[1,2],"crs":null}`, orb.Point{1, 2}, nil, `[member crs, withdrawn by RFC 7946, names "null": coordinates read as they are]`},
		{"linked system", `{"type":"Point","coordinates":[1,2],"crs":{"type":"link","properties":{"href":"here"}}}`, orb.Point{1, 2}, nil, `[member crs, withdrawn by RFC 7946, names "here": coordinates read as they are]`},
		{"odd system", `{"type":"Point","coordinates":[1,2],"crs":[1, 2]}`, orb.Point{1, 2}, nil, `[member crs, withdrawn by RFC 7946, names "[1,2]": coordinates read as they are]`},
	} {
		for name, src := range map[string]io.Reader{"whole": strings.NewReader(c.text), "by bytes": iotest.OneByteReader(strings.NewReader(c.text)), "end with data": iotest.DataErrReader(strings.NewReader(c.text))} {
			features, r, err := read(src, geojson.ReadOptions{})
			if err != nil || len(features) != 1 {
				t.Errorf("%s, %s: %d features, %v", c.name, name, len(features), err)
				continue
			}
			g := features[0].Geometry
			if !reflect.DeepEqual(g.Shape, c.shape) || !sameHeights(g.Z, c.z) {
				t.Errorf("%s, %s: %#v %v, want %#v %v", c.name, name, g.Shape, g.Z, c.shape, c.z)
			}
			if got := fmt.Sprint(r.Warnings()); got != c.warnings {
				t.Errorf("%s, %s:\n got %s\nwant %s", c.name, name, got, c.warnings)
			}
			if r.Number() != 1 {
				t.Errorf("%s, %s: number %d", c.name, name, r.Number())
			}
		}
	}
}

func sameHeights(a, b []float64) bool {
	if len(a) != len(b) || (a == nil) != (b == nil) {
		return false
	}
	for i := range a {
		if a[i] != b[i] && (a[i] == a[i] || b[i] == b[i]) {
			return false
		}
	}
	return true
}

func TestReadProperties(t *testing.T) {
	text := `{"type":"Feature","id":"a1","geometry":null,"properties":{"z":1.50,"whole":-9007199254740993,"code":"T\u00fcr\ud834\udd1e \"x\"","yes":true,"no":false,"none":null,
		"list":[1, "two", {"three" : [ ]}],"object":{ },"long":123456789012345678901234567890,"big":1e300,"a":-0.0}}`
	features, _, err := read(strings.NewReader(text), geojson.ReadOptions{})
	if err != nil {
		t.Fatal(err)
	}
	scalars := []geojson.Property{
		{"z", geojson.Number(1.5)}, {"whole", geojson.Int(-9007199254740993)}, {"code", geojson.String("Tür𝄞 \"x\"")},
		{"yes", geojson.Bool(true)}, {"no", geojson.Bool(false)}, {"none", geojson.Null()},
	}
	got := features[0].Properties
	if len(got) != 11 || !reflect.DeepEqual(got[:6], scalars) {
		t.Fatalf("got %v, want %v and five more", got, scalars)
	}
	for i, want := range []string{`[1,"two",{"three":[]}]`, "{}", "123456789012345678901234567890"} {
		if text, ok := got[6+i].Value.Text(); got[6+i].Value.Kind() != geojson.JSONKind || text != want || !ok {
			t.Errorf("%s: %q, want %s", got[6+i].Name, text, want)
		}
	}
	if big, ok := got[8].Value.Float(); big != 123456789012345678901234567890 || !ok {
		t.Errorf("a large integer is %v", big)
	}
	if _, ok := got[6].Value.Float(); ok {
		t.Error("a list is a number")
	}
	if !reflect.DeepEqual(got[9:], []geojson.Property{{"big", geojson.Number(1e300)}, {"a", geojson.Number(0)}}) {
		t.Errorf("numbers %v", got[9:])
	}
	if id, ok := features[0].ID.Text(); id != "a1" || !ok {
		t.Errorf("id %q", id)
	}
}

func TestValueAnswersOneMethod(t *testing.T) {
	for _, c := range []struct {
		v                        geojson.Value
		kind                     geojson.ValueKind
		float                    float64
		whole                    int64
		truth                    bool
		text                     string
		isF, isWhole, isB, isTxt bool
	}{
		{v: geojson.Value{}, kind: geojson.Absent},
		{v: geojson.Null(), kind: geojson.NullKind},
		{v: geojson.Number(math.NaN()), kind: geojson.NullKind},
		{v: geojson.Number(2.5), kind: geojson.NumberKind, float: 2.5, isF: true},
		{v: geojson.Int(3), kind: geojson.IntKind, float: 3, whole: 3, isF: true, isWhole: true},
		{v: geojson.Bool(true), kind: geojson.BoolKind, truth: true, isB: true},
		{v: geojson.Bool(false), kind: geojson.BoolKind, isB: true},
		{v: geojson.String("a"), kind: geojson.StringKind, text: "a", isTxt: true},
	} {
		float, isF := c.v.Float()
		whole, isWhole := c.v.Whole()
		truth, isB := c.v.Truth()
		text, isTxt := c.v.Text()
		if c.v.Kind() != c.kind || float != c.float || whole != c.whole || truth != c.truth || text != c.text ||
			isF != c.isF || isWhole != c.isWhole || isB != c.isB || isTxt != c.isTxt {
			t.Errorf("%+v answers %v; %v %v, %v %v, %v %v, %q %v", c, c.v.Kind(), float, isF, whole, isWhole, truth, isB, text, isTxt)
		}
	}
}

func TestMembersOfTheWhole(t *testing.T) {
	text := `{"z_unit":"m","type":"FeatureCollection","features":[],"level":1.5,"deep":{"a":1},"yes":true}`
	_, r, err := read(strings.NewReader(text), geojson.ReadOptions{})
	want := []geojson.Property{{"z_unit", geojson.String("m")}, {"level", geojson.Number(1.5)}, {"yes", geojson.Bool(true)}}
	if err != nil || !reflect.DeepEqual(r.Members(), want) {
		t.Errorf("%v, %v, want %v", r.Members(), err, want)
	}
}

// bad is one malformed text a row: after a crash or a wrong message it grows by one.
var bad = []struct {
	text, want string
	kind       geojson.Kind
}{
	{"", "a:1:1: end of the text: expected a GeoJSON object", geojson.Ended},
	{" \n ", "a:2:2: end of the text: expected a GeoJSON object", geojson.Ended},
	{"x,y,z\n1,2,3", `a:1:1: "x": expected a GeoJSON object`, geojson.Syntax},
	{"[1]", `a:1:1: "[": expected a GeoJSON object`, geojson.Syntax},
	{"\xff\xfe{", `a:1:1: byte "0xff": expected GeoJSON in UTF-8`, geojson.Encoding},
	{"\x00{\x00", `a:1:1: byte "0x00": expected GeoJSON in UTF-8`, geojson.Encoding},
	{"{}", `a:1:1: object: expected a member "type"`, geojson.Structure},
	{"{", `a:1:2: end of the text: expected a comma or '}'`, geojson.Ended},
	{`{"type"`, "a:1:8: end of the text: expected ':'", geojson.Ended},
	{`{"type":"Poi`, `a:1:9: text "Poi": expected a closing quote`, geojson.Ended},
	{`{"type":"Point"`, "a:1:16: end of the text: expected a comma or '}'", geojson.Ended},
	{`{type:"Point"}`, `a:1:2: "type": expected the name of a member in double quotes`, geojson.Syntax},
	{`{'type':"Point"}`, `a:1:2: "'": expected the name of a member in double quotes`, geojson.Syntax},
	{`{"type":Point}`, `a:1:9: "Point": expected the type in double quotes`, geojson.Syntax},
	{`{"type":"Point" "coordinates":[1,2]}`, `a:1:17: "\"": expected a comma or '}'`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1,2],}`, `a:1:37: "}": expected the name of a member in double quotes`, geojson.Syntax},
	{`{"type":"Topology"}`, `a:1:9: type "Topology": expected FeatureCollection, Feature, Point, MultiPoint, LineString, MultiLineString, Polygon, MultiPolygon or GeometryCollection`, geojson.TypeName},
	{`{"type":"point","coordinates":[1,2]}`, `a:1:9: type "point": expected FeatureCollection, Feature, Point, MultiPoint, LineString, MultiLineString, Polygon, MultiPolygon or GeometryCollection`, geojson.TypeName},
	{`{"type":"Point"}`, `a:1:1: object: expected a member "coordinates"`, geojson.Structure},
	{`{"type":"Point","type":"Point"}`, `a:1:17: member "type": expected it once`, geojson.Structure},
	{`{"type":"Point","coordinates":[1,2],"coordinates":[1,2]}`, `a:1:37: member "coordinates": expected it once`, geojson.Structure},
	{`{"type":"Point","coordinates":[1,2],"geometries":[]}`, `a:1:37: member "geometries": expected one of coordinates, geometries, geometry and features`, geojson.Structure},
	{`{"type":"Point","coordinates":[1,2],"properties":{}}`, `a:1:1: object of type Point: expected no member "properties"`, geojson.Structure},
	{`{"type":"Point","coordinates":[1,2]} {}`, `a:1:38: "{": expected nothing behind the object: one text holds one GeoJSON object`, geojson.Syntax},
	{`{"type":"Point","coordinates":1}`, `a:1:31: "1": expected a list of coordinates in square brackets`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1]}`, `a:1:31: position: expected 2 or 3 numbers, not 1`, geojson.Structure},
	{`{"type":"Point","coordinates":[[1,2]]}`, `a:1:31: coordinates of a Point: expected positions 1 brackets deep, not 2`, geojson.Shape},
	{`{"type":"Point","coordinates":[[]]}`, `a:1:31: coordinates of a Point: expected positions 1 brackets deep`, geojson.Shape},
	{`{"type":"Point","coordinates":[NaN,2]}`, `a:1:32: x "NaN": expected a finite number such as 12.4`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1,-Infinity]}`, `a:1:34: y "-Infinity": expected a finite number such as 12.4`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1,2,null]}`, `a:1:36: z "null": expected a number such as 12.4`, geojson.BadNumber},
	{`{"type":"Point","coordinates":["1",2]}`, `a:1:32: x "1": expected a number such as 12.4, not a text`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1,2,[3]]}`, `a:1:36: z "[": expected a number such as 12.4`, geojson.Structure},
	{`{"type":"Point","coordinates":[01,2]}`, `a:1:32: x "01": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1.,2]}`, `a:1:32: x "1.": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[.5,2]}`, `a:1:32: x ".5": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[+5,2]}`, `a:1:32: x "+5": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[0x10,2]}`, `a:1:32: x "0x10": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1e,2]}`, `a:1:32: x "1e": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1_000,2]}`, `a:1:32: x "1_000": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1e999,2]}`, `a:1:32: x "1e999": expected a number within the range of doubles`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1e61,2]}`, `a:1:32: x "1e61": expected 0 or a number from 1e-60 to 1e60 in size`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1,1e-400]}`, `a:1:34: y "1e-400": expected 0 or a number from 1e-60 to 1e60 in size`, geojson.BadNumber},
	{`{"type":"Point","coordinates":[1,2}`, `a:1:35: "}": expected a comma or ']'`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1 2]}`, `a:1:34: "2": expected a comma or ']'`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1,,2]}`, `a:1:34: y ",": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1,2,]}`, `a:1:36: z "]": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Point","coordinates":[1,2`, "a:1:35: end of the text: expected a comma or ']'", geojson.Ended},
	{`{"type":"LineString","coordinates":[[1,2]]}`, `a:1:36: line: expected 2 or more positions, not 1`, geojson.Shape},
	{`{"type":"MultiLineString","coordinates":[[[1,2],[3,4]],[[5,6]]]}`, `a:1:56: line: expected 2 or more positions, not 1`, geojson.Shape},
	{`{"type":"MultiLineString","coordinates":[[],[[5,6],[7,8]]]}`, `a:1:41: line: expected 2 or more positions, not 0`, geojson.Shape},
	{`{"type":"LineString","coordinates":[[1,2],[]]}`, `a:1:43: position: expected 2 or 3 numbers, not none`, geojson.Structure},
	{`{"type":"LineString","coordinates":[[],[1,2]]}`, `a:1:40: coordinates: expected positions, or none, all at one depth of brackets`, geojson.Structure},
	{`{"type":"LineString","coordinates":[[1,2],[[3,4]]]}`, `a:1:43: coordinates: expected numbers 2 brackets deep, not further brackets`, geojson.Structure},
	{`{"type":"Polygon","coordinates":[[[1,2],[3,4]],[5,6]]}`, `a:1:48: position: expected 3 brackets around each position, as at the first, not 2`, geojson.Structure},
	{`{"type":"LineString","coordinates":[[[[[1]]]]]}`, `a:1:39: coordinates: expected numbers 4 brackets deep, not further brackets`, geojson.Structure},
	{`{"type":"LineString","coordinates":[[1,2],{"x":1}]}`, `a:1:43: "{": expected a list of coordinates in square brackets`, geojson.Syntax},
	{`{"type":"Polygon","coordinates":[[[0,0],[1,0],[0,0]]]}`, `a:1:34: ring: expected 4 or more positions, the last as the first, not 3`, geojson.Shape},
	{`{"type":"Polygon","coordinates":[[[0,0],[1,0],[1,1],[0,1]]]}`, `a:1:34: ring that ends at (0, 1): expected its first position (0, 0) at the end`, geojson.Shape},
	{`{"type":"Polygon","coordinates":[[[0,0,5],[1,0,5],[1,1,5],[0,0,6]]]}`, `a:1:34: ring that ends at height 6: expected that of its first position, 5`, geojson.Shape},
	{`{"type":"Polygon","coordinates":[[[0,0,5],[1,0,5],[1,1,5],[0,0]]]}`, `a:1:34: ring that ends at height none: expected that of its first position, 5`, geojson.Shape},
	{`{"type":"MultiPolygon","coordinates":[[[[0,0],[1,0],[1,1],[0,0]]],[]]}`, `a:1:38: polygon 2: expected 1 or more rings`, geojson.Shape},
	{`{"type":"MultiPolygon","coordinates":[[],[[[0,0],[1,0],[1,1],[0,0]]]]}`, `a:1:38: polygon 1: expected 1 or more rings`, geojson.Shape},
	{`{"type":"MultiPolygon","coordinates":[[[]],[[[0,0],[1,0],[1,1],[0,0]]]]}`, `a:1:38: ring: expected 4 or more positions, the last as the first, not 0`, geojson.Shape},
	{`{"type":"GeometryCollection","geometries":{}}`, `a:1:43: "{": expected '['`, geojson.Syntax},
	{`{"type":"GeometryCollection","geometries":[null]}`, `a:1:44: "null": expected a geometry in braces`, geojson.Syntax},
	{`{"type":"GeometryCollection","geometries":[{"type":"Feature"}]}`, `a:1:52: type "Feature": expected Point, MultiPoint, LineString, MultiLineString, Polygon, MultiPolygon or GeometryCollection`, geojson.TypeName},
	{`{"type":"Feature","properties":{}}`, `a:1:1: object: expected a member "geometry"`, geojson.Structure},
	{`{"type":"Feature","geometry":{"type":"Point","coordinates":[1,2],"properties":1}}`, `a:1:66: member "properties": expected none such in a geometry`, geojson.Structure},
	{`{"type":"Feature","geometry":[],"properties":{}}`, `a:1:30: "[": expected a geometry in braces`, geojson.Syntax},
	{`{"type":"Feature","geometry":nil}`, `a:1:30: "nil": expected null`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":[]}`, `a:1:48: "[": expected '{'`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"id":[1]}`, `a:1:40: id: expected a text or a number`, geojson.Structure},
	{`{"type":"Feature","geometry":null,"properties":{"a":1,"a":2}}`, `a:1:55: property "a": expected it once`, geojson.Structure},
	{`{"type":"Feature","geometry":null,"properties":{"a":tru}}`, `a:1:53: "tru": expected true`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":{"a":undefined}}`, `a:1:53: value "undefined": expected a number such as 12.4`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":{"a":[1,2}}`, `a:1:57: "}": expected a comma or ']'`, geojson.Syntax},
	{"{\"type\":\"Feature\",\"geometry\":null,\"properties\":{\"ä€𝄞\":\"\xe9\"}}", `a:1:56: byte "0xe9": expected UTF-8`, geojson.Encoding},
	{"{\"type\":\"Feature\",\"geometry\":null,\"properties\":{\"a\":\"b\nc\"}}", `a:1:55: text "\n": expected control characters written as \u000a`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":{"a":"\x41"}}`, `a:1:54: escape "\\x": expected one of \" \\ \/ \b \f \n \r \t \uXXXX`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":{"a":"\u00g1"}}`, `a:1:54: escape "\\u00g1": expected one of \" \\ \/ \b \f \n \r \t \uXXXX`, geojson.Syntax},
	{`{"type":"Feature","geometry":null,"properties":{"a":"\ud834"}}`, `a:1:54: escape "\\ud834": expected a pair of surrogates`, geojson.Encoding},
	{`{"type":"FeatureCollection"}`, `a:1:1: object: expected a member "features"`, geojson.Structure},
	{`{"type":"FeatureCollection","features":{}}`, `a:1:40: "{": expected '['`, geojson.Syntax},
	{"{\"type\":\"FeatureCollection\",\n\"features\":[\n  1]}", `a:3:3: feature 1: "1": expected a feature in braces`, geojson.Syntax},
	{"{\"type\":\"FeatureCollection\",\n\"features\":[\n{\"type\":\"Feature\",\"geometry\":null},\n {\"type\":\"Point\",\"coordinates\":[1,2]}]}", `a:4:18: feature 2: member "coordinates": expected none such in a feature`, geojson.Structure},
	{`{"type":"FeatureCollection","features":[{"type":"Point"}]}`, `a:1:49: feature 1: type "Point": expected Feature`, geojson.TypeName},
	{`{"type":"FeatureCollection","features":[{"type":"Feature","geometry":null} {}]}`, `a:1:76: feature 1: "{": expected a comma or ']'`, geojson.Syntax},
	{`{"type":"FeatureCollection","features":[{"type":"Feature","geometry":null},]}`, `a:1:76: feature 2: "]": expected a feature in braces`, geojson.Syntax},
	{`{"type":"FeatureCollection","features":[{"type":"Feature","geometry":null}`, `a:1:75: feature 1: end of the text: expected a comma or ']'`, geojson.Ended},
	{`{"type":"FeatureCollection","features":[],"features":[]}`, `a:1:43: member "features": expected it once`, geojson.Structure},
	{`{"features":[{"type":"Feature","geometry":null}],"type":"Feature"}`, `a:1:1: object: expected a member "geometry"`, geojson.Structure},
	{`{"features":[],"type":"Point","coordinates":[1,2]}`, `a:1:31: member "coordinates": expected one of coordinates, geometries, geometry and features`, geojson.Structure},
	{`{"type":"FeatureCollection","features":[],"properties":{}}`, `a:1:1: object of type FeatureCollection: expected no member "properties"`, geojson.Structure},
	{`{"type":"FeatureCollection","features":[]}{"type":"FeatureCollection"}`, `a:1:43: "{": expected nothing behind the object: one text holds one GeoJSON object`, geojson.Syntax},
}

func TestReadErrors(t *testing.T) {
	for _, c := range bad {
		for name, src := range map[string]io.Reader{"whole": strings.NewReader(c.text), "by bytes": iotest.OneByteReader(strings.NewReader(c.text))} {
			_, r, err := read(src, geojson.ReadOptions{File: "a"})
			var p *geojson.PositionError
			if !errors.As(err, &p) || err.Error() != c.want || p.Kind != c.kind {
				t.Errorf("%s (%s):\n got %v (kind %d)\nwant %s (kind %d)", c.text, name, err, kindOf(p), c.want, c.kind)
				continue
			}
			if _, again := r.Next(); again != err {
				t.Errorf("%s: then %v", c.text, again)
			}
		}
	}
}

func kindOf(p *geojson.PositionError) geojson.Kind {
	if p == nil {
		return 0
	}
	return p.Kind
}

func TestReadLimits(t *testing.T) {
	line := `{"type":"LineString","coordinates":[` + strings.Repeat("[1,2],", 99) + `[1,2]]}`
	nest := func(n int) string {
		return `{"type":"Feature","geometry":null,"properties":{"a":` + strings.Repeat("[", n) + strings.Repeat("]", n) + `}}`
	}
	collections := func(n int) string {
		return strings.Repeat(`{"type":"GeometryCollection","geometries":[`, n) + strings.Repeat("]}", n)
	}
	text := func(n int) string {
		return `{"type":"Feature","geometry":null,"properties":{"a":"` + strings.Repeat("x", n) + `"}}`
	}
	small := geojson.ReadOptions{PositionsMost: 101, TextMost: 100, DepthMost: 8}
	for _, c := range []struct {
		name, text string
		want       string // "" if it fits
	}{
		{"positions that fit", line, ""},
		{"positions", strings.Replace(line, "[1,2]", "[1,2],[3,4]", 1), "1:643: feature: expected at most 101 positions and lists of them"},
		{"empty lists", `{"type":"MultiLineString","coordinates":[` + strings.Repeat("[],", 101) + `[]]}`, "1:347: feature: expected at most 101 positions and lists of them"},
		{"geometries", `{"type":"GeometryCollection","geometries":[` + strings.Repeat(`{"type":"Point","coordinates":[]},`, 101), "1:1776: feature: expected at most 101 positions and lists of them"},
		{"depth that fits", nest(7), ""},
		{"depth", nest(9), "1:61: object or list: expected at most 8 of them inside one another"},
		{"collections in collections", collections(20), "1:389: object or list: expected at most 8 of them inside one another"},
		{"foreign lists", `{"a":` + strings.Repeat("[", 20), "1:14: object or list: expected at most 8 of them inside one another"},
		{"text that fits", text(83), ""},
		{"text", text(84), `1:53: text "xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx...": expected at most 83 bytes`},
		{"properties", `{"type":"Feature","geometry":null,"properties":{"a":1,"b":1,"c":1,"d":1,"e":1,"f":1,"g":1}}`, "1:83: properties of a feature: expected at most 100 bytes"},
		{"text in a list", `{"type":"Feature","geometry":null,"properties":{"a":["` + strings.Repeat("x", 200) + `"]}}`, `1:54: text "xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx...": expected at most 81 bytes`},
		{"long number", `{"type":"Point","coordinates":[0.` + strings.Repeat("1", 399) + `,2]}`, `1:32: x "0.11111111111111111111111111111111111111...": expected a number of at most 400 characters`},
		{"long number that fits", `{"type":"Point","coordinates":[0.` + strings.Repeat("1", 398) + `,2]}`, ""},
		{"many numbers", `{"type":"Point","coordinates":[` + strings.Repeat("1,", 64) + `1]}`, "1:160: position: expected at most 64 numbers"},
		{"long foreign text", `{"type":"Feature","geometry":null,"a":{"b":"` + strings.Repeat("x", 1000) + `"}}`, ""},
		{"long name", `{"` + strings.Repeat("x", 70_000) + `":1}`, `1:2: text "` + strings.Repeat("x", 60) + `...": expected at most 65536 bytes`},
	} {
		_, _, err := read(strings.NewReader(c.text), small)
		switch {
		case c.want == "" && err != nil:
			t.Errorf("%s: %v", c.name, err)
		case c.want != "" && (err == nil || err.Error() != c.want):
			t.Errorf("%s:\n got %v\nwant %s", c.name, err, c.want)
		}
	}
}

func TestReadTrouble(t *testing.T) {
	broken := errors.New("the cable is out")
	src := io.MultiReader(strings.NewReader(`{"type":"Point",`), iotest.ErrReader(broken))
	_, _, err := read(src, geojson.ReadOptions{File: "a"})
	var p *geojson.PositionError
	if !errors.Is(err, broken) || !errors.As(err, &p) || p.Kind != geojson.Unreadable || err.Error() != "a:1:17: text: the cable is out" {
		t.Errorf("%v", err)
	}
	_, _, err = read(stuck{}, geojson.ReadOptions{})
	if !errors.Is(err, io.ErrNoProgress) {
		t.Errorf("%v", err)
	}
}

// stuck never gives anything.
type stuck struct{}

func (stuck) Read([]byte) (int, error) { return 0, nil }

// Numbers, names and escapes across the ends of the buffer.
func TestBufferEnds(t *testing.T) {
	for pad := 65536 - 90; pad < 65536+5; pad++ {
		text := strings.Repeat(" ", pad) + `{"type":"Feature","geometry":{"type":"Point","coordinates":[-123.456,7.25e1]},"properties":{"ä":"\ud834\udd1e€"}}`
		features, r, err := read(strings.NewReader(text), geojson.ReadOptions{})
		if err != nil {
			t.Fatalf("pad %d: %v", pad, err)
		}
		name, _ := features[0].Properties[0].Value.Text()
		if features[0].Geometry.Shape != (orb.Point{-123.456, 72.5}) || features[0].Properties[0].Name != "ä" || name != "𝄞€" {
			t.Fatalf("pad %d: %v", pad, features)
		}
		if line, column := r.Place(); line != 1 || column != pad+1 {
			t.Fatalf("pad %d: at %d:%d", pad, line, column)
		}
	}
}

// endless gives out features for ever.
type endless struct {
	begun bool
	rest  string
}

func (e *endless) Read(p []byte) (int, error) {
	if e.rest == "" {
		e.rest = `,{"type":"Feature","geometry":{"type":"LineString","coordinates":[[1,2,3],[4,5,6]]},"properties":{"a":"b"}}` + "\n"
		if !e.begun {
			e.rest = `{"type":"FeatureCollection","features":[` + e.rest[1:]
			e.begun = true
		}
	}
	n := copy(p, e.rest)
	e.rest = e.rest[n:]
	return n, nil
}

func TestReaderStreams(t *testing.T) {
	r := geojson.NewReader(new(endless), geojson.ReadOptions{})
	one := func() {
		if _, err := r.Next(); err != nil {
			t.Fatal(err)
		}
	}
	for range 1000 {
		one()
	}
	// What a feature takes is its own: a handful of small pieces, however many came before.
	if n := testing.AllocsPerRun(10_000, one); n > 20 {
		t.Errorf("%v allocations a feature", n)
	}
	if line, _ := r.Place(); line != r.Number() {
		t.Errorf("line %d of feature %d", line, r.Number())
	}
}
