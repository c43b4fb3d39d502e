package main

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

// A scene is a survey with lines. Rings have no heights unless they are breaklines as
// well.
type scene struct {
	survey
	lines, boundary, voids []drawnLine
}

type drawnLine struct {
	name string
	at   []orb.Point
	z    []float64 // nil for none
}

// scenes are scenes in which lines cross, touch, overlap, repeat and share ends.
func scenes() []scene {
	r := rand.New(rand.NewPCG(4, 4))
	ring := func(name string, b orb.Bound, corners int, size float64) drawnLine {
		c := b.Center()
		l := drawnLine{name: name}
		for k := range corners {
			s, co := math.Sincos(2 * math.Pi * float64(k) / float64(corners))
			reach := size * (0.7 + 0.3*r.Float64()) / 2
			// Rounded, so that the text has few digits whatever the library's sine.
			l.at = append(l.at, orb.Point{rounded(c[0] + reach*co*(b.Max[0]-b.Min[0])), rounded(c[1] + reach*s*(b.Max[1]-b.Min[1]))})
		}
		l.at = append(l.at, l.at[0])
		return l
	}
	var list []scene
	for _, c := range []struct {
		name   string
		points []orb.Point
	}{
		{"national coordinates, millimetres", pointsets.Survey(4000, 4)},
		{"unit lattice", pointsets.UnitLattice(2500, 5)},
	} {
		s := survey{name: c.name, points: c.points, z: pointsets.Heights(c.points)}
		b := orb.MultiPoint(s.points).Bound()
		d := scene{survey: s}
		// Lines from shot to shot, in any direction: most cross each other.
		for k := range 25 {
			l := drawnLine{name: fmt.Sprintf("L%d", k)}
			for range 3 {
				i := r.IntN(len(s.points))
				l.at, l.z = append(l.at, s.points[i]), append(l.z, s.z[i])
			}
			d.lines = append(d.lines, l)
		}
		// Parts of them again, and lines that begin on them.
		for k := range 6 {
			of := d.lines[k]
			d.lines = append(d.lines, drawnLine{fmt.Sprintf("again %d", k), slices.Clone(of.at[:2]), slices.Clone(of.z[:2])})
			i := r.IntN(len(s.points))
			d.lines = append(d.lines, drawnLine{fmt.Sprintf("from %d", k), []orb.Point{of.at[1], s.points[i]}, []float64{of.z[1], s.z[i]}})
		}
		d.boundary = []drawnLine{ring("site", b, 23, 0.9)}
		pond := ring("pond", b, 9, 0.2)
		for range pond.at {
			pond.z = append(pond.z, 3)
		}
		d.voids = []drawnLine{pond, ring("yard", b, 7, 0.3)}
		d.options = []string{"--crossing", "split", "--same-spot-spread", "1e9", "--touch-within", "0.01", "--max-edge", strconv.FormatFloat(rounded((b.Max[0]-b.Min[0])/8), 'f', -1, 64)}
		list = append(list, d)
	}
	return list
}

func rounded(v float64) float64 { return math.Round(v*1000) / 1000 }

// draw writes lines: in another order, other directions, and rings from another
// position for every seed but 0.
func (d *scene) draw(t *testing.T, name string, list []drawnLine, seed uint64) {
	t.Helper()
	list = slices.Clone(list)
	if seed > 0 {
		r := rand.New(rand.NewPCG(seed, 7))
		r.Shuffle(len(list), func(i, j int) { list[i], list[j] = list[j], list[i] })
		for i := range list {
			l := &list[i]
			l.at, l.z = slices.Clone(l.at), slices.Clone(l.z)
			if n := len(l.at) - 1; l.at[0] == l.at[n] {
				k := r.IntN(n)
				l.at = append(append(slices.Clone(l.at[k:n]), l.at[:k]...), l.at[k])
				if len(l.z) > 0 {
					l.z = append(append(slices.Clone(l.z[k:n]), l.z[:k]...), l.z[k])
				}
			}
			if r.IntN(2) == 0 {
				slices.Reverse(l.at)
				slices.Reverse(l.z)
			}
		}
	}
	b := []byte("line,x,y,z\n")
	for _, l := range list {
		for k, p := range l.at {
			b = append(b, l.name...)
			for _, v := range p {
				b = strconv.AppendFloat(append(b, ','), v, 'f', -1, 64)
			}
			b = append(b, ',')
			if len(l.z) > 0 {
				b = strconv.AppendFloat(b, l.z[k], 'f', -1, 64)
			}
			b = append(b, '\n')
		}
	}
	if err := os.WriteFile(name, b, 0o666); err != nil {
		t.Fatal(err)
	}
}

// TestSameLines is promise P2 with breaklines, boundary, voids and all that goes with
// them: readings and lines shuffled, directions reversed, any number of threads, two
// levels of processor; every command writes the same bytes.
func TestSameLines(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program twice and runs it some 40 times; left out of short runs")
	}
	programs := builds(t)
	ways := []way{{0, 1, 0}, {1, 2, 1}, {2, 3, 0}, {3, 8, 1}}
	for _, d := range scenes() {
		t.Run(d.name, func(t *testing.T) {
			t.Parallel()
			dir := t.TempDir()
			d.writePlaces(t, filepath.Join(dir, "places.csv"))
			var want map[string][]byte
			for _, w := range ways {
				d.write(t, filepath.Join(dir, "shots.csv"), w.shuffle)
				d.draw(t, filepath.Join(dir, "lines.csv"), d.lines, w.shuffle)
				d.draw(t, filepath.Join(dir, "boundary.csv"), d.boundary, w.shuffle)
				d.draw(t, filepath.Join(dir, "voids.csv"), d.voids, w.shuffle)
				got := d.everything(t, programs[w.build%len(programs)], dir, w.threads)
				if want == nil {
					want = got
					continue
				}
				for name, text := range want {
					if !bytes.Equal(got[name], text) {
						t.Errorf("order %d, %d threads, build %d: %s differs: %s", w.shuffle, w.threads, w.build, name, firstDifference(text, got[name]))
					}
				}
			}
			if len(want) != 8 {
				t.Errorf("%d products, want 8", len(want))
			}
			// The scene has what it is for.
			for _, none := range []string{`"crossings": 0,`, `"constrained_edges": 0,`, `"readings_outside": 0`, `"max_edge": null`, `"voids": null`} {
				if bytes.Contains(want["report.json"], []byte(none)) {
					t.Errorf("inspect reports %s", none)
				}
			}
		})
	}
}

// everything runs all commands and returns what they write.
func (d *scene) everything(t *testing.T, program, dir string, threads int) map[string][]byte {
	t.Helper()
	list := map[string][]byte{}
	for _, c := range []struct {
		args  []string
		files []string
	}{
		{[]string{"inspect", "--out", "report.json"}, []string{"report.json"}},
		{[]string{"grid", "--cell", d.cell(), "--out", "grid.csv", "--out", "slope=slope.csv"}, []string{"grid.csv", "slope.csv"}},
		{[]string{"query", "--at", "places.csv", "--explain", "--out", "answers.csv"}, []string{"answers.csv"}},
		{[]string{"contour", "--interval", d.interval(), "--out", "lines.geojson", "--out", "bands=bands.geojson"}, []string{"lines.geojson", "bands.geojson"}},
		{[]string{"triangles", "--out", "triangles.csv", "--out", "vertices=vertices.csv"}, []string{"triangles.csv", "vertices.csv"}},
	} {
		args := append(c.args, "shots.csv", "--breaklines", "lines.csv", "--boundary", "boundary.csv", "--voids", "voids.csv",
			"--quiet", "--decimals", "full", "--threads", strconv.Itoa(threads))
		cmd := exec.Command(program, append(args, d.options...)...)
		var words bytes.Buffer
		cmd.Dir, cmd.Stderr = dir, &words
		if err := cmd.Run(); err != nil {
			t.Fatalf("%s: %v\n%s", c.args[0], err, &words)
		}
		for _, name := range c.files {
			text, err := os.ReadFile(filepath.Join(dir, name))
			if err != nil {
				t.Fatal(err)
			}
			if len(text) < 500 {
				t.Errorf("%s has %d bytes only", name, len(text))
			}
			list[name] = text
		}
	}
	return list
}
