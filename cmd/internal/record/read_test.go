package record

import (
	"bytes"
	"strings"
	"testing"
)

// What Write writes, Read reads back.
func TestReadIsTheInverse(t *testing.T) {
	r := New("grid")
	r.Stable.Arguments = []string{"grid", "a.csv"}
	r.Stable.Tasks = []Task{{Name: "one", State: "failed", Fault: "why"}}
	var b, again bytes.Buffer
	if err := r.Write(&b); err != nil {
		t.Fatal(err)
	}
	back, err := Read(bytes.NewReader(b.Bytes()))
	if err != nil {
		t.Fatal(err)
	}
	back.ThisRun.Started = r.ThisRun.Started
	if err := back.Write(&again); err != nil {
		t.Fatal(err)
	}
	cut := func(s string) string { return s[:strings.Index(s, `"this_run"`)] }
	if cut(b.String()) != cut(again.String()) {
		t.Errorf("read back as\n%s\nwant\n%s", &again, &b)
	}
}

func TestReadRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"":                               "no JSON object",
		"[]":                             "no JSON object",
		`{"kind":"x"}`:                   `kind "x": expected "isofacet run record"`,
		`{"kind":"isofacet run record"}`: "no command",
		`{"kind":"isofacet run record","stable":{"command":"grid","more":1}}`:         `unknown field "more"`,
		`{"kind":"isofacet run record","stable":{"command":"grid","outputs":[null]}}`: "without a name",
		`{"kind":"isofacet run record","stable":{"command":"grid","inputs":5}`:        "no JSON object",
	} {
		if _, err := Read(strings.NewReader(text)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, want %q", text, err, want)
		}
	}
}

// No text makes it panic, and what it accepts has a command.
func FuzzRead(f *testing.F) {
	f.Add(`{"kind":"isofacet run record","stable":{"command":"grid","arguments":["grid"],"inputs":[{"name":"a"}],"outputs":[null]}}`)
	f.Add(`{"kind":"isofacet run record","stable":{"command":"run","tasks":[{"name":"a","state":"done","stable":{}}]}}`)
	f.Fuzz(func(t *testing.T, text string) {
		rec, err := Read(strings.NewReader(text))
		if err == nil && rec.Stable.Command == "" {
			t.Error("a record without a command")
		}
	})
}
