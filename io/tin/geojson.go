package tin

import (
	"context"
	"fmt"
	"io"
	"math"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
)

// ReadGeoJSON reads triangles that are polygons of a GeoJSON text; name stands for it in
// errors, which are *Error, *geojson.PositionError, or ctx.Err().
func ReadGeoJSON(ctx context.Context, r io.Reader, name string) (*Set, error) {
	s := &Set{}
	number := map[orb.Point]int32{}
	in := geojson.NewReader(r, geojson.ReadOptions{File: name})
	for {
		f, err := in.Next()
		if err == io.EOF {
			break
		}
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			return nil, err
		}
		refuse := func(seen, expected string) error {
			return &Error{File: name, Feature: in.Number(), Seen: seen, Expected: expected}
		}
		p, ok := f.Geometry.Shape.(orb.Polygon)
		switch {
		case f.Geometry.Shape == nil:
			return nil, refuse("no geometry", "a triangle: a polygon with three corners")
		case !ok:
			return nil, refuse("a "+f.Geometry.Shape.GeoJSONType(), "a triangle: a polygon with three corners")
		case len(p) != 1:
			return nil, refuse(fmt.Sprintf("a polygon of %d rings", len(p)), "one ring with three corners")
		case len(p[0]) != 4:
			return nil, refuse(fmt.Sprintf("a ring of %d positions", len(p[0])), "four, the last repeating the first: a triangle")
		case len(f.Geometry.Z) != 4:
			return nil, refuse("a triangle without heights", "a height at every corner")
		}
		var t [3]int32
		for k := range 3 {
			at, z := p[0][k], f.Geometry.Z[k]
			if math.IsNaN(z) {
				return nil, refuse(fmt.Sprintf("no height at (%v, %v)", at[0], at[1]), "a height at every corner")
			}
			i, known := number[at]
			if !known {
				i = int32(len(s.Points))
				number[at] = i
				s.noteDecimals(at, z)
				s.Points, s.Z = append(s.Points, at), append(s.Z, z)
			} else if s.Z[i] != z {
				return nil, refuse(fmt.Sprintf("height %v at (%v, %v), where an earlier triangle has %v", z, at[0], at[1], s.Z[i]), "one height at one place")
			}
			t[k] = i
		}
		s.Triangles = append(s.Triangles, t)
	}
	for _, m := range in.Members() {
		text, _ := m.Value.Text()
		switch m.Name {
		case "coordinates_in":
			s.CoordinatesIn = text
		case "horizontal_datum":
			s.HorizontalDatum = text
		case "vertical_datum":
			s.VerticalDatum = text
		}
	}
	if len(s.Triangles) == 0 {
		return nil, &Error{File: name, Seen: "no triangle", Expected: "at least one"}
	}
	return s, nil
}
