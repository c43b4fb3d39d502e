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
