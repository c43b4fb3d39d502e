package main

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"isofacet/cmd/internal/memory"
	"isofacet/contour"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/geojson"
	"isofacet/io/readings"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// counting counts the bytes that are written to it.
type counting int64

func (c *counting) Write(b []byte) (int, error) {
	*c += counting(len(b))
	return len(b), nil
}

// shapeRate reports vertices a second, and a second of all processors together: the latter
// does not suffer from other work on the machine.
func shapeRate(b *testing.B, vertices int, size counting, start time.Duration) {
	seconds := b.Elapsed().Seconds() / float64(b.N)
	b.ReportMetric(float64(vertices)/seconds/1e6, "Mvertices/s")
	b.ReportMetric(float64(size)/float64(b.N)/seconds/1e6, "MB/s")
	if busy := (cpuTime() - start).Seconds() / float64(b.N); busy > 0 {
		b.ReportMetric(float64(vertices)/busy/1e6, "Mvertices/cpu-s")
	}
}

// BenchmarkShapes is what contour and triangles do once the surface stands: from
// triangles to GeoJSON text. Heights are five periods of sines across the square;
// lines have some 8 million vertices, triangles too. The floor copies as many bytes.
func BenchmarkShapes(b *testing.B) {
	const n = 1_000_000
	l := waves(b, n)
	for _, workers := range []int{1, runtime.GOMAXPROCS(0)} {
		p := newProgram(streams{strings.NewReader(""), io.Discard, io.Discard}, nil)
		p.budget = memory.Budget{Bytes: 8 << 30}
		p.threads.Set(fmt.Sprint(workers))
		old := runtime.GOMAXPROCS(workers)
		var size counting
		vertices := 0
		b.Run(fmt.Sprintf("lines/workers=%d/n=1e6", workers), func(b *testing.B) {
			c := &contourCommand{program: p}
			c.options()
			levels, err := contour.Every(decimal.MustParse("0.25"), decimal.Number{}, 5, -50, 50)
			if err != nil {
				b.Fatal(err)
			}
			start := cpuTime()
			for b.Loop() {
				d := &drawing{contourCommand: c, g: &ground{surface: l.surface, l: l}, levels: levels, xy: 5}
				w := geojson.NewWriter(&size, p.featureOptions(d.g.labels, d.xy, d.levelDigits()))
				if err := d.lineFeatures(context.Background())(w); err != nil {
					b.Fatal(err)
				}
				if err := w.Close(); err != nil {
					b.Fatal(err)
				}
				vertices = int(d.result.Lines.Points)
			}
			shapeRate(b, vertices, size, start)
		})
		size = 0
		b.Run(fmt.Sprintf("triangles/workers=%d/n=1e6", workers), func(b *testing.B) {
			start := cpuTime()
			for b.Loop() {
				s := (&trianglesCommand{program: p}).ordered(l, &outputs{list: []*destination{{part: partTriangles}}})
				w := geojson.NewWriter(&size, p.featureOptions(s.labels(""), s.xy, s.z))
				if err := s.triangleFeatures(w); err != nil {
					b.Fatal(err)
				}
				if err := w.Close(); err != nil {
					b.Fatal(err)
				}
				vertices = 4 * len(s.triangles)
			}
			shapeRate(b, vertices, size, start)
		})
		runtime.GOMAXPROCS(old)
	}
	b.Run("floor=copy/n=1e6", func(b *testing.B) {
		text := make([]byte, 40<<10)
		to := make([]byte, len(text))
		start, size := cpuTime(), counting(0)
		for b.Loop() {
			for range 8_000_000 / 1000 { // vertices of 40 bytes
				size += counting(copy(to, text))
			}
		}
		shapeRate(b, 8_000_000, size, start)
	})
}

// waves is a surface of n readings, loaded as the program has it.
func waves(b *testing.B, n int) *loaded {
	b.Helper()
	name := filepath.Join(b.TempDir(), "waves.csv")
	pts := pointsets.Uniform(n, 1)
	text := bytes.NewBufferString("id,x,y,z\n")
	for i, p := range pts {
		z := 50 * math.Sin(10*math.Pi*p[0]) * math.Sin(10*math.Pi*p[1])
		fmt.Fprintf(text, "P%d,%.3f,%.3f,%.3f\n", i+1, 430000+1000*p[0], 5600000+1000*p[1], z)
	}
	if err := os.WriteFile(name, text.Bytes(), 0o666); err != nil {
		b.Fatal(err)
	}
	set, err := readings.Read(context.Background(), []readings.Source{{Name: name, Open: func() (io.ReadCloser, error) { return os.Open(name) }}},
		readings.Options{Spots: readings.Spots{Rule: readings.SpotMean, Spread: 100, SpreadGiven: true}})
	if err != nil {
		b.Fatal(err)
	}
	m, err := triangulate.Delaunay(context.Background(), set.Points, triangulate.Options{})
	if err != nil {
		b.Fatal(err)
	}
	s, err := interp.FromInputs(m, set.Z)
	if err != nil {
		b.Fatal(err)
	}
	return &loaded{set: set, surface: s, drawn: &drawn{}, decimalsXY: set.DecimalsXY, decimalsZ: set.DecimalsZ, names: []string{name}}
}
