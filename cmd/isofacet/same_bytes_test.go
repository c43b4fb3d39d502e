package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

// A survey is a set of readings on which every run has to agree.
type survey struct {
	name    string
	points  []orb.Point
	z       []float64
	options []string
}

// cell returns a round size that cuts the longer side of the survey into 60 to 150.
func (s *survey) cell() string {
	b := orb.MultiPoint(s.points).Bound()
	side := max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1])
	for e := -6; ; e++ {
		for _, digit := range []string{"1", "2", "5"} {
			text := digit + "e" + strconv.Itoa(e)
			if v, err := strconv.ParseFloat(text, 64); err == nil && side/v <= 150 {
				return text
			}
		}
	}
}

// surveys are ten sets of up to 2e5 readings.
func surveys() []survey {
	smooth := func(name string, pts []orb.Point) survey {
		return survey{name, pts, pointsets.Heights(pts), nil}
	}
	// Shots rounded to the metre fall onto one another, and do not agree.
	rounded := pointsets.Survey(200_000, 9)
	for i := range rounded {
		rounded[i] = orb.Point{float64(int(rounded[i][0])), float64(int(rounded[i][1]))}
	}
	r := rand.New(rand.NewPCG(9, 9))
	unlike := pointsets.Heights(rounded)
	for i := range unlike {
		unlike[i] += float64(r.IntN(1000)) / 1000
	}
	signs := pointsets.Kuzmin(20_000, 8)
	return []survey{
		smooth("uniform", pointsets.Uniform(20_000, 1)),
		smooth("clustered", pointsets.Clustered(20_000, 2)),
		smooth("scan lines", pointsets.ScanLines(30_000, 3)),
		smooth("national coordinates, millimetres", pointsets.Survey(50_000, 4)),
		smooth("unit lattice", pointsets.UnitLattice(30_000, 5)),
		smooth("lattice of a tenth at large coordinates", pointsets.Lattice01(30_000, 6)),
		smooth("circles", pointsets.Circle(10_000, 7)),
		smooth("both signs, dense in the middle", signs),
		{"conflicting repeats under mean", rounded, unlike, []string{"--same-spot", "mean"}},
		{"chains of near repeats under highest", pointsets.Survey(20_000, 10), unlike[:20_000],
			[]string{"--same-spot", "highest", "--same-spot-within", "0.4"}},
	}
}

// write writes the readings in an order that the seed decides, 0 for their own.
func (s *survey) write(t *testing.T, name string, seed uint64) {
	t.Helper()
	order := make([]int, len(s.points))
	for i := range order {
		order[i] = i
	}
	if seed > 0 {
		r := rand.New(rand.NewPCG(seed, seed))
		r.Shuffle(len(order), func(i, j int) { order[i], order[j] = order[j], order[i] })
	}
	b := []byte("id,x,y,z\n")
	for _, i := range order {
		b = fmt.Appendf(b, "P%d,", i)
		for k, v := range []float64{s.points[i][0], s.points[i][1], s.z[i]} {
			b = strconv.AppendFloat(b, v, 'f', -1, 64)
			b = append(b, ",,\n"[k])
		}
	}
	if err := os.WriteFile(name, b, 0o666); err != nil {
		t.Fatal(err)
	}
}

// writePlaces writes places to ask about: readings, middles between two, and others.
func (s *survey) writePlaces(t *testing.T, name string) {
	t.Helper()
	b := []byte("x,y\n")
	for i := range 1000 {
		p, q := s.points[i*7%len(s.points)], s.points[i*13%len(s.points)]
		x, y := p[0], p[1]
		if i%3 > 0 {
			x, y = (p[0]+q[0])/2, (p[1]+q[1])/2
		}
		b = strconv.AppendFloat(b, x, 'f', -1, 64)
		b = append(b, ',')
		b = strconv.AppendFloat(b, y, 'f', -1, 64)
		b = append(b, '\n')
	}
	if err := os.WriteFile(name, b, 0o666); err != nil {
		t.Fatal(err)
	}
}

// builds returns the program built for two levels of processor, where there are
// two: the second may fuse and reorder what the first does not.
func builds(t *testing.T) []string {
	t.Helper()
	levels := []string{""}
	if runtime.GOARCH == "amd64" {
		levels = []string{"v1", "v3"}
	}
	dir := t.TempDir()
	var list []string
	for _, level := range levels {
		name := filepath.Join(dir, "isofacet-"+level)
		build := exec.Command("go", "build", "-o", name, ".")
		build.Env = os.Environ()
		if level != "" {
			build.Env = append(build.Env, "GOAMD64="+level)
		}
		if out, err := build.CombinedOutput(); err != nil {
			t.Fatalf("go build: %v\n%s", err, out)
		}
		if out, err := exec.Command(name, "version").CombinedOutput(); err != nil {
			t.Logf("this processor does not run GOAMD64=%s: %s", level, out)
			continue
		}
		list = append(list, name)
	}
	return list
}

// A way is one way to run the program over a survey.
type way struct {
	shuffle uint64
	threads int
	build   int // number of the build, modulo how many there are
}

// TestSameBytes is promise P2 through the program: whatever the order of the
// readings, the number of threads and the processor built for, grid, query and
// inspect write the same bytes, with all decimals and with automatic ones.
func TestSameBytes(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program twice and runs it some 240 times; left out of short runs")
	}
	programs := builds(t)
	ways := []way{{0, 1, 0}, {1, 2, 1}, {2, 3, 0}, {3, 8, 1}}
	for _, s := range surveys() {
		t.Run(s.name, func(t *testing.T) {
			t.Parallel()
			dir := t.TempDir()
			s.writePlaces(t, filepath.Join(dir, "places.csv"))
			var want map[string][]byte
			for _, w := range ways {
				s.write(t, filepath.Join(dir, "shots.csv"), w.shuffle)
				got := s.products(t, programs[w.build%len(programs)], dir, w.threads)
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
		})
	}
}

// products runs the commands and returns what they write.
func (s *survey) products(t *testing.T, program, dir string, threads int) map[string][]byte {
	t.Helper()
	list := map[string][]byte{}
	for _, decimals := range []string{"full", "auto"} {
		for name, args := range map[string][]string{
			"grid":    {"grid", "--cell", s.cell(), "--out", "-", "--out", "slope=slope.csv"},
			"query":   {"query", "--at", "places.csv", "--explain"},
			"inspect": {"inspect"},
		} {
			args = append(args, "shots.csv", "--quiet", "--decimals", decimals, "--threads", strconv.Itoa(threads))
			cmd := exec.Command(program, append(args, s.options...)...)
			var words bytes.Buffer
			cmd.Dir, cmd.Stderr = dir, &words
			out, err := cmd.Output()
			if err != nil {
				t.Fatalf("%s: %v\n%s", name, err, &words)
			}
			if len(out) == 0 {
				t.Errorf("%s writes nothing", name)
			}
			list[name+" "+decimals] = out
		}
		slope, err := os.ReadFile(filepath.Join(dir, "slope.csv"))
		if err != nil {
			t.Fatal(err)
		}
		list["slope "+decimals] = slope
	}
	return list
}

// firstDifference shows the first lines that differ.
func firstDifference(a, b []byte) string {
	la, lb := bytes.Split(a, []byte("\n")), bytes.Split(b, []byte("\n"))
	for i := range min(len(la), len(lb)) {
		if !bytes.Equal(la[i], lb[i]) {
			return fmt.Sprintf("line %d is %.100q and %.100q", i+1, la[i], lb[i])
		}
	}
	return fmt.Sprintf("%d and %d lines", len(la), len(lb))
}
