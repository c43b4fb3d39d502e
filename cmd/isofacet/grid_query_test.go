package main

import (
	"bytes"
	"fmt"
	"io"
	"os"
	"strings"
	"testing"
)

// tilted writes a lattice of n x n readings turned by the angle of a 3-4-5 triangle,
// so that nodes of an upright raster fall exactly onto vertices, slanted edges and
// the outline. Its coordinates are whole numbers.
func tilted(n int) string {
	var b strings.Builder
	b.WriteString("x,y,z\n")
	for i := range n {
		for j := range n {
			fmt.Fprintf(&b, "%d,%d,%d.%d\n", 4*i-3*j, 3*i+4*j, 100+(i*7+j*13)%11, (i*j)%10)
		}
	}
	return b.String()
}

// TestGridEqualsQuery is promise P4 through the program: the raster and the answers
// at its nodes are the same text, in full and rounded, on every kind of place.
func TestGridEqualsQuery(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.WriteFile("tilted.csv", []byte(tilted(12)), 0o666); err != nil {
		t.Fatal(err)
	}
	for _, row := range []struct {
		name   string
		file   string
		cell   string
		places []string // that must occur
	}{
		{"tilted lattice", "tilted.csv", "0.5", []string{"vertex", "edge", "inside"}},
		{"gravel pit", "sample:gravel-pit/shots.csv", "3", []string{"inside"}},
		{"landfill", "sample:landfill/heads-2024-q1.csv", "20", []string{"inside"}},
	} {
		for _, decimals := range []string{"full", "auto"} {
			list := runQuietly(t, "", "grid", row.file, "--cell", row.cell, "--values-at", "corners", "--layout", "list", "--decimals", decimals)
			answers := runQuietly(t, list, "query", row.file, "--at", "-", "--decimals", decimals)
			seen := map[string]int{}
			for n, line := range strings.Split(strings.TrimSpace(answers), "\n")[1:] {
				f := strings.Split(line, ",") // x, y, z of the raster, and the answer
				if len(f) != 7 || f[2] != f[3] {
					t.Fatalf("%s, %s decimals, node %d: %s: the raster and the answer differ", row.name, decimals, n, line)
				}
				seen[f[6]]++
			}
			for _, place := range row.places {
				if seen[place] == 0 {
					t.Errorf("%s: no node is at a %s: %v", row.name, place, seen)
				}
			}
			if seen["outside"] > 0 {
				t.Errorf("%s: %d nodes with a value lie outside", row.name, seen["outside"])
			}
		}
	}
}

// runQuietly runs the program in this process and returns what it writes.
func runQuietly(t *testing.T, in string, args ...string) string {
	t.Helper()
	var out, words bytes.Buffer
	if code := run(append(args, "--quiet"), streams{io.Reader(strings.NewReader(in)), &out, &words}); code != 0 {
		t.Fatalf("%v: exit status %d\n%s", args, code, &words)
	}
	return out.String()
}
