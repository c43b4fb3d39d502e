package option

import (
	"math"
	"strconv"
	"strings"
)

// Size is a number of bytes, such as 512MiB. The zero value means not set.
type Size uint64

// sizeUnits lists the units from the largest, so that a suffix is matched by
// the longest unit first ("MiB" before "B").
var sizeUnits = []struct {
	name  string
	bytes float64
}{
	{"TiB", 1 << 40}, {"GiB", 1 << 30}, {"MiB", 1 << 20}, {"KiB", 1 << 10},
	{"TB", 1e12}, {"GB", 1e9}, {"MB", 1e6}, {"kB", 1e3}, {"B", 1},
}

const sizeForm = "a size such as 512MiB, 2GiB or 1.5GB"

// Set reads a number and a unit: B, kB, MB, GB, TB (powers of 1000) or KiB,
// MiB, GiB, TiB (powers of 1024). A bare number counts bytes.
func (s *Size) Set(text string) error {
	number, unit := text, 1.0
	for _, u := range sizeUnits {
		if rest, ok := strings.CutSuffix(text, u.name); ok {
			number, unit = rest, u.bytes
			break
		}
	}
	v, err := strconv.ParseFloat(strings.TrimSpace(number), 64)
	if err != nil || !(v > 0) || v*unit < 1 || v*unit >= math.MaxInt64 {
		return &BadValue{text, sizeForm}
	}
	*s = Size(v * unit)
	return nil
}

// String writes the size with three digits in the largest power of 1024 that
// it reaches, exactly where that is possible: 512MiB, 1.5GiB, 800B.
func (s Size) String() string {
	if s == 0 {
		return ""
	}
	for _, u := range sizeUnits[:4] {
		if float64(s) >= u.bytes {
			return strconv.FormatFloat(round3(float64(s)/u.bytes), 'f', -1, 64) + u.name
		}
	}
	return strconv.FormatUint(uint64(s), 10) + "B"
}

// Type names the form in help pages.
func (s *Size) Type() string { return "SIZE" }

// round3 keeps what a person reads of a size: two places after the point below
// ten, one below a hundred, none above.
func round3(v float64) float64 {
	switch {
	case v < 10:
		return math.Round(v*100) / 100
	case v < 100:
		return math.Round(v*10) / 10
	}
	return math.Round(v)
}
