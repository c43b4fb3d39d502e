package tour

import (
	"bytes"
	"flag"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"sync"
	"testing"
)

var update = flag.Bool("update", false, "write what the program prints into README.md")

const (
	root = "../../.."
	page = root + "/README.md"
)

// fence is one fenced block of a Markdown page.
type fence struct {
	kind       string // console, go, sh
	start, end int    // byte range of what is between the fences
}

// fences finds the blocks of a page.
func fences(text string) []fence {
	var out []fence
	open := -1
	at := 0
	for line := range strings.SplitAfterSeq(text, "\n") {
		mark, isFence := strings.CutPrefix(strings.TrimRight(line, "\n"), "```")
		switch {
		case !isFence:
		case open < 0:
			out = append(out, fence{kind: mark, start: at + len(line)})
			open = len(out) - 1
		default:
			out[open].end = at
			open = -1
		}
		at += len(line)
	}
	return out
}

// step is a command of a console block with what the page says it prints.
type step struct{ command, output string }

// steps takes a console block apart. Every command begins with "$ "; further
// lines of it begin with "> ", as a shell shows them.
func steps(block string) ([]step, error) {
	var out []step
	for line := range strings.SplitAfterSeq(block, "\n") {
		if command, ok := strings.CutPrefix(line, "$ "); ok {
			out = append(out, step{command: command})
			continue
		}
		if len(out) == 0 {
			if line != "" {
				return nil, fmt.Errorf("%q stands before the first command", line)
			}
			continue
		}
		s := &out[len(out)-1]
		if more, ok := strings.CutPrefix(line, "> "); ok && s.output == "" {
			s.command += more
		} else {
			s.output += line
		}
	}
	return out, nil
}

// shown returns the command as a block shows it.
func (s step) shown() string {
	lines := strings.SplitAfter(strings.TrimSuffix(s.command, "\n"), "\n")
	return "$ " + strings.Join(lines, "> ") + "\n"
}

// program returns the folder of the program, which is built once.
func program(t *testing.T) string {
	t.Helper()
	bin, err := built()
	if err != nil {
		t.Fatal(err)
	}
	return bin
}

var built = sync.OnceValues(func() (string, error) {
	bin := filepath.Join(scratch, "bin")
	build := exec.Command("go", "build", "-o", bin+string(filepath.Separator), "./cmd/isofacet")
	build.Dir = root
	if out, err := build.CombinedOutput(); err != nil {
		return "", fmt.Errorf("go build: %w\n%s", err, out)
	}
	return bin, nil
})

// scratch lives as long as the tests of this package.
var scratch string

func TestMain(m *testing.M) {
	flag.Parse()
	var err error
	if scratch, err = os.MkdirTemp("", "tour"); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
	status := m.Run()
	os.RemoveAll(scratch)
	os.Exit(status)
}

func TestConsoleBlocks(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("the tour is written for a POSIX shell")
	}
	read, err := os.ReadFile(page)
	if err != nil {
		t.Fatal(err)
	}
	text := string(read)
	path := program(t) + string(os.PathListSeparator) + os.Getenv("PATH")
	folder := t.TempDir()
	var fresh strings.Builder // the page as it should be
	last, commands := 0, 0
	for _, f := range fences(text) {
		if f.kind != "console" {
			continue
		}
		list, err := steps(text[f.start:f.end])
		if err != nil {
			t.Fatal(err)
		}
		fresh.WriteString(text[last:f.start])
		for _, s := range list {
			commands++
			cmd := exec.Command("sh", "-c", s.command)
			cmd.Dir = folder
			cmd.Env = append(os.Environ(), "PATH="+path, "LC_ALL=C")
			out, err := cmd.CombinedOutput()
			if err != nil {
				t.Errorf("%s%v\n%s", s.shown(), err, out)
			}
			if !*update && string(out) != s.output {
				t.Errorf("%sprints\n%sthe page says\n%s", s.shown(), out, s.output)
			}
			fresh.WriteString(s.shown() + string(out))
		}
		last = f.end
	}
	fresh.WriteString(text[last:])
	if commands == 0 {
		t.Error("the page has no console block")
	}
	if *update && !t.Failed() && fresh.String() != text {
		if err := os.WriteFile(page, []byte(fresh.String()), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

// Every Go program of the page runs and prints what its Output comment says.
func TestGoPrograms(t *testing.T) {
	read, err := os.ReadFile(page)
	if err != nil {
		t.Fatal(err)
	}
	text, programs := string(read), 0
	for _, f := range fences(text) {
		source := text[f.start:f.end]
		if f.kind != "go" || !strings.Contains(source, "package main") {
			continue
		}
		programs++
		_, comment, ok := strings.Cut(source, "// Output:\n")
		if !ok {
			t.Fatalf("a program without an Output comment:\n%s", source)
		}
		var want strings.Builder
		for line := range strings.Lines(comment) {
			if said, ok := strings.CutPrefix(line, "// "); ok {
				want.WriteString(said)
			}
		}
		file := filepath.Join(t.TempDir(), "main.go")
		if err := os.WriteFile(file, []byte(source), 0o666); err != nil {
			t.Fatal(err)
		}
		cmd := exec.Command("go", "run", file)
		cmd.Dir = root
		var stderr bytes.Buffer
		cmd.Stderr = &stderr
		out, err := cmd.Output()
		if err != nil {
			t.Fatalf("go run: %v\n%s", err, &stderr)
		}
		if string(out) != want.String() {
			t.Errorf("the program prints\n%sthe page says\n%s", out, &want)
		}
	}
	if programs == 0 {
		t.Error("the page has no Go program")
	}
}

// The first sh block is all the set-up: the main job, then the tests.
func TestSetUpCommands(t *testing.T) {
	for n, want := range map[string]string{"1": "go run ./cmd/isofacet grid ", "2": "go test ./..."} {
		cmd := exec.Command("bash", ".ci/readme-command", n)
		cmd.Dir = root
		out, err := cmd.Output()
		if err != nil {
			t.Fatal(err)
		}
		if got := strings.TrimSpace(string(out)); !strings.HasPrefix(got+" ", want) || strings.Contains(got, "\n") {
			t.Errorf("command %s is %q, want one line that begins %q", n, got, want)
		}
	}
}

func TestSteps(t *testing.T) {
	block := "$ a --b \\\n>     c\nout\n> of a\n$ d\n"
	got, err := steps(block)
	want := []step{{"a --b \\\n    c\n", "out\n> of a\n"}, {"d\n", ""}}
	if err != nil || !slices.Equal(got, want) {
		t.Errorf("steps = %q, %v, want %q", got, err, want)
	}
	if shown := got[0].shown() + got[0].output + got[1].shown(); shown != block {
		t.Errorf("shown again as %q, want %q", shown, block)
	}
	if _, err := steps("out\n"); err == nil {
		t.Error("output before a command was taken")
	}
}

func TestFences(t *testing.T) {
	text := "a\n```console\n$ x\n```\nb\n```go\ny\n```\n"
	got := fences(text)
	if len(got) != 2 || got[0].kind != "console" || text[got[0].start:got[0].end] != "$ x\n" || got[1].kind != "go" || text[got[1].start:got[1].end] != "y\n" {
		t.Errorf("fences = %+v", got)
	}
}
