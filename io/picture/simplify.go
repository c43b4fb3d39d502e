package picture

import "math"

// spot is a place on the paper in hundredths of a millimetre, x to the right and y down.
type spot struct{ x, y int32 }

// simplifyWithin is how far, in hundredths of a millimetre, what is drawn may lie from the line given: a tenth of a pixel is
// 2.6 (96 pixels an inch). Rounding to whole hundredths takes another 0.7.
const simplifyWithin = 1.5

// simplify appends to dst the places to draw of a line, in one pass.
//
// Places are left out as long as one segment from the last one kept passes all of them within the tolerance. The directions in
// which it may go form a wedge that each place narrows to those that touch a circle around it. A place outside the
// wedge, or nearer to where the segment begins than one before it, begins a new segment at the place before. So each place
// left out has its foot on the segment, within the tolerance.
//
//	          · · ·  o
//	     ·  o      ·  next: outside the wedge
//	kept ───────────── segment as it could go
//	     ·      o
//	        ·
//
// Source: the idea of intersecting tolerance cones is folklore (Sklansky and Gonzalez 1980, in another form); from memory.
func simplify(dst []spot, places [][2]float64) []spot {
	if len(places) == 0 {
		return dst
	}
	s := simplifier{anchor: places[0]}
	dst = appendSpot(dst, places[0])
	for i := 1; i < len(places); i++ {
		if !s.holds(places[i]) {
			dst = appendSpot(dst, places[i-1])
			s = simplifier{anchor: places[i-1]}
			s.holds(places[i])
		}
	}
	return appendSpot(dst, places[len(places)-1])
}

// appendSpot appends the place, rounded, unless it falls on the last one.
func appendSpot(dst []spot, p [2]float64) []spot {
	next := spot{hundredths(p[0]), hundredths(p[1])}
	if len(dst) > 0 && dst[len(dst)-1] == next {
		return dst
	}
	return append(dst, next)
}

type simplifier struct {
	anchor      [2]float64
	far         float64    // from the anchor to the farthest place so far
	wedge       bool       // there is one
	left, right [2]float64 // its sides, counter-clockwise and clockwise, in a frame with y up or down alike
}

// holds reports whether the segment may go on to p, and narrows the wedge by it.
func (s *simplifier) holds(p [2]float64) bool {
	x, y := p[0]-s.anchor[0], p[1]-s.anchor[1]
	d := length(x, y)
	if d < s.far {
		return false
	}
	if d <= simplifyWithin {
		s.far = d
		return true // any direction passes it
	}
	if s.wedge && (cross(s.right, [2]float64{x, y}) < 0 || cross([2]float64{x, y}, s.left) < 0) {
		return false
	}
	s.far = d
	// The tangents from the anchor to the circle around p: its direction turned by the angle whose sine is this.
	sine := simplifyWithin / d
	cosine := math.Sqrt(1 - float64(sine*sine))
	ux, uy := x/d, y/d
	left := [2]float64{float64(ux*cosine) - float64(uy*sine), float64(ux*sine) + float64(uy*cosine)}
	right := [2]float64{float64(ux*cosine) + float64(uy*sine), float64(uy*cosine) - float64(ux*sine)}
	if !s.wedge || cross(left, s.left) > 0 {
		s.left = left
	}
	if !s.wedge || cross(s.right, right) > 0 {
		s.right = right
	}
	s.wedge = true
	return true
}

func cross(a, b [2]float64) float64 { return float64(a[0]*b[1]) - float64(a[1]*b[0]) }
