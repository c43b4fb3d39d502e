package main

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"isofacet/io/lines"
)

// A lineFault is a faulty file of lines, rings or codes, and the whole message that the
// program has for it, with its way out. The exit status is 3 and nothing is written.
type lineFault struct {
	name   string
	option string // --breaklines and so on, and perhaps others behind it
	file   string // lines.csv, lines.geojson or codes.toml
	text   string
	want   string
	hint   string
}

func geo(kind, coordinates, properties string) string {
	return `{"type":"Feature","properties":` + properties + `,"geometry":{"type":"` + kind + `","coordinates":` + coordinates + `}}`
}

const (
	breaksCSV, breaksJSON = "--breaklines lines.csv", "--breaklines lines.geojson"
	ringCSV, ringJSON     = "--boundary lines.csv", "--boundary lines.geojson"
	voidsCSV              = "--voids lines.csv"
	codesTOML             = "--code-table codes.toml"
)

// The readings are good: from (0, 0) to (20, 10), heights from 10 to 14.
var lineFaults = []lineFault{
	// Heights.
	{"no heights", breaksCSV, "lines.csv", "line,x,y\ntoe,1,2\ntoe,3,4\n",
		`lines.csv:2: line "toe" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`, "add heights"},
	{"a height missing", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3,4,\ntoe,5,6,7\n",
		`lines.csv:3: line "toe" has no height here, but at 2 of its 3 vertices: expected a height at every vertex`, "give every vertex of the line a height"},
	{"a height missing in a ring", voidsCSV, "lines.csv", "line,x,y,z\npond,2,2,3\npond,4,2,3\npond,4,4,\npond,2,2,3\n",
		`lines.csv:4: ring "pond" has no height here, but at 3 of its 4 vertices: expected a height at every vertex, or at none`, "or none of a ring"},
	{"heights all zero", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,0\ntoe,3,4,0.00\n",
		`lines.csv:2: line "toe" has height 0 at all 2 vertices: expected measured heights, or to be told that 0 is meant`, "--lines-z use"},
	{"heights of a ring all zero", ringCSV, "lines.csv", "line,x,y,z\nsite,0,0,0\nsite,9,0,0\nsite,0,9,0\nsite,0,0,0\n",
		`lines.csv:2: ring "site" has height 0 at all 4 vertices: expected measured heights, none, or to be told that 0 is meant`, "--lines-z use"},
	{"two heights at one place of a line", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3,4,203.1\ntoe,3,4,203.4\n",
		`lines.csv:4: line "toe" has height 203.4 at the place of row 3, which has 203.1: expected one height at one place`, "shift the foot of a wall"},
	{"another height than the reading there", breaksCSV, "lines.csv", "line,x,y,z\ntoe,0,0,10.5\ntoe,3,4,11\n",
		`shots.csv:2: height 10, lines.csv:2: line "toe": height 10.5: one place (0, 0), heights 0.5 apart: expected heights that agree`, "--same-spot-spread"},
	{"another height than the other line there", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3,4,5\ncrest,3,4,6\ncrest,5,4,6\n",
		`lines.csv:3: line "toe": height 5, lines.csv:4: line "crest": height 6: one place (3, 4), heights 1 apart: expected heights that agree`, "--same-spot names another rule"},

	// Lines that go nowhere, cross, or are no rings.
	{"one row", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\n",
		`lines.csv:2: line "toe" has one position, (1, 2): expected at least two`, "a line needs two places"},
	{"lines that cross", breaksCSV, "lines.csv", "line,x,y,z\na,1,1,12.40\na,5,5,12.40\nb,1,5,13.05\nb,5,1,13.05\n",
		`lines.csv: breaklines "a" and "b" cross near (3, 3), at heights 12.4 and 13.05: expected lines that meet only at vertices`, "--crossing split"},
	{"a line that crosses itself", breaksCSV, "lines.csv", "line,x,y,z\na,1,1,11\na,5,5,11\na,5,1,12\na,1,5,12\n",
		`lines.csv: breaklines "a" and "a" cross near (3, 3), at heights 11 and 12: expected lines that meet only at vertices`, "--crossing split"},
	{"crossing at heights that do not agree", breaksCSV + " --crossing split --same-spot-spread 0.1", "lines.csv", "line,x,y,z\na,1,1,12.40\na,5,5,12.40\nb,1,5,13.05\nb,5,1,13.05\n",
		`lines.csv: breaklines "a" and "b" cross near (3, 3), at heights 12.4 and 13.05: expected heights that agree`, "mend the heights"},
	{"a ring not closed", ringCSV, "lines.csv", "line,x,y\nsite,0,0\nsite,9,0\nsite,9,9\nsite,0,4.1\n",
		`lines.csv:5: ring "site" is not closed: gap 4.1 to its beginning, row 2: expected the first position again at the end of a ring`, "repeat the first position"},
	{"a ring not closed by a hair", voidsCSV, "lines.csv", "line,x,y\npond,0,0\npond,4,0\npond,4,4\npond,0,0.001\n",
		`lines.csv:5: ring "pond" is not closed: gap 0.001 to its beginning, row 2: expected the first position again at the end of a ring`, "repeat the first position"},
	{"a ring of two places", ringCSV, "lines.csv", "line,x,y\nsite,0,0\nsite,9,0\nsite,0,0\n",
		`lines.csv:2: ring "site" has 2 distinct positions: expected at least 3`, "three places that are not one"},
	{"a ring without area", ringCSV, "lines.csv", "line,x,y\nsite,0,0\nsite,3,3\nsite,9,9\nsite,0,0\n",
		`lines.csv:2: ring "site": 4 positions on one line enclose no area`, "mend the ring"},
	{"a ring that crosses itself", ringCSV, "lines.csv", "line,x,y\nsite,0,0\nsite,8,8\nsite,8,0\nsite,0,8\nsite,0,0\n",
		`lines.csv:2: ring "site" near (4, 4): the ring crosses itself there, between its edges from vertices 1 and 3: expected one that does not`, "mend the ring there"},
	{"a ring that crosses itself at a vertex", voidsCSV, "lines.csv", "line,x,y\npond,0,0\npond,4,4\npond,8,8\npond,8,0\npond,4,4\npond,0,8\npond,0,0\n",
		`lines.csv:3: ring "pond" near (4, 4): the ring crosses itself there, between its edges from vertices 2 and 5: expected one that does not`, "mend the ring there"},
	{"a boundary beside the readings", ringCSV, "lines.csv", "line,x,y\nsite,50,50\nsite,90,50\nsite,50,90\nsite,50,50\n",
		`lines.csv: the boundary from (50, 50) to (90, 90) leaves nothing of the surface of readings from (0, 0) to (20, 10): expected rings that leave some of it`, "same system and order"},
	{"a void over everything", voidsCSV, "lines.csv", "line,x,y\npond,-90,-50\npond,90,-50\npond,0,90\npond,-90,-50\n",
		`lines.csv: the voids from (-90, -50) to (90, 90) leave nothing of the surface of readings from (0, 0) to (20, 10): expected rings that leave some of it`, "same system and order"},

	// Text.
	{"not a number", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3,north,4\n",
		"lines.csv:3:7: y \"north\": expected a number such as 12.4\n1 line bad, 1 good", "--missing"},
	{"not finite", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3,NaN,4\n",
		"lines.csv:3:7: y \"NaN\": expected a finite number such as 12.4\n1 line bad, 1 good", ""},
	{"too large for a coordinate", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1e61,2,3\ntoe,3,4,4\n",
		"lines.csv:2:5: x \"1e61\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 1 good", ""},
	{"no name", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\n,3,4,5\ntoe,5,6,7\n",
		`lines.csv:3: line "": expected the name of the line that the vertex belongs to`, "give every row the name of its line"},
	{"fields missing", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\ntoe,3\n",
		"lines.csv:3: 2 fields: expected 4, as in the header\n1 line bad, 1 good", ""},
	{"codes instead of lines", breaksCSV, "lines.csv", "code,x,y,z\ntoe,1,2,3\ntoe,3,4,5\n",
		`lines.csv:1: no column line, and something else in column "code": expected a column line, or only x, y, z and point names, which make one line`, "a column called line"},
	{"header without northing", breaksCSV, "lines.csv", "line,x,z\ntoe,1,2\n",
		`lines.csv:1: no column for y: expected x and y; the roles found are line, x, z`, ""},
	{"no header, three numbers", ringCSV, "lines.csv", "1,500,600\n1,510,600\n",
		`lines.csv:1: no header line above three numbers: expected to be told by a header whether they are line,x,y or x,y,z`, ""},
	{"empty", breaksCSV, "lines.csv", "",
		`lines.csv: no line: expected at least one`, "is it the right file?"},
	{"binary", breaksCSV, "lines.csv", "line,x,y,z\ntoe,1,2,3\x00\n",
		`lines.csv:2:10: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark`, "save the readings as text"},
	{"many faults", breaksCSV, "lines.csv", "line,x,y,z\na,1,1,1\nb,1,1,1\nc,1,1,1\nd,1,1,1\ne,1,1,1\nf,1,1,1\n",
		"lines.csv:2: line \"a\" has one position, (1, 1): expected at least two\nlines.csv:3: line \"b\" has one position, (1, 1): expected at least two\nlines.csv:4: line \"c\" has one position, (1, 1): expected at least two\nlines.csv:5: line \"d\" has one position, (1, 1): expected at least two\nlines.csv:6: line \"e\" has one position, (1, 1): expected at least two\nand 1 more faults", "a line needs two places"},

	// GeoJSON.
	{"features without heights", breaksJSON, "lines.geojson", geo("LineString", "[[0,0],[4,0]]", `{"line":"toe"}`),
		`lines.geojson: feature 1: line "toe" has no heights: expected a height at every vertex of a breakline; only boundaries and voids go without`, "add heights"},
	{"a point", breaksJSON, "lines.geojson", geo("Point", "[1,2,3]", "{}"),
		`lines.geojson: feature 1: a point without a property line: expected a line, or points that name theirs`, "points belong among the readings"},
	{"no geometry", ringJSON, "lines.geojson", `{"type":"Feature","properties":null,"geometry":null}`,
		`lines.geojson: feature 1: no geometry: expected a polygon, or a line that is closed`, "leave features that are no lines out"},
	{"a polygon not closed", ringJSON, "lines.geojson", geo("Polygon", "[[[0,0],[4,0],[4,4.5],[0,4.1]]]", "{}"),
		`lines.geojson:1:79: ring that ends at (0, 4.1): expected its first position (0, 0) at the end`, "RFC 7946"},
	{"a polygon that crosses itself", ringJSON, "lines.geojson", geo("Polygon", "[[[0,0],[8,8],[8,0],[0,8],[0,0]]]", `{"name":"site"}`),
		`lines.geojson: feature 1, position 1: ring "site" near (4, 4): the ring crosses itself there, between its edges from vertices 1 and 3: expected one that does not`, "mend the ring there"},
	{"a text for a number", breaksJSON, "lines.geojson", geo("LineString", `[[0,0,1],["4",0,1]]`, "{}"),
		`lines.geojson:1:91: x "4": expected a number such as 12.4, not a text`, "RFC 7946"},
	{"cut off", breaksJSON, "lines.geojson", geo("LineString", "[[0,0,1],[4,0,1]]", "{}")[:70],
		`lines.geojson:1:67: text "coo": expected a closing quote`, "RFC 7946"},
	{"another kind of JSON", breaksJSON, "lines.geojson", `{"lines":[[0,0,1],[4,0,1]]}`,
		`lines.geojson:1:1: object: expected a member "type"`, "RFC 7946"},

	// Codes.
	{"readings without codes", codesTOML, "codes.toml", "ground = ['GR']\n",
		`shots.csv: no column for code: expected one to look up in codes.toml`, "--columns code=Desc"},
	{"no table", codesTOML, "codes.toml", "ground = ['GR'\n",
		`codes.toml:1:15: array is incomplete`, "keys are ground, line"},
	{"a key that is none", codesTOML, "codes.toml", "grund = ['GR']\n",
		`codes.toml:1:1: key "grund": expected ground, line, leave-out, others, parts.separator, parts.number, parts.mark, marks.begin, marks.end, marks.close; the nearest is ground`, "keys are ground, line"},
	{"one pattern, two uses", codesTOML, "codes.toml", "ground = ['GR']\nline = ['GR']\n",
		`codes.toml:2:9: pattern "GR" for line: expected one use; it is for ground as well`, "keys are ground, line"},
}

func TestLineFaults(t *testing.T) {
	if len(lineFaults) < 30 {
		t.Fatalf("%d faults, want at least thirty", len(lineFaults))
	}
	for k, f := range lineFaults {
		t.Run(f.name, func(t *testing.T) {
			t.Chdir(t.TempDir())
			files := map[string]string{"shots.csv": good, f.file: f.text}
			for name, text := range files {
				if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
					t.Fatal(err)
				}
			}
			// Every command in turn.
			commands := []string{"inspect", "grid --cell 1", "query --at 5,5", "contour --interval 1", "contour --bands --interval 1", "triangles"}
			args := strings.Fields(commands[k%len(commands)] + " shots.csv --format csv --out out.csv --quiet " + f.option)
			if args[0] == "inspect" {
				args[slices.Index(args, "csv")] = "json"
			}
			var out, words bytes.Buffer
			if code := run(args, streams{strings.NewReader(""), &out, &words}); code != 3 {
				t.Errorf("exit status %d, want 3", code)
			}
			said, hint, _ := strings.Cut(words.String(), "\n  hint: ")
			if want := "isofacet: " + f.want; strings.TrimSuffix(said, "\n") != want {
				t.Errorf("got\n%s\nwant\n%s", said, want)
			}
			if hint == "" || !strings.Contains(hint, f.hint) {
				t.Errorf("way out %q, want %q in it", hint, f.hint)
			}
			if out.Len() > 0 {
				t.Errorf("standard output has %q", &out)
			}
			left, err := filepath.Glob("*")
			if err != nil {
				t.Fatal(err)
			}
			for _, name := range left {
				if _, ok := files[name]; !ok {
					t.Errorf("left behind: %s", name)
				}
			}
		})
	}
}

// Every kind of trouble with lines has a way out.
func TestEveryKindOfLineHasAHint(t *testing.T) {
	n := 0
	for kind := lines.NoLines; kind <= lines.NoCodeColumn; kind++ {
		n++
		if lineHints[kind] == "" {
			t.Errorf("kind %d of trouble has no hint", kind)
		}
	}
	if n != len(lineHints) {
		t.Errorf("%d kinds and %d hints", n, len(lineHints))
	}
}
