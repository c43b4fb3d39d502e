package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// Made-up output: two runs each, a rate, a benchmark without a size, noise.
const output = `# machine: a machine, 2 processors
# go: go1.26.8 linux/amd64
# commit: abc1234
# runs: 2
goos: linux
pkg: isofacet/triangulate
cpu: a machine
BenchmarkDelaunay/uniform/n=1e6-2         	       4	 270000000 ns/op	 3700000 points/s
BenchmarkDelaunay/uniform/n=1e6-2         	       4	 280000000 ns/op	 3500000 points/s
BenchmarkDelaunay/clustered/n=1e6-2       	       4	 310000000 ns/op	 3200000 points/s
BenchmarkDelaunay/clustered/n=1e6-2       	       4	 310000000 ns/op	 3200000 points/s
BenchmarkDelaunay/survey/n=1e6-2       	       4	 290000000 ns/op	 3450000 points/s
BenchmarkDelaunay/survey/n=1e6-2       	       4	 290000000 ns/op	 3450000 points/s
BenchmarkSort/uniform/n=1e6-2       	       4	 230000000 ns/op
BenchmarkDelaunay/uniform/n=1e5-2         	      40	  25000000 ns/op	 4000000 points/s
PASS
pkg: isofacet/triangulate/exact
BenchmarkOrient-2   	100000000	        11.00 ns/op	       0 B/op
BenchmarkOrient-2   	100000000	        11.00 ns/op	       0 B/op
ok  	isofacet/triangulate/exact	2.1s
`

func TestTables(t *testing.T) {
	r, err := parse(strings.NewReader(output))
	if err != nil {
		t.Fatal(err)
	}
	files := []*raw{r}
	wantBrief := `| n = 1e6 | uniform | clustered | survey |
|---|--:|--:|--:|
| Delaunay (` + "`triangulate`" + `) | 275 ms | 310 ms | 290 ms |

Medians; half of the range of the runs is at most 2 % of the median. Measured on a machine, 2 processors, go1.26.8 linux/amd64, commit abc1234, runs 2.
`
	if got := brief(files, "n=1e6"); got != wantBrief {
		t.Errorf("brief:\n%s\nwant\n%s", got, wantBrief)
	}
	wantFull := `**triangulate** (a machine, 2 processors, go1.26.8 linux/amd64, commit abc1234, runs 2)

| operation | on | n = 1e6 | n = 1e5 |
|---|---|--:|--:|
| Delaunay | uniform | 275 ms ±2 %, 3.60 M points/s | 25.0 ms ±0 %, 4.00 M points/s |
| Delaunay | clustered | 310 ms ±0 %, 3.20 M points/s |  |
| Delaunay | survey | 290 ms ±0 %, 3.45 M points/s |  |
| Sort | uniform | 230 ms ±0 % |  |

**triangulate/exact** (a machine, 2 processors, go1.26.8 linux/amd64, commit abc1234, runs 2)

| operation | on | time |
|---|---|--:|
| Orient |  | 11.0 ns ±0 % |

`
	if got := full(files); got != wantFull {
		t.Errorf("full:\n%s\nwant\n%s", got, wantFull)
	}
}

func TestParseRefuses(t *testing.T) {
	for _, text := range []string{
		"BenchmarkX-2 100\n",
		"BenchmarkX-2 100 12 ns/op 7\n",
		"BenchmarkX-2 100 twelve ns/op\n",
	} {
		if _, err := parse(strings.NewReader(text)); err == nil {
			t.Errorf("%q was taken", text)
		}
	}
}

func TestNames(t *testing.T) {
	for name, want := range map[string][3]string{
		"BenchmarkFill/survey/n=1e6/nodes=16e6-2": {"Fill", "survey, nodes=16e6", "n=1e6"},
		"BenchmarkSort/n=1e6":                     {"Sort", "", "n=1e6"},
		"BenchmarkDelaunay/lattice-0.1m/n=1e5-16": {"Delaunay", "lattice-0.1m", "n=1e5"},
		"BenchmarkDelaunay/unit-lattice/n=1e5":    {"Delaunay", "unit-lattice", "n=1e5"},
	} {
		if r := named("", name); [3]string{r.op, r.set, r.size} != want {
			t.Errorf("%s is %q on %q at %q, want %q", name, r.op, r.set, r.size, want)
		}
	}
}

func TestDigits(t *testing.T) {
	for ns, want := range map[float64]string{
		0.412: "0.41 ns", 11: "11.0 ns", 999: "999 ns", 1234: "1.23 µs", 45_678: "45.7 µs", 271_499_999: "271 ms", 12.3e9: "12.3 s",
	} {
		if got := duration(ns); got != want {
			t.Errorf("duration(%v) = %q, want %q", ns, got, want)
		}
	}
}

func TestPlace(t *testing.T) {
	names := []string{"raw-cmd-isofacet.txt", "raw-grid-decimal.txt", "raw-io-gridcsv.txt", "raw-io-readings.txt", "raw-triangulate.txt", "raw-elsewhere.txt"}
	for name, want := range map[string]int{names[3]: 0, names[4]: 1, names[1]: 3, names[2]: 5, names[0]: 6, names[5]: 7} {
		if got := place(filepath.Join(".bench", name)); got != want {
			t.Errorf("%s stands at %d, want %d", name, got, want)
		}
	}
}

// The tables of the two pages are those of the raw output beside them.
func TestPagesAreCurrent(t *testing.T) {
	root := filepath.Join("..", "..", "..")
	pages, err := render(root)
	if err != nil {
		t.Fatal(err)
	}
	for name, want := range pages {
		have, err := os.ReadFile(filepath.Join(root, name))
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(have, want) {
			t.Errorf("%s is not current: run go generate ./cmd/internal/benchtable", name)
		}
	}
}
