package main

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"isofacet/cmd/internal/advice"
	"isofacet/interp"
	"isofacet/triangulate"
)

// What inspect says of the lines that people draw, and of the triangles that came of
// them.

// constraintCounts counts lines and what they became.
type constraintCounts struct {
	Lines            int `json:"lines"`
	Vertices         int `json:"vertices"`
	Merged           int `json:"merged"`
	Segments         int `json:"segments"`
	ConstrainedEdges int `json:"constrained_edges"`
	Crossings        int `json:"crossings"`
	Touched          int `json:"touched"`
}

// qualityFound tells of triangles that deserve a look.
type qualityFound struct {
	Flat     int         `json:"flat"`
	FlatArea number      `json:"flat_area"`
	Slivers  int         `json:"slivers"`
	Longest  []edgeFound `json:"longest_edges"`
}

type edgeFound struct {
	From   placeFound `json:"from"`
	To     placeFound `json:"to"`
	Length number     `json:"length"`
}

// placeFound names a vertex by its reading, or by the line that has it.
type placeFound struct {
	Reading *string `json:"reading"`
	Line    *string `json:"line"`
	X       number  `json:"x"`
	Y       number  `json:"y"`
}

func (f placeFound) String() string {
	at := fmt.Sprintf("(%v, %v)", f.X, f.Y)
	switch {
	case f.Reading != nil:
		return *f.Reading + " " + at
	case f.Line != nil:
		return "line " + strconv.Quote(*f.Line) + " " + at
	}
	return at
}

// limitsFound tells how limits changed the surface; what was not asked for is null.
type limitsFound struct {
	MaxEdge         *trimFound     `json:"max_edge"`
	Boundary        *boundaryFound `json:"boundary"`
	Voids           *voidsFound    `json:"voids"`
	ReadingsOutside int            `json:"readings_outside"`
}

type trimFound struct {
	Triangles       int          `json:"triangles"`
	Area            number       `json:"area"`
	WithoutTriangle []placeFound `json:"without_triangle"`
}

type boundaryFound struct {
	Rings       int    `json:"rings"`
	Area        number `json:"area"`
	WithSurface number `json:"area_with_surface"`
}

type voidsFound struct {
	Rings int    `json:"rings"`
	Area  number `json:"area"`
	Taken number `json:"area_taken"`
}

// longestMost is how many of the longest edges are shown: enough to see what kind
// they are.
const longestMost = 3

func (l *loaded) constraints() constraintCounts {
	d := l.drawn
	c := constraintCounts{
		Lines: len(d.lines), Vertices: d.report.Vertices, Merged: d.report.Merged, Segments: d.report.Segments,
		Crossings: len(d.report.Made), Touched: len(d.report.Touched),
	}
	m := l.surface.Mesh()
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if t := m.Twin(h); m.IsConstrained(h) && (t == triangulate.NoHalfEdge || h < t) {
			c.ConstrainedEdges++
		}
	}
	return c
}

// quality looks at the triangles as readings and lines make them, as far as boundary and
// voids leave something of them: what those cut off would only look like slivers. The
// area of flats is that of what is left.
func (l *loaded) quality(xy int) (qualityFound, error) {
	s, err := l.reaching()
	if err != nil {
		return qualityFound{}, err
	}
	q := s.Quality(longestMost)
	f := qualityFound{Flat: q.Flat, FlatArea: number{q.FlatArea, xy}, Slivers: q.Slivers, Longest: []edgeFound{}}
	if l.drawn.cut != nil {
		f.FlatArea.v = l.shown().Quality(0).FlatArea
	}
	for _, e := range q.Longest {
		f.Longest = append(f.Longest, edgeFound{l.nameVertex(e.From, xy), l.nameVertex(e.To, xy), number{e.Length, xy}})
	}
	return f, nil
}

// reaching is the surface of the triangles that reach into the region.
func (l *loaded) reaching() (*interp.Surface, error) {
	if l.drawn.cut == nil {
		return l.surface, nil
	}
	m, pieces := l.surface.Mesh(), l.drawn.cut.Surface.Mesh()
	tracer, reaches := l.drawn.cut.Tracer(), make([]bool, m.NumTriangles())
	for t := range pieces.Triangles() {
		if whole := tracer.TriangleOf(t); whole != triangulate.NoTriangle {
			reaches[whole] = true
		}
	}
	return interp.New(m.Hide(func(t triangulate.Triangle) bool { return !reaches[t] }), l.surface.Z())
}

// nameVertex tells whose a vertex of the surface is.
func (l *loaded) nameVertex(v triangulate.Vertex, xy int) placeFound {
	at := l.surface.Mesh().Position(v)
	f := placeFound{X: number{at[0], xy}, Y: number{at[1], xy}}
	if l.inputs == nil {
		l.inputs = l.surface.Mesh().Inputs()
	}
	if i := int(l.inputs[v]); i < l.set.Len() {
		if id := l.id(i); id != "" {
			f.Reading = &id
		}
		return f
	}
	for i := range l.drawn.lines {
		line := &l.drawn.lines[i]
		if (f.Line == nil || line.Name < *f.Line) && slices.Contains(line.Points, at) {
			f.Line = &line.Name
		}
	}
	return f
}

// limits tells what --max-edge, --boundary and --voids took away.
func (l *loaded) limits(xy int) limitsFound {
	d := l.drawn
	var f limitsFound
	if d.trimming {
		f.MaxEdge = &trimFound{Triangles: d.trimmed, Area: number{d.trimArea, xy}, WithoutTriangle: []placeFound{}}
		for _, v := range d.alone {
			f.MaxEdge.WithoutTriangle = append(f.MaxEdge.WithoutTriangle, l.nameVertex(v, xy))
		}
	}
	if g := d.rings; g.boundaries > 0 {
		f.Boundary = &boundaryFound{g.boundaries, number{g.boundaryArea, xy}, number{g.inBoundary, xy}}
	}
	if g := d.rings; g.voids > 0 {
		f.Voids = &voidsFound{g.voids, number{g.voidArea, xy}, number{g.taken, xy}}
	}
	f.ReadingsOutside = d.outside
	return f
}

// touchWithin suggests a distance for --touch-within from the lines as they were
// read, unless what is given reaches as far.
func (p *program) touchWithin(l *loaded, e *edges) advice.Suggestion {
	pts := slices.Clone(l.set.Points)
	var segs []triangulate.Segment
	decimals := l.decimalsXY
	for i := range l.drawn.lines {
		line := &l.drawn.lines[i]
		for k, at := range line.Points {
			if k > 0 {
				n := int32(len(pts))
				segs = append(segs, triangulate.Segment{From: n - 1, To: n})
			}
			pts = append(pts, at)
			if line.Feature > 0 { // GeoJSON does not say how many decimals it carries
				decimals = max(decimals, decimalsOf(at[0]), decimalsOf(at[1]))
			}
		}
	}
	s := advice.TouchWithin(pts, segs, decimals)
	if s.OK && e.touchWithin.Value.Cmp(s.Value) >= 0 {
		return advice.Suggestion{Reason: fmt.Sprintf("places within %v of a line count as on it", e.touchWithin.Value)}
	}
	return s
}

// decimalsOf counts the decimals of the shortest text that reads back to v.
func decimalsOf(v float64) int {
	_, fraction, _ := strings.Cut(strconv.FormatFloat(v, 'f', -1, 64), ".")
	return len(fraction)
}

// writeEdges writes what is known of lines, limits and triangles.
func (f *finding) writeEdges(line func(subject, format string, values ...any)) {
	if c := f.Constraints; c.Lines > 0 {
		line("lines", "%s of %s, %d of them at the place of a reading or of another; %s, %s along them",
			counted(c.Lines, "line"), countedVertices(c.Vertices), c.Merged, counted(c.Segments, "segment"), counted(c.ConstrainedEdges, "edge"))
		if c.Crossings > 0 {
			line("crossings", "%s made where lines cross", countedVertices(c.Crossings))
		}
		if c.Touched > 0 {
			line("touching", "%s near a line that it was led through", counted(c.Touched, "place"))
		}
	}
	if t := f.Limits.MaxEdge; t != nil {
		line("max edge", "%s left out, area %v; %s without a triangle", counted(t.Triangles, "triangle"), t.Area, counted(len(t.WithoutTriangle), "place"))
	}
	if b := f.Limits.Boundary; b != nil {
		line("boundary", "%s enclosing %v, of which %v have a surface", counted(b.Rings, "ring"), b.Area, b.WithSurface)
	}
	if v := f.Limits.Voids; v != nil {
		line("voids", "%s enclosing %v, of which %v were surface", counted(v.Rings, "ring"), v.Area, v.Taken)
	}
	if n := f.Limits.ReadingsOutside; n > 0 {
		line("outside", "%s beyond the boundary or in voids", counted(n, "reading"))
	}
	if f.Surface.Triangles == 0 {
		return
	}
	q := f.Quality
	line("flat", "%s with three equal heights, area %v", counted(q.Flat, "triangle"), q.FlatArea)
	line("slivers", "%s with an angle below %d degrees", counted(q.Slivers, "triangle"), interp.SliverAngle)
	for _, e := range q.Longest {
		line("long edge", "%v from %v to %v", e.Length, e.From, e.To)
	}
}
