package picture

import (
	"math"

	"isofacet/grid/decimal"
)

// Round numbers are 1, 2 or 5 times a power of ten, held as decimals, so that the ticks of a scale are exact and print short.

// roundUp returns the smallest round number that is not below v, and roundDown the largest that is not above it. v is above 0; what
// lies beyond 1e-80 or 1e80 becomes that.
func roundUp(v float64) decimal.Number {
	last := decimal.Number{Unscaled: 1, Scale: 80}
	for e := -80; e <= 80; e++ {
		for _, digit := range []int64{1, 2, 5} {
			last = decimal.Number{Unscaled: digit, Scale: int8(-e)}
			if last.Float64() >= v {
				return last
			}
		}
	}
	return last
}

func roundDown(v float64) decimal.Number {
	best := decimal.Number{Unscaled: 1, Scale: 80}
	for e := -80; e <= 80; e++ {
		for _, digit := range []int64{1, 2, 5} {
			next := decimal.Number{Unscaled: digit, Scale: int8(-e)}
			if next.Float64() > v {
				return best
			}
			best = next
		}
	}
	return best
}

// multiples returns the multiples of step from low to high, both included, or none if there are more than most.
func multiples(step decimal.Number, low, high float64, most int) []decimal.Number {
	from, err := decimal.FromFloat(low)
	if err != nil {
		return nil
	}
	k, _, err := from.CeilIndex(step)
	if err != nil {
		return nil
	}
	var all []decimal.Number
	for ; ; k++ {
		n, err := step.Times(k)
		if err != nil || n.Float64() > high {
			return all
		}
		if len(all) == most {
			return nil
		}
		all = append(all, n)
	}
}

// outward returns the multiples of step around the range from low to high.
func outward(step decimal.Number, low, high float64) (below, above float64) {
	multiple := func(v float64, round func(decimal.Number, decimal.Number) (decimal.Number, error)) float64 {
		n, err := decimal.FromFloat(v)
		if err != nil {
			return v
		}
		if n, err = round(n, step); err != nil {
			return v
		}
		return n.Float64()
	}
	return min(low, multiple(low, decimal.Number.FloorMultiple)), max(high, multiple(high, decimal.Number.CeilMultiple))
}

// isFinite: a difference with itself is 0 unless it is of NaN or infinities.
func isFinite(v float64) bool { return v-v == 0 }

// length is the root of x² + y². The products are pinned, so that no processor fuses them.
func length(x, y float64) float64 { return math.Sqrt(float64(x*x) + float64(y*y)) }
