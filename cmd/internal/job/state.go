package job

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"sync"
)

// An Entry is a step that is done.
type Entry struct {
	Step string `json:"step"`
	// Key is a hash of what the step is: version, command, options, files.
	Key string `json:"key"`
	// Stable is the stable part of the step's run record.
	Stable json.RawMessage `json:"stable"`
}

// A State is what earlier runs have done, and where this one notes what it does. It
// may be used by several goroutines.
type State struct {
	path string
	done map[string]Entry

	mu   sync.Mutex
	file *os.File
}

// stateHead is the first line of the file.
const stateHead = `{"kind":"isofacet job state","version":1}` + "\n"

// ErrNotState is a file that is no state.
var ErrNotState = errors.New("is no state of a job: expected one that isofacet run has written")

// OpenState reads the state of a job; a file that is not there is an empty state.
// Nothing is written before Add. A last line without its end, left by a run that was
// killed while it wrote, is passed over, and so is every line behind a damaged one:
// their steps are done again.
func OpenState(path string) (*State, error) {
	s := &State{path: path, done: map[string]Entry{}}
	data, err := os.ReadFile(path)
	if errors.Is(err, fs.ErrNotExist) {
		return s, nil
	}
	if err != nil {
		return nil, err
	}
	return s, s.read(data)
}

func (s *State) read(data []byte) error {
	if len(data) == 0 {
		return nil
	}
	rest, ok := bytes.CutPrefix(data, []byte(stateHead))
	if !ok {
		if bytes.HasPrefix([]byte(stateHead), data) {
			return nil // killed before the first line was whole
		}
		return fmt.Errorf("%s: %w", s.path, ErrNotState)
	}
	for {
		line, behind, whole := bytes.Cut(rest, []byte{'\n'})
		if !whole {
			return nil
		}
		var e Entry
		if json.Unmarshal(line, &e) != nil || e.Step == "" {
			return nil
		}
		s.done[e.Step] = e
		rest = behind
	}
}

// Done returns the entry of a step.
func (s *State) Done(step string) (Entry, bool) {
	s.mu.Lock()
	defer s.mu.Unlock()
	e, ok := s.done[step]
	return e, ok
}

// Add notes a step that is done, on the disk before it returns.
func (s *State) Add(e Entry) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.file == nil {
		if err := s.begin(); err != nil {
			return err
		}
	}
	s.done[e.Step] = e
	line, err := json.Marshal(e)
	if err != nil {
		return err
	}
	if _, err := s.file.Write(append(line, '\n')); err != nil {
		return err
	}
	return s.file.Sync()
}

// begin writes what is known anew, without what is outdated or damaged, and leaves
// the file open for more. It replaces the old file in one step.
func (s *State) begin() error {
	temp := s.path + ".new"
	f, err := os.Create(temp)
	if err != nil {
		return err
	}
	if err = s.writeAll(f); err == nil {
		err = f.Sync()
	}
	if err == nil {
		err = os.Rename(temp, s.path)
	}
	if err != nil {
		f.Close()
		os.Remove(temp)
		return err
	}
	s.file = f
	return nil
}

func (s *State) writeAll(w io.Writer) error {
	b := bytes.NewBufferString(stateHead)
	for _, e := range s.done {
		line, err := json.Marshal(e)
		if err != nil {
			return err
		}
		b.Write(append(line, '\n'))
	}
	_, err := w.Write(b.Bytes())
	return err
}

// Close closes the file.
func (s *State) Close() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.file == nil {
		return nil
	}
	err := s.file.Close()
	s.file = nil
	return err
}
