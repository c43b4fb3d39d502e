package reference

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"testing"

	"github.com/paulmach/orb"
)

const root = "../../.."

// scratch lives as long as the tests of this package.
var scratch string

func TestMain(m *testing.M) {
	flag.Parse()
	var err error
	if scratch, err = os.MkdirTemp("", "reference"); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
	status := m.Run()
	os.RemoveAll(scratch)
	os.Exit(status)
}

// program builds isofacet once.
//
// The go tool shows a stored result again if no file that a test looked at has
// changed since; what the compiler reads does not count. So every folder of
// sources is looked at here.
var program = sync.OnceValues(func() (string, error) {
	for _, room := range []string{"cmd", "contour", "grid", "interp", "io", "samples", "triangulate"} {
		err := filepath.WalkDir(filepath.Join(root, room), func(string, fs.DirEntry, error) error { return nil })
		if err != nil {
			return "", err
		}
	}
	build := exec.Command("go", "build", "-o", scratch+string(filepath.Separator), "./cmd/isofacet")
	build.Dir = root
	if out, err := build.CombinedOutput(); err != nil {
		return "", fmt.Errorf("go build: %w\n%s", err, out)
	}
	return filepath.Join(scratch, "isofacet"), nil
})

// isofacet runs the program, which must succeed, and returns its standard output.
func isofacet(t *testing.T, args ...string) string {
	t.Helper()
	path, err := program()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(path, append(args, "--quiet")...)
	var stdout, stderr bytes.Buffer
	cmd.Stdout, cmd.Stderr = &stdout, &stderr
	if err := cmd.Run(); err != nil {
		t.Fatalf("isofacet %s: %v\n%s", strings.Join(args, " "), err, &stderr)
	}
	return stdout.String()
}

// findings is what inspect says of readings and surface.
type findings struct {
	Readings struct {
		Read, Used, Merged int
		LeftOut            int `json:"left_out"`
		Refused            int
	}
	Extent  struct{ XMin, YMin, XMax, YMax, ZMin, ZMax float64 }
	Surface struct {
		Vertices, Triangles int
		OutlineVertices     int `json:"outline_vertices"`
		Area                float64
		VolumeAboveZero     float64 `json:"volume_above_zero"`
	}
}

func inspect(t *testing.T, args ...string) findings {
	t.Helper()
	var f findings
	text := isofacet(t, append([]string{"inspect", "--format", "json", "--decimals", "full"}, args...)...)
	if err := json.Unmarshal([]byte(text), &f); err != nil {
		t.Fatalf("inspect %s: %v in\n%s", strings.Join(args, " "), err, text)
	}
	return f
}

// query asks for values at the places of a file, an answer a place.
func query(t *testing.T, places string, args ...string) []row {
	t.Helper()
	text := isofacet(t, append([]string{"query", "--at", places, "--decimals", "full"}, args...)...)
	return rows(t, "answers at "+filepath.Base(places), text)
}

// raster returns what grid writes, by place. A node without a value has no entry;
// nodes counts all of them.
func raster(t *testing.T, args ...string) (values map[orb.Point]float64, nodes int) {
	t.Helper()
	text := isofacet(t, append([]string{"grid", "--decimals", "full"}, args...)...)
	values = map[orb.Point]float64{}
	var x []float64
	north := 0.0
	for k, line := range strings.Split(strings.TrimSuffix(text, "\n"), "\n") {
		fields := strings.Split(line, ",")
		if k == 0 {
			for _, f := range fields[1:] {
				x = append(x, number(t, "grid", f))
			}
			continue
		}
		if len(fields) != 1+len(x) {
			t.Fatalf("line %d of the raster has %d values, its first line %d columns", k+1, len(fields)-1, len(x))
		}
		y := number(t, "grid", fields[0])
		if k > 1 && !(y < north) {
			t.Fatalf("line %d of the raster is at y %v, the one before at %v: expected north first", k+1, y, north)
		}
		north = y
		for i, f := range fields[1:] {
			nodes++
			if f != "" {
				values[orb.Point{x[i], y}] = number(t, "grid", f)
			}
		}
	}
	return values, nodes
}

// file writes text where the program can read it.
func file(t *testing.T, name, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	return path
}

// readings writes positions and values as a file x,y,z. Every number is the
// shortest text that reads back to the same double.
func readings(t *testing.T, pts []orb.Point, z func(x, y float64) float64) string {
	t.Helper()
	text := []byte("x,y,z\n")
	for _, p := range pts {
		for i, v := range []float64{p[0], p[1], z(p[0], p[1])} {
			text = strconv.AppendFloat(text, v, 'g', -1, 64)
			text = append(text, ",,\n"[i])
		}
	}
	return file(t, "readings.csv", string(text))
}

// decimal is the shortest text without an exponent that reads back to v.
func decimal(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }
