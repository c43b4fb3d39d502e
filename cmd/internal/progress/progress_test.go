package progress

import (
	"bytes"
	"os"
	"strings"
	"sync"
	"testing"
	"time"
)

// lockedBuffer lets the drawing goroutine and the test share a buffer.
type lockedBuffer struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (l *lockedBuffer) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.Write(p)
}

func (l *lockedBuffer) String() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.String()
}

func TestShown(t *testing.T) {
	r, w, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	defer w.Close()
	for _, row := range []struct {
		mode Mode
		want bool
	}{{Auto, false}, {Always, true}, {Never, false}} {
		if got := Shown(row.mode, w); got != row.want {
			t.Errorf("Shown(%s, a pipe) = %v, want %v", row.mode, got, row.want)
		}
	}
}

func TestHiddenDisplayWritesOnlyWords(t *testing.T) {
	var out lockedBuffer
	d := New(&out, false)
	report, finish := d.Stage("reading")
	if report != nil {
		t.Error("a hidden display asks the work to count")
	}
	d.Write([]byte("one line\n"))
	finish()
	d.Close()
	if got := out.String(); got != "one line\n" {
		t.Errorf("wrote %q, want only the line", got)
	}
}

func TestShortWorkDrawsNothing(t *testing.T) {
	var out lockedBuffer
	d := New(&out, true)
	report, finish := d.Stage("reading")
	report(10, 10)
	finish()
	d.Close()
	if got := out.String(); got != "" {
		t.Errorf("wrote %q, want nothing", got)
	}
}

func TestLongWorkDrawsItsNameAndShare(t *testing.T) {
	var out lockedBuffer
	d := New(&out, true)
	d.start = time.Now().Add(-time.Second)
	report, finish := d.Stage("triangulating")
	var wg sync.WaitGroup
	for range 4 {
		wg.Go(func() {
			for i := range 10 {
				report(i*batch, 20*batch)
			}
		})
	}
	wg.Wait()
	report(10*batch, 20*batch)
	time.Sleep(400 * time.Millisecond) // more than two of the library's refreshes
	d.Write([]byte("a word in between\n"))
	if !strings.HasSuffix(out.String(), "a word in between\n") {
		t.Errorf("drew %q, want the word at once, at the end", out.String())
	}
	report(10*batch, 20*batch)
	time.Sleep(400 * time.Millisecond)
	finish()
	d.Close()
	d.Write([]byte("after\n"))
	got := out.String()
	for _, want := range []string{"triangulating", "50 %", "a word in between", "after\n"} {
		if !strings.Contains(got, want) {
			t.Errorf("drew %q, want %q in it", got, want)
		}
	}
}

// Work that does not count shows its name, and the next stage has none of it.
func TestLongWorkThatDoesNotCountDrawsItsName(t *testing.T) {
	var out lockedBuffer
	d := New(&out, true)
	d.start = time.Now().Add(-time.Second)
	_, finish := d.Stage("looking")
	time.Sleep(delay + 400*time.Millisecond)
	finish()
	if got := out.String(); !strings.Contains(got, "looking") || !strings.Contains(got, "0 s") {
		t.Errorf("drew %q, want the name and the time", got)
	}
	_, finish = d.Stage("short")
	finish()
	before := out.String()
	time.Sleep(delay + 300*time.Millisecond)
	if got := out.String(); got != before {
		t.Errorf("drew %q after the end", got[len(before):])
	}
	d.Close()
}

func TestThousands(t *testing.T) {
	for n, want := range map[int64]string{0: "0", 7: "7", 999: "999", 1000: "1 000", 1234567: "1 234 567"} {
		if got := thousands(n); got != want {
			t.Errorf("thousands(%d) = %q, want %q", n, got, want)
		}
	}
}
