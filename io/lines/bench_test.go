package lines

import (
	"bytes"
	"context"
	"fmt"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/io/geojson"
	"isofacet/io/readings"
)

// benchVertices are n vertices of a kind: lines of 100 vertices one after the other,
// lines whose rows take turns, one line.
func benchVertices(kind string, n int) (names []string, at []orb.Point, z []float64) {
	for i := range n {
		line, k := i/100, i%100
		switch kind {
		case "turns":
			line, k = i%20, i/20
		case "one":
			line, k = 0, i
		}
		names = append(names, "crest-"+strconv.Itoa(line))
		at = append(at, orb.Point{500000 + float64(k)/4, 4600000 + float64(line)/8 + float64(k%7)/1000})
		z = append(z, 100+float64(k%50)/8)
	}
	return names, at, z
}

func benchText(kind string, n int, heights bool) []byte {
	names, at, z := benchVertices(kind, n)
	var b bytes.Buffer
	b.WriteString("line,x,y")
	if heights {
		b.WriteString(",z")
	}
	b.WriteByte('\n')
	for i := range at {
		fmt.Fprintf(&b, "%s,%.3f,%.3f", names[i], at[i][0], at[i][1])
		if heights {
			fmt.Fprintf(&b, ",%.3f", z[i])
		}
		b.WriteByte('\n')
	}
	return b.Bytes()
}

func benchSize() int {
	if testing.Short() {
		return 1e5
	}
	return 1e6
}

func report(b *testing.B, n int) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mvertices/s")
}

// BenchmarkBreaklines reads rows with heights.
func BenchmarkBreaklines(b *testing.B) {
	n := benchSize()
	for _, kind := range []string{"runs", "turns", "one"} {
		data := benchText(kind, n, true)
		for _, workers := range []int{1, 2} {
			b.Run(fmt.Sprintf("%s/n=%.0e/workers=%d", kind, float64(n), workers), func(b *testing.B) {
				b.SetBytes(int64(len(data)))
				for b.Loop() {
					s, err := Breaklines(context.Background(), []readings.Source{readings.FromBytes("a.csv", data)}, Options{Workers: workers})
					if err != nil || s.Vertices != n {
						b.Fatal(err)
					}
				}
				report(b, n)
			})
		}
	}
}

// BenchmarkRings reads rows without heights, which takes a second look at the header.
func BenchmarkRings(b *testing.B) {
	n := benchSize()
	data := benchText("runs", n, false)
	// Each run of rows is closed by its first.
	var closed bytes.Buffer
	var first []byte
	k := 0
	for line := range bytes.Lines(data) {
		if k == 0 {
			closed.Write(line)
		} else {
			if k%100 == 1 {
				first = line
			}
			closed.Write(line)
			if k%100 == 0 {
				closed.Write(first)
			}
		}
		k++
	}
	data = closed.Bytes()
	b.Run(fmt.Sprintf("runs/n=%.0e/workers=2", float64(n)), func(b *testing.B) {
		b.SetBytes(int64(len(data)))
		for b.Loop() {
			s, err := Rings(context.Background(), []readings.Source{readings.FromBytes("a.csv", data)}, Options{Workers: 2})
			if err != nil || s.Vertices != n+n/100 {
				b.Fatal(err)
			}
		}
		report(b, n)
	})
}

// BenchmarkFeatures reads the lines of BenchmarkBreaklines from GeoJSON.
func BenchmarkFeatures(b *testing.B) {
	n := benchSize()
	_, at, z := benchVertices("runs", n)
	var text bytes.Buffer
	w := geojson.NewWriter(&text, geojson.Options{XYDecimals: 3, ZDecimals: 3})
	for i := 0; i < n; i += 100 {
		if err := w.Write(&geojson.Feature{Geometry: geojson.Geometry{Shape: orb.LineString(at[i : i+100]), Z: z[i : i+100]},
			Properties: []geojson.Property{{Name: "line", Value: geojson.Int(int64(i))}}}); err != nil {
			b.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		b.Fatal(err)
	}
	b.Run(fmt.Sprintf("runs/n=%.0e", float64(n)), func(b *testing.B) {
		b.SetBytes(int64(text.Len()))
		for b.Loop() {
			s, err := Breaklines(context.Background(), []readings.Source{readings.FromBytes("a.geojson", text.Bytes())}, Options{})
			if err != nil || s.Vertices != n {
				b.Fatal(err)
			}
		}
		report(b, n)
	})
}

// BenchmarkStrung strings coded readings that have been read.
func BenchmarkStrung(b *testing.B) {
	n := benchSize()
	var text bytes.Buffer
	text.WriteString("x,y,z,code\n")
	for i := range n {
		fmt.Fprintf(&text, "%d.25,%d.5,%d.125,TOE%d\n", i/20, i%20, i%50+1, i%20)
	}
	table := codeTable(b, officeTable)
	codes := NewCodes(table)
	sources := []readings.Source{readings.FromBytes("a.csv", text.Bytes())}
	b.Run(fmt.Sprintf("choose/n=%.0e", float64(n)), func(b *testing.B) {
		code := []byte("TOE7 B")
		for b.Loop() {
			for range n {
				if codes.Choose(code) != "" {
					b.Fatal("left out")
				}
			}
		}
		report(b, n)
	})
	set, err := readings.Read(context.Background(), sources, readings.Options{})
	if err != nil {
		b.Fatal(err)
	}
	b.Run(fmt.Sprintf("turns/n=%.0e", float64(n)), func(b *testing.B) {
		for b.Loop() {
			s, err := Strung(set, table)
			if err != nil || s.Vertices != n {
				b.Fatal(err)
			}
		}
		report(b, n)
	})
}

// BenchmarkFloor only parses the same rows: no reader of lines by them can be faster.
func BenchmarkFloor(b *testing.B) {
	n := benchSize()
	data := benchText("runs", n, true)
	for _, workers := range []int{1, 2} {
		b.Run(fmt.Sprintf("scan/n=%.0e/workers=%d", float64(n), workers), func(b *testing.B) {
			b.SetBytes(int64(len(data)))
			for b.Loop() {
				if _, err := readings.Scan(context.Background(), []readings.Source{readings.FromBytes("a.csv", data)}, readings.Options{Workers: workers},
					func(*readings.Block) error { return nil }); err != nil {
					b.Fatal(err)
				}
			}
			report(b, n)
		})
	}
}
