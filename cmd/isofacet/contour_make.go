package main

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"isofacet/cmd/internal/status"
	"isofacet/contour"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// contourResult is what the run record says of lines and bands.
type contourResult struct {
	Extent  *extents       `json:"extent,omitempty"`
	Surface *surfaceCounts `json:"surface,omitempty"`
	Raster  *lattice       `json:"raster,omitempty"`
	Levels  []string       `json:"levels"`
	Lines   *linesResult   `json:"lines,omitempty"`
	Bands   *bandsResult   `json:"bands,omitempty"`
}

type linesResult struct {
	Closed        int         `json:"closed"`
	Open          int         `json:"open"`
	Points        int64       `json:"points"`
	Length        number      `json:"length"`
	WithoutLength int64       `json:"without_length"`
	TooShort      []shortLine `json:"too_short"`
	// Inferred says what lies beyond the distance from the nearest reading; null if that
	// was not asked.
	Inferred *inferredResult `json:"inferred"`
}

type inferredResult struct {
	Beyond string `json:"beyond"`
	Parts  int    `json:"parts"`
	Length number `json:"length"`
}

// shortLine is a line that was left out for being short.
type shortLine struct {
	Level  string `json:"level"`
	Closed bool   `json:"closed"`
	Length number `json:"length"`
	X      number `json:"x"` // where it starts
	Y      number `json:"y"`
}

type bandsResult struct {
	Polygons int `json:"polygons"`
	Rings    int `json:"rings"`
	Points   int `json:"points"`
	// Off is how far borders are from where they exactly are, at most.
	Off       float64       `json:"off"`
	TooNarrow []narrowPlace `json:"too_narrow"`
}

// narrowPlace is a reading, or a node of a raster, that no polygon of its band holds.
type narrowPlace struct {
	X number  `json:"x"`
	Y number  `json:"y"`
	Z float64 `json:"z"` // all digits: it may differ from a level in the last one
}

// What following lines and making bands takes in memory at most, by piece: a line's
// way through one triangle. White noise of 2e5 readings at 1, 2 and 9 levels came to
// 70, 70 and 54 for lines, which are handed out as they come, and to 158, 190 and 130
// for bands, which are not.
const (
	bytesLinePiece = 70
	bytesBandPiece = 190
)

// drawing is one run's work on lines and bands.
type drawing struct {
	*contourCommand
	g      *ground
	levels contour.Levels
	xy     int // digits after the point of coordinates
	result contourResult
	made   []contour.Band // once they are wanted

	nearest *interp.Nearest // for inferred parts
}

// make draws and writes. What goes to standard output comes last: it cannot be
// taken back.
func (c *contourCommand) make(ctx context.Context, g *ground, levels contour.Levels, out *outputs) error {
	d := &drawing{contourCommand: c, g: g, levels: levels, xy: c.decimals.Resolve(g.xy)}
	if err := d.fits(); err != nil {
		return err
	}
	slices.SortStableFunc(out.list, func(a, b *destination) int { return boolCompare(a.path == "-", b.path == "-") })
	for _, dest := range out.list {
		if err := d.settleWarnings(); err != nil {
			return err
		}
		if dest.part == partBands && d.made == nil {
			if err := d.makeBands(ctx); err != nil {
				return err
			}
		}
		if err := out.write(dest, func(dest *destination) error { return d.write(ctx, dest) }); err != nil {
			return err
		}
	}
	if err := d.settleWarnings(); err != nil {
		return err
	}
	d.record()
	return out.commit()
}

// fits states what will be needed and refuses what would not fit beside the
// ground. How many pieces the lines have is known once they are looked for.
func (d *drawing) fits() error {
	need := d.g.taken()
	if d.g.raster != nil {
		need += need / 2 // the ranks of its nodes
	} else {
		need += 4 * uint64(d.g.surface.Mesh().NumVertices())
	}
	return d.announce("isolines", need)
}

// options returns how lines or bands are made, within the memory that is left.
func (d *drawing) options(bytesPiece int64) contour.Options {
	left := int64(d.budget.Bytes) - int64(d.g.taken())
	opt := contour.Options{Workers: d.workers(), PiecesMost: max(1, left/bytesPiece), Shortest: d.shortest.Value.Float64()}
	return opt
}

// stage shows how far the following of lines has come.
func (d *drawing) stage(opt *contour.Options, name string) (finish func()) {
	report, finish := d.display.Stage(name)
	if report != nil {
		opt.Progress = func(done, total int64) { report(int(done), int(total)) }
	}
	return finish
}

// makeBands makes the bands, once for all outputs.
func (d *drawing) makeBands(ctx context.Context) error {
	opt := d.options(bytesBandPiece)
	finish := d.stage(&opt, "filling bands")
	made, narrow, err := d.g.bands(ctx, d.levels, opt)
	finish()
	if err != nil {
		return d.tooManyPieces(err, bytesBandPiece)
	}
	r := &bandsResult{Polygons: len(made), Off: narrow.Off, TooNarrow: make([]narrowPlace, 0, len(narrow.TooNarrow))}
	for _, n := range narrow.TooNarrow {
		r.TooNarrow = append(r.TooNarrow, narrowPlace{number{n.At[0], d.xy}, number{n.At[1], d.xy}, n.Z})
	}
	d.tellTooNarrow(r.TooNarrow)
	for i := range made {
		r.Rings += len(made[i].Polygon)
		for _, ring := range made[i].Polygon {
			r.Points += len(ring)
		}
	}
	d.made, d.result.Bands = slices.Clip(made), r
	if d.made == nil {
		d.made = []contour.Band{}
	}
	d.report.Note(fmt.Sprintf("bands: %s, %s, %s", counted(r.Polygons, "polygon"), counted(r.Rings, "ring"), counted(r.Points, "point")),
		"polygons", r.Polygons, "rings", r.Rings, "points", r.Points)
	return nil
}

// tellTooNarrow lists the readings that no polygon of their band holds.
func (d *drawing) tellTooNarrow(places []narrowPlace) {
	what := "reading"
	if d.g.raster != nil {
		what = "node"
	}
	for i, p := range places {
		if i == d.listMost {
			d.report.Note(fmt.Sprintf("and %d more too narrow; a run record lists all", len(places)-i))
			break
		}
		d.report.Note(fmt.Sprintf("too narrow: %s at %v,%v, value %v: its band has no width there that coordinates can show, so no polygon of it holds the %s", what, p.X, p.Y, p.Z, what),
			"x", p.X, "y", p.Y, "z", p.Z)
	}
}

// write writes one output.
func (d *drawing) write(ctx context.Context, dest *destination) error {
	switch {
	case dest.format == formatSVG:
		return d.picture(ctx, dest)
	case dest.format == formatCSV && dest.part == partBands:
		return d.bandTable(dest)
	case dest.format == formatCSV:
		return d.lineTable(ctx, dest)
	case dest.part == partBands:
		return d.writeFeatures(dest, d.featureOptions(d.g.labels, d.xy, 0), d.bandFeatures)
	}
	return d.writeFeatures(dest, d.featureOptions(d.g.labels, d.xy, d.levelDigits()), d.lineFeatures(ctx))
}

// levelDigits returns the digits after the point with which heights of lines are
// written. They are never fewer than the levels have: a level is exact.
func (d *drawing) levelDigits() int {
	digits := 0
	for _, l := range d.levels {
		digits = max(digits, l.Number.Decimals())
	}
	return d.decimals.Resolve(digits)
}

// eachPart gives the lines to use, or their parts where some are to be marked as inferred.
// The first time it says what came out.
func (d *drawing) eachPart(ctx context.Context, use func(l *contour.Line, inferred bool) error) error {
	if !d.inferred.IsSet() {
		return d.eachLine(ctx, func(l *contour.Line) error { return use(l, false) })
	}
	if d.nearest == nil {
		if m := d.g.l.surface.Mesh(); m.HasConstraints() {
			if err := d.announce("the nearest readings", d.g.taken()+uint64(m.NumVertices())*bytesReading); err != nil {
				return err
			}
		}
		var err error
		if d.nearest, err = d.g.l.surface.Nearest(ctx, triangulate.Options{Workers: d.workers()}); err != nil {
			return err
		}
	}
	first := d.result.Lines == nil
	splitter := contour.NewSplitter(d.nearest, d.inferred.Value.Float64())
	r := inferredResult{Beyond: d.inferred.String()}
	var length exact.Sum
	err := d.eachLine(ctx, func(l *contour.Line) error {
		for _, part := range splitter.Split(l) {
			piece := contour.Line{Level: l.Level, Closed: part.Closed, Depression: l.Depression, Points: part.Points}
			if part.Inferred {
				r.Parts++
				length.Add(piece.Length())
			}
			if err := use(&piece, part.Inferred); err != nil {
				return err
			}
		}
		return nil
	})
	if err != nil || !first {
		return err
	}
	r.Length = number{length.Value(), d.xy}
	d.result.Lines.Inferred = &r
	d.report.Note(fmt.Sprintf("inferred: %s, length %v, further than %s from the nearest reading", counted(r.Parts, "part"), r.Length, r.Beyond),
		"parts", r.Parts, "length", r.Length, "beyond", r.Beyond)
	return nil
}

// eachLine gives the lines to use. The first time it says what came out.
func (d *drawing) eachLine(ctx context.Context, use func(*contour.Line) error) error {
	opt := d.options(bytesLinePiece)
	r := linesResult{}
	var length exact.Sum
	report, err := d.g.eachLine(ctx, d.levels, opt, func(l contour.Line) error {
		if l.Closed {
			r.Closed++
		} else {
			r.Open++
		}
		if d.result.Lines == nil {
			length.Add(l.Length())
		}
		return use(&l)
	})
	if err != nil {
		return d.tooManyPieces(err, bytesLinePiece)
	}
	if d.result.Lines != nil {
		return nil
	}
	r.Length = number{length.Value(), d.xy}
	r.Points, r.WithoutLength = report.Points, report.WithoutLength
	r.TooShort = make([]shortLine, 0, len(report.TooShort))
	for _, s := range report.TooShort {
		r.TooShort = append(r.TooShort, shortLine{s.Level.Number.String(), s.Closed, number{s.Length, d.xy}, number{s.Start[0], d.xy}, number{s.Start[1], d.xy}})
	}
	d.result.Lines = &r
	d.tellLines()
	return nil
}

// tellLines says what came out, and lists what was left out.
func (d *drawing) tellLines() {
	r := d.result.Lines
	for i, s := range r.TooShort {
		if i == d.listMost {
			d.report.Note(fmt.Sprintf("and %d more shorter than %v; a run record lists all", len(r.TooShort)-i, d.shortest.String()))
			break
		}
		kind := "open"
		if s.Closed {
			kind = "closed"
		}
		d.report.Note(fmt.Sprintf("left out: line at %s, %s, from %v,%v, length %v, shorter than %s", s.Level, kind, s.X, s.Y, s.Length, d.shortest.String()),
			"level", s.Level, "closed", s.Closed, "x", s.X, "y", s.Y, "length", s.Length)
	}
	if r.WithoutLength > 0 {
		d.report.Note(fmt.Sprintf("left out: %s without length, about readings that just reach a level", counted(int(r.WithoutLength), "line")), "without_length", r.WithoutLength)
	}
	d.report.Note(fmt.Sprintf("lines: %d closed, %d open, %s, length %v", r.Closed, r.Open, counted(int(r.Points), "point"), r.Length),
		"closed", r.Closed, "open", r.Open, "points", r.Points, "length", r.Length)
	if n := len(r.TooShort); n > 0 && r.Closed+r.Open == 0 {
		d.report.Warn("all-too-short", fmt.Sprintf("--shortest %s leaves out all %s: nothing is left to draw", d.shortest.String(), counted(n, "line")), "left_out", n)
	}
}

// tooManyPieces turns a count of pieces into memory.
func (d *drawing) tooManyPieces(err error, bytesPiece int64) error {
	e, ok := errors.AsType[*contour.PiecesError](err)
	if !ok {
		return err
	}
	need := d.g.taken() + uint64(e.Pieces*bytesPiece)
	if err := d.budget.Check(fmt.Sprintf("following %s, %d pieces of line,", counted(len(d.levels), "level"), e.Pieces), need); err != nil {
		return status.With(status.TooBig, err, "a larger --interval, fewer --levels, or a larger --memory if the machine has that much")
	}
	return err
}

// record puts what was made into the run record.
func (d *drawing) record() {
	if d.rec == nil {
		return
	}
	d.result.Levels = make([]string, 0, len(d.levels))
	for _, l := range d.levels {
		d.result.Levels = append(d.result.Levels, l.Number.String())
	}
	if d.g.raster != nil {
		e := describe(d.g.raster.Spec)
		d.result.Raster = &e
	} else {
		d.recordReadings(d.g.list, d.g.l)
		e, s := d.g.l.extents(d.decimals), d.g.l.surfaceCounts(d.decimals)
		d.result.Extent, d.result.Surface = &e, &s
	}
	d.rec.Stable.Result = &d.result
}
