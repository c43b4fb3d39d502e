package exact

// InCircleTied is InCircle with ties settled by coordinates: +1 if d counts as
// inside the circle through a, b, c, else -1. It needs a, b, c counter-clockwise
// and not collinear, and d different from all three; then it is never 0. (Called
// with less it may return 0.)
//
// The answers are those for points lifted to x²+y² plus an infinitesimal that is
// larger the later a point comes in (x, y) order, each infinitely larger than the
// one before. The determinant is linear in the lifts. If its own value is zero,
// the largest infinitesimal decides, with the cofactor of its row: twice the area
// of the three other points with the sign of the row.
//
//	last is a: + orient(b, c, d)      last is b: - orient(a, c, d)
//	last is c: + orient(a, b, d)      last is d: - orient(a, b, c) = -1
//
// Three of four different cocircular points are not collinear, so the cofactor is
// not zero. The result depends on the four positions only, not on the order of
// a, b, c, nor on how the points were stored: a set has one Delaunay
// triangulation. On a lattice all diagonals run along (1, -1).
//
// Source: Edelsbrunner and Mücke 1990 for the idea, Devillers and Teillaud 2011
// for perturbing the lift only.
func InCircleTied(a, b, c, d [2]float64) int {
	return InCircleTiedXY(a[0], a[1], b[0], b[1], c[0], c[1], d[0], d[1])
}

// InCircleTiedXY is InCircleTied on loose coordinates, which travel in registers:
// arrays go through memory, which costs more than the filter.
func InCircleTiedXY(ax, ay, bx, by, cx, cy, dx, dy float64) int {
	if s := InCircleXY(ax, ay, bx, by, cx, cy, dx, dy); s != 0 {
		return s
	}
	return tie([2]float64{ax, ay}, [2]float64{bx, by}, [2]float64{cx, cy}, [2]float64{dx, dy})
}

//go:noinline
func tie(a, b, c, d [2]float64) int {
	latest, last := a, byte('a')
	if CompareXY(b, latest) > 0 {
		latest, last = b, 'b'
	}
	if CompareXY(c, latest) > 0 {
		latest, last = c, 'c'
	}
	if CompareXY(d, latest) > 0 {
		return -Orient(a, b, c)
	}
	switch last {
	case 'a':
		return Orient(b, c, d)
	case 'b':
		return -Orient(a, c, d)
	}
	return Orient(a, b, d)
}
