//go:build !unix

package outfile

import (
	"errors"
	"io/fs"
	"os"
	"syscall"
)

// alive reports whether a process has the number pid: on Windows one that has ended cannot be found.
func alive(pid int) bool {
	p, err := os.FindProcess(pid)
	if err != nil {
		return false
	}
	_ = p.Release()
	return true
}

// keepOwner: a new file belongs to whoever the folder says.
func keepOwner(*os.File, fs.FileInfo) {}

// syncFolder: folders cannot be opened for that.
func syncFolder(string) {}

func brokenPipe(err error) bool {
	const brokenPipe, noData = syscall.Errno(109), syscall.Errno(232) // ERROR_BROKEN_PIPE, ERROR_NO_DATA of Windows
	return errors.Is(err, syscall.EPIPE) || errors.Is(err, brokenPipe) || errors.Is(err, noData)
}
