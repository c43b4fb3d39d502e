package accuracy

import (
	"math"
	"slices"

	"isofacet/triangulate/exact"
)

// Statistics describe residuals.
type Statistics struct {
	Count    int
	Mean     float64
	Median   float64 // of an even number the mean of the two in the middle
	StdDev   float64 // with n-1
	RMSE     float64
	MeanSize float64 // of the residuals without their signs
	Min, Max float64

	// Skewness and ExcessKurtosis are those of the population, g1 and g2: moments
	// divided by n. A normal distribution has 0 and 0.
	Skewness, ExcessKurtosis float64
	// SampleSkewness and SampleExcessKurtosis are adjusted for the bias of a
	// sample, G1 and G2.
	SampleSkewness, SampleExcessKurtosis float64

	// Percentile95 is the 95th percentile of the residuals without their signs.
	Percentile95 float64
}

// Describe returns the statistics of residuals, in any order. Of none, every figure
// but the count is NaN.
func Describe(residuals []float64) Statistics {
	n := len(residuals)
	nan := math.NaN()
	s := Statistics{n, nan, nan, nan, nan, nan, nan, nan, nan, nan, nan, nan, nan}
	if n == 0 {
		return s
	}
	sorted := slices.Sorted(slices.Values(residuals))
	s.Min, s.Max = sorted[0], sorted[n-1]
	s.Median = Percentile(sorted, 0.5)
	sizes := make([]float64, n)
	var sum, squares, size exact.Sum
	for i, r := range sorted {
		sizes[i] = math.Abs(r)
		sum.Add(r)
		squares.AddProduct(r, r)
		size.Add(sizes[i])
	}
	slices.Sort(sizes)
	s.Percentile95 = Percentile(sizes, 0.95)
	s.Mean, s.RMSE, s.MeanSize = sum.Mean(n), math.Sqrt(squares.Mean(n)), size.Mean(n)
	s.shape(sorted)
	return s
}

// shape fills in what is measured from the mean. A spread that is nothing but the
// rounding of the mean is none: residuals that are all equal have no skewness.
func (s *Statistics) shape(sorted []float64) {
	n := float64(len(sorted))
	var second, third, fourth exact.Sum
	for _, r := range sorted {
		d := r - s.Mean
		dd := float64(d * d)
		second.AddProduct(d, d)
		third.AddProduct(dd, d)
		fourth.AddProduct(dd, dd)
	}
	if n > 1 {
		s.StdDev = math.Sqrt(second.Value() / (n - 1))
	}
	variance := second.Mean(len(sorted))
	if s.Min == s.Max || !(variance > 0) {
		return
	}
	if n > 2 {
		s.Skewness = third.Mean(len(sorted)) / float64(variance*math.Sqrt(variance))
		s.SampleSkewness = float64(s.Skewness*math.Sqrt(float64(n*(n-1)))) / (n - 2)
	}
	if n > 3 {
		s.ExcessKurtosis = fourth.Mean(len(sorted))/float64(variance*variance) - 3
		s.SampleExcessKurtosis = float64((n-1)/float64((n-2)*(n-3))) * (float64((n+1)*s.ExcessKurtosis) + 6)
	}
}

// Percentile returns the value below which a part p, from 0 to 1, of sorted values
// lies, in between by a straight line: at position (n-1) p, counted from 0, which is
// what spreadsheets do and what the 95th percentile of the ASPRS standard of 2014 is
// worked out by (from memory). gonum/stat has other definitions. Of no values it is NaN.
func Percentile(sorted []float64, p float64) float64 {
	n := len(sorted)
	if n == 0 {
		return math.NaN()
	}
	at := float64(float64(n-1) * p)
	k := int(math.Floor(at))
	if k >= n-1 {
		return sorted[n-1]
	}
	rest := at - math.Floor(at)
	return sorted[k] + float64(rest*(sorted[k+1]-sorted[k]))
}
