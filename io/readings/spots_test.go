package readings

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"
)

func TestSpotRules(t *testing.T) {
	const text = "id,x,y,z,code\nB,1,1,10,b\nC,5,5,5,c\nA,1,1,13,a\nD,1.00,1.0,10.2,d\n" // M6: spread 3.0
	for _, c := range []struct {
		spots Spots
		want  string // the reading at 1,1, or the error
	}{
		{Spots{}, "1 place with 3 readings: expected"},
		{Spots{Spread: 3}, "B 11.066666666666666"},
		{Spots{Spread: 2.9}, "1 place with 3 readings: expected"},
		{Spots{Rule: SpotRefuse}, "1 place with 3 readings: expected"},
		{Spots{Rule: SpotRefuse, Spread: 9, SpreadGiven: true}, "1 place with 3 readings: expected"},
		{Spots{Rule: SpotMean}, "B 11.066666666666666"}, // 33.2/3 rounded once
		{Spots{Rule: SpotMean, Spread: 2.9, SpreadGiven: true}, "1 place with 3 readings: expected"},
		{Spots{Rule: SpotMean, Spread: 3, SpreadGiven: true}, "B 11.066666666666666"},
		{Spots{Rule: SpotFirst}, "B 10"},
		{Spots{Rule: SpotLast}, "D 10.2"},
		{Spots{Rule: SpotLowest}, "B 10"},
		{Spots{Rule: SpotHighest}, "A 13"},
		{Spots{Rule: SpotHighest, Spread: 2.9, SpreadGiven: true}, "1 place with 3 readings: expected"},
	} {
		s, err := read(text, Options{Spots: c.spots})
		if strings.HasPrefix(c.want, "1 place") {
			var e *SpotError
			if !errors.As(err, &e) || e.Total != 1 || e.Readings != 3 || e.First[0].Spread != 3 || !strings.Contains(err.Error(), c.want) {
				t.Errorf("%+v: %v", c.spots, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("%+v: %v", c.spots, err)
			continue
		}
		checkCounts(t, s)
		at := slices.Index(s.Points, orb.Point{1, 1})
		if got := fmt.Sprintf("%s %v", s.ID(at), s.Z[at]); got != c.want || s.Len() != 2 || s.SpotCount != 1 || s.SpotSpread != 3 {
			t.Errorf("%+v: got %s, want %s; %d used", c.spots, got, c.want, s.Len())
		}
		if want := strings.ToLower(s.ID(at)); s.Text(Code, at) != want {
			t.Errorf("%+v: code %q beside id %q", c.spots, s.Text(Code, at), s.ID(at))
		}
		for _, m := range s.Merged {
			if m.Into != at || m.Point != (orb.Point{1, 1}) || m.ID == s.ID(at) {
				t.Errorf("%+v: merged %+v", c.spots, m)
			}
		}
	}
}

func TestSpotErrorText(t *testing.T) {
	_, err := read("id,x,y,z,zone\nA,500000.5,1,1.5,up\nB,500000.5,1,2.25,up\nC,3,3,3,up\nD,3,3,3,low\nE,3,3,3,\n", Options{})
	want := `a.csv:4: 3 readings at 3,3 of several zones: C zone "up" z 3 in line 4; D zone "low" z 3 in line 5; E zone "" z 3 in line 6
a.csv:2: 2 readings at 500000.5,1 with z 0.75 apart: A z 1.5 in line 2; B z 2.25 in line 3
2 places with 5 readings: expected one reading at a place, or a rule for several`
	if err == nil || err.Error() != want {
		t.Errorf("got\n%v\nwant\n%s", err, want)
	}
	// Each kind of trouble, the first few places and members.
	var b strings.Builder
	b.WriteString("x y head id\n")
	for i := range 8 {
		for k := range 9 {
			fmt.Fprintf(&b, "%d 0 1 W%d\n", i, k)
		}
	}
	_, err = read(b.String(), Options{Spots: Spots{Rule: SpotMean}})
	var e *SpotError
	if !errors.As(err, &e) || len(e.First) != 5 || e.Total != 8 || e.Readings != 72 || len(e.First[0].Members) != 5 || e.First[0].Why != UnlikeIDs {
		t.Fatalf("got %v", err)
	}
	if first, _, _ := strings.Cut(err.Error(), "\n"); first != "a.csv:2: 9 readings at 0,0 with heads of several ids: "+
		"W0 z 1 in line 2; W1 z 1 in line 3; W2 z 1 in line 4; W3 z 1 in line 5; W4 z 1 in line 6; and 4 more" {
		t.Errorf("got %s", first)
	}
	if !strings.Contains(err.Error(), "\nand 3 more places\n8 places with 72 readings: expected") {
		t.Errorf("got %s", err)
	}
}

// Heads of one well may repeat; shots of several names may share a place.
func TestHeadsAndZones(t *testing.T) {
	for _, c := range []struct {
		text string
		ok   bool
	}{
		{"id,x,y,head\nW1,1,1,3\nW1,1,1,3\n", true},
		{"id,x,y,head\nW1,1,1,3\nW2,1,1,3\n", false},
		{"id,x,y,z\nW1,1,1,3\nW2,1,1,3\n", true},
		{"id,x,y,z,zone\nW1,1,1,3,a\nW2,1,1,3,a\n", true},
		{"id,x,y,z,zone\nW1,1,1,3,a\nW2,1,1,3,b\n", false},
		{"id,x,y,z,zone\nW1,1,1,3,a\nW2,1,1,3,\n", false},
	} {
		for _, rule := range []SpotRule{SpotAgree, SpotMean, SpotFirst, SpotLowest} {
			_, err := read(c.text, Options{Spots: Spots{Rule: rule}})
			if (err == nil) != c.ok {
				t.Errorf("%s under %s: %v", c.text, rule, err)
			}
		}
	}
	if s := mustRead(t, "1 2 3\n", Options{Declared: Declared{Columns: columns(t, "x,y,head")}}); !s.Heads() {
		t.Error("a declared head is not known as one")
	}
}

// A spread is compared as it is written: 10.3 and 10.2 are 0.1 apart.
func TestSpreadAsWritten(t *testing.T) {
	if a, b := 10.3, 10.2; a-b <= 0.1 {
		t.Fatal("the example does not show the trouble")
	}
	s := mustRead(t, "x,y,z\n1,1,10.3\n1,1,10.2\n", Options{Spots: Spots{Spread: 0.1}})
	if s.SpotSpread != 0.1 {
		t.Errorf("spread %v", s.SpotSpread)
	}
	for _, c := range []struct {
		d        float64
		decimals int
		want     float64
	}{
		{0.10000000000000142, 1, 0.1},
		{0.10000000000000142, 0, 0},
		{0.10000000000000142, 15, 0.100000000000001},
		{0.10000000000000142, 17, 0.10000000000000142},
		{0.10000000000000142, 40, 0.10000000000000142},
		{1e20, 2, 1e20},
		{0, 3, 0},
	} {
		if got := asWritten(c.d, c.decimals); got != c.want {
			t.Errorf("%v with %d decimals: %v, want %v", c.d, c.decimals, got, c.want)
		}
	}
}

// The mean is that of the exact sum, rounded once, in any order.
func TestMeanIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		z := rapid.SliceOfN(rapid.Custom(func(t *rapid.T) float64 {
			return math.Ldexp(float64(rapid.Int64Range(-1<<53, 1<<53).Draw(t, "m")), rapid.IntRange(-120, 60).Draw(t, "e"))
		}), 2, 9).Draw(t, "z")
		var b strings.Builder
		b.WriteString("x,y,z\n")
		sum := new(big.Rat)
		for _, v := range z {
			fmt.Fprintf(&b, "1,1,%v\n", v)
			sum.Add(sum, new(big.Rat).SetFloat64(v))
		}
		want, _ := sum.Quo(sum, big.NewRat(int64(len(z)), 1)).Float64()
		s, err := read(b.String(), Options{Spots: Spots{Rule: SpotMean}})
		if err != nil {
			t.Fatal(err)
		}
		if s.Len() != 1 || s.Z[0] != want {
			t.Fatalf("mean of %v: got %v, want %v", z, s.Z, want)
		}
	})
}

// slowGroups joins places within d by looking at all pairs, again and again.
func slowGroups(points []orb.Point, near func(p, q orb.Point) bool) [][]int32 {
	root := make([]int, len(points))
	for i := range root {
		root[i] = i
	}
	for changed := true; changed; {
		changed = false
		for i := range points {
			for j := range points {
				if root[j] > root[i] && near(points[i], points[j]) {
					root[j], changed = root[i], true
				}
			}
		}
	}
	byRoot := make([][]int32, len(points))
	for i, r := range root {
		byRoot[r] = append(byRoot[r], int32(i))
	}
	return slices.DeleteFunc(byRoot, func(m []int32) bool { return len(m) < 2 })
}

func listed(g groups) [][]int32 {
	var all [][]int32
	for k := range g.count() {
		all = append(all, g.of(k))
	}
	return all
}

func TestPlacesAgainstAllPairs(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		size := rapid.SampledFrom([]int{1, 3, 10, 100}).Draw(t, "size")
		var points []orb.Point
		for range rapid.IntRange(0, 60).Draw(t, "n") {
			points = append(points, orb.Point{float64(rapid.IntRange(0, size).Draw(t, "x")), float64(rapid.IntRange(0, size).Draw(t, "y"))})
		}
		got, want := listed(samePlaces(points, 1)), slowGroups(points, func(p, q orb.Point) bool { return p == q })
		if !slices.EqualFunc(got, want, slices.Equal) {
			t.Fatalf("%v: got %v, want %v", points, got, want)
		}
		d := rapid.SampledFrom([]float64{0.5, 1, 1.5, 2, 5, 1e3}).Draw(t, "within")
		c := &collected{Set: &Set{Points: points}, o: &Options{Spots: Spots{Within: d}, Workers: 1}}
		g, err := c.chains(context.Background())
		if err != nil {
			t.Fatal(err)
		}
		want = slowGroups(points, func(p, q orb.Point) bool { return c.near(p, q, d) })
		if got := listed(g); !slices.EqualFunc(got, want, slices.Equal) {
			t.Fatalf("%v within %v: got %v, want %v", points, d, got, want)
		}
	})
}

// Many places, by several goroutines: equal to a sort, with and without repeats.
func TestManyPlaces(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for _, grid := range []int{1, 50, 1000, 1 << 30} {
		points := make([]orb.Point, 200_000)
		for i := range points {
			points[i] = orb.Point{float64(r.IntN(grid)), float64(r.IntN(grid)) / 1000}
		}
		order := make([]int32, len(points))
		for i := range order {
			order[i] = int32(i)
		}
		slices.SortFunc(order, func(a, b int32) int {
			return cmp.Or(cmp.Compare(points[a][0], points[b][0]), cmp.Compare(points[a][1], points[b][1]), cmp.Compare(a, b))
		})
		var want [][]int32
		for i := 0; i < len(order); {
			j := i + 1
			for j < len(order) && points[order[j]] == points[order[i]] {
				j++
			}
			if j > i+1 {
				want = append(want, order[i:j])
			}
			i = j
		}
		slices.SortFunc(want, func(a, b []int32) int { return cmp.Compare(a[0], b[0]) })
		for _, workers := range []int{1, 3} {
			if got := listed(samePlaces(points, workers)); !slices.EqualFunc(got, want, slices.Equal) {
				t.Errorf("grid %d, %d workers: %d groups, want %d", grid, workers, len(got), len(want))
			}
		}
	}
}

func TestChains(t *testing.T) {
	// Steps of exactly 0.01 in decimals that are not exact in doubles; a chain of
	// three, a pair, one alone just beyond.
	const text = "id,x,y,z\nA,430000.01,5600000.10,1\nB,430000.02,5600000.10,4\nC,430000.02,5600000.11,1\nD,430000.00,5600000.13,1\n" +
		"E,430001,5600000,2\nF,430001,5600000.01,2\nG,430001,5600000.021,2\n"
	if a, b := 430000.02, 430000.01; a-b <= 0.01 {
		t.Fatal("the example does not show the trouble")
	}
	s := mustRead(t, text, Options{Spots: Spots{Rule: SpotMean, Within: 0.01}})
	var got []string
	for i := range s.Len() {
		got = append(got, fmt.Sprintf("%s %.3f %.3f %v", s.ID(i), s.Points[i][0], s.Points[i][1], s.Z[i]))
	}
	want := []string{"A 430000.010 5600000.100 2", "D 430000.000 5600000.130 1", "E 430001.000 5600000.000 2", "G 430001.000 5600000.021 2"}
	if !slices.Equal(got, want) {
		t.Errorf("got %q", got)
	}
	// The place is the smallest of the chain, the value that of the rule.
	s = mustRead(t, text, Options{Spots: Spots{Rule: SpotHighest, Within: 0.01}})
	if s.ID(0) != "B" || s.Z[0] != 4 || s.Points[0] != (orb.Point{430000.01, 5600000.10}) {
		t.Errorf("got %s %v %v", s.ID(0), s.Points[0], s.Z[0])
	}
	if _, err := read(text, Options{Spots: Spots{Within: 0.01}}); err == nil || !strings.HasPrefix(err.Error(),
		"a.csv:2: 3 readings at 430000.01,5600000.1 (within 0.01) with z 3 apart: A z 1 in line 2; B z 4 in line 3; C z 1 in line 4\n") {
		t.Errorf("got %v", err)
	}
}

// Used readings do not depend on the order of lines (but for two rules), nor on
// workers, chunks or the way rows are read.
func TestOrderDoesNotMatter(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var rows []string
		for range rapid.IntRange(1, 80).Draw(t, "n") {
			rows = append(rows, fmt.Sprintf("%s,%d.%d,%d,%d.25,%s", rapid.SampledFrom([]string{"", "A", "B", "C"}).Draw(t, "id"),
				rapid.IntRange(0, 4).Draw(t, "x"), rapid.IntRange(0, 2).Draw(t, "d"), rapid.IntRange(0, 4).Draw(t, "y"),
				rapid.IntRange(0, 3).Draw(t, "z"), rapid.SampledFrom([]string{"G", "E", "T"}).Draw(t, "code")))
		}
		rule := rapid.SampledFrom([]SpotRule{SpotMean, SpotLowest, SpotHighest}).Draw(t, "rule")
		within := rapid.SampledFrom([]float64{0, 0.1, 1}).Draw(t, "within")
		shuffled := rapid.Permutation(rows).Draw(t, "order")
		var first []string
		for k, list := range [][]string{rows, shuffled, shuffled} {
			text := "id,x,y,z,code\n" + strings.Join(list, "\n")
			o := Options{Spots: Spots{Rule: rule, Within: within}, Workers: 1 + 2*k, chunk: []int{0, 0, 40}[k], careful: k == 2}
			s, err := read(text, o)
			if err != nil {
				t.Fatal(err)
			}
			checkCounts(t, s)
			got := dump(s)
			slices.Sort(got)
			if k == 0 {
				first = got
			} else if !slices.Equal(got, first) {
				t.Fatalf("rule %s within %v:\n%s\nand\n%s", rule, within, strings.Join(first, "\n"), strings.Join(got, "\n"))
			}
		}
	})
}
