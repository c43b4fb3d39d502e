package trianglecsv

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
)

// The example of the package comment.
func TestTables(t *testing.T) {
	vertices := []Vertex{
		{"P7", orb.Point{430000, 5600000}, 101.25},
		{"P2", orb.Point{430000, 5600010}, 103.5},
		{"P4, old", orb.Point{430012.5, 5600004}, 99.875},
	}
	var b bytes.Buffer
	err := WriteVertices(&b, len(vertices), func(i int) Vertex { return vertices[i] }, Options{XYDecimals: 2, ZDecimals: 3})
	want := "vertex,id,x,y,z\n1,P7,430000.00,5600000.00,101.250\n2,P2,430000.00,5600010.00,103.500\n3,\"P4, old\",430012.50,5600004.00,99.875\n"
	if err != nil || b.String() != want {
		t.Errorf("%v\n%s, want\n%s", err, &b, want)
	}
	triangles := []Triangle{
		{[3]int{1, 3, 2}, [3]string{"P7", "P4, old", "P2"}, 0.3306051, 103.2405},
		{[3]int{2, 3, 1}, [3]string{"", `a"b`, "c\nd"}, 0, math.NaN()},
		{[3]int{1, 2, 3}, [3]string{}, math.Inf(1), 90},
	}
	b.Reset()
	err = WriteTriangles(&b, len(triangles), func(i int) Triangle { return triangles[i] }, Options{SlopeDecimals: 6, AzimuthDecimals: 3})
	want = "triangle,vertex_1,vertex_2,vertex_3,id_1,id_2,id_3,slope,downhill_azimuth\n" +
		"1,1,3,2,P7,\"P4, old\",P2,0.330605,103.240\n" +
		"2,2,3,1,,\"a\"\"b\",\"c\nd\",0.000000,\n" +
		"3,1,2,3,,,,,90.000\n"
	if err != nil || b.String() != want {
		t.Errorf("%v\n%s, want\n%s", err, &b, want)
	}
}

func TestEmptyTables(t *testing.T) {
	var b bytes.Buffer
	if err := WriteVertices(&b, 0, nil, Options{}); err != nil || b.String() != vertexHeader {
		t.Errorf("%v, %q", err, &b)
	}
	b.Reset()
	if err := WriteTriangles(&b, 0, nil, Options{}); err != nil || b.String() != triangleHeader {
		t.Errorf("%v, %q", err, &b)
	}
}

// What is written reads back, with the standard library's reader, to the same texts and, with the shortest text, to the same
// doubles; and the bytes do not depend on the workers.
func TestReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ids := rapid.SliceOfN(rapid.StringOf(rapid.RuneFrom([]rune("aß,\"\n ;'"))), 1, 20).Draw(t, "ids")
		number := rapid.Float64Range(-1e60, 1e60)
		repeat := rapid.SampledFrom([]int{1, 700}).Draw(t, "repeat") // beyond one block
		n := len(ids) * repeat
		base := number.Draw(t, "x")
		at := func(i int) Vertex {
			return Vertex{ids[i%len(ids)], orb.Point{base + float64(i), -base}, float64(i) / 7}
		}
		var one, three bytes.Buffer
		for _, w := range []struct {
			b       *bytes.Buffer
			workers int
		}{{&one, 1}, {&three, 3}} {
			if err := WriteVertices(w.b, n, at, Options{XYDecimals: -1, ZDecimals: -1, Workers: w.workers}); err != nil {
				t.Fatal(err)
			}
		}
		if !bytes.Equal(one.Bytes(), three.Bytes()) {
			t.Fatal("three workers write other bytes than one")
		}
		rows, err := csv.NewReader(&one).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		if len(rows) != n+1 {
			t.Fatalf("%d rows, want %d", len(rows)-1, n)
		}
		for i, row := range rows[1:] {
			v := at(i)
			if row[0] != strconv.Itoa(i+1) || row[1] != v.ID {
				t.Fatalf("row %d: %q, want id %q", i+1, row, v.ID)
			}
			for k, want := range []float64{v.At[0], v.At[1], v.Z} {
				if got, err := strconv.ParseFloat(row[k+2], 64); err != nil || got != want {
					t.Fatalf("row %d: %q, want %v", i+1, row[k+2], want)
				}
			}
		}
	})
}

type failing struct{ after int }

var errFull = errors.New("full")

func (f *failing) Write(b []byte) (int, error) {
	if f.after--; f.after < 0 {
		return 0, errFull
	}
	return len(b), nil
}

func TestWriterFails(t *testing.T) {
	for after := range 3 {
		err := WriteTriangles(&failing{after}, 5*rowsAtOnce, func(int) Triangle { return Triangle{} }, Options{Workers: 2})
		if !errors.Is(err, errFull) {
			t.Errorf("after %d blocks: %v", after, err)
		}
	}
}

type counter int

func (c *counter) Write(b []byte) (int, error) {
	*c += counter(len(b))
	return len(b), nil
}

func BenchmarkWriteTriangles(b *testing.B) {
	const n = 1_000_000
	at := func(i int) Triangle {
		return Triangle{[3]int{i, i + 1, i + 7}, [3]string{"P1001", "P1002", "P1003"}, float64(i%1000) / 3000, float64(i%3600) / 10.5}
	}
	for _, workers := range []int{1, 0} {
		b.Run(fmt.Sprintf("workers=%d/n=1e6", workers), func(b *testing.B) {
			var c counter
			for b.Loop() {
				if err := WriteTriangles(&c, n, at, Options{SlopeDecimals: 6, AzimuthDecimals: 3, Workers: workers}); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(n*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mrows/s")
		})
	}
	// The floor: as many bytes copied, block by block.
	block := []byte(strings.Repeat("x", 80*rowsAtOnce))
	b.Run("floor/copy", func(b *testing.B) {
		dst := make([]byte, len(block))
		for b.Loop() {
			for range n / rowsAtOnce {
				copy(dst, block)
			}
		}
		b.ReportMetric(n*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mrows/s")
	})
}
