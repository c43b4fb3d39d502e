package main

import (
	"io"
	"sync"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/io/geojson"
	"isofacet/io/linecsv"
	"isofacet/triangulate"
)

// id returns the name of the reading at a vertex, empty for one that has none or came
// from a line.
func (s *ordered) id(v triangulate.Vertex) string {
	if s.readings[v] < 0 {
		return ""
	}
	return s.l.id(int(s.readings[v]))
}

// idValue is the id in GeoJSON: null where readings have none.
func (s *ordered) idValue(v triangulate.Vertex) geojson.Value {
	if id := s.id(v); id != "" {
		return geojson.String(id)
	}
	return geojson.Null()
}

func (s *ordered) vertexTable(w io.Writer) error {
	t := linecsv.NewVertices(w, s.tables())
	err := inBatches(len(s.vertices), s.workers(), make([]linecsv.Vertex, min(len(s.vertices), rowsAtOnce)), t.WriteBatch, func(row *linecsv.Vertex, i int) {
		v := s.vertices[i]
		*row = linecsv.Vertex{Reading: s.id(v), XY: s.mesh.Position(v), Z: s.surface.Z()[v]}
	})
	if err != nil {
		return err
	}
	return t.Close()
}

func (s *ordered) triangleTable(w io.Writer) error {
	start := linecsv.NewTriangles
	if s.l.hasLines() {
		start = linecsv.NewTrianglesWithLines
	}
	t := start(w, s.tables())
	err := inBatches(len(s.triangles), s.workers(), make([]linecsv.Triangle, min(len(s.triangles), rowsAtOnce)), t.WriteBatch, func(row *linecsv.Triangle, i int) {
		for k, v := range s.mesh.Canonical(s.triangles[i], s.rank) {
			row.Corners[k] = int(s.numbers[v])
		}
		dzdx, dzdy := s.surface.Gradient(s.triangles[i])
		row.Slope, row.DownhillAzimuth = interp.Slope(dzdx, dzdy), interp.DownhillAzimuth(dzdx, dzdy)
		if s.l.hasLines() {
			row.Lines = s.lines(s.triangles[i])
		}
	})
	if err != nil {
		return err
	}
	return t.Close()
}

// lines names the lines that the edges of a triangle came from, beginning with the
// edge from the corner that is written first.
func (s *ordered) lines(t triangulate.Triangle) (names [3]string) {
	first := s.mesh.Canonical(t, s.rank)[0]
	for k, v := range s.mesh.Corners(t) {
		if v == first {
			for i := range names {
				names[i] = s.l.lineAlong(t.HalfEdge((k + i) % 3))
			}
		}
	}
	return names
}

func (s *ordered) tables() linecsv.Options {
	return linecsv.Options{XYDecimals: s.xy, ZDecimals: s.z, SlopeDecimals: s.slope, AzimuthDecimals: s.azimuth, Workers: s.workers()}
}

// Rows of a table and features are filled in by all workers, so many at a time, then
// encoded by all workers: some dozens of the blocks that a worker encodes at a time.
const (
	rowsAtOnce     = 1 << 18
	featuresAtOnce = 1 << 15
)

// inBatches writes n things in batches. fill fills in number i, from several
// goroutines; what batch holds is used again and again.
func inBatches[T any](n, workers int, batch []T, write func([]T) error, fill func(thing *T, i int)) error {
	for from := 0; from < n; from += len(batch) {
		part := batch[:min(len(batch), n-from)]
		var group sync.WaitGroup
		for k := range workers {
			group.Go(func() {
				for i := k * len(part) / workers; i < (k+1)*len(part)/workers; i++ {
					fill(&part[i], from+i)
				}
			})
		}
		group.Wait()
		if err := write(part); err != nil {
			return err
		}
	}
	return nil
}

// blanks returns features to be filled in, for n in all.
func blanks(n int, blank func() geojson.Feature) []geojson.Feature {
	list := make([]geojson.Feature, min(n, featuresAtOnce))
	for k := range list {
		list[k] = blank()
	}
	return list
}

func (s *ordered) vertexFeatures(w *geojson.Writer) error {
	blank := func() geojson.Feature {
		return geojson.Feature{
			Geometry:   geojson.Geometry{Z: make([]float64, 1)},
			Properties: []geojson.Property{{Name: "vertex"}, {Name: "id"}},
		}
	}
	n := len(s.vertices)
	return inBatches(n, s.workers(), blanks(n, blank), w.WriteBatch, func(f *geojson.Feature, i int) {
		v := s.vertices[i]
		f.Geometry.Shape = s.mesh.Position(v)
		f.Geometry.Z[0] = s.surface.Z()[v]
		f.Properties[0].Value = geojson.Int(int64(i) + 1)
		f.Properties[1].Value = s.idValue(v)
	})
}

func (s *ordered) triangleFeatures(w *geojson.Writer) error {
	blank := func() geojson.Feature {
		f := geojson.Feature{
			Geometry: geojson.Geometry{Shape: make(orb.Ring, 4), Z: make([]float64, 4)},
			Properties: []geojson.Property{
				{Name: "triangle"}, {Name: "id_1"}, {Name: "id_2"}, {Name: "id_3"}, {Name: "slope"}, {Name: "downhill_azimuth"},
			},
		}
		if s.l.hasLines() {
			f.Properties = append(f.Properties, geojson.Property{Name: "line_1"}, geojson.Property{Name: "line_2"}, geojson.Property{Name: "line_3"})
		}
		return f
	}
	n := len(s.triangles)
	return inBatches(n, s.workers(), blanks(n, blank), w.WriteBatch, func(f *geojson.Feature, i int) {
		t := s.triangles[i]
		ring := f.Geometry.Shape.(orb.Ring)
		for k, v := range s.mesh.Canonical(t, s.rank) {
			ring[k], f.Geometry.Z[k] = s.mesh.Position(v), s.surface.Z()[v]
			f.Properties[1+k].Value = s.idValue(v)
		}
		ring[3], f.Geometry.Z[3] = ring[0], f.Geometry.Z[0]
		dzdx, dzdy := s.surface.Gradient(t)
		f.Properties[0].Value = geojson.Int(int64(i) + 1)
		f.Properties[4].Value = geojson.Fixed(interp.Slope(dzdx, dzdy), s.slope)
		f.Properties[5].Value = geojson.Fixed(interp.DownhillAzimuth(dzdx, dzdy), s.azimuth)
		if s.l.hasLines() {
			for k, name := range s.lines(t) {
				f.Properties[6+k].Value = geojson.Null()
				if name != "" {
					f.Properties[6+k].Value = geojson.String(name)
				}
			}
		}
	})
}
