package linecsv_test

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/io/linecsv"
)

func ExampleNewLines() {
	var text strings.Builder
	w := linecsv.NewLines(&text, linecsv.Options{XYDecimals: 2})
	err := w.Write(&linecsv.Line{Level: 431.5, Rank: "index", Points: orb.LineString{{10, 20}, {12.5, -0.001}}})
	if err == nil {
		err = w.Close()
	}
	fmt.Print(text.String(), err)
	// Output:
	// line,level,rank,closed,x,y
	// 1,431.5,index,false,10.00,20.00
	// 1,431.5,index,false,12.50,0.00
	// <nil>
}

// text returns what a Writer writes of ts.
func text[T any](t *testing.T, w func(*bytes.Buffer) *linecsv.Writer[T], ts ...T) string {
	t.Helper()
	var buf bytes.Buffer
	to := w(&buf)
	for i := range ts {
		if err := to.Write(&ts[i]); err != nil {
			t.Fatal(err)
		}
	}
	if err := to.Close(); err != nil {
		t.Fatal(err)
	}
	if to.Written() != len(ts) {
		t.Fatalf("%d written, want %d", to.Written(), len(ts))
	}
	return buf.String()
}

func TestTables(t *testing.T) {
	full := linecsv.Options{XYDecimals: -1, ZDecimals: 3, SlopeDecimals: -1, AzimuthDecimals: 1}
	square := orb.Ring{{0, 0}, {4, 0}, {4, 4}, {0, 0}}
	for _, c := range []struct{ name, got, want string }{
		{"no lines", text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Line] { return linecsv.NewLines(b, full) }), "line,level,rank,closed,x,y\n"},
		{"lines", text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Line] { return linecsv.NewLines(b, full) },
			linecsv.Line{Level: 0.3, Rank: "index", Closed: true, Points: orb.LineString(square)},
			linecsv.Line{Level: math.Copysign(0, -1), Rank: "a,\"b\"", Points: orb.LineString{{1, 2}, {0.1, 1e-7}}}),
			"line,level,rank,closed,x,y\n1,0.3,index,true,0,0\n1,0.3,index,true,4,0\n1,0.3,index,true,4,4\n1,0.3,index,true,0,0\n" +
				"2,0,\"a,\"\"b\"\"\",false,1,2\n2,0,\"a,\"\"b\"\"\",false,0.1,1e-7\n"},
		{"bands", text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Band] { return linecsv.NewBands(b, full) },
			linecsv.Band{Upper: linecsv.At(1.5), Polygon: orb.Polygon{square}},
			linecsv.Band{Lower: linecsv.At(1.5), Polygon: orb.Polygon{square, {{1, 1}, {1, 2}, {2, 2}, {1, 1}}}}),
			"polygon,ring,lower,upper,x,y\n1,1,,1.5,0,0\n1,1,,1.5,4,0\n1,1,,1.5,4,4\n1,1,,1.5,0,0\n" +
				"2,1,1.5,,0,0\n2,1,1.5,,4,0\n2,1,1.5,,4,4\n2,1,1.5,,0,0\n2,2,1.5,,1,1\n2,2,1.5,,1,2\n2,2,1.5,,2,2\n2,2,1.5,,1,1\n"},
		{"vertices", text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Vertex] { return linecsv.NewVertices(b, full) },
			linecsv.Vertex{"P17", orb.Point{1.25, 2}, 3}, linecsv.Vertex{"", orb.Point{-1, 0}, 0.0005}, linecsv.Vertex{" x", orb.Point{0, 0}, 0}),
			"vertex,reading,x,y,z\n1,P17,1.25,2,3.000\n2,,-1,0,0.001\n3,\" x\",0,0,0.000\n"},
		{"triangles", text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Triangle] { return linecsv.NewTriangles(b, full) },
			linecsv.Triangle{Corners: [3]int{1, 2, 3}, Slope: 0.05, DownhillAzimuth: 270}, linecsv.Triangle{Corners: [3]int{2, 4, 3}, DownhillAzimuth: math.NaN()}),
			"triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth\n1,1,2,3,0.05,270.0\n2,2,4,3,0,\n"},
	} {
		if c.got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, c.got, c.want)
		}
	}
}

func fails[T any](t *testing.T, w *linecsv.Writer[T], v T, want string) {
	t.Helper()
	err := w.Write(&v)
	var we *linecsv.WriteError
	if !errors.As(err, &we) || err.Error() != "linecsv: "+want {
		t.Errorf("got  %v\nwant linecsv: %s", err, want)
	}
	var zero T
	if again := w.Write(&zero); again != err {
		t.Errorf("then %v", again)
	}
	if again := w.WriteBatch([]T{zero}); again != err {
		t.Errorf("then, for a batch, %v", again)
	}
	if again := w.Close(); again != err {
		t.Errorf("then, at the end, %v", again)
	}
}

func TestErrors(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	var b bytes.Buffer
	opt := linecsv.Options{}
	two := orb.LineString{{0, 0}, {1, 1}}
	fails(t, linecsv.NewLines(&b, opt), linecsv.Line{}, "line 1: points: 0: expected 2 or more")
	fails(t, linecsv.NewLines(&b, opt), linecsv.Line{Level: nan, Points: two}, "line 1: level: NaN: expected a finite number")
	fails(t, linecsv.NewLines(&b, opt), linecsv.Line{Closed: true, Points: two}, "line 1: closed line: ends at (1, 1): expected its first vertex (0, 0)")
	fails(t, linecsv.NewLines(&b, opt), linecsv.Line{Points: orb.LineString{{0, 0}, {inf, 1}}}, "line 1: vertex 2: (+Inf, 1): expected finite coordinates")
	fails(t, linecsv.NewBands(&b, opt), linecsv.Band{}, "polygon 1: rings: none: expected 1 or more")
	fails(t, linecsv.NewBands(&b, opt), linecsv.Band{Polygon: orb.Polygon{{{0, 0}, {1, 0}, {0, 0}}}}, "polygon 1: ring 1: open, or 3 vertices: expected 4 or more, the last as the first")
	fails(t, linecsv.NewBands(&b, opt), linecsv.Band{Polygon: orb.Polygon{{{0, 0}, {1, nan}, {1, 1}, {0, 0}}}}, "polygon 1: ring 1: vertex 2: (1, NaN): expected finite coordinates")
	fails(t, linecsv.NewBands(&b, opt), linecsv.Band{Upper: linecsv.At(inf), Polygon: orb.Polygon{{}}}, "polygon 1: upper: +Inf: expected a finite number")
	fails(t, linecsv.NewVertices(&b, opt), linecsv.Vertex{Z: nan}, "vertex 1: x, y, z: (0, 0, NaN): expected finite numbers")
	fails(t, linecsv.NewTriangles(&b, opt), linecsv.Triangle{}, "triangle 1: corner: 0: expected the number of a vertex, counting from 1")
	fails(t, linecsv.NewTriangles(&b, opt), linecsv.Triangle{Slope: inf}, "triangle 1: slope: +Inf: expected a finite number")
	fails(t, linecsv.NewTriangles(&b, opt), linecsv.Triangle{Corners: [3]int{1, 2, 3}, DownhillAzimuth: inf}, "triangle 1: downhill azimuth: +Inf: expected a finite number")
}

// broken fails after some bytes.
type broken struct{ left int }

var errFull = errors.New("no space left")

func (b *broken) Write(p []byte) (int, error) {
	if b.left -= len(p); b.left < 0 {
		return 0, errFull
	}
	return len(p), nil
}

func TestBatchesWriteTheSameBytes(t *testing.T) {
	lines := make([]linecsv.Line, 400)
	for i := range lines {
		points := make(orb.LineString, 2+i%300)
		for k := range points {
			points[k] = orb.Point{float64(i) / 7, float64(k) / 3}
		}
		lines[i] = linecsv.Line{Level: float64(i) / 10, Rank: "index", Points: points}
	}
	want := text(t, func(b *bytes.Buffer) *linecsv.Writer[linecsv.Line] {
		return linecsv.NewLines(b, linecsv.Options{XYDecimals: 3})
	}, lines...)
	for _, workers := range []int{1, 2, 3, 8} {
		for _, cut := range []int{0, 1, 200, 400} {
			var buf bytes.Buffer
			w := linecsv.NewLines(&buf, linecsv.Options{XYDecimals: 3, Workers: workers})
			err := errors.Join(w.WriteBatch(lines[:cut]), w.WriteBatch(lines[cut:]), w.Close())
			if err != nil || buf.String() != want || w.Written() != len(lines) {
				t.Errorf("%d workers, cut at %d: %v, other text", workers, cut, err)
			}
		}
		for _, size := range []int{0, 100, 500_000} {
			w := linecsv.NewLines(&broken{size}, linecsv.Options{Workers: workers})
			if err := w.WriteBatch(lines); !errors.Is(err, errFull) || !errors.Is(w.Close(), errFull) {
				t.Errorf("%d workers, room for %d bytes: %v", workers, size, err)
			}
		}
	}
	lines[390].Level = math.NaN()
	var texts []string
	for _, workers := range []int{1, 4} {
		w := linecsv.NewLines(new(bytes.Buffer), linecsv.Options{Workers: workers})
		texts = append(texts, fmt.Sprint(w.WriteBatch(lines)))
	}
	if texts[0] != texts[1] || texts[0] != "linecsv: line 391: level: NaN: expected a finite number" {
		t.Errorf("errors %q", texts)
	}
	w := linecsv.NewLines(new(bytes.Buffer), linecsv.Options{})
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	if w.Write(&lines[0]) == nil || w.Close() == nil {
		t.Error("a closed Writer writes")
	}
}

// The oracle is the standard library's reader of CSV.
func TestReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		number := rapid.Float64Range(-1e60, 1e60)
		names := rapid.StringMatching("[ -~é\n]*")
		var vertices []linecsv.Vertex
		for range rapid.IntRange(0, 5).Draw(t, "n") {
			vertices = append(vertices, linecsv.Vertex{names.Draw(t, "reading"), orb.Point{number.Draw(t, "x"), number.Draw(t, "y")}, number.Draw(t, "z")})
		}
		var buf bytes.Buffer
		w := linecsv.NewVertices(&buf, linecsv.Options{XYDecimals: -1, ZDecimals: -1})
		if err := errors.Join(w.WriteBatch(vertices), w.Close()); err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(&buf).ReadAll()
		if err != nil || len(rows) != len(vertices)+1 {
			t.Fatalf("%d rows, %v", len(rows), err)
		}
		for i, v := range vertices {
			row := rows[i+1]
			want := []float64{float64(i + 1), v.XY[0], v.XY[1], v.Z}
			for k, column := range []int{0, 2, 3, 4} {
				if got, err := strconv.ParseFloat(row[column], 64); err != nil || got != want[k] {
					t.Fatalf("row %v, want %+v", row, v)
				}
			}
			if row[1] != v.Reading {
				t.Fatalf("reading %q, want %q", row[1], v.Reading)
			}
		}
	})
}

func BenchmarkLines(b *testing.B) {
	lines := make([]linecsv.Line, 1000)
	for i := range lines {
		points := make(orb.LineString, 1000)
		for k := range points {
			points[k] = orb.Point{430000 + float64(i*1000+k)/7, 5600000 + float64(k*k%9973)/13}
		}
		lines[i] = linecsv.Line{Level: float64(i), Rank: "intermediate", Points: points}
	}
	for _, places := range []int{3, -1} {
		for _, workers := range []int{1, 2} {
			b.Run(fmt.Sprintf("lines/places=%d/workers=%d/n=1e6", places, workers), func(b *testing.B) {
				for b.Loop() {
					w := linecsv.NewLines(new(counter), linecsv.Options{XYDecimals: places, Workers: workers})
					if err := errors.Join(w.WriteBatch(lines), w.Close()); err != nil {
						b.Fatal(err)
					}
				}
				b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "Mrows/s")
			})
		}
	}
	b.Run("floor=copy/n=1e6", func(b *testing.B) {
		buf, n := make([]byte, 0, 1<<17), new(counter)
		for b.Loop() {
			buf = buf[:0]
			for i := range 1_000_000 {
				if buf = append(buf, "1,100,intermediate,false,430000.123,5600000.123\n"...); i%2000 == 1999 {
					if _, err := n.Write(buf); err != nil {
						b.Fatal(err)
					}
					buf = buf[:0]
				}
			}
		}
		b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "Mrows/s")
	})
}

type counter int

func (c *counter) Write(p []byte) (int, error) {
	*c += counter(len(p))
	return len(p), nil
}

func TestTrianglesWithLines(t *testing.T) {
	var b bytes.Buffer
	w := linecsv.NewTrianglesWithLines(&b, linecsv.Options{SlopeDecimals: 2, AzimuthDecimals: 0})
	err := w.WriteBatch([]linecsv.Triangle{{Corners: [3]int{1, 2, 3}, Slope: 0.5, DownhillAzimuth: 90, Lines: [3]string{"", "toe, east", "crest"}}})
	if err == nil {
		err = w.Close()
	}
	const want = "triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth,line_1,line_2,line_3\n1,1,2,3,0.50,90,,\"toe, east\",crest\n"
	if err != nil || b.String() != want {
		t.Errorf("got %q, %v; want %q", b.String(), err, want)
	}
}
