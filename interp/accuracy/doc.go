// Package accuracy compares a surface with checkpoints: what the residuals come to,
// and what the standards of the trade make of them.
//
// In go residuals, a surface's values less the values that were measured
// independently at the same places; out come their statistics and the figures that
// a report states:
//
//	s := accuracy.Describe(residuals)
//	fmt.Println(s.RMSE, accuracy.NSSDAVertical(s.RMSE), accuracy.Interval1990(s.RMSE))
//
// # Conventions
//
// A residual is surface minus checkpoint: positive where the surface is too high.
// Everything has the unit of the residuals, but for skewness and kurtosis, which
// have none. A figure that the number of residuals does not allow (a standard
// deviation of one, the skewness of two or of equal ones) is NaN.
//
// Sums are exact and rounded once, and only square roots of package math are used:
// a figure does not depend on the order of the residuals, nor on the processor.
// That is why they are summed here and not by gonum/stat, which sums in order; a
// test holds the two together.
//
// # What the figures are taken from
//
// FGDC-STD-007.3-1998, National Standard for Spatial Data Accuracy (NSSDA): the
// factors 1.9600 and 1.7308, at least 20 checkpoints, a fifth of them in each
// quadrant and a tenth of the diagonal apart were seen in a public paraphrase of
// the whole standard; its text itself was not.
//
// ASPRS Positional Accuracy Standards for Digital Geospatial Data, edition 1 (2014):
// the classes and their limits are from memory; the worked example of its annex D
// is reproduced by a test. Edition 2 (2023): that it drops the figure at 95 %,
// asks for 30 checkpoints rather than 20 (120 at most), counts the checkpoints' own
// error and takes pass or fail from vegetated ground was seen in secondary sources;
// the table of counts by area and the wording are from memory.
//
// National Map Accuracy Standards (1947) and the ASPRS standard for large-scale
// maps (1990), for intervals: from memory.
//
// # Cost
//
// Describe sorts the residuals: n log n, and 8n bytes.
package accuracy
