// Package numtext turns doubles into text and back, as every text format here does it.
//
// In: a double, and how many decimals to write. Out: bytes appended to a buffer of the caller; and the way back.
//
//	dst = numtext.Append(dst, 431.70500000000004, 3)  // 431.705
//	dst = numtext.Append(dst, 431.70500000000004, -1) // 431.70500000000004, the shortest text that reads back
//	v, ok := numtext.Parse([]byte("431.705"))
//
// # Conventions
//
// A point, no digit groups, no plus sign. Zero has no sign: neither the negative zero nor a small negative number that rounds to
// zero prints as "-0.00". NaN and infinities are not numbers in text: Append panics on them, because each
// format has its own mark for no data, and Parse refuses their names.
//
// # Guarantees
//
// With decimals the text is the double's exact value rounded to nearest (ties to even), the same bytes as the standard library's;
// without, it is the shortest text that Parse turns into the same double. Parse rounds the decimal once, to nearest, ties to
// even, as the standard library's parser does. Each has a test that compares the two on random numbers.
//
// # Cost
//
// With decimals some 10 ns, where the value times 10^decimals stays below 2^51; else the standard library's 50 to 150 ns.
// Parse takes 5 to 10 ns for up to 15 digits. Nothing is allocated.
//
// Source of the exact paths: Clinger 1990 (reading); the bound in the comment of fixed (writing).
package numtext
