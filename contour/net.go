package contour

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"
)

// Bands are read off a net: all isolines of all levels and the outline, as paths between points in the plane that carry on
// them how the band changes from their right to their left. Steps, each in a file of its own:
//
//	net.go      collects the paths
//	boxes.go    keeps their segments in boxes within boxes
//	nodes.go    splits segments where others touch or cross them, which only rounding brings about
//	chains.go   cuts paths where they meet: chains between nodes
//	faces.go    goes round the faces between chains and tells the band of each
//	rings.go    makes polygons of the faces of a band
//
// By the edges that they pass, the paths meet nowhere but on the outline. So in coordinates they could be followed
// round as they are, but for two things. Where readings equal a level, points of paths coincide, and paths run to and
// fro on one segment. And points are rounded: in a triangle thinner than the step between doubles, or about a
// reading that is all but equal to a level, paths may cross by a step or two. Therefore nothing is
// assumed: segments that touch are found and split there, and what band a face has is counted across the
// paths, from the outside in. Every face gets one band, so bands neither overlap nor leave gaps, whatever rounding does.

// outside is the band where there is no surface. Band b >= 0 lies above b levels: from level b-1 to level b.
const outside = -1

// path is a way through points[first..last], with right of it and left of it the bands that the exact lines have
// there.
type path struct {
	first, last int32
	right, left int32
}

// net is the paths and their points.
type net struct {
	points []orb.Point
	paths  []path
	shifts []shift // by splitting, in order of segment
	moved  float64 // the most of all shifts
}

// pointsMost bounds the points of a net, so that they can be numbered with 32 bits.
const pointsMost = math.MaxInt32 / 2

// add adds a path. It returns an error if there are too many points.
func (n *net) add(points []orb.Point, right, left int) error {
	if len(n.points)+len(points) > pointsMost {
		return fmt.Errorf("bands with more than %d points: %w", pointsMost, ErrTooMany)
	}
	first := len(n.points)
	n.points = append(n.points, points...)
	n.paths = append(n.paths, path{int32(first), int32(len(n.points) - 1), int32(right), int32(left)})
	return nil
}

// addSide adds a side of the outline from a to b, the surface on its left: a segment for each band on the way.
// ra and rb are the bands at its ends, at(k) is where level k crosses it.
func (n *net) addSide(a, b orb.Point, ra, rb int, at func(k int) orb.Point) error {
	from := a
	step := func(to orb.Point, band int) error {
		if to == from {
			return nil
		}
		err := n.add([]orb.Point{from, to}, outside, band)
		from = to
		return err
	}
	for r := ra; r < rb; r++ { // rising: level r is crossed from band r to r+1
		if err := step(at(r), r); err != nil {
			return err
		}
	}
	for r := ra; r > rb; r-- {
		if err := step(at(r-1), r); err != nil {
			return err
		}
	}
	return step(b, rb)
}
