package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"runtime/metrics"
	"strings"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/io/readings"
)

// standardInput is what messages call it.
const standardInput = "standard input"

// An input is a file to read: its name on the command line and how to open it.
type input struct {
	readings.Source
	// path is the file on the disk, empty for standard input and samples.
	path string
	file *record.File // what the run record says of it
}

// inputs turns the arguments of a command into inputs; without any it is standard
// input.
func (p *program) inputs(files []string) ([]*input, error) {
	if len(files) == 0 {
		if f, ok := p.in.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
			return nil, status.Usage(errors.New("no file named, and standard input is a terminal: expected FILE, or readings through a pipe"),
				"isofacet samples lists files to try")
		}
		files = []string{"-"}
	}
	var list []*input
	for _, name := range files {
		in, err := p.input(name)
		if err != nil {
			return nil, err
		}
		list = append(list, in)
	}
	return list, p.announceReading(list)
}

// input returns the input of one name. That there is no such file shows here, not
// after the work on the files before it. A file that was named before, whatever
// for, is refused: its readings would count twice, and standard input comes once.
func (p *program) input(name string) (*input, error) {
	in := &input{file: &record.File{Name: name}}
	switch {
	case name == "-":
		in.Source = readings.Source{Name: standardInput, Open: func() (io.ReadCloser, error) { return io.NopCloser(p.in), nil }}
	case strings.HasPrefix(name, samplePrefix):
		data, err := readSample(strings.TrimPrefix(name, samplePrefix))
		if err != nil {
			return nil, err
		}
		in.Source = readings.FromBytes(name, data)
	default:
		info, err := os.Stat(name)
		if err != nil {
			return nil, fileError(name, err)
		}
		if info.IsDir() {
			return nil, status.With(status.NotFinished, fmt.Errorf("%s: is a folder: expected a file", name), "name the files in it: "+name+"/*")
		}
		in.path = name
		in.Source = readings.Source{Name: name, Size: info.Size(), Open: func() (io.ReadCloser, error) { return os.Open(name) }}
	}
	for _, other := range p.opened {
		if sameInput(in, other) {
			if p.again && other.file.Name != "-" {
				return other, nil
			}
			return nil, status.Usage(fmt.Errorf("%q: named twice: expected every input once", name),
				"a reading counts once; standard input can be read once")
		}
	}
	p.guard(&in.Source, in.file)
	p.opened = append(p.opened, in)
	p.recordInput(in)
	return in, nil
}

// fileError says in our words why a file cannot be read.
func fileError(name string, err error) error {
	if errors.Is(err, fs.ErrNotExist) {
		return status.With(status.NotFinished, fmt.Errorf("%s: no such file: expected a file to read", name),
			"isofacet samples lists files to try; - is standard input")
	}
	var path *fs.PathError
	if errors.As(err, &path) {
		err = path.Err
	}
	return status.With(status.NotFinished, fmt.Errorf("%s: %w: expected a file to read", name, err))
}

// sameInput reports whether two inputs are one file, by whatever name.
func sameInput(a, b *input) bool {
	if a.path == "" || b.path == "" {
		return a.file.Name == b.file.Name
	}
	infoA, errA := os.Stat(a.path)
	infoB, errB := os.Stat(b.path)
	return errA == nil && errB == nil && os.SameFile(infoA, infoB)
}

// announceReading states what large files will need, by the length of their first
// lines. It refuses nothing: how many of the lines are used is not known yet, and
// guard stops what really fills the memory.
func (p *program) announceReading(list []*input) error {
	var size, rows int64
	for _, in := range list {
		if in.path == "" || in.Size == 0 {
			continue
		}
		f, err := os.Open(in.path)
		if err != nil {
			return fileError(in.path, err)
		}
		head := make([]byte, 1<<16)
		n, err := io.ReadFull(f, head)
		f.Close()
		if err != nil && err != io.ErrUnexpectedEOF {
			return fileError(in.path, err)
		}
		lines := max(bytes.Count(head[:n], []byte{'\n'}), 1)
		size += in.Size
		rows += in.Size / int64(n) * int64(lines)
	}
	need := uint64(rows) * bytesReading
	if need > p.budget.Bytes/largeShare {
		p.report.Note(fmt.Sprintf("memory: %v of text hold some %d lines; a surface of all of them needs about %v of %v",
			option.Size(size), rows, option.Size(need), option.Size(p.budget.Bytes)), "need_bytes", need, "limit_bytes", p.budget.Bytes)
	}
	return nil
}

// guard has the source hashed for the run record, and stopped when what was read
// fills the memory that the run may use: nobody knows the size of what comes
// through a pipe before it has come.
func (p *program) guard(s *readings.Source, file *record.File) {
	open := s.Open
	name := s.Name
	s.Open = func() (io.ReadCloser, error) {
		r, err := open()
		if err != nil {
			return nil, err
		}
		if p.rec != nil {
			r = file.Reader(r)
		}
		return &guarded{ReadCloser: r, name: name, budget: p.budget}, nil
	}
}

// guarded looks at the memory in use every lookEvery bytes.
type guarded struct {
	io.ReadCloser
	name   string
	budget memory.Budget
	read   int64
	looked int64
}

// lookEvery is often enough to notice before the memory is gone, since a byte of
// text becomes at most some ten bytes of readings.
const lookEvery = 8 << 20

func (g *guarded) Read(b []byte) (int, error) {
	n, err := g.ReadCloser.Read(b)
	g.read += int64(n)
	if g.read-g.looked >= lookEvery {
		g.looked = g.read
		if used := heapInUse(); used > g.budget.Bytes {
			return n, &memory.TooBig{Work: fmt.Sprintf("reading %s, after %d bytes,", g.name, g.read), Need: used, Budget: g.budget}
		}
	}
	return n, err
}

// heapInUse returns the bytes of the Go heap that are in use, garbage that is not
// collected yet among them. The runtime collects harder near the budget, so above
// it there is next to no garbage.
func heapInUse() uint64 {
	sample := []metrics.Sample{{Name: "/memory/classes/heap/objects:bytes"}}
	metrics.Read(sample)
	return sample[0].Value.Uint64()
}

// paths returns the files on the disk that the run reads.
func (p *program) paths() []string {
	var names []string
	for _, in := range p.opened {
		if in.path != "" {
			names = append(names, in.path)
		}
	}
	return names
}

// noArguments refuses arguments where a command takes none.
func noArguments(cmd *cobra.Command, args []string) error {
	if len(args) > 0 {
		return status.Usage(fmt.Errorf("%q: %s takes no files: expected options only", args[0], cmd.CommandPath()), cmd.CommandPath()+" --help")
	}
	return nil
}

// filesOnly refuses a number among the files: it looks like a place that is asked
// for, and "no such file" would not say so.
func filesOnly(_ *cobra.Command, args []string) error {
	for _, name := range args {
		if isNegative(name) {
			return status.Usage(fmt.Errorf("%q: a number where a file belongs: expected FILE", name),
				"a place is asked for with query --at "+name, "a file of that name is ./"+name)
		}
	}
	return nil
}
