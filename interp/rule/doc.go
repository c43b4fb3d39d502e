// Package rule estimates volumes from a few areas or heights by the rules of the
// trade: average end areas, the prismoidal rule, cones, four corners.
//
// They are approximations, each exact for some shapes only; package overlay has the
// integrals of a triangulated surface. They are here to be put beside those, and to
// check tables that were made by hand.
//
//	rule.AverageEndArea([]float64{0, 30}, []float64{100, 0}) // 1500; a pyramid has 1000
//	rule.Conic([]float64{0, 30}, []float64{100, 0})          // 1000
//	rule.Prismoidal([]float64{0, 15, 30}, []float64{100, 25, 0}) // 1000
//
// Areas are of sections at stations along a line, or of contours at levels. Units are
// those of the stations times those of the areas. All sums are exact and rounded once.
package rule
