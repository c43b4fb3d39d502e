package record

import (
	"encoding/json"
	"io"
	"os"
	"runtime"
	"strings"
	"time"

	"isofacet/cmd/internal/report"
)

// A Record is what a run leaves.
type Record struct {
	Kind    string  `json:"kind"`
	Stable  Stable  `json:"stable"`
	ThisRun ThisRun `json:"this_run"`
}

// Stable is the part that depends on nothing but the program, its arguments and
// its inputs.
type Stable struct {
	Program string `json:"program"`
	Version string `json:"version"`
	Commit  string `json:"commit,omitempty"`
	Command string `json:"command"`
	Rerun   string `json:"rerun"` // for a shell
	// Arguments are the same, one by one: the command, its options and files, those
	// left out that change no result.
	Arguments []string  `json:"arguments"`
	Settings  []Setting `json:"settings"`
	Inputs    []*File   `json:"inputs"`
	Readings  *Readings `json:"readings,omitempty"`
	// Result is what the command says about its work: ranges, lattice, statistics.
	Result   any              `json:"result,omitempty"`
	Warnings []report.Warning `json:"warnings"`
	Outputs  []*File          `json:"outputs"`
	// Tasks are those of a run of several, in their order.
	Tasks []Task `json:"tasks,omitempty"`
}

// A Task is one of several commands of a run.
type Task struct {
	Name  string `json:"name"`
	State string `json:"state"` // done or failed
	// Fault is why it failed.
	Fault string `json:"fault,omitempty"`
	// Stable is the stable part of its own record, if it is done. It is kept as it
	// was written when the task was done, maybe by an earlier run.
	Stable json.RawMessage `json:"stable,omitempty"`
}

// A Setting is an option as it was in effect.
type Setting struct {
	Option string `json:"option"`
	Value  string `json:"value"`
	Given  bool   `json:"given"` // on the command line; otherwise the default
}

// A File is an input or an output.
type File struct {
	Name   string `json:"name"` // "-" is standard input or output
	Part   string `json:"part,omitempty"`
	Format string `json:"format,omitempty"`
	Layout string `json:"layout,omitempty"` // how a text was read
	Bytes  int64  `json:"bytes"`
	SHA256 string `json:"sha256"`
}

// Readings account for every reading.
type Readings struct {
	Read    int       `json:"read"`
	Used    int       `json:"used"`
	Merged  int       `json:"merged"`
	LeftOut int       `json:"left_out"`
	Refused int       `json:"refused"`
	NotUsed []NotUsed `json:"not_used"`
}

// NotUsed is a reading that the surface does not have, and why.
type NotUsed struct {
	File   string `json:"file"`
	Line   int    `json:"line"`
	ID     string `json:"id,omitempty"`
	What   string `json:"what"` // merged, left out, refused
	Reason string `json:"reason"`
}

// ThisRun is what may differ from one run to the next.
type ThisRun struct {
	Started   time.Time `json:"started"`
	Seconds   float64   `json:"seconds"`
	Folder    string    `json:"folder"`
	Arguments []string  `json:"arguments"`
	System    string    `json:"system"`
	Go        string    `json:"go"`
	Threads   int       `json:"threads"`
	Memory    string    `json:"memory_limit"`
	// Unchanged are the tasks that had nothing to do.
	Unchanged []string `json:"unchanged,omitempty"`
}

// New begins the record of a run.
func New(command string) *Record {
	folder, err := os.Getwd()
	if err != nil {
		folder = "unknown"
	}
	return &Record{
		Kind: Kind,
		Stable: Stable{
			Program: "isofacet", Command: command,
			Inputs: []*File{}, Outputs: []*File{}, Warnings: []report.Warning{},
		},
		ThisRun: ThisRun{
			Started: time.Now().UTC().Truncate(time.Millisecond), Folder: folder,
			System: runtime.GOOS + "/" + runtime.GOARCH, Go: runtime.Version(),
		},
	}
}

// Write writes the record, with the time that has passed since New.
func (r *Record) Write(w io.Writer) error {
	r.ThisRun.Seconds = time.Since(r.ThisRun.Started).Round(time.Millisecond).Seconds()
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(r)
}

// Shell puts arguments into one line that a POSIX shell takes apart again.
func Shell(arguments []string) string {
	words := make([]string, len(arguments))
	for i, a := range arguments {
		words[i] = quote(a)
	}
	return strings.Join(words, " ")
}

// quote leaves words of harmless characters alone and puts others between single
// quotes.
func quote(s string) string {
	harmless := func(r rune) bool {
		return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || strings.ContainsRune("-_./,:=+%@", r)
	}
	if s != "" && strings.IndexFunc(s, func(r rune) bool { return !harmless(r) }) < 0 {
		return s
	}
	return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'"
}
