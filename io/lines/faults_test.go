package lines

import (
	"context"
	"errors"
	"io"
	"strings"
	"testing"
	"testing/iotest"

	"isofacet/io/readings"
)

// faulty is a line file that is refused, with the whole message.
type faulty struct {
	name  string
	text  string
	rings bool
	o     Options
	want  string
}

// The texts are called a.csv. Each row has one thing wrong with it.
var faultyTexts = []faulty{
	{name: "no heights", text: "line,x,y\ntoe,1,2\ntoe,3,4\n",
		want: `a.csv:2: line "toe" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "no heights in one line of two", text: "line,x,y,z\ncrest,1,2,3\ntoe,1,2,\ncrest,3,4,5\ntoe,3,4,\n",
		want: `a.csv:3: line "toe" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`},
	{name: "a height missing", text: "line,x,y,z\ntoe,1,2,3\ntoe,3,4,\ntoe,5,6,7\n",
		want: `a.csv:3: line "toe" has no height here, but at 2 of its 3 vertices: expected a height at every vertex`},
	{name: "a height missing by a mark", text: "line,x,y,z\ntoe,1,2,3\ntoe,3,4,-9999\n", o: Options{Declared: readings.Declared{Missing: []string{"-9999"}}},
		want: `a.csv:3: line "toe" has no height here, but at 1 of its 2 vertices: expected a height at every vertex`},
	{name: "a height missing in a ring", text: "line,x,y,z\npond,0,0,3\npond,4,0,3\npond,0,4,\npond,0,0,3\n", rings: true,
		want: `a.csv:4: ring "pond" has no height here, but at 3 of its 4 vertices: expected a height at every vertex, or at none`},
	{name: "heights all zero", text: "line,x,y,z\ntoe,1,2,0\ntoe,3,4,0.00\ntoe,5,6,-0\n",
		want: `a.csv:2: line "toe" has height 0 at all 3 vertices: expected measured heights, or to be told that 0 is meant`},
	{name: "heights of a ring all zero", text: "line,x,y,z\npond,0,0,0\npond,4,0,0\npond,0,4,0\npond,0,0,0\n", rings: true,
		want: `a.csv:2: ring "pond" has height 0 at all 4 vertices: expected measured heights, none, or to be told that 0 is meant`},
	{name: "one row", text: "line,x,y,z\ntoe,1,2,3\n",
		want: `a.csv:2: line "toe" has one position, (1, 2): expected at least two`},
	{name: "one place again and again", text: "line,x,y,z\ntoe,431208.214,5621420.377,3\ntoe,431208.214,5621420.377,3\n",
		want: `a.csv:2: line "toe" has one position, (431208.214, 5621420.377): expected at least two`},
	{name: "two heights one after the other", text: "line,x,y,z\ntoe,1,2,3\ntoe,3,4,203.1\ntoe,3,4,203.4\n",
		want: `a.csv:4: line "toe" has height 203.4 at the place of row 3, which has 203.1: expected one height at one place`},
	{name: "two heights where a line closes", text: "line,point,x,y,z\ntoe,P1,0,0,3\ntoe,P2,4,0,3\ntoe,P3,0,4,3\ntoe,P4,0,0,3.5\n",
		want: `a.csv:5: line "toe" has height 3.5 at the place of P1 (row 2), which has 3: expected one height at one place`},
	{name: "ring not closed", text: "line,x,y\npond,0,0\npond,4,0\npond,4,4.5\npond,0,4.1\n", rings: true,
		want: `a.csv:5: ring "pond" is not closed: gap 4.1 to its beginning, row 2: expected the first position again at the end of a ring`},
	{name: "ring not closed by a hair", text: "line,x,y\npond,0,0\npond,4,0\npond,4,4\npond,0,0.001\n", rings: true,
		want: `a.csv:5: ring "pond" is not closed: gap 0.001 to its beginning, row 2: expected the first position again at the end of a ring`},
	{name: "ring of two places", text: "line,x,y\npond,0,0\npond,4,0\npond,0,0\npond,4,0\npond,0,0\n", rings: true,
		want: `a.csv:2: ring "pond" has 2 distinct positions: expected at least 3`},
	{name: "ring of one place", text: "line,x,y\npond,0,0\npond,0,0\n", rings: true,
		want: `a.csv:2: ring "pond" has 1 distinct position: expected at least 3`},
	{name: "not finite", text: "line,x,y,z\ntoe,1,2,3\ntoe,3,NaN,4\n",
		want: "a.csv:3:7: y \"NaN\": expected a finite number such as 12.4\n1 line bad, 1 good"},
	{name: "infinite height", text: "line,x,y,z\ntoe,1,2,Inf\ntoe,3,4,4\n",
		want: "a.csv:2:9: z \"Inf\": expected a finite number such as 12.4\n1 line bad, 1 good"},
	{name: "too large for a coordinate", text: "line,x,y,z\ntoe,1e61,2,3\ntoe,3,4,4\n",
		want: "a.csv:2:5: x \"1e61\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 1 good"},
	{name: "not a number", text: "line,x,y,z\ntoe,1,2,3\ntoe,3,north,4\n",
		want: "a.csv:3:7: y \"north\": expected a number such as 12.4\n1 line bad, 1 good"},
	{name: "decimal comma", text: "line;x;y;z\ntoe;1.5;2.5;3\ntoe;2.5;2,5;3\n",
		want: "a.csv:3:9: y \"2,5\": expected a number such as 12.4\n1 line bad, 1 good"},
	{name: "no easting", text: "line,x,y,z\ntoe,1,2,3\ntoe,,4,4\n",
		want: "a.csv:3:5: x \"\": expected a number such as 12.4\n1 line bad, 1 good"},
	{name: "place missing by a mark", text: "line,x,y,z\ntoe,1,2,3\ntoe,NM,4,4\ntoe,5,6,7\n", o: Options{Declared: readings.Declared{Missing: []string{"NM"}}},
		want: `a.csv:3: x is NM: expected a place for every vertex`},
	{name: "no name", text: "line,x,y,z\ntoe,1,2,3\n,3,4,5\ntoe,5,6,7\n",
		want: `a.csv:3: line "": expected the name of the line that the vertex belongs to`},
	{name: "fields missing", text: "line,x,y,z\ntoe,1,2,3\ntoe,3\n",
		want: "a.csv:3: 2 fields: expected 4, as in the header\n1 line bad, 1 good"},
	{name: "rings without a column for them", text: "polygon,vertex,east,north\nborder,1,0,0\nborder,2,4,0\nborder,3,0,4\nborder,1,0,0\n", rings: true,
		want: `a.csv:1: no column line, and something else in columns "polygon", "vertex": expected a column line, or only x, y, z and point names, which make one line`},
	{name: "codes instead of lines", text: "code,x,y,z\ntoe,1,2,3\ntoe,3,4,5\n",
		want: `a.csv:1: no column line, and something else in column "code": expected a column line, or only x, y, z and point names, which make one line`},
	{name: "names that repeat", text: "name,x,y,z\ntoe,1,2,3\ntoe,3,4,5\n",
		want: `a.csv:3: name "toe" at two places in a row: expected names of points, or a column line if these are names of lines`},
	{name: "no header, five fields", text: "toe,P1,1,2,3\ntoe,P2,3,4,5\n",
		want: `a.csv:1: no header line above 5 fields: expected a header such as line,x,y,z, or rows of a line's name, x, y and perhaps z`},
	{name: "no header, three numbers", text: "1,500,600\n1,510,600\n", rings: true,
		want: `a.csv:1: no header line above three numbers: expected to be told by a header whether they are line,x,y or x,y,z`},
	{name: "no header, a bad row", text: "toe,1,2,3\ntoe,3,4,5\ntoe,3,five,5\n",
		want: "a.csv:3:7: y \"five\": expected a number such as 12.4\n1 line bad, 2 good"},
	{name: "header without a known word", text: "a,b,c,d\ntoe,1,2,3\n",
		want: `a.csv:1: header "a, b, c, d": expected names such as line, x, y, z`},
	{name: "header without northing", text: "line,x,z\ntoe,1,2\n",
		want: `a.csv:1: no column for y: expected x and y; the roles found are line, x, z`},
	{name: "two eastings", text: "line,x,easting,y,z\ntoe,1,2,3,4\n",
		want: `a.csv:1:8: column "easting": expected one column for x; column 2, "x", is one too`},
	{name: "level of what", text: "line,x,y,level\ntoe,1,2,3\n",
		want: `a.csv:1:10: column "level": expected to be told whether it is a depth or an elevation`},
	{name: "header alone", text: "line,x,y,z\n",
		want: `a.csv: no line: expected at least one`},
	{name: "empty", text: "", rings: true,
		want: `a.csv: no ring: expected at least one`},
	{name: "binary", text: "line,x,y,z\ntoe,1,2,3\x00\n",
		want: `a.csv:2:10: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark`},
	{name: "quote", text: "line,x,y,z\n\"toe,1,2,3\ntoe,1,2,3\n",
		want: "a.csv:2:1: quote that is not closed: expected a closing quote within 65,536 bytes\n1 line bad, 1 good"},
	{name: "many faults", text: "line,x,y,z\na,1,1,1\nb,1,1,1\nc,1,1,1\nd,1,1,1\ne,1,1,1\nf,1,1,1\ng,1,1,1\n",
		want: `a.csv:2: line "a" has one position, (1, 1): expected at least two
a.csv:3: line "b" has one position, (1, 1): expected at least two
a.csv:4: line "c" has one position, (1, 1): expected at least two
a.csv:5: line "d" has one position, (1, 1): expected at least two
a.csv:6: line "e" has one position, (1, 1): expected at least two
and 2 more faults`},
}

func TestFaultyTexts(t *testing.T) { checkFaulty(t, "a.csv", faultyTexts) }

func checkFaulty(t *testing.T, file string, cases []faulty) {
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			reading := Breaklines
			if c.rings {
				reading = Rings
			}
			s, err := reading(context.Background(), []readings.Source{readings.FromBytes(file, []byte(c.text))}, c.o)
			if err == nil || s != nil {
				t.Fatalf("read without an error: %+v", s)
			}
			if err.Error() != c.want {
				t.Errorf("got\n%s\nwant\n%s", err, c.want)
			}
			if f, ok := errors.AsType[*Fault](err); ok && (f.Kind == 0 || f.Kind >= kindCount || f.File == "" || f.Expected == "") {
				t.Errorf("not whole: %+v", f)
			}
		})
	}
}

// The tables are called codes.toml.
func TestFaultyCodeTables(t *testing.T) {
	const whole = "ground = ['GR']\nline = ['TOE']\n"
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", `codes.toml: no patterns: expected some codes, as in ground = ["GR"]`},
		{"syntax", "ground = ['GR'\nline = 3\n", "codes.toml:2:1: expected ',' or ']' after array value"},
		{"unknown key", "grund = ['GR']\n",
			`codes.toml:1:1: key "grund": expected ground, line, leave-out, others, parts.separator, parts.number, parts.mark, marks.begin, marks.end, marks.close; the nearest is ground`},
		{"unknown key in a table", whole + "[parts]\nseperator = ' '\n",
			`codes.toml:4:1: key "parts.seperator": expected ground, line, leave-out, others, parts.separator, parts.number, parts.mark, marks.begin, marks.end, marks.close; the nearest is parts.separator`},
		{"a key outside its table", whole + "separator = ' '\n",
			`codes.toml:3:1: key "separator": expected ground, line, leave-out, others, parts.separator, parts.number, parts.mark, marks.begin, marks.end, marks.close; the nearest is parts.separator`},
		{"unknown table", whole + "\n[mark]\nbegin = ['B']\n", `codes.toml:4:2: table "mark": expected parts, marks; the nearest is marks`},
		{"list of tables", whole + "[[parts]]\nnumber = 'none'\n", `codes.toml:3:3: list of tables "parts": expected a table in single brackets, such as [parts]`},
		{"no list", "ground = 'GR'\n", `codes.toml:1:1: ground = "GR": expected a list such as ["GR", "SP*"]`},
		{"list of numbers", "ground = ['GR', 7]\n", `codes.toml:1:1: ground with 7: expected a list of texts such as ["GR", "SP*"]`},
		{"bad pattern", "ground = ['GR', 'S[P']\n", `codes.toml:1:17: pattern "S[P": expected every [ closed by a ], and something behind every \`},
		{"one pattern, two uses", whole + "leave-out = ['BP', 'TOE']\n", `codes.toml:3:20: pattern "TOE" for leave-out: expected one use; it is for line as well`},
		{"said twice", "line = ['A']\nline = ['B']\n", `codes.toml:2:1: key line is already defined`},
		{"others", whole + "others = 'drop'\n", `codes.toml:3:1: others = "drop": expected ground, line or leave-out`},
		{"number", whole + "[parts]\nnumber = 'end'\n", `codes.toml:4:1: parts.number = "end": expected none, behind or part`},
		{"mark", whole + "parts.mark = true\n", `codes.toml:3:1: parts.mark = true: expected none, first or last`},
		{"separator", whole + "parts = { separator = '' }\n", `codes.toml:3:11: parts.separator = "": expected the text between the parts of a code, such as " " or "-"`},
		{"number without separator", whole + "[parts]\nnumber = 'part'\n",
			`codes.toml:4:1: parts.number = "part": expected parts.separator to say what stands between code and number`},
		{"mark without separator", whole + "[parts]\nmark = 'last'\n",
			`codes.toml:4:1: parts.mark = "last": expected parts.separator to say what stands between code and mark`},
		{"mark without marks", whole + "[parts]\nseparator = ' '\nmark = 'last'\n",
			`codes.toml:5:1: parts.mark = "last": expected the marks themselves, as in marks.begin = ["B"]`},
		{"marks without a place", whole + "[marks]\nbegin = ['B']\n", `codes.toml:4:10: mark "B": expected parts.mark to say where marks stand, first or last`},
		{"mark of two words", whole + "[parts]\nseparator = ' '\nmark = 'last'\n[marks]\nbegin = ['BEG IN']\n",
			`codes.toml:7:10: mark "BEG IN": expected a word without the separator`},
		{"mark of two meanings", whole + "[parts]\nseparator = ' '\nmark = 'last'\n[marks]\nbegin = ['B']\nclose = ['C', 'B']\n",
			`codes.toml:8:15: mark "B" for close: expected one meaning; it is for begin as well`},
		{"not UTF-8", "ground = ['\xff']\n", "codes.toml:1:12: invalid UTF-8 character in literal string"},
		{"too large", strings.Repeat("# \n", tableMost), `codes.toml: more than 1048576 bytes: expected a table of codes, which a person writes`},
	} {
		t.Run(c.name, func(t *testing.T) {
			table, err := ReadCodeTable(context.Background(), readings.FromBytes("codes.toml", []byte(c.text)))
			if err == nil || table != nil {
				t.Fatalf("read without an error: %+v", table)
			}
			if err.Error() != c.want {
				t.Errorf("got\n%s\nwant\n%s", err, c.want)
			}
		})
	}
}

// Every kind of fault has an input that leads to it.
func TestEveryKind(t *testing.T) {
	var met [kindCount]bool
	meet := func(err error) {
		if e, ok := errors.AsType[*Faults](err); ok {
			for _, f := range e.First {
				met[f.Kind] = true
			}
		}
	}
	for file, cases := range map[string][]faulty{"a.csv": faultyTexts, "a.geojson": faultyFeatures} {
		for _, c := range cases {
			for _, reading := range []func(context.Context, []readings.Source, Options) (*Set, error){Breaklines, Rings} {
				_, err := reading(context.Background(), source(file, c.text), c.o)
				meet(err)
			}
		}
	}
	_, err := tryStrung(t, "x,y,z\n0,0,1\n4,0,1\n", officeTable)
	meet(err)
	_, err = whole(context.Background(), readings.FromBytes("a.csv", make([]byte, 9)), 8)
	meet(err)
	if want := "a.csv: more than 8 bytes: expected a file that fits into them"; err == nil || err.Error() != want {
		t.Errorf("got %v, want %s", err, want)
	}
	if data, err := whole(context.Background(), readings.FromBytes("a.csv", make([]byte, 8)), 8); err != nil || len(data) != 8 {
		t.Errorf("8 bytes of 8: %d, %v", len(data), err)
	}
	for k := Kind(1); k < kindCount; k++ {
		if !met[k] {
			t.Errorf("no input leads to kind %d", k)
		}
	}
}

// A source that fails gives its error.
func TestUnreadable(t *testing.T) {
	broken := errors.New("disk on fire")
	for name, src := range map[string]readings.Source{
		"open": {Name: "a.csv", Open: func() (io.ReadCloser, error) { return nil, broken }},
		"read": {Name: "a.csv", Open: func() (io.ReadCloser, error) {
			return io.NopCloser(io.MultiReader(strings.NewReader("line,x,y,z\n"), iotest.ErrReader(broken))), nil
		}},
	} {
		_, err := Breaklines(context.Background(), []readings.Source{src}, Options{})
		if p, ok := errors.AsType[*readings.PositionError](err); !ok || p.Kind != readings.Unreadable || !errors.Is(err, broken) || err.Error() != "a.csv: disk on fire" {
			t.Errorf("%s: %v", name, err)
		}
		if _, err := ReadCodeTable(context.Background(), src); !errors.Is(err, broken) {
			t.Errorf("%s, as a table: %v", name, err)
		}
	}
}
