package outfile

import (
	"bufio"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"hash"
	"io"
	"io/fs"
	"os"
)

// Options says how an output is written. The zero value will do.
type Options struct {
	// Hash asks for the SHA-256 of what is written.
	Hash bool
	// RenameLast marks the data file of a Set.
	RenameLast bool
	// Stdout stands for standard output where the path is "-"; nil means os.Stdout.
	Stdout io.Writer
}

// Result describes an output that was written.
type Result struct {
	Path   string // as given to Create
	Bytes  int64
	SHA256 string // lower-case hexadecimal; empty unless asked for
}

// bufferBytes is the size from which writing a file takes as long as copying memory to the system; larger buffers gained nothing.
const bufferBytes = 1 << 20

// directBytes is the size from which a write goes past the buffer: copying it there would cost more than the call.
const directBytes = 128 << 10

// File is an output being written. Its methods are for one goroutine at a time.
type File struct {
	path   string // as given
	target string // with links followed; empty for standard output
	temp   string
	opt    Options

	buf      *bufio.Writer
	sink     sink
	replaced fs.FileInfo // nil if there was no file
	done     bool        // committed or aborted
}

// sink counts, hashes and passes on what leaves the buffer, and keeps the first error.
type sink struct {
	to    io.Writer
	file  *os.File // to, unless standard output
	path  string
	bytes int64
	hash  hash.Hash
	err   error
}

func (s *sink) Write(p []byte) (int, error) {
	if s.err != nil {
		return 0, s.err
	}
	n, err := s.to.Write(p)
	s.bytes += int64(n)
	if s.hash != nil {
		s.hash.Write(p[:n])
	}
	if err != nil {
		s.err = naming("write", s.path, err)
	}
	return n, s.err
}

// Create begins an output. Nothing is seen under path before Commit. See the package comment for what is refused.
//
// Errors name path, not the temporary file: a *TargetError, or an *fs.PathError such as for a folder that does not exist.
func Create(path string, opt Options) (*File, error) {
	f := &File{path: path, opt: opt}
	if path == "-" {
		f.sink.to, f.sink.path = opt.Stdout, "standard output"
		if opt.Stdout == nil {
			f.sink.to = os.Stdout
		}
	} else if err := f.open(); err != nil {
		return nil, err
	}
	if opt.Hash {
		f.sink.hash = sha256.New()
	}
	f.buf = bufio.NewWriterSize(&f.sink, bufferBytes)
	return f, nil
}

// Path returns the path as given to Create.
func (f *File) Path() string { return f.path }

// IsStandardOutput reports whether f is standard output.
func (f *File) IsStandardOutput() bool { return f.target == "" }

// Write implements io.Writer. The first error stays: every later Write and Commit returns it.
func (f *File) Write(p []byte) (int, error) {
	if f.done {
		return 0, naming("write", f.path, fs.ErrClosed)
	}
	if len(p) >= directBytes {
		if err := f.buf.Flush(); err != nil {
			return 0, err
		}
		return f.sink.Write(p)
	}
	return f.buf.Write(p)
}

// WriteString writes the bytes of s.
func (f *File) WriteString(s string) (int, error) {
	if f.done {
		return 0, naming("write", f.path, fs.ErrClosed)
	}
	return f.buf.WriteString(s)
}

// Commit makes the output appear. If anything fails the temporary file is removed, what was under the path stays as it was, and
// the error says why. A second Commit, or one after Abort, returns an error that wraps fs.ErrClosed.
func (f *File) Commit() error {
	return commit([]*File{f})
}

// Abort gives the output up and removes the temporary file. It does nothing after Commit, so that it can be deferred.
func (f *File) Abort() {
	if f.done {
		return
	}
	f.done = true
	if !f.IsStandardOutput() {
		withdraw(f)
	}
}

// Result returns path, size and hash. They are complete after Commit.
func (f *File) Result() Result {
	r := Result{Path: f.path, Bytes: f.sink.bytes}
	if f.sink.hash != nil {
		r.SHA256 = hex.EncodeToString(f.sink.hash.Sum(nil))
	}
	return r
}

// finish brings every byte to the disk and closes the temporary file; only the rename is left then.
func (f *File) finish() error {
	if err := f.buf.Flush(); err != nil {
		return err
	}
	if f.sink.err != nil { // of a write past the buffer
		return f.sink.err
	}
	if f.IsStandardOutput() {
		return nil
	}
	if err := f.keepPermissions(); err != nil {
		return naming("write", f.path, err)
	}
	if err := f.sink.file.Sync(); err != nil {
		return naming("write", f.path, err)
	}
	if err := f.sink.file.Close(); err != nil {
		return naming("write", f.path, err)
	}
	return nil
}

// IsClosedPipe reports whether err says that the reader of a pipe has gone: the quiet end of a program that writes to one.
func IsClosedPipe(err error) bool { return errors.Is(err, io.ErrClosedPipe) || brokenPipe(err) }

// naming puts the user's path in place of the temporary file's.
func naming(op, path string, err error) error {
	var pe *fs.PathError
	var le *os.LinkError
	switch {
	case errors.As(err, &pe):
		err = pe.Err
	case errors.As(err, &le):
		err = le.Err
	}
	return &fs.PathError{Op: op, Path: path, Err: err}
}
