package flow

import (
	"math"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Gradient is the slope of a plane of heads with the covariance of its components.
type Gradient struct {
	DzDx, DzDy float64
	// VarX, VarY and Cov are the variances and the covariance of the two; NaN where
	// nothing is known about the uncertainty of heads.
	VarX, VarY, Cov float64
}

// Size returns the head lost per length downhill.
func (g Gradient) Size() float64 { return interp.Slope(g.DzDx, g.DzDy) }

// Azimuth returns the direction of flow in degrees clockwise from north; NaN on a
// level plane.
func (g Gradient) Azimuth() float64 { return interp.DownhillAzimuth(g.DzDx, g.DzDy) }

// SizeSigma returns the standard uncertainty of Size by the law of propagation (the
// delta method):
//
//	u² = (a² Var a + 2 a b Cov + b² Var b) / (a² + b²)
//
// It holds where the gradient is several times its uncertainty; NaN on a level plane.
func (g Gradient) SizeSigma() float64 {
	a, b := g.unit()
	v := float64(float64(a*a)*g.VarX) + float64(2*float64(float64(a*b)*g.Cov)) + float64(float64(b*b)*g.VarY)
	return math.Sqrt(max(v, 0))
}

// AzimuthSigma returns the standard uncertainty of Azimuth in degrees, as SizeSigma
// does:
//
//	u² = (b² Var a - 2 a b Cov + a² Var b) / (a² + b²)²  radians²
func (g Gradient) AzimuthSigma() float64 {
	a, b := g.unit()
	v := float64(float64(b*b)*g.VarX) - float64(2*float64(float64(a*b)*g.Cov)) + float64(float64(a*a)*g.VarY)
	return float64(math.Sqrt(max(v, 0)) / g.Size() * (180 / math.Pi))
}

func (g Gradient) unit() (a, b float64) {
	s := g.Size()
	return g.DzDx / s, g.DzDy / s
}

// scaled returns g with the covariance of unit heads times a variance.
func (g Gradient) scaled(variance float64) Gradient {
	g.VarX, g.VarY, g.Cov = g.VarX*variance, g.VarY*variance, g.Cov*variance
	return g
}

// OfTriangle returns the gradient of triangle t, the solution of its three wells,
// whose heads have the standard uncertainty sigma each; NaN if that is unknown.
//
// With the gradients c_i of the shape functions of the three corners, the gradient
// is the sum of z_i c_i and its covariance that of sigma² c_i c_iᵀ.
func OfTriangle(s *interp.Surface, t triangulate.Triangle, sigma float64) Gradient {
	return ofTriangle(s, t, [3]float64{1, 1, 1}).scaled(float64(sigma * sigma))
}

// ofTriangle is OfTriangle with the uncertainty of each head, in the order of canonical.
func ofTriangle(s *interp.Surface, t triangulate.Triangle, sigmas [3]float64) Gradient {
	dzdx, dzdy := s.Gradient(t)
	g := Gradient{DzDx: dzdx, DzDy: dzdy}
	m := s.Mesh()
	vs := canonical(m, t)
	d := doubleArea(m, vs)
	for i := range vs {
		p, q := m.Position(vs[(i+1)%3]), m.Position(vs[(i+2)%3])
		cx, cy := (p[1]-q[1])/d*sigmas[i], (q[0]-p[0])/d*sigmas[i]
		g.VarX += float64(cx * cx)
		g.VarY += float64(cy * cy)
		g.Cov += float64(cx * cy)
	}
	return g
}

// difference returns ab - cd, its relative error below 2^-52 (Kahan).
func difference(a, b, c, d float64) float64 {
	p := float64(c * d)
	e := math.FMA(-c, d, p)
	return math.FMA(a, b, -p) + e
}
