package trianglecsv

import (
	"io"
	"math"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
	"isofacet/io/outfile"
)

// Options say how numbers are written: digits after the point, 0 to 20, or -1 for the shortest text that reads back to
// the same double.
type Options struct {
	XYDecimals, ZDecimals int
	// SlopeDecimals and AzimuthDecimals are for triangles.
	SlopeDecimals, AzimuthDecimals int
	// Workers is how many goroutines make text; 0 means one per CPU.
	Workers int
}

// Vertex is a row of the table of vertices.
type Vertex struct {
	ID string // of the reading; empty if it has none
	At orb.Point
	Z  float64
}

// Triangle is a row of the table of triangles.
type Triangle struct {
	Vertices [3]int // numbers of rows in the table of vertices, from 1, counter-clockwise
	IDs      [3]string
	// Slope is rise over run, DownhillAzimuth degrees clockwise from north, NaN on a level triangle.
	Slope, DownhillAzimuth float64
}

const (
	vertexHeader   = "vertex,id,x,y,z\n"
	triangleHeader = "triangle,vertex_1,vertex_2,vertex_3,id_1,id_2,id_3,slope,downhill_azimuth\n"
)

// WriteVertices writes the table of n vertices. at is called once for each i from 0 to n-1, from several goroutines. It
// returns the first error of w.
func WriteVertices(w io.Writer, n int, at func(i int) Vertex, opt Options) error {
	return rows(w, n, vertexHeader, opt.Workers, func(dst []byte, i int) []byte {
		v := at(i)
		dst = append(strconv.AppendInt(dst, int64(i)+1, 10), ',')
		dst = append(appendText(dst, v.ID), ',')
		dst = append(appendNumber(dst, v.At[0], opt.XYDecimals), ',')
		dst = append(appendNumber(dst, v.At[1], opt.XYDecimals), ',')
		return appendNumber(dst, v.Z, opt.ZDecimals)
	})
}

// WriteTriangles writes the table of n triangles. at is called once for each i from 0 to n-1, from several goroutines. It
// returns the first error of w.
func WriteTriangles(w io.Writer, n int, at func(i int) Triangle, opt Options) error {
	return rows(w, n, triangleHeader, opt.Workers, func(dst []byte, i int) []byte {
		t := at(i)
		dst = append(strconv.AppendInt(dst, int64(i)+1, 10), ',')
		for _, v := range t.Vertices {
			dst = append(strconv.AppendInt(dst, int64(v), 10), ',')
		}
		for _, id := range t.IDs {
			dst = append(appendText(dst, id), ',')
		}
		dst = append(appendNumber(dst, t.Slope, opt.SlopeDecimals), ',')
		return appendNumber(dst, t.DownhillAzimuth, opt.AzimuthDecimals)
	})
}

// rowsAtOnce make a block of text: some 300 kB, large against the cost of handing it over.
const rowsAtOnce = 1 << 12

// rows writes a header and n rows in blocks.
func rows(w io.Writer, n int, header string, workers int, row func(dst []byte, i int) []byte) error {
	blocks := max(1, (n+rowsAtOnce-1)/rowsAtOnce)
	return outfile.WriteBlocks(w, blocks, workers, func(block int, buf []byte) ([]byte, error) {
		buf = buf[:0]
		if block == 0 {
			buf = append(buf, header...)
		}
		for i := block * rowsAtOnce; i < min(n, (block+1)*rowsAtOnce); i++ {
			buf = append(row(buf, i), '\n')
		}
		return buf, nil
	})
}

func appendNumber(dst []byte, v float64, decimals int) []byte {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return dst
	}
	return numtext.Append(dst, v, decimals)
}

// appendText appends a text, in quotes where RFC 4180 asks for them.
func appendText(dst []byte, text string) []byte {
	if !strings.ContainsAny(text, ",\"\r\n") {
		return append(dst, text...)
	}
	dst = append(dst, '"')
	for i := range len(text) {
		if text[i] == '"' {
			dst = append(dst, '"')
		}
		dst = append(dst, text[i])
	}
	return append(dst, '"')
}
