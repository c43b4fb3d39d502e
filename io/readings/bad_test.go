package readings

import (
	"context"
	"errors"
	"slices"
	"strings"
	"testing"
)

// Malformed input, each with its message. A message names the place, what stands
// there and what was expected; advice is the program's.
func TestBadInput(t *testing.T) {
	const head = "id,x,y,z,code\n"
	var met [kindCount]bool
	long := strings.Repeat("n", 2000)
	for _, c := range []struct {
		name, text string
		columns    string
		d          Declared
		want       string
		kind       Kind
	}{
		// Numbers.
		{"text for a number", head + "A,1,2,3,G\nB,1,abc,3,G\n", "", Declared{},
			"a.csv:3:5: y \"abc\": expected a number such as 12.4\n1 line bad, 1 good", NotNumber},
		{"dry well", head + "A,1,2,DRY,G\n", "", Declared{}, "a.csv:2:7: z \"DRY\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"not detected", head + "A,1,2,ND,G\n", "", Declared{}, "a.csv:2:7: z \"ND\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"bound", head + "A,1,2,<25,G\n", "", Declared{}, "a.csv:2:7: z \"<25\": expected a value such as 12.4, not a bound\n1 line bad, 0 good", Bound},
		{"blank value", head + "A,1,2,,G\n", "", Declared{}, "a.csv:2:7: z \"\": expected a number such as 12.4\n1 line bad, 0 good", Blank},
		{"NaN", head + "A,1,2,NaN,G\n", "", Declared{}, "a.csv:2:7: z \"NaN\": expected a finite number such as 12.4\n1 line bad, 0 good", NotFinite},
		{"minus infinity", head + "A,-Inf,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"-Inf\": expected a finite number such as 12.4\n1 line bad, 0 good", NotFinite},
		{"spreadsheet's error", head + "A,1,2,#N/A,G\n", "", Declared{}, "a.csv:2:7: z \"#N/A\": expected a finite number such as 12.4\n1 line bad, 0 good", NotFinite},
		{"hexadecimal", head + "A,0x10,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"0x10\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"hexadecimal float", head + "A,1,2,0x1p3,G\n", "", Declared{}, "a.csv:2:7: z \"0x1p3\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"underscore", head + "A,1_5,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"1_5\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"underscored thousands", head + "A,500_000,2,3,G\n", "", Declared{},
			"a.csv:2:3: x \"500_000\": expected a number without marks between thousands, such as 12.4\n1 line bad, 0 good", Thousands},
		{"two points", head + "A,1.2.3,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"1.2.3\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"exponent without digits", head + "A,1e,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"1e\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"sign alone", head + "A,-,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"-\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"two signs", head + "A,--1,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"--1\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"point alone", head + "A,1,2,.,G\n", "", Declared{}, "a.csv:2:7: z \".\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"unit behind the number", head + "A,1,2,3.5m,G\n", "", Declared{}, "a.csv:2:7: z \"3.5m\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"blank inside", head + "A,1,2,3 5,G\n", "", Declared{}, "a.csv:2:7: z \"3 5\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"too large", head + "A,1e61,2,3,G\n", "", Declared{}, "a.csv:2:3: x \"1e61\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 0 good", OutOfRange},
		{"too small", head + "A,1,-1e-61,3,G\n", "", Declared{}, "a.csv:2:5: y \"-1e-61\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 0 good", OutOfRange},
		{"beyond a double", head + "A,1,2,1e999,G\n", "", Declared{}, "a.csv:2:7: z \"1e999\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 0 good", OutOfRange},
		{"below a double", head + "A,1,2,1e-999,G\n", "", Declared{}, "a.csv:2:7: z \"1e-999\": expected 0 or a number from 1e-60 to 1e60 in size\n1 line bad, 0 good", OutOfRange},
		{"decimal comma among points", "id;x;y;z\nA;1.5;2.5;3.5\nB;1.5;2.5;12,4\n", "", Declared{},
			"a.csv:3:11: z \"12,4\": expected a number such as 12.4\n1 line bad, 1 good", DecimalMark},
		{"decimal point among commas", "id;x;y;z\nA;1,5;2,5;3,5\nB;1,5;2,5;12.4\n", "", Declared{},
			"a.csv:3:11: z \"12.4\": expected a number such as 12,4\n1 line bad, 1 good", DecimalMark},
		{"decimal comma with a comma delimiter declared", head + "A,\"4512233,10\",2,3,G\n", "", Declared{Decimal: DecimalPoint},
			"a.csv:2:3: x \"4512233,10\": expected a number such as 12.4\n1 line bad, 0 good", DecimalMark},
		{"a comma for both, without quotes", "x,y,z\n0,00,0,,0\n", "", Declared{Decimal: DecimalComma}, "a.csv:2: 5 fields: expected 3, as in the header\n1 line bad, 0 good", FieldCount},
		{"thousands, English", "id;x;y;z\nA;500,000.5;2.5;3.5\n", "", Declared{},
			"a.csv:2:3: x \"500,000.5\": expected a number without marks between thousands, such as 12.4\n1 line bad, 0 good", Thousands},
		{"thousands, continental", "id;x;y;z\nA;500.000,5;2,5;3,5\n", "", Declared{},
			"a.csv:2:3: x \"500.000,5\": expected a number without marks between thousands, such as 12,4\n1 line bad, 0 good", Thousands},
		{"thousands, Swiss", "id;x;y;z\nA;500'000.5;2.5;3.5\n", "", Declared{},
			"a.csv:2:3: x \"500'000.5\": expected a number without marks between thousands, such as 12.4\n1 line bad, 0 good", Thousands},
		{"thousands, blanks", "id;x;y;z\nA;4 500 000,5;2,5;3,5\n", "", Declared{},
			"a.csv:2:3: x \"4 500 000,5\": expected a number without marks between thousands, such as 12,4\n1 line bad, 0 good", Thousands},
		{"comma: decimal or thousands?", "id;x;y;z\nA;1,234;2,345;3,456\n", "", Declared{},
			"a.csv:2:3: x \"1,234\": expected to be told whether the comma is the decimal mark or stands between thousands", WhichDecimal},

		// Lines.
		{"a field short", head + "A,1,2,3,G\nB,1,2,3\n", "", Declared{}, "a.csv:3: 4 fields: expected 5, as in the header\n1 line bad, 1 good", FieldCount},
		{"a field long", head + "A,1,2,3,G, by the gate\n", "", Declared{}, "a.csv:2: 6 fields: expected 5, as in the header\n1 line bad, 0 good", FieldCount},
		{"a field short of the list", "A,1,2,3\n", "id,x,y,z,code", Declared{}, "a.csv:1: 4 fields: expected 5, as declared\n1 line bad, 0 good", FieldCount},
		{"a header short of the list", "id,x,y,z\nA,1,2,3\n", "id,x,y,z,code", Declared{}, "a.csv:1: header with 4 fields: expected 5, as declared", FieldCount},
		{"a field short of the first line", "\n\n1,2,3\n1,2\n", "x=1,y=2,z=3", Declared{}, "a.csv:4: 2 fields: expected 3, as in line 3\n1 line bad, 1 good", FieldCount},
		{"a footer", head + "A,1,2,3,G\nTotal\n", "", Declared{}, "a.csv:3: 1 field: expected 5, as in the header\n1 line bad, 1 good", FieldCount},
		{"a name with blanks between blanks", "id x y z code\nA 1 2 3 edge of road\n", "", Declared{Delimiter: Blanks},
			"a.csv:2: 7 fields: expected 5, as in the header\n1 line bad, 0 good", FieldCount},
		{"a quote that is not closed", head + "\"A,1,2,3,G\nB,1,2,3,G\n", "", Declared{},
			"a.csv:2:1: quote that is not closed: expected a closing quote within 65,536 bytes\n1 line bad, 1 good", Quote},
		{"text behind a quote", head + "A,1,2,3,\"6\" pipe\nB,1,2,3,G\n", "", Declared{},
			"a.csv:2:13: text behind a closing quote: expected the end of the field; a quote inside quotes is written \"\"\n1 line bad, 1 good", Quote},
		{"error behind a record of three lines", head + "A,1,2,3,\"one\ntwo\nthree\"\nB,1,x,3,G\n", "", Declared{},
			"a.csv:5:5: y \"x\": expected a number such as 12.4\n1 line bad, 1 good", NotNumber},
		{"error inside a record of three lines", head + "\"A\nB\n\",1,x,3,G\n", "", Declared{},
			"a.csv:4:5: y \"x\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"a column of characters, not bytes", head + "Ährenfeld,1,è,3,G\n", "", Declared{}, "a.csv:2:13: y \"è\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"a long name", head + long + ",1,2,3,G\n", "", Declared{}, "a.csv:2:1: id \"" + long[:60] + "...\": expected at most 1,024 bytes\n1 line bad, 0 good", LongText},
		{"a control character", head + "A\x1b[31m,1,2,3,G\n", "", Declared{}, "a.csv:2:1: id \"A\\x1b[31m\": expected text without control characters\n1 line bad, 0 good", BadCharacter},
		{"many bad lines", head + strings.Repeat("A,1,2,?,G\n", 9) + "B,1,2,3,G\n", "", Declared{},
			"a.csv:2:7: z \"?\": expected a number such as 12.4\na.csv:3:7: z \"?\": expected a number such as 12.4\n" +
				"a.csv:4:7: z \"?\": expected a number such as 12.4\na.csv:5:7: z \"?\": expected a number such as 12.4\n" +
				"a.csv:6:7: z \"?\": expected a number such as 12.4\nand 4 more bad lines\n9 lines bad, 1 good", NotNumber},
		{"two troubles in a line: the first", head + "A,1,?,?,G\n", "", Declared{}, "a.csv:2:5: y \"?\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},
		{"a bad place behind a missing value", head + "A,?,2,NM,G\n", "", Declared{Missing: []string{"NM"}},
			"a.csv:2:3: x \"?\": expected a number such as 12.4\n1 line bad, 0 good", NotNumber},

		// Files.
		{"nothing", "", "", Declared{}, "a.csv: no line to read: expected readings", Empty},
		{"blank lines alone", "\n \n\r\n", "", Declared{}, "a.csv: no line to read: expected readings", Empty},
		{"delimiters alone", "# c\n,,\n , \n", "", Declared{}, "a.csv: every line begins with \"#\": expected readings, or a comment mark to be declared (\"none\" if these are readings)", WhichComment},
		{"commas alone", ",,\n , \n", "", Declared{}, "a.csv: no line to read: expected readings", Empty},
		{"all skipped", "x,y,z\n1,2,3\n", "", Declared{SkipRows: 5}, "a.csv: no line to read: expected readings", Empty},
		{"binary", "PK\x03\x04\x00\x00more\n", "", Declared{},
			"a.csv:1:5: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark", Binary},
		{"UTF-16 without a mark", "x\x00,\x00y\x00,\x00z\x00\n\x00", "", Declared{},
			"a.csv:1:2: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark", Binary},
		{"a zero byte in line 3", head + "A,1,2,3,G\nB,1\x00,2,3,G\n", "", Declared{},
			"a.csv:3:4: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark", Binary},
		{"a zero byte far down", "x,y,z\n" + strings.Repeat("1,2,3\n", 300000) + "4,5\x00,6\n", "", Declared{},
			"a.csv:300002:4: a zero byte: looks like a binary file: expected text in UTF-8, Windows-1252, or UTF-16 with a byte order mark", Binary},
		{"a first line without an end", strings.Repeat("x", 3<<20), "", Declared{},
			"a.csv:1:1: line \"" + strings.Repeat("x", 60) + "...\": expected lines of less than 1,048,576 bytes", LongLine},
		{"a line without an end far down", "x,y,z\n" + strings.Repeat("1,2,3\n", 300000) + strings.Repeat("9", 3<<20), "", Declared{},
			"a.csv:300002:1: line \"" + strings.Repeat("9", 60) + "...\": expected lines of less than 1,048,576 bytes", LongLine},
		{"comments alone", "#1,2,3,4\n#5,6,7,8\n", "id,x,y,z", Declared{},
			"a.csv: every line begins with \"#\": expected readings, or a comment mark to be declared (\"none\" if these are readings)", WhichComment},

		// Columns.
		{"no header", "1,2,3\n4,5,6\n", "", Declared{}, "a.csv:1: no header line above 3 fields: expected the columns to be declared", NoHeader},
		{"no header, four numbers", "1 2 3 4\n", "", Declared{}, "a.csv:1: no header line above 4 fields: expected the columns to be declared", NoHeader},
		{"no header, a name first", "A 1 2 3\n", "", Declared{}, "a.csv:1: no header line above 4 fields: expected the columns to be declared", NoHeader},
		{"unknown header", "a,b,c\n1,2,3\n", "", Declared{},
			"a.csv:1: header \"a, b, c\": expected names such as easting, northing, elevation, or the columns to be declared", UnknownHeader},
		{"prose", "hello world\n", "", Declared{},
			"a.csv:1: header \"hello, world\": expected names such as easting, northing, elevation, or the columns to be declared", UnknownHeader},
		{"level", "id,x,y,level\nA,1,2,3\n", "", Declared{}, "a.csv:1:8: column \"level\": expected to be told whether it is a depth or an elevation", DepthOrLevel},
		{"water level", "well,east,north,\"Water Level (m)\"\nA,1,2,3\n", "", Declared{},
			"a.csv:1:17: column \"Water Level (m)\": expected to be told whether it is a depth or an elevation", DepthOrLevel},
		{"water level beside an elevation", "well,east,north,elevation,water level\nA,1,2,3,4\n", "", Declared{},
			"a.csv:1:27: column \"water level\": expected to be told whether it is a depth or an elevation", DepthOrLevel},
		{"two elevations", "x,y,Elevation,Height\n1,2,3,4\n", "", Declared{},
			"a.csv:1:15: column \"Height\": expected one column for z; column 3, \"Elevation\", is one too", TwoColumns},
		{"no z, but a depth", "well,x,y,depth to water\nA,1,2,3\n", "", Declared{},
			"a.csv:1: no column for z: expected x, y and z; the roles found are id, x, y, depth", MissingRole},
		{"no z declared, but a depth", "A,1,2,3\n", "id,x,y,depth", Declared{}, "a.csv:1: no column for z: expected x, y and z; the roles found are id, x, y, depth", MissingRole},
		{"a header of thousands", "x,y,z" + strings.Repeat(",a", 5000) + "\n", "", Declared{}, "a.csv:1: 5003 fields: expected at most 4096", FieldCount},
		{"no y", "x,z\n1,2\n", "", Declared{}, "a.csv:1: no column for y: expected x, y and z; the roles found are x, z", MissingRole},
		{"a depth beside z", "A,1,2,3,4\n", "id,x,y,z,depth", Declared{},
			"a.csv:1: role depth: expected a role that is used here: x y z id code line zone status time round class qualifier sigma", UnusedRole},
		{"a name that is not there", "a,b,c\n1,2,3\n", "x=a,y=b,z=elev", Declared{}, "a.csv:1: header \"a, b, c\": expected a column named \"elev\"", MissingColumn},
		{"a number that is not there", "1,2,3\n", "x=1,y=2,z=4", Declared{}, "a.csv:1: 3 fields: expected a column 4 for z", MissingColumn},
		{"a name that stands twice", "a,a,c\n1,2,3\n", "x=a,y=2,z=c", Declared{}, "a.csv:1:3: column \"a\": expected one column of that name; give its number", TwoColumns},
		{"one column, two roles", "a,b,c\n1,2,3\n", "x=a,y=b,z=2", Declared{}, "a.csv:1:3: column 2 \"b\": expected one role, not both y and z", TwoColumns},
	} {
		t.Run(c.name, func(t *testing.T) {
			for _, careful := range []bool{false, true} {
				o := Options{Declared: c.d, careful: careful}
				o.Columns = columns(t, c.columns)
				s, err := read(c.text, o)
				if s != nil || err == nil {
					t.Fatalf("careful %v: no error", careful)
				}
				if err.Error() != c.want {
					t.Errorf("careful %v:\ngot  %s\nwant %s", careful, err, c.want)
				}
				var p *PositionError
				if !errors.As(err, &p) || p.Kind != c.kind || p.File != "a.csv" {
					t.Errorf("kind %d, want %d", p.Kind, c.kind)
				}
				met[p.Kind] = true
			}
		})
	}
	// What no small text can bring about: other tests do, or 2^31 readings would.
	met[0], met[Unreadable], met[TooManyBad], met[TooMany] = true, true, true, true
	for _, k := range []Kind{DepthAlone, UnknownStatus, Impossible} { // those of a Reducer
		met[k] = true
	}
	for k, ok := range met {
		if !ok {
			t.Errorf("no input leads to kind %d", k)
		}
	}
}

// The same troubles, left out and listed.
func TestLenient(t *testing.T) {
	const text = "id,x,y,z\nA,1,2,3\nB,1,2\nC,1,?,3\n\"D,1,2,3\nE,2,2,<5\nF,2,2,4\nG,3,3,-9999.00\nH,3,3,\n"
	s := mustRead(t, text, Options{Lenient: true, Declared: Declared{Missing: ParseMissing("-9999,blank")}})
	if want := (Counts{Read: 8, Used: 2, LeftOut: 2, Refused: 4, Headers: 1}); s.Counts != want {
		t.Errorf("got %+v, want %+v", s.Counts, want)
	}
	var got []string
	for _, e := range s.Refused {
		got = append(got, e.Error())
	}
	want := []string{
		"a.csv:3: 3 fields: expected 4, as in the header",
		"a.csv:4:5: y \"?\": expected a number such as 12.4",
		"a.csv:5:1: quote that is not closed: expected a closing quote within 65,536 bytes",
		"a.csv:6:7: z \"<5\": expected a value such as 12.4, not a bound",
	}
	if !slices.Equal(got, want) {
		t.Errorf("refused:\n%s", strings.Join(got, "\n"))
	}
	wantOut := []LeftOut{{0, 8, "G", "z is -9999", nil, nil}, {0, 9, "H", "z is blank", nil, nil}}
	if !slices.Equal(s.LeftOut, wantOut) {
		t.Errorf("left out: %+v", s.LeftOut)
	}
}

// Lenient reading of what is no point file at all stops before its list of bad
// lines fills the memory.
func TestLenientStops(t *testing.T) {
	text := "x,y,z\n1,2,3\n" + strings.Repeat("a\n", mostBad+1)
	_, err := read(text, Options{Lenient: true})
	var p *PositionError
	if !errors.As(err, &p) || p.Kind != TooManyBad {
		t.Errorf("got %v", err)
	}
}

func TestMissingMarks(t *testing.T) {
	for _, c := range []struct {
		z, marks string
		reason   string // "" is an error
	}{
		{"NM", "NM", "z is NM"},
		{"nm", "NM", "z is NM"},
		{"dry", "-9999,DRY,NM", "z is DRY"},
		{"-9999", "-9999", "z is -9999"},
		{"-9999.0", "-9999", "z is -9999"},
		{"-9.999e3", "-9999", "z is -9999"},
		{"", "blank", "z is blank"},
		{"", "NM", ""},
		{"NaN", "NaN", "z is NaN"},
		{"-", "-", "z is -"},
		{"<5", "<5", "z is <5"},
		{"<6", "<5", ""},
		{"ND", "NM", ""},
	} {
		for _, careful := range []bool{false, true} {
			s, err := read("id,x,y,z\nA,1,2,"+c.z+"\n", Options{careful: careful, Declared: Declared{Missing: ParseMissing(c.marks)}})
			switch {
			case c.reason == "":
				if err == nil {
					t.Errorf("%q with %q: no error", c.z, c.marks)
				}
			case err != nil:
				t.Errorf("%q with %q: %v", c.z, c.marks, err)
			case len(s.LeftOut) != 1 || s.LeftOut[0] != (LeftOut{0, 2, "A", c.reason, nil, nil}):
				t.Errorf("%q with %q: %+v", c.z, c.marks, s.LeftOut)
			}
		}
	}
	// A number stands for a missing z, never for a place; a text for both.
	s := mustRead(t, "x,y,z\n-9999,1,2\n0,0,0\nNM,1,2\n", Options{Declared: Declared{Missing: ParseMissing("-9999,NM")}})
	if s.Len() != 2 || len(s.LeftOut) != 1 || s.LeftOut[0].Reason != "x is NM" {
		t.Errorf("used %d, left out %+v", s.Len(), s.LeftOut)
	}
}

// A job that is mirrored by its column order is told by its own header.
func TestHeaderAgainstTheList(t *testing.T) {
	o := Options{Declared: Declared{Columns: columns(t, "id,easting,northing,elevation")}}
	s := mustRead(t, "Point,Northing,Easting,Elev\nA,1,2,3\n", o)
	var got []string
	for _, w := range s.Warnings {
		got = append(got, w.String())
	}
	want := []string{`a.csv:1: column 2 is headed "Northing" but declared as x`, `a.csv:1: column 3 is headed "Easting" but declared as y`}
	if !slices.Equal(got, want) {
		t.Errorf("got %q", got)
	}
}

func TestOptionErrors(t *testing.T) {
	for _, c := range []struct {
		o    Options
		want string
	}{
		{Options{Declared: Declared{Delimiter: 'x'}}, `delimiter "x": expected a character that no number holds`},
		{Options{Declared: Declared{Decimal: ';'}}, `decimal ";": expected point or comma`},
		{Options{Declared: Declared{SkipRows: -1}}, `skip-rows "-1": expected a number of lines from 0`},
		{Options{Declared: Declared{Comment: "a b"}}, `comment "a b": expected a short mark without blanks and quotes, such as #`},
		{Options{Declared: Declared{Missing: []string{"a\n"}}}, `missing "a\n": expected a text that can stand in a field`},
		{Options{Spots: Spots{Rule: 99}}, `same-spot "99": expected refuse, mean, first, last, lowest, highest`},
		{Options{Spots: Spots{Spread: -1}}, `same-spot-spread "-1": expected a number from 0`},
		{Options{Spots: Spots{Within: -0.5}}, `same-spot-within "-0.5": expected a distance from 0`},
		{Options{Select: Selection{Only: []Pattern{{Z, "1"}}}}, `only "z=1": expected one of the roles id code line zone status time round class qualifier sigma`},
		{Options{Select: Selection{Without: []Pattern{{Code, "a[b"}}}}, `without "code=a[b": expected every [ closed by a ], and something behind every \`},
	} {
		_, err := Read(context.Background(), nil, c.o)
		var e *OptionError
		if !errors.As(err, &e) || err.Error() != c.want {
			t.Errorf("got  %v\nwant %s", err, c.want)
		}
	}
	if s, err := Read(context.Background(), nil, Options{}); err != nil || s.Len() != 0 {
		t.Errorf("no source at all: %v", err)
	}
}

func TestParseColumns(t *testing.T) {
	for _, c := range []struct{ text, want, wrong string }{
		{"id,northing,easting,elevation,code", "id,y,x,z,code", ""},
		{" ID , X,y ,-, Head", "id,x,y,-,head", ""},
		{"x=East,y=North,z=4", "x=East,y=North,z=4", ""},
		{"x= East (m) ,y=2,head=H", "x=East (m),y=2,head=H", ""},
		{"top-of-casing,specific-gravity,valid-from", "measuring-point,specific-gravity,valid-from", ""},
		{"", "", ""},
		{"x,y,zed", "", `columns "zed": expected a role such as id x y z code line depth measuring-point product product-depth specific-gravity ground screen-top screen-bottom zone status time round valid-from sigma class qualifier limit`},
		{"x,y,z,height", "", `columns "height": expected every role once; z is named twice`},
		{"x,y=2,z", "", `columns "x": expected either a list in the order of the file (x,y,z) or names and numbers throughout (x=East,y=North,z=4)`},
		{"x=", "", `columns "x=": expected a header name or a column number behind the equals sign`},
		{"x=0", "", `columns "x=0": expected a column number from 1 to 4096`},
		{"x=99999999999999999999", "", `columns "x=99999999999999999999": expected a column number from 1 to 4096`},
	} {
		got, err := ParseColumns(c.text)
		if c.wrong != "" {
			if err == nil || err.Error() != c.wrong {
				t.Errorf("%q: got %v", c.text, err)
			}
			continue
		}
		if err != nil || got.String() != c.want {
			t.Errorf("%q: got %q, %v", c.text, got, err)
		}
		if again, err := ParseColumns(got.String()); err != nil || again.String() != got.String() {
			t.Errorf("%q: %q reads back as %q, %v", c.text, got, again, err)
		}
	}
	for _, r := range Roles() {
		if got, ok := ParseRole(strings.ToUpper(r.String())); !ok || got != r {
			t.Errorf("role %s reads back as %s", r, got)
		}
	}
}
