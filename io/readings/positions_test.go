package readings

import (
	"context"
	"errors"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

func positions(text string, o Options) (*Positions, error) {
	return ReadPositions(context.Background(), FromBytes("at.csv", []byte(text)), o)
}

func TestPositions(t *testing.T) {
	for _, c := range []struct {
		name, text, columns string
		points              []orb.Point
		names               []string
		rows                [][]string
		note                string
	}{
		{"by words", "label,north,east,remark\nQ1,2.50,1,\"by the gate, left\"\n\nQ2, 4 ,3,\n", "",
			[]orb.Point{{1, 2.5}, {3, 4}}, []string{"label", "north", "east", "remark"},
			[][]string{{"Q1", "2.50", "1", "by the gate, left"}, {"Q2", "4", "3", ""}}, ""},
		{"two numbers", "1 2\n3 4\n", "", []orb.Point{{1, 2}, {3, 4}}, []string{"x", "y"}, [][]string{{"1", "2"}, {"3", "4"}},
			"two numbers a line without a header are taken as x y"},
		{"three numbers", "1 2 9\n", "", []orb.Point{{1, 2}}, []string{"x", "y", "z"}, [][]string{{"1", "2", "9"}},
			"three numbers a line without a header are taken as x y z"},
		{"a list", "Q1;1,5;2\n", "id,x,y", []orb.Point{{1.5, 2}}, []string{"id", "x", "y"}, [][]string{{"Q1", "1,5", "2"}}, ""},
		{"a list with gaps", "Q1,7,1,2\n", "-,-,x,y", []orb.Point{{1, 2}}, []string{"column_1", "column_2", "x", "y"}, [][]string{{"Q1", "7", "1", "2"}}, ""},
		{"a depth is no matter here", "x,y,depth,water level\n1,2,3,4\n", "", []orb.Point{{1, 2}}, []string{"x", "y", "depth", "water level"},
			[][]string{{"1", "2", "3", "4"}}, ""},
		{"Windows-1252", "id,x,y\nS\xfcd,1,2\n", "", []orb.Point{{1, 2}}, []string{"id", "x", "y"}, [][]string{{"Süd", "1", "2"}}, ""},
		{"line ends in quotes", "id,x,y\r\n\"a\r\nb\",1,2\r\nc,3,4\r\n", "", []orb.Point{{1, 2}, {3, 4}}, []string{"id", "x", "y"},
			[][]string{{"a\r\nb", "1", "2"}, {"c", "3", "4"}}, ""},
		{"a delimiter behind", "id,x,y\na,1,2,\n", "", []orb.Point{{1, 2}}, []string{"id", "x", "y"}, [][]string{{"a", "1", "2"}}, ""},
		{"none", "id,x,y\n", "", nil, []string{"id", "x", "y"}, nil, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			p, err := positions(c.text, Options{Declared: Declared{Columns: columns(t, c.columns)}})
			if err != nil {
				t.Fatal(err)
			}
			if !slices.Equal(p.Points, c.points) || !slices.Equal(p.Names, c.names) || p.Layout.Note != c.note {
				t.Errorf("points %v, names %q, note %q", p.Points, p.Names, p.Layout.Note)
			}
			for i, want := range c.rows {
				if got := p.Row(nil, i); !slices.Equal(got, want) {
					t.Errorf("row %d: %q, want %q", i, got, want)
				}
			}
		})
	}
}

func TestManyPositions(t *testing.T) {
	text := benchText("quoted", 100_000)
	for _, workers := range []int{1, 3} {
		p, err := positions(string(text), Options{Workers: workers})
		if err != nil || p.Len() != 100_000 {
			t.Fatal(err)
		}
		i := 0
		for line := range strings.Lines(string(text)) {
			if strings.HasPrefix(line, "id") {
				continue
			}
			f := strings.Split(strings.ReplaceAll(strings.TrimSpace(line), `"`, ""), ",")
			row := p.Row(nil, i)
			if row[0] != f[0] || row[1] != f[1] || row[4] != f[4]+", shot" || p.Lines[i] != uint32(i+2) {
				t.Fatalf("row %d: %q of %q", i, row, line)
			}
			i++
		}
	}
}

func TestBadPositions(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"1,2\n", "at.csv:1: no header line above 2 fields: expected the columns to be declared"},
		{"id,x,z\n1,2,3\n", "at.csv:1: no column for y: expected x and y; the roles found are id, x, z"},
		{"id,x,y\nA,1\nB,?,2\nC,1,2\n", "at.csv:2: 2 fields: expected 3, as in the header\nat.csv:3:3: x \"?\": expected a number such as 12.4\n2 lines bad, 1 good"},
		{"id,x,y\n" + strings.Repeat("n", 70000) + ",1,2\n", "at.csv:2:1: row: expected at most 65,535 bytes\n1 line bad, 0 good"},
	} {
		if _, err := positions(c.text, Options{}); err == nil || err.Error() != c.want {
			t.Errorf("got  %v\nwant %s", err, c.want)
		}
	}
	p, err := positions("id,x,y\nA,1\nB,NM,2\nC,1,2\n", Options{Lenient: true, Declared: Declared{Missing: []string{"NM"}}})
	if err != nil || p.Len() != 1 || len(p.Refused) != 1 || len(p.LeftOut) != 1 || p.LeftOut[0].Reason != "x is NM" ||
		p.Counts.Used+p.Counts.LeftOut+p.Counts.Refused != p.Counts.Read {
		t.Errorf("%+v %v", p, err)
	}
	var bad *PositionError
	if _, err := positions("", Options{}); !errors.As(err, &bad) || bad.Kind != Empty {
		t.Errorf("nothing: %v", err)
	}
}
