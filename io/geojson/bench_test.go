package geojson

import (
	"bytes"
	"fmt"
	"io"
	"runtime"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
)

// benchmarkLines are 1000 isolines of 1000 vertices in survey coordinates.
func benchmarkLines() []Feature {
	features := make([]Feature, 1000)
	for i := range features {
		line := make(orb.LineString, 1000)
		for k := range line {
			t := float64(i*1000 + k)
			line[k] = orb.Point{430000 + t/7, 5600000 + float64(k*k%9973)/13}
		}
		level := 100 + float64(i%40)/2
		features[i] = Feature{Geometry: Geometry{Shape: line, Z: []float64{level}}, Properties: []Property{
			{"level", Number(level)}, {"rank", String("intermediate")}, {"closed", Bool(false)}, {"depression", Bool(false)}}}
	}
	return features
}

// benchmarkTriangles are 250,000 triangles with heights of their own.
func benchmarkTriangles() []Feature {
	features := make([]Feature, 250_000)
	for i := range features {
		x, y := 430000+float64(i%500)*1.25, 5600000+float64(i/500)*1.5
		ring := orb.Ring{{x, y}, {x + 1.25, y + 0.125}, {x + 0.375, y + 1.5}, {x, y}}
		features[i] = Feature{Geometry: Geometry{Shape: orb.Polygon{ring}, Z: []float64{x / 7, y / 11, x / 13, x / 7}}, Properties: []Property{
			{"triangle", Int(int64(i))}, {"slope", Number(x / 1e7)}, {"downhill_azimuth", Null()}}}
	}
	return features
}

func positions(features []Feature) int {
	n := 0
	for i := range features {
		n += features[i].Geometry.NumPositions()
	}
	return n
}

// rate reports what was done a second, and a second of all processors together since start: the latter does not suffer from
// other work on the machine.
func rate(b *testing.B, n, bytes int, start time.Duration) {
	seconds := b.Elapsed().Seconds() / float64(b.N)
	b.ReportMetric(float64(n)/seconds/1e6, "Mvertices/s")
	b.ReportMetric(float64(bytes)/seconds/1e6, "MB/s")
	if busy := (cpuTime() - start).Seconds() / float64(b.N); busy > 0 {
		b.ReportMetric(float64(n)/busy/1e6, "Mvertices/cpu-s")
	}
	b.ReportMetric(0, "ns/op")
}

func BenchmarkWrite(b *testing.B) {
	for _, set := range []struct {
		name     string
		features []Feature
	}{{"lines", benchmarkLines()}, {"triangles", benchmarkTriangles()}} {
		n := positions(set.features)
		for _, places := range []int{3, 5, numtext.Shortest} {
			for _, workers := range []int{1, runtime.GOMAXPROCS(0)} {
				b.Run(fmt.Sprintf("%s/places=%d/workers=%d/n=1e6", set.name, places, workers), func(b *testing.B) {
					size, start := 0, cpuTime()
					for b.Loop() {
						var c counter
						w := NewWriter(&c, Options{XYDecimals: places, ZDecimals: places, Workers: workers})
						if err := w.WriteBatch(set.features); err != nil {
							b.Fatal(err)
						}
						if err := w.Close(); err != nil {
							b.Fatal(err)
						}
						size = int(c)
					}
					rate(b, n, size, start)
				})
			}
		}
	}
}

// The floor: the same bytes copied through a buffer.
func BenchmarkFloor(b *testing.B) {
	features := benchmarkLines()
	var text bytes.Buffer
	w := NewWriter(&text, Options{XYDecimals: 3, ZDecimals: 3})
	if err := w.WriteBatch(features); err != nil {
		b.Fatal(err)
	}
	if err := w.Close(); err != nil {
		b.Fatal(err)
	}
	b.Run("copy/lines/n=1e6", func(b *testing.B) {
		buf, start := make([]byte, 0, bufferSize), cpuTime()
		for b.Loop() {
			for rest := text.Bytes(); len(rest) > 0; {
				n := min(len(rest), bufferSize)
				buf = append(buf[:0], rest[:n]...)
				rest = rest[n:]
				if _, err := io.Discard.Write(buf); err != nil {
					b.Fatal(err)
				}
			}
		}
		rate(b, positions(features), text.Len(), start)
	})
}

type counter int

func (c *counter) Write(p []byte) (int, error) {
	*c += counter(len(p))
	return len(p), nil
}

func BenchmarkRead(b *testing.B) {
	for _, set := range []struct {
		name     string
		features []Feature
	}{{"lines", benchmarkLines()}, {"triangles", benchmarkTriangles()}} {
		for _, places := range []int{3, numtext.Shortest} {
			var text bytes.Buffer
			w := NewWriter(&text, Options{XYDecimals: places, ZDecimals: places})
			if err := w.WriteBatch(set.features); err != nil {
				b.Fatal(err)
			}
			if err := w.Close(); err != nil {
				b.Fatal(err)
			}
			b.Run(fmt.Sprintf("%s/places=%d/n=1e6", set.name, places), func(b *testing.B) {
				start := cpuTime()
				for b.Loop() {
					r := NewReader(bytes.NewReader(text.Bytes()), ReadOptions{})
					for {
						if _, err := r.Next(); err == io.EOF {
							break
						} else if err != nil {
							b.Fatal(err)
						}
					}
				}
				rate(b, positions(set.features), text.Len(), start)
			})
		}
	}
}
