// Package progress shows on a terminal how far a stage of work has come.
//
// A program makes one Display, and one stage after another reports its numbers
// to it:
//
//	display := progress.New(os.Stderr, progress.Shown(progress.Auto, os.Stderr))
//	report, finish := display.Stage("triangulating")
//	mesh, err := triangulate.Delaunay(ctx, points, triangulate.Options{Progress: report})
//	finish()
//	display.Close()
//
// # Guarantees
//
// A display that is not shown writes nothing at all, so a pipe, a log file or a
// scheduler's mail holds only words. A shown one stays quiet for the first
// moments: short work draws no bar. Text written through the display is written
// before Write returns, whatever is drawn.
//
// # Cost
//
// A report that changes less than a batch of 4096 since the one before costs one
// atomic load; only others reach the bar (about 400 ns each). Reports may come
// from several goroutines.
package progress
