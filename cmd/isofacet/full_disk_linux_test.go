package main

import (
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// A disk that fills up while the raster is written keeps the old file, and holds
// nothing else afterwards.
func TestFullDiskLeavesTheOldFile(t *testing.T) {
	dir := workshop(t)
	disk := filepath.Join(dir, "disk")
	if err := os.Mkdir(disk, 0o777); err != nil {
		t.Fatal(err)
	}
	if err := syscall.Mount("tmpfs", disk, "tmpfs", 0, "size=2m"); err != nil {
		t.Skipf("mounting a small file system needs root: %v", err)
	}
	t.Cleanup(func() {
		if err := syscall.Unmount(disk, 0); err != nil {
			t.Error(err)
		}
	})
	for _, name := range []string{"out.csv", "out.raw", "out.raw.json"} {
		if err := os.WriteFile(filepath.Join(disk, name), []byte(old), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	cmd, words := start(t, dir, nil, "grid", "shots.csv", "--cell", "0.1", "--out", "disk/out.csv", "--out", "disk/out.raw")
	cmd.Wait()
	if got := cmd.ProcessState.ExitCode(); got != 1 {
		t.Errorf("exit status %d, want 1", got)
	}
	if !strings.Contains(words.String(), "no space left on device") || !strings.Contains(words.String(), "hint: the disk is full") {
		t.Errorf("says %q", words)
	}
	left, err := os.ReadDir(disk)
	if err != nil {
		t.Fatal(err)
	}
	if len(left) != 3 {
		t.Errorf("the disk holds %v, want the three old files", left)
	}
	for _, f := range left {
		if text, err := os.ReadFile(filepath.Join(disk, f.Name())); err != nil || string(text) != old {
			t.Errorf("%s holds %d bytes (%v), want the old ones", f.Name(), len(text), err)
		}
	}
}
