package lines

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/io/readings"
)

func source(file, text string) []readings.Source {
	return []readings.Source{readings.FromBytes(file, []byte(text))}
}

func breaklines(t testing.TB, file, text string, o Options) *Set {
	t.Helper()
	s, err := Breaklines(context.Background(), source(file, text), o)
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	return s
}

func rings(t testing.TB, file, text string, o Options) *Set {
	t.Helper()
	s, err := Rings(context.Background(), source(file, text), o)
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	for i := range s.Lines {
		if !s.Lines[i].Closed {
			t.Errorf("ring %q is not closed", s.Lines[i].Name)
		}
	}
	return s
}

// checkSet is what every set promises.
func checkSet(t interface{ Fatalf(string, ...any) }, s *Set) {
	kept := 0
	for i := range s.Lines {
		l := &s.Lines[i]
		n := len(l.Points)
		kept += n
		switch {
		case n < 2, len(l.numbers) != n, l.Z != nil && len(l.Z) != n, l.ids != nil && len(l.ids) != n, l.Readings != nil && len(l.Readings) != n:
			t.Fatalf("line %q: %d points, %d heights, %d numbers, %d names, %d readings", l.Name, n, len(l.Z), len(l.numbers), len(l.ids), len(l.Readings))
		case l.Name == "":
			t.Fatalf("line %d has no name", i)
		}
		for k := range n {
			if k > 0 && l.Points[k] == l.Points[k-1] {
				t.Fatalf("line %q repeats its vertex %d", l.Name, k)
			}
			if l.Z != nil && math.IsNaN(l.Z[k]) {
				t.Fatalf("line %q has no height at vertex %d", l.Name, k)
			}
			if l.PointName(k) == "" || l.At(k).File != l.File {
				t.Fatalf("line %q does not know where vertex %d comes from", l.Name, k)
			}
		}
		if l.Closed && (l.Points[0] != l.Points[n-1] || n < 4 || l.Z != nil && l.Z[0] != l.Z[n-1]) {
			t.Fatalf("line %q is called closed", l.Name)
		}
	}
	if kept+s.Repeated != s.Vertices {
		t.Fatalf("%d vertices kept and %d repeated of %d", kept, s.Repeated, s.Vertices)
	}
}

// dump writes a set in full, a line of text each.
func dump(s *Set) []string {
	var all []string
	for i := range s.Lines {
		l := &s.Lines[i]
		var b strings.Builder
		fmt.Fprintf(&b, "%s", l.Name)
		if l.Closed {
			b.WriteString(" closed")
		}
		for k, p := range l.Points {
			fmt.Fprintf(&b, " %v,%v", p[0], p[1])
			if l.Z != nil {
				fmt.Fprintf(&b, ",%v", l.Z[k])
			}
		}
		all = append(all, b.String())
	}
	return all
}

// One file of lines in many layouts.
func TestSameLinesInManyLayouts(t *testing.T) {
	const plain = "line,x,y,z\ntoe,500000.125,4600000.5,1.25\ncrest,0,10,2\ntoe,500010.5,4600020.25,-3.5\ncrest,5,5,2\ncrest,5,0,2\ncrest,0,10,2\n"
	want := []string{"toe 500000.125,4.6000005e+06,1.25 500010.5,4.60002025e+06,-3.5", "crest closed 0,10,2 5,5,2 5,0,2 0,10,2"}
	replace := func(from ...string) string { return strings.NewReplacer(from...).Replace(plain) }
	headless := plain[strings.IndexByte(plain, '\n')+1:]
	columns, err := readings.ParseColumns("line,x,y,z")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name, text string
		o          Options
	}{
		{name: "plain", text: plain},
		{name: "no header", text: headless},
		{name: "no header, blanks", text: strings.ReplaceAll(headless, ",", "  ")},
		{name: "columns declared", text: headless, o: Options{Declared: readings.Declared{Columns: columns}}},
		{name: "decimal comma", text: replace(",", ";", ".", ",")},
		{name: "tabs", text: replace(",", "\t")},
		{name: "CRLF, byte order mark", text: "\ufeff" + replace("\n", "\r\n")},
		{name: "other words", text: replace("line,x,y,z", "String No,East (m),North (m),Elev")},
		{name: "other columns", text: replace("line,x,y,z", "line,x,y,z,remark", "\nt", "\nt", "1.25\n", "1.25,wet\n", "2\n", "2,\n", "3.5\n", "3.5,\n")},
		{name: "comments and blank lines", text: "# by crew 3\n\n" + replace("\ntoe", "\n\n# toe\ntoe")},
		{name: "a repeat", text: replace("crest,5,5,2\n", "crest,5,5,2\ncrest,5,5,2\n")},
		{name: "a repeat over other lines", text: replace("crest,5,5,2\n", "crest,0,10,2\ncrest,5,5,2\n")},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := breaklines(t, "a.csv", c.text, c.o)
			if got := dump(s); !slices.Equal(got, want) {
				t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
			}
			if repeats := strings.HasPrefix(c.name, "a repeat"); repeats != (s.Repeated == 1) {
				t.Errorf("%d repeats", s.Repeated)
			}
			if s.DecimalsXY != 3 || s.DecimalsZ != 2 || len(s.Layouts) != 1 {
				t.Errorf("decimals %d and %d, %d layouts", s.DecimalsXY, s.DecimalsZ, len(s.Layouts))
			}
		})
	}
}

// Rings come with heights or without, and a file may hold a single one.
func TestRingsOfText(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"without heights", "line,x,y\na,0,0\na,4,0\na,0,4\na,0,0\n", "a closed 0,0 4,0 0,4 0,0"},
		{"heights left empty", "line,x,y,z\na,0,0,\na,4,0,\na,0,4,\na,0,0,\n", "a closed 0,0 4,0 0,4 0,0"},
		{"heights in one ring", "line,x,y,z\na,0,0,\nb,1,1,7\na,4,0,\na,0,4,\nb,2,1,7\na,0,0,\nb,2,2,8\nb,1,1,7\n",
			"a closed 0,0 4,0 0,4 0,0;b closed 1,1,7 2,1,7 2,2,8 1,1,7"},
		{"no header", "a,0,0\na,4,0\na,0,4\na,0,0\n", "a closed 0,0 4,0 0,4 0,0"},
		{"one ring, named by the file", "x,y\n0,0\n4,0\n0,4\n0,0\n", "site.limit closed 0,0 4,0 0,4 0,0"},
		{"two numbers a row", "0 0\n4 0\n0 4\n0 0\n", "site.limit closed 0,0 4,0 0,4 0,0"},
		{"three numbers a row", "0 0 5\n4 0 5\n0 4 5\n0 0 5\n", "site.limit closed 0,0,5 4,0,5 0,4,5 0,0,5"},
		{"names of points", "point,x,y\nP1,0,0\nP2,4,0\nP3,0,4\nP1,0,0\n", "site.limit closed 0,0 4,0 0,4 0,0"},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := rings(t, "job/site.limit.txt", c.text, Options{})
			if got := strings.Join(dump(s), ";"); got != c.want {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
			if r := s.Rings(); len(r) != len(s.Lines) || !slices.Equal(r[0], orb.Ring(s.Lines[0].Points)) {
				t.Errorf("rings %v", r)
			}
		})
	}
}

// What was assumed about numbers without a header is told.
func TestAssumptionIsTold(t *testing.T) {
	s := breaklines(t, "a.txt", "0 0 5\n4 0 5\n", Options{})
	want := "a.txt: three numbers a line without a header are taken as x y z, of one line"
	if len(s.Warnings) != 1 || s.Warnings[0].String() != want {
		t.Errorf("warnings %v", s.Warnings)
	}
}

// Every point knows its row.
func TestPlacesOfText(t *testing.T) {
	s := breaklines(t, "b.csv", "# note\n\nline,point,x,y,z\ntoe,P1,0,0,1\ncrest,,0,0,1\ntoe,P2,0,0,1\ntoe,P3,1,0,1\ncrest,C2,1,1,1\n", Options{})
	toe, crest := &s.Lines[0], &s.Lines[1]
	for _, c := range []struct{ got, want string }{
		{toe.At(0).String(), "b.csv:4"}, {toe.At(1).String(), "b.csv:7"}, {crest.At(1).String(), "b.csv:8"},
		{toe.PointName(1), "P3"}, {crest.PointName(0), "b.csv:5"}, {toe.spot(0), "P1 (row 4)"}, {crest.spot(0), "row 5"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
	if s.Vertices != 5 || s.Repeated != 1 {
		t.Errorf("%d vertices, %d repeated", s.Vertices, s.Repeated)
	}
}

func TestWarnings(t *testing.T) {
	row := func(line string, x, z float64) string { return fmt.Sprintf("%s,%v,0,%v\n", line, x, z) }
	line := func(name string, xs ...float64) string {
		text := "line,x,y,z\n"
		for _, x := range xs {
			text += row(name, x, 7)
		}
		return text
	}
	for _, c := range []struct {
		name, text string
		o          Options
		want       string
	}{
		{name: "regular", text: line("a", 0, 1, 2, 3, 4)},
		{name: "five times the median is usual", text: line("a", 0, 1, 2, 3, 8)},
		{name: "more is not", text: line("a", 0, 1, 2, 3, 8.25),
			want: `a.csv:5: line "a" has a segment of 5.25 from row 5 to row 6, 5.25 times the median of its 4 segments, 1`},
		{name: "three segments say nothing", text: line("a", 0, 1, 2, 90)},
		{name: "an even number, its middle two", text: line("a", 0, 1, 2, 4, 6, 7, 107),
			want: `a.csv:7: line "a" has a segment of 100 from row 7 to row 8, 66.67 times the median of its 6 segments, 1.5`},
		{name: "two jumps", text: line("a", 0, 1, 2, 3, 4, 44, 94, 95),
			want: `a.csv:7: line "a" has a segment of 50 from row 7 to row 8, 50 times the median of its 7 segments, 1; 1 more are longer than 5 times that`},
		{name: "by the names of the points", text: "line,point,x,y,z\na,P1,0,0,7\na,P2,1,0,7\na,P3,2,0,7\na,,3,0,7\na,P5,93,0,7\n",
			want: `a.csv:5: line "a" has a segment of 90 from row 5 to P5 (row 6), 90 times the median of its 4 segments, 1`},
		{name: "zeros among heights", text: "line,x,y,z\na,0,0,203.1\na,1,0,0\na,2,0,0\na,3,0,208.25\n",
			want: `a.csv:3: line "a" has height 0 at 2 of its 4 vertices; the others are from 203.1 to 208.25`},
		{name: "zeros that are meant", text: "line,x,y,z\na,0,0,203.1\na,1,0,0\n", o: Options{Zeros: UseZeros}},
		{name: "only zeros, meant", text: "line,x,y,z\na,0,0,0\na,1,0,0\n", o: Options{Zeros: UseZeros}},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := breaklines(t, "a.csv", c.text, c.o)
			var got []string
			for _, w := range s.Warnings {
				got = append(got, w.String())
			}
			if strings.Join(got, "\n") != c.want {
				t.Errorf("got  %q\nwant %q", got, c.want)
			}
		})
	}
}

// A broken source gives its error, a second file its own lines and layout.
func TestSeveralSources(t *testing.T) {
	two := append(source("a.csv", "line,x,y,z\n1,0,0,1\n1,1,0,1\n"), source("b.txt", "x y z\n0 0 1\n0 9 1\n")...)
	s, err := Breaklines(context.Background(), two, Options{})
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	if got := dump(s); len(got) != 2 || got[0] != "1 0,0,1 1,0,1" || got[1] != "b 0,0,1 0,9,1" || len(s.Layouts) != 2 {
		t.Errorf("got %q", got)
	}
	_, err = Breaklines(context.Background(), append(two, source("c.csv", "line,x,y,z\n1,0,0,0\n1,1,0,0\n")...), Options{})
	if err == nil || !strings.HasPrefix(err.Error(), "c.csv:2: ") {
		t.Errorf("the third: %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Breaklines(ctx, two, Options{}); err != context.Canceled {
		t.Errorf("cancelled: %v", err)
	}
}

func TestParseZeros(t *testing.T) {
	for text, want := range map[string]Zeros{"": RefuseZeros, "use": UseZeros} {
		if got, err := ParseZeros(text); err != nil || got != want {
			t.Errorf("%q: %v %v", text, got, err)
		}
	}
	_, err := ParseZeros("yes")
	if want := `lines-z "yes": expected use, which takes heights for heights that are all 0`; err == nil || err.Error() != want {
		t.Errorf("got %v", err)
	}
}
