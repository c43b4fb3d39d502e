//go:build unix

package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"isofacet/triangulate/pointsets"
)

// fortyRounds is a folder with a file of forty rounds at the same places and a job
// that makes a raster and isolines of each. Two rounds are bad: the seventh has two
// heights at one place, the 23rd two wells only.
func fortyRounds(t *testing.T, wells int) string {
	t.Helper()
	dir := t.TempDir()
	pts := pointsets.Survey(wells, 3)
	var b bytes.Buffer
	b.WriteString("id,x,y,z,round\n")
	for round := 1; round <= 40; round++ {
		for i, p := range pts {
			if round == 23 && i == 2 {
				break
			}
			fmt.Fprintf(&b, "W%d,%.3f,%.3f,%.3f,R%02d\n", i, p[0], p[1], float64(i%17)/10+float64(round)/100, round)
		}
		if round == 7 {
			fmt.Fprintf(&b, "W0b,%.3f,%.3f,99,R07\n", pts[0][0], pts[0][1])
		}
	}
	write(t, dir, "heads.csv", b.String())
	write(t, dir, "job.toml", `[settings]
each = "round"
[[task]]
name = "map"
command = "grid"
files = "heads.csv"
cell = 40
out = ["{round}.csv", "slope={round}-slope.raw"]
`)
	return dir
}

func write(t *testing.T, dir, name, text string) {
	t.Helper()
	if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

// inFolder runs the program in a folder and returns its exit status and its words.
func inFolder(t *testing.T, dir string, args ...string) (int, string) {
	t.Helper()
	cmd := exec.Command("isofacet", args...)
	cmd.Dir = dir
	var words bytes.Buffer
	cmd.Stderr = &words
	err := cmd.Run()
	exit, ok := errors.AsType[*exec.ExitError](err)
	if err != nil && !ok {
		t.Fatal(err)
	}
	if ok {
		return exit.ExitCode(), words.String()
	}
	return 0, words.String()
}

// contents reads every output of the forty rounds.
func contents(t *testing.T, dir string) map[string]string {
	t.Helper()
	all := map[string]string{}
	for _, pattern := range []string{"R*.csv", "R*.raw", "R*.json"} {
		names, err := filepath.Glob(filepath.Join(dir, pattern))
		if err != nil {
			t.Fatal(err)
		}
		for _, name := range names {
			text, err := os.ReadFile(name)
			if err != nil {
				t.Fatal(err)
			}
			all[filepath.Base(name)] = string(text)
		}
	}
	return all
}

func sameContents(t *testing.T, what string, got, want map[string]string) {
	t.Helper()
	for name, text := range want {
		if got[name] != text {
			t.Errorf("%s: %s differs", what, name)
		}
	}
	if len(got) != len(want) {
		t.Errorf("%s: %d outputs, want %d", what, len(got), len(want))
	}
}

// Forty rounds, two of them bad: 38 sets of outputs, status 3, both faults named. A
// second run leaves alone what is done and says so. From the record the outputs come
// to the same bytes, and a changed input is named.
func TestFortyRoundsTwoBad(t *testing.T) {
	dir := fortyRounds(t, 60)
	code, words := inFolder(t, dir, "run", "job.toml", "--record", "record.json")
	if code != 3 {
		t.Errorf("status %d, want 3", code)
	}
	outputs := contents(t, dir)
	if len(outputs) != 38*3 {
		t.Errorf("%d files, want 38 rasters, 38 raw ones with what describes them", len(outputs))
	}
	for _, want := range []string{
		"map R07: failed: ", "apart: W0 z", "map R23: failed: ", "fewer than three places",
		"tasks: 40: 38 done, 0 unchanged, 2 failed\n", "isofacet: 2 of 40 tasks failed: map R07 and map R23\n",
	} {
		if !strings.Contains(words, want) {
			t.Errorf("words have no %q:\n%s", want, words)
		}
	}

	code, words = inFolder(t, dir, "run", "job.toml")
	if code != 3 || !strings.Contains(words, "tasks: 40: 0 done, 38 unchanged, 2 failed: nothing was written\n") || strings.Contains(words, ": done:") {
		t.Errorf("the second run: status %d\n%s", code, words)
	}
	sameContents(t, "after the second run", contents(t, dir), outputs)

	// With the two mended nothing else is there to do, and then nothing at all.
	text, err := os.ReadFile(filepath.Join(dir, "job.toml"))
	if err != nil {
		t.Fatal(err)
	}
	write(t, dir, "good.toml", strings.Replace(string(text), "[settings]\n", "[settings]\nwithout = [\"round=R07\", \"round=R23\"]\n", 1))
	if code, words := inFolder(t, dir, "run", "good.toml"); code != 0 || !strings.Contains(words, "tasks: 38: 38 done, 0 unchanged, 0 failed\n") {
		t.Errorf("without the bad rounds: status %d\n%s", code, words)
	}
	if code, words := inFolder(t, dir, "run", "good.toml"); code != 0 || !strings.Contains(words, "nothing to do: 38 tasks unchanged\n") {
		t.Errorf("again: status %d\n%s", code, words)
	}
	sameContents(t, "without the bad rounds", contents(t, dir), outputs)

	// An output that was touched is made again, and only that.
	write(t, dir, "R11.csv", "touched")
	if code, words := inFolder(t, dir, "run", "good.toml"); code != 0 || !strings.Contains(words, "tasks: 38: 1 done, 37 unchanged, 0 failed\n") {
		t.Errorf("one touched: status %d\n%s", code, words)
	}
	if code, words := inFolder(t, dir, "run", "good.toml", "--redo"); code != 0 || !strings.Contains(words, "tasks: 38: 38 done, 0 unchanged, 0 failed\n") {
		t.Errorf("--redo: status %d\n%s", code, words)
	}
	sameContents(t, "after --redo", contents(t, dir), outputs)

	if code, words := inFolder(t, dir, "run", "--record-in", "record.json"); code != 0 || !strings.Contains(words, "the same bytes: 114 outputs of 38 tasks\n") {
		t.Errorf("from the record: status %d\n%s", code, words)
	}
	sameContents(t, "from the record", contents(t, dir), outputs)
	heads, err := os.ReadFile(filepath.Join(dir, "heads.csv"))
	if err != nil {
		t.Fatal(err)
	}
	write(t, dir, "heads.csv", string(heads)+"X,1,1,1,R01\n")
	if code, words := inFolder(t, dir, "run", "--record-in", "record.json"); code != 3 || !strings.Contains(words, "isofacet: input heads.csv: has changed: SHA-256 ") {
		t.Errorf("a changed input: status %d\n%s", code, words)
	}
	sameContents(t, "after a changed input", contents(t, dir), outputs)

	// The record has the same stable part whether tasks were done or left unchanged.
	write(t, dir, "heads.csv", string(heads))
	inFolder(t, dir, "run", "job.toml", "--record", "again.json", "--threads", "1")
	if a, b := stablePart(t, filepath.Join(dir, "record.json")), stablePart(t, filepath.Join(dir, "again.json")); a != b {
		t.Error("the stable parts of a first and a later run differ")
	}
}

// Killed at three moments, a run goes on where it was, to the same bytes, and leaves
// nothing half made.
func TestKilledRunGoesOn(t *testing.T) {
	want := func() map[string]string {
		dir := fortyRounds(t, 400)
		if code, words := inFolder(t, dir, "run", "job.toml"); code != 3 {
			t.Fatalf("status %d\n%s", code, words)
		}
		return contents(t, dir)
	}()
	dir := fortyRounds(t, 400)
	done := func() int {
		text, err := os.ReadFile(filepath.Join(dir, "job.toml.state"))
		if err != nil {
			return 0
		}
		return bytes.Count(text, []byte{'\n'}) - 1
	}
	for _, moment := range []int{1, 9, 23} {
		cmd, words := start(t, dir, nil, "run", "job.toml", "--threads", "2")
		for deadline := time.Now().Add(60 * time.Second); done() < moment && time.Now().Before(deadline); {
			time.Sleep(200 * time.Microsecond)
		}
		if err := cmd.Process.Kill(); err != nil {
			t.Fatalf("%v\n%s", err, words)
		}
		if err := cmd.Wait(); err == nil {
			t.Errorf("the run ended before it was killed at %d tasks", moment)
		}
		n := done()
		if n < moment {
			t.Fatalf("%d tasks noted, want %d:\n%s", n, moment, words)
		}
		// What is there is whole.
		for name, text := range contents(t, dir) {
			if want[name] != text {
				t.Errorf("killed at %d tasks: %s is not whole", moment, name)
			}
		}
		t.Logf("killed when %d of 40 tasks were done", n)
	}
	before := done()
	code, words := inFolder(t, dir, "run", "job.toml")
	if code != 3 || !strings.Contains(words, fmt.Sprintf("tasks: 40: %d done, %d unchanged, 2 failed\n", 38-before, before)) {
		t.Errorf("going on from %d: status %d\n%s", before, code, words)
	}
	sameContents(t, "after three kills", contents(t, dir), want)
	if _, n := temporaries(t, dir); n != 0 {
		t.Errorf("%d unfinished files are left", n)
	}
}

// stablePart returns the stable part of a run record.
func stablePart(t *testing.T, path string) string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var rec struct{ Stable json.RawMessage }
	if err := json.Unmarshal(text, &rec); err != nil {
		t.Fatal(err)
	}
	return string(rec.Stable)
}
