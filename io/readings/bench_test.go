package readings

import (
	"bytes"
	"cmp"
	"context"
	"fmt"
	"io"
	"math/rand/v2"
	"slices"
	"strconv"
	"testing"

	"github.com/paulmach/orb"
)

// benchText makes n lines id,x,y,z,code of a kind.
func benchText(kind string, n int) []byte {
	r := rand.New(rand.NewPCG(1, uint64(n)))
	codes := []string{"GRD", "EP", "TOE", "TOP", "BLD"}
	var b bytes.Buffer
	b.WriteString("id,easting,northing,elevation,code\n")
	for i := range n {
		x, y, z := r.Float64()*1000, r.Float64()*1000, r.Float64()*50
		code := codes[r.IntN(len(codes))]
		switch kind {
		case "survey": // millimetres, national coordinates
			fmt.Fprintf(&b, "P%d,%.3f,%.3f,%.3f,%s\n", i, 500000+x, 4600000+y, z+100, code)
		case "quoted":
			fmt.Fprintf(&b, "\"P%d\",%.3f,%.3f,%.3f,\"%s, shot\"\n", i, 500000+x, 4600000+y, z+100, code)
		case "full": // all digits of the double
			fmt.Fprintf(&b, "P%d,%s,%s,%s,%s\n", i, strconv.FormatFloat(x, 'f', -1, 64), strconv.FormatFloat(y, 'f', -1, 64),
				strconv.FormatFloat(z, 'f', -1, 64), code)
		case "exponent":
			fmt.Fprintf(&b, "P%d,%.8e,%.8e,%.8e,%s\n", i, x, y, z, code)
		}
	}
	return b.Bytes()
}

func benchSizes() []int {
	if testing.Short() {
		return []int{1e5}
	}
	return []int{1e5, 1e6}
}

// BenchmarkScan parses; the rate is in million lines a second.
func BenchmarkScan(b *testing.B) {
	for _, kind := range []string{"survey", "full", "quoted", "exponent"} {
		for _, n := range benchSizes() {
			data := benchText(kind, n)
			for _, workers := range []int{1, 2} {
				b.Run(fmt.Sprintf("%s/n=%.0e/workers=%d", kind, float64(n), workers), func(b *testing.B) {
					b.SetBytes(int64(len(data)))
					for b.Loop() {
						if _, err := Scan(context.Background(), []Source{FromBytes("a.csv", data)}, Options{Workers: workers},
							func(*Block) error { return nil }); err != nil {
							b.Fatal(err)
						}
					}
					report(b, n)
				})
			}
		}
	}
}

// BenchmarkRead parses, puts the columns together and looks for repeated places.
func BenchmarkRead(b *testing.B) {
	for _, n := range benchSizes() {
		data := benchText("survey", n)
		for _, workers := range []int{1, 2} {
			b.Run(fmt.Sprintf("survey/n=%.0e/workers=%d", float64(n), workers), func(b *testing.B) {
				b.SetBytes(int64(len(data)))
				for b.Loop() {
					s, err := Read(context.Background(), []Source{FromBytes("a.csv", data)}, Options{Workers: workers, Spots: Spots{Rule: SpotMean}})
					if err != nil || s.Counts.Read != n {
						b.Fatal(err)
					}
				}
				report(b, n)
			})
		}
	}
}

// BenchmarkFloor only reads the bytes and finds the line ends: no parser of lines
// can be faster.
func BenchmarkFloor(b *testing.B) {
	for _, n := range benchSizes() {
		data := benchText("survey", n)
		b.Run(fmt.Sprintf("survey/n=%.0e", float64(n)), func(b *testing.B) {
			b.SetBytes(int64(len(data)))
			buf := make([]byte, chunkSize)
			for b.Loop() {
				found := 0
				for r := bytes.NewReader(data); ; {
					k, err := io.ReadFull(r, buf)
					for p := buf[:k]; ; found++ {
						i := bytes.IndexByte(p, '\n')
						if i < 0 {
							break
						}
						p = p[i+1:]
					}
					if err != nil {
						break
					}
				}
				if found != n+1 {
					b.Fatal(found)
				}
			}
			report(b, n)
		})
	}
}

// BenchmarkSort sorts as many places: the measure that parsing is held against.
func BenchmarkSort(b *testing.B) {
	for _, n := range benchSizes() {
		b.Run(fmt.Sprintf("uniform/n=%.0e", float64(n)), func(b *testing.B) {
			r := rand.New(rand.NewPCG(1, 2))
			pts := make([][2]float64, n)
			for i := range pts {
				pts[i] = [2]float64{r.Float64(), r.Float64()}
			}
			work := make([][2]float64, n)
			for b.Loop() {
				copy(work, pts)
				slices.SortFunc(work, func(p, q [2]float64) int {
					if c := cmp.Compare(p[0], q[0]); c != 0 {
						return c
					}
					return cmp.Compare(p[1], q[1])
				})
			}
			report(b, n)
		})
	}
}

func report(b *testing.B, n int) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mlines/s")
}

// BenchmarkSpots looks for repeated places: equal ones, and chains of near ones.
func BenchmarkSpots(b *testing.B) {
	for _, n := range benchSizes() {
		r := rand.New(rand.NewPCG(1, 2))
		pts := make([]orb.Point, n)
		for i := range pts {
			pts[i] = orb.Point{500000 + float64(r.IntN(1e6))/1000, 4600000 + float64(r.IntN(1e6))/1000}
		}
		b.Run(fmt.Sprintf("equal/n=%.0e", float64(n)), func(b *testing.B) {
			for b.Loop() {
				samePlaces(pts, 1)
			}
			report(b, n)
		})
		b.Run(fmt.Sprintf("within/n=%.0e", float64(n)), func(b *testing.B) {
			c := &collected{Set: &Set{Points: pts, DecimalsXY: 3}, o: &Options{Spots: Spots{Within: 0.01}, Workers: 1}}
			for b.Loop() {
				if _, err := c.chains(context.Background()); err != nil {
					b.Fatal(err)
				}
			}
			report(b, n)
		})
	}
}
