package main

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"isofacet/cmd/internal/status"
)

// good is a set of readings with nothing wrong.
const good = "id,x,y,z\n1,0,0,10\n2,10,0,11\n3,10,10,12\n4,0,10,13\n5,20,5,14\n"

// A fault is a malformed file or command line, and what the program has to say:
// one message with the place, what was seen, what was expected and a way out, and
// the right exit status. Nothing is written.
type fault struct {
	name  string
	args  string            // behind "isofacet", split at blanks; _ stands for a blank in a word
	files map[string]string // in the folder; shots.csv is good unless given
	stdin string
	code  status.Code
	says  []string // all of these, in the message
	hint  string   // in a line of its own
}

func shots(text string) map[string]string { return map[string]string{"shots.csv": text} }

const gridArgs = "grid shots.csv --cell 2 --out out.csv"

var faults = []fault{
	// Lines that cannot be read.
	{"a word for a number", gridArgs, shots("id,x,y,z\n1,0,0,10\n2,10,zero,11\n"), "", 3,
		[]string{"shots.csv:3:6:", `y "zero"`, "expected a number"}, "--missing"},
	{"an empty number", gridArgs, shots("id,x,y,z\n1,0,0,10\n2,10,0,\n"), "", 3,
		[]string{"shots.csv:3:", `z ""`, "expected"}, "--missing blank"},
	{"not a number by name", gridArgs, shots("x,y,z\n0,0,NaN\n1,0,2\n"), "", 3,
		[]string{"shots.csv:2:5:", `"NaN"`, "expected"}, "--missing NaN"},
	{"infinity", gridArgs, shots("x,y,z\n0,0,1\n1,-Inf,2\n"), "", 3,
		[]string{"shots.csv:3:3:", `"-Inf"`, "expected"}, "hint"},
	{"a bound", gridArgs, shots("id,x,y,z\n1,0,0,<25\n2,1,0,3\n"), "", 3,
		[]string{"shots.csv:2:7:", `"<25"`, "expected"}, "bound"},
	{"a decimal comma among points", gridArgs, shots("x;y;z\n0.5;0;1\n1.5;0;\"12,4\"\n"), "", 3,
		[]string{"shots.csv:3:", `"12,4"`, "expected"}, "--decimal comma"},
	{"a mark between thousands", gridArgs, shots("x;y;z\n0.5;0;1\n1.5;0;1,234.5\n"), "", 3,
		[]string{"shots.csv:3:7:", `"1,234.5"`, "expected"}, "without marks between thousands"},
	{"a number beyond all bounds", gridArgs, shots("x,y,z\n0,0,1\n1e80,0,2\n"), "", 3,
		[]string{"shots.csv:3:1:", `"1e80"`, "1e60"}, "--missing"},
	{"a field too few", gridArgs, shots("id,x,y,z\n1,0,0,10\n2,10,0\n"), "", 3,
		[]string{"shots.csv:3:", "3 fields", "expected 4"}, "quotes"},
	{"a field too many", gridArgs, shots("id,x,y,z\n1,0,0,10\n2,10,0,5,9\n"), "", 3,
		[]string{"shots.csv:3:", "5 fields", "expected 4"}, "quotes"},
	{"a quote that is not closed", gridArgs, shots("id,x,y,z\n\"1,0,0,10\n2,10,0,5\n"), "", 3,
		[]string{"shots.csv:2:1:", "expected"}, "quote"},
	{"text behind a quote", gridArgs, shots("id,x,y,z\n\"1\"a,0,0,10\n2,10,0,5\n"), "", 3,
		[]string{"shots.csv:2:4:", "expected"}, "quote"},
	{"a control character in a name", gridArgs, shots("id,x,y,z\na\x01b,0,0,10\n"), "", 3,
		[]string{"shots.csv:2:", "expected"}, "damaged"},
	{"a name that is too long", gridArgs, shots("id,x,y,z\n" + strings.Repeat("a", 2000) + ",0,0,10\n"), "", 3,
		[]string{"shots.csv:2:1:", "expected", "1,024"}, "--columns"},
	{"many bad lines", gridArgs, shots("x,y,z\n" + strings.Repeat("a,0,0\n", 20) + "1,2,3\n"), "", 3,
		[]string{"shots.csv:2:1:", "shots.csv:6:1:", "and 15 more bad lines", "20 lines bad, 1 good"}, "--lenient"},
	{"bad lines on standard input", "grid --cell 2 --out out.csv", nil, "x,y,z\n0,0,zero\n", 3,
		[]string{"standard input:2:5:", `z "zero"`, "expected a number"}, "--missing"},

	// Files that cannot be read.
	{"no such file", "grid nowhere.csv --cell 2 --out out.csv", nil, "", 1,
		[]string{"nowhere.csv: no such file", "expected a file to read"}, "isofacet samples"},
	{"a folder", "grid . --cell 2 --out out.csv", nil, "", 1,
		[]string{".: is a folder", "expected a file"}, "name the files in it"},
	{"an empty file", gridArgs, shots(""), "", 3, []string{"shots.csv:", "expected"}, "the right file"},
	{"comments alone", gridArgs, shots("# nothing\n# here\n"), "", 3, []string{"shots.csv:", "expected"}, "--comment none"},
	{"a header alone", gridArgs, shots("x,y,z\n"), "", 3, []string{"0 of 0 readings used", "expected at least three"}, "inspect"},
	{"bytes that are no text", gridArgs, shots("x,y,z\n1,2,3\n\x00\x01\x02\n"), "", 3,
		[]string{"shots.csv:3:", "expected"}, "as text"},
	{"a line without end", gridArgs, shots("x,y,z\n1,2,3\n" + strings.Repeat("9", 2<<20)), "", 3,
		[]string{"shots.csv:3", "expected"}, "a reading a line"},

	// Columns.
	{"no header and nothing declared", gridArgs, shots("1,2,3,4\n2,3,4,5\n"), "", 3,
		[]string{"shots.csv:1", "expected"}, "--columns id,x,y,z"},
	{"a header of unknown words", gridArgs, shots("alpha,beta,gamma\n1,2,3\n"), "", 3,
		[]string{"shots.csv:1", "alpha", "expected"}, "--columns x=East"},
	{"depth or elevation", gridArgs, shots("well,easting,northing,water level\nA,1,2,3\n"), "", 3,
		[]string{"shots.csv:1:", "water level", "a depth or an elevation"}, "--columns"},
	{"two columns for one role", gridArgs, shots("x,easting,y,z\n1,2,3,4\n"), "", 3,
		[]string{"shots.csv:1:", "easting", "expected"}, "--columns"},
	{"no column for z", gridArgs, shots("id,x,y\n1,2,3\n"), "", 3,
		[]string{"shots.csv:1", "z"}, "--columns"},
	{"a declared name that is not there", gridArgs + " --columns x=East,y=y,z=z", nil, "", 3,
		[]string{"shots.csv:1", "East", "expected"}, "spelling"},
	{"a declared number that is not there", gridArgs + " --columns x=1,y=2,z=9", nil, "", 3,
		[]string{"shots.csv:1", "9"}, "number of the column"},
	{"a role that is not used here", gridArgs + " --columns x=x,y=y,z=z,limit=id", nil, "", 3,
		[]string{"shots.csv", "limit", "expected"}, "--columns"},
	{"depths and nothing that they count from", gridArgs + " --columns id,x,y,depth", nil, "", 3,
		[]string{"shots.csv", "a depth and no measuring point", "expected"}, "--wells"},
	{"which decimal mark", gridArgs, shots("x;y;z\n1,234;5,678;9,123\n2,345;6,789;1,234\n"), "", 3,
		[]string{"shots.csv:2", "expected"}, "--decimal comma"},
	{"a pattern for a column that is not there", gridArgs + " --only code=GR", nil, "", 3,
		[]string{"shots.csv", "code", "expected"}, "--columns"},

	// What the readings say together.
	{"one place, two heights", gridArgs, shots("id,x,y,z\nA,0,0,10\nB,0,0,11\nC,5,0,1\nD,0,5,2\n"), "", 3,
		[]string{"shots.csv:2:", "2 readings at 0,0", "A z 10 in line 2", "B z 11 in line 3", "expected one reading at a place"}, "--same-spot mean"},
	{"a repeat under refuse", gridArgs + " --same-spot refuse", shots("id,x,y,z\nA,0,0,10\nB,0,0,10\nC,5,0,1\nD,0,5,2\n"), "", 3,
		[]string{"shots.csv:2:", "2 readings at 0,0", "expected"}, "--same-spot"},
	{"two wells at one place", gridArgs, shots("well id,easting,northing,head\nMW-1S,0,0,10\nMW-1D,0,0,10\nMW-2,5,0,1\nMW-3,0,5,2\n"), "", 3,
		[]string{"shots.csv:2:", "heads of several ids", "MW-1D", "expected"}, "maps of their own"},
	{"two places", gridArgs, shots("x,y,z\n0,0,1\n5,5,2\n"), "", 3,
		[]string{"2 readings at 2 places", "fewer than three places", "expected at least three"}, "add readings"},
	{"all in line", gridArgs, shots("x,y,z\n0,0,1\n5,5,2\n10,10,2\n"), "", 3,
		[]string{"3 readings at 3 places", "all on one line", "expected"}, "add readings"},
	{"none chosen", gridArgs + " --only id=Z*", nil, "", 3, []string{"0 of 5 readings used", "expected at least three"}, "--only"},

	// Files beside the readings.
	{"no such exclusion file", gridArgs + " --exclude none.csv", nil, "", 1, []string{"none.csv: no such file", "expected"}, "hint"},
	{"an exclusion file of another kind", gridArgs + " --exclude other.csv", map[string]string{"other.csv": "a,b\n1,2\n"}, "", 3,
		[]string{"other.csv:1", "a, b", "decision, reason"}, "header"},
	{"places without columns", "query shots.csv --at p.csv --out out.csv", map[string]string{"p.csv": "a,b\n1,2\n"}, "", 3,
		[]string{"p.csv:1", "a", "expected"}, "--at-columns"},
	{"a place that is no number", "query shots.csv --at p.csv --out out.csv", map[string]string{"p.csv": "x,y\n1,two\n"}, "", 3,
		[]string{"p.csv:2:3:", `y "two"`, "expected a number"}, "--missing"},
	{"places with a column of the answers", "query shots.csv --at p.csv --out out.csv", map[string]string{"p.csv": "x,y,slope\n1,2,3\n"}, "", 3,
		[]string{"p.csv:", `column "slope"`, "expected"}, "rename"},

	// Command lines.
	{"no cell", "grid shots.csv --out out.csv", nil, "", 2, []string{"--cell is missing", "expected"}, "isofacet inspect"},
	{"a cell of nothing", "grid shots.csv --cell 0 --out out.csv", nil, "", 2, []string{`--cell "0"`, "expected a size above zero"}, "--cell"},
	{"a cell with a unit", "grid shots.csv --cell 2m --out out.csv", nil, "", 2, []string{`--cell "2m"`, "expected"}, "--cell"},
	{"an extent of three numbers", gridArgs + " --extent 0,0,10", nil, "", 2, []string{`--extent "0,0,10"`, "expected XMIN"}, "--extent"},
	{"an extent the wrong way round", gridArgs + " --extent 10,0,0,10", nil, "", 2, []string{`--extent "10,0,0,10"`, "XMIN below XMAX"}, "--extent"},
	{"an extent off the cell", gridArgs + " --extent 0,0,10,9", nil, "", 2,
		[]string{"extent ymax 9", "whole multiple of the cell 2", "8 or 10"}, "--extent-outward"},
	{"outward without an extent", gridArgs + " --extent-outward", nil, "", 2, []string{"--extent-outward without --extent", "expected"}, "hint"},
	{"a place for values that is none", gridArgs + " --values-at middle", nil, "", 2, []string{`--values-at "middle"`, "centres, corners"}, "--values-at"},
	{"a show of a later version", gridArgs + " --show curvature", nil, "", 2, []string{`--show "curvature"`, "value, slope, downhill-azimuth, shade"}, "--show"},
	{"a format of a later version", "grid shots.csv --cell 2 --out out.tif", nil, "", 2, []string{`--out "out.tif"`, "csv, raw, raw-float32, png"}, "--format"},
	{"format against extension", gridArgs + " --format raw", nil, "", 2, []string{`--out "out.csv"`, "csv", "raw", "agree"}, "hint"},
	{"a part that is none", "grid shots.csv --cell 2 --out speed=out.csv", nil, "", 2, []string{`--out "speed=out.csv"`, "value, slope"}, "--out"},
	{"two outputs of one name", gridArgs + " --out slope=./out.csv", nil, "", 2, []string{"out.csv", "two outputs", "expected"}, "hint"},
	{"a name in braces that is none", "grid shots.csv --cell 2 --out {site}.csv", nil, "", 2, []string{"{site}.csv", "expected {file}"}, "hint"},
	{"a round in braces without a round", "grid shots.csv --cell 2 --out {round}.csv", nil, "", 2, []string{"{round}.csv", "expected one to be chosen"}, "hint"},
	{"an output that is the input", "grid shots.csv --cell 2 --out shots.csv", nil, "", 2, []string{`--out "shots.csv"`, "input shots.csv", "expected another file"}, "hint"},
	{"a record that is the input", gridArgs + " --record ./shots.csv", nil, "", 2, []string{"--record", "input shots.csv", "expected"}, "hint"},
	{"an output in no folder", "grid shots.csv --cell 2 --out none/out.csv", nil, "", 1, []string{`"none/out.csv"`, "no such folder", "expected"}, "mkdir"},
	{"an output that is a folder", "grid shots.csv --cell 2 --format csv --out .", nil, "", 2, []string{"--out .", "a folder", "expected a file"}, "hint"},
	{"one file twice", "grid shots.csv ./shots.csv --cell 2 --out out.csv", nil, "", 2, []string{`"./shots.csv"`, "named twice", "expected"}, "hint"},
	{"a sample that is none", "grid sample:moon.csv --cell 2 --out out.csv", nil, "", 2, []string{`sample "moon.csv"`, "expected one of", "gravel-pit"}, "isofacet samples"},
	{"a delimiter of two letters", gridArgs + " --delimiter ab", nil, "", 2, []string{`--delimiter "ab"`, "expected comma"}, "--delimiter"},
	{"a rule that is none", gridArgs + " --same-spot median", nil, "", 2, []string{`--same-spot "median"`, "mean", "lowest"}, "--same-spot"},
	{"a spread below zero", gridArgs + " --same-spot-spread -1", nil, "", 2, []string{`--same-spot-spread "-1"`, "at least 0"}, "--same-spot-spread"},
	{"a pattern without a role", gridArgs + " --only GR*", nil, "", 2, []string{`--only "GR*"`, "ROLE=PATTERN"}, "--only"},
	{"decimals that are none", gridArgs + " --decimals some", nil, "", 2, []string{`--decimals "some"`, "auto, full"}, "--decimals"},
	{"no threads", gridArgs + " --threads 0", nil, "", 2, []string{`--threads "0"`, "from 1"}, "--threads"},
	{"memory without a size", gridArgs + " --memory much", nil, "", 2, []string{`--memory "much"`, "512MiB"}, "--memory"},
	{"a system without its register", gridArgs + " --crs 25832", nil, "", 2, []string{`--crs "25832"`, "EPSG:25832"}, "--crs"},
	{"a query without places", "query shots.csv --out out.csv", nil, "", 2, []string{"--at is missing", "expected"}, "--at"},
	{"a place of one number", "query shots.csv --at 5 --out out.csv", nil, "", 2, []string{`--at "5"`, "X,Y"}, "--at"},
	{"places of two kinds", "query shots.csv --at 5,5 --at p.csv --out out.csv", nil, "", 2, []string{"--at 5,5 p.csv", "expected"}, "hint"},
	{"standard input for both", "query --at - --out out.csv", nil, good, 2, []string{`--at "-"`, "expected"}, "hint"},
	{"a hollow option", "inspect shots.csv --out out.json --delimiter", nil, "", 2, []string{"--delimiter", "expected"}, "--delimiter"},
	{"an option of a later version", gridArgs + " --arrows 0.1", nil, "", 2, []string{`option "--arrows"`, "takes --cell"}, "--help"},
	{"a command of a later version", "sheet shots.csv", nil, "", 2, []string{`command "sheet"`, "expected one of inspect, readings, grid, contour, query, triangles"}, "--help"},
	{"files for a command without", "version shots.csv", nil, "", 2, []string{`"shots.csv"`, "takes no files"}, "hint"},

	// Isolines and triangles.
	{"no levels", "contour shots.csv --out out.csv", nil, "", 2, []string{"--interval is missing", "expected"}, "isofacet inspect"},
	{"an interval of nothing", "contour shots.csv --interval 0 --out out.csv", nil, "", 2, []string{`--interval "0"`, "expected a number above 0"}, "--interval"},
	{"an interval with a unit", "contour shots.csv --interval 1m --out out.csv", nil, "", 2, []string{`--interval "1m"`, "expected a number above 0"}, "--interval"},
	{"levels that fall", "contour shots.csv --levels 3,2 --out out.csv", nil, "", 2, []string{`--levels "3,2"`, "levels that rise, not 2 after 3"}, "--levels"},
	{"a level twice", "contour shots.csv --levels 2,2 --out out.csv", nil, "", 2, []string{`--levels "2,2"`, "levels that rise"}, "--levels"},
	{"a level that is a word", "contour shots.csv --levels 2,high --out out.csv", nil, "", 2, []string{`--levels "2,high"`, "numbers such as"}, "--levels"},
	{"an index every nothing", "contour shots.csv --interval 1 --index-every 0 --out out.csv", nil, "", 2, []string{`--index-every "0"`, "from 1"}, "--index-every"},
	{"a shortest line below zero", "contour shots.csv --interval 1 --shortest -1 --out out.csv", nil, "", 2, []string{`--shortest "-1"`, "at least 0"}, "--shortest"},
	{"no lines, as an error", "contour shots.csv --interval 50 --out out.csv --warnings fail", nil, "", 3, []string{"1 warning", "nothing is written"}, "--warnings keep"},
	{"unknown coordinates, as an error", "contour shots.csv --interval 1 --out out.geojson --warnings fail", nil, "", 3, []string{"1 warning", "nothing is written"}, "--warnings keep"},
	{"too many levels", "contour shots.csv --interval 1e-7 --out out.csv", nil, "", 4, []string{"interval 0.0000001", "levels", "expected at most"}, "--interval"},
	{"levels too far from where they are counted", "contour shots.csv --interval 1 --count-from 1e17 --out out.csv", nil, "", 2, []string{"counted from 1", "expected fewer"}, "--count-from"},
	{"no such raster", "contour --from-raster none.csv --interval 1 --out out.csv", nil, "", 1, []string{"none.csv: no such file", "expected"}, "hint"},
	{"a raster that is none", "contour --from-raster shots.csv --interval 1 --out out.csv", nil, "", 3, []string{"shots.csv:1:1", "expected"}, "a matrix or a list"},
	{"a raster and readings", "contour shots.csv --from-raster r.csv --interval 1 --out out.csv", nil, "", 2, []string{`"shots.csv" beside --from-raster`, "expected"}, "hint"},
	{"a raster in half", "contour --from-raster r.raw --interval 1 --out out.csv", map[string]string{"r.raw": "12345678"}, "", 3, []string{"r.raw: no r.raw.json beside it", "expected"}, "belong together"},
	{"a raster with a description that is none", "contour --from-raster r.raw --interval 1 --out out.csv", map[string]string{"r.raw": "12345678", "r.raw.json": "{}"}, "", 3, []string{"r.raw.json", "expected"}, "hint"},
	{"contours of a later format", "contour shots.csv --interval 1 --out out.dxf", nil, "", 2, []string{`--out "out.dxf"`, "geojson, csv, svg"}, "--format"},
	{"triangles of one line", "triangles shots.csv --out out.csv", shots("x,y,z\n0,0,1\n5,5,2\n10,10,2\n"), "", 3, []string{"all on one line", "expected"}, "add readings"},
	{"a part of triangles that is none", "triangles shots.csv --out edges=out.csv", nil, "", 2, []string{`--out "edges=out.csv"`, "triangles, vertices"}, "--out"},
	{"one file for both parts", "triangles shots.csv --out vertices=out.csv --out out.csv", nil, "", 2, []string{"out.csv", "two outputs", "expected"}, "hint"},

	// Limits.
	{"too many nodes", "grid shots.csv --cell 0.0001 --out out.csv --memory 100MB", nil, "", 4,
		[]string{"cell 0.0001 over", "nodes", "expected to fit"}, "--cell"},
	{"too many nodes for an extent that is given", "grid shots.csv --cell 0.001 --extent 0,0,1000,1000 --out out.csv --memory 100MB", nil, "", 4,
		[]string{"cell 0.001 over 1000 x 1000", "expected to fit"}, "--cell 0.5"},
	{"a warning that counts", gridArgs + " --extent 100,100,110,110 --warnings fail", nil, "", 3,
		[]string{"1 warning", "--warnings fail", "nothing is written"}, "--warnings keep"},
}

func TestFaults(t *testing.T) {
	if len(faults) < 40 {
		t.Fatalf("%d faults, want at least forty", len(faults))
	}
	for _, f := range faults {
		t.Run(f.name, func(t *testing.T) {
			dir := t.TempDir()
			t.Chdir(dir)
			files := map[string]string{"shots.csv": good}
			for name, text := range f.files {
				files[name] = text
			}
			for name, text := range files {
				if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
					t.Fatal(err)
				}
			}
			var args []string
			for _, a := range strings.Fields(f.args) {
				args = append(args, strings.ReplaceAll(a, "_", " "))
			}
			var out, words bytes.Buffer
			code := run(args, streams{strings.NewReader(f.stdin), &out, &words})
			if code != int(f.code) {
				t.Errorf("exit status %d, want %d", code, f.code)
			}
			f.check(t, words.String())
			if out.Len() > 0 {
				t.Errorf("standard output has %q", &out)
			}
			// The folder holds what it held, to the byte.
			left, err := filepath.Glob("*")
			if err != nil {
				t.Fatal(err)
			}
			hidden, err := filepath.Glob(".*")
			if err != nil {
				t.Fatal(err)
			}
			for _, name := range slices.Concat(left, hidden) {
				if _, ok := files[name]; !ok {
					t.Errorf("left behind: %s", name)
				}
			}
			for name, text := range files {
				if got, err := os.ReadFile(name); err != nil || string(got) != text {
					t.Errorf("%s has changed: %v", name, err)
				}
			}
		})
	}
}

// check looks for the one message: it comes once, says all of it, and ends with a
// way out.
func (f *fault) check(t *testing.T, words string) {
	t.Helper()
	if n := strings.Count("\n"+words, "\nisofacet: "); n != 1 {
		t.Fatalf("%d messages, want one:\n%s", n, words)
	}
	_, message, _ := strings.Cut("\n"+words, "\nisofacet: ")
	said, hints, ok := strings.Cut(message, "\n  hint: ")
	if !ok {
		t.Errorf("no way out:\n%s", words)
	}
	for _, want := range f.says {
		if !strings.Contains(said, want) {
			t.Errorf("message %q, want %q in it", said, want)
		}
	}
	if f.hint != "hint" && !strings.Contains(hints, f.hint) {
		t.Errorf("way out %q, want %q in it", hints, f.hint)
	}
	for _, never := range []string{"goroutine", "panic", "runtime error", "failed to"} {
		if strings.Contains(words, never) {
			t.Errorf("message holds %q:\n%s", never, words)
		}
	}
}
