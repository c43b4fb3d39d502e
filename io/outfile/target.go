package outfile

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// TargetError says that a path cannot be an output.
type TargetError struct {
	Path     string
	Seen     string // "a folder", "a device", ...
	Expected string
}

func (e *TargetError) Error() string {
	path := e.Path
	if path == "" {
		path = `""`
	}
	return fmt.Sprintf("%s: is %s: expected %s", path, e.Seen, e.Expected)
}

// open resolves the path, removes leftovers of dead runs and creates the temporary file.
func (f *File) open() error {
	target, err := resolve(f.path)
	if err != nil {
		return err
	}
	info, err := os.Stat(target)
	switch {
	case errors.Is(err, fs.ErrNotExist):
	case err != nil:
		return naming("create", f.path, err)
	default:
		if seen := notAFile(info.Mode()); seen != "" {
			return &TargetError{Path: f.path, Seen: seen, Expected: "a file, or - for standard output"}
		}
		// A rename needs no permission to write the file itself; whoever took that away meant to keep it.
		writable, err := os.OpenFile(target, os.O_WRONLY, 0)
		if err != nil {
			return naming("create", f.path, err)
		}
		writable.Close()
		f.replaced = info
	}
	f.target, f.sink.path = target, f.path
	return register(f)
}

// notAFile says what else a mode is.
func notAFile(m fs.FileMode) string {
	switch {
	case m.IsRegular():
		return ""
	case m.IsDir():
		return "a folder"
	case m&fs.ModeDevice != 0:
		return "a device"
	case m&fs.ModeNamedPipe != 0:
		return "a named pipe"
	case m&fs.ModeSocket != 0:
		return "a socket"
	}
	return "no regular file"
}

// resolve follows symbolic links at the end of path, also to a file that does not exist yet, and returns an absolute path:
// a later change of the working folder must not move the output.
func resolve(path string) (string, error) {
	if path == "" {
		return "", &TargetError{Path: path, Seen: "an empty path", Expected: "a file, or - for standard output"}
	}
	if os.IsPathSeparator(path[len(path)-1]) {
		return "", &TargetError{Path: path, Seen: "a folder", Expected: "a file, or - for standard output"}
	}
	target, err := filepath.Abs(path)
	if err != nil {
		return "", naming("create", path, err)
	}
	const linksMax = 40 // as Linux has it
	for range linksMax {
		info, err := os.Lstat(target)
		if err != nil || info.Mode()&fs.ModeSymlink == 0 {
			// The folder's own links, so that one file has one name. A missing folder is told when the file is created.
			if dir, err := filepath.EvalSymlinks(filepath.Dir(target)); err == nil {
				target = filepath.Join(dir, filepath.Base(target))
			}
			return target, nil
		}
		to, err := os.Readlink(target)
		if err != nil {
			return "", naming("create", path, err)
		}
		if !filepath.IsAbs(to) {
			// Joined with the real folder: ".." behind a linked folder means its real parent.
			dir, err := filepath.EvalSymlinks(filepath.Dir(target))
			if err != nil {
				return "", naming("create", path, err)
			}
			to = filepath.Join(dir, to)
		}
		target = to
	}
	return "", &TargetError{Path: path, Seen: "a circle of links", Expected: "a file, or - for standard output"}
}

// keepPermissions gives the temporary file the permissions and, where allowed, the owner of the file it replaces.
func (f *File) keepPermissions() error {
	if f.replaced == nil {
		return nil
	}
	keepOwner(f.sink.file, f.replaced) // first: changing the owner may clear permission bits
	return f.sink.file.Chmod(f.replaced.Mode().Perm())
}

// SameFile returns the first of inputs that is the same file as path, by whatever names and links, and whether there is one.
// Paths that do not exist, and "-", are no file.
func SameFile(path string, inputs ...string) (input string, same bool) {
	if path == "-" {
		return "", false
	}
	out, err := os.Stat(path)
	if err != nil {
		return "", false
	}
	for _, in := range inputs {
		if in == "-" {
			continue
		}
		if info, err := os.Stat(in); err == nil && os.SameFile(out, info) {
			return in, true
		}
	}
	return "", false
}
