package lines

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"isofacet/io/readings"
)

func codeTable(t testing.TB, text string) *CodeTable {
	t.Helper()
	table, err := ReadCodeTable(context.Background(), readings.FromBytes("codes.toml", []byte(text)))
	if err != nil {
		t.Fatal(err)
	}
	return table
}

// officeTable is the table of the documentation.
const officeTable = `
ground    = ["GR", "SP*"]
line      = ["TOE", "CR", "HR"]
leave-out = ["BP", "TREE*"]

[parts]
separator = " "
number    = "behind"
mark      = "last"

[marks]
begin = ["B"]
end   = ["E"]
close = ["C"]
`

func told1(c Coded) string {
	s := fmt.Sprintf("%s|%s|%s", c.Code, c.Number, c.Use)
	for _, m := range []struct {
		set  bool
		word string
	}{{c.Begin, " begin"}, {c.End, " end"}, {c.Close, " close"}} {
		if m.set {
			s += m.word
		}
	}
	if c.Clash[0] != "" {
		s += " " + strings.Join(c.Clash[:], " and ")
	}
	return s
}

// How codes are taken apart differs from office to office; each of these is
// common practice somewhere.
func TestTake(t *testing.T) {
	lines := "line = ['TOE', 'CR*']\nground = ['GR', '']\n"
	marks := "[marks]\nbegin = ['B', 'BEG']\nend = ['E']\nclose = ['C']\n"
	for _, c := range []struct {
		name, table string
		codes       map[string]string
	}{
		{"the table of the documentation", officeTable, map[string]string{
			"TOE1 B": "TOE|1|line begin", "TOE1": "TOE|1|line", "TOE01 E": "TOE|01|line end", " TOE2   C ": "TOE|2|line close", "TOE": "TOE||line",
			"GR": "GR||ground", "GR12": "GR|12|ground", "SP 7": "SP 7||ground", "TREE OAK12": "TREE OAK|12|leave-out", "TOE1 X": "TOE1 X||unknown", "toe1": "toe|1|unknown",
			"B": "B||unknown", "B B": "B||unknown begin", "": "||unknown", "17": "17||unknown", "TOE1 C E": "TOE|1|line end close",
		}},
		{"nothing taken apart", lines, map[string]string{"TOE": "TOE||line", "TOE1": "TOE1||unknown", "CR 4 B": "CR 4 B||line", "": "||ground"}},
		{"parts between dots, numbers apart", lines + "[parts]\nseparator = '.'\nnumber = 'part'\nmark = 'last'\n" + marks, map[string]string{
			"TOE.1.BEG": "TOE|1|line begin", "TOE.1": "TOE|1|line", "CR.UP.2.E": "CR.UP|2|line end", "TOE 1": "TOE 1||unknown", "TOE..1.": "TOE|1|line", "7": "7||unknown",
		}},
		{"marks first", lines + "[parts]\nseparator = '-'\nnumber = 'behind'\nmark = 'first'\n" + marks, map[string]string{
			"B-TOE1": "TOE|1|line begin", "TOE1": "TOE|1|line", "C-E-TOE1": "TOE|1|line end close", "TOE1-B": "TOE1-B||unknown",
		}},
		{"others", lines + "others = 'leave-out'\n", map[string]string{"TOE": "TOE||line", "XYZ": "XYZ||leave-out"}},
		{"patterns of two uses", lines + "leave-out = ['*R']\n", map[string]string{"CR": `CR||unknown line CR* and leave-out *R`, "GR": "GR||unknown ground GR and leave-out *R"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			table := codeTable(t, c.table)
			for code, want := range c.codes {
				if got := told1(table.Take(code)); got != want {
					t.Errorf("%q: got %s, want %s", code, got, want)
				}
			}
		})
	}
}

func TestUnknownCodes(t *testing.T) {
	text := "id,x,y,z,code\n"
	for i := range 14 {
		text += fmt.Sprintf("P%d,%d,0,1,EPX%d\n", i, i, i%3)
	}
	text += "A,0,1,1,TOE1 B\nB,1,1,1,TREE OAK\nC,2,1,1,TOE2\nD,3,1,1,\nE,4,1,1,TOE1\n"
	read := func(table string) (*readings.Set, *Codes) {
		codes := NewCodes(codeTable(t, table))
		set, err := readings.Read(context.Background(), source("a.csv", text), readings.Options{Select: readings.Selection{Code: codes.Choose}})
		if err != nil {
			t.Fatal(err)
		}
		return set, codes
	}
	set, codes := read(officeTable)
	if len(set.LeftOut) != 1 || set.LeftOut[0].Reason != `code "TREE OAK" is left out by codes.toml` {
		t.Errorf("left out %+v", set.LeftOut)
	}
	want := []CodeCount{{"", Unknown, 1, 0}, {"EPX", Unknown, 14, 3}, {"TOE", OnLine, 3, 2}, {"TREE OAK", LeaveOut, 1, 0}}
	if got := codes.Histogram(); !slices.Equal(got, want) {
		t.Errorf("histogram %+v", got)
	}
	err := codes.Unknown()
	if want := `codes.toml: code EPX (14 points), "" (1 point) unknown; known: BP, CR, GR, HR, SP*, TOE, TREE*`; err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	if e, ok := errors.AsType[*UnknownCodes](err); !ok || len(e.Codes) != 2 || len(e.Known) != 7 {
		t.Errorf("%+v", e)
	}
	_, codes = read("ground = ['']\nline = ['EPX?', 'T*']\nleave-out = ['TOE*', 'TREE*']\n")
	want2 := "codes.toml: code TOE1 (1 point) fits line T* and leave-out TOE*: expected one use\n" +
		"codes.toml: code \"TOE1 B\" (1 point) fits line T* and leave-out TOE*: expected one use\n" +
		"codes.toml: code TOE2 (1 point) fits line T* and leave-out TOE*: expected one use\n" +
		"codes.toml: code \"TREE OAK\" (1 point) fits line T* and leave-out TREE*: expected one use"
	if err := codes.Unknown(); err == nil || err.Error() != want2 {
		t.Errorf("got  %v\nwant %s", err, want2)
	}
	if _, codes = read("others = 'ground'\n"); codes.Unknown() != nil {
		t.Errorf("others: %v", codes.Unknown())
	}
}

// Many unknown codes are told in one line.
func TestManyUnknownCodes(t *testing.T) {
	codes := NewCodes(codeTable(t, "ground = ["+strings.Repeat("'G1',", 3)+strings.Join(strings.Split(strings.Repeat("'A*','B*','C*',", 9), ""), "")+"]"))
	for i := range 7 {
		for range i + 1 {
			codes.Choose(fmt.Appendf(nil, "X%d", i))
		}
	}
	want := "codes.toml: code X6 (7 points), X5 (6 points), X4 (5 points), X3 (4 points), X2 (3 points) and 2 more codes unknown; known: A*, B*, C*, G1"
	if err := codes.Unknown(); err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
}

// strung reads readings and strings them.
func strung(t testing.TB, text, table string) *Set {
	t.Helper()
	s, err := tryStrung(t, text, table)
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	return s
}

func tryStrung(t testing.TB, text, table string) (*Set, error) {
	t.Helper()
	var tab *CodeTable
	if table != "" {
		tab = codeTable(t, table)
	}
	set, err := readings.Read(context.Background(), source("a.csv", text), readings.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := Strung(set, tab)
	if err != nil {
		return nil, err
	}
	for i := range s.Lines {
		for k, r := range s.Lines[i].Readings {
			if set.Points[r] != s.Lines[i].Points[k] || set.Z[r] != s.Lines[i].Z[k] {
				t.Fatalf("line %q: vertex %d is not reading %d", s.Lines[i].Name, k, r)
			}
		}
	}
	return s, nil
}

// S1 of the trade's list: coded strings rebuild three known lines, shot across
// each other as a crew walks.
func TestCodedStringsRebuildLines(t *testing.T) {
	const shots = `id,x,y,z,code
1,0,0,10,TOE1 B
2,0,5,14,CR1 B
3,1,9,14,GR
4,10,0,10.5,TOE1
5,10,5,14.5,CR1
6,3,20,9,HR1 B
7,20,0,11,TOE1 E
8,20,5,15,CR1
9,9,20,9.5,HR1
10,9,26,9.25,HR1 C
11,40,0,12,TOE1 B
12,50,0,12,TOE1
`
	want := []string{
		"TOE1 0,0,10 10,0,10.5 20,0,11",
		"CR1 0,5,14 10,5,14.5 20,5,15",
		"HR1 closed 3,20,9 9,20,9.5 9,26,9.25 3,20,9",
		"TOE1 (2) 40,0,12 50,0,12",
	}
	s := strung(t, shots, officeTable)
	if got := dump(s); !slices.Equal(got, want) {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
	if len(s.Warnings) != 0 || s.Vertices != 12 {
		t.Errorf("%d vertices, warnings %v", s.Vertices, s.Warnings)
	}
	if l := &s.Lines[2]; !slices.Equal(l.Readings, []int32{5, 8, 9, 5}) || l.PointName(3) != "6" || l.At(2).String() != "a.csv:11" {
		t.Errorf("readings %v, %s, %s", l.Readings, l.PointName(3), l.At(2))
	}
}

func TestStrung(t *testing.T) {
	for _, c := range []struct {
		name, text, table string
		want              []string
		warnings          string
	}{
		{name: "by name, in the order of the file", text: "x,y,z,line\n0,0,1,a\n5,5,1,\n1,0,1,b\n1,1,2,a\n2,0,1,b\n0,1,0,a\n",
			want: []string{"a 0,0,1 1,1,2 0,1,0", "b 1,0,1 2,0,1"}},
		{name: "no lines", text: "x,y,z,line\n0,0,1,\n5,5,1,\n"},
		{name: "no column for lines", text: "x,y,z\n0,0,1\n5,5,1\n"},
		{name: "a ring shot again at its beginning", text: "x,y,z,line\n0,0,1,a\n4,0,1,a\n0,4,1,a\n0,0,1,a\n",
			want: []string{"a closed 0,0,1 4,0,1 0,4,1 0,0,1"}},
		{name: "lines that meet in a place shot twice", text: "id,x,y,z,line\nP1,0,0,1,a\nP2,4,0,1,a\nP3,4,4,1,b\nP4,4,0,1,b\nP5,8,0,1,a\nP6,9,0,1,b\n",
			want: []string{"a 0,0,1 4,0,1 8,0,1", "b 4,4,1 4,0,1 9,0,1"}},
		{name: "a shot stored twice", text: "x,y,z,line\n0,0,1,a\n4,0,1,a\n4,0,1,a\n0,4,1,a\n",
			want: []string{"a 0,0,1 4,0,1 0,4,1"}},
		{name: "heights that are zero", text: "x,y,z,line\n0,0,0,a\n4,0,0,a\n", want: []string{"a 0,0,0 4,0,0"}},
		{name: "a name goes before a code", text: "x,y,z,line,code\n0,0,1,a,TOE1\n1,0,1,,TOE1\n2,0,1,a,GR\n3,0,1,,TOE1\n", table: officeTable,
			want: []string{"a 0,0,1 2,0,1", "TOE1 1,0,1 3,0,1"}},
		{name: "begins again without an end", text: "x,y,z,code\n0,0,1,TOE B\n1,0,1,TOE\n5,0,1,TOE B\n6,0,1,TOE\n", table: officeTable,
			want: []string{"TOE 0,0,1 1,0,1", "TOE (2) 5,0,1 6,0,1"}},
		{name: "goes on behind its end", text: "x,y,z,code\n0,0,1,TOE B\n1,0,1,TOE E\n5,0,1,TOE\n6,0,1,TOE\n", table: officeTable,
			want: []string{"TOE 0,0,1 1,0,1", "TOE (2) 5,0,1 6,0,1"}, warnings: `a.csv:4: line "TOE" goes on behind its end in row 3 without a mark: taken as a new line`},
		{name: "closed where it began", text: "x,y,z,code\n0,0,1,TOE B\n1,0,1,TOE\n0,6,1,TOE\n0,0,1,TOE C\n", table: officeTable,
			want: []string{"TOE closed 0,0,1 1,0,1 0,6,1 0,0,1"}},
		{name: "a jump", text: "id,x,y,z,line\nP1,0,0,1,a\nP2,1,0,1,a\nP3,2,0,1,a\nP4,3,0,1,a\nP5,90,0,1,a\n",
			want:     []string{"a 0,0,1 1,0,1 2,0,1 3,0,1 90,0,1"},
			warnings: `a.csv:5: line "a" has a segment of 87 from P4 (row 5) to P5 (row 6), 87 times the median of its 4 segments, 1`},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := strung(t, c.text, c.table)
			if got := dump(s); !slices.Equal(got, c.want) {
				t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(c.want, "\n"))
			}
			var got []string
			for _, w := range s.Warnings {
				got = append(got, w.String())
			}
			if strings.Join(got, "\n") != c.warnings {
				t.Errorf("warnings %q, want %q", got, c.warnings)
			}
		})
	}
}

func TestStrungFaults(t *testing.T) {
	for _, c := range []struct{ name, text, table, want string }{
		{"one reading", "x,y,z,line\n0,0,1,a\n4,0,1,\n", "", `a.csv:2: line "a" has one position, (0, 0): expected at least two`},
		{"closed too early", "x,y,z,code\n0,0,1,TOE3 B\n4,0,1,TOE3 C\n", officeTable,
			`a.csv:3: line "TOE3" is closed by a mark, with 2 distinct positions: expected at least 3`},
		{"no codes", "x,y,z\n0,0,1\n4,0,1\n", officeTable, "a.csv: no column for code: expected one to look up in codes.toml"},
	} {
		t.Run(c.name, func(t *testing.T) {
			s, err := tryStrung(t, c.text, c.table)
			if err == nil || s != nil || err.Error() != c.want {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
}

// Files are kept apart: a name begins a new line in each.
func TestStrungFiles(t *testing.T) {
	sources := append(source("a.csv", "x,y,z,line\n0,0,1,a\n4,0,1,a\n"), append(source("none.csv", "x,y,z\n9,9,9\n"), source("b.csv", "x,y,z,line\n8,0,1,a\n4,0,1,a\n8,8,1,a\n")...)...)
	set, err := readings.Read(context.Background(), sources, readings.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := Strung(set, nil)
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	if got, want := dump(s), []string{"a 0,0,1 4,0,1", "a 8,0,1 4,0,1 8,8,1"}; !slices.Equal(got, want) || s.Lines[1].File != "b.csv" || !slices.Equal(s.Lines[1].Readings, []int32{3, 1, 4}) {
		t.Errorf("got %q, readings %v", got, s.Lines[1].Readings)
	}
}
