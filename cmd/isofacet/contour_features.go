package main

import (
	"context"
	"math"

	"isofacet/contour"
	"isofacet/io/geojson"
)

// featureBatch collects features until there are enough for all workers. Nothing in
// it is made anew from batch to batch but what a shape itself is.
type featureBatch struct {
	w          *geojson.Writer
	features   []geojson.Feature
	properties []geojson.Property
	heights    []float64
	positions  int
}

// A batch is written when it has so many features or positions: some dozens of the
// blocks that a worker encodes at a time.
const (
	batchFeatures  = 1 << 13
	batchPositions = 1 << 19
)

func newFeatureBatch(w *geojson.Writer, propertiesEach int) *featureBatch {
	return &featureBatch{
		w:          w,
		features:   make([]geojson.Feature, 0, batchFeatures),
		properties: make([]geojson.Property, 0, batchFeatures*propertiesEach),
		heights:    make([]float64, 0, batchFeatures),
	}
}

// add adds a feature with its properties, and a height for all its positions unless
// that is NaN.
func (b *featureBatch) add(f geojson.Feature, height float64, properties ...geojson.Property) error {
	from := len(b.properties)
	b.properties = append(b.properties, properties...)
	f.Properties = b.properties[from:len(b.properties):len(b.properties)]
	if !math.IsNaN(height) {
		b.heights = append(b.heights, height)
		f.Geometry.Z = b.heights[len(b.heights)-1 : len(b.heights) : len(b.heights)]
	}
	b.features = append(b.features, f)
	b.positions += f.Geometry.NumPositions()
	if len(b.features) == batchFeatures || b.positions >= batchPositions {
		return b.flush()
	}
	return nil
}

func (b *featureBatch) flush() error {
	err := b.w.WriteBatch(b.features)
	clear(b.features) // let go of the shapes
	b.features, b.properties, b.heights, b.positions = b.features[:0], b.properties[:0], b.heights[:0], 0
	return err
}

// lineFeatures returns what writes the isolines as GeoJSON.
func (d *drawing) lineFeatures(ctx context.Context) func(*geojson.Writer) error {
	return func(w *geojson.Writer) error {
		b := newFeatureBatch(w, 5)
		properties := make([]geojson.Property, 0, 5)
		err := d.eachPart(ctx, func(l *contour.Line, inferred bool) error {
			properties = append(properties[:0],
				geojson.Property{Name: "level", Value: geojson.Number(l.Level.Z)},
				geojson.Property{Name: "rank", Value: geojson.String(l.Level.Rank.String())},
				geojson.Property{Name: "closed", Value: geojson.Bool(l.Closed)},
				geojson.Property{Name: "depression", Value: geojson.Bool(l.Depression)})
			if d.inferred.IsSet() {
				properties = append(properties, geojson.Property{Name: "inferred", Value: geojson.Bool(inferred)})
			}
			return b.add(geojson.Feature{Geometry: geojson.Geometry{Shape: l.Points}}, l.Level.Z, properties...)
		})
		if err != nil {
			return err
		}
		return b.flush()
	}
}

// bandFeatures writes the bands as GeoJSON.
func (d *drawing) bandFeatures(w *geojson.Writer) error {
	b := newFeatureBatch(w, 2)
	for i := range d.made {
		band := &d.made[i]
		err := b.add(geojson.Feature{Geometry: geojson.Geometry{Shape: band.Polygon}}, math.NaN(),
			geojson.Property{Name: "lower", Value: levelValue(band.Lower)},
			geojson.Property{Name: "upper", Value: levelValue(band.Upper)})
		if err != nil {
			return err
		}
	}
	return b.flush()
}

// levelValue is null where a band is open.
func levelValue(l *contour.Level) geojson.Value {
	if l == nil {
		return geojson.Null()
	}
	return geojson.Number(l.Z)
}
