package readings

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Each part is what Read makes of its lines alone, for files cut into small chunks
// as well.
func TestPartsAreTheSetsOfTheirLines(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		names := []string{"2024-Q1", "2024-Q2", "", "ünï"}
		header := "id,x,y,z,round,status\n"
		texts := map[string]string{}
		whole := header
		for i := range rapid.IntRange(1, 40).Draw(t, "lines") {
			name := rapid.SampledFrom(names).Draw(t, "round")
			z := rapid.SampledFrom([]string{"1", "2.5", "NM", "x1", "1.250e0"}).Draw(t, "z")
			line := fmt.Sprintf("W%d,%d,%d,%s,%s,%s\n", i, rapid.IntRange(0, 3).Draw(t, "x"), i%5, z, name, rapid.SampledFrom([]string{"ok", "dry"}).Draw(t, "status"))
			texts[name] += line
			whole += line
		}
		o := Options{Lenient: true, Declared: Declared{Missing: []string{"NM"}}, Spots: Spots{Rule: SpotMean},
			Select: Selection{Without: []Pattern{{Status, "dry"}}}, chunk: 64, Workers: 3}
		all, err := ReadParts(context.Background(), []Source{FromBytes("all", []byte(whole))}, o, ByRole(Round))
		if err != nil {
			t.Fatal(err)
		}
		if len(all) != len(texts) || !slices.IsSortedFunc(all, func(a, b Part) int { return strings.Compare(a.Name, b.Name) }) {
			t.Fatalf("%d parts, want %d in rising order", len(all), len(texts))
		}
		for _, part := range all {
			want, err := Read(context.Background(), []Source{FromBytes("all", []byte(header+texts[part.Name]))}, o)
			if err != nil {
				t.Fatal(err)
			}
			got := part.Set
			if g, w := describeSet(got), describeSet(want); g != w {
				t.Fatalf("part %q:\n%s\nalone:\n%s", part.Name, g, w)
			}
			c := got.Counts
			if c.Used+c.Merged+c.LeftOut+c.Refused != c.Read {
				t.Fatalf("counts do not add up: %+v", c)
			}
		}
	})
}

// describeSet writes what a set holds, line numbers left out.
func describeSet(s *Set) string {
	var lines []string
	for i := range s.Points {
		lines = append(lines, fmt.Sprint("used ", s.Points[i], s.Z[i], s.ID(i), s.Text(Status, i)))
	}
	for _, m := range s.Merged {
		lines = append(lines, fmt.Sprint("merged ", m.Point, m.Z, m.ID))
	}
	for _, l := range s.LeftOut {
		lines = append(lines, fmt.Sprint("left out ", l.ID, l.Reason))
	}
	for _, e := range s.Refused {
		lines = append(lines, fmt.Sprint("refused ", e.What, e.Seen))
	}
	c := s.Counts
	lines = append(lines, fmt.Sprint(c.Read, c.Used, c.Merged, c.LeftOut, c.Refused, s.SpotCount, s.SpotSpread, s.DecimalsXY, s.DecimalsZ))
	return strings.Join(lines, "\n")
}

// A round with two heights at one place does not stop the others; a line that has no
// telling which round it is of is in the account of all.
func TestPartsApartInTrouble(t *testing.T) {
	text := "id,x,y,z,round\na,0,0,1,A\nb,0,0,2,A\nc,0,0,3,B\nd,1\n"
	all, err := ReadParts(context.Background(), []Source{FromBytes("f", []byte(text))}, Options{Lenient: true}, ByRole(Round))
	if err != nil || len(all) != 2 {
		t.Fatalf("%d parts, %v", len(all), err)
	}
	if e, ok := all[0].Err.(*SpotError); !ok || all[0].Set != nil {
		t.Errorf("round A: %v", e)
	}
	b := all[1]
	if b.Err != nil || b.Set.Len() != 1 || b.Set.Z[0] != 3 || b.Set.Counts.Read != 2 || len(b.Set.Refused) != 1 || b.Set.Refused[0].Line != 5 {
		t.Errorf("round B: %+v, %v", b.Set, b.Err)
	}
	// Strict reading stops at the bad line.
	if _, err := ReadParts(context.Background(), []Source{FromBytes("f", []byte(text))}, Options{}, ByRole(Round)); err == nil {
		t.Error("a bad line is no error")
	}
}

// A bad line fails its part alone under BadApart, with what Read says of the part's
// own lines; one that cannot be taken apart fails all.
func TestBadLinesApart(t *testing.T) {
	const header = "id,x,y,z,round\n"
	a, b := "A,0,0,1,R1\nB,1,0,2,R1\n", "A,0,0,x,R2\nB,1,0,2,R2\nC,0,q,2,R2\n"
	read := func(text string, apart bool) ([]Part, error) {
		return ReadParts(context.Background(), []Source{FromBytes("f", []byte(text))}, Options{BadApart: apart, Workers: 2, chunk: 16}, ByRole(Round))
	}
	all, err := read(header+a+b, true)
	if err != nil || len(all) != 2 {
		t.Fatalf("%d parts, %v", len(all), err)
	}
	if all[0].Err != nil || all[0].Set.Len() != 2 || all[0].Set.Counts.Read != 2 {
		t.Errorf("R1: %v %+v", all[0].Err, all[0].Set)
	}
	const want = "f:4:7: z \"x\": expected a number such as 12.4\nf:6:5: y \"q\": expected a number such as 12.4\n2 lines bad, 1 good"
	if all[1].Set != nil || all[1].Err == nil || all[1].Err.Error() != want {
		t.Errorf("R2: %v\nwant %s", all[1].Err, want)
	}
	if _, err := read(header+a+b, false); err == nil || err.Error() != strings.Replace(want, "1 good", "3 good", 1) {
		t.Errorf("not apart: %v", err)
	}
	if _, err := read(header+a+b+"D,1\n", true); err == nil || !strings.Contains(err.Error(), "\n3 lines bad, 3 good") {
		t.Errorf("a line of no part: %v", err)
	}
}
