package report

import (
	"bytes"
	"encoding/json"
	"errors"
	"testing"
)

func TestText(t *testing.T) {
	var out bytes.Buffer
	r := New(&out, Text, false)
	r.Note("surface: 3 vertices", "vertices", 3)
	r.Warn("hull-outline", "long outer edges")
	r.Fail(errors.New(`wells.csv:2:3: head "x": expected a number`), []string{"name the columns", "leave the line out"}, 3)
	want := "surface: 3 vertices\n" +
		"warning: long outer edges [hull-outline]\n" +
		"isofacet: wells.csv:2:3: head \"x\": expected a number\n" +
		"  hint: name the columns\n" +
		"  hint: leave the line out\n"
	if got := out.String(); got != want {
		t.Errorf("wrote:\n%s\nwant:\n%s", got, want)
	}
}

func TestQuietKeepsWarnings(t *testing.T) {
	var out bytes.Buffer
	r := New(&out, Text, true)
	r.Note("surface: 3 vertices")
	r.Warn("c", "w")
	if got, want := out.String(), "warning: w [c]\n"; got != want {
		t.Errorf("wrote %q, want %q", got, want)
	}
	if got := r.Warnings(); len(got) != 1 || got[0] != (Warning{"c", "w"}) {
		t.Errorf("kept %v, want the one warning", got)
	}
}

func TestJSON(t *testing.T) {
	var out bytes.Buffer
	r := New(&out, JSON, false)
	r.Note("surface: 3 vertices", "vertices", 3)
	r.Fail(errors.New("no file"), []string{"name one"}, 2)
	dec := json.NewDecoder(&out)
	var note struct {
		Level, Msg string
		Vertices   int
	}
	var fault struct {
		Level, Msg string
		Hints      []string
		Status     int
	}
	if err := dec.Decode(&note); err != nil {
		t.Fatal(err)
	}
	if err := dec.Decode(&fault); err != nil {
		t.Fatal(err)
	}
	if note.Level != "INFO" || note.Msg != "surface: 3 vertices" || note.Vertices != 3 {
		t.Errorf("note is %+v", note)
	}
	if fault.Level != "ERROR" || fault.Msg != "no file" || len(fault.Hints) != 1 || fault.Status != 2 {
		t.Errorf("fault is %+v", fault)
	}
}
