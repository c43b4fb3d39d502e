// Package localgrid leads places from one plane grid to another by pairs of places
// that are known in both: from a site's own grid to the national one, or back.
//
//	pairs, err := localgrid.ReadPairs(src)
//	fit, err := localgrid.Make(pairs, localgrid.Similarity)
//	p := fit.Transform.Of(orb.Point{1000, 2000})
//
// # Models
//
// A similarity turns, shifts and scales by one factor, as a combined factor does; an
// affine map may also stretch and skew. Both are the least-squares solutions in the
// target grid, of the centred normal equations.
//
// # Guarantees
//
// The parameters are worked out in rational numbers from the coordinates as read and
// rounded once: no condition number, no dependence on the order of the pairs or on
// the processor. A place is led across with an error of a few units in the last place
// of its coordinates.
//
// Two pairs settle a similarity, and three an affine map, without any check: Fit.Spare
// tells. Heights are not touched. Datums are not shifted: this is a fit between plane
// grids over a site, not a transformation of reference frames.
package localgrid
