package main

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

// TestSameWays is promise P2 through profile, flow and query --spots, as TestSameBytes
// is through others: whatever the order of the readings, the number of threads and the
// processor built for, the same bytes, pictures among them.
func TestSameWays(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program twice and runs it some 70 times; left out of short runs")
	}
	programs := builds(t)
	for _, s := range []survey{
		{"clustered", pointsets.Clustered(3000, 2), nil, nil},
		{"national coordinates, millimetres", pointsets.Survey(3000, 4), nil, nil},
		{"unit lattice", pointsets.UnitLattice(2500, 5), nil, nil},
	} {
		t.Run(s.name, func(t *testing.T) {
			s.z = pointsets.Heights(s.points)
			dir := t.TempDir()
			b := orb.MultiPoint(s.points).Bound()
			at := func(u, v float64) string {
				return strconv.FormatFloat(b.Min[0]+u*(b.Max[0]-b.Min[0]), 'f', -1, 64) + "," + strconv.FormatFloat(b.Min[1]+v*(b.Max[1]-b.Min[1]), 'f', -1, 64)
			}
			along := at(-.1, .2) + " " + at(.4, .5) + " " + at(.55, .1) + " " + at(1, 1)
			starts := "x,y\n"
			for i := range 40 {
				starts += at(float64(i*7%40)/40+.01, float64(i*11%40)/40+.01) + "\n"
			}
			if err := os.WriteFile(filepath.Join(dir, "starts.csv"), []byte(starts), 0o666); err != nil {
				t.Fatal(err)
			}
			runs := [][]string{
				{"profile", "--along", along, "--sections", s.cell(), "--left", s.cell(), "--right", "0.5", "--out", "profile=p.csv", "--out", "sections=s.csv", "--out", "profile=p.svg"},
				{"flow", "--sigma", "0.01", "--starts", "starts.csv", "--arrows", s.cell(), "--out", "summary=f.json", "--out", "lines=l.csv", "--out", "triangles=t.csv", "--out", "arrows=a.csv", "--out", "divides=d.geojson", "--out", "rose=r.svg", "--out", "map=m.svg"},
				{"query", "--spots", "--out", "q.csv"},
			}
			var want map[string][]byte
			for _, w := range []way{{0, 1, 0}, {1, 2, 1}, {2, 8, 0}} {
				s.write(t, filepath.Join(dir, "shots.csv"), w.shuffle)
				got := map[string][]byte{}
				for _, decimals := range []string{"full", "auto"} {
					for _, args := range runs {
						args = append(append([]string{}, args...), "shots.csv", "--quiet", "--decimals", decimals, "--threads", strconv.Itoa(w.threads))
						cmd := exec.Command(programs[w.build%len(programs)], args...)
						cmd.Dir = dir
						if out, err := cmd.CombinedOutput(); err != nil {
							t.Fatalf("%v: %v\n%s", args, err, out)
						}
					}
					for _, name := range []string{"p.csv", "s.csv", "p.svg", "f.json", "l.csv", "t.csv", "a.csv", "d.geojson", "r.svg", "m.svg", "q.csv"} {
						text, err := os.ReadFile(filepath.Join(dir, name))
						if err != nil {
							t.Fatal(err)
						}
						got[fmt.Sprint(name, " ", decimals)] = text
					}
				}
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
		})
	}
}
