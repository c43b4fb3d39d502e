package main

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/gridraw"
	"isofacet/io/outfile"
	"isofacet/io/readings"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// BenchmarkGrid is "isofacet grid" over a file of readings to a raw raster of 2000
// x 2000 nodes, and beside it the stages that it is made of, called one by one.
// Ratios of the two are promised (1.25), so both run in one process; the floor is
// reading the bytes of the file.
func BenchmarkGrid(b *testing.B) {
	for _, n := range pointsets.Sizes(os.Getenv("ISOFACET_HUGE") != "") {
		dir := b.TempDir()
		name := filepath.Join(dir, "shots.csv")
		side := writeShots(b, name, n)
		cell := fmt.Sprint(side / 2000)
		size := "survey/" + pointsets.SizeName(n)
		b.Run("program/"+size, func(b *testing.B) {
			for b.Loop() {
				var words bytes.Buffer
				code := run([]string{"grid", name, "--cell", cell, "--extent", extent(side), "--out", filepath.Join(dir, "out.raw"), "--quiet"},
					streams{strings.NewReader(""), io.Discard, &words})
				if code != 0 {
					b.Fatalf("exit status %d: %s", code, &words)
				}
			}
			rate(b, n)
		})
		b.Run("stages/"+size, func(b *testing.B) {
			var took stages
			for b.Loop() {
				took.run(b, name, decimal.MustParse(cell), side, filepath.Join(dir, "out.raw"))
			}
			rate(b, n)
			for i, stage := range []string{"read", "triangulate", "fill", "write"} {
				b.ReportMetric(took[i].Seconds()/float64(b.N), stage+"-s")
			}
		})
		b.Run("floor=read the bytes/"+size, func(b *testing.B) {
			for b.Loop() {
				if _, err := os.ReadFile(name); err != nil {
					b.Fatal(err)
				}
			}
			rate(b, n)
		})
	}
}

func rate(b *testing.B, n int) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mreadings/s")
}

// extent is the square of the survey set.
func extent(side int) string {
	return fmt.Sprintf("500000,4600000,%d,%d", 500000+side, 4600000+side)
}

// writeShots writes n readings id,x,y,z,code and returns the side of their square
// in metres, on a multiple of 2000 cells.
func writeShots(b *testing.B, name string, n int) int {
	b.Helper()
	pts := pointsets.Survey(n, 1)
	z := pointsets.Heights(pts)
	var text bytes.Buffer
	text.WriteString("id,x,y,z,code\n")
	high := 0.0
	for i, p := range pts {
		fmt.Fprintf(&text, "%d,%.3f,%.3f,%.3f,GR\n", i+1, p[0], p[1], z[i])
		high = max(high, p[0]-500000, p[1]-4600000)
	}
	if err := os.WriteFile(name, text.Bytes(), 0o666); err != nil {
		b.Fatal(err)
	}
	return (int(high)/2000 + 1) * 2000
}

// stages adds up how long each stage took.
type stages [4]time.Duration

func (s *stages) run(b *testing.B, name string, cell decimal.Number, side int, out string) {
	ctx := context.Background()
	began := time.Now()
	step := func(i int, err error) {
		if err != nil {
			b.Fatal(err)
		}
		s[i] += time.Since(began)
		began = time.Now()
	}
	set, err := readings.Read(ctx, []readings.Source{{Name: name, Open: func() (io.ReadCloser, error) { return os.Open(name) }}}, readings.Options{})
	step(0, err)
	m, err := triangulate.Delaunay(ctx, set.Points, triangulate.Options{})
	if err != nil {
		b.Fatal(err)
	}
	surface, err := interp.FromInputs(m, set.Z)
	step(1, err)
	x, y := decimal.FromInt(500000), decimal.FromInt(4600000)
	far := func(from decimal.Number) decimal.Number {
		to, err := from.Add(decimal.FromInt(int64(side)))
		if err != nil {
			b.Fatal(err)
		}
		return to
	}
	spec, err := grid.SpecFromExtent(grid.Extent{XMin: x, YMin: y, XMax: far(x), YMax: far(y)}, cell, cell, grid.Centres)
	if err != nil {
		b.Fatal(err)
	}
	raster, err := grid.Fill(ctx, spec, surface, grid.Options{})
	step(2, err)
	var files outfile.Set
	defer files.Abort()
	_, err = gridraw.Write(&files, out, outfile.Options{}, raster, gridraw.Options{})
	if err != nil {
		b.Fatal(err)
	}
	step(3, files.Commit())
}
