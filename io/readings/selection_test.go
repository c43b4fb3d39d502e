package readings

import (
	"context"
	"path"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Patterns are those of path.Match, which is the oracle where no slash comes in.
func TestPatternsAgainstPathMatch(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := rapid.StringOfN(rapid.RuneFrom([]rune(`ab*?[]^-\é`)), 0, 8, -1).Draw(t, "pattern")
		text := rapid.StringOfN(rapid.RuneFrom([]rune(`ab-]é`)), 0, 8, -1).Draw(t, "text")
		want, err := path.Match(p, text)
		// path.Match finds a bad pattern only as far as it looks; on an empty text
		// behind a star-free prefix it looks at all of it.
		_, bad := path.Match(p, "")
		if validPattern(p) != (bad == nil) {
			t.Fatalf("%q: valid %v, but path.Match says %v", p, validPattern(p), bad)
		}
		if bad == nil && (err != nil || match(p, text) != want) {
			t.Fatalf("%q on %q: got %v, want %v (%v)", p, text, match(p, text), want, err)
		}
	})
}

func TestPatterns(t *testing.T) {
	for _, c := range []struct {
		pattern, text string
		want          bool
	}{
		{"GRD*", "GRD", true},
		{"GRD*", "GRD7", true},
		{"GRD*", "grd", false},
		{"*", "", true},
		{"", "", true},
		{"", "a", false},
		{"*/top", "wall/top", true}, // a slash is a character like any other
		{"a?b", "a/b", true},
		{"MW-[1-3]", "MW-2", true},
		{"MW-[^1-3]", "MW-2", false},
		{"Ä?", "Äß", true},
		{"a*a*a*a*a*a*a*a*a*a*a*a*b", strings.Repeat("a", 1000), false}, // in no time
	} {
		if got := match(c.pattern, c.text); got != c.want {
			t.Errorf("%q on %q: %v", c.pattern, shorten(c.text), got)
		}
	}
}

func TestSelection(t *testing.T) {
	const text = "id,x,y,z,code,zone\nA,1,1,1,GRD,up\nB,2,2,2,EP,up\nC,3,3,3,GRD7,low\nD,4,4,4,TREE,\nE,5,5,,GRD,dry\n"
	for _, c := range []struct {
		only, without string
		used          string
		reasons       []string
	}{
		{"", "zone=dry", "ABCD", []string{"among zone=dry"}},
		{"code=GRD*", "zone=dry", "AC", []string{"not among code=GRD*", "not among code=GRD*", "among zone=dry"}},
		{"code=GRD code=EP zone=up", "", "AB", []string{"not among code=GRD, code=EP", "not among code=GRD, code=EP", "not among zone=up"}},
		{"zone=?*", "zone=dry", "ABC", []string{"not among zone=?*", "among zone=dry"}},
		{"id=[AB]", "code=EP code=TR*", "A", []string{"among code=EP, code=TR*", "not among id=[AB]", "not among id=[AB]", "not among id=[AB]"}},
	} {
		for _, careful := range []bool{false, true} {
			o := Options{careful: careful}
			for _, p := range strings.Fields(c.only) {
				pattern, err := ParsePattern("only", p)
				if err != nil {
					t.Fatal(err)
				}
				o.Select.Only = append(o.Select.Only, pattern)
			}
			for _, p := range strings.Fields(c.without) {
				pattern, err := ParsePattern("without", p)
				if err != nil {
					t.Fatal(err)
				}
				o.Select.Without = append(o.Select.Without, pattern)
			}
			s := mustRead(t, text, o)
			used := ""
			for i := range s.Len() {
				used += s.ID(i)
			}
			var reasons []string
			for _, l := range s.LeftOut {
				reasons = append(reasons, l.Reason)
			}
			if used != c.used || !slices.Equal(reasons, c.reasons) {
				t.Errorf("only %q without %q: used %s, left out %q", c.only, c.without, used, reasons)
			}
		}
	}
	o := Options{Select: Selection{Only: []Pattern{{Round, "*"}}}}
	if _, err := read(text, o); err == nil || err.Error() != "a.csv:1: no column for round: expected one to choose round=* by" {
		t.Errorf("a role that no column has: %v", err)
	}
	for _, bad := range []string{"code", "kode=A", "z=1", "code=[", "code=\\"} {
		if _, err := ParsePattern("only", bad); err == nil {
			t.Errorf("%q was taken", bad)
		}
	}
}

func TestExclusions(t *testing.T) {
	const list = `id,x,y,decision,reason
B,,,leave out,pumping
C,,,keep,looks odd but was checked
D,,,leave out,
,5,5.50,Leave Out,"hit by the roller, twice"
A,9,9,leave out,not this A
Z,,,leave out,never seen
,7,7,,
`
	x, err := ReadExclusions(FromBytes("left.csv", []byte(list)), Declared{})
	if err != nil {
		t.Fatal(err)
	}
	if x.Len() != 4 || x.Other != 2 || !slices.Equal(x.NoReason, []int{4}) {
		t.Errorf("%d rows, %d others, without a reason %v", x.Len(), x.Other, x.NoReason)
	}
	const text = "id,x,y,z\nA,1,1,1\nB,2,2,2\nC,3,3,3\nD,4,4,4\nE,5,5.5,?\nB,6,6,DRY\n"
	for _, careful := range []bool{false, true} {
		s := mustRead(t, text, Options{careful: careful, Select: Selection{Exclude: x}})
		want := []LeftOut{
			{0, 3, "B", "pumping (left.csv:2)", nil, nil},
			{0, 6, "E", "hit by the roller, twice (left.csv:5)", nil, nil},
			{0, 7, "B", "pumping (left.csv:2)", nil, nil},
		}
		if !slices.Equal(s.LeftOut, want) || s.Len() != 3 {
			t.Errorf("left out %+v", s.LeftOut)
		}
		var warnings []string
		for _, w := range s.Warnings {
			warnings = append(warnings, w.String())
		}
		wantWarnings := []string{
			`left.csv:6: no reading matches id "A" at 9,9`,
			`left.csv:7: no reading matches id "Z"`,
			"left.csv:4: leaves out without a reason: not followed",
		}
		if !slices.Equal(warnings, wantWarnings) {
			t.Errorf("warnings %q", warnings)
		}
	}
}

func TestBadExclusions(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"", "left.csv: no line to read: expected readings"},
		{"id,reason\nA,b\n", `left.csv:1: header "id, reason": expected columns decision, reason and id (or x and y)`},
		{"x,decision,reason\n1,leave out,b\n", `left.csv:1: header "x, decision, reason": expected columns decision, reason and id (or x and y)`},
		{"\nid;x;y;decision;reason\nA;;;leave out;b\n;?;2;leave out;c\n;1,5;2;leave out;c\n\n,\n",
			"left.csv:4:2: x \"?\": expected a number such as 12.4\nleft.csv:7: 1 field: expected 5, as in the header\n2 lines bad, 2 good"},
		{"id,decision,reason\n,leave out,b\n", "left.csv:2:1: decision to leave out what: expected an id, or x and y\n1 line bad, 0 good"},
		{"id,decision,reason\n\"A,leave out,b\n", "left.csv:2:1: quote that is not closed: expected a closing quote within 65,536 bytes\n1 line bad, 0 good"},
		{"id,decision\x00", "left.csv:1:12: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark"},
	} {
		_, err := ReadExclusions(FromBytes("left.csv", []byte(c.text)), Declared{})
		if err == nil || err.Error() != c.want {
			t.Errorf("%q:\ngot  %v\nwant %s", c.text, err, c.want)
		}
	}
	if _, err := ReadExclusions(Source{Name: "left.csv", Open: FromReader("", failing{context.DeadlineExceeded}).Open}, Declared{}); err == nil {
		t.Error("a reader that fails was read")
	}
}

// A pattern that nothing meets is told with what there is instead.
func TestPatternsThatNothingMeets(t *testing.T) {
	text := "id,x,y,z,code,round\nA,0,0,1,GRD,r1\nB,1,0,2,EP,r2\nC,0,1,3,,r2\n"
	for _, c := range []struct {
		only []Pattern
		want string
	}{
		{[]Pattern{{Round, "r3"}}, "a.csv: nothing is round=r3: there are r1, r2"},
		{[]Pattern{{Code, "X*"}, {Code, "Y"}}, "a.csv: nothing is code=X*, code=Y: there are (none), EP, GRD"},
		{[]Pattern{{Code, "X*"}, {Code, "EP"}}, ""},
	} {
		for _, workers := range []int{1, 3} {
			s, err := Scan(context.Background(), []Source{FromBytes("a.csv", []byte(text))}, Options{Workers: workers, Select: Selection{Only: c.only}},
				func(*Block) error { return nil })
			if err != nil {
				t.Fatal(err)
			}
			got := ""
			for _, w := range s.Warnings {
				if strings.Contains(w.String(), "nothing is") {
					got = w.String()
				}
			}
			if got != c.want {
				t.Errorf("%v: %q, want %q", c.only, got, c.want)
			}
		}
	}
}
