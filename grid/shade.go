package grid

import "math"

// How a shaded raster is lit: from the north-west and 45 degrees above the ground, as maps have it that are looked at
// from the south (common practice); people then see hills as hills. The light is the unit vector towards its source,
//
//	east -sin 45° cos 45°, north cos 45° cos 45°, up sin 45°
const (
	lightEast  = -0.5
	lightNorth = 0.5
	lightUp    = math.Sqrt2 / 2
)

// shade returns the share of the light from the north-west that a plane with the gradient (dzdx, dzdy) is struck by:
// the cosine of the angle between the light and the plane's normal, 0 where the plane faces away (Lambert 1760). A
// level plane has sqrt(1/2). The relative error is below 2^-48, but for what cancels near 0.
//
// The normal is (-dzdx, -dzdy, up), up being 1. Only a square root and pinned products: the bits are the same everywhere.
func shade(dzdx, dzdy float64) float64 {
	up := 1.0
	if size := max(math.Abs(dzdx), math.Abs(dzdy)); size > steep {
		dzdx, dzdy, up = dzdx/size, dzdy/size, 0
	}
	length := math.Sqrt(float64(dzdx*dzdx) + float64(dzdy*dzdy) + up)
	return max(0, (float64(-lightEast*dzdx)-float64(lightNorth*dzdy)+float64(up*lightUp))/length)
}

// steep is a slope beside which the 1 of a normal counts for nothing, and whose square is far from overflowing.
const steep = 0x1p100
