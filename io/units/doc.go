// Package units converts lengths between metres and the two feet.
//
//	c, err := units.Between(units.FootUS, units.Metre)
//	c.Of(2_000_000) // 609601.2192024384
//
// # Definitions
//
// The international foot is 0.3048 m exactly. The US survey foot is 1200/3937 m
// exactly; it was withdrawn at the end of 2022 (85 FR 62698, 5 October 2020) and
// lives on in coordinates of the state plane systems of 1927 and 1983. The two differ
// by 2 parts in a million: 4 feet at 2,000,000 feet. Nothing here is called "ft".
//
// # Guarantees
//
// A conversion multiplies by a ratio of two whole numbers, in integers, and rounds
// once: the result is the double nearest to the exact product of the double given,
// ties to even. It is the same on every processor.
//
// # Cost
//
// A multiplication and a division of integers, some 10 ns.
package units
