package contour

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// TestBandsTileTheSurfaceP6 checks bands of hard surfaces: validity of every polygon, common borders, areas, readings.
func TestBandsTileTheSurfaceP6(t *testing.T) {
	eachSample(t, func(s *interp.Surface, levels Levels) error {
		bands, report, err := Bands(context.Background(), s, levels, Options{})
		if err != nil {
			return err
		}
		return checkBands(s, levels, bands, report)
	})
}

// larger are surfaces of some thousand readings.
var larger = []struct {
	name    string
	pts     func() []orb.Point
	heights func([]orb.Point) []float64
	levels  []float64
}{
	{"uniform, smooth", func() []orb.Point { return pointsets.Uniform(1500, 11) }, smoothHeights, []float64{95.5, 97, 98, 99.5, 100, 101, 102, 103, 104.5}},
	{"uniform, noise", func() []orb.Point { return pointsets.Uniform(800, 12) }, noiseHeights, []float64{96, 98, 99.5, 100, 101, 104}},
	{"uniform, whole noise", func() []orb.Point { return pointsets.Uniform(800, 13) }, wholeHeights, []float64{95, 96, 97, 98, 99, 100, 101, 102, 103, 104, 105}},
	{"lattice, whole noise", func() []orb.Point { return pointsets.UnitLattice(900, 1) }, wholeHeights, []float64{96, 97, 97.5, 99, 100, 103}},
	{"lattice turned by 25 degrees", func() []orb.Point { return rotatedLattice(50) }, func(p []orb.Point) []float64 {
		return pointsets.Heights(p)
	}, []float64{96, 97, 98, 99, 100, 100.5, 101, 102, 103, 105, 106}},
	{"survey lines", func() []orb.Point { return pointsets.Survey(3000, 4) }, pointsets.Heights, []float64{95, 97, 99, 99.75, 100, 101, 101.001, 103}},
	{"circles", func() []orb.Point { return pointsets.Circle(2000, 5) }, wholeHeights, []float64{97, 99, 101}},
}

// wholeHeights are white noise of whole numbers, 95 to 105.
func wholeHeights(pts []orb.Point) []float64 {
	z := noiseHeights(pts)
	for i := range z {
		z[i] = math.Round(z[i])
	}
	return z
}

// TestLargerSurfaces checks lines and bands of some thousand readings, with small units of work.
func TestLargerSurfaces(t *testing.T) {
	for _, c := range larger {
		t.Run(c.name, func(t *testing.T) {
			pts := c.pts()
			s := surfaceOf(t, pts, c.heights(pts), 0)
			var levels Levels
			for _, z := range c.levels {
				levels = append(levels, levelAt(z))
			}
			opt := Options{Workers: 3, unitPieces: 100}
			lines, r, err := Lines(context.Background(), s, levels, opt)
			if err != nil {
				t.Fatal(err)
			}
			if err := checkLines(s, levels, lines, r); err != nil {
				t.Fatal(err)
			}
			bands, report, err := Bands(context.Background(), s, levels, opt)
			if err != nil {
				t.Fatal(err)
			}
			if err := checkBands(s, levels, bands, report); err != nil {
				t.Fatal(err)
			}
			t.Logf("%d lines, %d polygons", len(lines), len(bands))
		})
	}
}

// TestSeveralRims draws surfaces with voids, voids that touch each other and the boundary in points, and surfaces from
// which long triangles were trimmed: lines end at every rim, and bands stop there.
func TestSeveralRims(t *testing.T) {
	check := func(t *testing.T, s *interp.Surface, levels Levels) {
		t.Helper()
		if s.Mesh().NumTriangles() == 0 {
			t.Fatal("nothing left of the surface")
		}
		lines, r, err := Lines(context.Background(), s, levels, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkLines(s, levels, lines, r); err != nil {
			t.Fatal(err)
		}
		bands, report, err := Bands(context.Background(), s, levels, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkBands(s, levels, bands, report); err != nil {
			t.Fatal(err)
		}
		rims := 0
		for _, p := range bands {
			rims += len(p.Polygon) - 1
		}
		t.Logf("%d triangles, %d lines, %d polygons with %d holes", s.Mesh().NumTriangles(), len(lines), len(bands), rims)
	}
	levels := Levels{levelAt(96.5), levelAt(98), levelAt(99), levelAt(100), levelAt(100.25), levelAt(102), levelAt(104)}

	pts := pointsets.UnitLattice(400, 2)
	s := surfaceOf(t, pts, wholeHeights(pts), 0)
	for name, rings := range map[string][2][]orb.Ring{
		"a void": {nil, {{{5.5, 5.5}, {12, 6}, {9.3, 13.1}, {5.5, 5.5}}}},
		"voids that touch": {
			{{{1, 1}, {18, 1}, {18, 18}, {1, 18}, {1, 1}}},
			{
				{{3, 3}, {7, 3}, {7, 7}, {3, 7}, {3, 3}},             // along edges
				{{7, 7}, {12, 7}, {12, 12}, {7, 12}, {7, 7}},         // touches the first at a vertex
				{{1, 10}, {4, 9.5}, {4, 10.5}, {1, 10}},              // touches the boundary
				{{14.5, 14.5}, {16, 14}, {15.2, 16.9}, {14.5, 14.5}}, // through triangles
			},
		},
	} {
		t.Run(name, func(t *testing.T) {
			region, err := triangulate.NewRegion(rings[0], rings[1])
			if err != nil {
				t.Fatal(err)
			}
			clip, err := s.Clip(context.Background(), region, triangulate.Options{})
			if err != nil {
				t.Fatal(err)
			}
			check(t, clip.Surface, levels)
		})
	}
	for _, longest := range []float64{0.06, 0.08, 0.12} {
		t.Run("trimmed", func(t *testing.T) {
			pts := pointsets.Uniform(600, 8)
			m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
			if err != nil {
				t.Fatal(err)
			}
			s, err := interp.FromInputs(m.Trim(longest), wholeHeights(pts))
			if err != nil {
				t.Fatal(err)
			}
			check(t, s, levels)
		})
	}
}

// TestBandMutationsAreNoticed leaves out, or spoils, steps on the way to bands: on some hard surface the checks must
// fail.
func TestBandMutationsAreNoticed(t *testing.T) {
	const (
		none = iota
		noSplitting
		wrongCount
		turnedLine
		lostSide
		movedLine
		nothingListed
		tooSure
	)
	// Without -long: a fault need not be noticed more often, and as many samples of each kind show that it is not noticed
	// where there is none (TestBandsTileTheSurfaceP6 looks at them all).
	const noticedEnough, soundEnough = 5, 25
	spoilt := func(s *interp.Surface, levels Levels, fault int) error {
		src := newTriangles(s)
		n, err := netOf(context.Background(), src, levels, Options{Workers: 1})
		if err != nil {
			return err
		}
		switch p := &n.paths[0]; {
		case fault == turnedLine:
			p.left, p.right = p.right, p.left
		case fault == lostSide:
			n.paths = n.paths[:len(n.paths)-1]
		case fault == movedLine && p.last-p.first > 1:
			// A point in the middle, aside: what comes of it tiles, but at the outline.
			k := (p.first + p.last) / 2
			at, to := n.points[k], n.points[k+1]
			n.points[k] = orb.Point{at[0] + (to[1]-at[1])/1024, at[1] - (to[0]-at[0])/1024}
		}
		tree := newBoxes(n, nil)
		if fault != noSplitting {
			if tree, _, err = n.splitAll(context.Background(), 1, nil); err != nil {
				return err
			}
		}
		chains, nodes := n.chains()
		if fault == wrongCount {
			chains[0].jump = chains[0].jump.plus(chains[0].jump, 1)
		}
		f, err := facesBetween(n, tree, chains, nodes)
		if err != nil {
			return err
		}
		polygons, err := f.polygons()
		if err != nil {
			return err
		}
		bands, report := bandsFrom(polygons, levels), f.report(tree, src, levels.values(), lookNear(n, src, levels.values(), 1), 1)
		switch fault {
		case nothingListed:
			report.TooNarrow = nil
		case tooSure:
			report.Off /= 16
		}
		return checkBands(s, levels, bands, report)
	}
	for fault, name := range map[int]string{none: "none", noSplitting: "segments not split", wrongCount: "bands counted wrong", turnedLine: "a line turned round", lostSide: "a side of the outline lost",
		movedLine: "a line moved", nothingListed: "no reading listed", tooSure: "borders said to be nearer"} {
		t.Run(name, func(t *testing.T) {
			noticed := 0
			for _, kind := range []string{"wall", "needles", "near", "lattice", "crowd"} {
				looked := 0
				eachOf(t, kind, func(s *interp.Surface, levels Levels) error {
					enough := noticed >= noticedEnough || fault == none && looked >= soundEnough
					if s.Mesh().NumTriangles() == 0 || enough && !*long {
						return nil
					}
					looked++
					err := spoilt(s, levels, fault)
					if err != nil {
						noticed++
						if fault == none {
							return err
						}
					}
					return nil
				})
			}
			if fault != none && noticed == 0 {
				t.Error("never noticed")
			}
			t.Logf("noticed %d times", noticed)
		})
	}
}

// FuzzContour makes a small surface of any bytes, two a reading and one for its value, at places few steps between doubles
// apart if the first byte says so, and checks its lines and bands.
func FuzzContour(f *testing.F) {
	f.Add([]byte("0abcdefghijkl"))
	f.Add([]byte{1, 0, 0, 0, 4, 0, 4, 0, 4, 4, 4, 4, 0, 2, 2, 8})
	f.Add([]byte{2, 0, 0, 0, 1, 1, 4, 2, 2, 0, 3, 3, 4, 0, 1, 2, 9, 0, 3})
	f.Fuzz(func(t *testing.T, data []byte) {
		if len(data) < 10 || len(data) > 100 {
			return
		}
		kind := data[0]
		var in sample
		for d := data[1:]; len(d) >= 3; d = d[3:] {
			x, y, z := float64(d[0]), float64(d[1]), float64(int8(d[2]))
			switch kind % 4 {
			case 1:
				x, y = 430000+x*0x1p-34, 5600000+y*0x1p-30
			case 2:
				x, y = 430000+x/10, 5600000+x/3+y*0x1p-30
			case 3:
				x, y, z = x/7, y/3, z/4+math.Copysign(1e-15, z)
			}
			in.pts, in.z = append(in.pts, orb.Point{x, y}), append(in.z, z)
		}
		in = in.oneValue()
		s := surfaceOf(t, in.pts, in.z, 1)
		levels := Levels{levelAt(-20), levelAt(-1.5), levelAt(0), levelAt(1), levelAt(2), levelAt(2.5), levelAt(3), levelAt(50)}
		lines, r, err := Lines(context.Background(), s, levels, Options{Workers: 2, unitPieces: 3})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkLines(s, levels, lines, r); err != nil {
			t.Fatal(err)
		}
		bands, report, err := Bands(context.Background(), s, levels, Options{Workers: 2})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkBands(s, levels, bands, report); err != nil {
			t.Fatal(err)
		}
	})
}
