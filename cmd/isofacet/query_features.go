package main

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/io/geojson"
	"isofacet/triangulate"
)

// features writes the answers as points, with the value as height where there is
// one: the asked row's own columns as they were written, then the answers.
func (t *table) features(w *geojson.Writer) error {
	n := len(t.samples)
	names := slices.Concat(t.asked.names, answerNames, t.also)
	if t.inputs != nil {
		names = append(names, explainNames()...)
	}
	batch := make([]geojson.Feature, min(n, featuresAtOnce))
	for i := range batch {
		batch[i].Properties = make([]geojson.Property, len(names))
		for k, name := range names {
			batch[i].Properties[k].Name = name
		}
		batch[i].Geometry.Z = make([]float64, 0, 1)
	}
	var fields []string
	for from := 0; from < n; from += len(batch) {
		part := batch[:min(len(batch), n-from)]
		for k := range part {
			fields = t.feature(&part[k], from+k, fields)
		}
		if err := w.WriteBatch(part); err != nil {
			return err
		}
	}
	return nil
}

// feature fills in the feature of place i. fields is scratch, which it returns.
func (t *table) feature(f *geojson.Feature, i int, fields []string) []string {
	s := &t.samples[i]
	f.Geometry.Shape, f.Geometry.Z = t.asked.points[i], f.Geometry.Z[:0]
	fields = t.asked.row(fields[:0], i)
	for k := range t.asked.names {
		f.Properties[k].Value = geojson.String(fields[k])
	}
	answers := f.Properties[len(t.asked.names):]
	for k := range answers {
		answers[k].Value = geojson.Null()
	}
	answers[3].Value = geojson.String(s.Location.Place.String())
	if s.Location.Place == triangulate.Outside {
		return fields
	}
	f.Geometry.Z = append(f.Geometry.Z, s.Z)
	dzdx, dzdy := t.l.surface.Gradient(s.Location.Triangle)
	answers[0].Value = geojson.Fixed(s.Z, t.z)
	answers[1].Value = geojson.Fixed(interp.Slope(dzdx, dzdy), t.slope)
	if azimuth := interp.DownhillAzimuth(dzdx, dzdy); !math.IsNaN(azimuth) {
		answers[2].Value = geojson.Fixed(azimuth, t.azimuth)
	}
	for k, name := range t.also {
		answers[len(answerNames)+k].Value = geojson.Fixed(t.trust.at(name, s.Location, t.asked.points[i], t.finder), t.digits[k])
	}
	if t.inputs != nil {
		t.reasons(answers[len(answerNames)+len(t.also):], s.Location, t.asked.points[i])
	}
	return fields
}

// reasons fills in the triangle, its readings and their weights.
func (t *table) reasons(p []geojson.Property, loc triangulate.Location, at orb.Point) {
	p[0].Value = geojson.Int(int64(t.numbers[loc.Triangle]))
	corners, weights := t.l.surface.Weights(loc, at)
	m := t.l.surface.Mesh()
	for k, v := range corners {
		of := p[1+5*k:]
		of[0].Value = geojson.String(t.l.id(int(t.inputs[v])))
		of[1].Value = geojson.Fixed(m.Position(v)[0], t.xy)
		of[2].Value = geojson.Fixed(m.Position(v)[1], t.xy)
		of[3].Value = geojson.Fixed(t.l.surface.Z()[v], t.z)
		of[4].Value = geojson.Fixed(weights[k], t.weight)
	}
}
