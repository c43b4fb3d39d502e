package geojson_test

import (
	"bytes"
	"encoding/json"
	"math"
	"reflect"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/io/geojson"
	"isofacet/io/geojson/geojsontest"
	"isofacet/io/numtext"
)

// coordinate draws what the whole program accepts: 0, or 1e-60 to 1e60 in size.
func coordinate(t *rapid.T, label string) float64 {
	var v float64
	switch rapid.IntRange(0, 3).Draw(t, label+" kind") {
	case 0:
		v = float64(rapid.IntRange(-9, 9).Draw(t, label))
	case 1:
		v = rapid.Float64Range(-6e6, 6e6).Draw(t, label)
	case 2:
		v = float64(rapid.IntRange(-6e9, 6e9).Draw(t, label)) / 1000
	case 3:
		v = rapid.Float64Range(-1e60, 1e60).Draw(t, label)
	}
	if math.Abs(v) < 1e-60 {
		return 0
	}
	return v
}

func drawPoints(t *rapid.T, least, most int) []orb.Point {
	points := make([]orb.Point, rapid.IntRange(least, most).Draw(t, "positions"))
	for i := range points {
		points[i] = orb.Point{coordinate(t, "x"), coordinate(t, "y")}
	}
	return points
}

func drawRing(t *rapid.T) orb.Ring {
	points := drawPoints(t, 3, 6)
	return append(points, points[0])
}

func drawPolygon(t *rapid.T) orb.Polygon {
	p := make(orb.Polygon, rapid.IntRange(1, 3).Draw(t, "rings"))
	for i := range p {
		p[i] = drawRing(t)
	}
	return p
}

func drawShape(t *rapid.T, depth int) orb.Geometry {
	switch rapid.IntRange(0, 7-depth/3).Draw(t, "shape") {
	case 0:
		return drawPoints(t, 1, 1)[0]
	case 1:
		return orb.MultiPoint(drawPoints(t, 1, 4))
	case 2:
		return orb.LineString(drawPoints(t, 2, 5))
	case 3:
		lines := make(orb.MultiLineString, rapid.IntRange(1, 3).Draw(t, "lines"))
		for i := range lines {
			lines[i] = drawPoints(t, 2, 4)
		}
		return lines
	case 4:
		return drawPolygon(t)
	case 5:
		polygons := make(orb.MultiPolygon, rapid.IntRange(1, 3).Draw(t, "polygons"))
		for i := range polygons {
			polygons[i] = drawPolygon(t)
		}
		return polygons
	case 6:
		return nil
	}
	parts := make(orb.Collection, 0, 3)
	for range rapid.IntRange(1, 3).Draw(t, "parts") {
		if part := drawShape(t, depth+1); part != nil {
			parts = append(parts, part)
		}
	}
	if len(parts) == 0 {
		return nil
	}
	return parts
}

func drawFeature(t *rapid.T) geojson.Feature {
	g := geojson.Geometry{Shape: drawShape(t, 0)}
	if n := g.NumPositions(); n > 0 {
		switch rapid.IntRange(0, 2).Draw(t, "heights") {
		case 0: // of its own, each
			for range n {
				g.Z = append(g.Z, coordinate(t, "z"))
			}
			closeHeights(g.Shape, g.Z)
		case 1: // one for all
			z := coordinate(t, "z")
			for range n {
				g.Z = append(g.Z, z)
			}
		}
	}
	f := geojson.Feature{Geometry: g}
	names := map[string]bool{}
	for range rapid.IntRange(0, 20).Draw(t, "properties") {
		p := geojson.Property{Name: rapid.String().Draw(t, "name")}
		if names[p.Name] {
			continue
		}
		names[p.Name] = true
		switch rapid.IntRange(0, 4).Draw(t, "value") {
		case 0:
			p.Value = geojson.Number(rapid.Float64Range(0.5, 0.99).Draw(t, "number")) // whole ones come back as Int
		case 1:
			p.Value = geojson.Int(rapid.Int64().Draw(t, "whole"))
		case 2:
			p.Value = geojson.String(rapid.String().Draw(t, "text"))
		case 3:
			p.Value = geojson.Bool(rapid.Bool().Draw(t, "truth"))
		case 4:
			p.Value = geojson.Null()
		}
		f.Properties = append(f.Properties, p)
	}
	switch rapid.IntRange(0, 2).Draw(t, "id") {
	case 1:
		f.ID = geojson.Int(rapid.Int64().Draw(t, "number"))
	case 2:
		f.ID = geojson.String(rapid.String().Draw(t, "id text"))
	}
	return f
}

// eachRing calls f with every ring of s, whether it is an outer one, and the number of its first position.
func eachRing(s orb.Geometry, f func(ring orb.Ring, outer bool, first int)) { rings(s, 0, f) }

func rings(s orb.Geometry, n int, f func(orb.Ring, bool, int)) int {
	switch s := s.(type) {
	case orb.Polygon:
		for i, ring := range s {
			f(ring, i == 0, n)
			n += len(ring)
		}
		return n
	case orb.MultiPolygon:
		for _, p := range s {
			n = rings(p, n, f)
		}
		return n
	case orb.Collection:
		for _, part := range s {
			n = rings(part, n, f)
		}
		return n
	}
	return n + geojson.Geometry{Shape: s}.NumPositions()
}

// closeHeights gives the last position of every ring the height of its first.
func closeHeights(s orb.Geometry, z []float64) {
	eachRing(s, func(ring orb.Ring, _ bool, first int) { z[first+len(ring)-1] = z[first] })
}

// positive turns rings as the Writer does, by an oracle of its own, and removes signs of zero.
func positive(f *geojson.Feature, turned func(orb.Ring) int) {
	eachRing(f.Geometry.Shape, func(ring orb.Ring, outer bool, first int) {
		if way := turned(ring); way != 0 && way > 0 != outer {
			ring.Reverse()
			if z := f.Geometry.Z; z != nil {
				z = z[first : first+len(ring)]
				for i, k := 0, len(z)-1; i < k; i, k = i+1, k-1 {
					z[i], z[k] = z[k], z[i]
				}
			}
		}
	})
}

func TestWriteThenRead(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		features := rapid.SliceOfN(rapid.Custom(drawFeature), 0, 4).Draw(t, "features")
		label := rapid.SampledFrom([]string{"", "EPSG:25832", geojson.LonLat, "a \"b\""}).Draw(t, "label")
		text, _ := write(t, geojson.Options{XYDecimals: numtext.Shortest, ZDecimals: numtext.Shortest, CoordinatesIn: label, BBox: rapid.Bool().Draw(t, "bbox")}, features...)
		if err := geojsontest.Check([]byte(text), geojsontest.AllowFlat); err != nil {
			t.Fatalf("%v in %s", err, text)
		}
		back, r, err := read(strings.NewReader(text), geojson.ReadOptions{})
		if err != nil {
			t.Fatalf("%v in %s", err, text)
		}
		if len(back) != len(features) {
			t.Fatalf("%d features, want %d", len(back), len(features))
		}
		for i := range features {
			positive(&features[i], exactTurn)
			if !sameFeature(&back[i], &features[i]) {
				t.Fatalf("feature %d reads\n     %+v\nwant %+v", i, back[i], features[i])
			}
		}
		if (label == geojson.LonLat) != (len(r.Members()) == 0) {
			t.Fatalf("members %v", r.Members())
		}
	})
}

func sameFeature(a, b *geojson.Feature) bool {
	if len(a.Properties) != len(b.Properties) {
		return false
	}
	for i := range a.Properties {
		if a.Properties[i].Name != b.Properties[i].Name || !sameValue(a.Properties[i].Value, b.Properties[i].Value) {
			return false
		}
	}
	return reflect.DeepEqual(a.Geometry.Shape, b.Geometry.Shape) && sameHeights(a.Geometry.Z, b.Geometry.Z) && sameValue(a.ID, b.ID)
}

// sameValue: a number without a fraction comes back as a whole number.
func sameValue(a, b geojson.Value) bool {
	x, ok := a.Float()
	y, too := b.Float()
	return a == b || a.Kind() != b.Kind() && ok && too && x == y
}

func TestEveryDecimalsMakeGeoJSON(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		features := rapid.SliceOfN(rapid.Custom(drawFeature), 1, 3).Draw(t, "features")
		opt := geojson.Options{XYDecimals: rapid.IntRange(0, 6).Draw(t, "xy"), ZDecimals: rapid.IntRange(0, 6).Draw(t, "z"), BBox: true}
		text, _ := write(t, opt, features...)
		if err := geojsontest.Check([]byte(text), geojsontest.AllowFlat); err != nil {
			t.Fatalf("%v in %s", err, text)
		}
		// Rounding is done once: what is read back writes the same text.
		back, r, err := read(strings.NewReader(text), geojson.ReadOptions{})
		if err != nil {
			// Rounding brings a small coordinate to 0, and a large one nowhere: nothing leaves the range.
			t.Fatalf("%v in %s", err, text)
		}
		opt.CoordinatesIn, _ = r.Members()[0].Value.Text()
		if again, _ := write(t, opt, back...); again != text {
			t.Fatalf("first  %s\nsecond %s", text, again)
		}
	})
}

// FuzzReader looks for texts that make a Reader panic, that it takes for GeoJSON although they are not even JSON, or that do
// not survive being written and read again.
func FuzzReader(f *testing.F) {
	for _, c := range bad {
		f.Add([]byte(c.text))
	}
	f.Add([]byte(`{"type":"FeatureCollection","crs":{"properties":{"name":"x"}},"features":[{"type":"Feature","id":1,"geometry":{"type":"GeometryCollection","geometries":[{"type":"MultiPolygon","coordinates":[[[[0,0],[0,4,1],[4,0],[0,0]],[[1,1],[1,2],[2,1],[1,1]]]]},{"type":"MultiLineString","coordinates":[[[1,2],[3,4]]]}]},"properties":{"a":[1,{"b":"\u00e9"}],"c":1e5,"d":12345678901234567890}}]}`))
	f.Add([]byte(`{"type":"MultiPoint","coordinates":[[1,2,3,4],[5,6]],"bbox":[1]}`))
	f.Fuzz(func(t *testing.T, text []byte) {
		opt := geojson.ReadOptions{PositionsMost: 1 << 16, TextMost: 1 << 16, DepthMost: 20}
		features, _, err := read(bytes.NewReader(text), opt)
		if err != nil {
			return
		}
		if plain := bytes.TrimPrefix(text, []byte("\ufeff")); !json.Valid(plain) {
			t.Fatalf("read as GeoJSON, but is no JSON: %q", text)
		}
		written, _ := write(t, geojson.Options{XYDecimals: numtext.Shortest, ZDecimals: numtext.Shortest}, features...)
		if err := geojsontest.Check([]byte(written), geojsontest.AllowFlat); err != nil {
			t.Fatalf("%v in %s, of %q", err, written, text)
		}
		back, _, err := read(strings.NewReader(written), geojson.ReadOptions{})
		if err != nil || len(back) != len(features) {
			t.Fatalf("%d features, want %d, %v", len(back), len(features), err)
		}
		for i := range features {
			positive(&features[i], exactTurn)
			if !sameFeature(&back[i], &features[i]) {
				t.Fatalf("%+v\nreads %+v", features[i], back[i])
			}
		}
	})
}
