package picture

import (
	"github.com/paulmach/orb"

	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// frame is the rectangle of ground that a picture shows, and where it lies on the paper.
type frame struct {
	ground        orb.Bound
	left, top     float64 // mm on the paper
	width, height float64
	perMM         float64 // ground a millimetre
}

// newFrame rounds the extent outward, so that the corners have short coordinates, and fits it into a rectangle of paper.
func newFrame(extent orb.Bound, widthMost, heightMost float64) frame {
	w, h := extent.Max[0]-extent.Min[0], extent.Max[1]-extent.Min[1]
	size := max(w, h)
	if !(size > 0) { // a single place: show some ground around it
		size, w, h = 1, 1, 1
		extent.Min[0], extent.Min[1] = extent.Min[0]-0.5, extent.Min[1]-0.5
		extent.Max[0], extent.Max[1] = extent.Max[0]+0.5, extent.Max[1]+0.5
	}
	// No side shorter than an eighth of the other, so that there is something to see of a single line.
	padX, padY := float64(max(0, float64(size/8)-w)/2)+float64(size/80), float64(max(0, float64(size/8)-h)/2)+float64(size/80)
	step := roundUp(size / 100)
	f := frame{}
	f.ground.Min[0], f.ground.Max[0] = outward(step, extent.Min[0]-padX, extent.Max[0]+padX)
	f.ground.Min[1], f.ground.Max[1] = outward(step, extent.Min[1]-padY, extent.Max[1]+padY)
	w, h = f.ground.Max[0]-f.ground.Min[0], f.ground.Max[1]-f.ground.Min[1]
	f.perMM = max(w/widthMost, h/heightMost)
	f.width, f.height = w/f.perMM, h/f.perMM
	return f
}

// place returns where a position lies on the paper, in hundredths of a millimetre.
func (f *frame) place(p orb.Point) [2]float64 {
	return [2]float64{
		float64(100*f.left) + float64(100*((p[0]-f.ground.Min[0])/f.perMM)),
		float64(100*f.top) + float64(100*((f.ground.Max[1]-p[1])/f.perMM)),
	}
}

// corners returns what stands beside the lower left and the upper right corner.
func corners(b orb.Bound) (lowerLeft, upperRight string) {
	text := func(p orb.Point) string {
		t := append([]byte("x "), numtext.Append(nil, p[0], numtext.Shortest)...)
		return string(numtext.Append(append(t, ", y "...), p[1], numtext.Shortest))
	}
	return text(b.Min), text(b.Max)
}

// scaleBar returns a round length of ground that takes at most most on the picture, with perUnit ground a unit of it.
func scaleBar(most, perUnit float64) (ground decimal.Number, length float64) {
	ground = roundDown(float64(most * perUnit))
	return ground, ground.Float64() / perUnit
}
