package record

import (
	"bytes"
	"encoding/json"
	"io"
	"os/exec"
	"strings"
	"testing"
)

// Hash of "abc": FIPS 180-2, appendix B.1.
const abc = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"

func TestReaderHashesWhatIsRead(t *testing.T) {
	var f File
	r := f.Reader(io.NopCloser(strings.NewReader("abc")))
	if f.SHA256 != "" {
		t.Error("a hash before anything is read")
	}
	if text, err := io.ReadAll(r); err != nil || string(text) != "abc" {
		t.Fatalf("read %q, %v", text, err)
	}
	if f.SHA256 != abc || f.Bytes != 3 {
		t.Errorf("file is %+v, want 3 bytes and %s", f, abc)
	}
}

func TestWriterHashesWhatIsWritten(t *testing.T) {
	var f File
	var out bytes.Buffer
	w, finish := f.Writer(&out)
	for _, s := range []string{"a", "bc"} {
		if _, err := io.WriteString(w, s); err != nil {
			t.Fatal(err)
		}
	}
	finish()
	if out.String() != "abc" || f.SHA256 != abc || f.Bytes != 3 {
		t.Errorf("wrote %q, file is %+v", &out, f)
	}
}

// The stable part must not hold anything of the run: two records that differ only
// in the run have the same bytes there.
func TestStablePartIsStable(t *testing.T) {
	part := func(threads int) string {
		r := New("grid")
		r.ThisRun.Threads = threads
		r.Stable.Readings = &Readings{Read: 3, Used: 3, NotUsed: []NotUsed{}}
		var b bytes.Buffer
		if err := r.Write(&b); err != nil {
			t.Fatal(err)
		}
		var whole struct{ Stable json.RawMessage }
		if err := json.Unmarshal(b.Bytes(), &whole); err != nil {
			t.Fatal(err)
		}
		return string(whole.Stable)
	}
	if a, b := part(1), part(8); a != b || len(a) < 20 {
		t.Errorf("stable parts differ:\n%s\n%s", a, b)
	}
}

// Words go through a real shell and must come back as they were.
func TestShellIsReadBack(t *testing.T) {
	words := []string{"isofacet", "grid", "my shots.csv", "--only", "code=GRD*", "it's", "", "$HOME", "a\nb", "ünï", "-5,10"}
	script := "for w in " + Shell(words) + `; do printf '%s\0' "$w"; done`
	out, err := exec.Command("sh", "-c", script).Output()
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.TrimSuffix(string(out), "\x00"); got != strings.Join(words, "\x00") {
		t.Errorf("a shell reads %q, want %q", strings.Split(got, "\x00"), words)
	}
}
