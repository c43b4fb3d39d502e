package geojson_test

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
	"isofacet/io/geojson/geojsontest"
	"isofacet/io/numtext"
)

// failer is a *testing.T or a *rapid.T.
type failer interface {
	Helper()
	Fatal(...any)
	Fatalf(string, ...any)
}

// write returns the text of features.
func write(t failer, opt geojson.Options, features ...geojson.Feature) (string, []geojson.Warning) {
	t.Helper()
	var text bytes.Buffer
	w := geojson.NewWriter(&text, opt)
	for i := range features {
		if err := w.Write(&features[i]); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	if w.Written() != len(features) {
		t.Fatalf("%d features written, want %d", w.Written(), len(features))
	}
	return text.String(), w.Warnings()
}

func ExampleWriter() {
	var text strings.Builder
	w := geojson.NewWriter(&text, geojson.Options{XYDecimals: 2, ZDecimals: 1, CoordinatesIn: "EPSG:25832"})
	err := w.Write(&geojson.Feature{
		Geometry:   geojson.Geometry{Shape: orb.LineString{{430000, 5600000}, {430010.5, 5600002}}, Z: []float64{431.5}},
		Properties: []geojson.Property{{"level", geojson.Number(431.5)}, {"closed", geojson.Bool(false)}},
	})
	if err == nil {
		err = w.Close()
	}
	fmt.Print(text.String(), err, "\n", w.Warnings()[0])
	// Output:
	// {"type":"FeatureCollection","coordinates_in":"EPSG:25832","features":[
	// {"type":"Feature","geometry":{"type":"LineString","coordinates":[[430000.00,5600000.00,431.5],[430010.50,5600002.00,431.5]]},"properties":{"level":431.5,"closed":false}}
	// ]}
	// <nil>
	// GeoJSON is for longitude and latitude (RFC 7946, section 4): coordinates written as they are, with a member coordinates_in that says "EPSG:25832"
}

func TestWriteShapes(t *testing.T) {
	nan, negativeZero := math.NaN(), math.Copysign(0, -1)
	square, hole := orb.Ring{{0, 0}, {4, 0}, {4, 4}, {0, 4}, {0, 0}}, orb.Ring{{1, 1}, {1, 2}, {2, 2}, {1, 1}}
	for _, c := range []struct {
		name  string
		shape orb.Geometry
		z     []float64
		want  string
	}{
		{"point", orb.Point{1, 2}, nil, `{"type":"Point","coordinates":[1,2]}`},
		{"point with height", orb.Point{1, 2}, []float64{3.5}, `{"type":"Point","coordinates":[1,2,3.5]}`},
		{"negative zero", orb.Point{negativeZero, 0}, []float64{negativeZero}, `{"type":"Point","coordinates":[0,0,0]}`},
		{"points", orb.MultiPoint{{1, 2}, {3, 4}}, []float64{5, 6}, `{"type":"MultiPoint","coordinates":[[1,2,5],[3,4,6]]}`},
		{"no points", orb.MultiPoint{}, nil, `{"type":"MultiPoint","coordinates":[]}`},
		{"line, one height", orb.LineString{{1, 2}, {3, 4}}, []float64{7}, `{"type":"LineString","coordinates":[[1,2,7],[3,4,7]]}`},
		{"line, mixed heights", orb.LineString{{1, 2}, {3, 4}}, []float64{7, nan}, `{"type":"LineString","coordinates":[[1,2,7],[3,4]]}`},
		{"lines", orb.MultiLineString{{{1, 2}, {3, 4}}, {{5, 6}, {7, 8}}}, []float64{1, 2, 3, 4}, `{"type":"MultiLineString","coordinates":[[[1,2,1],[3,4,2]],[[5,6,3],[7,8,4]]]}`},
		{"ring", square, nil, `{"type":"Polygon","coordinates":[[[0,0],[4,0],[4,4],[0,4],[0,0]]]}`},
		{"polygon", orb.Polygon{square, hole}, nil, `{"type":"Polygon","coordinates":[[[0,0],[4,0],[4,4],[0,4],[0,0]],[[1,1],[1,2],[2,2],[1,1]]]}`},
		{"polygon the other way", orb.Polygon{backward(square), backward(hole)}, nil, `{"type":"Polygon","coordinates":[[[0,0],[4,0],[4,4],[0,4],[0,0]],[[1,1],[1,2],[2,2],[1,1]]]}`},
		{"heights turn with the ring", backward(hole), []float64{1, 2, 3, 1}, `{"type":"Polygon","coordinates":[[[1,1,1],[2,2,2],[1,2,3],[1,1,1]]]}`},
		{"heights turned", orb.Polygon{hole}, []float64{1, 3, 2, 1}, `{"type":"Polygon","coordinates":[[[1,1,1],[2,2,2],[1,2,3],[1,1,1]]]}`},
		{"polygons", orb.MultiPolygon{{square}, {square, hole}}, nil, `{"type":"MultiPolygon","coordinates":[[[[0,0],[4,0],[4,4],[0,4],[0,0]]],[[[0,0],[4,0],[4,4],[0,4],[0,0]],[[1,1],[1,2],[2,2],[1,1]]]]}`},
		{"collection", orb.Collection{orb.Point{1, 2}, orb.LineString{{3, 4}, {5, 6}}}, []float64{7, 8, 9}, `{"type":"GeometryCollection","geometries":[{"type":"Point","coordinates":[1,2,7]},{"type":"LineString","coordinates":[[3,4,8],[5,6,9]]}]}`},
		{"nothing", nil, nil, `null`},
	} {
		text, _ := write(t, geojson.Options{XYDecimals: numtext.Shortest, ZDecimals: numtext.Shortest}, geojson.Feature{Geometry: geojson.Geometry{Shape: c.shape, Z: c.z}})
		want := `{"type":"FeatureCollection","coordinates_in":"unstated","features":[` + "\n" +
			`{"type":"Feature","geometry":` + c.want + `,"properties":{}}` + "\n]}\n"
		if text != want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, text, want)
		}
		if err := geojsontest.Check([]byte(text), geojsontest.RefuseFlat); err != nil {
			t.Errorf("%s: %v", c.name, err)
		}
	}
}

func backward(r orb.Ring) orb.Ring {
	b := r.Clone()
	b.Reverse()
	return b
}

func TestWriteProperties(t *testing.T) {
	text, _ := write(t, geojson.Options{CoordinatesIn: geojson.LonLat, Members: []geojson.Property{{"z_unit", geojson.String("m")}}}, geojson.Feature{
		ID: geojson.Int(7),
		Properties: []geojson.Property{
			{"number", geojson.Number(0.1)}, {"fixed", geojson.Fixed(-0.04, 1)}, {"none", geojson.Number(math.NaN())}, {"left out", geojson.Value{}},
			{"whole", geojson.Int(-9007199254740993)}, {"text", geojson.String("a \"b\" \\ \n\t\r\x01 é 𝄞 \u2028 \xff.")},
			{"yes", geojson.Bool(true)}, {"no", geojson.Bool(false)}, {"null", geojson.Null()}, {"", geojson.Number(1e21)},
		}})
	want := `{"type":"FeatureCollection","z_unit":"m","features":[` + "\n" +
		`{"type":"Feature","id":7,"geometry":null,"properties":{"number":0.1,"fixed":0.0,"none":null,"whole":-9007199254740993,` +
		`"text":"a \"b\" \\ \n\t\r\u0001 é 𝄞 \u2028 ` + "\uFFFD" + `.","yes":true,"no":false,"null":null,"":1e21}}` + "\n]}\n"
	if text != want {
		t.Errorf("got  %s\nwant %s", text, want)
	}
	if err := geojsontest.Check([]byte(text), geojsontest.RefuseFlat); err != nil {
		t.Error(err)
	}
}

func TestWriteNothing(t *testing.T) {
	text, warnings := write(t, geojson.Options{CoordinatesIn: geojson.LonLat, BBox: true})
	if text != `{"type":"FeatureCollection","features":[]}`+"\n" || len(warnings) != 0 {
		t.Errorf("%s %v", text, warnings)
	}
}

func TestBBoxIsWhatIsWritten(t *testing.T) {
	a := geojson.Feature{Geometry: geojson.Geometry{Shape: orb.LineString{{1.26, -3.04}, {-7.77, 2}}, Z: []float64{5.55, 4.44}}}
	b := geojson.Feature{Geometry: geojson.Geometry{Shape: orb.Point{0, 9.96}}}
	none := geojson.Feature{}
	opt := geojson.Options{XYDecimals: 1, ZDecimals: 0, BBox: true}
	for _, c := range []struct {
		features []geojson.Feature
		want     string
	}{
		{[]geojson.Feature{a}, `],"bbox":[-7.8,-3.0,4,1.3,2.0,6]}`},
		{[]geojson.Feature{a, none, b}, `],"bbox":[-7.8,-3.0,1.3,10.0]}`},
		{[]geojson.Feature{none}, "]}"},
	} {
		text, _ := write(t, opt, c.features...)
		if !strings.HasSuffix(text, c.want+"\n") {
			t.Errorf("%s does not end with %s", text, c.want)
		}
		if err := geojsontest.Check([]byte(text), geojsontest.RefuseFlat); err != nil {
			t.Error(err)
		}
	}
}

// Three positions along a wall, a tenth of a millimetre wide: in full the ring is counter-clockwise, at millimetres it is flat, and with
// another digit it has turned over.
func TestDirectionIsThatOfTheTextWritten(t *testing.T) {
	turns := orb.Ring{{0, 0}, {1, 0.0014}, {2, 0.0029}, {0, 0}} // full: area +0.00005; at 0.001: (1, 0.001), (2, 0.003): +; at 0.01: flat
	over := orb.Ring{{0, 0}, {1, 0.0016}, {2, 0.0034}, {0, 0}}  // full: +; at 0.001: (1, 0.002), (2, 0.003): clockwise
	for _, c := range []struct {
		ring      orb.Ring
		decimals  int
		flattened bool
		want      string
	}{
		{turns, -1, false, "[[0,0],[1,0.0014],[2,0.0029],[0,0]]"},
		{turns, 3, false, "[[0.000,0.000],[1.000,0.001],[2.000,0.003],[0.000,0.000]]"},
		{turns, 2, true, "[[0.00,0.00],[1.00,0.00],[2.00,0.00],[0.00,0.00]]"},
		{over, 4, false, "[[0.0000,0.0000],[1.0000,0.0016],[2.0000,0.0034],[0.0000,0.0000]]"},
		{over, 3, false, "[[0.000,0.000],[2.000,0.003],[1.000,0.002],[0.000,0.000]]"},
		{backward(turns), 2, true, "[[0.00,0.00],[1.00,0.00],[2.00,0.00],[0.00,0.00]]"},
	} {
		text, warnings := write(t, geojson.Options{XYDecimals: c.decimals, CoordinatesIn: geojson.LonLat}, geojson.Feature{Geometry: geojson.Geometry{Shape: orb.Polygon{c.ring}}})
		if !strings.Contains(text, "["+c.want+"]") {
			t.Errorf("decimals %d: %s, want %s", c.decimals, text, c.want)
		}
		if flattened := len(warnings) == 1 && warnings[0].Kind == geojson.Flattened; flattened != c.flattened {
			t.Errorf("decimals %d: %v", c.decimals, warnings)
		}
		if err := geojsontest.Check([]byte(text), geojsontest.Flat(c.flattened)); err != nil {
			t.Error(err)
		}
	}
}

func TestWriteWarnings(t *testing.T) {
	short := geojson.Feature{Geometry: geojson.Geometry{Shape: orb.LineString{{10.001, 5}, {10.002, 5}}}}
	far := geojson.Feature{Geometry: geojson.Geometry{Shape: orb.Point{430000, 5600000}}}
	for _, c := range []struct {
		label string
		want  string
	}{
		{geojson.LonLat, `[1 feature lies beyond 180 degrees of longitude or 90 of latitude, in a file that says OGC:CRS84, the first in feature 2 1 line or ring has no length or area at the decimals written, the first in feature 1]`},
		{"EPSG:4326", `[1 feature lies beyond 180 degrees of longitude or 90 of latitude, in a file that says EPSG:4326, the first in feature 2 1 line or ring has no length or area at the decimals written, the first in feature 1]`},
		{"", `[GeoJSON is for longitude and latitude (RFC 7946, section 4): coordinates written as they are, with a member coordinates_in that says "unstated" 1 line or ring has no length or area at the decimals written, the first in feature 1]`},
	} {
		_, warnings := write(t, geojson.Options{XYDecimals: 2, CoordinatesIn: c.label}, short, far)
		if got := fmt.Sprint(warnings); got != c.want {
			t.Errorf("label %q:\n got %s\nwant %s", c.label, got, c.want)
		}
	}
}

func TestWriteErrors(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	shape := func(s orb.Geometry, z ...float64) geojson.Feature {
		return geojson.Feature{Geometry: geojson.Geometry{Shape: s, Z: z}}
	}
	with := func(p ...geojson.Property) geojson.Feature { return geojson.Feature{Properties: p} }
	for _, c := range []struct {
		feature geojson.Feature
		want    string
	}{
		{shape(orb.Point{nan, 0}), "geojson: feature 2: position 1: (NaN, 0): expected finite coordinates"},
		{shape(orb.LineString{{0, 0}, {0, inf}}), "geojson: feature 2: position 2: (0, +Inf): expected finite coordinates"},
		{shape(orb.Point{0, 0}, inf), "geojson: feature 2: position 1: height +Inf: expected a finite one"},
		{shape(orb.LineString{{0, 0}}), "geojson: feature 2: line: 1 position: expected 2 or more"},
		{shape(orb.MultiLineString{{{0, 0}, {1, 1}}, {}}), "geojson: feature 2: part 2: line: 0 positions: expected 2 or more"},
		{shape(orb.Polygon{}), "geojson: feature 2: polygon: no ring: expected 1 or more"},
		{shape(orb.Polygon{{{0, 0}, {1, 0}, {0, 0}}}), "geojson: feature 2: ring 1: 3 positions: expected 4 or more, the last as the first"},
		{shape(orb.Polygon{{{0, 0}, {1, 0}, {1, 1}, {0, 1}}}), "geojson: feature 2: ring 1: ends at (0, 1): expected its first position (0, 0)"},
		{shape(orb.Polygon{{{0, 0}, {1, 0}, {1, 1}, {0, 0}}}, 1, 2, 3, 4), "geojson: feature 2: ring 1: ends at height 4: expected that of its first position, 1"},
		{shape(orb.Polygon{{{0, 0}, {1, nan}, {1, 1}, {0, 0}}}), "geojson: feature 2: ring 1: position 2: (1, NaN): expected finite coordinates"},
		{shape(orb.LineString{{0, 0}, {1, 1}}, 1, 2, 3), "geojson: feature 2: heights: 3: expected 1 or 2, as there are positions"},
		{shape(nil, 1), "geojson: feature 2: heights: 1: expected none where there is no shape"},
		{shape(orb.Bound{}), "geojson: feature 2: geometry: orb.Bound: expected a point, line, polygon, several of them, or a collection"},
		{shape(orb.Collection{nil}), "geojson: feature 2: geometry: <nil>: expected a point, line, polygon, several of them, or a collection"},
		{with(geojson.Property{"a", geojson.Number(inf)}), `geojson: feature 2: property "a": +Inf: expected a finite number`},
		{with(geojson.Property{"a", geojson.Null()}, geojson.Property{"b", geojson.Null()}, geojson.Property{"a", geojson.Int(1)}), `geojson: feature 2: property "a": given twice: expected unlike names`},
		{geojson.Feature{ID: geojson.Bool(true)}, "geojson: feature 2: id: true: expected a string or a number"},
	} {
		w := geojson.NewWriter(new(bytes.Buffer), geojson.Options{})
		if err := w.Write(&geojson.Feature{}); err != nil {
			t.Fatal(err)
		}
		err := w.Write(&c.feature)
		var we *geojson.WriteError
		if !errors.As(err, &we) || err.Error() != c.want {
			t.Errorf("got  %v\nwant %s", err, c.want)
		}
		if again := w.Write(&geojson.Feature{}); again != err {
			t.Errorf("the next Write returns %v", again)
		}
		if again := w.Close(); again != err {
			t.Errorf("Close returns %v", again)
		}
	}
}

func TestMembersThatMeanSomething(t *testing.T) {
	for _, name := range []string{"type", "features", "bbox", "crs", "coordinates_in", "geometry"} {
		w := geojson.NewWriter(new(bytes.Buffer), geojson.Options{Members: []geojson.Property{{name, geojson.Int(1)}}})
		if err := w.Close(); err == nil || !strings.Contains(err.Error(), "geojson: collection: member: "+name) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// broken fails after some bytes.
type broken struct{ left int }

var errFull = errors.New("no space left")

func (b *broken) Write(p []byte) (int, error) {
	if b.left -= len(p); b.left < 0 {
		return 0, errFull
	}
	return len(p), nil
}

func TestErrorsOfTheDestinationAreFinal(t *testing.T) {
	features := manyFeatures(20_000)
	for _, size := range []int{0, 1000, 100_000, 1_000_000} {
		one := geojson.NewWriter(&broken{size}, geojson.Options{})
		var err error
		for i := 0; err == nil && i < len(features); i++ {
			err = one.Write(&features[i])
		}
		if err == nil {
			err = one.Close()
		}
		if !errors.Is(err, errFull) || !errors.Is(one.Close(), errFull) {
			t.Errorf("%d bytes, one by one: %v, then %v", size, err, one.Close())
		}
		batch := geojson.NewWriter(&broken{size}, geojson.Options{Workers: 3})
		if err := batch.WriteBatch(features); !errors.Is(err, errFull) || !errors.Is(batch.Close(), errFull) {
			t.Errorf("%d bytes, as a batch: %v", size, err)
		}
	}
	w := geojson.NewWriter(new(bytes.Buffer), geojson.Options{})
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	if err := w.Write(&features[0]); err == nil {
		t.Error("a closed Writer writes")
	}
}

// manyFeatures are lines and triangles of some 150 bytes each.
func manyFeatures(n int) []geojson.Feature {
	features := make([]geojson.Feature, n)
	for i := range features {
		x, y := float64(i%100)*1.5, float64(i/100)/3
		g := geojson.Geometry{Shape: orb.LineString{{x, y}, {x + 1, y}}, Z: []float64{float64(i)}}
		if i%3 == 0 {
			g = geojson.Geometry{Shape: orb.Polygon{{{x, y}, {x, y + 1}, {x + 1, y}, {x, y}}}}
		}
		features[i] = geojson.Feature{Geometry: g, Properties: []geojson.Property{{"number", geojson.Int(int64(i))}}}
	}
	return features
}

// Neither workers nor batches show in the bytes.
func TestBatchesWriteTheSameBytes(t *testing.T) {
	features := manyFeatures(12_000) // several blocks
	features[5432].Geometry = geojson.Geometry{Shape: orb.LineString{{1e-5, 0}, {2e-5, 0}}}
	opt := geojson.Options{XYDecimals: 3, ZDecimals: 1, BBox: true, CoordinatesIn: geojson.LonLat}
	want, warnings := write(t, opt, features...)
	for _, workers := range []int{1, 2, 3, 8} {
		for _, cuts := range [][]int{{12_000}, {1, 12_000}, {6_000, 6_001, 6_002, 12_000}} {
			var text bytes.Buffer
			opt.Workers = workers
			w := geojson.NewWriter(&text, opt)
			from := 0
			for _, to := range cuts {
				if err := w.WriteBatch(features[from:to]); err != nil {
					t.Fatal(err)
				}
				from = to
			}
			if err := w.Close(); err != nil {
				t.Fatal(err)
			}
			if text.String() != want || w.Written() != len(features) || fmt.Sprint(w.Warnings()) != fmt.Sprint(warnings) {
				t.Errorf("%d workers, batches up to %v: other text, or warnings %v, want %v", workers, cuts, w.Warnings(), warnings)
			}
		}
	}
	features[10_000].Geometry.Z = []float64{1, 2, 3, 4, 5}
	var texts []string
	for _, workers := range []int{1, 4} {
		opt.Workers = workers
		w := geojson.NewWriter(new(bytes.Buffer), opt)
		texts = append(texts, fmt.Sprint(w.WriteBatch(features)))
	}
	if texts[0] != texts[1] || !strings.Contains(texts[0], "feature 10001: heights: 5") {
		t.Errorf("errors %q", texts)
	}
}

// A Writer must not hold more than a feature and a buffer.
func TestWriterStreams(t *testing.T) {
	var text bytes.Buffer
	w := geojson.NewWriter(&text, geojson.Options{XYDecimals: 3})
	held := 0
	total := 0
	for i, f := range manyFeatures(20_000) {
		if err := w.Write(&f); err != nil {
			t.Fatal(err)
		}
		total = (i + 1) * 100 // less than is written
		held = max(held, total-text.Len())
	}
	if held > 70_000 {
		t.Errorf("%d bytes held back", held)
	}
}
