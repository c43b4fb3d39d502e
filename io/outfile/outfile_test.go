package outfile

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func read(t *testing.T, path string) string {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

func write(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

// names lists a folder, temporary files included.
func names(t *testing.T, dir string) string {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, e := range entries {
		list = append(list, e.Name())
	}
	return strings.Join(list, " ")
}

func create(t *testing.T, path string, opt Options) *File {
	t.Helper()
	f, err := Create(path, opt)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(f.Abort)
	return f
}

func TestOutputAppearsOnCommitOnly(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "out.csv")
	f := create(t, path, Options{Hash: true})
	text := strings.Repeat("x,y,z\n", 500_000) // more than the buffer
	for _, part := range []string{text[:1], text[1:1000], text[1000:]} {
		if _, err := f.WriteString(part); err != nil {
			t.Fatal(err)
		}
	}
	if _, err := os.Stat(path); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("the output is there before Commit: %v", err)
	}
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	if read(t, path) != text || names(t, dir) != "out.csv" {
		t.Errorf("the folder holds %q", names(t, dir))
	}
	sum := sha256.Sum256([]byte(text))
	if got, want := f.Result(), (Result{path, int64(len(text)), hex.EncodeToString(sum[:])}); got != want {
		t.Errorf("result %+v, want %+v", got, want)
	}
	f.Abort() // does nothing now
	if read(t, path) != text {
		t.Error("Abort after Commit changed the output")
	}
	if err := f.Commit(); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("second Commit: %v", err)
	}
	if _, err := f.Write([]byte("x")); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("Write after Commit: %v", err)
	}
}

func TestAbortKeepsTheOldFile(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "out.csv")
	write(t, path, "old")
	f := create(t, path, Options{})
	if _, err := f.WriteString("new"); err != nil {
		t.Fatal(err)
	}
	f.Abort()
	f.Abort()
	if read(t, path) != "old" || names(t, dir) != "out.csv" {
		t.Errorf("%q in %q", read(t, path), names(t, dir))
	}
	if err := f.Commit(); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("Commit after Abort: %v", err)
	}
	if read(t, path) != "old" {
		t.Error("Commit after Abort changed the file")
	}
}

func TestPermissionsAreThoseOfTheFileReplaced(t *testing.T) {
	dir := t.TempDir()
	fresh, plain := filepath.Join(dir, "fresh"), filepath.Join(dir, "plain")
	write(t, plain, "") // what the umask makes of 0666 is compared with what it makes of a plain file
	if err := os.WriteFile(plain+"2", nil, 0o666); err != nil {
		t.Fatal(err)
	}
	if err := create(t, fresh, Options{}).Commit(); err != nil {
		t.Fatal(err)
	}
	mode := func(path string) fs.FileMode {
		info, err := os.Stat(path)
		if err != nil {
			t.Fatal(err)
		}
		return info.Mode()
	}
	if mode(fresh) != mode(plain+"2") {
		t.Errorf("new file has %v, a plain one %v", mode(fresh), mode(plain+"2"))
	}
	for _, m := range []fs.FileMode{0o600, 0o640, 0o755} {
		if err := os.Chmod(plain, m); err != nil {
			t.Fatal(err)
		}
		if err := create(t, plain, Options{}).Commit(); err != nil {
			t.Fatal(err)
		}
		if mode(plain) != m {
			t.Errorf("permissions %v, want %v", mode(plain), m)
		}
	}
}

func TestLinksAreFollowed(t *testing.T) {
	dir := t.TempDir()
	if err := os.Mkdir(filepath.Join(dir, "real"), 0o755); err != nil {
		t.Fatal(err)
	}
	target := filepath.Join(dir, "real", "out.csv")
	link := filepath.Join(dir, "link.csv")
	if err := os.Symlink("real/out.csv", link); err != nil {
		t.Skipf("no symbolic links here: %v", err)
	}
	for _, text := range []string{"one", "two"} { // first the link points to nothing
		f := create(t, link, Options{})
		if _, err := f.WriteString(text); err != nil {
			t.Fatal(err)
		}
		if err := f.Commit(); err != nil {
			t.Fatal(err)
		}
		if got := read(t, target); got != text {
			t.Errorf("target holds %q, want %q", got, text)
		}
	}
	if info, err := os.Lstat(link); err != nil || info.Mode()&fs.ModeSymlink == 0 {
		t.Errorf("the link is gone: %v, %v", info, err)
	}
	// One file under two names is one output.
	create(t, link, Options{})
	var te *TargetError
	if _, err := Create(target, Options{}); !errors.As(err, &te) {
		t.Errorf("two outputs on one file: %v", err)
	}
	circle := filepath.Join(dir, "circle")
	if err := os.Symlink("circle", circle); err != nil {
		t.Fatal(err)
	}
	if _, err := Create(circle, Options{}); !errors.As(err, &te) {
		t.Errorf("a circle of links: %v", err)
	}
}

func TestRefused(t *testing.T) {
	dir := t.TempDir()
	for _, c := range []struct{ path, want string }{
		{dir, dir + ": is a folder: expected a file, or - for standard output"},
		{dir + "/", dir + "/: is a folder: expected a file, or - for standard output"},
		{"", `"": is an empty path: expected a file, or - for standard output`},
		{os.DevNull, os.DevNull + ": is a device: expected a file, or - for standard output"},
		{dir + "/none/out.csv", "create " + dir + "/none/out.csv: no such file or directory"},
	} {
		f, err := Create(c.path, Options{})
		if err == nil {
			f.Abort()
			t.Errorf("%q is accepted", c.path)
		} else if err.Error() != c.want {
			t.Errorf("got  %v\nwant %s", err, c.want)
		}
	}
	if got := names(t, dir); got != "" {
		t.Errorf("refused outputs left %q", got)
	}
}

func TestLongNames(t *testing.T) {
	dir := t.TempDir()
	for _, n := range []int{180, 181, 255} {
		path := filepath.Join(dir, strings.Repeat("n", n))
		if err := create(t, path, Options{}).Commit(); err != nil {
			t.Errorf("a name of %d bytes: %v", n, err)
		}
		if read(t, path) != "" {
			t.Errorf("a name of %d bytes holds %q", n, read(t, path))
		}
	}
}

func TestSetAppearsTogether(t *testing.T) {
	dir := t.TempDir()
	var s Set
	for _, name := range []string{"a", "b", "c"} {
		f, err := s.Create(filepath.Join(dir, name), Options{})
		if err != nil {
			t.Fatal(err)
		}
		fmt.Fprint(f, name)
	}
	if err := s.Commit(); err != nil {
		t.Fatal(err)
	}
	if names(t, dir) != "a b c" || read(t, filepath.Join(dir, "b")) != "b" || len(s.Results()) != 3 || s.Results()[2].Bytes != 1 {
		t.Errorf("%q, %+v", names(t, dir), s.Results())
	}
	if err := s.Commit(); err != nil {
		t.Errorf("nothing left to commit: %v", err)
	}

	var given Set
	if _, err := given.Create(filepath.Join(dir, "d"), Options{}); err != nil {
		t.Fatal(err)
	}
	given.Abort()
	if names(t, dir) != "a b c" {
		t.Errorf("after Abort: %q", names(t, dir))
	}
}

// failing is standard output on a full disk, say.
type failing struct{}

func (failing) Write([]byte) (int, error) { return 0, errors.New("no room") }

func TestSetAppearsNotAtAllIfOneFails(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "a"), "old")
	var s Set
	for _, path := range []string{filepath.Join(dir, "a"), "-", filepath.Join(dir, "b")} {
		f, err := s.Create(path, Options{Stdout: failing{}})
		if err != nil {
			t.Fatal(err)
		}
		fmt.Fprint(f, "new")
	}
	if err := s.Commit(); err == nil || err.Error() != "write standard output: no room" {
		t.Errorf("error %v", err)
	}
	if names(t, dir) != "a" || read(t, filepath.Join(dir, "a")) != "old" {
		t.Errorf("%q", names(t, dir))
	}
}

// P10: of two files that belong together the data file is renamed last. Its rename is made to fail; the other one must be there.
func TestDataFileIsRenamedLast(t *testing.T) {
	dir := t.TempDir()
	data, side := filepath.Join(dir, "data"), filepath.Join(dir, "data.json")
	var s Set
	if _, err := s.Create(data, Options{RenameLast: true}); err != nil {
		t.Fatal(err)
	}
	if _, err := s.Create(side, Options{}); err != nil {
		t.Fatal(err)
	}
	if err := os.MkdirAll(filepath.Join(data, "in the way"), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := s.Commit(); err == nil {
		t.Fatal("renamed over a folder")
	}
	if got := names(t, dir); got != "data data.json" {
		t.Errorf("the folder holds %q", got)
	}
}

func TestStandardOutput(t *testing.T) {
	var out bytes.Buffer
	f := create(t, "-", Options{Stdout: &out, Hash: true})
	if !f.IsStandardOutput() {
		t.Error("- is not standard output")
	}
	fmt.Fprint(f, "abc")
	if err := f.Commit(); err != nil || out.String() != "abc" {
		t.Errorf("%q, %v", out.String(), err)
	}
	// SHA-256 of "abc": FIPS 180-2, appendix B.1 (from memory).
	if got := f.Result(); got.SHA256 != "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad" {
		t.Errorf("hash %s", got.SHA256)
	}
	out.Reset()
	f = create(t, "-", Options{Stdout: &out})
	fmt.Fprint(f, "abc")
	f.Abort()
	if out.Len() != 0 {
		t.Errorf("Abort passed on %q", out.String())
	}
}

func TestClosedPipeIsRecognised(t *testing.T) {
	r, w, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	defer w.Close()
	r.Close()
	f := create(t, "-", Options{Stdout: w})
	fmt.Fprint(f, "abc")
	if err := f.Commit(); !IsClosedPipe(err) {
		t.Errorf("error %v", err)
	}
	pr, pw := io.Pipe()
	pr.Close()
	f = create(t, "-", Options{Stdout: pw})
	fmt.Fprint(f, "abc")
	if err := f.Commit(); !IsClosedPipe(err) {
		t.Errorf("error %v", err)
	}
	if IsClosedPipe(errors.New("no room")) || IsClosedPipe(nil) {
		t.Error("another error passes for a closed pipe")
	}
}

func TestRemoveTemporaries(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "a"), "old")
	a, b := create(t, filepath.Join(dir, "a"), Options{}), create(t, filepath.Join(dir, "b"), Options{})
	fmt.Fprint(a, "new")
	if got := len(strings.Fields(names(t, dir))); got != 3 {
		t.Fatalf("%d files", got)
	}
	RemoveTemporaries()
	if got := names(t, dir); got != "a" || read(t, filepath.Join(dir, "a")) != "old" {
		t.Errorf("the folder holds %q", got)
	}
	for _, f := range []*File{a, b} {
		if err := f.Commit(); !errors.Is(err, fs.ErrClosed) {
			t.Errorf("Commit afterwards: %v", err)
		}
	}
	if got := names(t, dir); got != "a" || read(t, filepath.Join(dir, "a")) != "old" {
		t.Errorf("the folder holds %q", got)
	}
}

func TestSameFile(t *testing.T) {
	dir := t.TempDir()
	in, other := filepath.Join(dir, "in.csv"), filepath.Join(dir, "other.csv")
	write(t, in, "1")
	write(t, other, "1")
	soft, hard := filepath.Join(dir, "soft.csv"), filepath.Join(dir, "hard.csv")
	if err := os.Symlink("in.csv", soft); err != nil {
		t.Skipf("no symbolic links here: %v", err)
	}
	if err := os.Link(in, hard); err != nil {
		t.Skipf("no hard links here: %v", err)
	}
	for _, path := range []string{in, soft, hard, filepath.Join(dir, ".", "x", "..", "in.csv")} {
		if got, same := SameFile(path, "-", other, filepath.Join(dir, "none"), in); !same || got != in {
			t.Errorf("SameFile(%s) = %q, %v", path, got, same)
		}
	}
	for _, path := range []string{"-", filepath.Join(dir, "none")} {
		if got, same := SameFile(path, "-", in, filepath.Join(dir, "none")); same {
			t.Errorf("SameFile(%s) = %q", path, got)
		}
	}
	if _, same := SameFile(other, in, soft); same {
		t.Error("two files with one content pass for one file")
	}
}

func BenchmarkWrite(b *testing.B) {
	dir := b.TempDir()
	chunk := make([]byte, 64<<10)
	const size = 64 << 20
	for _, c := range []struct {
		name string
		opt  Options
	}{{"plain", Options{}}, {"hash", Options{Hash: true}}} {
		b.Run(c.name+"/64MiB", func(b *testing.B) {
			b.SetBytes(size)
			for b.Loop() {
				f, err := Create(filepath.Join(dir, "out"), c.opt)
				if err != nil {
					b.Fatal(err)
				}
				for n := 0; n < size; n += len(chunk) {
					if _, err := f.Write(chunk); err != nil {
						b.Fatal(err)
					}
				}
				if err := f.Commit(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
	b.Run("floor/64MiB", func(b *testing.B) { // one plain file, without fsync and rename
		b.SetBytes(size)
		for b.Loop() {
			f, err := os.Create(filepath.Join(dir, "floor"))
			if err != nil {
				b.Fatal(err)
			}
			for n := 0; n < size; n += len(chunk) {
				if _, err := f.Write(chunk); err != nil {
					b.Fatal(err)
				}
			}
			if err := f.Close(); err != nil {
				b.Fatal(err)
			}
		}
	})
}
