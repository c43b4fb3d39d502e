package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/lines"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// edges is what the command line says of the lines that people draw: breaklines,
// boundary and voids, and how far the surface reaches.
type edges struct {
	breaklines  parsedList[string]
	boundary    parsedList[string]
	voids       parsedList[string]
	crossing    option.Choice
	touchWithin option.Number
	maxEdge     option.Number
	codeTable   typed
	linesZ      parsed[lines.Zeros]

	table *lines.CodeTable // once it is read
	codes *lines.Codes
	sets  map[string]*lines.Set // of files that are read
}

const groupEdges = "Lines and limits"

// edgeOptions returns the options of every command that makes a surface.
func (e *edges) edgeOptions() []manual.Option {
	zero := decimal.FromInt(0)
	name := func(text string) (string, error) { return text, nil }
	e.breaklines = parsedList[string]{form: "FILE", parse: name}
	e.boundary = parsedList[string]{form: "FILE", parse: name}
	e.voids = parsedList[string]{form: "FILE", parse: name}
	e.crossing = option.NewChoice("refuse", "split")
	e.touchWithin, e.maxEdge = option.Number{Least: &zero}, option.Number{Least: &zero}
	e.codeTable = typed{form: "FILE"}
	e.linesZ = parsed[lines.Zeros]{form: "use", parse: lines.ParseZeros}
	const group = groupEdges
	return []manual.Option{
		{Group: group, Name: "breaklines", Value: &e.breaklines, Repeatable: true,
			Text: "lines along which the slope may change, with heights: GeoJSON, or text with the columns line, x, y and z"},
		{Group: group, Name: "boundary", Value: &e.boundary, Repeatable: true,
			Text: "closed lines outside which there is no surface; with heights they are breaklines as well"},
		{Group: group, Name: "voids", Value: &e.voids, Repeatable: true,
			Text: "closed lines inside which there is no surface; with heights they are breaklines as well"},
		{Group: group, Name: "crossing", Value: &e.crossing,
			Text: "what becomes of breaklines that cross between their vertices: split makes a vertex there if their heights agree within --same-spot-spread"},
		{Group: group, Name: "touch-within", Value: &e.touchWithin, Default: "0",
			Text: "distance within which a reading or a vertex counts as lying on a breakline"},
		{Group: group, Name: "max-edge", Value: &e.maxEdge, Default: "no limit",
			Text: "leave out triangles with a longer edge, as far as they reach in from the outside"},
		{Group: group, Name: "code-table", Value: &e.codeTable,
			Text: "which codes are ground, which string lines and with what marks, which are left out"},
		{Group: group, Name: "lines-z", Value: &e.linesZ, Default: "heights that are all 0 are refused",
			Text: "take heights of lines that are all 0 for heights"},
	}
}

// drawn is what the lines made of the surface, for reports.
type drawn struct {
	lines    []lines.Line
	report   *interp.BreaklineReport
	trimming bool // whether triangles were to be left out by their edges
	trimmed  int  // triangles
	trimArea float64
	alone    []triangulate.Vertex // readings used that no triangle has
	region   *triangulate.Region
	cut      *interp.Clip // the surface within the region
	rings    ringReport
	outside  int // readings used that boundary or voids leave out
}

// ringReport compares what rings enclose with what of the surface is there.
type ringReport struct {
	boundaries, voids           int
	boundaryArea, voidArea      float64
	inBoundary, taken, keptArea float64
}

// readCodes reads the table of codes, which decides which readings are used.
func (p *program) readCodes(ctx context.Context, e *edges, sel *readings.Selection) error {
	if !e.codeTable.set {
		return nil
	}
	in, err := p.input(e.codeTable.text)
	if err != nil {
		return err
	}
	if e.table, err = lines.ReadCodeTable(ctx, in.Source); err != nil {
		return err
	}
	e.codes = lines.NewCodes(e.table)
	sel.Code = e.codes.Choose
	return nil
}

// codesKnown refuses codes that the table says nothing about, and counts the rest.
func (p *program) codesKnown(e *edges, set *readings.Set) error {
	if e.codes == nil {
		return nil
	}
	if !set.Has(readings.Code) {
		_, err := lines.Strung(set, e.table) // says that there is no such column
		return err
	}
	if err := e.codes.Unknown(); err != nil {
		return err
	}
	for _, c := range e.codes.Histogram() {
		p.report.Note(fmt.Sprintf("code: %s: %s, %s", c.Code, c.Use, counted(c.Readings, "reading")), "reading_code", c.Code, "use", c.Use.String(), "readings", c.Readings)
	}
	return nil
}

// draw makes the surface of the readings and of what lines there are.
func (p *program) draw(ctx context.Context, r *reading, l *loaded, opt triangulate.Options) error {
	e := &r.edges
	d := &drawn{}
	strung, err := lines.Strung(l.set, e.table)
	if err != nil {
		return err
	}
	d.lines = append(d.lines, strung.Lines...)
	p.tellLines("strings of readings", "line", strung)
	files, err := p.readLines(ctx, e.breaklines.values, r, "line", lines.Breaklines)
	if err != nil {
		return err
	}
	d.lines = append(d.lines, files.Lines...)
	boundary, err := p.readLines(ctx, e.boundary.values, r, "ring", lines.Rings)
	if err != nil {
		return err
	}
	voids, err := p.readLines(ctx, e.voids.values, r, "ring", lines.Rings)
	if err != nil {
		return err
	}
	for _, ring := range slices.Concat(boundary.Lines, voids.Lines) {
		if ring.Z != nil {
			d.lines = append(d.lines, ring)
		}
	}
	for _, s := range []*lines.Set{files, boundary, voids} {
		l.decimalsXY, l.decimalsZ = max(l.decimalsXY, s.DecimalsXY), max(l.decimalsZ, s.DecimalsZ)
	}
	l.drawn = d
	if err := p.join(ctx, r, l, opt); err != nil {
		return err
	}
	if e.maxEdge.IsSet() {
		if err := p.trim(l, e.maxEdge.Value); err != nil {
			return err
		}
	}
	return p.limit(ctx, l, boundary, voids, opt)
}

// readLines reads the files of one option, lines or rings.
func (p *program) readLines(ctx context.Context, names []string, r *reading, kind string, read func(context.Context, []readings.Source, lines.Options) (*lines.Set, error)) (*lines.Set, error) {
	if len(names) == 0 {
		return &lines.Set{}, nil
	}
	// Several surfaces of one run have the same lines.
	key := kind + " " + strings.Join(names, "\x00")
	if set := r.edges.sets[key]; set != nil {
		return set, nil
	}
	var sources []readings.Source
	for _, name := range names {
		in, err := p.input(name)
		if err != nil {
			return nil, err
		}
		sources = append(sources, in.Source)
	}
	set, err := read(ctx, sources, lines.Options{Zeros: r.linesZ.value, Workers: p.workers()})
	if err != nil {
		return nil, err
	}
	r.measureLines(set)
	p.tellLines(strings.Join(names, ", "), kind, set)
	if r.edges.sets == nil {
		r.edges.sets = map[string]*lines.Set{}
	}
	r.edges.sets[key] = set
	return set, nil
}

// tellLines says what was read, and passes warnings on.
func (p *program) tellLines(what, kind string, set *lines.Set) {
	for _, layout := range set.Layouts {
		p.report.Note("text: "+layout.File+": "+layout.String(), "file", layout.File, "layout", layout.String())
	}
	for _, w := range set.Warnings {
		p.report.Warn("lines", w.String(), "file", w.File, "line", w.Line)
	}
	if len(set.Lines) > 0 {
		text := fmt.Sprintf("%s: %s, %s", what, counted(len(set.Lines), kind), countedVertices(set.Vertices))
		if set.Repeated > 0 {
			text += fmt.Sprintf(", %d of them repeats of the one before", set.Repeated)
		}
		p.report.Note(text, "lines", len(set.Lines), "vertices", set.Vertices, "repeated", set.Repeated)
	}
}

// join triangulates readings and breaklines.
func (p *program) join(ctx context.Context, r *reading, l *loaded, opt triangulate.Options) error {
	d := l.drawn
	breaklines := make([]interp.Breakline, len(d.lines))
	for i, line := range d.lines {
		breaklines[i] = interp.Breakline{Name: line.Name, Points: line.Points, Z: line.Z}
	}
	if n := countPoints(d.lines); n > 0 {
		work := fmt.Sprintf("a surface of %s and %s of lines", counted(l.set.Len(), "reading"), countedVertices(n))
		if err := p.announce(work, uint64(l.set.Len()+n)*bytesReading); err != nil {
			return err
		}
	}
	spread := r.spotSpread.Value.Float64()
	o := interp.BreaklineOptions{
		CrossingSpreadMax: spread, SpotSpreadMax: spread,
		TouchWithin: r.edges.touchWithin.Value.Float64(), Mesh: opt,
	}
	if r.edges.crossing.Word() == "split" {
		o.Crossing = interp.SplitCrossings
	}
	if merge := mergeRule(r.spotRule.value); merge != nil {
		o.Merge = merge
		if !r.spotSpread.IsSet() {
			o.SpotSpreadMax = math.Inf(1)
		}
	}
	if p.step != nil && len(d.lines) == 0 {
		s, err := p.surfaceOf(ctx, l.set, opt)
		l.surface, d.report = s, &interp.BreaklineReport{}
		return err
	}
	s, report, err := interp.WithBreaklines(ctx, l.set.Points, l.set.Z, breaklines, o)
	if err != nil {
		return p.linesError(l, err)
	}
	l.surface, d.report = s, report
	if len(d.lines) == 0 {
		return nil
	}
	p.report.Note(fmt.Sprintf("breaklines: %s, %s, %d of them at the place of a reading or of another; %s",
		counted(len(d.lines), "line"), countedVertices(report.Vertices), report.Merged, counted(report.Segments, "segment")),
		"lines", len(d.lines), "vertices", report.Vertices, "merged", report.Merged, "segments", report.Segments)
	p.listSome(len(report.Made), func(i int) string {
		m := report.Made[i]
		heights := make([]string, len(m.Heights))
		for k, z := range m.Heights {
			heights[k] = fmt.Sprint(z)
		}
		return fmt.Sprintf("crossing: %s at (%v, %v): heights %s, vertex made at %v", d.names(m.Lines), m.At[0], m.At[1], listed(heights), m.Z)
	})
	p.listSome(len(report.Touched), func(i int) string {
		t := report.Touched[i]
		return fmt.Sprintf("touching: line %q led through (%v, %v), %.3g from it", d.lines[t.Line].Name, t.At[0], t.At[1], t.Distance)
	})
	return nil
}

func countPoints(list []lines.Line) int {
	n := 0
	for i := range list {
		n += len(list[i].Points)
	}
	return n
}

// mergeRule returns the height of a place from the heights there, nil for the mean.
func mergeRule(rule readings.SpotRule) func([]float64) float64 {
	switch rule {
	case readings.SpotFirst:
		return func(z []float64) float64 { return z[0] }
	case readings.SpotLast:
		return func(z []float64) float64 { return z[len(z)-1] }
	case readings.SpotLowest:
		return slices.Min[[]float64]
	case readings.SpotHighest:
		return slices.Max[[]float64]
	}
	return nil
}

// listSome says the first few of n things, and how many more there are.
func (p *program) listSome(n int, text func(i int) string) {
	for i := range n {
		if i == p.listMost {
			p.report.Note(fmt.Sprintf("and %d more; inspect lists all", n-i))
			return
		}
		p.report.Note(text(i))
	}
}

func (d *drawn) names(is []int) string {
	texts := make([]string, len(is))
	for k, i := range is {
		texts[k] = strconv.Quote(d.lines[i].Name)
	}
	return listed(texts)
}

// listed joins texts as a sentence does: a, b and c.
func listed(texts []string) string {
	n := len(texts) - 1
	if n < 1 {
		return strings.Join(texts, "")
	}
	return strings.Join(texts[:n], ", ") + " and " + texts[n]
}

// linesError names readings and lines by their files.
func (p *program) linesError(l *loaded, err error) error {
	var spot *interp.SpotError
	if errors.As(err, &spot) {
		text := ""
		for k, v := range spot.Of {
			if k > 0 {
				text += ", "
			}
			text += fmt.Sprintf("%s: height %v", l.vertexPlace(v), spot.Heights[k])
		}
		return status.With(status.WrongData, fmt.Errorf("%s: one place (%v, %v), heights %v apart: expected heights that agree", text, spot.At[0], spot.At[1], spot.Spread),
			"--same-spot-spread says how far apart still agrees (their mean is taken); --same-spot names another rule")
	}
	var crossing *interp.CrossingError
	if errors.As(err, &crossing) {
		hint := "add a vertex where they meet, or say --crossing split"
		if crossing.Crossings[0].SpreadTooLarge {
			hint = "mend the heights, or say with --same-spot-spread how far apart still agrees"
		}
		return status.With(status.WrongData, l.drawn.crossingError(crossing), hint)
	}
	return err
}

// crossingError names the files of lines that cross, the first few of all.
func (d *drawn) crossingError(e *interp.CrossingError) error {
	const few = 5
	var texts []string
	for _, c := range e.Crossings[:min(len(e.Crossings), few)] {
		a, b := d.lines[c.A].File, d.lines[c.B].File
		who := fmt.Sprintf("%s: breaklines %q and %q", a, c.NameA, c.NameB)
		if a != b {
			who = fmt.Sprintf("breaklines %q of %s and %q of %s", c.NameA, a, c.NameB, b)
		}
		expected := "lines that meet only at vertices"
		if c.SpreadTooLarge {
			expected = "heights that agree"
		}
		texts = append(texts, fmt.Sprintf("%s cross near (%v, %v), at heights %v and %v: expected %s", who, c.At[0], c.At[1], c.ZA, c.ZB, expected))
	}
	if n := len(e.Crossings) - few; n > 0 {
		texts = append(texts, "and "+counted(n, "more crossing"))
	}
	return errors.New(strings.Join(texts, "\n"))
}

// vertexPlace tells where a reading or a vertex of a line was read.
func (l *loaded) vertexPlace(v interp.LineVertex) string {
	if v.Line < 0 {
		return fmt.Sprintf("%s:%d", l.names[l.set.Source(v.Vertex)], l.set.Lines[v.Vertex])
	}
	line := &l.drawn.lines[v.Line]
	return fmt.Sprintf("%s: line %q", line.At(v.Vertex), line.Name)
}

// inputPlace tells where an input of the mesh was read.
func (l *loaded) inputPlace(i int) string {
	if i < l.set.Len() {
		return l.vertexPlace(interp.LineVertex{Line: -1, Vertex: i})
	}
	i -= l.set.Len()
	for k := range l.drawn.lines {
		if n := len(l.drawn.lines[k].Points); i >= n {
			i -= n
			continue
		}
		return l.vertexPlace(interp.LineVertex{Line: k, Vertex: i})
	}
	return "a vertex made where lines cross"
}

// id returns the id of an input of the mesh, empty if it has none.
func (l *loaded) id(i int) string {
	if i < l.set.Len() {
		return l.set.ID(i)
	}
	return ""
}

// shown is the surface whose triangles are drawn, measured and written: that
// within boundary and voids.
func (l *loaded) shown() *interp.Surface {
	if l.drawn.cut != nil {
		return l.drawn.cut.Surface
	}
	return l.surface
}

// contains tells whether boundary and voids leave a place in.
func (l *loaded) contains(p orb.Point) bool {
	return l.drawn.region == nil || l.drawn.region.Contains(p)
}

// lineAlong returns the name of the line that an edge of the shown surface came
// from, of several the first by name; nothing for an edge of no line.
func (l *loaded) lineAlong(h triangulate.HalfEdge) string {
	var segments []int32
	if cut := l.drawn.cut; cut != nil {
		segments = cut.SegmentsAlong(h)
	} else {
		segments = l.surface.Mesh().SegmentsAlong(h)
	}
	name := ""
	for _, s := range segments {
		if n := l.drawn.lines[l.drawn.report.LineOf[s]].Name; name == "" || n < name {
			name = n
		}
	}
	return name
}

// hasLines tells whether there are breaklines.
func (l *loaded) hasLines() bool { return len(l.drawn.lines) > 0 }
