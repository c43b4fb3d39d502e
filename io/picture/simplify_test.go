package picture

import (
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"
)

// distance from p to the segment from a to b.
func distance(p, a, b [2]float64) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	t := 0.0
	if d := dx*dx + dy*dy; d > 0 {
		t = max(0, min(((p[0]-a[0])*dx+(p[1]-a[1])*dy)/d, 1))
	}
	return math.Hypot(p[0]-a[0]-t*dx, p[1]-a[1]-t*dy)
}

func toLine(p [2]float64, line [][2]float64) float64 {
	if len(line) == 1 {
		return math.Hypot(p[0]-line[0][0], p[1]-line[0][1])
	}
	best := math.Inf(1)
	for i := 1; i < len(line); i++ {
		best = min(best, distance(p, line[i-1], line[i]))
	}
	return best
}

// A tenth of a pixel of 1/96 inch, in hundredths of a millimetre.
const tenthOfAPixel = 2540.0 / 96 / 10

// Both ways: no place given is far from what is drawn, and nothing drawn is far from the line given.
func TestSimplifiedLinesStayWithinATenthOfAPixel(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		step := rapid.SampledFrom([]float64{0.1, 1, 5, 50, 1000}).Draw(t, "step")
		places := [][2]float64{{rapid.Float64Range(0, 18000).Draw(t, "x"), rapid.Float64Range(0, 18000).Draw(t, "y")}}
		heading := rapid.Float64Range(0, 7).Draw(t, "heading")
		for range rapid.IntRange(0, 200).Draw(t, "n") {
			if rapid.IntRange(0, 9).Draw(t, "turn") == 0 {
				heading += rapid.Float64Range(-3.2, 3.2).Draw(t, "by")
			}
			last := places[len(places)-1]
			d := step * rapid.Float64Range(0, 1).Draw(t, "d")
			places = append(places, [2]float64{last[0] + d*math.Cos(heading), last[1] + d*math.Sin(heading)})
		}
		spots := simplify(nil, places)
		var drawn [][2]float64
		for i, s := range spots {
			drawn = append(drawn, [2]float64{float64(s.x), float64(s.y)})
			if i > 0 && spots[i-1] == s {
				t.Fatalf("spot %d repeats", i)
			}
		}
		for i, p := range places {
			if d := toLine(p, drawn); d > tenthOfAPixel {
				t.Fatalf("place %d of %v is %v from %v", i, places, d, drawn)
			}
		}
		for i := 1; i < len(drawn); i++ {
			for k := range 11 {
				f := float64(k) / 10
				p := [2]float64{drawn[i-1][0] + f*(drawn[i][0]-drawn[i-1][0]), drawn[i-1][1] + f*(drawn[i][1]-drawn[i-1][1])}
				if d := toLine(p, places); d > tenthOfAPixel {
					t.Fatalf("%v, drawn, is %v from %v", p, d, places)
				}
			}
		}
		first, last := appendSpot(nil, places[0])[0], appendSpot(nil, places[len(places)-1])[0]
		if spots[0] != first || spots[len(spots)-1] != last {
			t.Fatalf("ends moved: %v of %v", spots, places)
		}
	})
}

func TestSimplifyLeavesOutWhatCannotBeSeen(t *testing.T) {
	var straight, circle, back [][2]float64
	for i := range 10_001 {
		straight = append(straight, [2]float64{float64(i), 0.37 * float64(i)})
		a := 2 * math.Pi * float64(i) / 10_000
		circle = append(circle, [2]float64{5000 + 1000*math.Cos(a), 5000 + 1000*math.Sin(a)})
		back = append(back, [2]float64{math.Abs(float64(i) - 5000), 0})
	}
	for _, c := range []struct {
		name        string
		places      [][2]float64
		least, most int
	}{
		{"straight", straight, 2, 2},
		// A chord of height 1.5 to 3 spans 2 sqrt(2 r h): 110 to 155, of 6283.
		{"circle", circle, 35, 75},
		{"there and back", back, 3, 3},
		{"one place", straight[:1], 1, 1},
		{"none", nil, 0, 0},
		{"within a hundredth", [][2]float64{{1.1, 1.2}, {0.9, 1.3}, {1.2, 0.8}}, 1, 1},
	} {
		if n := len(simplify(nil, c.places)); n < c.least || n > c.most {
			t.Errorf("%s: %d spots, want %d to %d", c.name, n, c.least, c.most)
		}
	}
}

// parseWay is the reading of a path that way writes.
func parseWay(t *rapid.T, d string) []spot {
	closed := strings.HasSuffix(d, "z")
	d = strings.TrimSuffix(d, "z")
	d = strings.NewReplacer("-", " -", "l", " ", "M", "").Replace(d)
	var numbers []int32
	for _, f := range strings.Fields(d) {
		v, err := strconv.ParseFloat(f, 64)
		if err != nil {
			t.Fatal(err)
		}
		numbers = append(numbers, int32(math.Round(100*v)))
	}
	var spots []spot
	for i := 0; i+1 < len(numbers); i += 2 {
		s := spot{numbers[i], numbers[i+1]}
		if i > 0 {
			last := spots[len(spots)-1]
			s = spot{last.x + s.x, last.y + s.y}
		}
		spots = append(spots, s)
	}
	if closed {
		spots = append(spots, spots[0])
	}
	return spots
}

func TestWayReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		spots := rapid.SliceOfN(rapid.Custom(func(t *rapid.T) spot {
			return spot{rapid.Int32Range(-3000, 30000).Draw(t, "x"), rapid.Int32Range(-3000, 30000).Draw(t, "y")}
		}), 2, 20).Draw(t, "spots")
		if rapid.Bool().Draw(t, "close") {
			spots = append(spots, spots[0])
		}
		d := string(way(nil, spots))
		back := parseWay(t, d)
		if len(back) != len(spots) {
			t.Fatalf("%s reads %v, want %v", d, back, spots)
		}
		for i := range spots {
			if back[i] != spots[i] {
				t.Fatalf("%s reads %v, want %v", d, back, spots)
			}
		}
	})
	if got := string(way(nil, []spot{{150, 200}, {200, 175}, {300, 175}, {150, 200}})); got != "M1.5 2l.5-.25 1 0z" {
		t.Errorf("%s", got)
	}
}

// Whatever a text holds, an XML parser must get it back, but for characters that XML does not have.
func TestEscape(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := string(rapid.SliceOf(rapid.Byte()).Draw(t, "bytes")) + rapid.String().Draw(t, "text")
		d := xml.NewDecoder(strings.NewReader(`<a b="` + escape(text) + `">` + escape(text) + "</a>"))
		var got []string
		for {
			token, err := d.Token()
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				t.Fatalf("%q: %v", text, err)
			}
			switch token := token.(type) {
			case xml.StartElement:
				got = append(got, token.Attr[0].Value)
			case xml.CharData:
				got = append(got, string(token))
			}
		}
		want := strings.Map(func(r rune) rune {
			switch {
			case r == '\n' || r == '\r' || r == '\t':
				return ' '
			case r < 0x20 || r == 0xfffe || r == 0xffff:
				return utf8.RuneError
			}
			return r
		}, strings.ToValidUTF8(text, string(utf8.RuneError)))
		// ToValidUTF8 replaces a run of bad bytes by one character.
		for i := range got {
			if squeeze(got[i]) != squeeze(want) {
				t.Fatalf("%q comes back as %q", text, got[i])
			}
		}
	})
}

func squeeze(s string) string {
	for strings.Contains(s, "\uFFFD\uFFFD") {
		s = strings.ReplaceAll(s, "\uFFFD\uFFFD", "\uFFFD")
	}
	return s
}

func TestWrap(t *testing.T) {
	for _, c := range []struct {
		text string
		want string
	}{
		{"", ""}, {"one", "one"}, {"one two three", "one two|three"}, {"a-very-long-word-indeed x", "a-very-lon|g-word-ind|eed x"}, {"  blanks   between ", "blanks|between"},
	} {
		if got := strings.Join(wrap(c.text, 1, 6), "|"); got != c.want { // ten characters
			t.Errorf("%q: %q, want %q", c.text, got, c.want)
		}
	}
}
