package main

import (
	"bytes"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// The marks between which a page holds what is generated.
const (
	begin = "<!-- benchmarks: begin, written by go generate -->\n"
	end   = "<!-- benchmarks: end -->\n"
)

func main() {
	root := flag.String("root", ".", "the repository's `FOLDER`")
	flag.Parse()
	if err := run(*root); err != nil {
		fmt.Fprintln(os.Stderr, "benchtable:", err)
		os.Exit(1)
	}
}

// run rewrites the two pages; one that is current is left alone.
func run(root string) error {
	pages, err := render(root)
	if err != nil {
		return err
	}
	for name, want := range pages {
		path := filepath.Join(root, name)
		have, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		if bytes.Equal(have, want) {
			continue
		}
		if err := os.WriteFile(path, want, 0o666); err != nil {
			return err
		}
	}
	return nil
}

// render returns what the pages should hold.
func render(root string) (map[string][]byte, error) {
	names, err := filepath.Glob(filepath.Join(root, ".bench", "raw-*.txt"))
	if err != nil {
		return nil, err
	}
	var files []*raw
	slices.SortStableFunc(names, func(a, b string) int { return place(a) - place(b) })
	for _, name := range names {
		f, err := os.Open(name)
		if err != nil {
			return nil, err
		}
		r, err := parse(f)
		f.Close()
		if err != nil {
			return nil, fmt.Errorf("%s: %w", name, err)
		}
		files = append(files, r)
	}
	pages := map[string][]byte{}
	for name, table := range map[string]string{"README.md": brief(files, "n=1e6"), "DEVELOPERS.md": full(files)} {
		page, err := os.ReadFile(filepath.Join(root, name))
		if err != nil {
			return nil, err
		}
		if pages[name], err = splice(page, table); err != nil {
			return nil, fmt.Errorf("%s: %w", name, err)
		}
	}
	return pages, nil
}

// way is the order of the rooms in the tables: that of a reading on its way.
var way = []string{"io-readings", "triangulate", "interp", "grid", "contour", "io", "cmd"}

// place returns where the file of a room stands in the tables.
func place(name string) int {
	room := strings.TrimSuffix(strings.TrimPrefix(filepath.Base(name), "raw-"), ".txt")
	for i, w := range way {
		if room == w || strings.HasPrefix(room, w+"-") {
			return i
		}
	}
	return len(way)
}

// splice puts the table between the marks of a page.
func splice(page []byte, table string) ([]byte, error) {
	before, rest, ok := bytes.Cut(page, []byte(begin))
	_, after, ok2 := bytes.Cut(rest, []byte(end))
	if !ok || !ok2 {
		return nil, fmt.Errorf("expected the lines %q and %q, one after the other", strings.TrimSpace(begin), strings.TrimSpace(end))
	}
	text := string(before) + begin + table + end + string(after)
	return []byte(text), nil
}
