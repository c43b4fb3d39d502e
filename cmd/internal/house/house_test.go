package house

import (
	"bytes"
	"encoding/json"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

const module = "isofacet"

// rooms in the order of the arrows: a package may import what stands in a
// room before its own, and its own. The longest matching path decides.
var rooms = []struct {
	path string
	rank int
}{
	{"triangulate/exact", 0},
	{"triangulate/pointsets", 0},
	{"triangulate", 1},
	{"grid/decimal", 0},
	{"interp", 2},
	{"grid", 3},
	{"contour", 4},
	{"io", 5},
	{"cmd", 6},
}

// ioRank is the first rank that may meet the world outside the program.
const ioRank = 5

// rank returns the room of a package of ours, -1 for samples, which may import
// none, and false for a package that stands in no room.
func rank(importPath string) (int, bool) {
	rel := strings.TrimPrefix(importPath, module+"/")
	if inside(rel, "samples") {
		return -1, true
	}
	best, found := 0, ""
	for _, r := range rooms {
		if inside(rel, r.path) && len(r.path) > len(found) {
			best, found = r.rank, r.path
		}
	}
	return best, found != ""
}

func inside(path, room string) bool {
	return path == room || strings.HasPrefix(path, room+"/")
}

func ours(importPath string) bool { return inside(importPath, module) }

// listed is what the go command tells about a package.
type listed struct {
	ImportPath   string
	Dir          string
	GoFiles      []string
	Imports      []string
	TestGoFiles  []string
	TestImports  []string
	XTestGoFiles []string
	XTestImports []string
}

// packages lists every package of the module.
func packages(t *testing.T) []listed {
	t.Helper()
	cmd := exec.Command("go", "list", "-json", module+"/...")
	var stderr bytes.Buffer
	cmd.Stderr = &stderr
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("go list: %v\n%s", err, &stderr)
	}
	var all []listed
	for dec := json.NewDecoder(bytes.NewReader(out)); ; {
		var p listed
		if err := dec.Decode(&p); err == io.EOF {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		all = append(all, p)
	}
	if len(all) == 0 {
		t.Fatal("go list names no package")
	}
	return all
}

// root returns the folder that holds go.mod.
func root(t *testing.T) string {
	t.Helper()
	dir, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(dir, "go.mod")); err == nil {
			return dir
		}
		up := filepath.Dir(dir)
		if up == dir {
			t.Fatal("no go.mod above the test")
		}
		dir = up
	}
}

// arrow says what is wrong with from importing to, or nothing.
func arrow(from, to string, inTest bool) string {
	if !ours(to) {
		return ""
	}
	fromRank, ok := rank(from)
	if !ok {
		return from + " stands in no room"
	}
	toRank, ok := rank(to)
	if !ok {
		return to + " stands in no room"
	}
	forTests := toRank == -1 || inside(to, module+"/triangulate/pointsets")
	switch {
	case inTest && forTests:
		return "" // data to test with may be used anywhere
	case inside(from, module+"/samples"):
		if !inside(to, module+"/samples") {
			return from + " imports " + to + ": samples may import nothing of ours"
		}
	case toRank == -1:
		if fromRank < ioRank+1 {
			return from + " imports " + to + ": only programs and tests may use the samples"
		}
	case inside(to, module+"/triangulate/pointsets"):
		return from + " imports " + to + ": it is for tests alone"
	case toRank > fromRank:
		return from + " imports " + to + ": the arrow runs backward"
	}
	return ""
}

func TestArrowsRunOneWay(t *testing.T) {
	for _, p := range packages(t) {
		if _, ok := rank(p.ImportPath); !ok {
			t.Errorf("%s stands in no room of the house", p.ImportPath)
		}
		for _, to := range p.Imports {
			if wrong := arrow(p.ImportPath, to, false); wrong != "" {
				t.Error(wrong)
			}
		}
		for _, to := range slices.Concat(p.TestImports, p.XTestImports) {
			if wrong := arrow(p.ImportPath, to, true); wrong != "" {
				t.Error("test of " + wrong)
			}
		}
	}
}

// The rule itself must notice what it is there for.
func TestArrowRule(t *testing.T) {
	for _, c := range []struct {
		from, to string
		inTest   bool
		ok       bool
	}{
		{"cmd/isofacet", "triangulate", false, true},
		{"contour", "triangulate/exact", false, true},
		{"triangulate", "triangulate/exact", false, true},
		{"triangulate/exact", "triangulate", false, false},
		{"triangulate", "interp", false, false},
		{"triangulate", "interp", true, false},
		{"grid", "contour", false, false},
		{"grid", "grid/tiles", false, true},
		{"interp", "grid/decimal", false, true},
		{"grid/decimal", "grid", false, false},
		{"contour", "io/geojson", false, false},
		{"io/readings", "io/outfile", false, true},
		{"io/readings", "cmd/internal/options", false, false},
		{"samples", "triangulate", false, false},
		{"samples/internal/gen", "samples/internal/truth", false, true},
		{"cmd/isofacet", "samples", false, true},
		{"io/readings", "samples", false, false},
		{"io/readings", "samples", true, true},
		{"triangulate", "triangulate/pointsets", false, false},
		{"triangulate", "triangulate/pointsets", true, true},
		{"elsewhere", "triangulate", false, false},
	} {
		if got := arrow(module+"/"+c.from, module+"/"+c.to, c.inTest); (got == "") != c.ok {
			t.Errorf("%s -> %s (test %v): %q, want allowed %v", c.from, c.to, c.inTest, got, c.ok)
		}
	}
}
