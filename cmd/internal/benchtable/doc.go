// Command benchtable turns the raw output of benchmarks into the tables of
// README.md and DEVELOPERS.md.
//
// In: every file .bench/raw-*.txt, as .ci/bench writes them: lines
// "# key: value" that say on what and how it was measured, then the unchanged
// output of go test -bench with several runs of each benchmark. Out: Markdown
// between the marks of the two pages. The raw output stays beside the tables,
// so that any figure can be looked up.
//
//	go run ./cmd/internal/benchtable -root .
//
// A benchmark is named Benchmark<Op>/<distribution>/n=<size>; other parts of
// the name are kept in the row's name. Figures are medians; the spread is half
// of the range of the runs, in percent of the median.
//
// go generate ./... runs it, and a test fails when a page is not current.
package main

//go:generate go run . -root ../../..
