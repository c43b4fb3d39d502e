//go:build unix

package main

import (
	"bytes"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"
	"testing"
	"time"

	"isofacet/triangulate/pointsets"
)

// The old content of an output, which has to be there, whole, whenever a run did
// not come to its end.
const old = "the raster of last week\n"

// workshop is a folder with readings enough that writing their raster takes a
// while, and an output from before.
func workshop(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	pts := pointsets.Survey(2000, 1)
	z := pointsets.Heights(pts)
	var b bytes.Buffer
	b.WriteString("x,y,z\n")
	for i, p := range pts {
		fmt.Fprintf(&b, "%.3f,%.3f,%.3f\n", p[0], p[1], z[i])
	}
	for name, text := range map[string]string{"shots.csv": b.String(), "out.csv": old} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

// start runs the program in dir.
func start(t *testing.T, dir string, in io.Reader, args ...string) (*exec.Cmd, *strings.Builder) {
	t.Helper()
	cmd := exec.Command("isofacet", args...)
	words := &strings.Builder{}
	cmd.Dir, cmd.Stdin, cmd.Stderr = dir, in, words
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	return cmd, words
}

// temporaries lists the unfinished outputs in dir with their sizes.
func temporaries(t *testing.T, dir string) (size int64, n int) {
	t.Helper()
	names, err := filepath.Glob(filepath.Join(dir, ".*.part"))
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range names {
		if info, err := os.Stat(name); err == nil {
			size += info.Size()
			n++
		}
	}
	return size, n
}

// waitForWriting waits until the run has written some of its output.
func waitForWriting(t *testing.T, dir string) {
	t.Helper()
	for deadline := time.Now().Add(20 * time.Second); time.Now().Before(deadline); time.Sleep(time.Millisecond) {
		if size, _ := temporaries(t, dir); size > 0 {
			return
		}
	}
	t.Fatal("the run writes nothing")
}

func wantOld(t *testing.T, dir string) {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, "out.csv"))
	if err != nil || string(text) != old {
		t.Errorf("out.csv holds %d bytes (%v), want the old ones", len(text), err)
	}
}

// A raster of 1,500 x 1,500 nodes in full takes about a second to write: time to
// be stopped in the middle.
var slowGrid = []string{"grid", "shots.csv", "--cell", "0.06", "--decimals", "full", "--out", "out.csv"}

func TestKillLeavesTheOldFile(t *testing.T) {
	dir := workshop(t)
	cmd, _ := start(t, dir, nil, slowGrid...)
	waitForWriting(t, dir)
	if err := cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	cmd.Wait()
	wantOld(t, dir)
	// The next run clears up what the dead one left, and ends with the whole file.
	next, words := start(t, dir, nil, "grid", "shots.csv", "--cell", "10", "--out", "out.csv")
	if err := next.Wait(); err != nil {
		t.Fatalf("%v\n%s", err, words)
	}
	if _, n := temporaries(t, dir); n != 0 {
		t.Errorf("%d unfinished outputs are left", n)
	}
	if text, err := os.ReadFile(filepath.Join(dir, "out.csv")); err != nil || !strings.HasPrefix(string(text), `y\x,`) {
		t.Errorf("the new file begins %.20q, %v", text, err)
	}
}

func TestSignalsLeaveTheOldFile(t *testing.T) {
	for _, row := range []struct {
		signal os.Signal
		code   int
		says   string
	}{
		{os.Interrupt, 130, "isofacet: interrupted: "},
		{syscall.SIGTERM, 143, "isofacet: asked to end: "},
	} {
		dir := workshop(t)
		cmd, words := start(t, dir, nil, slowGrid...)
		waitForWriting(t, dir)
		if err := cmd.Process.Signal(row.signal); err != nil {
			t.Fatal(err)
		}
		cmd.Wait()
		if got := cmd.ProcessState.ExitCode(); got != row.code {
			t.Errorf("%v: exit status %d, want %d", row.signal, got, row.code)
		}
		if !strings.Contains(words.String(), row.says) {
			t.Errorf("%v: says %q, want %q in it", row.signal, words, row.says)
		}
		wantOld(t, dir)
		if _, n := temporaries(t, dir); n != 0 {
			t.Errorf("%v: %d unfinished outputs are left", row.signal, n)
		}
	}
}

// A run that waits for readings which never come ends all the same.
func TestInterruptWhileWaiting(t *testing.T) {
	dir := workshop(t)
	r, w := io.Pipe()
	defer w.Close()
	cmd := exec.Command("isofacet", "grid", "--cell", "1", "--out", "out.csv")
	cmd.Dir = dir
	in, err := cmd.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(in, "x,y,z\n1,2,3\n"); err != nil {
		t.Fatal(err)
	}
	for deadline := time.Now().Add(10 * time.Second); time.Now().Before(deadline); time.Sleep(time.Millisecond) {
		if _, n := temporaries(t, dir); n > 0 {
			break
		}
	}
	began := time.Now()
	if err := cmd.Process.Signal(os.Interrupt); err != nil {
		t.Fatal(err)
	}
	cmd.Wait()
	if got := cmd.ProcessState.ExitCode(); got != 130 {
		t.Errorf("exit status %d, want 130", got)
	}
	if took := time.Since(began); took > 2*grace {
		t.Errorf("the run ended after %v", took)
	}
	wantOld(t, dir)
	if _, n := temporaries(t, dir); n != 0 {
		t.Errorf("%d unfinished outputs are left", n)
	}
}

// A reader that has seen enough is no fault, and other outputs are still made.
func TestClosedPipe(t *testing.T) {
	dir := workshop(t)
	for _, args := range [][]string{
		{"grid", "shots.csv", "--cell", "0.5", "--out", "-", "--out", "slope=slope.csv"},
		{"grid", "shots.csv", "--cell", "10", "--layout", "list"},
		{"query", "shots.csv", "--at", "shots.csv2"},
		{"inspect", "shots.csv"},
	} {
		if args[0] == "query" {
			text, err := os.ReadFile(filepath.Join(dir, "shots.csv"))
			if err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(filepath.Join(dir, "shots.csv2"), text, 0o666); err != nil {
				t.Fatal(err)
			}
		}
		cmd := exec.Command("isofacet", append(args, "--quiet")...)
		r, w, err := os.Pipe()
		if err != nil {
			t.Fatal(err)
		}
		var words strings.Builder
		cmd.Dir, cmd.Stdout, cmd.Stderr = dir, w, &words
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		w.Close()
		r.Close()
		if err := cmd.Wait(); err != nil || words.Len() > 0 {
			t.Errorf("%v: %v, says %q, want a quiet success", args, err, &words)
		}
	}
	if text, err := os.ReadFile(filepath.Join(dir, "slope.csv")); err != nil || !strings.HasPrefix(string(text), `y\x,`) {
		t.Errorf("the other output begins %.20q, %v", text, err)
	}
}

// endless is a stream of readings that never ends.
type endless struct{ n int }

func (e *endless) Read(b []byte) (int, error) {
	text := b[:0]
	for len(text)+40 < len(b) {
		text = fmt.Appendf(text, "%d %d %d\n", e.n, e.n*7919%100003, e.n%97)
		e.n++
	}
	return len(text), nil
}

// A stream that never ends stops at the memory limit, with its status and the
// number, and without having taken much more.
func TestEndlessInputIsRefused(t *testing.T) {
	dir := workshop(t)
	cmd, words := start(t, dir, &endless{}, "grid", "--cell", "1", "--out", "out.csv", "--memory", "100MB")
	cmd.Wait()
	if got := cmd.ProcessState.ExitCode(); got != 4 {
		t.Errorf("exit status %d, want 4\n%s", got, words)
	}
	if !strings.Contains(words.String(), "reading standard input, after") || !strings.Contains(words.String(), "expected to fit 95.4MiB") {
		t.Errorf("says %q", words)
	}
	if usage, ok := cmd.ProcessState.SysUsage().(*syscall.Rusage); ok && runtime.GOOS == "linux" && usage.Maxrss > 300<<10 {
		t.Errorf("took %d KiB under a limit of 100 MB", usage.Maxrss)
	}
	wantOld(t, dir)
}
