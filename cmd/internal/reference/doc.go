// Package reference proves the program against figures that were published, or
// computed by other means, before it. Every test builds the readings, runs
// isofacet as a user would, and compares what it writes:
//
//	franke_test.go       test functions on scattered nodes, one published table
//	statistics_test.go   errors over a fine lattice
//	datasets_test.go     open survey data: values, rasters, counts, areas, volumes
//	volcano_test.go      a whole lattice, every cell of which is a tie
//	volumes_test.go      solids with closed formulas, curved surfaces
//	surveying_test.go    single triangles
//	vectors_test.go      small cases with known answers
//	isolines_test.go     lengths and counts of lines, through triangles and squares
//	bands_test.go        areas between levels
//	lines_test.go        breaklines, boundaries and voids: solids, clips, bad rings
//	accuracy_test.go     readings held back, against the surface of the others
//	pit_test.go          the sample of a gravel pit with and without its lines
//
// The figures stand in testdata, whose README.md names their sources, and in the
// folder that ISOFACET_REFERENCE names: data that may not be kept here. Without
// the variable the tests that need it are skipped. Each test says how large an
// error it met, and what part that is of the error allowed:
//
//	ISOFACET_REFERENCE=... go test -v ./cmd/internal/reference
//
// Unless a test says otherwise, heights may be off by 1e-9 x (1 + range of the
// heights), areas, volumes and lengths by 1e-9 of themselves, and counts not at
// all. Most figures are exact to fewer digits than a double has; they were
// computed from the decimals of the readings, the program's from the doubles
// next to them.
//
// The package has no code of its own.
package reference
