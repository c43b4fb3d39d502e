package readings

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"sync"
	"testing"
)

// A function may leave readings out by their code: it is told every code that the
// patterns let through, in the quick way and the careful one alike.
func TestSelectionByCode(t *testing.T) {
	const text = "id,x,y,z,code\nA,1,1,1,GRD\nB,2,2,2,TREE\nC,3,3,3,\"TREE\"\nD,4,4,4,\nE,5,5,5,EP\n"
	for _, careful := range []bool{false, true} {
		var mu sync.Mutex
		var told []string
		o := Options{careful: careful, Select: Selection{Without: []Pattern{{Code, "EP"}}, Code: func(code []byte) string {
			mu.Lock()
			defer mu.Unlock()
			told = append(told, string(code))
			if strings.HasPrefix(string(code), "TREE") {
				return "not ground"
			}
			return ""
		}}}
		s := mustRead(t, text, o)
		if want := []string{"GRD", "TREE", "TREE", ""}; !slices.Equal(told, want) {
			t.Errorf("careful %v: told %q, want %q", careful, told, want)
		}
		var left []string
		for _, l := range s.LeftOut {
			left = append(left, fmt.Sprintf("%s %s", l.ID, l.Reason))
		}
		if want := []string{"B not ground", "C not ground", "E among code=EP"}; !slices.Equal(left, want) {
			t.Errorf("careful %v: left out %q, want %q", careful, left, want)
		}
	}
	// A file without codes has the empty one.
	s := mustRead(t, "1 2 3\n4 5 6\n", Options{Select: Selection{Code: func(code []byte) string { return fmt.Sprintf("code %q", code) }}})
	if len(s.LeftOut) != 2 || s.LeftOut[0].Reason != `code ""` {
		t.Errorf("without a column: %+v", s.LeftOut)
	}
}

func TestPatternMatch(t *testing.T) {
	p, err := ParsePattern("only", "code=TO?*")
	if err != nil || !p.Match("TOE1") || p.Match("TO") || p.Match("toe") {
		t.Errorf("%v %v", p, err)
	}
}

// A merged reading keeps what makes it part of a line.
func TestMergedKeepsCodeAndLine(t *testing.T) {
	set, err := Read(context.Background(), []Source{FromBytes("a.csv", []byte("id,x,y,z,code,line\nA,1,1,1,TOE1 B,toe\nB,2,2,2,TOE1,toe\nC,1,1,1,TOE1 E,crest\n"))}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if m := set.Merged; len(m) != 1 || m[0].ID != "C" || m[0].Code != "TOE1 E" || m[0].LineName != "crest" || m[0].Into != 0 {
		t.Errorf("merged: %+v", m)
	}
}
