package linecsv

import (
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
)

// Line is one isoline.
type Line struct {
	Level  float64
	Rank   string
	Closed bool // the last of Points repeats the first
	// Inferred is written if the Options say so.
	Inferred bool
	Points   orb.LineString
}

// NewLines returns a Writer of the table line,level,rank,closed,x,y, with inferred in front of x
// if the Options say so.
func NewLines(w io.Writer, opt Options) *Writer[Line] {
	header := "line,level,rank,closed,x,y"
	if opt.Inferred {
		header = "line,level,rank,closed,inferred,x,y"
	}
	return newWriter(w, opt, table[Line]{
		name: "line", header: header,
		weight: func(l *Line) int { return len(l.Points) + 1 }, rows: lineRows,
	})
}

func lineRows(dst []byte, opt *Options, l *Line, number int) ([]byte, *WriteError) {
	if n := len(l.Points); n < 2 {
		return dst, &WriteError{What: "points", Seen: strconv.Itoa(n), Expected: "2 or more"}
	}
	if !finite(l.Level) {
		return dst, notFinite("level", l.Level)
	}
	if first, last := l.Points[0], l.Points[len(l.Points)-1]; l.Closed && first != last {
		return dst, &WriteError{What: "closed line", Seen: fmt.Sprintf("ends at (%v, %v)", last[0], last[1]), Expected: fmt.Sprintf("its first vertex (%v, %v)", first[0], first[1])}
	}
	front := append(strconv.AppendInt(nil, int64(number), 10), ',')
	front = append(numtext.Append(front, l.Level, numtext.Shortest), ',')
	front = append(appendText(front, l.Rank), ',')
	front = append(strconv.AppendBool(front, l.Closed), ',')
	if opt.Inferred {
		front = append(strconv.AppendBool(front, l.Inferred), ',')
	}
	return vertices(dst, front, l.Points, opt)
}

// vertices appends a row front,x,y for each point.
func vertices(dst, front []byte, points []orb.Point, opt *Options) ([]byte, *WriteError) {
	for i, p := range points {
		if !finite(p[0]) || !finite(p[1]) {
			return dst, &WriteError{What: "vertex " + strconv.Itoa(i+1), Seen: fmt.Sprintf("(%v, %v)", p[0], p[1]), Expected: "finite coordinates"}
		}
		dst = append(dst, front...)
		dst = append(numtext.Append(dst, p[0], opt.XYDecimals), ',')
		dst = append(numtext.Append(dst, p[1], opt.XYDecimals), '\n')
	}
	return dst, nil
}

// Bound is a limit of a band. The zero value is open.
type Bound struct {
	Level  float64
	Closed bool // there is a limit, Level
}

// At returns the limit level.
func At(level float64) Bound { return Bound{level, true} }

// Band is one polygon between two levels.
type Band struct {
	Lower, Upper Bound
	Polygon      orb.Polygon // the outer ring first, then holes
}

// NewBands returns a Writer of the table polygon,ring,lower,upper,x,y.
func NewBands(w io.Writer, opt Options) *Writer[Band] {
	return newWriter(w, opt, table[Band]{
		name: "polygon", header: "polygon,ring,lower,upper,x,y", rows: bandRows,
		weight: func(b *Band) int {
			n := 1
			for _, ring := range b.Polygon {
				n += len(ring)
			}
			return n
		},
	})
}

func bandRows(dst []byte, opt *Options, b *Band, number int) ([]byte, *WriteError) {
	if len(b.Polygon) == 0 {
		return dst, &WriteError{What: "rings", Seen: "none", Expected: "1 or more"}
	}
	var limits []byte
	for _, l := range []struct {
		name string
		Bound
	}{{"lower", b.Lower}, {"upper", b.Upper}} {
		if l.Closed {
			if !finite(l.Level) {
				return dst, notFinite(l.name, l.Level)
			}
			limits = numtext.Append(limits, l.Level, numtext.Shortest)
		}
		limits = append(limits, ',')
	}
	for i, ring := range b.Polygon {
		where := "ring " + strconv.Itoa(i+1)
		if n := len(ring); n < 4 || ring[0] != ring[n-1] {
			return dst, &WriteError{What: where, Seen: "open, or " + strconv.Itoa(n) + " vertices", Expected: "4 or more, the last as the first"}
		}
		front := append(strconv.AppendInt(nil, int64(number), 10), ',')
		front = append(strconv.AppendInt(front, int64(i+1), 10), ',')
		var err *WriteError
		if dst, err = vertices(dst, append(front, limits...), ring, opt); err != nil {
			err.What = where + ": " + err.What
			return dst, err
		}
	}
	return dst, nil
}

// Vertex is one vertex of a surface.
type Vertex struct {
	Reading string // the reading that it came from, or nothing
	XY      orb.Point
	Z       float64
}

// NewVertices returns a Writer of the table vertex,reading,x,y,z.
func NewVertices(w io.Writer, opt Options) *Writer[Vertex] {
	return newWriter(w, opt, table[Vertex]{
		name: "vertex", header: "vertex,reading,x,y,z", weight: func(*Vertex) int { return 1 }, rows: vertexRow,
	})
}

func vertexRow(dst []byte, opt *Options, v *Vertex, number int) ([]byte, *WriteError) {
	if !finite(v.XY[0]) || !finite(v.XY[1]) || !finite(v.Z) {
		return dst, &WriteError{What: "x, y, z", Seen: fmt.Sprintf("(%v, %v, %v)", v.XY[0], v.XY[1], v.Z), Expected: "finite numbers"}
	}
	dst = append(strconv.AppendInt(dst, int64(number), 10), ',')
	dst = append(appendText(dst, v.Reading), ',')
	dst = append(numtext.Append(dst, v.XY[0], opt.XYDecimals), ',')
	dst = append(numtext.Append(dst, v.XY[1], opt.XYDecimals), ',')
	return append(numtext.Append(dst, v.Z, opt.ZDecimals), '\n'), nil
}

// Triangle is one triangle of a surface.
type Triangle struct {
	Corners         [3]int // numbers of vertices, counting from 1, counter-clockwise
	Slope           float64
	DownhillAzimuth float64 // degrees clockwise from north; NaN on a flat
	// Lines names the line that each edge came from, that from the first corner to
	// the second first; "" for none. Written only by NewTrianglesWithLines.
	Lines [3]string
}

// NewTriangles returns a Writer of the table triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth.
func NewTriangles(w io.Writer, opt Options) *Writer[Triangle] {
	return newWriter(w, opt, table[Triangle]{
		name: "triangle", header: "triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth", weight: func(*Triangle) int { return 1 }, rows: triangleRow,
	})
}

// NewTrianglesWithLines is NewTriangles with three more columns, line_1,line_2,line_3.
func NewTrianglesWithLines(w io.Writer, opt Options) *Writer[Triangle] {
	return newWriter(w, opt, table[Triangle]{
		name: "triangle", header: "triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth,line_1,line_2,line_3", weight: func(*Triangle) int { return 1 }, rows: triangleRowWithLines,
	})
}

func triangleRowWithLines(dst []byte, opt *Options, t *Triangle, number int) ([]byte, *WriteError) {
	dst, err := triangleRow(dst, opt, t, number)
	if err != nil {
		return dst, err
	}
	dst = dst[:len(dst)-1] // the line end
	for _, name := range t.Lines {
		dst = appendText(append(dst, ','), name)
	}
	return append(dst, '\n'), nil
}

func triangleRow(dst []byte, opt *Options, t *Triangle, number int) ([]byte, *WriteError) {
	if !finite(t.Slope) {
		return dst, notFinite("slope", t.Slope)
	}
	dst = append(strconv.AppendInt(dst, int64(number), 10), ',')
	for _, v := range t.Corners {
		if v < 1 {
			return dst, &WriteError{What: "corner", Seen: strconv.Itoa(v), Expected: "the number of a vertex, counting from 1"}
		}
		dst = append(strconv.AppendInt(dst, int64(v), 10), ',')
	}
	dst = append(numtext.Append(dst, t.Slope, opt.SlopeDecimals), ',')
	if a := t.DownhillAzimuth; a == a {
		if !finite(a) {
			return dst, notFinite("downhill azimuth", a)
		}
		dst = numtext.Append(dst, a, opt.AzimuthDecimals)
	}
	return append(dst, '\n'), nil
}

// finite: a difference with itself is 0 unless it is of NaN or infinities.
func finite(v float64) bool { return v-v == 0 }

func notFinite(what string, v float64) *WriteError {
	return &WriteError{What: what, Seen: fmt.Sprint(v), Expected: "a finite number"}
}

// appendText appends a field, in quotes where RFC 4180 asks for them, or where blanks at an end would be lost.
func appendText(dst []byte, s string) []byte {
	if !strings.ContainsAny(s, ",\"\r\n") && strings.TrimSpace(s) == s {
		return append(dst, s...)
	}
	dst = append(dst, '"')
	for i := range len(s) {
		if s[i] == '"' {
			dst = append(dst, '"')
		}
		dst = append(dst, s[i])
	}
	return append(dst, '"')
}
