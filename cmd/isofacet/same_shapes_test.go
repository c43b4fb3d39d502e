package main

import (
	"bytes"
	"crypto/sha256"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"testing"
)

// interval returns a round step with 5 to 12 levels in the middle 98 % of the heights.
func (s *survey) interval() string {
	z := slices.Sorted(slices.Values(s.z))
	span := z[len(z)*99/100] - z[len(z)/100]
	for e := -6; ; e++ {
		for _, digit := range []string{"1", "2", "5"} {
			text := digit + "e" + strconv.Itoa(e)
			if v, err := strconv.ParseFloat(text, 64); err == nil && span/v <= 12 {
				return text
			}
		}
	}
}

// shapesMost cuts the larger sets of readings: shapes are long texts, and the order of
// 2e5 readings has no other cases than that of 2e4. ALL_READINGS=1 takes all of them.
const shapesMost = 20_000

// TestSameShapes is promise P2 through contour and triangles, as TestSameBytes is
// through the other commands.
func TestSameShapes(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program twice and runs it some 160 times; left out of short runs")
	}
	programs := builds(t)
	ways := []way{{0, 1, 0}, {1, 2, 1}, {2, 3, 0}, {3, 8, 1}}
	for _, s := range surveys() {
		if os.Getenv("ALL_READINGS") == "" && len(s.points) > shapesMost {
			s.points, s.z = s.points[:shapesMost], s.z[:shapesMost]
		}
		t.Run(s.name, func(t *testing.T) {
			t.Parallel()
			dir := t.TempDir()
			var want map[string]digest
			for _, w := range ways {
				s.write(t, filepath.Join(dir, "shots.csv"), w.shuffle)
				got := s.shapes(t, programs[w.build%len(programs)], dir, w.threads)
				if want == nil {
					want = got
					continue
				}
				for name, d := range want {
					if got[name] != d {
						t.Errorf("order %d, %d threads, build %d: %s differs: %d bytes, want %d", w.shuffle, w.threads, w.build, name, got[name].size, d.size)
					}
				}
			}
			if len(want) != 10 {
				t.Errorf("%d products, want 10", len(want))
			}
			for name, d := range want {
				if d.size < 1000 {
					t.Errorf("%s has %d bytes only", name, d.size)
				}
			}
		})
	}
}

// digest stands for a product, which may have a hundred megabytes.
type digest struct {
	size int64
	sum  [sha256.Size]byte
}

func digestOf(t *testing.T, r io.Reader) digest {
	t.Helper()
	h := sha256.New()
	n, err := io.Copy(h, r)
	if err != nil {
		t.Fatal(err)
	}
	return digest{n, [sha256.Size]byte(h.Sum(nil))}
}

// shapes runs contour and triangles and returns the digests of what they write.
func (s *survey) shapes(t *testing.T, program, dir string, threads int) map[string]digest {
	t.Helper()
	list := map[string]digest{}
	for _, decimals := range []string{"full", "auto"} {
		for _, args := range [][]string{
			{"contour", "--interval", s.interval(), "--out", "lines.geojson", "--out", "lines.csv", "--out", "bands=bands.geojson"},
			{"triangles", "--out", "triangles.geojson", "--out", "vertices=vertices.csv"},
		} {
			args = append(args, "shots.csv", "--quiet", "--decimals", decimals, "--threads", strconv.Itoa(threads))
			cmd := exec.Command(program, append(args, s.options...)...)
			var words bytes.Buffer
			cmd.Dir, cmd.Stderr = dir, &words
			if err := cmd.Run(); err != nil {
				t.Fatalf("%s: %v\n%s", args[0], err, &words)
			}
		}
		for _, name := range []string{"lines.geojson", "lines.csv", "bands.geojson", "triangles.geojson", "vertices.csv"} {
			f, err := os.Open(filepath.Join(dir, name))
			if err != nil {
				t.Fatal(err)
			}
			list[fmt.Sprintf("%s %s", name, decimals)] = digestOf(t, f)
			f.Close()
		}
	}
	return list
}
