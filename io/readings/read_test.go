package readings

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"testing"

	"golang.org/x/text/encoding/unicode"
)

// read reads one source of memory.
func read(text string, o Options) (*Set, error) {
	return Read(context.Background(), []Source{FromBytes("a.csv", []byte(text))}, o)
}

func mustRead(t testing.TB, text string, o Options) *Set {
	t.Helper()
	s, err := read(text, o)
	if err != nil {
		t.Fatalf("read: %v\n%s", err, shorten(text))
	}
	checkCounts(t, s)
	return s
}

// checkCounts is the promise that nothing is silent.
func checkCounts(t interface{ Fatalf(string, ...any) }, s *Set) {
	c := s.Counts
	if c.Used+c.Merged+c.LeftOut+c.Refused != c.Read {
		t.Fatalf("counts do not add up: %+v", c)
	}
	if c.Used != s.Len() || c.Used != len(s.Z) || c.Used != len(s.Lines) || c.Merged != len(s.Merged) || c.LeftOut != len(s.LeftOut) || c.Refused != len(s.Refused) {
		t.Fatalf("lists do not fit the counts: %+v with %d, %d, %d, %d", c, s.Len(), len(s.Merged), len(s.LeftOut), len(s.Refused))
	}
}

// dump writes the used readings, one a line, with every bit.
func dump(s *Set) []string {
	var all []string
	for i := range s.Len() {
		line := fmt.Sprintf("%x %x %x", s.Points[i][0], s.Points[i][1], s.Z[i])
		for _, r := range keptRoles {
			if s.Has(r) {
				line += fmt.Sprintf(" %s=%q", r, s.Text(r, i))
			}
		}
		all = append(all, line)
	}
	return all
}

func columns(t interface{ Fatal(...any) }, text string) Columns {
	c, err := ParseColumns(text)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// One survey of four shots in many layouts. M1 of the trade's list, and T18: a file
// with decimal commas is the same survey as one with points.
func TestSameSurveyInManyLayouts(t *testing.T) {
	const plain = `id,easting,northing,elevation,code
P1,500000.125,4600000.5,101.25,GRD
P 2,500010.5,4600020.25,-3.5,EP
003,500020,4600005.75,99,TOE
P4,499990.75,4599990.125,0.005,GRD
`
	want := dump(mustRead(t, plain, Options{}))
	if len(want) != 4 || !strings.Contains(want[2], `id="003"`) || !strings.Contains(want[1], `id="P 2"`) {
		t.Fatalf("the plain layout itself: %q", want)
	}
	replace := func(from ...string) string { return strings.NewReplacer(from...).Replace(plain) }
	swap := func(order ...int) string { // columns in another order
		var b strings.Builder
		for line := range strings.Lines(plain) {
			f := strings.Split(strings.TrimSpace(line), ",")
			for i, k := range order {
				if i > 0 {
					b.WriteByte(',')
				}
				b.WriteString(f[k])
			}
			b.WriteByte('\n')
		}
		return b.String()
	}
	headless := plain[strings.IndexByte(plain, '\n')+1:]
	utf16 := func(e unicode.Endianness) string {
		out, err := unicode.UTF16(e, unicode.UseBOM).NewEncoder().String(plain)
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	for _, c := range []struct {
		name, text string
		columns    string
		o          Options
	}{
		{name: "semicolons", text: replace(",", ";")},
		{name: "tabs", text: replace(",", "\t")},
		{name: "bars", text: replace(",", "|")},
		{name: "colons declared", text: replace(",", ":"), o: Options{Declared: Declared{Delimiter: ':'}}},
		{name: "decimal comma (T18)", text: replace(",", ";", ".", ",")},
		{name: "decimal comma declared", text: replace(",", ";", ".", ","), o: Options{Declared: Declared{Decimal: DecimalComma, Delimiter: Semicolon}}},
		{name: "blanks", text: replace(",", "  ", "P 2", `"P 2"`)},
		{name: "blanks and tabs", text: "  " + replace(",", " \t ", "P 2", `"P 2"`, "\n", " \n "), o: Options{Declared: Declared{Delimiter: Blanks}}},
		{name: "blanks round every field", text: replace(",", " , ")},
		{name: "CRLF", text: replace("\n", "\r\n")},
		{name: "CR", text: replace("\n", "\r")},
		{name: "no line end at the end", text: strings.TrimSpace(plain)},
		{name: "byte order mark", text: "\ufeff" + plain},
		{name: "UTF-16 little-endian", text: utf16(unicode.LittleEndian)},
		{name: "UTF-16 big-endian", text: utf16(unicode.BigEndian)},
		{name: "quotes everywhere", text: `"` + strings.TrimSuffix(replace(",", `","`, "\n", "\"\n\""), `"`)},
		{name: "decimal comma in quotes", text: replace("500000.125", `"500000,125"`, "4600000.5", `"4600000,5"`, "101.25", `"101,25"`,
			"500010.5", `"500010,5"`, "4600020.25", `"4600020,25"`, "-3.5", `"-3,5"`, "4600005.75", `"4600005,75"`, "499990.75", `"499990,75"`,
			"4599990.125", `"4599990,125"`, "0.005", `"0,005"`)},
		{name: "comments", text: "# shot by crew 3\n#, from the east\n" + strings.Replace(plain, "P4", "# a note, in the middle\nP4", 1)},
		{name: "comments declared", text: strings.Replace(plain, "P4", "// a note\nP4", 1), o: Options{Declared: Declared{Comment: "//"}}},
		{name: "blank lines", text: replace("\n", "\n\n,,,,\n   \n")},
		{name: "rows skipped", text: "Job 7\nSite, east\n" + plain, o: Options{Declared: Declared{SkipRows: 2}}},
		{name: "header words", text: replace("id,easting,northing,elevation,code", "Point No,Easting (m),NORTHING_M,elev_m,Feature Code")},
		{name: "columns in another order", text: swap(4, 2, 1, 3, 0)},
		{name: "north before east", text: swap(0, 2, 1, 3, 4)},
		{name: "a list, no header", text: headless, columns: "id,x,y,z,code"},
		{name: "a list, other words", text: headless, columns: "id,easting,northing,head,code"},
		{name: "a list with a header", text: plain, columns: "id,x,y,z,code"},
		{name: "by number, no header", text: headless, columns: "x=2,y=3,z=4,id=1,code=5"},
		{name: "by name", text: replace("easting", "Rechts", "northing", "Hoch", "elevation", "H", "code", "Art"), columns: "id=ID,x=rechts,y=Hoch,z=H,code=5"},
		{name: "an unused column", text: replace("code\n", "code,remark\n", "GRD\n", "GRD,wet\n", "EP\n", "EP,\n", "TOE\n", "TOE,by the gate\n")},
		{name: "a skipped column", text: replace("P1", "1,P1", "P 2", "2,P 2", "003", "3,003", "P4", "4,P4", "id", "n,id"), columns: "-,id,x,y,z,code"},
		{name: "a delimiter behind every line", text: replace("\n", ",\n")},
		{name: "a delimiter behind every reading", text: plain[:len(plain)-len(headless)] + strings.ReplaceAll(headless, "\n", ",\n")},
		{name: "a row of units", text: strings.Replace(plain, "\n", "\n,m,m,(m),\n", 1)},
		{name: "plus signs and exponents", text: replace("500000.125", "+5.00000125e5", "101.25", "1.0125E+2", "0.005", "5e-3", ",99,", ",9900e-2,")},
		{name: "other minus signs", text: replace("-3.5", "−3.5")},
		{name: "hyphen of a word processor", text: replace("-3.5", "\u20113.5")},
		{name: "no-break spaces", text: replace("101.25", "\u00a0101.25\u00a0")},
		{name: "more digits than fit", text: replace("101.25", "101.2500000000000000000000000", "500000.125", "00000000000000000000500000.125")},
	} {
		t.Run(c.name, func(t *testing.T) {
			c.o.Columns = columns(t, c.columns)
			for _, careful := range []bool{false, true} {
				c.o.careful = careful
				s := mustRead(t, c.text, c.o)
				if got := dump(s); !slices.Equal(got, want) {
					t.Errorf("careful %v: got\n%s\nwant\n%s\n%s", careful, strings.Join(got, "\n"), strings.Join(want, "\n"), s.Layouts[0].String())
				}
			}
		})
	}
}

// What was detected is told.
func TestLayoutIsTold(t *testing.T) {
	for _, c := range []struct{ name, text, columns, want string }{
		{"detected", "id,x,y,z\nA,1,2,3\n", "",
			"UTF-8, delimiter comma (detected), decimal point (detected), header in line 1, columns id,x,y,z (detected)"},
		{"declared", "Name;E;N;H\nA;1,5;2;3\n", "id=Name,x=E,y=N,z=H",
			"UTF-8, delimiter semicolon (detected), decimal comma (detected), header in line 1, columns id=Name,x=E,y=N,z=H (declared)"},
		{"three numbers", "# made by hand\n1 2 3\n4 5 6\n", "",
			"UTF-8, delimiter blanks (detected), decimal point (detected), no header, comment mark # (detected), columns x,y,z (detected); " +
				"three numbers a line without a header are taken as x y z"},
		{"three numbers between tabs", "1\t2\t3\n4\t5\t6\n", "",
			"UTF-8, delimiter tab (detected), decimal point (detected), no header, columns x,y,z (detected); three numbers a line without a header are taken as x y z"},
		{"units", "\ufeff\nEast,North,Elev,rest\nm,m,m,\n1,2,3,x\n", "",
			"UTF-8 with a byte order mark, delimiter comma (detected), decimal point (detected), header in line 2, columns x=East,y=North,z=Elev,- (detected); " +
				"a row of units follows the header"},
		{"skipped", "job\nx y z\n1 2 3\n", "",
			"UTF-8, delimiter blanks (detected), decimal point (detected), header in line 2, 1 line skipped, columns x,y,z (detected)"},
	} {
		t.Run(c.name, func(t *testing.T) {
			o := Options{Declared: Declared{Columns: columns(t, c.columns)}}
			if c.name == "skipped" {
				o.SkipRows = 1
			}
			if got := mustRead(t, c.text, o).Layouts[0].String(); got != c.want {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
		})
	}
}

// Lines that hold no reading are counted by what they are.
func TestLinesWithoutReadings(t *testing.T) {
	s := mustRead(t, "title\n# one\n\nx,y,z\nm,m,m\n# two\n1,2,3\n\n,,\n# three\n4,5,6\n", Options{Declared: Declared{SkipRows: 1}})
	want := Counts{Read: 2, Used: 2, Headers: 2, Comments: 3, BlankLines: 3, Skipped: 1}
	if s.Counts != want {
		t.Errorf("got %+v, want %+v", s.Counts, want)
	}
	if !slices.Equal(s.Lines, []uint32{7, 11}) {
		t.Errorf("lines %v, want 7 and 11", s.Lines)
	}
}

func TestDecimalsAreCounted(t *testing.T) {
	for _, c := range []struct {
		text  string
		xy, z int
	}{
		{"x,y,z\n1,2,3\n", 0, 0},
		{"x,y,z\n1.50,2,3.1\n4,5.125,6\n", 3, 1},
		{"x,y,z\n1e-3,2.5e1,3.25e-1\n", 3, 3},
		{"x,y,z,code\n1.5,2,3,A\n1.12345,2,3.999,B\n", 1, 0}, // B is left out
		{"x,y,z,code\n1,1,1.5,A\n1,1,1.50,A\n", 0, 2},        // merged
	} {
		for _, careful := range []bool{false, true} {
			o := Options{careful: careful}
			if strings.Contains(c.text, "code") {
				o.Select.Without = []Pattern{{Code, "B"}}
			}
			s := mustRead(t, c.text, o)
			if s.DecimalsXY != c.xy || s.DecimalsZ != c.z {
				t.Errorf("%q: got %d and %d decimals, want %d and %d", c.text, s.DecimalsXY, s.DecimalsZ, c.xy, c.z)
			}
		}
	}
}

// Several sources, each with a layout of its own.
func TestSeveralSources(t *testing.T) {
	sources := []Source{
		FromBytes("a.csv", []byte("id,x,y,z\nA1,1,1,1\nA2,2,2,2\n")),
		FromBytes("none.csv", []byte("id,x,y,z\n")),
		FromBytes("b.txt", []byte("id code north east height\nB1 GRD 3 4 5\n")),
		FromReader("-", strings.NewReader("7;8,5;9\n1;1;1\n")),
	}
	o := Options{}
	if _, err := Read(context.Background(), sources[3:], o); err == nil {
		t.Fatal("a file without a header and without blanks was read")
	}
	sources[3] = FromReader("-", strings.NewReader("7 8,5 9\n1 1 1\n"))
	s, err := Read(context.Background(), sources, o)
	if err != nil {
		t.Fatal(err)
	}
	checkCounts(t, s)
	want := []string{
		`0x1p+00 0x1p+00 0x1p+00 id="A1" code=""`,
		`0x1p+01 0x1p+01 0x1p+01 id="A2" code=""`,
		`0x1p+02 0x1.8p+01 0x1.4p+02 id="B1" code="GRD"`,
		`0x1.cp+02 0x1.1p+03 0x1.2p+03 id="" code=""`,
	}
	if got := dump(s); !slices.Equal(got, want) {
		t.Errorf("got %s", strings.Join(got, "\n"))
	}
	for i, file := range []int{0, 0, 2, 3} {
		if s.Source(i) != file {
			t.Errorf("reading %d comes from source %d, want %d", i, s.Source(i), file)
		}
	}
	if m := s.Merged; len(m) != 1 || m[0].File != 3 || m[0].Line != 2 || m[0].Into != 0 {
		t.Errorf("merged: %+v", m)
	}
	if len(s.Layouts) != 4 || s.Layouts[2].Delimiter != Blanks || s.Layouts[3].Decimal != DecimalComma {
		t.Errorf("layouts: %+v", s.Layouts)
	}
}

// A source that ends with an error gives that error, whatever came before.
func TestReaderFails(t *testing.T) {
	broken := errors.New("disk on fire")
	text := "x,y,z\n" + strings.Repeat("1,2,3\n", 10)
	for _, size := range []int{0, 5, len(text) - 3, 3 << 20} {
		full := text + strings.Repeat("1,2,3\n", 1<<19)
		src := Source{Name: "a.csv", Open: func() (io.ReadCloser, error) {
			return io.NopCloser(io.MultiReader(strings.NewReader(full[:size]), failing{broken})), nil
		}}
		_, err := Read(context.Background(), []Source{src}, Options{Spots: Spots{Rule: SpotMean}})
		if !errors.Is(err, broken) || !strings.HasPrefix(err.Error(), "a.csv") {
			t.Errorf("after %d bytes: %v", size, err)
		}
	}
	_, err := Read(context.Background(), []Source{{Name: "a.csv", Open: func() (io.ReadCloser, error) { return nil, broken }}}, Options{})
	if p := new(PositionError); !errors.As(err, &p) || p.Kind != Unreadable || !errors.Is(err, broken) || err.Error() != "a.csv: disk on fire" {
		t.Errorf("open: %v", err)
	}
	_, err = Read(context.Background(), []Source{FromReader("a.csv", idle{})}, Options{})
	if !errors.Is(err, io.ErrNoProgress) {
		t.Errorf("a reader that gives nothing: %v", err)
	}
}

type failing struct{ err error }

func (f failing) Read([]byte) (int, error) { return 0, f.err }

type idle struct{}

func (idle) Read([]byte) (int, error) { return 0, nil }

// An end of the context is noticed before, while and after reading, even when the
// reader itself waits.
func TestContextEnds(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Read(ctx, []Source{FromBytes("a.csv", []byte("x,y,z\n1,2,3\n"))}, Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("ended before: %v", err)
	}
	for _, text := range []string{"", "x,y,z\n" + strings.Repeat("1,2,3\n", 1<<19)} {
		ctx, cancel = context.WithCancel(context.Background())
		r, w := io.Pipe()
		go func() {
			io.Copy(w, strings.NewReader(text))
			cancel()
		}()
		if _, err := Read(ctx, []Source{FromReader("-", r)}, Options{}); !errors.Is(err, context.Canceled) {
			t.Errorf("ended while waiting behind %d bytes: %v", len(text), err)
		}
		r.Close()
	}
}

func TestScanStopsWhenAsked(t *testing.T) {
	enough := errors.New("enough")
	text := []byte("x,y,z\n" + strings.Repeat("1,2,3\n", 1<<19))
	calls := 0
	_, err := Scan(context.Background(), []Source{FromBytes("a.csv", text)}, Options{Workers: 3}, func(b *Block) error {
		if calls++; calls == 3 {
			return enough
		}
		return nil
	})
	if err != enough || calls != 3 {
		t.Errorf("got %v after %d calls", err, calls)
	}
}

func TestProgress(t *testing.T) {
	text := []byte("x,y,z\n" + strings.Repeat("1,2,3\n", 1<<19))
	for _, known := range []bool{true, false} {
		src := FromBytes("a.csv", text)
		if !known {
			src = FromReader("a.csv", bytes.NewReader(text))
		}
		calls, last, total := 0, int64(0), int64(-1)
		_, err := Scan(context.Background(), []Source{src}, Options{Progress: func(d, of int64) {
			if d < last {
				t.Errorf("went back from %d to %d", last, d)
			}
			calls, last, total = calls+1, d, of
		}}, func(*Block) error { return nil })
		if err != nil || calls < 5 || last > int64(len(text)) || last < int64(len(text))-100 || total < last || total > int64(len(text)) {
			t.Errorf("known %v: %d calls, last %d of %d for %d bytes: %v", known, calls, last, total, len(text), err)
		}
	}
}
