package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path/filepath"
	"slices"
	"strings"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
)

// writing is where results go and how numbers are written.
type writing struct {
	outs     option.Outs
	format   option.Choice
	decimals option.Decimals
	record   typed
	// statement is the file for the paragraph about the method.
	statement typed
	names     map[string]string // what stands for {round} and its like

	recordPath, statementPath string // templates filled in
}

// byExtension is the word for "no format was named".
const byExtension = "by extension"

const groupOutput = "Output"

// writingOptions returns the options of every command that writes. Parts are the
// names that may stand before the equals sign of --out, formats those of --format.
func (w *writing) writingOptions(parts, formats []string) []manual.Option {
	w.outs = option.Outs{Parts: parts}
	w.format = option.NewChoice(append([]string{byExtension}, formats...)...)
	w.record = typed{form: "FILE"}
	const group = groupOutput
	out := "file to write, - for standard output"
	if len(parts) > 1 {
		out += "; PART=FILE writes one of the parts " + strings.Join(parts, ", ")
	}
	w.statement = typed{form: "FILE"}
	return []manual.Option{
		{Group: group, Name: "out", Value: &w.outs, Repeatable: true, Default: "-",
			Text: out + "; {file} in a name stands for the input's name without folder and extension, {round} for the round, {zone} for the zone"},
		{Group: group, Name: "format", Value: formatValue{&w.format}, Default: byExtension,
			Text: "format of the output"},
		{Group: group, Name: "decimals", Value: &w.decimals,
			Text: "digits after the point; auto: two more than the readings have; full: the shortest text that reads back to the same number"},
		{Group: group, Name: "record", Value: &w.record,
			Text: recordText},
		{Group: group, Name: "method-statement", Value: &w.statement,
			Text: "file for a paragraph about the method, a caption for the figure, and what they leave open"},
	}
}

// formatValue is a choice that does not offer its word for "none named".
type formatValue struct{ *option.Choice }

func (f formatValue) Set(text string) error {
	if text == byExtension {
		return &option.BadValue{Seen: text, Expected: "one of " + strings.Join(f.Words()[1:], ", ")}
	}
	if err := f.Choice.Set(text); err != nil {
		return &option.BadValue{Seen: text, Expected: "one of " + strings.Join(f.Words()[1:], ", ")}
	}
	return nil
}

func (f formatValue) Type() string { return strings.Join(f.Words()[1:], "|") }

// A destination is one output to be made.
type destination struct {
	part   string
	format string
	path   string    // "-" is standard output
	w      io.Writer // where its bytes go
	beside io.Writer // where the description goes that belongs to a raw raster

	file *outfile.File
}

// outputs are all files that a run makes. They are begun before the work, so that
// a missing folder shows at once, and appear together at its end.
type outputs struct {
	ctx               context.Context
	p                 *program
	set               outfile.Set
	list              []*destination
	record, statement *outfile.File
	// written counts the bytes of the output being written, for progress.
	written  int
	progress func(done, total int)
	// hashed has an entry for every file that the run record names.
	hashed []hashed
}

type hashed struct {
	entry  *record.File
	finish func()
}

// formatOf returns the format that a file name asks for.
type formatOf func(path string) (format string, ok bool)

// byExtensions goes by the extension, in small or capital letters.
func byExtensions(formats map[string]string) formatOf {
	return func(path string) (string, bool) {
		f, ok := formats[strings.ToLower(filepath.Ext(path))]
		return f, ok
	}
}

// destinations works out where everything goes: which part in which format to
// which file. It refuses two outputs of one name, a format that contradicts an
// extension, and {names} that stand for nothing.
func (w *writing) destinations(usual string, files []string, named formatOf, usualFormat string) ([]*destination, error) {
	outs := w.outs.List
	if len(outs) == 0 {
		outs = []option.Out{{File: "-"}}
	}
	for _, about := range []struct {
		option string
		typed
		path *string
	}{{"--record", w.record, &w.recordPath}, {"--method-statement", w.statement, &w.statementPath}} {
		var err error
		if *about.path, err = w.expand(about.option, about.text, files); err != nil {
			return nil, err
		}
	}
	asked := w.format.Word()
	taken := false
	var list []*destination
	for _, out := range outs {
		path, err := w.expand("--out", out.File, files)
		if err != nil {
			return nil, err
		}
		d := &destination{part: out.Part, path: path, format: usualFormat}
		if d.part == "" {
			d.part = usual
		}
		format, known := named(path)
		switch {
		case known && asked == byExtension:
			d.format = format
		case known && family(format) != family(asked) && len(outs) == 1:
			return nil, status.Usage(fmt.Errorf("--out %q: its extension says %s and --format says %s: expected the two to agree", out.File, format, asked),
				"leave --format out, or change the extension")
		case known && family(format) != family(asked):
			d.format = format // the format is for another of the outputs
		case asked != byExtension:
			d.format, taken = asked, true
		case path != "-":
			return nil, status.Usage(fmt.Errorf("--out %q: its extension names no format: expected one of %s", out.File, strings.Join(w.format.Words()[1:], ", ")),
				"name the format with --format")
		}
		list = append(list, d)
	}
	if asked != byExtension && !taken {
		return nil, status.Usage(fmt.Errorf("--format %s: no output takes it, every extension says otherwise: expected an output for it", asked),
			"leave --format out, or change an extension")
	}
	return list, w.distinct(list)
}

// distinct refuses two outputs of one name.
func (w *writing) distinct(list []*destination) error {
	var seen []string
	for _, d := range list {
		name := d.path
		if name != "-" {
			name = filepath.Clean(name)
		}
		if slices.Contains(seen, name) {
			return status.Usage(fmt.Errorf("--out %q: named by two outputs: expected one output a file", d.path), "give each a name of its own")
		}
		seen = append(seen, name)
	}
	return nil
}

// family is the format without its variant: raw for raw and raw-float32.
func family(format string) string {
	head, _, _ := strings.Cut(format, "-")
	return head
}

// open begins the outputs. An output that is also an input is refused.
func (p *program) open(ctx context.Context, w *writing, list []*destination, inputs []string) (*outputs, error) {
	if p.step != nil && p.step.dry {
		return nil, p.checkOutputs(w, list)
	}
	o := &outputs{ctx: ctx, p: p, list: list}
	if err := o.begin(w, inputs); err != nil {
		o.abort()
		return nil, err
	}
	return o, nil
}

func (o *outputs) begin(w *writing, inputs []string) error {
	var err error
	for _, d := range o.list {
		raw := family(d.format) == formatRaw
		if d.file, err = o.create("--out", d.path, outfile.Options{RenameLast: raw}, inputs); err != nil {
			return err
		}
		d.w = o.writer(d.file, record.File{Name: d.path, Part: d.part, Format: d.format})
		if raw && d.path != "-" {
			path := besidePath(d.path)
			f, err := o.create("--out", path, outfile.Options{}, inputs)
			if err != nil {
				return err
			}
			d.beside = o.writer(f, record.File{Name: path, Part: d.part, Format: "json"})
		}
	}
	if w.record.set && w.record.text == "-" {
		return status.Usage(errors.New(`--record "-": expected a file name: standard output is for results`), "name a file")
	}
	for _, extra := range w.extras() {
		if *extra.file(o), err = o.create(extra.option, extra.path, outfile.Options{}, inputs); err != nil {
			return err
		}
	}
	return nil
}

// create begins one file.
func (o *outputs) create(option, path string, opt outfile.Options, inputs []string) (*outfile.File, error) {
	if in, same := outfile.SameFile(path, inputs...); same {
		return nil, status.Usage(fmt.Errorf("%s %q: is the input %s as well: expected another file", option, path, in),
			"an output may not take the place of what it is made from: name another file")
	}
	opt.Stdout = o.p.out
	f, err := o.set.Create(path, opt)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, status.With(status.NotFinished, fmt.Errorf("%s %q: no such folder: expected one that exists", option, path),
			"make it first: mkdir -p "+filepath.Dir(path))
	}
	if e, ok := errors.AsType[*outfile.TargetError](err); ok {
		return nil, status.Usage(fmt.Errorf("%s %w", option, e), "give every output a file name of its own; - is standard output")
	}
	return f, err
}

// writer returns f, hashed on the way if the run is recorded.
func (o *outputs) writer(f *outfile.File, entry record.File) io.Writer {
	w := io.Writer(&watched{f, o})
	if o.p.rec == nil {
		return w
	}
	e := &entry
	w, finish := e.Writer(w)
	o.hashed = append(o.hashed, hashed{e, finish})
	return w
}

// watched is a writer that ends with the run and shows how far it has come: a
// format need not look out for signals, nor count.
type watched struct {
	io.Writer
	o *outputs
}

func (w *watched) Write(b []byte) (int, error) {
	if err := w.o.ctx.Err(); err != nil {
		return 0, err
	}
	n, err := w.Writer.Write(b)
	w.o.written += n
	if w.o.progress != nil {
		w.o.progress(w.o.written, 0)
	}
	return n, err
}

// abort gives up everything that is not complete.
func (o *outputs) abort() { o.set.Abort() }

// write has one destination written. Standard output is passed on at once; its
// reader leaving early ends that output and nothing else.
func (o *outputs) write(d *destination, one func(*destination) error) error {
	report, finish := o.p.display.Stage("writing bytes")
	o.written, o.progress = 0, report
	err := one(d)
	finish()
	if err == nil && d.file.IsStandardOutput() {
		err = d.file.Commit()
	}
	if err != nil && d.file.IsStandardOutput() && outfile.IsClosedPipe(err) {
		d.file.Abort()
		return nil
	}
	return err
}

// commit writes the run record and makes all files appear.
func (o *outputs) commit() error {
	if err := o.finishRecord(); err != nil {
		return err
	}
	if err := o.ctx.Err(); err != nil {
		return err
	}
	if err := o.set.Commit(); err != nil {
		return err
	}
	o.tell()
	return nil
}

// tell says what was written, and how many warnings there were.
func (o *outputs) tell() {
	for _, r := range o.set.Results() {
		if r.Path != "-" {
			o.p.report.Note(fmt.Sprintf("written: %s, %d bytes", r.Path, r.Bytes), "path", r.Path, "bytes", r.Bytes)
		}
	}
	n := len(o.p.report.Warnings())
	o.p.report.Note("warnings: "+fmt.Sprint(n), "warnings", n)
}

// recordText is what --record is, in every command.
const recordText = "file for the run record: inputs with hashes, settings, what was not used and why, ranges, warnings, outputs with hashes"
