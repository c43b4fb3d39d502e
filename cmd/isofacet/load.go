package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/interp"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// loaded is what every command begins with: the readings and the surface through
// them.
type loaded struct {
	set    *readings.Set
	bound  orb.Bound
	zRange [2]float64
	names  []string // of the inputs
	drawn  *drawn   // what lines made of it
	inputs []int32  // of the surface's vertices, once asked for

	// The most decimals that readings and lines carry.
	decimalsXY, decimalsZ int

	// surface is whole where boundary and voids cut it: values are asked of it,
	// where contains allows. shown is what is left.
	surface *interp.Surface
}

// bytesReading is what a reading takes in memory until the surface stands: its
// columns (28 bytes and some text), what the triangulation takes while it works
// (92), the surface's own values (8), and what is free between collections. Ten
// million readings with ids and codes came to 180 each at the peak.
const bytesReading = 180

// load reads the inputs, says what was found in them, and triangulates; or takes the
// surface that another step of the same run has made of them.
func (p *program) load(ctx context.Context, r *reading, list []*input) (*loaded, error) {
	load := p.loadAlone
	if p.step != nil {
		load = func(ctx context.Context, r *reading, list []*input) (*loaded, error) {
			return p.step.shared.surface(ctx, p, r, list)
		}
	}
	l, err := load(ctx, r, list)
	if err == nil {
		p.remember(r, l)
	}
	return l, err
}

// loadAlone makes a surface.
func (p *program) loadAlone(ctx context.Context, r *reading, list []*input) (*loaded, error) {
	set, err := p.read(ctx, r, list)
	if err != nil {
		return nil, err
	}
	return p.stand(ctx, r, list, set)
}

// stand says what was found in the inputs, and triangulates it.
func (p *program) stand(ctx context.Context, r *reading, list []*input, set *readings.Set) (*loaded, error) {
	l := &loaded{set: set, decimalsXY: set.DecimalsXY, decimalsZ: set.DecimalsZ}
	for _, in := range list {
		l.names = append(l.names, in.Name)
	}
	l.measure()
	p.tellReadings(list, set)
	if set.Len() == 0 {
		return nil, status.With(status.WrongData, fmt.Errorf("0 of %s used%s: expected at least three that are not in line", counted(set.Counts.Read, "reading"), fewReasons(set)),
			"look at what was left out: isofacet inspect lists all; --only, --without, --missing and --exclude choose")
	}
	if err := p.guardReadings(r, l); err != nil {
		return nil, err
	}
	need := uint64(set.Len()) * bytesReading
	if err := p.announce("a surface of "+counted(set.Len(), "reading"), need); err != nil {
		return nil, err
	}
	report, finish := p.display.Stage("triangulating")
	err := p.draw(ctx, r, l, triangulate.Options{Workers: p.workers(), Progress: report})
	finish()
	if err != nil {
		return nil, l.whichReading(list, err)
	}
	p.checkBounds(l)
	return l, nil
}

// read reads the readings.
func (p *program) read(ctx context.Context, r *reading, list []*input) (*readings.Set, error) {
	if p.step != nil && r.round.set {
		set, err := p.readRound(ctx, r, list)
		if err != nil {
			return nil, err
		}
		return set, p.codesKnown(&r.edges, set)
	}
	var set *readings.Set
	err := p.withSources(ctx, r, list, func(sources []readings.Source, opt readings.Options) (err error) {
		set, err = readings.Read(ctx, sources, opt)
		return err
	})
	if err != nil {
		return nil, err
	}
	return set, p.codesKnown(&r.edges, set)
}

// readParts reads the readings and puts them apart.
func (p *program) readParts(ctx context.Context, r *reading, list []*input, part readings.Parter) ([]readings.Part, error) {
	var parts []readings.Part
	err := p.withSources(ctx, r, list, func(sources []readings.Source, opt readings.Options) (err error) {
		opt.BadApart = r.alone // one bad round does not stop the others
		parts, err = readings.ReadParts(ctx, sources, opt, part)
		return err
	})
	return parts, err
}

// withSources calls work with the sources and with how they are read.
func (p *program) withSources(ctx context.Context, r *reading, list []*input, work func([]readings.Source, readings.Options) error) error {
	opt := readings.Options{
		Declared: r.declared(),
		Lenient:  bool(r.lenient),
		Select:   readings.Selection{Only: r.only.values, Without: r.without.values},
		Spots:    r.spots(),
		Workers:  p.workers(),
	}
	if r.exclude.set {
		x, err := p.readExclusions(r.exclude.text)
		if err != nil {
			return err
		}
		opt.Select.Exclude = x
	}
	if err := p.readCodes(ctx, &r.edges, &opt.Select); err != nil {
		return err
	}
	if err := p.settleUnits(&r.measures); err != nil {
		return err
	}
	opt.Transform, opt.Account = r.transform(), r.account || p.stating
	if err := p.reduce(r, &opt); err != nil {
		return err
	}
	report, finish := p.display.Stage("reading")
	defer finish()
	if report != nil {
		opt.Progress = func(done, total int64) { report(int(done), int(total)) }
	}
	var sources []readings.Source
	for _, in := range list {
		sources = append(sources, in.Source)
	}
	return work(sources, opt)
}

// readExclusions reads the file of readings to leave out, and says what in it does
// not count.
func (p *program) readExclusions(name string) (*readings.Exclusions, error) {
	in, err := p.input(name)
	if err != nil {
		return nil, err
	}
	x, err := readings.ReadExclusions(in.Source, readings.Declared{})
	if err != nil {
		code, _ := explain(err)
		return nil, status.With(code, err, "an exclusion file has a header with id (or x and y), decision and reason, and a row a reading")
	}
	p.report.Note(fmt.Sprintf("exclude: %s: %s to leave out, %d with another decision", name, counted(x.Len(), "row"), x.Other))
	return x, nil
}

// measure finds the extents of the used readings.
func (l *loaded) measure() {
	inf := math.Inf(1)
	l.bound = orb.Bound{Min: orb.Point{inf, inf}, Max: orb.Point{-inf, -inf}}
	l.zRange = [2]float64{inf, -inf}
	for i, pt := range l.set.Points {
		for k := range 2 {
			l.bound.Min[k] = min(l.bound.Min[k], pt[k])
			l.bound.Max[k] = max(l.bound.Max[k], pt[k])
		}
		z := l.set.Z[i]
		l.zRange[0], l.zRange[1] = min(l.zRange[0], z), max(l.zRange[1], z)
	}
}

// reach is the extent of readings and breaklines, which a surface may fill.
func (l *loaded) reach() orb.Bound {
	b := l.bound
	for i := range l.drawn.lines {
		b = b.Union(orb.LineString(l.drawn.lines[i].Points).Bound())
	}
	return b
}

// whichReading turns an error about a numbered point into one about a line of a
// file.
func (l *loaded) whichReading(list []*input, err error) error {
	index := -1
	if e, ok := errors.AsType[*triangulate.PositionError](err); ok {
		index = e.Index
	}
	if e, ok := errors.AsType[*interp.ValueError](err); ok {
		index = e.Index
	}
	if index < 0 || index >= l.set.Len() {
		return err
	}
	return status.With(status.WrongData, fmt.Errorf("%s:%d: %w", list[l.set.Source(index)].Name, l.set.Lines[index], err))
}

// needsTriangles refuses to go on without a surface.
func (l *loaded) needsTriangles() error {
	m := l.surface.Mesh()
	if m.NumTriangles() > 0 {
		return nil
	}
	why := "all on one line"
	if m.NumVertices() < 3 {
		why = "fewer than three places"
	}
	return status.With(status.WrongData, fmt.Errorf("%s at %s, %s%s: no surface: expected at least three places that are not in line",
		counted(l.set.Len(), "reading"), counted(m.NumVertices(), "place"), why, fewReasons(l.set)),
		"two readings give a slope along one line only; add readings to its side")
}

// labels returns what the numbers are, for every output.
func (r *reading) labels(show string) grid.Labels {
	return grid.Labels{
		XYUnit:          r.xyOut(),
		ZUnit:           r.zOut(),
		CRS:             r.crs.String(),
		HorizontalDatum: r.horizontalDatum.String(),
		VerticalDatum:   r.verticalDatum.String(),
		Show:            show,
	}
}

// fewLines is how many readings that are not used are named one by one; inspect
// names all of them.
const fewLines = 10

// tellReadings says how each input was read and what became of its readings.
func (p *program) tellReadings(list []*input, set *readings.Set) {
	for i := range set.Layouts {
		list[i].file.Layout = set.Layouts[i].String()
		p.report.Note("text: "+set.Layouts[i].File+": "+set.Layouts[i].String(), "file", set.Layouts[i].File, "layout", set.Layouts[i].String())
	}
	for _, w := range set.Warnings {
		p.report.Warn("reading", w.String(), "file", w.File, "line", w.Line)
	}
	p.tellNotUsed(p.notUsed(list, set), set.Heads())
	c := set.Counts
	p.report.Note(fmt.Sprintf("readings: %d read, %d used, %d merged, %d left out, %d refused", c.Read, c.Used, c.Merged, c.LeftOut, c.Refused),
		"read", c.Read, "used", c.Used, "merged", c.Merged, "left_out", c.LeftOut, "refused", c.Refused)
	if set.SpotCount > 0 {
		p.report.Note(fmt.Sprintf("same spot: %s with several readings, largest spread of z %v", counted(set.SpotCount, "place"), set.SpotSpread),
			"places", set.SpotCount, "spread", set.SpotSpread)
	}
}

// tellNotUsed names readings that are not used: all of them, or else the first few,
// and those that the command line chose not to use by their number.
func (p *program) tellNotUsed(all []record.NotUsed, heads bool) {
	told := 0
	var patterns []string
	byPattern := map[string]int{}
	for _, u := range all {
		if p.listMost < len(all) && isChoice(u.Reason) {
			if byPattern[u.Reason]++; byPattern[u.Reason] == 1 {
				patterns = append(patterns, u.Reason)
			}
			continue
		}
		if told++; told > p.listMost {
			continue
		}
		who := ""
		if heads && u.ID != "" {
			who = u.ID + ": "
		}
		p.report.Note(fmt.Sprintf("%s: %s:%d: %s%s", u.What, u.File, u.Line, who, u.Reason), "file", u.File, "line", u.Line, "id", u.ID, "reason", u.Reason)
	}
	if told > p.listMost {
		p.report.Note(fmt.Sprintf("and %d more; inspect lists all", told-p.listMost))
	}
	slices.Sort(patterns)
	for _, reason := range patterns {
		p.report.Note(fmt.Sprintf("left out: %s, %s", counted(byPattern[reason], "reading"), reason), "readings", byPattern[reason], "reason", reason)
	}
}

// isChoice reports whether a reading is left out by --only, --without or --round.
func isChoice(reason string) bool {
	return strings.HasPrefix(reason, "not among ") || strings.HasPrefix(reason, "among ")
}

// notUsed lists every reading that the surface does not have: merged, left out,
// refused.
func (p *program) notUsed(list []*input, set *readings.Set) []record.NotUsed {
	all := make([]record.NotUsed, 0, set.Counts.Read-set.Counts.Used)
	for _, m := range set.Merged {
		reason := mergedInto(set, &m, list[set.Source(m.Into)].Name)
		all = append(all, record.NotUsed{File: list[m.File].Name, Line: int(m.Line), ID: m.ID, What: "merged", Reason: reason})
	}
	for _, o := range set.LeftOut {
		all = append(all, record.NotUsed{File: list[o.File].Name, Line: int(o.Line), ID: o.ID, What: "left out", Reason: o.Reason})
	}
	for _, e := range set.Refused {
		all = append(all, record.NotUsed{File: e.File, Line: e.Line, What: "refused", Reason: refusal(e)})
	}
	return all
}

// digits returns the digits after the point for coordinates and for values.
func (l *loaded) digits(d option.Decimals) (xy, z int) {
	return d.Resolve(l.decimalsXY + 2), d.Resolve(l.decimalsZ + 2)
}

// extents returns the extents as they are written.
func (l *loaded) extents(d option.Decimals) extents {
	xy, z := l.digits(d)
	return extents{
		number{l.bound.Min[0], xy}, number{l.bound.Min[1], xy}, number{l.bound.Max[0], xy}, number{l.bound.Max[1], xy},
		number{l.zRange[0], z}, number{l.zRange[1], z},
	}
}

// surfaceCounts returns the surface's counts and sums as they are written.
func (l *loaded) surfaceCounts(d option.Decimals) surfaceCounts {
	xy, z := l.digits(d)
	s := l.shown()
	m := s.Mesh()
	c := surfaceCounts{
		Vertices: l.vertices(), Triangles: m.NumTriangles(),
		Area: number{s.Area(), xy}, VolumeAboveZero: number{s.VolumeAboveZero(), z},
	}
	for _, ring := range m.Outline() {
		c.OutlineVertices += len(ring)
	}
	return c
}

// Digits of what has no decimals of its own to go by, under --decimals auto.
const (
	slopeDigits   = 6 // a rise of one millimetre over a kilometre
	azimuthDigits = 3 // less than two centimetres to the side over a kilometre
	weightDigits  = 6
)

// tellSurface says what the surface is.
func (p *program) tellSurface(l *loaded) {
	v, t := l.vertices(), l.shown().Mesh().NumTriangles()
	p.report.Note(fmt.Sprintf("surface: %s, %s", countedVertices(v), counted(t, "triangle")), "vertices", v, "triangles", t)
}

// vertices counts the vertices of the shown surface; limits leave some without a
// triangle, which are not counted.
func (l *loaded) vertices() int {
	n := l.shown().Mesh().NumVertices()
	if l.drawn.trimming || l.drawn.cut != nil {
		n -= len(l.shown().WithoutTriangle())
	}
	return n
}

func countedVertices(n int) string {
	if n == 1 {
		return "1 vertex"
	}
	return fmt.Sprintf("%d vertices", n)
}
