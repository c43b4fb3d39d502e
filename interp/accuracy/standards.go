package accuracy

import "math"

// Factors of the standards, as they are printed there.
const (
	// Factor95 is how many root mean square errors of one axis hold 95 % of normal
	// errors (NSSDA).
	Factor95 = 1.9600
	// Factor95Circular is the same in the plane, of the radial error, where the two
	// axes are alike (NSSDA).
	Factor95Circular = 1.7308
	// FactorCircularAxis is the same in the plane, of the mean of the two axes'
	// errors, where they are not quite alike (NSSDA, appendix 3-D).
	FactorCircularAxis = 2.4477
)

// The fewest checkpoints that the standards ask for.
const (
	LeastNSSDA = 20
	Least2023  = 30
	Most2023   = 120 // more are never asked
)

// NSSDAVertical returns the vertical accuracy at 95 % that the NSSDA reports.
func NSSDAVertical(rmse float64) float64 { return float64(Factor95 * rmse) }

// Radial returns the root mean square error in the plane of those along x and y.
func Radial(rmseX, rmseY float64) float64 {
	return math.Sqrt(float64(rmseX*rmseX) + float64(rmseY*rmseY))
}

// NSSDAHorizontal returns the horizontal accuracy at 95 % that the NSSDA reports.
// alike is false where the smaller error is less than 0.6 of the larger, for which
// the standard has no formula; the result is the one for alike axes all the same.
//
// For errors not quite alike the standard allows 2.4477 x 0.5 x (x + y) as an
// approximation; like the example of the ASPRS standard of 2014, this takes 1.7308 x
// radial error for both.
func NSSDAHorizontal(rmseX, rmseY float64) (accuracy float64, alike bool) {
	lo, hi := min(rmseX, rmseY), max(rmseX, rmseY)
	return float64(Factor95Circular * Radial(rmseX, rmseY)), lo >= float64(0.6*hi)
}

// Combined returns the root mean square error of a product whose fit to checkpoints
// is fit, the checkpoints themselves having the error own: what the ASPRS edition of
// 2023 reports. An own of 0 is for checkpoints without error.
func Combined(fit, own float64) float64 {
	return math.Sqrt(float64(fit*fit) + float64(own*own))
}

// Interval1990 returns the smallest contour interval that a vertical error supports
// by the ASPRS standard for large-scale maps of 1990, class 1: three times the error.
func Interval1990(rmse float64) float64 { return float64(3 * rmse) }

// IntervalNMAS returns the smallest contour interval that a vertical error supports
// by the National Map Accuracy Standards of 1947: 90 % of normal errors within half
// an interval.
func IntervalNMAS(rmse float64) float64 { return float64(3.2898 * rmse) }

// Usual returns the smallest of the intervals in use (1, 2 or 5 times a power of
// ten) that is not below the given one; NaN for one that is not above zero.
func Usual(interval float64) float64 {
	if !(interval > 0) || math.IsInf(interval, 0) {
		return math.NaN()
	}
	// Powers of ten up to 22 are exact, and so are their multiples; a quotient by
	// one is the nearest double to the decimal.
	for power := 22; power >= -22; power-- {
		if low, _ := scaled(1, power); low > interval && power > -22 {
			continue
		}
		for _, step := range []float64{1, 2, 5, 10} {
			if v, ok := scaled(step, power); ok && v >= interval {
				return v
			}
		}
	}
	return math.NaN()
}

// scaled returns step times ten to the power, which is from -22 to 22.
func scaled(step float64, power int) (v float64, ok bool) {
	ten := 1.0
	for range max(power, -power) {
		ten *= 10
	}
	if power < 0 {
		return step / ten, true
	}
	return step * ten, true
}

// A Class is a vertical accuracy class of the ASPRS standard of 2014, named by its
// root mean square error, and its limits, all in the unit of the class.
type Class struct {
	RMSE float64
	// NonVegetated95 is the accuracy at 95 % on ground without vegetation,
	// Vegetated95 the 95th percentile on ground with it.
	NonVegetated95, Vegetated95 float64
	// WithinSwath is the most that repeated measurements within a swath may differ;
	// BetweenSwaths and BetweenSwathsMost are the root mean square difference
	// between neighbouring swaths and the most.
	WithinSwath, BetweenSwaths, BetweenSwathsMost float64
}

// Class2014 returns the class of a root mean square error.
func Class2014(rmse float64) Class {
	return Class{
		rmse, NSSDAVertical(rmse), float64(3 * rmse),
		float64(0.6 * rmse), float64(0.8 * rmse), float64(1.6 * rmse),
	}
}

// Asked2023 returns how many checkpoints the ASPRS edition of 2023 asks for in an
// area: 30 up to 1,000 square kilometres, ten more for each 1,000 begun, at most
// 120. From memory.
func Asked2023(squareKilometres float64) int {
	if !(squareKilometres > 1000) {
		return Least2023
	}
	if squareKilometres > 10000 {
		return Most2023
	}
	begun := int(math.Ceil((squareKilometres - 1000) / 1000))
	return min(Least2023+10*begun, Most2023)
}
