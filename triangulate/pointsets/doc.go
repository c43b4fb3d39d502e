// Package pointsets makes the point distributions that the tests and
// benchmarks of this module share. It is not meant for production use.
//
// In: how many points, and a seed. Out: that many positions, always the same
// ones for the same two numbers, on every processor: the generator is our own
// (SplitMix64) and of package math only Sqrt is used, so that a test may
// compare the bytes of products made on different machines.
//
//	pts := pointsets.Survey(1_000_000, 1)
//	for _, d := range pointsets.All {
//		b.Run(d.Name+"/"+pointsets.SizeName(n), func(b *testing.B) {
//			pts := d.Points(n, 1)
//			...
//		})
//	}
//
// Conventions: x east, y north. Sets that stand for decimal readings (Survey,
// ScanLines, Lattice01) hold the double nearest to the decimal number, as a
// reader of the written text would get it.
//
// Guaranteed: exactly n points, finite. Distinct only where the comment says
// so. Cost: O(n) time, 16 bytes a point.
//
// Sources: S. Vigna's public-domain SplitMix64 (after Steele, Lea, Flood,
// "Fast splittable pseudorandom number generators", OOPSLA 2014); Kuzmin's
// disc as a test of strong clustering follows common practice in the
// literature on parallel triangulation.
package pointsets
