package readings

import "sort"

// Subset returns the used readings with the given numbers, in rising order, with
// other values: z[k] for reading keep[k], written with decimals digits. What was
// merged, left out and refused stays behind.
func (s *Set) Subset(keep []int, z []float64, decimals int) *Set {
	sub := &Set{
		Layouts: s.Layouts, DecimalsXY: s.DecimalsXY, DecimalsZ: decimals,
		Counts: Counts{Read: len(keep), Used: len(keep)},
	}
	for k, i := range keep {
		sub.Points = append(sub.Points, s.Points[i])
		sub.Z = append(sub.Z, z[k])
		sub.Lines = append(sub.Lines, s.Lines[i])
		for slot := range s.texts {
			if s.texts[slot].len() > 0 {
				from, to := s.texts[slot].bounds(i)
				sub.texts[slot].add(s.texts[slot].data[from:to])
			}
		}
	}
	for _, start := range s.fileStart {
		sub.fileStart = append(sub.fileStart, sort.SearchInts(keep, start))
	}
	return sub
}

// Difference returns a minus b as their decimals have it, so that 10.1 - 10.4 is
// -0.3 and not the -0.3000000000000007 of the doubles: numbers that were written
// with at most so many decimals.
func Difference(a, b float64, decimals int) float64 {
	return asWritten(a-b, decimals) + 0
}
