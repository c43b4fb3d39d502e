package gen

// plane is z = a*u + b*v + c with the name of what it stands for: "floor",
// "upper face" and so on.
type plane struct {
	a, b, c float64
	name    string
}

func (p plane) z(u, v float64) float64 {
	return float64(p.a*u) + float64(p.b*v) + p.c
}

// level returns a horizontal plane.
func level(z float64, name string) plane { return plane{0, 0, z, name} }

// side is the signed distance n·p - c to a straight side with the unit normal
// n: negative on the inner side, as p moves outward it grows.
type side struct{ nu, nv, c float64 }

// rising returns the plane that has height z at distance d from the side and
// climbs outward by slope (rise over run).
func (s side) rising(z, d, slope float64, name string) plane {
	return plane{float64(slope * s.nu), float64(slope * s.nv), z - float64(slope*(s.c+d)), name}
}

// surface is an expression of planes: a plane, the lower, or the higher of
// two surfaces. Where both are equally high the first one is named.
type surface interface {
	top(u, v float64) plane // the plane that rules at (u, v)
	split(ring polygon) []piece
}

func (p plane) top(u, v float64) plane { return p }

type lowerOf struct{ a, b surface }

func (s lowerOf) top(u, v float64) plane {
	a, b := s.a.top(u, v), s.b.top(u, v)
	if b.z(u, v) < a.z(u, v) {
		return b
	}
	return a
}

type higherOf struct{ a, b surface }

func (s higherOf) top(u, v float64) plane {
	a, b := s.a.top(u, v), s.b.top(u, v)
	if b.z(u, v) > a.z(u, v) {
		return b
	}
	return a
}

// highest joins any number of planes: of the sides of a hollow, the highest
// rules.
func highest(planes []plane) surface {
	var s surface = planes[0]
	for _, p := range planes[1:] {
		s = higherOf{s, p}
	}
	return s
}
