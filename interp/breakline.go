package interp

import (
	"context"
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Breakline is a line along which the slope may change: its segments become edges
// of the surface, with the heights that the line has there.
type Breakline struct {
	Name   string
	Points []orb.Point
	Z      []float64 // one a point
}

// CrossingRule says what to do where breaklines cross between their vertices.
type CrossingRule uint8

const (
	RefuseCrossings CrossingRule = iota // return a *CrossingError
	SplitCrossings                      // make a vertex there, if the heights agree
)

// BreaklineOptions says how breaklines join each other and the readings.
type BreaklineOptions struct {
	Crossing CrossingRule
	// CrossingSpreadMax is how far the heights of lines that cross may differ there
	// and still be split, in the unit of z; the new vertex has their mean.
	CrossingSpreadMax float64
	// SpotSpreadMax is how far the heights at one place may differ, of a line's
	// vertex from a reading or another line's vertex there.
	SpotSpreadMax float64
	// Merge gives the height of a place from all the heights there, readings first,
	// then lines in turn; nil for their exact mean, a line that comes to the place
	// more than once at one height counting once.
	Merge func(z []float64) float64
	// TouchWithin is the distance within which a point counts as lying on a
	// segment; 0 for exactly.
	TouchWithin float64
	Mesh        triangulate.Options
}

// LineVertex names a vertex of a breakline; Line -1 stands for a reading, Vertex
// then being its number.
type LineVertex struct {
	Line, Vertex int
}

// BreaklineReport tells what was done with the breaklines.
type BreaklineReport struct {
	Vertices int // of all lines
	Merged   int // of those, how many stand at the place of a reading or of another
	Segments int // without those that have no length
	Made     []MadeVertex
	Touched  []TouchedVertex
	// LineOf and FirstVertex are, for every segment of the mesh, the line that it is
	// a part of and the vertex of that line that it begins at.
	LineOf, FirstVertex []int
}

// MadeVertex is a vertex that was made where lines cross.
type MadeVertex struct {
	At      orb.Point
	Lines   []int
	Heights []float64 // of every line there
	Z       float64   // their mean, which the surface has; a segment that repeats another counts once
}

// TouchedVertex is a vertex or reading that a line was led through.
type TouchedVertex struct {
	Line     int
	At       orb.Point
	Distance float64 // from the line
}

// SpotError reports heights at one place that differ by more than is allowed.
type SpotError struct {
	At      orb.Point
	Of      []LineVertex
	Heights []float64
	Spread  float64
}

func (e *SpotError) Error() string {
	return fmt.Sprintf("at (%v, %v): %d heights from %v to %v: expected heights that agree",
		e.At[0], e.At[1], len(e.Heights), slices.Min(e.Heights), slices.Max(e.Heights))
}

// CrossingError reports breaklines that cross between their vertices, or whose
// heights where they cross differ by more than is allowed.
type CrossingError struct {
	Crossings []LineCrossing
}

// LineCrossing is one place where two breaklines cross.
type LineCrossing struct {
	A, B           int // lines
	NameA, NameB   string
	At             orb.Point
	ZA, ZB         float64
	SpreadTooLarge bool // they were to be split, but for the heights
}

func (e *CrossingError) Error() string {
	c := e.Crossings[0]
	s := fmt.Sprintf("breaklines %q and %q cross near (%v, %v), at heights %v and %v", c.NameA, c.NameB, c.At[0], c.At[1], c.ZA, c.ZB)
	if n := len(e.Crossings) - 1; n > 0 {
		s += fmt.Sprintf(", and %d more", n)
	}
	if c.SpreadTooLarge {
		return s + ": expected heights that agree"
	}
	return s + ": expected lines that meet only at vertices"
}

// WithBreaklines returns the surface of readings at pts with heights z, and of
// breaklines. The first len(pts) inputs of its mesh are the readings, the next the
// lines' vertices in turn, the last those made at crossings.
//
// The surface depends on the set of readings and lines alone; which line comes
// first shows in the report only. It returns a *SpotError, a *CrossingError, or
// what triangulate.Constrained returns.
func WithBreaklines(ctx context.Context, pts []orb.Point, z []float64, lines []Breakline, opt BreaklineOptions) (*Surface, *BreaklineReport, error) {
	j := &joiner{lines: lines, opt: opt, pts: slices.Clone(pts), z: slices.Clone(z), readings: len(pts), report: &BreaklineReport{}}
	j.addLines()
	if err := j.mergeSpots(); err != nil {
		return nil, nil, err
	}
	if opt.TouchWithin > 0 {
		j.touch()
	}
	mesh, err := j.constrain(ctx)
	if err != nil {
		return nil, nil, err
	}
	s, err := FromInputs(mesh, j.z)
	return s, j.report, err
}

// joiner collects the points and segments of readings and breaklines.
type joiner struct {
	lines    []Breakline
	opt      BreaklineOptions
	pts      []orb.Point
	z        []float64
	readings int
	owner    []int32 // line of every input after the readings
	segs     []triangulate.Segment
	line     []int // of every segment
	vertex   []int // of the line, where the segment begins
	report   *BreaklineReport
}

func (j *joiner) addLines() {
	for i, l := range j.lines {
		for k, p := range l.Points {
			n := int32(len(j.pts))
			j.pts, j.z, j.owner = append(j.pts, p), append(j.z, l.Z[k]), append(j.owner, int32(i))
			if k > 0 && l.Points[k-1] != p {
				j.segs = append(j.segs, triangulate.Segment{From: n - 1, To: n})
				j.line, j.vertex = append(j.line, i), append(j.vertex, k-1)
			}
		}
		j.report.Vertices += len(l.Points)
	}
	j.report.Segments = len(j.segs)
}

// nameOf tells what input i is.
func (j *joiner) nameOf(i int) LineVertex {
	if i < j.readings {
		return LineVertex{-1, i}
	}
	i -= j.readings
	for k, l := range j.lines {
		if i < len(l.Points) {
			return LineVertex{k, i}
		}
		i -= len(l.Points)
	}
	panic("interp: no such input")
}

// mergeSpots gives all inputs at the place of a line's vertex one height.
func (j *joiner) mergeSpots() error {
	at := make(map[orb.Point][]int, len(j.pts)-j.readings)
	for i := j.readings; i < len(j.pts); i++ {
		at[j.pts[i]] = nil
	}
	for i, p := range j.pts {
		if _, ok := at[p]; ok {
			at[p] = append(at[p], i)
		}
	}
	var worst *SpotError
	for p, is := range at {
		if len(is) == 1 {
			continue
		}
		j.report.Merged += len(is)
		if is[0] < j.readings {
			for _, i := range is {
				if i < j.readings {
					j.report.Merged--
				}
			}
		} else {
			j.report.Merged--
		}
		heights := make([]float64, len(is))
		for k, i := range is {
			heights[k] = j.z[i]
		}
		spread := slices.Max(heights) - slices.Min(heights)
		var z float64
		switch {
		case spread > j.opt.SpotSpreadMax:
			if worst == nil || exact.CompareXY(p, worst.At) < 0 {
				worst = &SpotError{At: p, Heights: heights, Spread: spread}
				for _, i := range is {
					worst.Of = append(worst.Of, j.nameOf(i))
				}
			}
			continue
		case j.opt.Merge != nil:
			z = j.opt.Merge(heights)
		default:
			z = mean(j.onceEach(is, heights))
		}
		for _, i := range is {
			j.z[i] = z
		}
	}
	if worst != nil {
		return worst
	}
	return nil
}

// onceEach returns the heights of inputs at one place, rising by number, without those
// that a line has there again: where a ring begins and ends is chance.
func (j *joiner) onceEach(is []int, heights []float64) []float64 {
	var own []float64
	from := 0 // of the line's heights among own
	for k, i := range is {
		if i < j.readings || k == 0 || is[k-1] < j.readings || j.owner[i-j.readings] != j.owner[is[k-1]-j.readings] {
			from = len(own)
		}
		if !slices.Contains(own[from:], heights[k]) {
			own = append(own, heights[k])
		}
	}
	return own
}

// mean is the exact mean, rounded once.
func mean(zs []float64) float64 {
	var s exact.Sum
	for _, z := range zs {
		s.Add(z)
	}
	return s.Mean(len(zs))
}

// touch leads the lines through the points near them.
func (j *joiner) touch() {
	pieces, of, touched := triangulate.Touch(j.pts, j.segs, j.opt.TouchWithin)
	for _, t := range touched {
		j.report.Touched = append(j.report.Touched, TouchedVertex{j.line[t.Segment], j.pts[t.Point], t.Distance})
	}
	j.replace(pieces, of)
}

// replace puts pieces in the place of the segments that they are parts of.
func (j *joiner) replace(pieces []triangulate.Segment, of []int32) {
	line, vertex := make([]int, len(pieces)), make([]int, len(pieces))
	for i, k := range of {
		line[i], vertex[i] = j.line[k], j.vertex[k]
	}
	j.segs, j.line, j.vertex = pieces, line, vertex
}

func (j *joiner) constrain(ctx context.Context) (*triangulate.Mesh, error) {
	var split *triangulate.Split
	if j.opt.Crossing == SplitCrossings {
		var err error
		if split, err = triangulate.SplitCrossings(ctx, j.pts, j.segs); err != nil {
			return nil, err
		}
		if err := j.settle(split); err != nil {
			return nil, err
		}
		j.replace(split.Pieces, split.Of)
	}
	j.report.LineOf, j.report.FirstVertex = j.line, j.vertex
	mesh, err := triangulate.Constrained(ctx, j.pts, j.segs, j.opt.Mesh)
	if c, ok := err.(*triangulate.CrossingError); ok {
		e := &CrossingError{}
		for _, p := range c.Pairs {
			a, b := j.segs[p.A], j.segs[p.B]
			at := triangulate.Intersection(j.pts[a.From], j.pts[a.To], j.pts[b.From], j.pts[b.To])
			e.Crossings = append(e.Crossings, j.crossing(p.A, p.B, at))
		}
		return nil, e
	}
	return mesh, err
}

// crossing names two segments that cross at a place.
func (j *joiner) crossing(a, b int32, at orb.Point) LineCrossing {
	return LineCrossing{
		A: j.line[a], B: j.line[b], NameA: j.lines[j.line[a]].Name, NameB: j.lines[j.line[b]].Name,
		At: at, ZA: j.heightOn(a, at), ZB: j.heightOn(b, at),
	}
}

// heightOn is the height of a segment at a place on it.
func (j *joiner) heightOn(seg int32, p orb.Point) float64 {
	a, b := j.segs[seg].From, j.segs[seg].To
	if exact.CompareXY(j.pts[a], j.pts[b]) > 0 {
		a, b = b, a
	}
	return alongEdge(&j.pts[a], &j.pts[b], j.z[a], j.z[b], &p)
}

// settle gives the vertices made at crossings their heights.
func (j *joiner) settle(split *triangulate.Split) error {
	e := &CrossingError{}
	made := make([]float64, len(split.Made))
	for k, m := range split.Made {
		at := split.Points[m.Point]
		v := MadeVertex{At: at}
		for _, seg := range m.Segments {
			v.Lines = append(v.Lines, j.line[seg])
			v.Heights = append(v.Heights, j.heightOn(seg, at))
		}
		low, high := 0, 0
		for i, h := range v.Heights {
			if h < v.Heights[low] {
				low = i
			}
			if h > v.Heights[high] {
				high = i
			}
		}
		if v.Heights[high]-v.Heights[low] > j.opt.CrossingSpreadMax {
			c := j.crossing(m.Segments[low], m.Segments[high], at)
			c.SpreadTooLarge = true
			e.Crossings = append(e.Crossings, c)
		}
		v.Z = mean(j.once(m.Segments, v.Heights))
		made[k] = v.Z
		j.report.Made = append(j.report.Made, v)
	}
	if len(e.Crossings) > 0 {
		return e
	}
	j.pts, j.z = split.Points, append(j.z, made...)
	return nil
}

// once returns the heights of segments without those of repeats: a line given twice
// does not weigh twice.
func (j *joiner) once(segments []int32, heights []float64) []float64 {
	seen := make(map[[2]orb.Point]bool, len(segments))
	var own []float64
	for i, s := range segments {
		ends := [2]orb.Point{j.pts[j.segs[s].From], j.pts[j.segs[s].To]}
		if exact.CompareXY(ends[0], ends[1]) > 0 {
			ends[0], ends[1] = ends[1], ends[0]
		}
		if !seen[ends] {
			seen[ends] = true
			own = append(own, heights[i])
		}
	}
	return own
}
