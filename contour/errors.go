package contour

import (
	"errors"
	"fmt"

	"isofacet/grid/decimal"
)

var (
	// ErrLevels is wrapped by every error about levels that cannot be.
	ErrLevels = errors.New("not a set of levels")
	// ErrNoLevel is wrapped by the error for a range of values that no level lies in.
	ErrNoLevel = errors.New("no level in the range of values")
	// ErrTooMany is wrapped by the errors for more levels or pieces than allowed.
	ErrTooMany = errors.New("too many")
)

// IntervalError reports an interval that is not above zero. It wraps ErrLevels.
type IntervalError struct {
	Interval decimal.Number
}

func (e *IntervalError) Error() string {
	return fmt.Sprintf("interval %s: expected a number above 0", e.Interval)
}

func (e *IntervalError) Unwrap() error { return ErrLevels }

// OrderError reports a level that does not lie above the one before it. It wraps ErrLevels.
type OrderError struct {
	Place         int // in the list, from 1
	Value, Before decimal.Number
	// SameDouble: the decimals rise, but both are nearest to one double.
	SameDouble bool
}

func (e *OrderError) Error() string {
	if e.SameDouble {
		return fmt.Sprintf("level %d, %s: expected a number that differs from the one before it, %s, as a double",
			e.Place, e.Value, e.Before)
	}
	if e.Value.Cmp(e.Before) == 0 {
		return fmt.Sprintf("level %d repeats the one before it, %s: expected levels that rise", e.Place, e.Before)
	}
	return fmt.Sprintf("level %d, %s, follows %s: expected levels that rise", e.Place, e.Value, e.Before)
}

func (e *OrderError) Unwrap() error { return ErrLevels }

// FarError reports a level that cannot be computed: too many intervals from where counting starts, or with more digits
// than decimals hold. It wraps ErrLevels.
type FarError struct {
	From, Interval decimal.Number
	Low, High      float64 // of the values
}

func (e *FarError) Error() string {
	return fmt.Sprintf("multiples of %s counted from %s to values from %v to %v: expected fewer than 1e15 intervals, and levels of at most 18 digits",
		e.Interval, e.From, e.Low, e.High)
}

func (e *FarError) Unwrap() error { return ErrLevels }

// SizeError reports a level of a size beyond that of values. It wraps ErrLevels.
type SizeError struct {
	Place int // in the list, from 1
	Value decimal.Number
}

func (e *SizeError) Error() string {
	return fmt.Sprintf("level %d, %s: expected 0 or a number from 1e-60 to 1e60 in size", e.Place, e.Value)
}

func (e *SizeError) Unwrap() error { return ErrLevels }

// RangeError says that no level lies in the range of the values, so that there is nothing to draw. It
// wraps ErrNoLevel.
type RangeError struct {
	Low, High float64        // of the values
	Interval  decimal.Number // 0 for an explicit list
	From      decimal.Number // that multiples are counted from
	Levels    int            // in an explicit list
}

func (e *RangeError) Error() string {
	where := fmt.Sprintf("range %v to %v", e.Low, e.High)
	switch {
	case e.Interval.Sign() == 0:
		return fmt.Sprintf("%s holds none of the %d levels: no lines", where, e.Levels)
	case e.From.Sign() == 0:
		return fmt.Sprintf("%s holds no multiple of %s: no lines", where, e.Interval)
	}
	return fmt.Sprintf("%s holds no multiple of %s counted from %s: no lines", where, e.Interval, e.From)
}

func (e *RangeError) Unwrap() error { return ErrNoLevel }

// CountError reports more levels than LevelsMost, or levels closer than doubles can tell apart. It wraps ErrTooMany.
type CountError struct {
	Low, High float64        // of the values
	Interval  decimal.Number // 0 for an explicit list
	Count     float64        // of levels; as a double, since it may be beyond every integer
	Fits      decimal.Number // the first of 2, 5, 10, ... times the interval that would do; 0 if none was found
}

func (e *CountError) Error() string {
	if e.Interval.Sign() == 0 {
		return fmt.Sprintf("%.0f levels: expected at most %d", e.Count, LevelsMost)
	}
	return fmt.Sprintf("interval %s over values from %v to %v makes %.3g levels: expected at most %d, as an interval of %s would",
		e.Interval, e.Low, e.High, e.Count, LevelsMost, e.Fits)
}

func (e *CountError) Unwrap() error { return ErrTooMany }

// PiecesError reports that lines would have more pieces than allowed, a piece being a line's way through one
// triangle or cell. It wraps ErrTooMany.
type PiecesError struct {
	Pieces, Most int64
}

func (e *PiecesError) Error() string {
	return fmt.Sprintf("%d levels' pieces in triangles or cells: expected at most %d", e.Pieces, e.Most)
}

func (e *PiecesError) Unwrap() error { return ErrTooMany }
