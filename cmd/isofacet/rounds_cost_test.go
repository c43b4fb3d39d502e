//go:build unix

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
	"testing"
	"time"

	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/progress"
	"isofacet/cmd/internal/report"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// Forty rounds at the same 10^4 places cost at most 1.5 times one triangulation and
// forty fills, in processor time and on one thread: what stands between the readings
// in memory and the rasters in memory. It means something on a quiet machine.
func TestRoundsShareTheirMesh(t *testing.T) {
	const rounds, n = 40, 10_000
	pts := pointsets.Survey(n, 5)
	var text bytes.Buffer
	text.WriteString("id,x,y,z,round\n")
	for k := range rounds {
		for i, p := range pts {
			fmt.Fprintf(&text, "%d,%.3f,%.3f,%.3f,%02d\n", i, p[0], p[1], math.Sin(float64(i))+float64(k), k)
		}
	}
	path := filepath.Join(t.TempDir(), "heads.csv")
	if err := os.WriteFile(path, text.Bytes(), 0o666); err != nil {
		t.Fatal(err)
	}
	ctx := context.Background()

	// What a step does with a round that is read already.
	p := &program{streams: streams{err: io.Discard}, running: running{display: progress.New(io.Discard, false), report: report.New(io.Discard, report.Text, true)}}
	w := newSharedWork()
	p.step = &step{shared: w, workers: 1, budget: memory.Budget{Bytes: 4 << 30}}
	p.budget = p.step.budget
	var r reading
	r.readingOptions()
	in, err := p.input(path)
	if err != nil {
		t.Fatal(err)
	}
	list := []*input{in}
	parts, err := w.rounds(ctx, p, &r, list)
	if err != nil || len(parts) != rounds {
		t.Fatalf("%d rounds, %v", len(parts), err)
	}
	places := parts[0].Set.Points
	mesh, err := triangulate.Delaunay(ctx, places, triangulate.Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	surface, err := interp.FromInputs(mesh, parts[0].Set.Z)
	if err != nil {
		t.Fatal(err)
	}
	l := &loaded{set: parts[0].Set}
	l.measure()
	// Ten nodes a reading, as a raster at a third of the spacing has.
	cell, err := decimal.Parse(fmt.Sprintf("%.3g", math.Sqrt(surface.Area()/(10*n))))
	if err != nil {
		t.Fatal(err)
	}
	spec, err := grid.SpecFor(l.bound, cell, cell, grid.Centres)
	if err != nil {
		t.Fatal(err)
	}
	fill := func(s *interp.Surface) *grid.Grid {
		g, err := grid.Fill(ctx, spec, s, grid.Options{Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		return g
	}

	measure := func(work func()) time.Duration {
		best := time.Duration(math.MaxInt64)
		for range 3 {
			runtime.GC()
			before := cpuTime()
			work()
			best = min(best, cpuTime()-before)
		}
		return best
	}
	floor := measure(func() {
		mesh, err := triangulate.Delaunay(ctx, places, triangulate.Options{Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		s, err := interp.FromInputs(mesh, parts[0].Set.Z)
		if err != nil {
			t.Fatal(err)
		}
		for range rounds {
			fill(s)
		}
	})
	var last *grid.Grid
	shared := measure(func() {
		w.meshes, w.surfaces = nil, map[string]*sharedSurface{}
		for _, part := range parts {
			if err := r.round.Set(part.Name); err != nil {
				t.Fatal(err)
			}
			p.step.options = "\x01round\x00" + part.Name
			w.left[inputNames(list)+p.step.options] = 1
			l, err := w.surface(ctx, p, &r, list)
			if err != nil {
				t.Fatal(err)
			}
			last = fill(l.surface)
		}
	})
	if len(w.meshes) != 1 {
		t.Errorf("%d meshes, want one", len(w.meshes))
	}
	// The last round is what it would be by itself.
	own, err := interp.FromInputs(mesh, parts[rounds-1].Set.Z)
	if err != nil {
		t.Fatal(err)
	}
	for i, v := range fill(own).Values {
		if math.Float64bits(v) != math.Float64bits(last.Values[i]) {
			t.Fatalf("node %d is %v, want %v", i, last.Values[i], v)
		}
	}
	ratio := shared.Seconds() / floor.Seconds()
	t.Logf("one triangulation and %d fills of %d nodes: %v; %d rounds: %v, %.2f times", rounds, spec.NumNodes(), floor, rounds, shared, ratio)
	if os.Getenv("ISOFACET_MEASURE") != "" && ratio > 1.5 {
		t.Errorf("%.2f times one triangulation and the fills, want at most 1.5", ratio)
	}
}
