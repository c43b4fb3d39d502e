// Package house holds tests of the repository as a whole: which package may
// import which, what the packages below io may not do, and how its files are
// shaped. It has no code of its own.
//
// The rules, and why each one is there:
//
//   - Arrows run one way: cmd -> io -> contour -> grid -> interp ->
//     triangulate -> triangulate/exact. Skipping a room is fine, going back is
//     not. samples imports nothing of ours. What stands in cmd/internal is for
//     programs alone.
//   - Below io nothing opens a file, reads the environment, prints or exits,
//     so that the packages can serve inside any other program.
//   - Below io only those functions of package math are called that return
//     the same bits on every processor: exact and correctly rounded ones.
//   - No processor may fuse a product into a sum: the compiler's output for
//     arm64, which fuses wherever the language lets it, holds no fused
//     instruction that a call of math.FMA did not ask for.
//   - io itself has no Go file, every package says what it is for in doc.go,
//     and no file is longer than 700 lines.
package house
