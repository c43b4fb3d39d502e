//go:build unix

package outfile

import (
	"errors"
	"io/fs"
	"os"
	"syscall"
)

// alive reports whether a process has the number pid. One that we may not signal lives.
func alive(pid int) bool {
	err := syscall.Kill(pid, 0)
	return err == nil || !errors.Is(err, syscall.ESRCH)
}

// keepOwner gives file the owner of the file it replaces, where the system allows it.
func keepOwner(file *os.File, replaced fs.FileInfo) {
	if st, ok := replaced.Sys().(*syscall.Stat_t); ok {
		if int(st.Uid) != os.Geteuid() || int(st.Gid) != os.Getegid() {
			// Only root may give a file away; for others the file becomes theirs, as with any program that replaces files.
			_ = file.Chown(int(st.Uid), int(st.Gid))
		}
	}
}

// syncFolder asks for the new name to be put on the disk. Some file systems refuse that for folders; the file is whole all the same.
func syncFolder(dir string) {
	d, err := os.Open(dir)
	if err != nil {
		return
	}
	defer d.Close()
	_ = d.Sync()
}

func brokenPipe(err error) bool { return errors.Is(err, syscall.EPIPE) }
