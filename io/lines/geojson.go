package lines

import (
	"bytes"
	"context"
	"io"
	"math"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
)

// GeoJSON.
//
// Every line and every ring of a polygon is a line, in the order of the file;
// points are strung by the line that they name, as rows of a text are.

// geoJSON reads a GeoJSON text and keeps its lines. Errors are
// *geojson.PositionError for text that is none; that package refuses polygons with open rings, and
// lines of one position, with their place.
func (c *checker) geoJSON(ctx context.Context, name string, data []byte) error {
	g := featureReader{checker: c, file: name, byName: make(map[string]*Line)}
	r := geojson.NewReader(bytes.NewReader(data), geojson.ReadOptions{File: name})
	for {
		f, err := r.Next()
		if err == io.EOF {
			break
		}
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			return err
		}
		g.feature(f, r.Number())
	}
	for _, w := range r.Warnings() {
		if w.Kind != geojson.MixedHeights { // a fault, by the rules of lines
			c.set.warn(name, 0, w.String())
		}
	}
	for _, l := range g.list {
		c.keep(l)
	}
	return nil
}

// featureReader collects the lines of one file.
type featureReader struct {
	*checker
	file   string
	list   []*Line
	byName map[string]*Line // those strung from points
}

func (g *featureReader) feature(f *geojson.Feature, number int) {
	refuse := func(kind Kind, seen, expected string) {
		g.add(&Fault{Place: Place{File: g.file, Feature: number}, Kind: kind, Seen: seen, Expected: expected})
	}
	expected := "a line"
	if g.rings {
		expected = "a polygon, or a line that is closed"
	}
	switch shape := f.Geometry.Shape.(type) {
	case nil:
		refuse(NotALine, "no geometry", expected)
		return
	case orb.Point:
		name := label(f, "line")
		if name == "" {
			refuse(LooseReading, "a point without a property line", expected+", or points that name theirs")
			return
		}
		g.point(f, shape, name, number)
		return
	}
	chains, other := chainsOf(nil, f.Geometry.Shape)
	if other != "" {
		refuse(NotALine, "a "+other, expected)
		return
	}
	g.chains(f, chains, number)
}

// chainsOf appends the lines and rings of a shape, and names a type among its parts
// that has none.
func chainsOf(all [][]orb.Point, shape orb.Geometry) (chains [][]orb.Point, other string) {
	switch s := shape.(type) {
	case orb.LineString:
		all = append(all, s)
	case orb.Ring:
		all = append(all, s)
	case orb.MultiLineString:
		for _, line := range s {
			all = append(all, line)
		}
	case orb.Polygon:
		for _, ring := range s {
			all = append(all, ring)
		}
	case orb.MultiPolygon:
		for _, polygon := range s {
			all, _ = chainsOf(all, polygon)
		}
	case orb.Collection:
		for _, part := range s {
			if all, other = chainsOf(all, part); other != "" {
				return all, other
			}
		}
	default:
		return all, shape.GeoJSONType()
	}
	return all, ""
}

// chains makes a line of each chain of a feature.
func (g *featureReader) chains(f *geojson.Feature, chains [][]orb.Point, number int) {
	name := label(f, "line", "name", "id")
	if name == "" {
		name = featureName(number)
	}
	z := f.Geometry.Z
	for k, points := range chains {
		l := &Line{Name: name, Points: points, File: g.file, Feature: number, unit: positions}
		if len(chains) > 1 {
			if l.Part = k + 1; k > 0 {
				l.Name += " (" + strconv.Itoa(k+1) + ")"
			}
		}
		if n := len(points); len(z) >= n {
			l.Z, z = z[:n:n], z[n:]
		} else if len(z) == 1 {
			l.Z = make([]float64, n) // one height for all
			for i := range l.Z {
				l.Z[i] = z[0]
			}
		}
		l.numbers = make([]uint32, len(points))
		for i := range l.numbers {
			l.numbers[i] = uint32(i + 1)
		}
		g.list = append(g.list, l)
	}
}

// point adds a point to the line that it names.
func (g *featureReader) point(f *geojson.Feature, at orb.Point, name string, number int) {
	l := g.byName[name]
	if l == nil {
		l = &Line{Name: name, File: g.file, unit: features}
		g.byName[name] = l
		g.list = append(g.list, l)
	}
	z := math.NaN()
	if len(f.Geometry.Z) > 0 {
		z = f.Geometry.Z[0]
	}
	l.Points = append(l.Points, at)
	l.Z = append(l.Z, z)
	l.numbers = append(l.numbers, uint32(number))
	l.ids = append(l.ids, label(f, "point", "id", "name"))
}

// label returns the first of some properties that holds a text or a number, whatever
// the case of its name. Where id is one of them, the id of the feature comes last.
func label(f *geojson.Feature, names ...string) string {
	last := geojson.Value{}
	for _, name := range names {
		for i := range f.Properties {
			if p := &f.Properties[i]; strings.EqualFold(p.Name, name) {
				if text := labelText(p.Value); text != "" {
					return text
				}
			}
		}
		if name == "id" {
			last = f.ID
		}
	}
	return labelText(last)
}

func labelText(v geojson.Value) string {
	switch v.Kind() {
	case geojson.StringKind:
		text, _ := v.Text()
		return text
	case geojson.IntKind:
		n, _ := v.Whole()
		return strconv.FormatInt(n, 10)
	case geojson.NumberKind:
		x, _ := v.Float()
		return strconv.FormatFloat(x, 'g', -1, 64)
	}
	return ""
}
