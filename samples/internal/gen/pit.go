package gen

import "math"

// The gravel pit, in metres from the site's corner. Every number here is
// invented. The truth about the site: where it lies, and how high it is.
const (
	originEast  = 431_200.0
	originNorth = 5_621_400.0
	siteEast    = 420.0 // extent of the survey
	siteNorth   = 340.0

	faceSlope = 1 / 1.5 // rise over run of pit faces, fills and the stockpile

	benchLevel  = 208.5
	waterLevel  = 202.1
	benchWidth  = 6.0
	lowerFace   = 8.25 // run of the lower face, floor to bench
	rampWidth   = 8.0
	rampGrade   = 0.10
	rampTop     = 215.0 // height of the ramp where it leaves the pit
	rampTopRun  = -79.5 // and how far along the pit's axis that is
	rampOffset  = -20.0 // of the ramp's axis from the pit's
	pitEast     = 170.0
	pitNorth    = 170.0
	pileEast    = 345.0
	pileNorth   = 95.0
	pileHeight  = 12.0  // of the whole cone over the ground below its tip
	pileCut     = 2.0   // what is missing of the cone at the top
	cornerLevel = 214.0 // the untouched ground at the south-western corner
)

// The pit's axes: east and north turned by the angle of a 7-24-25 triangle.
const axisU, axisV = 24.0 / 25, 7.0 / 25

// ground is the land before anything was dug or heaped up.
var ground = plane{0.020, -0.012, cornerLevel, "ground"}

// onAxis turns (along, across) the pit's axis into a place.
func onAxis(along, across float64) place {
	return place{
		pitEast + float64(axisU*along) - float64(axisV*across),
		pitNorth + float64(axisV*along) + float64(axisU*across),
	}
}

// axisSide returns the side with normal (na, nx) in the pit's axes at
// distance c from the pit's centre.
func axisSide(na, nx, c float64) side {
	nu := float64(axisU*na) - float64(axisV*nx)
	nv := float64(axisV*na) + float64(axisU*nx)
	return side{nu, nv, c + float64(nu*pitEast) + float64(nv*pitNorth)}
}

// floorSides bound the pit's floor: a rectangle with three corners cut off.
var floorSides = []side{
	axisSide(1, 0, 55), axisSide(0, 1, 38), axisSide(-1, 0, 55), axisSide(0, -1, 38),
	axisSide(0.8, 0.6, 58), axisSide(-0.8, 0.6, 60), axisSide(-0.6, -0.8, 56),
}

// pondSides bound the water.
func pondSides() []side {
	c := onAxis(35, 22)
	var sides []side
	for _, n := range [][2]float64{{1, 0}, {0.6, 0.8}, {0, 1}, {-0.8, 0.6}, {-1, 0}, {-0.6, -0.8}, {0, -1}, {0.8, -0.6}} {
		sides = append(sides, side{n[0], n[1], 8 + float64(n[0]*c.u) + float64(n[1]*c.v)})
	}
	return sides
}

// pit is the ground with the excavation in it, without the stockpile:
//
//	             ground ____________
//	upper face        /
//	            _____/ bench
//	lower face /
//	     _____/ floor      ramp: a fill from the rim down to the floor
//	 \__/ sump with water
func pit() surface {
	var lower, upper []plane
	for _, s := range floorSides {
		lower = append(lower, s.rising(203, 0, faceSlope, "lower face"))
		upper = append(upper, s.rising(benchLevel, lowerFace+benchWidth, faceSlope, "upper face"))
	}
	floor := plane{-0.004, -0.003, 203 + 0.004*pitEast + 0.003*pitNorth, "floor"}
	hollow := higherOf{lowerOf{higherOf{floor, highest(lower)}, level(benchLevel, "bench")}, highest(upper)}

	// The ramp falls along the axis; beyond its edges the fill falls at the
	// slope of the faces as well.
	along, across := axisSide(1, 0, rampTopRun), axisSide(0, 1, rampOffset)
	top := along.rising(rampTop, 0, -rampGrade, "ramp")
	left := across.rising(0, rampWidth/2, -faceSlope, "")
	right := side{-across.nu, -across.nv, -across.c}.rising(0, rampWidth/2, -faceSlope, "")
	add := func(p plane) plane { return plane{top.a + p.a, top.b + p.b, top.c + p.c, "ramp side"} }
	fill := lowerOf{lowerOf{top, add(left)}, add(right)}

	var banks []plane
	for _, s := range pondSides() {
		banks = append(banks, s.rising(waterLevel, 0, 0.5, "bank"))
	}
	sump := higherOf{level(waterLevel, "water"), highest(banks)}

	return lowerOf{lowerOf{ground, higherOf{hollow, fill}}, sump}
}

// pitPieces are the flat pieces of the whole site.
func pitPieces() []piece {
	return pit().split(polygon{{0, 0}, {siteEast, 0}, {siteEast, siteNorth}, {0, siteNorth}})
}

// The stockpile: a cone of slope faceSlope, its tip cut off level.
func pileTip() float64 { return ground.z(pileEast, pileNorth) + pileHeight }
func pileTop() float64 { return pileTip() - pileCut }

// pileZ is the height of the stockpile's body, which is below the ground away
// from the pile.
func pileZ(u, v float64) float64 {
	r := distance(place{u, v}, place{pileEast, pileNorth})
	return min(pileTop(), pileTip()-float64(faceSlope*r))
}

// siteZ returns the height of the finished site and the name of the ground.
func siteZ(s surface, u, v float64) (float64, string) {
	p := s.top(u, v)
	z, name := p.z(u, v), p.name
	if h := pileZ(u, v); h > z {
		z, name = h, "stockpile"
		if h == pileTop() {
			name = "stockpile top"
		}
	}
	return z, name
}

// pileVolume is the volume of the truncated cone over the sloping ground.
//
// Over a plane of slope m, a cone of slope k and height H above the plane at
// its axis covers r < H/(k + m cos t) and holds, integrated over t,
// pi H^3 k / (3 (k^2 - m^2)^(3/2)); the tip cut off level is the case m = 0.
func pileVolume() float64 {
	k, m := faceSlope, math.Sqrt(float64(ground.a*ground.a)+float64(ground.b*ground.b))
	w := float64(k*k) - float64(m*m)
	whole := math.Pi * pileHeight * pileHeight * pileHeight * k / (3 * w * math.Sqrt(w))
	tip := math.Pi * pileCut * pileCut * pileCut / (3 * k * k)
	return whole - tip
}

// pileArea is the plan area of the stockpile's base: pi H^2 k / (k^2 - m^2)^(3/2),
// an ellipse.
func pileArea() float64 {
	k, m := faceSlope, math.Sqrt(float64(ground.a*ground.a)+float64(ground.b*ground.b))
	w := float64(k*k) - float64(m*m)
	return math.Pi * pileHeight * pileHeight * k / (w * math.Sqrt(w))
}
