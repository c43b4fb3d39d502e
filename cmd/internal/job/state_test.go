package job

import (
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"testing"
)

// What was added is there again, whatever a kill left at the end of the file.
func TestStateSurvivesAKill(t *testing.T) {
	path := filepath.Join(t.TempDir(), "q.state")
	s, err := OpenState(path)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range []Entry{{"a", "1", json.RawMessage(`{"x":1}`)}, {"b", "1", json.RawMessage(`{}`)}, {"a", "2", json.RawMessage(`{"x":2}`)}} {
		if err := s.Add(e); err != nil {
			t.Fatal(err)
		}
	}
	if err := s.Close(); err != nil {
		t.Fatal(err)
	}
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for cut := range whole {
		if err := os.WriteFile(path, whole[:cut], 0o666); err != nil {
			t.Fatal(err)
		}
		again, err := OpenState(path)
		if err != nil {
			t.Fatalf("cut at %d: %v", cut, err)
		}
		if e, ok := again.Done("a"); ok && e.Key == "2" {
			t.Errorf("cut at %d of %d: the last entry is there", cut, len(whole))
		}
	}
	if err := os.WriteFile(path, append(whole, `{"step":"c","ke`...), 0o666); err != nil {
		t.Fatal(err)
	}
	again, err := OpenState(path)
	if err != nil {
		t.Fatal(err)
	}
	if e, _ := again.Done("a"); e.Key != "2" || string(e.Stable) != `{"x":2}` {
		t.Errorf("entry a is %+v", e)
	}
	if _, ok := again.Done("c"); ok {
		t.Error("half an entry counts")
	}
	// The next entry does not run into the half one.
	if err := again.Add(Entry{"d", "1", json.RawMessage(`{}`)}); err != nil {
		t.Fatal(err)
	}
	again.Close()
	last, err := OpenState(path)
	if err != nil {
		t.Fatal(err)
	}
	for _, step := range []string{"a", "b", "d"} {
		if _, ok := last.Done(step); !ok {
			t.Errorf("step %s is lost", step)
		}
	}
}

// A file of something else is not overwritten.
func TestStateOfSomethingElse(t *testing.T) {
	path := filepath.Join(t.TempDir(), "q.state")
	if err := os.WriteFile(path, []byte("my notes\n"), 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := OpenState(path); !errors.Is(err, ErrNotState) {
		t.Errorf("error is %v", err)
	}
}
