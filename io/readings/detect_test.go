package readings

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"
)

func TestDelimiterDetection(t *testing.T) {
	for _, c := range []struct {
		name, text string
		want       Delimiter
	}{
		{"blanks in names do not win over tabs", "id\tx\ty\tz\nMW 1\t1\t2\t3\nMW 2\t1\t3\t4\n", Tab},
		{"nor over commas", "id,x,y,z\nMW 1,1,2,3\n", Comma},
		{"semicolons in one remark do not win over commas", "x,y,z,code\n1,2,3,a;b\n2,3,4,c\n", Comma},
		{"decimal commas between semicolons", "x;y;z\n1,5;2,5;3,5\n", Semicolon},
		{"decimal commas between blanks", "x y z\n1,5 2,5 3,5\n", Blanks},
		{"decimal commas between tabs", "x\ty\tz\n1,5\t2,5\t3,5\n", Tab},
		{"a header alone", "id;easting;northing;elevation\n", Semicolon},
		{"a header alone, names with blanks", "point no,easting,northing,elevation\n", Comma},
		{"most lines bad", "x y z\n1 2 3\nend of job\nsee next page\n4 5 6\n", Blanks},
		{"quoted delimiters", "\"a,b,c\";\"x\";y;z\n\"1,2,3,4\";1;2;3\n", Semicolon},
		{"bars", "x|y|z\n1|2|3\n", '|'},
		{"many blank fields", "x,y,z,a,b,c\n1,2,3,,,\n", Comma},
	} {
		s, err := read(c.text, Options{Lenient: true})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		} else if got := s.Layouts[0].Delimiter; got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}

func TestDecimalDetection(t *testing.T) {
	for _, c := range []struct {
		name, text string
		want       Decimal
		asks       bool
	}{
		{"none", "x;y;z\n1;2;3\n", DecimalPoint, false},
		{"points", "x;y;z\n1.5;2;3\n", DecimalPoint, false},
		{"commas", "x;y;z\n1,5;2;3\n", DecimalComma, false},
		{"three decimals, but six digits before", "x;y;z\n500000,123;4,234;3,345\n", DecimalComma, false},
		{"three decimals, but a zero before", "x;y;z\n1,123;0,234;3,345\n", DecimalComma, false},
		{"three decimals everywhere", "x;y;z\n1,123;2,234;3,345\n", 0, true},
		{"commas in a text column only", "x;y;z;code\n1.5;2.5;3;1,5\n", DecimalPoint, false},
		{"points in a text column only", "x;y;z;code\n1,5;2,5;3;1.5\n", DecimalComma, false},
		{"mostly commas", "x;y;z\n1,5;2,5;3.5\n", DecimalComma, false},
		{"mostly points", "x;y;z\n1.5;2.5;3,5\n", DecimalPoint, false},
	} {
		s, err := read(c.text, Options{Lenient: true})
		var p *PositionError
		switch {
		case c.asks:
			if !errors.As(err, &p) || p.Kind != WhichDecimal {
				t.Errorf("%s: %v", c.name, err)
			}
		case err != nil:
			t.Errorf("%s: %v", c.name, err)
		case s.Layouts[0].Decimal != c.want:
			t.Errorf("%s: %s, want %s", c.name, s.Layouts[0].Decimal, c.want)
		}
	}
}

// A # may begin a comment or a name.
func TestCommentDetection(t *testing.T) {
	for _, c := range []struct {
		name, text, columns string
		used, comments      int
		mark                string
	}{
		{"notes above", "# one\n  # two, 2\nx,y,z\n1,2,3\n", "", 1, 2, "#"},
		{"a note with numbers", "# 100 200 3\nx,y,z\n1,2,3\n", "", 1, 1, "#"},
		{"names", "#1,1,2,3\n#2,2,2,3\n7,3,2,3\n", "id,x,y,z", 3, 0, ""},
		{"a # below is no comment unless the file begins with one", "id,x,y,z\n#1,1,2,3\n", "", 1, 0, ""},
		{"notes between", "# a\n1 2 3\n# b\n2 2 3\n", "", 2, 2, "#"},
	} {
		s, err := read(c.text, Options{Declared: Declared{Columns: columns(t, c.columns)}})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if s.Len() != c.used || s.Counts.Comments != c.comments || s.Layouts[0].Comment != c.mark {
			t.Errorf("%s: %d used, %d comments, mark %q", c.name, s.Len(), s.Counts.Comments, s.Layouts[0].Comment)
		}
	}
	// Names that begin with the mark, when told.
	o := Options{Declared: Declared{Columns: columns(t, "id,x,y,z"), Comment: "none"}}
	if s := mustRead(t, "#1,1,2,3\n#2,2,2,3\n", o); s.Len() != 2 {
		t.Errorf("with none: %d used", s.Len())
	}
}

// Whatever stands above the first reading may be longer than a chunk.
func TestLongTops(t *testing.T) {
	for name, top := range map[string]string{
		"comments":    strings.Repeat("# a line of a long preface, with a \"quote\n", 60_000),
		"blank lines": "# c\n" + strings.Repeat(" \n", 1_000_000),
		"delimiters":  "# c\n" + strings.Repeat(",,,\n", 600_000),
	} {
		n := strings.Count(top, "\n")
		s := mustRead(t, top+"id,x,y,z\nA,1,2,3\n", Options{})
		if s.Len() != 1 || s.Lines[0] != uint32(n+2) || s.Layouts[0].HeaderLine != n+1 || s.Counts.Comments+s.Counts.BlankLines != n {
			t.Errorf("%s: %d used in line %v, header %d, %+v", name, s.Len(), s.Lines, s.Layouts[0].HeaderLine, s.Counts)
		}
	}
	for name, top := range map[string]string{
		"short": "\n\r\n\r", "long": strings.Repeat("x", 3<<20) + "\r\n\n" + strings.Repeat("y\x00", 1<<20) + "\r",
	} {
		s := mustRead(t, top+"x,y,z\n1,2,3\n", Options{Declared: Declared{SkipRows: 3}})
		if s.Len() != 1 || s.Lines[0] != 5 || s.Counts.Skipped != 3 {
			t.Errorf("%s: line %v, %+v", name, s.Lines, s.Counts)
		}
	}
	s := mustRead(t, strings.Repeat("\n", 300_000)+"x,y,z\n1,2,3\n", Options{Declared: Declared{SkipRows: 300_000}})
	if s.Len() != 1 || s.Lines[0] != 300_002 {
		t.Errorf("many rows skipped: line %v", s.Lines)
	}
}

// The largest line that is read, and a smaller one that is too long by a byte.
func TestLongestLine(t *testing.T) {
	for _, n := range []int{maxRecord - 20, maxRecord + 20} {
		text := "x,y,z,rest\n1,2,3,a\n4,5,6," + strings.Repeat("b", n-6) + "\n7,8,9,c\n"
		s, err := read(text, Options{})
		if n < maxRecord && (err != nil || s.Len() != 3) || n > maxRecord && err == nil {
			t.Errorf("a line of %d bytes: %v", n, err)
		}
	}
}

func TestEmptySources(t *testing.T) {
	s := mustRead(t, "id,x,y,z\n# only this\n", Options{Declared: Declared{Comment: "#"}})
	if want := []Warning{{"a.csv", 0, "no readings"}}; !slices.Equal(s.Warnings, want) || s.Len() != 0 || s.Has(ID) || s.ID(0) != "" {
		t.Errorf("%+v", s.Warnings)
	}
	if got := s.Warnings[0].String(); got != "a.csv: no readings" {
		t.Errorf("got %q", got)
	}
}

func TestWordsOfOptions(t *testing.T) {
	for _, c := range []struct {
		text string
		want Delimiter
	}{{"comma", ','}, {"Semicolon", ';'}, {"tab", '\t'}, {`\t`, '\t'}, {"blanks", ' '}, {"detect", 0}, {"", 0}, {"|", '|'}, {",", ','}, {":", ':'}} {
		if got, err := ParseDelimiter(c.text); err != nil || got != c.want {
			t.Errorf("delimiter %q: %v, %v", c.text, got, err)
		} else if again, err := ParseDelimiter(got.String()); err != nil || again != got {
			t.Errorf("delimiter %s reads back as %s, %v", got, again, err)
		}
	}
	for _, bad := range []string{"x", "5", ".", "-", "\"", "commas", "\x00\x00", "é", "\n"} {
		if got, err := ParseDelimiter(bad); err == nil {
			t.Errorf("delimiter %q is taken as %s", bad, got)
		}
	}
	for _, d := range []Decimal{DetectDecimal, DecimalPoint, DecimalComma} {
		if got, err := ParseDecimal(d.String()); err != nil || got != d {
			t.Errorf("decimal %s reads back as %s, %v", d, got, err)
		}
	}
	if _, err := ParseDecimal("dot"); err == nil || err.Error() != `decimal "dot": expected point or comma` {
		t.Errorf("got %v", err)
	}
	for r := SpotRefuse; r <= SpotHighest; r++ {
		if got, err := ParseSpotRule(strings.ToUpper(r.String())); err != nil || got != r {
			t.Errorf("rule %s reads back as %s, %v", r, got, err)
		}
	}
	if got, err := ParseSpotRule(""); err != nil || got != SpotAgree {
		t.Errorf("no rule: %s, %v", got, err)
	}
	if _, err := ParseSpotRule("agree"); err == nil {
		t.Error("the default is no rule to be named")
	}
	if got := ParseMissing(" -9999, NM ,,blank"); !slices.Equal(got, []string{"-9999", "NM", "blank"}) {
		t.Errorf("missing: %q", got)
	}
	l := mustRead(t, "x,y,z,code\n1,2,3,G\n", Options{}).Layouts[0]
	if !l.Has(X) || !l.Has(Code) || l.Has(ID) || l.Has(NoRole) {
		t.Errorf("layout %+v", l)
	}
	if fmt.Sprint(roleCount, Code) != "unknown role code" {
		t.Errorf("roles print as %v %v", roleCount, Code)
	}
}
