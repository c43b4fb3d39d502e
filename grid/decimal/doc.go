// Package decimal holds the decimal numbers that a lattice and a set of levels are made of.
//
// In: text such as "0.1", or a double taken as the shortest decimal that reads back to it.
// Out: a Number (an int64 and a power of ten) that can be compared, added and multiplied by whole numbers
// exactly, and turned into a double with one rounding.
//
//	step, err := decimal.Parse("0.1")
//	if err != nil {
//		return err
//	}
//	third, err := step.Times(3)       // exactly 3/10
//	fmt.Println(third)                // 0.3
//	fmt.Println(third.Float64())      // 0.3, where 0.1+0.1+0.1 and 3*0.1 in doubles give 0.30000000000000004
//	below, above, err := decimal.MustParse("431.7").Around(decimal.MustParse("0.5"))
//	fmt.Println(below, above)         // 431.5 432
//
// # Conventions
//
// A cell, an origin, a contour interval are decimals because a person typed them. The k-th node or level is
// k times the step in integers, rounded once, so that it is the double nearest to what the person means,
// whatever k is and in whatever order they are computed.
//
// Every Number that this package returns is in its one normal form: no factor of ten left in Unscaled, and
// Scale 0 for zero. Two returned Numbers are equal exactly if == says so. Numbers put together by hand are
// accepted in any form.
//
// # Guarantees
//
// Nothing here rounds, except Float64, which rounds once, to nearest, ties to even. What cannot be held
// (about 18 digits, and powers of ten beyond MaxScale) is an error wrapping ErrRange, never a wrapped integer.
// Parse neither panics nor allocates in proportion to an exponent, whatever the text.
//
// # Cost
//
// Float64 is one division by an exact power of ten while Unscaled is below 2^53 and Scale within 22; otherwise
// it goes through the standard library's correctly rounding parser (some 100 ns). Add, Sub, Times and Cmp are a few
// integer operations with a 128-bit intermediate. FloorMultiple and its kin use math/big when the two numbers
// are far apart.
package decimal
