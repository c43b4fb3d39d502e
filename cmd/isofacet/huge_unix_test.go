//go:build unix

package main

import (
	"bufio"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"

	"isofacet/triangulate/pointsets"
)

// hugeMost is what inspect may take for ten million rows.
const hugeMost = 2560 << 20

// Ten million rows through inspect stay within 2.5 GiB, and nothing shows progress in
// a pipe. Only where ISOFACET_HUGE is set: it takes minutes.
func TestInspectTenMillionRows(t *testing.T) {
	if os.Getenv("ISOFACET_HUGE") == "" {
		t.Skip("ISOFACET_HUGE is not set")
	}
	const n = 10_000_000
	path := filepath.Join(t.TempDir(), "huge.csv")
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	pts := pointsets.Survey(n, 1)
	b := bufio.NewWriterSize(f, 1<<20)
	b.WriteString("id,x,y,z\n")
	for i, p := range pts {
		fmt.Fprintf(b, "%d,%.3f,%.3f,%.3f\n", i+1, p[0], p[1], 100+float64(i%1000)/1000)
	}
	if err := b.Flush(); err != nil {
		t.Fatal(err)
	}
	if err := f.Close(); err != nil {
		t.Fatal(err)
	}
	pts = nil
	cmd := exec.Command("isofacet", "inspect", path, "--same-spot", "mean", "--memory", "2500MiB")
	var words, out strings.Builder
	cmd.Stderr, cmd.Stdout = &words, &out
	if err := cmd.Run(); err != nil {
		t.Fatalf("%v\n%s", err, words.String())
	}
	peak := cmd.ProcessState.SysUsage().(*syscall.Rusage).Maxrss
	if peak < 1<<30 { // in kibibytes but on a Mac
		peak <<= 10
	}
	t.Logf("peak %d MiB, %v of processor time", peak>>20, cmd.ProcessState.UserTime()+cmd.ProcessState.SystemTime())
	if peak > hugeMost {
		t.Errorf("inspect took %d MiB at its peak, want at most %d", peak>>20, int64(hugeMost)>>20)
	}
	if !strings.Contains(out.String(), "10000000 read: ") {
		t.Errorf("inspect says:\n%s", out.String())
	}
	if strings.ContainsAny(words.String(), "\r\x1b") {
		t.Errorf("progress in a pipe:\n%q", words.String())
	}
}
