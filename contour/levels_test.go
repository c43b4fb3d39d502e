package contour

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"isofacet/grid/decimal"
)

func TestEveryCountsInDecimals(t *testing.T) {
	dec := decimal.MustParse
	for _, c := range []struct {
		name           string
		interval, from string
		index          int
		low, high      float64
		want           []string // index levels with a star
	}{
		{"the third multiple of 0.1 is 0.3", "0.1", "0", 5, 0.15, 0.55, []string{"0.2", "0.3", "0.4", "0.5*"}},
		{"counted from zero, not from the lowest value", "5", "0", 5, 101.2, 126, []string{"105", "110", "115", "120", "125*"}},
		{"counted from 1.25", "2.5", "1.25", 2, 0, 10, []string{"1.25*", "3.75", "6.25*", "8.75"}},
		{"below zero", "1", "0", 5, -6, -3.5, []string{"-5*", "-4"}},
		{"the highest value draws, the lowest does not", "1", "0", 0, 2, 4, []string{"3", "4"}},
		{"no index", "1", "0", 0, 0.5, 2, []string{"1", "2"}},
		{"every level an index", "1", "0", 1, 0.5, 2, []string{"1*", "2*"}},
	} {
		levels, err := Every(dec(c.interval), dec(c.from), c.index, c.low, c.high)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		var got []string
		for _, l := range levels {
			s := l.Number.String()
			if l.Rank == Index {
				s += "*"
			}
			got = append(got, s)
			if l.Z != l.Number.Float64() {
				t.Errorf("%s: %v is %v as a double", c.name, l.Number, l.Z)
			}
		}
		if len(got) != len(c.want) {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
			continue
		}
		for i := range got {
			if got[i] != c.want[i] {
				t.Errorf("%s: %v, want %v", c.name, got, c.want)
			}
		}
	}
}

// TestEveryAgainstSearch compares with testing every multiple near the range.
func TestEveryAgainstSearch(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		interval, _ := decimal.New(rapid.Int64Range(1, 500).Draw(t, "interval"), rapid.IntRange(-1, 3).Draw(t, "scale"))
		from, _ := decimal.New(rapid.Int64Range(-5000, 5000).Draw(t, "from"), 2)
		low := float64(rapid.Int64Range(-9000, 9000).Draw(t, "low")) / 64
		high := low + float64(rapid.Int64Range(0, 900).Draw(t, "range"))/64
		var want []decimal.Number
		near := int64((low - from.Float64()) / interval.Float64())
		for k := near - 50; k <= near+15_000; k++ { // 900/64 at least 0.001 apart
			n, err := multiple(from, interval, k)
			if err != nil {
				t.Fatal(err)
			}
			if z := n.Float64(); low < z && z <= high {
				want = append(want, n)
			}
		}
		levels, err := Every(interval, from, 5, low, high)
		if len(want) == 0 {
			var none *RangeError
			if !errors.As(err, &none) || !errors.Is(err, ErrNoLevel) {
				t.Fatalf("no level: %v", err)
			}
			return
		}
		if err != nil || len(levels) != len(want) {
			t.Fatalf("%d levels, %v; want %d", len(levels), err, len(want))
		}
		for i := range want {
			if levels[i].Number != want[i] {
				t.Fatalf("level %d is %v, want %v", i, levels[i].Number, want[i])
			}
		}
	})
}

func TestLevelsRefused(t *testing.T) {
	dec := decimal.MustParse
	list := func(texts ...string) error {
		var ns []decimal.Number
		for _, s := range texts {
			ns = append(ns, dec(s))
		}
		_, err := List(ns, 5)
		return err
	}
	every := func(interval, from string, low, high float64) error {
		_, err := Every(dec(interval), dec(from), 5, low, high)
		return err
	}
	for _, c := range []struct {
		err  error
		is   error
		text string
	}{
		{every("0", "0", 1, 2), ErrLevels, "interval 0: expected a number above 0"},
		{every("-5", "0", 1, 2), ErrLevels, "interval -5: expected a number above 0"},
		{every("5", "0", 101.2, 101.9), ErrNoLevel, "range 101.2 to 101.9 holds no multiple of 5: no lines"},
		{every("5", "1.5", 102, 106), ErrNoLevel, "range 102 to 106 holds no multiple of 5 counted from 1.5: no lines"},
		{every("5", "0", 5, 5), ErrNoLevel, "range 5 to 5 holds no multiple of 5: no lines"}, // a flat at a level: nothing is lower
		{every("5", "0", math.NaN(), math.NaN()), ErrNoLevel, "range NaN to NaN holds no multiple of 5: no lines"},
		{every("0.001", "0", 0, 5000), ErrTooMany, "interval 0.001 over values from 0 to 5000 makes 5e+06 levels: expected at most 100000, as an interval of 0.1 would"},
		{every("0.0000001", "0", 5e9, 5e9+0.001), ErrTooMany, "interval 0.0000001 over values from 5e+09 to 5.000000000001e+09 makes 1e+04 levels: expected at most 100000, as an interval of 0.000002 would"},
		{every("0.1", "1e30", 0, 1), ErrLevels, "multiples of 0.1 counted from 1000000000000000000000000000000 to values from 0 to 1: expected fewer than 1e15 intervals, and levels of at most 18 digits"},
		{every("0.1", "0.1234567890123456789", 0, 1), ErrLevels, "multiples of 0.1 counted from 0.1234567890123456789 to values from 0 to 1: expected fewer than 1e15 intervals, and levels of at most 18 digits"},
		{list("10", "10"), ErrLevels, "level 2 repeats the one before it, 10: expected levels that rise"},
		{list("10", "12", "11.5"), ErrLevels, "level 3, 11.5, follows 12: expected levels that rise"},
		{list("1e61"), ErrLevels, "level 1, 1" + zeros(61) + ": expected 0 or a number from 1e-60 to 1e60 in size"},
		{list("9007199254740992", "9007199254740993"), ErrLevels, "level 2, 9007199254740993: expected a number that differs from the one before it, 9007199254740992, as a double"},
		{Levels{levelAt(1), levelAt(2)}.Within(2, 3), ErrNoLevel, "range 2 to 3 holds none of the 2 levels: no lines"},
	} {
		if c.err == nil || !errors.Is(c.err, c.is) || c.err.Error() != c.text {
			t.Errorf("got  %v\nwant %s", c.err, c.text)
		}
	}
	if err := (Levels{levelAt(1), levelAt(2)}).Within(1.5, 2); err != nil {
		t.Error(err)
	}
	many := make([]decimal.Number, LevelsMost+1)
	if _, err := List(many, 5); !errors.Is(err, ErrTooMany) {
		t.Error(err)
	}
}

func zeros(n int) string {
	b := make([]byte, n)
	for i := range b {
		b[i] = '0'
	}
	return string(b)
}

// TestListRanks: in an explicit list the first level and every n-th after it are index levels.
func TestListRanks(t *testing.T) {
	levels := listOf(t, "-3", "-1", "0", "0.5", "4", "9", "10")
	for i, l := range levels {
		if want := i == 0 || i == 5; (l.Rank == Index) != want {
			t.Errorf("level %v: %v", l.Number, l.Rank)
		}
	}
}
