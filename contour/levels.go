package contour

import (
	"math"
	"sort"

	"isofacet/grid/decimal"
)

// LevelsMost is the largest number of levels in one set.
const LevelsMost = 100_000

// countMost bounds how many intervals a level may lie from where counting starts, so that an estimate of that number
// in doubles is off by less than one.
const countMost = 1e15

// Rank says how heavily a level is drawn.
type Rank uint8

const (
	Intermediate Rank = iota // the ordinary levels
	Index                    // every fifth or so, heavier
)

func (r Rank) String() string {
	if r == Index {
		return "index"
	}
	return "intermediate"
}

// Level is a height to draw a line at.
type Level struct {
	Number decimal.Number // as a person would write it
	Z      float64        // the double nearest to Number; values are compared with it
	Rank   Rank
}

// Levels is a set of levels, rising strictly in Number and in Z.
type Levels []Level

// Every returns the levels from + k interval, k whole, at which a surface with values from low to high has lines: those
// with low < level <= high (a value equal to a level counts as above it). Each is computed with integers from k
// and rounded once, so that the third multiple of 0.1 is 0.3, and is the same whatever the range is.
//
// A level is an index if k is a multiple of indexEvery, k counted from from; indexEvery 0 or less makes no index.
//
// It returns an *IntervalError, a *CountError for more than LevelsMost levels or levels that doubles cannot tell
// apart, a *FarError, or a *RangeError when the range holds no such level.
func Every(interval, from decimal.Number, indexEvery int, low, high float64) (Levels, error) {
	if interval.Sign() <= 0 {
		return nil, &IntervalError{interval}
	}
	none := &RangeError{Low: low, High: high, Interval: interval, From: from}
	if !(low <= high) {
		return nil, none // no values: NaN, or an empty range
	}
	step, largest := interval.Float64(), max(math.Abs(low), math.Abs(high))
	if (high-low)/step > LevelsMost || step < 2*ulp(largest) {
		return nil, tooMany(interval, low, high)
	}
	estimate := math.Floor((low - from.Float64()) / step)
	if !(math.Abs(estimate) < countMost) {
		return nil, &FarError{from, interval, low, high}
	}
	var levels Levels
	for k := int64(estimate) - 2; ; k++ { // the estimate is off by one at most
		number, err := multiple(from, interval, k)
		if err != nil {
			return nil, &FarError{from, interval, low, high}
		}
		z := number.Float64()
		if z > high {
			break
		}
		if z > low {
			levels = append(levels, Level{number, z, rankOf(k, indexEvery)})
		}
	}
	switch {
	case len(levels) == 0:
		return nil, none
	case len(levels) > LevelsMost:
		return nil, tooMany(interval, low, high)
	}
	return levels, nil
}

// multiple returns from + k step.
func multiple(from, step decimal.Number, k int64) (decimal.Number, error) {
	n, err := step.Times(k)
	if err != nil {
		return n, err
	}
	return n.Add(from)
}

// rankOf makes every n-th of the levels an index, number 0 among them.
func rankOf(k int64, n int) Rank {
	if n > 0 && k%int64(n) == 0 {
		return Index
	}
	return Intermediate
}

// tooMany says so, with the first of 2, 5, 10, ... times the interval that would do.
func tooMany(interval decimal.Number, low, high float64) error {
	e := &CountError{Low: low, High: high, Interval: interval, Count: (high - low) / interval.Float64()}
	for size := int64(1); size < 1e18; size *= 10 {
		for _, times := range [...]int64{2 * size, 5 * size, 10 * size} {
			n, err := interval.Times(times)
			if err != nil {
				return e
			}
			if f := n.Float64(); (high-low)/f <= LevelsMost-1 && f >= 2*ulp(max(math.Abs(low), math.Abs(high))) {
				e.Fits = n
				return e
			}
		}
	}
	return e
}

// ulp is the distance from x >= 0 to the next larger double.
func ulp(x float64) float64 { return math.Nextafter(x, math.Inf(1)) - x }

// List returns the levels that were asked for one by one. They must rise, without repeats.
//
// The first level of the list takes the part that the start of counting has in Every: it and every
// indexEvery-th after it are index levels. Levels outside the range of the values are kept: they draw nothing, and
// bound the bands.
//
// It returns an *OrderError, a *SizeError or a *CountError.
func List(numbers []decimal.Number, indexEvery int) (Levels, error) {
	if len(numbers) > LevelsMost {
		return nil, &CountError{Count: float64(len(numbers))}
	}
	levels := make(Levels, len(numbers))
	for i, n := range numbers {
		z := n.Float64()
		if size := math.Abs(z); size > 1e60 || size < 1e-60 && n.Sign() != 0 {
			return nil, &SizeError{i + 1, n}
		}
		if i > 0 {
			before := levels[i-1]
			if n.Cmp(before.Number) <= 0 || z == before.Z {
				return nil, &OrderError{i + 1, n, before.Number, n.Cmp(before.Number) > 0}
			}
		}
		levels[i] = Level{n, z, rankOf(int64(i), indexEvery)}
	}
	return levels, nil
}

// Within returns nil if a surface with values from low to high has a line at one of the levels, or else a *RangeError.
func (ls Levels) Within(low, high float64) error {
	for _, l := range ls {
		if low < l.Z && l.Z <= high {
			return nil
		}
	}
	return &RangeError{Low: low, High: high, Levels: len(ls)}
}

// below returns how many of zs, which rise, are not above z.
func below(zs []float64, z float64) int {
	return sort.Search(len(zs), func(i int) bool { return z < zs[i] })
}

// values returns Z of every level.
func (ls Levels) values() []float64 {
	zs := make([]float64, len(ls))
	for i, l := range ls {
		zs[i] = l.Z
	}
	return zs
}
