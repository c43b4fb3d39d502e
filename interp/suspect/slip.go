package suspect

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// A Slip is a usual mistake that would explain a suspect: with it undone, the height
// would be Would.
type Slip struct {
	What  string
	Would float64
}

// RodSections are lengths by which a rod is usually read, set or noted wrong: a foot in
// metres, and round lengths of sections in metres or feet (common practice).
var RodSections = []float64{0.3048, 0.5, 1, 1.2, 1.5, 2, 3, 5}

// Slips returns the usual mistakes that bring z to within tolerance of what is expected,
// the likeliest first: two neighbouring digits swapped, a digit before the point dropped or
// too many, the sign, the point moved, feet and metres mixed up, a rod section, one digit
// wrong. decimals is how many digits after the point heights have. Nothing is corrected by
// it: several may fit, and none need be true.
func Slips(z, expected, tolerance float64, decimals int) (found []Slip) {
	if !(math.Abs(z-expected) > tolerance) {
		return nil
	}
	try := func(would float64, format string, args ...any) {
		would = float64(would) // it may be a product
		if math.Abs(would-expected) > tolerance {
			return
		}
		for _, s := range found {
			if s.Would == would {
				return
			}
		}
		found = append(found, Slip{fmt.Sprintf(format, args...), would})
	}
	number := func(text string) float64 {
		v, err := strconv.ParseFloat(text, 64)
		if err != nil {
			return math.NaN()
		}
		return v
	}
	text := strconv.FormatFloat(z, 'f', decimals, 64)
	sign := ""
	if strings.HasPrefix(text, "-") {
		sign, text = "-", text[1:]
	}
	whole, _, _ := strings.Cut(text, ".")
	digits := strings.ReplaceAll(text, ".", "")
	put := func(d string) string { // the point back in
		if decimals == 0 {
			return sign + d
		}
		return sign + d[:len(d)-decimals] + "." + d[len(d)-decimals:]
	}
	for i := range len(digits) - 1 {
		if digits[i] != digits[i+1] {
			would := put(digits[:i] + digits[i+1:i+2] + digits[i:i+1] + digits[i+2:])
			try(number(would), "two digits swapped: %s", would)
		}
	}
	for i := range len(whole) + 1 {
		for d := byte('0'); d <= '9'; d++ {
			if i == 0 && d == '0' || i == 1 && text[0] == '0' {
				continue // nobody writes 01.2 for 1.2
			}
			would := sign + text[:i] + string(d) + text[i:]
			try(number(would), "a digit dropped: %s", would)
		}
	}
	for i := range len(whole) {
		if would := sign + text[:i] + text[i+1:]; len(whole) > 1 {
			try(number(would), "a digit too many: %s", would)
		}
	}
	try(-z, "the sign")
	for _, power := range []float64{10, 100, 1000} {
		try(z*power, "the point moved: times %v", power)
		try(z/power, "the point moved: by %v", power)
	}
	try(z*0.3048, "feet for metres")
	try(z/0.3048, "metres for feet")
	section := RodSections[0] // the one that comes nearest
	for _, s := range RodSections {
		if off := math.Abs(z - expected); math.Abs(off-s) < math.Abs(off-section) {
			section = s
		}
	}
	try(z-section, "a rod %v longer than noted", section)
	try(z+section, "a rod %v shorter than noted", section)
	for i := range digits {
		for d := byte('0'); d <= '9'; d++ {
			would := put(digits[:i] + string(d) + digits[i+1:])
			try(number(would), "one digit wrong: %s", would)
		}
	}
	return found
}
