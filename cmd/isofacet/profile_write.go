package main

import (
	"bufio"
	"context"
	"fmt"
	"io"
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp/profile"
	"isofacet/io/geojson"
	"isofacet/io/numtext"
	"isofacet/io/picture"
	"isofacet/triangulate"
)

// write writes one output.
func (j *profiling) write(ctx context.Context, d *destination) error {
	if d.part == partPlaces {
		return j.writePlaces(ctx, d)
	}
	switch d.format {
	case formatGeoJSON:
		return j.writeFeatures(d, j.featureOptions(j.labels(""), j.xy, j.z), func(w *geojson.Writer) error { return j.features(w, d.part) })
	case formatSVG:
		return j.drawing(d)
	}
	return j.table(d.w, d.part)
}

// each calls f for every profile of a part: the line's name, the section's station
// (NaN for none), the surface.
func (j *profiling) each(part string, f func(line string, station float64, surface string, p *profile.Profile) error) error {
	if part == partProfile {
		for i := range j.follow {
			for k, s := range j.surfaces {
				if err := f(j.follow[i].name, math.NaN(), s.name, &j.follow[i].profiles[k]); err != nil {
					return err
				}
			}
		}
		return nil
	}
	for i := range j.cuts {
		c := &j.cuts[i]
		for k, s := range j.surfaces {
			if err := f(c.of.name, c.section.Station, s.name, &c.profiles[k]); err != nil {
				return err
			}
		}
	}
	return nil
}

// table writes a part as CSV.
func (j *profiling) table(w io.Writer, part string) error {
	b := bufio.NewWriterSize(w, 1<<16)
	header := "line,surface,station,x,y,z,grade,place,ahead\n"
	if part == partSections {
		header = "line,station,surface,offset,x,y,z,grade,place,ahead\n"
	}
	if _, err := b.WriteString(header); err != nil {
		return err
	}
	var row []byte
	err := j.each(part, func(line string, station float64, surface string, p *profile.Profile) error {
		head := append(appendField(nil, line), ',')
		if part == partSections {
			head = append(numtext.Append(head, station, j.xy), ',')
		}
		head = append(appendField(head, surface), ',')
		for i := range p.Points {
			row = j.appendPoint(append(row[:0], head...), &p.Points[i])
			if _, err := b.Write(row); err != nil {
				return err
			}
		}
		return nil
	})
	if err != nil {
		return err
	}
	return b.Flush()
}

func (j *profiling) appendPoint(row []byte, p *profile.Point) []byte {
	row = append(numtext.Append(row, p.Station, j.xy), ',')
	row = append(numtext.Append(row, p.At[0], j.xy), ',')
	row = append(numtext.Append(row, p.At[1], j.xy), ',')
	if !math.IsNaN(p.Z) {
		row = numtext.Append(row, p.Z, j.z)
	}
	row = append(row, ',')
	if isFinite(p.Grade) {
		row = numtext.Append(row, p.Grade, j.slope)
	}
	row = append(append(append(row, ','), p.Place.String()...), ',')
	return append(append(row, p.Ahead.String()...), '\n')
}

// features writes every stretch with surface as a line with heights.
func (j *profiling) features(w *geojson.Writer, part string) error {
	return j.each(part, func(line string, station float64, surface string, p *profile.Profile) error {
		var f geojson.Feature
		begin := 0.0
		end := func(to float64) error {
			if f.Geometry.Shape == nil {
				return nil
			}
			f.Properties = []geojson.Property{{Name: "line", Value: geojson.String(line)}}
			from, upto := "from_station", "to_station"
			if part == partSections {
				f.Properties = append(f.Properties, geojson.Property{Name: "station", Value: geojson.Fixed(station, j.xy)})
				from, upto = "from_offset", "to_offset"
			}
			f.Properties = append(f.Properties,
				geojson.Property{Name: "surface", Value: geojson.String(surface)},
				geojson.Property{Name: from, Value: geojson.Fixed(begin, j.xy)},
				geojson.Property{Name: upto, Value: geojson.Fixed(to, j.xy)})
			err := w.Write(&f)
			f = geojson.Feature{}
			return err
		}
		open := false
		for i := range p.Points {
			pt := &p.Points[i]
			if pt.Ahead != profile.Surface && !open {
				continue
			}
			if !open {
				begin = pt.Station
				f.Geometry.Shape = orb.LineString(nil)
			}
			f.Geometry.Shape = append(f.Geometry.Shape.(orb.LineString), pt.At)
			f.Geometry.Z = append(f.Geometry.Z, pt.Z)
			if open = pt.Ahead == profile.Surface; !open {
				if err := end(pt.Station); err != nil {
					return err
				}
			}
		}
		return nil
	})
}

// drawing draws a part as SVG.
func (j *profiling) drawing(d *destination) error {
	var panels []picture.Panel
	opt := picture.ProfileOptions{Title: j.surfaces[0].l.title(), Labels: j.labels(""), Along: "station", Notes: []string{
		"straight between readings: what nobody measured may differ; not for digging"}}
	if d.part == partSections {
		opt.Along = "offset, left negative"
		for i := range j.cuts {
			c := &j.cuts[i]
			panels = append(panels, j.panel(fmt.Sprintf("%s, section at %v", c.of.name, j.station(c.section.Station)), c.section.Line, c.profiles))
		}
	} else {
		for i := range j.follow {
			panels = append(panels, j.panel(j.follow[i].name, j.follow[i].line, j.follow[i].profiles))
		}
	}
	r, err := picture.WriteProfiles(d.w, panels, opt)
	if err != nil {
		return err
	}
	j.report.Note(fmt.Sprintf("drawing: %s: vertical exaggeration %s to 1", d.name(), r.Exaggeration), "file", d.path, "exaggeration", r.Exaggeration)
	return nil
}

func (j *profiling) panel(title string, line *profile.Alignment, profiles []profile.Profile) picture.Panel {
	p := picture.Panel{Title: title, From: line.Start(), To: line.End()}
	if s := line.Stations(); len(s) > 2 {
		p.Bends = s[1 : len(s)-1]
	}
	for k := range profiles {
		l := picture.ProfileLine{Name: j.surfaces[k].name}
		open := false
		for i := range profiles[k].Points {
			pt := &profiles[k].Points[i]
			if pt.Ahead == profile.Surface && !open {
				l.Runs = append(l.Runs, nil)
			}
			if pt.Ahead == profile.Surface || open {
				last := len(l.Runs) - 1
				l.Runs[last] = append(l.Runs[last], orb.Point{pt.Station, pt.Z})
			}
			open = pt.Ahead == profile.Surface
		}
		p.Lines = append(p.Lines, l)
	}
	return p
}

// besideNames head the columns of places beside a line.
var besideNames = []string{"line", "station", "offset", "side", "along", "surface_z"}

// writePlaces writes where places lie beside the nearest of the lines.
func (j *profiling) writePlaces(ctx context.Context, d *destination) error {
	samples, err := j.samplesBeside(ctx)
	if err != nil {
		return err
	}
	if d.format == formatGeoJSON {
		return j.writeFeatures(d, j.featureOptions(j.labels(""), j.xy, j.z), func(w *geojson.Writer) error {
			var fields []string
			for i, at := range j.places.points {
				near, b := j.nearest(at)
				f := geojson.Feature{Geometry: geojson.Geometry{Shape: at}}
				if samples[i].Location.Place != triangulate.Outside {
					f.Geometry.Z = []float64{samples[i].Z}
				}
				fields = j.places.row(fields[:0], i)
				for k, name := range j.places.names {
					f.Properties = append(f.Properties, geojson.Property{Name: name, Value: geojson.String(fields[k])})
				}
				for k, v := range []geojson.Value{geojson.String(near.name), geojson.Fixed(b.Station, j.xy), geojson.Fixed(b.Offset, j.xy),
					geojson.String(sideOf(b)), geojson.String(alongOf(near, b)), geojson.Fixed(samples[i].Z, j.z)} {
					f.Properties = append(f.Properties, geojson.Property{Name: besideNames[k], Value: v})
				}
				if err := w.Write(&f); err != nil {
					return err
				}
			}
			return nil
		})
	}
	b := bufio.NewWriterSize(d.w, 1<<16)
	row := appendFields(nil, append(append([]string{}, j.places.names...), besideNames...))
	var fields []string
	for i := 0; ; i++ {
		row[len(row)-1] = '\n'
		if _, err := b.Write(row); err != nil {
			return err
		}
		if i == len(j.places.points) {
			return b.Flush()
		}
		near, beside := j.nearest(j.places.points[i])
		fields = append(j.places.row(fields[:0], i), near.name)
		row = appendFields(row[:0], fields)
		row = append(numtext.Append(row, beside.Station, j.xy), ',')
		row = append(numtext.Append(row, beside.Offset, j.xy), ',')
		row = appendFields(row, []string{sideOf(beside), alongOf(near, beside)})
		if samples[i].Location.Place != triangulate.Outside {
			row = numtext.Append(row, samples[i].Z, j.z)
		}
		row = append(row, ',')
	}
}

// nearest returns the line that a place lies nearest to, one that it lies beside before
// one whose end it lies behind.
func (j *profiling) nearest(at orb.Point) (*followed, profile.Beside) {
	best, b := &j.follow[0], j.follow[0].line.Locate(at)
	for i := range j.follow[1:] {
		f := &j.follow[i+1]
		if n := f.line.Locate(at); n.Beyond == b.Beyond && math.Abs(n.Offset) < math.Abs(b.Offset) || b.Beyond && !n.Beyond {
			best, b = f, n
		}
	}
	return best, b
}

func sideOf(b profile.Beside) string {
	switch {
	case b.Offset < 0:
		return "left"
	case b.Offset > 0:
		return "right"
	}
	return "on"
}

func alongOf(f *followed, b profile.Beside) string {
	switch {
	case !b.Beyond:
		return "beside"
	case b.Station < f.line.Start():
		return "before"
	}
	return "behind"
}
