package outfile

import (
	"io/fs"
	"os"
	"path/filepath"
)

// Set is outputs that belong together: all appear, or none. The zero value is an empty set.
type Set struct {
	files []*File
}

// Create begins an output of the set; see the function Create.
func (s *Set) Create(path string, opt Options) (*File, error) {
	f, err := Create(path, opt)
	if err == nil {
		s.files = append(s.files, f)
	}
	return f, err
}

// Commit makes all outputs appear: first every file is brought to the disk, then all are renamed, in the order of their creation
// but those with RenameLast after the others. If anything fails before the first rename, nothing has changed; that includes a standard
// output whose reader has left. Outputs that were committed or aborted on their own are left out.
func (s *Set) Commit() error {
	var open []*File
	for _, f := range s.files {
		if !f.done {
			open = append(open, f)
		}
	}
	return commit(open)
}

// Abort gives up every output that is not committed.
func (s *Set) Abort() {
	for _, f := range s.files {
		f.Abort()
	}
}

// Results describes the outputs in the order of their creation.
func (s *Set) Results() []Result {
	results := make([]Result, len(s.files))
	for i, f := range s.files {
		results[i] = f.Result()
	}
	return results
}

func commit(files []*File) error {
	abort := func(err error) error {
		for _, f := range files {
			f.Abort()
		}
		return err
	}
	// Standard output last: what has gone there cannot be taken back if a disk is full.
	for _, standard := range []bool{false, true} {
		for _, f := range files {
			if f.IsStandardOutput() != standard {
				continue
			}
			if f.done {
				return abort(naming("commit", f.path, fs.ErrClosed))
			}
			if err := f.finish(); err != nil {
				return abort(err)
			}
		}
	}
	if err := renameAll(files); err != nil {
		return abort(err)
	}
	return nil
}

// renameAll holds the lock over all renames: a signal handler waits, and finds all or none.
func renameAll(files []*File) error {
	live.Lock()
	defer live.Unlock()
	folders := map[string]bool{}
	for _, last := range []bool{false, true} {
		for _, f := range files {
			if f.opt.RenameLast != last {
				continue
			}
			if !f.IsStandardOutput() {
				if !live.files[f] {
					return naming("commit", f.path, fs.ErrClosed) // RemoveTemporaries came first
				}
				if err := os.Rename(f.temp, f.target); err != nil {
					return naming("write", f.path, err)
				}
				forget(f)
				folders[filepath.Dir(f.target)] = true
			}
			f.done = true
		}
	}
	for dir := range folders {
		syncFolder(dir)
	}
	return nil
}
