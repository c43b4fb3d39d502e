package main

import (
	"bufio"
	"context"
	"io"
	"math"
	"strconv"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/interp/flow"
	"isofacet/io/geojson"
	"isofacet/io/numtext"
	"isofacet/triangulate"
)

// write writes one output.
func (j *flowing) write(ctx context.Context, d *destination) error {
	switch {
	case d.part == partSummary:
		return j.writeSummary(d.w, d.format)
	case d.part == partRose:
		return j.rose(d)
	case d.part == partMap:
		return j.drawMap(ctx, d)
	case d.part == partNests:
		return j.nests(d.w)
	case d.format == formatGeoJSON:
		return j.writeFeatures(d, j.featureOptions(j.labels(""), j.xy, j.z), func(w *geojson.Writer) error { return j.features(w, d.part) })
	}
	return j.table(d.w, d.part)
}

var flowHeaders = map[string]string{
	partTriangles: "round,zone,well_1,well_2,well_3,gradient,gradient_sigma,azimuth,azimuth_sigma,area,head_range,across,verdict\n",
	partLines:     "round,zone,start,point,x,y,head,length,ending\n",
	partArrows:    "round,zone,x,y,head,gradient,azimuth\n",
}

// table writes a part as CSV.
func (j *flowing) table(w io.Writer, part string) error {
	b := bufio.NewWriterSize(w, 1<<16)
	b.WriteString(flowHeaders[part])
	for _, s := range j.states {
		if s.plane == nil {
			continue
		}
		head := appendFields(nil, []string{s.round, s.zone})
		switch part {
		case partTriangles:
			for i := range s.three {
				b.Write(j.appendSolution(append([]byte{}, head...), s, &s.three[i]))
			}
		case partLines:
			for i := range s.lines {
				j.lineRows(b, head, &s.lines[i])
			}
		case partArrows:
			for _, a := range s.arrows {
				row := j.appendPlace(append([]byte{}, head...), a.at)
				row = append(numtext.Append(row, a.head, j.z), ',')
				row = append(numtext.Append(row, float64(a.size*j.ratio), j.slope), ',')
				if !math.IsNaN(a.azimuth) {
					row = numtext.Append(row, a.azimuth, j.angle)
				}
				b.Write(append(row, '\n'))
			}
		}
	}
	return b.Flush()
}

func (j *flowing) appendPlace(row []byte, p orb.Point) []byte {
	row = append(numtext.Append(row, p[0], j.xy), ',')
	return append(numtext.Append(row, p[1], j.xy), ',')
}

func (j *flowing) appendSolution(row []byte, s *flowState, x *flow.Solution) []byte {
	row = appendFields(row, j.wellNames(s, x))
	g := x.Gradient
	for _, n := range []number{{float64(g.Size() * j.ratio), j.slope}, {float64(g.SizeSigma() * j.ratio), j.slope}, {g.Azimuth(), j.angle}, {g.AzimuthSigma(), j.angle},
		{x.Area, j.xy}, {x.Range, j.z}, {x.Across, j.slope}} {
		row = append(append(row, orBlank(n)...), ',')
	}
	return append(append(row, x.Verdict.String()...), '\n')
}

// lineRows writes a flow line, a vertex a row; one that begins outside is a row without
// head.
func (j *flowing) lineRows(b *bufio.Writer, head []byte, l *flowLine) {
	if !l.inside {
		row := append(appendField(append([]byte{}, head...), l.name), ",1,"...)
		b.Write(append(j.appendPlace(row, l.at), ",,outside\n"...))
		return
	}
	length := 0.0
	for i, p := range l.Points {
		if i > 0 {
			q := l.Points[i-1]
			dx, dy := p[0]-q[0], p[1]-q[1]
			length += math.Sqrt(float64(dx*dx) + float64(dy*dy))
		}
		row := append(appendField(append([]byte{}, head...), l.name), ',')
		row = append(strconv.AppendInt(row, int64(i+1), 10), ',')
		row = j.appendPlace(row, p)
		row = append(numtext.Append(row, l.Z[i], j.z), ',')
		row = append(numtext.Append(row, length, j.xy), ',')
		if i == len(l.Points)-1 {
			row = append(row, l.Ending.String()...)
		}
		b.Write(append(row, '\n'))
	}
}

// features writes a part as GeoJSON.
func (j *flowing) features(w *geojson.Writer, part string) error {
	for _, s := range j.states {
		if s.plane == nil {
			continue
		}
		of := []geojson.Property{{Name: "round", Value: geojson.String(s.round)}, {Name: "zone", Value: geojson.String(s.zone)}}
		write := func(shape orb.Geometry, z []float64, more ...geojson.Property) error {
			return w.Write(&geojson.Feature{Geometry: geojson.Geometry{Shape: shape, Z: z}, Properties: append(of[:2:2], more...)})
		}
		var err error
		switch part {
		case partTriangles:
			err = j.solutionFeatures(s, write)
		case partLines:
			err = j.lineFeatures(s, write)
		case partArrows:
			for _, a := range s.arrows {
				if err = write(a.at, []float64{a.head}, geojson.Property{Name: "gradient", Value: geojson.Fixed(float64(a.size*j.ratio), j.slope)},
					geojson.Property{Name: "azimuth", Value: geojson.Fixed(a.azimuth, j.angle)}); err != nil {
					break
				}
			}
		default:
			err = j.divideFeatures(s, write)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

type featureWrite func(shape orb.Geometry, z []float64, more ...geojson.Property) error

func (j *flowing) solutionFeatures(s *flowState, write featureWrite) error {
	m, z := s.l.surface.Mesh(), s.l.surface.Z()
	for i := range s.three {
		x := &s.three[i]
		var ring orb.Ring
		var heights []float64
		for k := range 4 {
			v := x.Wells[k%3]
			ring, heights = append(ring, m.Position(v)), append(heights, z[v])
		}
		names := j.wellNames(s, x)
		err := write(orb.Polygon{ring}, heights,
			geojson.Property{Name: "well_1", Value: geojson.String(names[0])}, geojson.Property{Name: "well_2", Value: geojson.String(names[1])},
			geojson.Property{Name: "well_3", Value: geojson.String(names[2])},
			geojson.Property{Name: "gradient", Value: geojson.Fixed(float64(x.Gradient.Size()*j.ratio), j.slope)},
			geojson.Property{Name: "gradient_sigma", Value: geojson.Fixed(float64(x.Gradient.SizeSigma()*j.ratio), j.slope)},
			geojson.Property{Name: "azimuth", Value: geojson.Fixed(x.Gradient.Azimuth(), j.angle)},
			geojson.Property{Name: "azimuth_sigma", Value: geojson.Fixed(x.Gradient.AzimuthSigma(), j.angle)},
			geojson.Property{Name: "verdict", Value: geojson.String(x.Verdict.String())})
		if err != nil {
			return err
		}
	}
	return nil
}

func (j *flowing) lineFeatures(s *flowState, write featureWrite) error {
	for i := range s.lines {
		l := &s.lines[i]
		var shape orb.Geometry = l.at
		var z []float64
		ending := "outside"
		if l.inside {
			shape, z, ending = l.Points, l.Z, l.Ending.String()
			if len(l.Points) == 1 {
				shape = l.Points[0]
			}
		}
		if err := write(shape, z, geojson.Property{Name: "start", Value: geojson.String(l.name)}, geojson.Property{Name: "ending", Value: geojson.String(ending)},
			geojson.Property{Name: "length", Value: geojson.Fixed(l.Length(), j.xy)}); err != nil {
			return err
		}
	}
	return nil
}

// divideFeatures writes the edges between planes that part or gather water, and the
// wells that are pits and peaks.
func (j *flowing) divideFeatures(s *flowState, write featureWrite) error {
	surface := s.l.shown()
	m, z := surface.Mesh(), surface.Z()
	kind := func(text string) geojson.Property {
		return geojson.Property{Name: "kind", Value: geojson.String(text)}
	}
	for _, set := range []struct {
		kind  string
		edges []triangulate.HalfEdge
	}{{"divide", flow.Divides(surface)}, {"drain", flow.Drains(surface)}} {
		for _, h := range inOrder(m, set.edges) {
			o, d := m.Origin(h), m.Dest(h)
			if err := write(orb.LineString{m.Position(o), m.Position(d)}, []float64{z[o], z[d]}, kind(set.kind)); err != nil {
				return err
			}
		}
	}
	for _, spot := range surface.Spots() {
		name := "peak"
		switch spot.Kind {
		case interp.Hollow:
			name = "pit"
		case interp.Saddle:
			name = "saddle"
		}
		if err := write(m.Position(spot.Vertex), []float64{z[spot.Vertex]}, kind(name)); err != nil {
			return err
		}
	}
	return nil
}
