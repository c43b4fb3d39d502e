package job

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"
)

// A Job is what a job file says.
type Job struct {
	Name     string // of the file
	Settings []Setting
	Tasks    []Task
}

// A Task is one command to run.
type Task struct {
	Name     string
	Command  string
	Files    []Value
	Settings []Setting // those of the task alone
	At       Position
}

// A Setting is an option with its values: one, or several of an option that may be
// repeated.
type Setting struct {
	Option Option
	Values []Value
	At     Position // of the key
}

// A Value is a value as the command line would have it.
type Value struct {
	Text string
	At   Position
}

// Most bounds the size of a job file: a person or a small script writes it.
const Most = 4 << 20

// Decode reads a job file (TOML). All errors of one file come together, as Errors;
// what is no TOML, or says a key twice, ends the reading.
func Decode(name string, data []byte, v *Vocabulary) (*Job, error) {
	if len(data) > Most {
		return nil, Errors{{File: name, Seen: fmt.Sprintf("%d bytes", len(data)), Expected: fmt.Sprintf("at most %d", Most)}}
	}
	d := decoder{name: name, data: data, v: v, job: &Job{Name: name}}
	// The library checks the grammar and that nothing is said twice; its syntax tree
	// has the places of what is said.
	if err := toml.Unmarshal(data, &map[string]any{}); err != nil {
		e := &Error{File: name, Seen: strings.TrimPrefix(err.Error(), "toml: "), Expected: "TOML"}
		if at, ok := err.(*toml.DecodeError); ok {
			line, column := at.Position()
			e.At = d.inCharacters(line, column)
			e.Key = strings.Join(at.Key(), ".")
		}
		return nil, Errors{e}
	}
	d.parser.Reset(data)
	d.read()
	d.finish()
	if len(d.errors) > 0 {
		return nil, d.errors
	}
	return d.job, nil
}

type decoder struct {
	name   string
	data   []byte
	v      *Vocabulary
	job    *Job
	errors Errors
	parser unstable.Parser

	table   string // settings, task, or nothing
	pending []pair // of the task that is being read, until its command is known
	task    *Task
}

// pair is a key with its value.
type pair struct {
	key   string
	at    Position
	value literal
}

// literal is a value of TOML, taken out of the syntax tree, which is used again.
type literal struct {
	kind  unstable.Kind
	text  string
	at    Position
	items []literal
}

func (d *decoder) fail(at Position, key, seen, expected, near string) {
	d.errors = append(d.errors, &Error{d.name, at, key, seen, expected, near})
}

func (d *decoder) read() {
	for d.parser.NextExpression() {
		n := d.parser.Expression()
		switch n.Kind {
		case unstable.Table, unstable.ArrayTable:
			d.endTask()
			key, at := d.key(n)
			d.table = key
			switch {
			case n.Kind == unstable.Table && key == "settings":
			case n.Kind == unstable.ArrayTable && key == "task":
				d.task = &Task{At: at}
			default:
				d.table = "unknown"
				near := ""
				if key == "task" || key == "settings" {
					near = map[string]string{"task": "[[task]]", "settings": "[settings]"}[key]
				} else if name := Nearest(key, []string{"settings", "task"}); name != "" {
					near = map[string]string{"task": "[[task]]", "settings": "[settings]"}[name]
				}
				d.fail(at, key, fmt.Sprintf("table %q", key), "[settings] once and [[task]] for every task", near)
			}
		case unstable.KeyValue:
			d.pair(n)
		}
	}
	d.endTask()
}

// pair notes a key with its value.
func (d *decoder) pair(n *unstable.Node) {
	key, at := d.key(n)
	p := pair{key, at, d.literal(n.Value(), at)}
	switch d.table {
	case "settings":
		d.setting(p)
	case "task":
		d.pending = append(d.pending, p)
	case "":
		if key == "settings" || key == "task" {
			d.fail(at, key, "key "+key, "the tables [settings] and [[task]]", "")
			return
		}
		d.fail(at, key, fmt.Sprintf("key %q before any table", key), "[settings] or [[task]] above it", "")
	}
}

// setting takes a key of the settings, which some command has to know.
func (d *decoder) setting(p pair) {
	known := d.v.Options()
	o, ok := find(known, p.key)
	if !ok {
		d.unknown(p, known, nil)
		return
	}
	if s, ok := d.values(o, p); ok {
		d.job.Settings = append(d.job.Settings, s)
	}
}

func find(list []Option, name string) (Option, bool) {
	for _, o := range list {
		if o.Name == name {
			return o, true
		}
	}
	return Option{}, false
}

func (d *decoder) unknown(p pair, known []Option, others []string) {
	names := slices.Clone(others)
	for _, o := range known {
		names = append(names, o.Name)
	}
	d.fail(p.at, p.key, fmt.Sprintf("key %q", p.key), "a long option of the command without its hyphens", Nearest(p.key, names))
}

// endTask makes a task of its pairs: now its command is known, wherever it stood.
func (d *decoder) endTask() {
	t, pairs := d.task, d.pending
	d.task, d.pending = nil, nil
	if t == nil {
		return
	}
	var command Command
	known := false
	for _, p := range pairs {
		if p.key != "command" {
			continue
		}
		text, ok := d.text(p, "the name of a command")
		if !ok {
			return
		}
		if command, known = d.v.Command(text); !known {
			var names []string
			for _, c := range d.v.Commands {
				names = append(names, c.Name)
			}
			d.fail(p.value.at, p.key, fmt.Sprintf("command %q", text), "one of "+strings.Join(names, ", "), Nearest(text, names))
			return
		}
		t.Command = text
	}
	if !known {
		d.fail(t.At, "task", "a task without a command", `command = "grid" or another`, "")
		return
	}
	for _, p := range pairs {
		switch p.key {
		case "command":
		case "name":
			if text, ok := d.text(p, "a name"); ok {
				if text == "" {
					d.fail(p.value.at, p.key, `name ""`, "a name", "")
				}
				t.Name = text
			}
		case "files":
			t.Files = d.files(p)
		default:
			o, ok := command.Option(p.key)
			if !ok {
				d.unknown(p, command.Options, taskKeys)
				continue
			}
			if s, ok := d.values(o, p); ok {
				t.Settings = append(t.Settings, s)
			}
		}
	}
	d.job.Tasks = append(d.job.Tasks, *t)
}

// text returns a value that has to be a text.
func (d *decoder) text(p pair, expected string) (string, bool) {
	if p.value.kind != unstable.String {
		d.fail(p.value.at, p.key, p.key+" = "+p.value.shown(), expected+" as text in quotes", "")
		return "", false
	}
	return p.value.text, true
}

// files returns one name or a list.
func (d *decoder) files(p pair) []Value {
	list := []literal{p.value}
	if p.value.kind == unstable.Array {
		list = p.value.items
	}
	var values []Value
	for _, l := range list {
		if l.kind != unstable.String || l.text == "" {
			d.fail(l.at, p.key, "files: "+l.shown(), "file names as text in quotes", "")
			continue
		}
		values = append(values, Value{l.text, l.at})
	}
	return values
}

// finish looks at the job as a whole: there are tasks, each has a name of its own.
func (d *decoder) finish() {
	if len(d.errors) > 0 {
		return
	}
	if len(d.job.Tasks) == 0 {
		d.fail(Position{}, "", "no task", "at least one [[task]]", "")
	}
	at := map[string]int{}
	for i := range d.job.Tasks {
		t := &d.job.Tasks[i]
		if t.Name == "" {
			t.Name = "task " + strconv.Itoa(i+1)
		}
		if first, twice := at[t.Name]; twice {
			d.fail(t.At, "name", fmt.Sprintf("task %q", t.Name), fmt.Sprintf("a name of its own: the task in line %d has it", d.job.Tasks[first].At.Line), "")
		}
		at[t.Name] = i
	}
}

// key returns the dotted key of a node, and where it stands.
func (d *decoder) key(n *unstable.Node) (key string, at Position) {
	var names []string
	for it := n.Key(); it.Next(); {
		if len(names) == 0 {
			at = d.at(it.Node().Raw)
		}
		names = append(names, string(it.Node().Data))
	}
	return strings.Join(names, "."), at
}

// at returns where a piece of the text begins.
func (d *decoder) at(r unstable.Range) Position {
	start := d.parser.Shape(r).Start
	return d.inCharacters(start.Line, start.Column)
}

// inCharacters counts a column in characters rather than bytes.
func (d *decoder) inCharacters(line, column int) Position {
	text := d.data
	for n := 1; n < line; n++ {
		i := slices.Index(text, '\n')
		if i < 0 {
			return Position{line, column}
		}
		text = text[i+1:]
	}
	if column < 1 || column-1 > len(text) {
		return Position{line, column}
	}
	return Position{line, utf8.RuneCount(text[:column-1]) + 1}
}

// literal copies a value. One whose place the tree does not tell is placed at its key.
func (d *decoder) literal(n *unstable.Node, near Position) literal {
	l := literal{kind: n.Kind, text: string(n.Data), at: near}
	if n.Raw.Length > 0 {
		l.at = d.at(n.Raw)
	}
	if n.Kind == unstable.Array {
		for it := n.Children(); it.Next(); {
			l.items = append(l.items, d.literal(it.Node(), l.at))
		}
	}
	return l
}

// shown writes a value for messages.
func (l *literal) shown() string {
	switch l.kind {
	case unstable.String:
		return strconv.Quote(short(l.text))
	case unstable.Array:
		return "a list"
	case unstable.InlineTable:
		return "a table"
	}
	return short(l.text)
}

func short(s string) string {
	const most = 60
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	return string([]rune(s)[:most]) + "..."
}
