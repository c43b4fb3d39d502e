package readings

import (
	"slices"
	"strings"
	"testing"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
)

func TestEncodings(t *testing.T) {
	const text = "id,x,y,z,code\nBrücke,1,2,3,é\nP2,4,5,−6,\"naïve\nline\"\n"
	encode := func(e unicode.Endianness) string {
		out, err := unicode.UTF16(e, unicode.UseBOM).NewEncoder().String(text)
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	for _, c := range []struct{ name, text, encoding string }{
		{"UTF-8", text, "UTF-8"},
		{"UTF-8 with a mark", "\ufeff" + text, "UTF-8 with a byte order mark"},
		{"UTF-16 little-endian", encode(unicode.LittleEndian), "UTF-16 little-endian"},
		{"UTF-16 big-endian", encode(unicode.BigEndian), "UTF-16 big-endian"},
	} {
		s := mustRead(t, c.text, Options{})
		if s.Layouts[0].Encoding != c.encoding || len(s.Warnings) > 0 {
			t.Errorf("%s: told as %s, %v", c.name, s.Layouts[0].Encoding, s.Warnings)
		}
		if s.ID(0) != "Brücke" || s.Text(Code, 0) != "é" || s.Text(Code, 1) != "naïve\nline" || s.Z[1] != -6 {
			t.Errorf("%s: %q", c.name, dump(s))
		}
	}
}

// Lines that are not UTF-8 are taken as Windows-1252, and that is said; columns of
// messages count the characters that they then hold.
func TestWindows1252(t *testing.T) {
	latin, err := charmap.Windows1252.NewEncoder().String("id,x,y,z\nBrücke,1,2,3\nP2,4,5,6\n€ “Süd”,7,8,–9\n")
	if err != nil {
		t.Fatal(err)
	}
	s := mustRead(t, latin, Options{})
	if s.ID(0) != "Brücke" || s.ID(2) != "€ “Süd”" || s.Z[2] != -9 {
		t.Errorf("got %q", dump(s))
	}
	want := []Warning{{"a.csv", 2, "not UTF-8: taken as Windows-1252 (2 lines in all)"}}
	if !slices.Equal(s.Warnings, want) {
		t.Errorf("warnings %+v", s.Warnings)
	}
	// The same far down a file, by several workers.
	filler := strings.Repeat("P,1,2,3\n", 200_000)
	_, err = read("id,x,y,z\n"+filler+"\xc4\xc4,1,x,3\n"+filler, Options{Workers: 3, Spots: Spots{Rule: SpotMean}})
	if err == nil || !strings.HasPrefix(err.Error(), "a.csv:200002:6: y \"x\"") {
		t.Errorf("got %v", err)
	}
	s = mustRead(t, "id,x,y,z\n"+filler+"\xc4\xc4,1,2,3\n"+filler, Options{Workers: 3, Spots: Spots{Rule: SpotFirst}})
	want = []Warning{{"a.csv", 200002, "not UTF-8: taken as Windows-1252 (1 line in all)"}}
	if !slices.Equal(s.Warnings, want) {
		t.Errorf("warnings %+v", s.Warnings)
	}
	// A header may be the only such line.
	s = mustRead(t, "id,x,y,H\xf6he\nA,1,2,3\n", Options{Declared: Declared{Columns: columns(t, "id=id,x=x,y=y,z=Höhe")}})
	if s.Layouts[0].Columns[3].Name != "Höhe" || len(s.Warnings) != 1 || s.Warnings[0].Line != 1 {
		t.Errorf("%+v %+v", s.Layouts, s.Warnings)
	}
}
