package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"slices"
	"strings"
	"syscall"
	"testing"

	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/interp"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

func TestNumbersLast(t *testing.T) {
	root := tree(t)
	for typed, want := range map[string]string{
		"query a.csv -5,10 --cell 2":     "query a.csv --cell 2 -- -5,10",
		"query a.csv --at -5,10":         "query a.csv --at -5,10",
		"query a.csv --at=-5,10":         "query a.csv --at=-5,10",
		"query --explain -5 a.csv":       "query --explain a.csv -- -5",
		"query --lenient -1e3,.5":        "query --lenient -- -1e3,.5",
		"query -5 -- -6 a.csv":           "query -- -5 -6 a.csv",
		"grid --extent -10,-10,10,10 -":  "grid --extent -10,-10,10,10 -",
		"grid --same-spot-spread -1 a":   "grid --same-spot-spread -1 a",
		"grid -x -inf a.csv":             "grid -x -inf a.csv",
		"inspect a.csv":                  "inspect a.csv",
		"query a.csv --at 1,-2 --quiet ": "query a.csv --at 1,-2 --quiet",
	} {
		if got := strings.Join(numbersLast(strings.Fields(typed), root), " "); got != want {
			t.Errorf("%q becomes %q, want %q", typed, got, want)
		}
	}
}

func TestNearest(t *testing.T) {
	list := []string{"inspect", "grid", "query", "same-spot", "same-spot-within"}
	for word, want := range map[string]string{
		"gird": "grid", "inspct": "inspect", "querry": "query", "insp": "inspect", "same-spots": "same-spot",
		"contour": "", "x": "", "": "", "volume": "",
	} {
		if got := nearest(word, list); got != want {
			t.Errorf("nearest(%q) = %q, want %q", word, got, want)
		}
	}
}

func TestWithoutOptions(t *testing.T) {
	switches := map[string]bool{"quiet": true}
	typed := "grid a.csv --threads 3 --cell 2 --quiet --record=r.json --memory 1GiB --out - -- --threads 4"
	want := "grid a.csv --cell 2 --out - -- --threads 4"
	if got := strings.Join(withoutOptions(strings.Fields(typed), changesNothing, switches), " "); got != want {
		t.Errorf("left %q, want %q", got, want)
	}
}

func TestExpand(t *testing.T) {
	for _, row := range []struct {
		path  string
		files []string
		want  string
		ok    bool
	}{
		{"out.csv", nil, "out.csv", true},
		{"{file}.csv", []string{"in/pit 3.txt"}, "pit 3.csv", true},
		{"maps/{file}-{file}.raw", []string{"sample:gravel-pit/shots.csv"}, "maps/shots-shots.raw", true},
		{"{file}.csv", []string{"a:b?.csv"}, "a-b-.csv", true},
		{"{file}.csv", nil, "", false},
		{"{file}.csv", []string{"-"}, "", false},
		{"{file}.csv", []string{"a.csv", "b.csv"}, "", false},
		{"{round}.csv", []string{"a.csv"}, "", false},
		{"{file.csv", []string{"a.csv"}, "", false},
	} {
		got, err := (&writing{}).expand("--out", row.path, row.files)
		if got != row.want || (err == nil) != row.ok {
			t.Errorf("expand(%q, %q) = %q, %v, want %q", row.path, row.files, got, err, row.want)
		}
	}
}

// Every kind of trouble in a text has a way out.
func TestEveryKindHasAHint(t *testing.T) {
	n := 0
	for kind := readings.NotNumber; kind <= readings.WhichComment; kind++ {
		n++
		if kindHints[kind] == "" {
			t.Errorf("kind %d of trouble has no hint", kind)
		}
	}
	if n != len(kindHints) {
		t.Errorf("%d kinds and %d hints", n, len(kindHints))
	}
}

// Errors of the packages get their status, however deep they are wrapped.
func TestExplain(t *testing.T) {
	unreadable := &readings.PositionError{File: "a.csv", Kind: readings.Unreadable, Err: fs.ErrPermission}
	for _, row := range []struct {
		name string
		err  error
		want status.Code
	}{
		{"a fault nobody knows", errors.New("out of order"), status.NotFinished},
		{"memory", &memory.TooBig{Work: "a raster", Need: 8e9, Budget: memory.Of(1e9)}, status.TooBig},
		{"memory, seen while reading", &readings.PositionError{Kind: readings.Unreadable, Err: &memory.TooBig{}}, status.TooBig},
		{"a raster", &grid.SizeError{}, status.TooBig},
		{"points", fmt.Errorf("surface: %w", triangulate.ErrTooMany), status.TooBig},
		{"a text", &readings.PositionError{Kind: readings.NotNumber}, status.WrongData},
		{"lines of a text", &readings.BadLines{First: []*readings.PositionError{{Kind: readings.FieldCount}}, Total: 1}, status.WrongData},
		{"more readings than numbers", &readings.PositionError{Kind: readings.TooMany}, status.TooBig},
		{"a file", unreadable, status.NotFinished},
		{"places", &placesError{&readings.PositionError{Kind: readings.NoHeader}}, status.WrongData},
		{"one place", &readings.SpotError{}, status.WrongData},
		{"one vertex", &interp.SameSpotError{}, status.WrongData},
		{"a setting", &readings.OptionError{Option: "columns"}, status.WrongUsage},
		{"a lattice", &grid.SpecError{}, status.WrongUsage},
		{"an extent", &grid.MultipleError{}, status.WrongUsage},
		{"a full disk", &os.PathError{Op: "write", Path: "a", Err: syscall.ENOSPC}, status.NotFinished},
		{"a folder that is not there", &os.PathError{Op: "create", Path: "a/b", Err: syscall.ENOENT}, status.NotFinished},
		{"an end that was asked for", context.Canceled, status.Interrupted},
		{"a reader that has seen enough", &os.PathError{Op: "write", Path: "standard output", Err: syscall.EPIPE}, status.Done},
	} {
		code, hints := explain(fmt.Errorf("grid: %w", row.err))
		if code != row.want {
			t.Errorf("%s: status %d, want %d", row.name, code, row.want)
		}
		known := !slices.Contains([]status.Code{status.Done, status.Interrupted}, row.want) && row.name != "a fault nobody knows"
		if known && len(hints) == 0 {
			t.Errorf("%s: no way out", row.name)
		}
	}
	if _, hints := explain(&placesError{&readings.PositionError{Kind: readings.NoHeader}}); !strings.Contains(hints[0], "--at-columns") {
		t.Errorf("places: the way out is %q, want --at-columns in it", hints)
	}
}
