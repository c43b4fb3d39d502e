package outfile

import (
	"errors"
	"fmt"
	"path/filepath"
	"syscall"
	"testing"
)

// smallDisk mounts 64 KiB of memory as a file system.
func smallDisk(t *testing.T) string {
	dir := t.TempDir()
	if err := syscall.Mount("tmpfs", dir, "tmpfs", 0, "size=64k"); err != nil {
		t.Skipf("mounting a small file system needs root: %v", err)
	}
	t.Cleanup(func() {
		if err := syscall.Unmount(dir, 0); err != nil {
			t.Error(err)
		}
	})
	return dir
}

func TestFullDiskKeepsTheOldFile(t *testing.T) {
	dir := smallDisk(t)
	path := filepath.Join(dir, "out.raw")
	write(t, path, "old")
	for _, n := range []int{100 << 10, 3 * bufferBytes} { // full at Commit, and while writing
		f := create(t, path, Options{})
		_, err := f.Write(make([]byte, n))
		if err == nil {
			err = f.Commit()
		} else if err2 := f.Commit(); err2 == nil {
			t.Errorf("%d bytes: Commit succeeds after %v", n, err)
		}
		if !errors.Is(err, syscall.ENOSPC) || err.Error() != "write "+path+": no space left on device" {
			t.Errorf("%d bytes: error %v", n, err)
		}
		if names(t, dir) != "out.raw" || read(t, path) != "old" {
			t.Errorf("%d bytes: the folder holds %q", n, names(t, dir))
		}
	}
}

func TestFullDiskKeepsTheWholeSet(t *testing.T) {
	dir := smallDisk(t)
	write(t, filepath.Join(dir, "out.raw"), "old")
	write(t, filepath.Join(dir, "out.raw.json"), "old")
	var s Set
	side, err := s.Create(filepath.Join(dir, "out.raw.json"), Options{})
	if err != nil {
		t.Fatal(err)
	}
	fmt.Fprint(side, "new")
	data, err := s.Create(filepath.Join(dir, "out.raw"), Options{RenameLast: true})
	if err != nil {
		t.Fatal(err)
	}
	data.Write(make([]byte, 100<<10))
	if err := s.Commit(); !errors.Is(err, syscall.ENOSPC) {
		t.Errorf("error %v", err)
	}
	if names(t, dir) != "out.raw out.raw.json" || read(t, filepath.Join(dir, "out.raw")) != "old" || read(t, filepath.Join(dir, "out.raw.json")) != "old" {
		t.Errorf("the folder holds %q", names(t, dir))
	}
}
