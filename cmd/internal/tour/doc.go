// Package tour checks that the README tells the truth: the commands of its
// console blocks are run in an empty folder, one after the other, and must
// print what the page shows; its Go programs are compiled, run, and must print
// what their Output comment says; the main command and the test command are
// where the continuous integration finds them.
//
//	go test ./cmd/internal/tour           # compare
//	go test ./cmd/internal/tour -update   # write what the program prints now
//
// The difference that -update makes is to be read before it is committed. The
// package has no code of its own.
package tour
