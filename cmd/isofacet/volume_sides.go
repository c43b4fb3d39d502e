package main

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"

	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/interp/overlay"
	"isofacet/io/tin"
	"isofacet/triangulate"
)

// levelPrefix begins a side that is a level.
const levelPrefix = "level="

// A surfaceSide is one of two surfaces that are compared: readings, triangles, a
// raster, or a level.
type surfaceSide struct {
	option string // that named it, for messages
	text   string
	kind   string // what it turned out to be

	level  decimal.Number
	in     *input
	beside *input // the vertices of a table of triangles
	raster *rasterInput

	ground  overlay.Ground
	l       *loaded // for readings
	labels  grid.Labels
	xy, z   int // most decimals of its numbers
	details string
}

// The kinds of sides.
const (
	kindLevel     = "level"
	kindReadings  = "readings"
	kindTriangles = "triangles"
	kindRaster    = "raster"
)

// nameSide works out what a side is, so that what is wrong with the names of files
// shows before anything is read.
func (p *program) nameSide(option, text, vertices string) (*surfaceSide, error) {
	s := &surfaceSide{option: option, text: text}
	if z, ok := strings.CutPrefix(text, levelPrefix); ok {
		n, err := decimal.Parse(z)
		if err != nil {
			return nil, status.Usage(fmt.Errorf("--%s %q: expected level=Z with a number, such as level=100.5", option, text), "a file of that name is ./"+text)
		}
		if vertices != "" {
			return nil, status.Usage(fmt.Errorf("--%s-vertices with a level: expected a table of triangles in --%s", option, option), "leave it out")
		}
		s.kind, s.level, s.z = kindLevel, n, n.Decimals()
		s.ground.Level = n.Float64()
		return s, nil
	}
	if isRaw(text) {
		var err error
		s.kind = kindRaster
		s.raster, err = p.rasterInput(text)
		return s, err
	}
	in, err := p.input(text)
	if err != nil {
		return nil, err
	}
	s.in = in
	head, err := in.head()
	if err != nil {
		return nil, err
	}
	first, _, _ := strings.Cut(strings.TrimPrefix(head, "\ufeff"), "\n")
	switch {
	case strings.HasPrefix(strings.TrimSpace(head), "{"):
		s.kind = kindTriangles
	case strings.HasPrefix(first, `y\x,`):
		s.kind, s.raster = kindRaster, &rasterInput{input: in}
	case tin.IsTriangleTable(first):
		s.kind = kindTriangles
		if vertices == "" {
			return nil, status.Usage(fmt.Errorf("--%s %q: a table of triangles: expected that of their vertices with --%s-vertices", option, text, option),
				"isofacet triangles --out vertices=FILE writes it")
		}
		if s.beside, err = p.input(vertices); err != nil {
			return nil, err
		}
	case tin.IsVertexTable(first):
		return nil, status.Usage(fmt.Errorf("--%s %q: a table of vertices: expected the table of triangles, and this one with --%s-vertices", option, text, option),
			"isofacet triangles --out triangles=FILE writes it")
	default:
		s.kind = kindReadings
	}
	if vertices != "" && s.beside == nil {
		return nil, status.Usage(fmt.Errorf("--%s-vertices: expected a table of triangles in --%s, not %s", option, option, s.kind), "leave it out")
	}
	return s, nil
}

// headBytes are enough to see what a file is.
const headBytes = 1 << 12

// head returns the beginning of a file or sample, without reading it for the record;
// nothing of standard input, which can be read once.
func (in *input) head() (string, error) {
	var r io.Reader
	switch {
	case in.path != "":
		f, err := os.Open(in.path)
		if err != nil {
			return "", fileError(in.path, err)
		}
		defer f.Close()
		r = f
	case strings.HasPrefix(in.Name, samplePrefix):
		data, err := readSample(strings.TrimPrefix(in.Name, samplePrefix))
		return string(data[:min(len(data), headBytes)]), err
	default:
		return "", nil
	}
	head, err := io.ReadAll(io.LimitReader(r, headBytes))
	return string(head), err
}

// readSide reads a side and makes its surface.
func (p *program) readSide(ctx context.Context, r *reading, s *surfaceSide, noData string) error {
	var err error
	switch s.kind {
	case kindLevel:
		s.details = "level " + s.level.String()
		return nil
	case kindReadings:
		s.l, err = p.load(ctx, r, []*input{s.in})
		if err != nil {
			return err
		}
		if err := s.l.needsTriangles(); err != nil {
			return err
		}
		s.ground.Surface = s.l.shown()
		s.xy, s.z = s.l.decimalsXY, s.l.decimalsZ
		s.labels = r.labels("")
	case kindRaster:
		raster, err := p.readRaster(ctx, s.raster, noData)
		if err != nil {
			return err
		}
		s.labels, s.xy = raster.Labels, raster.Spec.Decimals()
		for _, v := range raster.Values[:min(len(raster.Values), 1000)] {
			if v == v {
				s.z = max(s.z, tin.Decimals(v))
			}
		}
		if err := p.announce("a surface of the raster "+s.raster.Name, uint64(raster.Spec.NumNodes())*bytesRasterNode); err != nil {
			return err
		}
		s.ground.Surface, err = raster.Surface(ctx, triangulate.Options{Workers: p.workers()})
		if err != nil {
			return fmt.Errorf("%s: %w", s.raster.Name, err)
		}
	case kindTriangles:
		if err := p.readTriangles(ctx, s); err != nil {
			return err
		}
	}
	m := s.ground.Surface.Mesh()
	if m.NumTriangles() == 0 {
		return status.With(status.WrongData, fmt.Errorf("%s: no triangle: expected a surface", s.text), "a raster needs squares of four nodes with values")
	}
	s.details = s.text + ", " + counted(m.NumTriangles(), "triangle")
	return nil
}

// bytesRasterNode is what a node takes while its triangles become a surface.
const bytesRasterNode = 500

func (p *program) readTriangles(ctx context.Context, s *surfaceSide) error {
	_, finish := p.display.Stage("reading")
	defer finish()
	f, err := s.in.open(ctx)
	if err != nil {
		return err
	}
	defer f.Close()
	var set *tin.Set
	if s.beside == nil {
		set, err = tin.ReadGeoJSON(ctx, bufio.NewReader(f), s.in.Name)
	} else {
		v, openErr := s.beside.open(ctx)
		if openErr != nil {
			return openErr
		}
		defer v.Close()
		set, err = tin.ReadTables(ctx, v, s.beside.Name, f, s.in.Name)
	}
	if err != nil {
		return err
	}
	s.ground.Surface, err = interp.FromTriangles(ctx, set.Points, set.Z, set.Triangles, triangulate.Options{Workers: p.workers()})
	if err != nil {
		if e, ok := errors.AsType[*interp.TriangleError](err); ok {
			return status.With(status.WrongData, fmt.Errorf("%s: %w", s.in.Name, e), "coordinates with few decimals may fold triangles: write them with --decimals full")
		}
		return fmt.Errorf("%s: %w", s.in.Name, err)
	}
	s.xy, s.z = set.DecimalsXY, set.DecimalsZ
	s.labels = grid.Labels{CRS: set.CoordinatesIn, HorizontalDatum: set.HorizontalDatum, VerticalDatum: set.VerticalDatum}
	p.report.Note(fmt.Sprintf("triangles: %s: %s, %s", s.in.Name, counted(len(set.Triangles), "triangle"), countedVertices(len(set.Points))),
		"file", s.in.Name, "triangles", len(set.Triangles), "vertices", len(set.Points))
	return nil
}

// agreeSides refuses two sides whose labels differ: nothing is converted.
func (p *program) agreeSides(r *reading, a, b *surfaceSide) error {
	for _, s := range []*surfaceSide{a, b} {
		if s.kind == kindLevel || s.kind == kindReadings {
			continue
		}
		given := r.labels("")
		if err := sameLabels("the command line", given, s.text, s.labels); err != nil {
			return err
		}
	}
	if a.kind == kindLevel || b.kind == kindLevel {
		return nil
	}
	if err := sameLabels(a.text, a.labels, b.text, b.labels); err != nil {
		return err
	}
	if (a.labels.VerticalDatum == "") != (b.labels.VerticalDatum == "") {
		with, without := a, b
		if a.labels.VerticalDatum == "" {
			with, without = b, a
		}
		p.report.Warn("datum-unstated", fmt.Sprintf("%s is on %q, the vertical datum of %s is unstated: it is taken to be the same", with.text, with.labels.VerticalDatum, without.text))
	}
	return nil
}

func sameLabels(nameA string, a grid.Labels, nameB string, b grid.Labels) error {
	for _, l := range []struct{ what, a, b string }{
		{"coordinate system", a.CRS, b.CRS},
		{"horizontal datum", a.HorizontalDatum, b.HorizontalDatum},
		{"vertical datum", a.VerticalDatum, b.VerticalDatum},
		{"unit of x and y", a.XYUnit, b.XYUnit},
		{"unit of z", a.ZUnit, b.ZUnit},
	} {
		if l.a != "" && l.b != "" && l.a != l.b {
			return status.With(status.WrongData, fmt.Errorf("%s %q of %s, %q of %s: expected the same: a difference of unlike ones means nothing", l.what, l.a, nameA, l.b, nameB),
				"convert one of them first; if a label is wrong, mend it")
		}
	}
	return nil
}

// explainTriangles is the way out of triangles that cannot be read.
func explainTriangles(err error) (status.Code, string, bool) {
	if _, ok := errors.AsType[*tin.Error](err); ok {
		return status.WrongData, "isofacet triangles writes surfaces that are read back: --out FILE.geojson, or --out vertices=V.csv --out triangles=T.csv", true
	}
	if _, ok := errors.AsType[*interp.TriangleError](err); ok {
		return status.WrongData, "triangles of a surface meet along whole edges", true
	}
	return 0, "", false
}
