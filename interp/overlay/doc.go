// Package overlay lays one triangulated surface over another: what lies between
// them, taken away and brought in apart, as exact integrals of the planes.
//
// In go two surfaces (package interp), from and to, in the same units. Out come
// volumes and areas of the part of the plane that both cover:
//
//	f, err := overlay.Between(ctx, before, after, overlay.Options{})
//	if err != nil {
//		return err // ctx ended
//	}
//	fmt.Println(f.Cut.Volume, f.Fill.Volume, f.Net, f.Cut.Area, f.Area())
//
// # Conventions
//
// The difference is to minus from. Where it is negative material is taken away to
// get from the one to the other: cut. Where it is positive material is brought in:
// fill. Where it is 0 over some width the surfaces are the same. Volumes and areas
// are positive; Net is fill less cut.
//
// # What is guaranteed
//
//   - Which triangles meet, and in which polygon, is decided by exact signs of the
//     vertices as they are; no point that was computed decides anything.
//   - On each polygon the difference is linear; it is split at its zero line. Terms
//     of one sign are multiplied and added, so cut and fill each have a small error
//     of their own. Together they are off by a small multiple of 2^-53 of the
//     integral of |difference|; tests hold 1e-11 of it against rational arithmetic.
//   - Two surfaces that have a triangle in common have a difference of exactly 0
//     there.
//   - The result is a function of the two surfaces: neither the numbering of their
//     triangles nor the number of workers shows. Surfaces that change places have
//     cut and fill change places, bit for bit.
//
// Triangles that a mesh hides are no part of its surface.
//
// # Method
//
// The edges of the one surface are walked straight through the other. A triangle whose
// corners lie inside triangles of the other, with no vertex on the lines of its edges,
// has its pieces traced: from each crossing along its rim to the next, and inside along
// the edges crossed.
//
// Any other triangle gathers the triangles of the other that it meets: beginning where
// one of its corners lies it goes over edges that meet it. The signs of all corners of
// two triangles with respect to each other's edges say what polygon they have in common.
//
// Both ways make the same numbers, bit for bit. A crossing of two edges is computed
// from the four ends in (x, y) order, whichever triangle asks, its height on each edge
// from that edge's ends. A polygon's terms are computed relative to its smallest point
// and added exactly (exact.Tally).
//
// Time O(triangles + crossings of edges), shared out to all cores. Where one
// surface reaches beyond the other's hull, O(edges of one hull x edges of the
// other) at worst on top, each a few nanoseconds.
package overlay
