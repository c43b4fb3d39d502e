package lines

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/io/geojson"
	"isofacet/io/readings"
)

// drawn is a line as it is written, with a height that is a function of the place.
type drawn struct {
	name string
	at   []orb.Point
}

func heightAt(p orb.Point) float64 { return 100 + p[0]/4 - p[1]/8 }

// drawLines draws lines through few places, so that they repeat and touch often.
func drawLines(t *rapid.T) []drawn {
	n := rapid.IntRange(1, 4).Draw(t, "lines")
	all := make([]drawn, n)
	coordinate := rapid.Custom(func(t *rapid.T) float64 { return float64(rapid.IntRange(-3, 3).Draw(t, "quarter")) / 4 })
	for i := range all {
		all[i].name = fmt.Sprintf("L%d", i)
		for range rapid.IntRange(1, 7).Draw(t, "vertices") {
			all[i].at = append(all[i].at, orb.Point{coordinate.Draw(t, "x"), coordinate.Draw(t, "y")})
		}
	}
	return all
}

// without drops the repeats of a chain.
func without(at []orb.Point) []orb.Point { return slices.Compact(slices.Clone(at)) }

// shuffled deals the rows of lines out in an order that keeps the order within each.
func shuffled(t *rapid.T, all []drawn) (rows []struct {
	name string
	at   orb.Point
}) {
	next := make([]int, len(all))
	for {
		var left []int
		for i := range all {
			if next[i] < len(all[i].at) {
				left = append(left, i)
			}
		}
		if left == nil {
			return rows
		}
		i := rapid.SampledFrom(left).Draw(t, "next")
		rows = append(rows, struct {
			name string
			at   orb.Point
		}{all[i].name, all[i].at[next[i]]})
		next[i]++
	}
}

// oneWay is what is expected of lines: the points of each by name, and how many of
// them are faulty because they go nowhere.
func oneWay(all []drawn) (want []string, faulty, repeats int) {
	for _, d := range all {
		p := without(d.at)
		repeats += len(d.at) - len(p)
		if len(p) == 1 {
			faulty++
		}
		want = append(want, fmt.Sprint(d.name, p))
	}
	return want, faulty, repeats
}

func checkLines(t *rapid.T, what string, s *Set, err error, all []drawn) {
	want, faulty, repeats := oneWay(all)
	if faulty > 0 {
		if f, ok := errors.AsType[*Faults](err); !ok || f.Total != faulty || f.First[0].Kind != OnePosition {
			t.Fatalf("%s: %d lines go nowhere, got %v", what, faulty, err)
		}
		return
	}
	if err != nil {
		t.Fatalf("%s: %v", what, err)
	}
	checkSet(t, s)
	var got []string
	for i := range s.Lines {
		l := &s.Lines[i]
		got = append(got, fmt.Sprint(l.Name, l.Points))
		for k, p := range l.Points {
			if l.Z[k] != heightAt(p) {
				t.Fatalf("%s: height %v at %v, want %v", what, l.Z[k], p, heightAt(p))
			}
		}
	}
	slices.Sort(got)
	if !slices.Equal(got, want) || s.Repeated != repeats {
		t.Fatalf("%s: got %v with %d repeats, want %v with %d", what, got, s.Repeated, want, repeats)
	}
}

// Rows of several lines mixed in any way, features, and readings give the same
// lines: those that were written, without repeats.
func TestLinesFromEverySource(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		all := drawLines(t)
		rows := shuffled(t, all)

		var text, shots strings.Builder
		text.WriteString("line,x,y,z\n")
		shots.WriteString("id,x,y,z,line\n")
		for i, r := range rows {
			fmt.Fprintf(&text, "%s,%v,%v,%v\n", r.name, r.at[0], r.at[1], heightAt(r.at))
			fmt.Fprintf(&shots, "P%d,%v,%v,%v,%s\n", i, r.at[0], r.at[1], heightAt(r.at), r.name)
		}
		s, err := Breaklines(context.Background(), source("a.csv", text.String()), Options{})
		checkLines(t, "text", s, err, all)

		var points []geojson.Feature
		for _, r := range rows {
			points = append(points, geojson.Feature{Geometry: geojson.Geometry{Shape: r.at, Z: []float64{heightAt(r.at)}}, Properties: []geojson.Property{{Name: "line", Value: geojson.String(r.name)}}})
		}
		s, err = Breaklines(context.Background(), source("a.geojson", encoded(t, points)), Options{})
		checkLines(t, "points", s, err, all)

		set, err := readings.Read(context.Background(), source("a.csv", shots.String()), readings.Options{})
		if err != nil {
			t.Fatal(err)
		}
		s, err = Strung(set, nil)
		checkLines(t, "readings", s, err, all)

		for i := range all { // a GeoJSON line has two positions
			if len(all[i].at) == 1 {
				all[i].at = append(all[i].at, all[i].at[0])
			}
		}
		var features []geojson.Feature
		for _, d := range all {
			f := geojson.Feature{Geometry: geojson.Geometry{Shape: orb.LineString(d.at)}, Properties: []geojson.Property{{Name: "line", Value: geojson.String(d.name)}}}
			for _, p := range d.at {
				f.Geometry.Z = append(f.Geometry.Z, heightAt(p))
			}
			features = append(features, f)
		}
		s, err = Breaklines(context.Background(), source("a.geojson", encoded(t, features)), Options{})
		checkLines(t, "features", s, err, all)
	})
}

func encoded(t *rapid.T, features []geojson.Feature) string {
	var b bytes.Buffer
	w := geojson.NewWriter(&b, geojson.Options{XYDecimals: -1, ZDecimals: -1})
	if err := w.WriteBatch(features); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// A chain is a ring if it is closed and has three places; otherwise the message
// says which is missing, and how far the ends are apart.
func TestRingsAreClosed(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawLines(t)[0]
		if rapid.Bool().Draw(t, "closed") {
			d.at = append(d.at, d.at[0])
		}
		text := "line,x,y\n"
		for _, p := range d.at {
			text += fmt.Sprintf("a,%v,%v\n", p[0], p[1])
		}
		places := map[orb.Point]bool{}
		for _, p := range d.at {
			places[p] = true
		}
		first, last := d.at[0], d.at[len(d.at)-1]
		s, err := Rings(context.Background(), source("a.csv", text), Options{})
		f, _ := errors.AsType[*Fault](err)
		switch {
		case len(places) < 3:
			if f == nil || f.Kind != FewCorners || !strings.Contains(f.Seen, counted(len(places), "distinct position")) {
				t.Fatalf("%d places: %v", len(places), err)
			}
		case first != last:
			if f == nil || f.Kind != NotClosed || !strings.Contains(f.Seen, "gap "+rough(distance(first, last))+" ") {
				t.Fatalf("from %v to %v: %v", first, last, err)
			}
		default:
			if err != nil || len(s.Lines) != 1 || !s.Lines[0].Closed || !slices.Equal(s.Lines[0].Points, without(d.at)) || s.Lines[0].Z != nil {
				t.Fatalf("%v: %v %v", d.at, s, err)
			}
		}
	})
}

// Which segment is long does not depend on the scale, nor on the direction of the line.
func TestLongSegmentsScale(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lengths := rapid.SliceOfN(rapid.IntRange(1, 60), 1, 12).Draw(t, "lengths")
		told := func(scale float64, lengths []int) string {
			l := &Line{Name: "a", Points: []orb.Point{{0, 0}}, numbers: make([]uint32, len(lengths)+1)}
			for _, n := range lengths {
				at := l.Points[len(l.Points)-1]
				l.Points = append(l.Points, orb.Point{at[0] + float64(3*scale*float64(n)), at[1] - float64(4*scale*float64(n))})
			}
			c := newChecker("line", RefuseZeros)
			c.warnOfLong(l)
			if len(c.set.Warnings) == 0 {
				return ""
			}
			_, times, _ := strings.Cut(c.set.Warnings[0].Text, ", ")
			times, _, _ = strings.Cut(times, " times")
			return times
		}
		sorted := slices.Sorted(slices.Values(lengths))
		n := len(sorted)
		twiceMedian := sorted[(n-1)/2] + sorted[n/2]
		want := ""
		if n >= LongLeast && 2*sorted[n-1] > LongFactor*twiceMedian {
			want = rough(2 * float64(sorted[n-1]) / float64(twiceMedian))
		}
		backward := slices.Clone(lengths)
		slices.Reverse(backward)
		for _, got := range []string{told(1, lengths), told(0x1p-10, lengths), told(0x1p40, lengths), told(1, backward)} {
			if got != want {
				t.Fatalf("%v: got %q, want %q", lengths, got, want)
			}
		}
	})
}

// What is put together by the rules of a table is taken apart into the same.
func TestTakeTakesApart(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		separator := rapid.SampledFrom([]string{" ", "-", ".", "::"}).Draw(t, "separator")
		number := rapid.SampledFrom([]string{"none", "behind", "part"}).Draw(t, "number")
		mark := rapid.SampledFrom([]string{"none", "first", "last"}).Draw(t, "mark")
		text := fmt.Sprintf("line = ['*']\n[parts]\nseparator = '%s'\nnumber = '%s'\nmark = '%s'\n", separator, number, mark)
		if mark != "none" {
			text += "[marks]\nbegin = ['BEG', '1']\nend = ['END']\nclose = ['CLO']\n"
		}
		table, err := ReadCodeTable(context.Background(), readings.FromBytes("codes.toml", []byte(text)))
		if err != nil {
			t.Fatal(err)
		}
		want := Coded{Code: rapid.SampledFrom([]string{"TOE", "A7B", "Ä", "é?"}).Draw(t, "code"), Use: OnLine}
		code := want.Code
		if number != "none" {
			want.Number = rapid.SampledFrom([]string{"", "7", "01", "123456789012345678901234567890"}).Draw(t, "number of the string")
		}
		if want.Number != "" && number == "part" {
			code += separator
		}
		code += want.Number
		if mark != "none" {
			for _, m := range rapid.SliceOfNDistinct(rapid.SampledFrom([]string{"BEG", "END", "CLO"}), 0, 3, rapid.ID).Draw(t, "marks") {
				want.Begin, want.End, want.Close = want.Begin || m == "BEG", want.End || m == "END", want.Close || m == "CLO"
				if mark == "first" {
					code = m + separator + code
				} else {
					code += separator + m
				}
			}
		}
		if got := table.Take(code); got != want {
			t.Fatalf("%q: got %+v, want %+v", code, got, want)
		}
	})
}

// Files with other files beside them give the lines that they give alone.
func TestSourcesAreApart(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var sources []readings.Source
		var want []string
		for i := range 3 {
			text := "line,x,y,z\n"
			for k := range rapid.IntRange(2, 5).Draw(t, "vertices") {
				text += fmt.Sprintf("a,%d,%d,%d\n", k, i, 1+rapid.IntRange(0, 3).Draw(t, "z"))
			}
			alone := source(fmt.Sprintf("%d.csv", i), text)
			s, err := Breaklines(context.Background(), alone, Options{})
			if err != nil {
				t.Fatal(err)
			}
			want = append(want, dump(s)...)
			sources = append(sources, alone...)
		}
		s, err := Breaklines(context.Background(), sources, Options{Workers: rapid.IntRange(1, 3).Draw(t, "workers")})
		if err != nil || !slices.Equal(dump(s), want) {
			t.Fatalf("got %v %v, want %v", s, err, want)
		}
	})
}
