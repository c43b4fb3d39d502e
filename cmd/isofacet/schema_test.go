//go:build unix

package main

import (
	"bytes"
	"encoding/json"
	"maps"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/pelletier/go-toml/v2"
	"github.com/santhosh-tekuri/jsonschema/v6"

	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/record"
	"isofacet/samples"
)

// compileSchema returns a schema, ready to validate.
func compileSchema(t *testing.T, id string, text []byte) *jsonschema.Schema {
	t.Helper()
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	c.AssertFormat()
	if err := c.AddResource(id, doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile(id)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func validate(t *testing.T, s *jsonschema.Schema, text []byte) error {
	t.Helper()
	v, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	return s.Validate(v)
}

// jobSchema is the published schema with the vocabulary of the program.
func jobSchema(t *testing.T) (*jsonschema.Schema, *job.Vocabulary) {
	t.Helper()
	p := newProgram(streams{}, nil)
	p.newRoot()
	v := p.vocabulary()
	text, err := job.Schema(v)
	if err != nil {
		t.Fatal(err)
	}
	return compileSchema(t, job.SchemaID, text), v
}

// Every sample job validates.
func TestSampleJobsValidate(t *testing.T) {
	schema, v := jobSchema(t)
	n := 0
	for _, f := range samples.Files {
		if !strings.HasSuffix(f.Name, ".toml") {
			continue
		}
		n++
		text, err := samples.FS.ReadFile(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := job.Decode(f.Name, text, v); err != nil {
			t.Error(err)
		}
		if err := validate(t, schema, asJSON(t, text)); err != nil {
			t.Errorf("%s: %v", f.Name, err)
		}
	}
	if n == 0 {
		t.Error("no sample job")
	}
}

func asJSON(t *testing.T, tomlText []byte) []byte {
	t.Helper()
	var doc map[string]any
	if err := toml.Unmarshal(tomlText, &doc); err != nil {
		t.Fatal(err)
	}
	text, err := json.Marshal(doc)
	if err != nil {
		t.Fatal(err)
	}
	return text
}

// Every key of every command, in a task and in the settings: schema and decoder take
// a value of its kind, alone and in a list where it may be repeated, and refuse
// others.
func TestEveryKeyOfJobs(t *testing.T) {
	schema, v := jobSchema(t)
	right := map[job.Kind][]string{
		job.Text: {`"text"`}, job.Number: {`5`, `0.5`, `"5"`}, job.Switch: {`true`, `false`},
	}
	wrong := map[job.Kind][]string{
		job.Text: {`5`, `true`, `{x = 1}`}, job.Number: {`true`, `[true]`}, job.Switch: {`"true"`, `1`, `[true]`}, job.Words: {`"no such word"`, `5`},
	}
	keys := 0
	try := func(text string, want bool) {
		t.Helper()
		_, err := job.Decode("job.toml", []byte(text), v)
		schemaErr := validate(t, schema, asJSON(t, []byte(text)))
		if (err == nil) != want || (schemaErr == nil) != want {
			t.Errorf("want %v\ndecoder: %v\nschema: %v\n%s", want, err, schemaErr, text)
		}
	}
	for _, c := range v.Commands {
		task := "[[task]]\ncommand = \"" + c.Name + "\"\n"
		try(task+"name = \"n\"\nfiles = [\"a\", \"b\"]\n", true)
		try(task+"name = 5\n", false)
		try(task+"files = 5\n", false)
		try(task+"no-such-key = 5\n", false)
		for _, o := range c.Options {
			keys++
			good := right[o.Kind]
			if o.Kind == job.Words {
				for _, w := range o.Words {
					good = append(good, strconv.Quote(w))
				}
			}
			for _, value := range good {
				try(task+o.Name+" = "+value+"\n", true)
				try("[settings]\n"+o.Name+" = "+value+"\n"+task, true)
				try(task+o.Name+" = ["+value+"]\n", o.Repeatable || o.Several && !strings.Contains(value, `"`))
			}
			for _, value := range wrong[o.Kind] {
				try(task+o.Name+" = "+value+"\n", false)
				try("[settings]\n"+o.Name+" = "+value+"\n"+task, false)
			}
		}
	}
	if keys < 100 {
		t.Errorf("only %d keys", keys)
	}
	t.Logf("%d keys of %d commands", keys, len(v.Commands))
}

// The schemas are written by the program.
func TestSchemasAreWritten(t *testing.T) {
	for _, name := range []string{"job", "record"} {
		out, err := exec.Command("isofacet", "run", "--schema", name).Output()
		if err != nil {
			t.Fatal(err)
		}
		compileSchema(t, "isofacet:"+name+".schema.json", out)
	}
}

// Records of all kinds of runs validate, and between them have every field of the
// schema; with a field too many or a wrong one they do not.
func TestRecordsValidate(t *testing.T) {
	schema := compileSchema(t, "isofacet:record.schema.json", record.Schema)
	dir := t.TempDir()
	write(t, dir, "shots.csv", "id,x,y,z,code\n1,0,0,1,GR\n2,10,0,2,GR\n3,0,10,3,GR\n3b,0,10,3,GR\n4,5,5,9,TREE\nbad,row\n")
	write(t, dir, "rounds.csv", "id,x,y,z,round\na,0,0,1,A\nb,9,0,2,A\nc,0,9,3,A\na,0,0,1,B\nb,9,0,2,B\nc,0,9,3,B\na,0,0,1,C\n")
	write(t, dir, "job.toml", "[[task]]\nname = \"one\"\ncommand = \"grid\"\nfiles = \"rounds.csv\"\nround = \"A\"\ncell = 3\nout = \"one.csv\"\n")
	var records []any
	run := func(wantCode int, args ...string) {
		t.Helper()
		name := "record" + strconv.Itoa(len(records)) + ".json"
		if code, words := inFolder(t, dir, append(args, "--record", name)...); code != wantCode {
			t.Fatalf("%q: status %d\n%s", args, code, words)
		}
		text, err := os.ReadFile(filepath.Join(dir, name))
		if err != nil {
			t.Fatal(err)
		}
		if err := validate(t, schema, text); err != nil {
			t.Errorf("%q: %v", args, err)
		}
		v, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
		if err != nil {
			t.Fatal(err)
		}
		records = append(records, v)
		if _, err := record.Read(bytes.NewReader(text)); err != nil {
			t.Errorf("%q: reading it back: %v", args, err)
		}
	}
	run(0, "grid", "shots.csv", "--cell", "5", "--without", "code=TREE", "--lenient", "--out", "a.csv", "--out", "b.raw")
	run(0, "contour", "shots.csv", "--interval", "1", "--lenient", "--out", "c.geojson")
	run(0, "query", "shots.csv", "--at", "1,1", "--lenient", "--out", "q.csv")
	run(0, "inspect", "shots.csv", "--lenient", "--out", "i.json")
	run(0, "triangles", "shots.csv", "--lenient", "--out", "t.geojson")
	run(3, "grid", "rounds.csv", "--each", "round", "--cell", "3", "--out", "{round}.csv")
	run(0, "run", "job.toml")
	run(0, "run", "job.toml") // unchanged

	wanted := fields(t, record.Schema)
	found := map[string]bool{}
	for _, r := range records {
		walk("", r, found)
	}
	// A commit is there only in a build from a repository.
	delete(wanted, "/stable/commit")
	for _, path := range slices.Sorted(maps.Keys(wanted)) {
		if !found[path] {
			t.Errorf("no record has the field %s", path)
		}
	}
	if len(wanted) < 40 {
		t.Errorf("only %d fields in the schema", len(wanted))
	}

	// The schema is no formality.
	good, err := os.ReadFile(filepath.Join(dir, "record0.json"))
	if err != nil {
		t.Fatal(err)
	}
	for _, change := range [][2]string{
		{`"kind": "isofacet run record"`, `"kind": "a letter"`}, {`"stable": {`, `"stable": {"more": 1, `}, {`"given": true`, `"given": "yes"`},
		{`"what": "merged"`, `"what": "lost"`}, {`"read": 6`, `"read": -6`}, {`"started": "2`, `"started": "x`}, {`"threads": `, `"thread": `},
	} {
		bad := bytes.Replace(good, []byte(change[0]), []byte(change[1]), 1)
		if bytes.Equal(bad, good) {
			t.Errorf("the record has no %s", change[0])
		}
		if validate(t, schema, bad) == nil {
			t.Errorf("with %s it validates", change[1])
		}
	}
}

// fields lists the paths of all properties that a schema describes. A list's items
// have the path of the list; what stands in a task's own stable part is not followed.
func fields(t *testing.T, text []byte) map[string]bool {
	t.Helper()
	var root map[string]any
	if err := json.Unmarshal(text, &root); err != nil {
		t.Fatal(err)
	}
	all := map[string]bool{}
	var follow func(path string, s map[string]any)
	follow = func(path string, s map[string]any) {
		if ref, ok := s["$ref"].(string); ok {
			if strings.HasSuffix(path, "/tasks/stable") {
				return
			}
			s = root["$defs"].(map[string]any)[strings.TrimPrefix(ref, "#/$defs/")].(map[string]any)
		}
		if items, ok := s["items"].(map[string]any); ok {
			follow(path, items)
		}
		properties, _ := s["properties"].(map[string]any)
		for name, p := range properties {
			all[path+"/"+name] = true
			follow(path+"/"+name, p.(map[string]any))
		}
	}
	follow("", root)
	return all
}

// walk notes the paths of all members of a document.
func walk(path string, v any, found map[string]bool) {
	switch v := v.(type) {
	case map[string]any:
		for name, member := range v {
			found[path+"/"+name] = true
			walk(path+"/"+name, member, found)
		}
	case []any:
		for _, item := range v {
			walk(path, item, found)
		}
	}
}
