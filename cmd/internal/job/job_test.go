package job

import (
	"bytes"
	"encoding/json"
	"strings"
	"testing"

	"github.com/pelletier/go-toml/v2"
	"github.com/santhosh-tekuri/jsonschema/v6"
	"pgregory.net/rapid"
)

// words is a small vocabulary with every kind of option.
var words = &Vocabulary{Commands: []Command{
	{"grid", []Option{
		{Name: "cell", Kind: Number, Several: true}, {Name: "columns", Kind: Text}, {Name: "lenient", Kind: Switch},
		{Name: "values-at", Kind: Words, Words: []string{"centres", "corners"}}, {Name: "out", Kind: Text, Repeatable: true},
	}},
	{"contour", []Option{
		{Name: "interval", Kind: Number}, {Name: "columns", Kind: Text}, {Name: "shift", Kind: Number, Repeatable: true},
		{Name: "out", Kind: Text, Repeatable: true},
	}},
}}

func TestDecode(t *testing.T) {
	job, err := Decode("q.toml", []byte(`# quarter
[settings]
columns = "id,x,y,z"
cell = [1_0, 2.50]

[[task]]
out = ["a.csv", "slope=b.csv"]
command = "grid"
files = "a.txt"
lenient = true
values-at = 'corners'

[[task]]
name = "lines"
command = "contour"
files = ["a.txt", "ü.txt"]
interval = 0.30
shift = [1, "2"]
`), words)
	if err != nil {
		t.Fatal(err)
	}
	var b strings.Builder
	show := func(list []Setting) {
		for _, s := range list {
			b.WriteString(" " + s.Option.Name)
			for _, v := range s.Values {
				b.WriteString("=" + v.Text)
			}
		}
		b.WriteString("\n")
	}
	show(job.Settings)
	for _, task := range job.Tasks {
		b.WriteString(task.Name + " " + task.Command)
		for _, f := range task.Files {
			b.WriteString(" <" + f.Text)
		}
		show(task.Settings)
	}
	want := ` columns=id,x,y,z cell=10,2.50
task 1 grid <a.txt out=a.csv=slope=b.csv lenient=true values-at=corners
lines contour <a.txt <ü.txt interval=0.30 shift=1=2
`
	if b.String() != want {
		t.Errorf("decoded\n%s\nwant\n%s", b.String(), want)
	}
}

// Every fault names line and column, what was seen and what was expected.
func TestFaults(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"[[task]]\ncommand = \"grid\"\nsell = 5\n", `q.toml:3:1: key "sell": expected a long option of the command without its hyphens; the nearest is cell`},
		{"[settings]\ninterwal = 1\n[[task]]\ncommand=\"grid\"\n", `q.toml:2:1: key "interwal": expected a long option of the command without its hyphens; the nearest is interval`},
		{"[[task]]\ncommand = \"grid\"\ninterval = 5\n", `q.toml:3:1: key "interval": expected a long option`},
		{"[[task]]\ncommand = \"grid\"\ncell = true\n", `q.toml:3:8: cell = true: expected a number, a list of numbers, or text in quotes`},
		{"[[task]]\ncommand = \"grid\"\ncell = [1, \"ü\"]\n", `q.toml:3:12: cell = "ü": expected a list of numbers`},
		{"[[task]]\ncommand = \"grid\"\nlenient = \"yes\"\n", `q.toml:3:11: lenient = "yes": expected true or false`},
		{"[[task]]\ncommand = \"grid\"\ncolumns = 5\n", `q.toml:3:11: columns = 5: expected text in quotes`},
		{"[[task]]\ncommand = \"grid\"\nvalues-at = \"edges\"\n", `q.toml:3:13: values-at = "edges": expected one of "centres", "corners"`},
		{"[[task]]\ncommand = \"grid\"\nout = []\n", `q.toml:3:1: out = []: expected at least one value`},
		{"[[task]]\ncommand = \"grid\"\nout = [\"ä\", 5]\n", `q.toml:3:13: out = 5: expected text in quotes, or a list of these`},
		{"[[task]]\ncommand = \"grid\"\ncell = 1\ncell = 2\n", `q.toml:4:1: `},
		{"[settings]\n[settings]\n[[task]]\ncommand = \"grid\"\n", `q.toml:2:2: `},
		{"[[task]]\ncommand = \"gird\"\n", `q.toml:2:11: command "gird": expected one of grid, contour; the nearest is grid`},
		{"[[task]]\nname = \"a\"\n", `q.toml:1:3: a task without a command`},
		{"[[task]]\ncommand = \"grid\"\nname = \"a\"\n[[task]]\nname = \"a\"\ncommand = \"grid\"\n", `q.toml:4:3: task "a": expected a name of its own: the task in line 1 has it`},
		{"[task]\ncommand = \"grid\"\n", `q.toml:1:2: table "task": expected [settings] once and [[task]] for every task; the nearest is [[task]]`},
		{"[[tsak]]\ncommand = \"grid\"\n", `q.toml:1:3: table "tsak"`},
		{"cell = 5\n", `q.toml:1:1: key "cell" before any table`},
		{"[settings]\n", `q.toml: no task: expected at least one [[task]]`},
		{"[[task]]\ncommand = \"grid\"\nfiles = [\"\"]\n", `q.toml:3:10: files: "": expected file names`},
		{"[[task]]\ncommand = \"grid\"\ncell.x = 5\n", `q.toml:3:1: key "cell.x"`},
		{"[[task]]\ncommand = grid\n", `q.toml:2:11: `},
		{"[[task]]\ncommand = \"grid\"\ncell = 0x1F\n", `q.toml:3:8: cell = 0x1F: expected a number`},
	} {
		_, err := Decode("q.toml", []byte(c.text), words)
		if err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("%q:\ngot  %v\nwant %s", c.text, err, c.want)
		}
	}
	// All faults of a file come at once.
	_, err := Decode("q.toml", []byte("[settings]\na = 1\n[[task]]\ncommand = \"grid\"\nb = 2\ncell = true\n"), words)
	if e, ok := err.(Errors); !ok || len(e) != 3 {
		t.Errorf("faults are %v, want three", err)
	}
}

// compiled returns the schema, ready to validate.
func compiled(t interface{ Fatal(...any) }, v *Vocabulary) *jsonschema.Schema {
	text, err := Schema(v)
	if err != nil {
		t.Fatal(err)
	}
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource(SchemaID, doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile(SchemaID)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// valid tells what the schema says of a document.
func valid(t interface{ Fatal(...any) }, s *jsonschema.Schema, document any) error {
	text, err := json.Marshal(document)
	if err != nil {
		t.Fatal(err)
	}
	v, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	return s.Validate(v)
}

// The schema accepts what the decoder accepts, right values and wrong ones.
func TestSchemaIsTheDecoder(t *testing.T) {
	schema := compiled(t, words)
	keys := []string{"cell", "columns", "lenient", "values-at", "out", "interval", "shift", "sell"}
	accepted, refused := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		value := rapid.OneOf(
			rapid.Just[any]("corners"), rapid.Just[any]("text"), rapid.Just[any](5), rapid.Just[any](2.5), rapid.Just[any](true),
			rapid.Just[any]([]any{1, 2}), rapid.Just[any]([]any{"a", "b"}), rapid.Just[any]([]any{}), rapid.Just[any]([]any{true}),
			rapid.Just[any](map[string]any{"x": 1}), rapid.Just[any]([]any{[]any{1}}))
		table := func(name string) map[string]any {
			m := map[string]any{}
			for range rapid.IntRange(0, 2).Draw(t, name+" keys") {
				m[rapid.SampledFrom(keys).Draw(t, "key")] = value.Draw(t, "value")
			}
			return m
		}
		doc := map[string]any{}
		if rapid.Bool().Draw(t, "settings") {
			doc["settings"] = table("settings")
		}
		var tasks []any
		for i := range rapid.IntRange(1, 2).Draw(t, "tasks") {
			task := table("task")
			if rapid.IntRange(0, 9).Draw(t, "command") > 0 {
				task["command"] = rapid.SampledFrom([]any{"grid", "contour", "contour", "gird", 5}).Draw(t, "which")
			}
			if rapid.Bool().Draw(t, "named") {
				task["name"] = []any{"a", "b"}[i]
			}
			if rapid.Bool().Draw(t, "files") {
				task["files"] = rapid.SampledFrom([]any{"f", []any{"f", "g"}, []any{}, "", 5, []any{5}}).Draw(t, "file")
			}
			tasks = append(tasks, task)
		}
		doc["task"] = tasks
		text, err := toml.Marshal(doc)
		if err != nil {
			t.Fatal(err)
		}
		// toml.Marshal writes tables in a table of a task where a value is one.
		_, decodeErr := Decode("q.toml", text, words)
		schemaErr := valid(t, schema, doc)
		if (decodeErr == nil) != (schemaErr == nil) {
			t.Fatalf("decoder says %v\nschema says %v\n%s", decodeErr, schemaErr, text)
		}
		if decodeErr == nil {
			accepted++
		} else {
			refused++
		}
	})
	if accepted < 5 || refused < 5 {
		t.Errorf("%d accepted, %d refused: expected some of both", accepted, refused)
	}
}

// No text makes the decoder panic or fail without a place in the file.
func FuzzDecode(f *testing.F) {
	f.Add("[settings]\ncell = 5\n[[task]]\ncommand = \"grid\"\nout = [\"a\", 5]\n")
	f.Add("[[task]]\ncommand = \"contour\"\n\"in\\u00fcterval\" = {x = 1}\n")
	f.Add("[[task]]\ncommand.x = 5\nfiles = [[1]]")
	f.Fuzz(func(t *testing.T, text string) {
		job, err := Decode("q.toml", []byte(text), words)
		if err == nil && len(job.Tasks) == 0 {
			t.Error("a job without tasks")
		}
		if e, ok := err.(Errors); err != nil && (!ok || len(e) == 0) {
			t.Errorf("error %v is none of ours", err)
		}
	})
}
