package readings

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// account is everything a read tells, as text.
func account(s *Set, err error) string {
	if err != nil {
		return err.Error()
	}
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n%v\n%+v\n%+v\n%+v\n%v %v\n", strings.Join(dump(s), "\n"), s.Lines, s.Counts, s.Merged, s.LeftOut, s.DecimalsXY, s.DecimalsZ)
	for _, e := range s.Refused {
		fmt.Fprintln(&b, e, e.Kind, e.Field)
	}
	for _, w := range s.Warnings {
		fmt.Fprintln(&b, w)
	}
	return b.String()
}

// anyRow makes one record of a file with five columns, good or bad.
func anyRow(t *rapid.T, delimiter string) string {
	field := func() string {
		return rapid.SampledFrom([]string{"A", "1", "2.5", "-3.25", "1e2", "1,5", "", " 7 ", `"q"`, `"q""r"`, "\"two\nlines\"", "\"two\r\nlines,;\"", `"`, `a"b`,
			`"x"y`, "NM", "-9999", "<5", "é", "\xe9", "12345678901234567890", "0.1234567890123456789", "# note", "−4", "tab\there", "\x01", " ", `""`}).Draw(t, "field")
	}
	if rapid.IntRange(0, 9).Draw(t, "kind") < 6 {
		return strings.Join([]string{rapid.SampledFrom([]string{"A", "B 7", `"C, D"`, ""}).Draw(t, "id"), "1.5", fmt.Sprint(rapid.IntRange(0, 99).Draw(t, "y")), "3", "G"}, delimiter)
	}
	var f []string
	for range rapid.SampledFrom([]int{0, 1, 4, 5, 5, 5, 5, 6, 7}).Draw(t, "fields") {
		f = append(f, field())
	}
	return strings.Join(f, delimiter)
}

// The quick way, several workers and small chunks change nothing: not the readings,
// not a line number, not a message. Line ends are mixed, quotes stay open, records
// run over the edges of chunks.
func TestEveryWayReadsAlike(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := rapid.SampledFrom([]Delimiter{Comma, Semicolon, Tab, Blanks}).Draw(t, "delimiter")
		var b strings.Builder
		for range rapid.IntRange(0, 60).Draw(t, "n") {
			b.WriteString(anyRow(t, string(rune(d))))
			b.WriteString(rapid.SampledFrom([]string{"\n", "\n", "\n", "\r\n", "\r", "\r\r\n", "\n\n"}).Draw(t, "end"))
		}
		text := strings.TrimSuffix(b.String(), rapid.SampledFrom([]string{"", "\n", "\r\n"}).Draw(t, "trim"))
		o := Options{Lenient: rapid.Bool().Draw(t, "lenient"), Spots: Spots{Rule: SpotFirst}}
		o.Declared = Declared{Columns: columns(t, "id,x,y,z,code"), Delimiter: d,
			Decimal: rapid.SampledFrom([]Decimal{DecimalPoint, DecimalPoint, DecimalComma}).Draw(t, "decimal"),
			Comment: rapid.SampledFrom([]string{"none", "#", "-"}).Draw(t, "comment"), Missing: []string{"NM", "-9999", "blank"}}
		if rapid.Bool().Draw(t, "choosing") {
			o.Select.Without = []Pattern{{ID, "B*"}, {Code, "?"}}
			o.Select.Only = []Pattern{{ID, "[!-~]*"}}
		}
		o.Workers, o.careful = 1, true
		want := account(read(text, o))
		for _, way := range []Options{{Workers: 1}, {Workers: 3, chunk: 64}, {Workers: 2, chunk: 100, careful: true}, {Workers: 1, chunk: 200}} {
			o.Workers, o.chunk, o.careful = way.Workers, way.chunk, way.careful
			if got := account(read(text, o)); got != want {
				t.Fatalf("%d workers, chunks of %d, careful %v:\n%q\ngot\n%s\nwant\n%s", o.Workers, o.chunk, o.careful, text, got, want)
			}
		}
	})
}

// Records of several lines in a file of many chunks, with one quote left open.
func TestQuotesAcrossChunks(t *testing.T) {
	var b strings.Builder
	b.WriteString("id,x,y,z,code\n")
	line, wantLines := 2, []uint32{}
	const n = 60_000
	for i := range n {
		wantLines = append(wantLines, uint32(line))
		switch i % 5 {
		case 0:
			fmt.Fprintf(&b, "\"P\n%d\",%d,1,2,\"a \"\"b\"\"\r\n, c\"\r\n", i, i)
			line += 3
		case 1:
			fmt.Fprintf(&b, "P%d,%d,1,2,6\" pipe\n", i, i)
			line++
		default:
			fmt.Fprintf(&b, "P%d,%d,1,2,\"G\"\n", i, i)
			line++
		}
	}
	fmt.Fprintf(&b, "\"open,1,2,3,G\n")
	var first []string
	for _, workers := range []int{1, 2, 3} {
		s := mustRead(t, b.String(), Options{Workers: workers, Lenient: true})
		if s.Len() != n || len(s.Refused) != 1 || s.Refused[0].Line != line || !slices.Equal(s.Lines, wantLines) {
			t.Fatalf("%d workers: %d used, refused %v, want line %d", workers, s.Len(), s.Refused, line)
		}
		if s.ID(5) != "P\n5" || s.Text(Code, 5) != "a \"b\"\r\n, c" || s.Text(Code, 6) != "6\" pipe" {
			t.Fatalf("%q %q %q", s.ID(5), s.Text(Code, 5), s.Text(Code, 6))
		}
		if got := dump(s); first == nil {
			first = got
		} else if !slices.Equal(got, first) {
			t.Fatalf("%d workers read otherwise", workers)
		}
	}
}

// A file in which every line opens a quote that none closes costs what other files cost.
func TestOpenQuotesAreCheap(t *testing.T) {
	for name, line := range map[string]string{"open": "\"a b\n", "open inside": "1,2,3,\"\n", "pairs": "\"\"\"\"\"\n", "blanks": "   \" \n"} {
		text := "x,y,z,code\n1,2,3,G\n" + strings.Repeat(line, 3_000_000/len(line))
		_, err := read(text, Options{Spots: Spots{Rule: SpotFirst}})
		var bad *BadLines // but where the quotes of two lines make one record
		if name != "open inside" && (!errors.As(err, &bad) || bad.Good != 1) || name == "open inside" && err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// Blocks add up to what Read gives.
func TestScanGivesTheSameReadings(t *testing.T) {
	text := benchText("survey", 50_000)
	s := mustRead(t, string(text), Options{Spots: Spots{Rule: SpotFirst}})
	n := 0
	sum, err := Scan(context.Background(), []Source{FromBytes("a.csv", text)}, Options{Workers: 2}, func(b *Block) error {
		for i := range b.Len() {
			k := n + i
			if b.Points[i] != s.Points[k] || b.Z[i] != s.Z[k] || b.Lines[i] != s.Lines[k] || b.Text(ID, i) != s.ID(k) ||
				b.Text(Code, i) != s.Text(Code, k) || b.Text(Zone, i) != "" {
				t.Fatalf("reading %d differs", k)
			}
		}
		if b.File != 0 || b.Layout.File != "a.csv" || b.Counts.Used != b.Len() {
			t.Fatalf("block: %+v", b.Counts)
		}
		n += b.Len()
		return nil
	})
	if err != nil || n != s.Len() || sum.Counts.Read != n || len(sum.Layouts) != 1 {
		t.Fatalf("%d readings, %v", n, err)
	}
}

// A line end of two bytes may fall on any edge of a chunk.
func TestLineEndsOnEdges(t *testing.T) {
	for _, end := range []string{"\n", "\r\n", "\r"} {
		for size := 64; size < 80; size++ {
			text := "x,y,z" + end + strings.Repeat("1,2,3"+end, 100)
			s := mustRead(t, text, Options{chunk: size, Workers: 2, Spots: Spots{Rule: SpotFirst}})
			if s.Counts.Read != 100 || s.Merged[98].Line != 101 {
				t.Fatalf("end %q, chunk %d: %+v", end, size, s.Counts)
			}
		}
	}
}
