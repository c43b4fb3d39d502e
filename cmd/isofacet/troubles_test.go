package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"strings"
	"testing"

	"isofacet/cmd/internal/status"
)

// A trouble is something that goes wrong with field data in practice, and what the
// program does about it: a golden message or result. The words name the trouble as
// people of the trade would; where a script or a test shows more of it, it is named.
type trouble struct {
	words string
	args  string // behind "isofacet", split at blanks
	files map[string]string
	code  status.Code
	says  []string // all of these on standard error
	shows []string // all of these on standard output
	more  string   // a script of testdata/script, without its ending
}

func one(name, text string) map[string]string { return map[string]string{name: text} }

// square has four corners at 10, for lines and limits.
const square = "id,x,y,z,code\n1,0,0,10,GR\n2,10,0,10,GR\n3,10,10,10,GR\n4,0,10,11,GR\n"

var troubles = []trouble{
	{"easting and northing exchanged", "inspect a.csv --expect-extent 0,100,50,200", one("a.csv", "id,x,y,z\nA,110,10,1\nB,120,10,1\nC,110,20,1\n"), 3,
		[]string{"a.csv:2: A: place 110,10\n", "3 readings of 3 outside: expected all within 0,100,50,200", "when x and y are exchanged: look at --columns"}, nil, "guards"},
	{"columns in another order than the system's", "inspect a.csv --columns id,x,y,z", one("a.csv", "id,northing,easting,elevation\nA,5621000,431000,1\nB,5621010,431000,1\nC,5621000,431010,1\n"), 0,
		[]string{`a.csv:1: column 2 is headed "northing" but declared as x`, `a.csv:1: column 3 is headed "easting" but declared as y`}, nil, "guards"},
	{"international feet, US survey feet or metres", "query a.csv --at 0,0 --xy-unit feet", one("a.csv", good), 2,
		[]string{`--xy-unit "feet": expected which foot: ft-int (international, 0.3048 m) or ft-us (US survey, 1200/3937 m)`}, nil, "units"},
	{"degrees in a job of lengths", "grid a.csv --cell 5", one("a.csv", "id,x,y,z\n1,5.1234,51.9123,10\n2,5.1334,51.9223,25\n3,5.1434,51.9103,12\n"), 3,
		[]string{"x 5.1234 to 5.1434, y 51.9103 to 51.9223 look like degrees: expected projected coordinates for a cell of 5"}, nil, "guards"},
	{"a wrong rod height: a run of shots moved by one amount", "inspect a.csv", one("a.csv", rodSlipped()), 0,
		nil, []string{"nothing is corrected\nrun        shots 311 to 322 (12): 0.", "above what others expect", "rod height?\nsuggested"}, "suspects"},
	{"a height that cannot be", "inspect a.csv --expect-z 5,20", one("a.csv", "id,x,y,z\nA,0,0,10\nB,10,0,11.5\nC,0,10,115\n"), 3,
		[]string{"a.csv:4: C: z 115\n", "1 reading of 3 outside: expected all from 5 to 20"}, nil, "guards"},
	{"a code for no value among the heights", "query a.csv --at 0,0 --missing -9999", one("a.csv", "id,x,y,z\nA,0,0,10\nB,10,0,11\nC,0,10,12\nD,5,5,-9999\n"), 0,
		[]string{"left out: a.csv:5: z is -9999"}, []string{"10.00"}, "lenient"},
	{"the same spot shot twice", "query a.csv --at 0,0", one("a.csv", "id,x,y,z\n104,0,0,10\n105,0,0,10.2\n106,0,0,13\nB,10,0,11\nC,0,10,12\n"), 3,
		[]string{"3 readings at 0,0 with z 3 apart: 104 z 10 in line 2; 105 z 10.2 in line 3; 106 z 13 in line 4", "or a rule for several"}, nil, "same-spot"},
	{"nearly the same spot shot twice", "inspect a.csv --same-spot-within 0.01 --same-spot lowest", one("a.csv", "id,x,y,z\nA,0,0,10\nA2,0.005,0,10.2\nB,10,0,11\nC,0,10,12\n"), 0,
		[]string{"merged: a.csv:3: at the place of line 2", "same spot: 1 place with several readings, largest spread of z 0.2"}, nil, "same-spot"},
	{"codes that are not ground", "inspect a.csv --without code=TREE*", one("a.csv", square+"5,5,5,18,TREE OAK\n"), 0,
		[]string{"left out: a.csv:6: among code=TREE*"}, []string{"code       GR           4"}, "code-table"},
	{"codes that nobody knows", "inspect a.csv --code-table t.toml", map[string]string{"a.csv": square + "5,5,5,18,EPX\n", "t.toml": "ground = [\"GR\"]\n"}, 3,
		[]string{"EPX"}, nil, "code-table"},
	{"a coded string whose shots are in the wrong order", "inspect a.csv --breaklines l.csv",
		map[string]string{"a.csv": square, "l.csv": "line,x,y,z\nT,1,1,10\nT,1.5,1,10\nT,2,1,10\nT,2.5,1,10\nT,3,1,10\nT,3.5,1,10\nT,4,1,10\nT,4.5,1,10\nT,5,1,10\nT,5.5,1,10\nT,9,9,10\n"}, 0,
		[]string{"l.csv:11: ", "from row 11 to row 12, 17.46 times the median of its 10 segments"}, nil, "lines"},
	{"breaklines that cross at unlike heights", "inspect a.csv --breaklines l.csv",
		map[string]string{"a.csv": square, "l.csv": "line,x,y,z\nP,2,2,10\nP,8,8,10\nQ,2,8,12\nQ,8,2,12\n"}, 3,
		[]string{`"P"`, `"Q"`, "(5, 5)"}, nil, "crossing"},
	{"lines without heights", "inspect a.csv --breaklines l.csv", map[string]string{"a.csv": square, "l.csv": "line,x,y,z\nP,2,2,0\nP,8,8,0\n"}, 3,
		[]string{`l.csv:2: line "P" has height 0 at all 2 vertices: expected measured heights`}, nil, "lines-z"},
	{"long triangles across a bay of the outline", "inspect a.csv", one("a.csv", bay()), 0,
		[]string{"the convex hull stands in for an outline there", "[hull-outline]"}, []string{"long edge"}, "max-edge"},
	{"flat triangles where a crest was not measured", "inspect a.csv", one("a.csv", strings.Replace(square, "0,10,11", "0,10,10", 1)+"5,20,5,11,GR\n"), 0, nil, []string{"flat       2 triangles with three equal heights, area 100.00"}, "inspect"},
	{"values beyond the outermost wells", "query a.csv --at 50,50", one("a.csv", square), 0, []string{"1 outside the surface"}, []string{"50,50,,,,outside"}, "query"},
	{"a depth taken for an elevation", "query a.csv --at 0,0", one("a.csv", "well,x,y,water level\nA,0,0,5\n"), 3,
		[]string{`a.csv:1:10: column "water level": expected to be told whether it is a depth or an elevation`}, nil, "guards"},
	{"a head above the ground", "query a.csv --at 0,0", one("a.csv", "well,x,y,mp,depth,ground,status\nA,0,0,20,1,18,\nB,5,0,20,5,18,\nC,0,5,20,5,18,\n"), 0,
		[]string{"a.csv:2: A: head 19 is above the ground 18: a flowing well, or an error"}, nil, "wells"},
	{"no measuring point that holds on the day", "readings a.csv --wells w.csv", map[string]string{
		"a.csv": "well,date,depth\nMW-9,2026-03-04,5.00\nMW-8,2026-03-04,5.00\n", "w.csv": "well,x,y,toc,valid_from\nMW-9,0,0,100,2026-04-01\nMW-8,5,0,100,2020-01-01\n"}, 0,
		[]string{"left out: a.csv:2: MW-9: no measuring point: none of MW-9 is valid on 2026-03-04, the first is from 2026-04-01"}, []string{"a.csv,3,MW-8,5.00,0.00,95.0000,used,"}, "wells"},
	{"a casing that was surveyed anew", "readings a.csv --wells w.csv --only round=*", map[string]string{
		"a.csv": "well,date,depth,round\nA,2024-05-01,5.00,1\nB,2024-07-01,5.00,2\n", "w.csv": "well,x,y,toc,valid_from\nA,0,0,100.00,2020-01-01\nA,,,99.75,2024-06-01\nB,1,0,100.00,2020-01-01\nB,,,99.75,2024-06-01\n"}, 0,
		nil, []string{"100.00 - 5.00 = 95.00", "99.75 - 5.00 = 94.75"}, "wells"},
	{"dry wells, bounds and words for depths", "readings a.csv --missing OBS", one("a.csv", "well,x,y,mp,depth,screen_bottom\nA,0,0,20.0,DRY,5\nMW-7,1,0,20.0,>14.2,5\nC,2,0,20.0,OBS,5\n"), 0,
		[]string{"MW-7: depth >14.2 is a bound, not a level: the head lies below 5.8", "A: dry: the head lies below 5, the bottom of the screen", "C: depth is OBS"}, []string{",<5.8,"}, "wells"},
	{"a level below the bottom of the screen", "readings a.csv", one("a.csv", "well,x,y,mp,depth,screen_bottom\nA,0,0,30.0,25.1,6.0\n"), 0,
		[]string{"head 4.9 is below the bottom of the screen 6.0: water left in the casing, not a level"}, []string{",<6.0,"}, "wells"},
	{"product floating on the water", "readings a.csv", one("a.csv", "well,x,y,mp,depth,product,sg\nA,0,0,100.00,10.00,0.32,0.83\n"), 0,
		nil, []string{"100.00 - 10.00 + 0.32 x 0.83 = 90.2656"}, "wells"},
	{"product, and nobody says how heavy", "readings a.csv", one("a.csv", "well,x,y,mp,depth,product\nA,0,0,100.00,10.00,0.32\n"), 0,
		[]string{"A: no specific gravity: product 0.32 thick, and nothing says how heavy it is"}, nil, "wells"},
	{"wells of several zones on one map", "contour a.csv --interval 1", one("a.csv", "well,x,y,head,zone\nA,0,0,1,upper\nB,5,0,2,lower\nC,0,5,3,upper\n"), 3,
		[]string{"readings of 2 zones: lower (1), upper (2): expected one zone", "hint: --only zone=upper takes one"}, nil, "wells"},
	{"several rounds in one file", "contour a.csv --interval 1", one("a.csv", "well,x,y,head,round\nA,0,0,1,2024\nB,5,0,2,2025\nC,0,5,3,2025\n"), 3,
		[]string{"readings of 2 rounds: 2024 (1), 2025 (2): expected one round", "hint: --round 2025 takes one"}, nil, "wells"},
	{"wells that are pumped", "readings a.csv", one("a.csv", "well,x,y,mp,depth,status\nA,0,0,20,5,pumping\nB,1,0,20,5,Recently pumped\nC,2,0,20,5,nearby pumping\n"), 0,
		[]string{"A: pumping", "B: recently pumped", "C: nearby pumping", "3 left out"}, nil, "wells"},
	{"a round that took days", "query a.csv --at 0,0", one("a.csv", "well,x,y,head,date\nA,0,0,1,2024-03-01\nB,5,0,2,2024-03-02\nC,0,5,3,2024-03-06\n"), 0,
		[]string{"the round took 5 days, from 2024-03-01 (A) to 2024-03-06 (C): more than 24 hours"}, nil, "guards"},
	{"two rounds of unlike wells", "change a.csv --from round=1 --to round=2",
		one("a.csv", "well,x,y,head,round\nA,0,0,1,1\nB,5,0,2,1\nC,0,5,3,1\nD,6,6,1,1\nA,0,0,2,2\nB,5,0,3,2\nC,0,5,4,2\nE,7,7,4,2\n"), 0,
		[]string{"added: 1 well: E", "lost: 1 well: D"}, []string{"A,0.00,0.00,1.00,2.00,1.00,common"}, "rounds"},
	{"unlike height datums", "contour --from-raster r.raw --interval 1 --vertical-datum NGVD29", one("a.csv", good), 2,
		[]string{`--vertical-datum "NGVD29": the raster says "NAVD88": expected the same`}, nil, "guards"},
	{"distances on the ground and in the grid", "query a.csv --at 0,0 --fit p.csv --fit-within 0.1", map[string]string{"a.csv": good,
		"p.csv": "id,from_x,from_y,to_x,to_y\n1,0,0,1000,1000\n2,100,0,1100,1000\n3,0,100,1000,1100.96\n"}, 3,
		[]string{"p.csv:2: pair 1: residual 0.33", "expected at most 0.1", "fit: pair 3: residual "}, nil, "units"},
	{"a fit that nothing checks", "query a.csv --at 0,0 --fit p.csv --fit-within 0.1", map[string]string{"a.csv": good,
		"p.csv": "id,from_x,from_y,to_x,to_y\n1,0,0,1000,1000\n2,100,0,1100,1000\n"}, 0, []string{"2 pairs settle a fit (similarity) and check nothing", "[unchecked-fit]"}, nil, "units"},
	{"a decimal comma", "query a.csv --at 0,0", one("a.csv", "x;y;z\n0.5;0;1\n4512233,10;0;2\n"), 3,
		[]string{`a.csv:3:1: x "4512233,10": expected a number such as 12.4`, "say --decimal comma"}, nil, "lenient"},
	{"a mark between thousands", "query a.csv --at 0,0", one("a.csv", "x;y;z\n0.5;0;1\n1.234,56;0;2\n"), 3, []string{`x "1.234,56"`, "without marks between thousands"}, nil, "lenient"},
	{"a footer below the table", "query a.csv --at 0,0", one("a.csv", good+"Total: 5 shots\n"), 3, []string{"a.csv:7: 1 field: expected 4, as in the header", "1 line bad, 5 good"}, nil, "lenient"},
	{"a row of units, a byte order mark, comments and blank lines", "query a.csv --at 0,0", one("a.csv", "\ufeff# day 3\r\n\r\nid,x,y,z\r\n,m,m,m\r\nA,0,0,10\r\n\r\n# more\r\nB,5,0,11\r\nC,0,5,12\r\n"), 0,
		[]string{"UTF-8 with a byte order mark", "a row of units follows the header", "3 read, 3 used"}, []string{"10.00"}, "inspect"},
	{"two wells, or all in one line", "contour a.csv --interval 1", one("a.csv", "well,x,y,mp,depth,status\nA,0,0,20,5,\nB,5,0,20,6,\nC,5,5,20,,dry\n"), 3,
		[]string{"2 readings at 2 places, fewer than three places (of 3 readings read: 1 dry): no surface", "two readings give a slope along one line only"}, nil, "wells"},
	{"soundings that count downwards", "query a.csv --at 0,0 --depth-from 2.35", one("a.csv", "x,y,depth\n0,0,1.5\n5,0,2.5\n0,5,3.5\n"), 0, nil, []string{"0,0,0.850,"}, "wells"},
	{"depths and nothing that they count from", "query a.csv --at 0,0", one("a.csv", "x,y,depth\n0,0,1.5\n5,0,2.5\n0,5,3.5\n"), 3,
		[]string{"a depth and no measuring point: expected the elevation from which the depth is counted", "--depth-from"}, nil, "wells"},
	{"large coordinates", "query a.csv --at 6000000.001,5621000.003 --decimals full", one("a.csv", "x,y,z\n6000000.001,5621000.003,1.001\n6000000.002,5621000.003,2\n6000000.001,5621000.004,3\n"), 0,
		nil, []string{"6000000.001,5621000.003,1.001,", "vertex"}, "query"},
	{"laser points that are not ground", "inspect a.csv --only class=2", one("a.csv", "x,y,z,class\n0,0,1,2\n5,0,1,2\n0,5,1,2\n2,2,15,5\n3,3,0,7\n"), 0,
		[]string{"left out: a.csv:5: not among class=2", "left out: a.csv:6: not among class=2"}, nil, "choosing"},
	{"the right map of the wrong file", "query a.csv --at 0,0 --record r.json --out o.csv", one("a.csv", good), 0, []string{"written: o.csv"}, nil, "record"},
	{"a word that nobody explained in the status", "readings a.csv", one("a.csv", "well,x,y,mp,depth,status\nA,0,0,20,5,windy\n"), 3,
		[]string{`a.csv:2:12: status "windy": expected a word that says whether the level counts`, "--status-table"}, nil, "wells"},
	{"two wells of one name in the table", "readings a.csv --wells w.csv", map[string]string{"a.csv": "well,depth\nA,5\n", "w.csv": "well,x,y,toc\nA,0,0,100\nA,0,0,101\n"}, 3,
		[]string{`w.csv:3:1: id "A": expected one row a well and date; line 2 is one too`}, nil, "wells"},
	{"a date that could be two", "readings a.csv --wells w.csv", map[string]string{"a.csv": "well,date,depth\nA,03/04/2024,5\n", "w.csv": "well,x,y,toc,valid_from\nA,0,0,100,2020-01-01\n"}, 3,
		[]string{`a.csv:2:3: time "03/04/2024": expected a date such as 2024-03-12`}, nil, "wells"},
}

// rodSlipped is 400 shots on a plane, within a centimetre, twelve of them 0.30 high.
func rodSlipped() string {
	b := "id,x,y,z\n"
	r := rand.New(rand.NewPCG(5, 5))
	for i := range 400 {
		x, y := float64(i%20*5)+2*r.Float64(), float64(i/20*5)+2*r.Float64()
		z := 100 + 0.05*x + 0.02*y + 0.02*(r.Float64()-0.5)
		if i >= 310 && i < 322 {
			z += 0.30
		}
		b += fmt.Sprintf("%d,%.3f,%.3f,%.3f\n", i+1, x, y, z)
	}
	return b
}

// bay is a survey round a bay: shots a unit apart along three sides of a square.
func bay() string {
	b := "x,y,z\n"
	for i := range 41 {
		b += fmt.Sprintf("%d,0,%d\n%d,1,%d\n", i, i%3, i, i%2)
	}
	for i := 2; i < 41; i++ {
		b += fmt.Sprintf("0,%d,%d\n1,%d,%d\n39,%d,1\n40,%d,2\n", i, i%3, i, i%2, i, i)
	}
	return b
}

// Every trouble that practice knows has its message or its handling.
func TestTroublesOfFieldData(t *testing.T) {
	for _, c := range troubles {
		t.Run(c.words, func(t *testing.T) {
			if _, err := os.Stat("testdata/script/" + c.more + ".txtar"); err != nil {
				t.Errorf("no script %s shows it", c.more)
			}
			t.Chdir(t.TempDir())
			for name, text := range c.files {
				if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
					t.Fatal(err)
				}
			}
			var out, words bytes.Buffer
			if strings.Contains(c.args, "r.raw") {
				made := strings.Fields("grid a.csv --cell 2 --vertical-datum NAVD88 --out r.raw")
				if code := run(made, streams{strings.NewReader(""), &out, &words}); code != 0 {
					t.Fatalf("%s", &words)
				}
			}
			if code := run(strings.Fields(c.args), streams{strings.NewReader(""), &out, &words}); code != int(c.code) {
				t.Errorf("exit status %d, want %d:\n%s", code, c.code, &words)
			}
			for _, want := range c.says {
				if !strings.Contains(words.String(), want) {
					t.Errorf("no %q in the words:\n%s", want, &words)
				}
			}
			for _, want := range c.shows {
				if !strings.Contains(out.String(), want) {
					t.Errorf("no %q in the output:\n%s", want, &out)
				}
			}
			if len(c.says)+len(c.shows) == 0 {
				t.Error("nothing is looked for")
			}
		})
	}
}
