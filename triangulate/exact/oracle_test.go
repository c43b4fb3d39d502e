package exact

import (
	"math"
	"math/big"
	"math/rand/v2"
)

// The oracles: the definitions in rational arithmetic.

type point = [2]float64

func rat(x float64) *big.Rat { return new(big.Rat).SetFloat64(x) }

// ratDet is the determinant by Laplace expansion along the first column.
func ratDet(m [][]*big.Rat) *big.Rat {
	if len(m) == 1 {
		return m[0][0]
	}
	det := new(big.Rat)
	for i := range m {
		if m[i][0].Sign() == 0 {
			continue
		}
		minor := make([][]*big.Rat, 0, len(m)-1)
		for k := range m {
			if k != i {
				minor = append(minor, m[k][1:])
			}
		}
		t := new(big.Rat).Mul(m[i][0], ratDet(minor))
		if i%2 == 1 {
			t.Neg(t)
		}
		det.Add(det, t)
	}
	return det
}

func orientRat(a, b, c point) int {
	one := big.NewRat(1, 1)
	var m [][]*big.Rat
	for _, p := range []point{a, b, c} {
		m = append(m, []*big.Rat{rat(p[0]), rat(p[1]), one})
	}
	return ratDet(m).Sign()
}

// liftedRat is the sign of the 4 x 4 determinant of rows x, y, lift, 1.
func liftedRat(p [4]point, lift [4]*big.Rat) int {
	one := big.NewRat(1, 1)
	var m [][]*big.Rat
	for i, q := range p {
		m = append(m, []*big.Rat{rat(q[0]), rat(q[1]), lift[i], one})
	}
	return ratDet(m).Sign()
}

func paraboloid(p point) *big.Rat {
	x, y := rat(p[0]), rat(p[1])
	x.Mul(x, x)
	return x.Add(x, y.Mul(y, y))
}

func inCircleRat(a, b, c, d point) int {
	return liftedRat([4]point{a, b, c, d},
		[4]*big.Rat{paraboloid(a), paraboloid(b), paraboloid(c), paraboloid(d)})
}

// hardPoints draws n points of one of many kinds on which floating point fails.
func hardPoints(r *rand.Rand, n int) []point {
	pts := make([]point, n)
	kind := r.IntN(8)
	a, b := r.Float64(), r.Float64()
	for i := range pts {
		u, v := r.Float64(), r.Float64()
		switch kind {
		case 0: // unit square
			pts[i] = point{u, v}
		case 1: // 0.1 m lattice in map coordinates
			pts[i] = point{(4300000 + float64(r.IntN(4))) / 10, (56000000 + float64(r.IntN(4))) / 10}
		case 2: // small integers
			pts[i] = point{float64(r.IntN(7) - 3), float64(r.IntN(7) - 3)}
		case 3: // sizes from 1e-60 to 1e60, mixed signs, zeros
			for k := range 2 {
				if r.IntN(8) > 0 {
					pts[i][k] = (r.Float64() - 0.5) * math.Pow(10, r.Float64()*119.6-59.3)
				}
			}
		case 4: // near one line
			pts[i] = point{u, math.Nextafter(a*u+b, float64(r.IntN(3)-1))}
		case 5: // last places around 0.5 and 12
			pts[i] = point{0.5 + float64(r.IntN(4))/(1<<53), 0.5 + float64(r.IntN(4))/(1<<53)}
			if r.IntN(2) == 0 {
				pts[i] = point{12 * float64(1+r.IntN(2)), 12 * float64(1+r.IntN(2))}
			}
		case 6: // near one circle, around the origin
			s, c := math.Sincos(u * 6)
			pts[i] = point{a * c, a * s}
		case 7: // 1e-9 next to 1e9
			pts[i] = point{u, v}
			if r.IntN(2) == 0 {
				pts[i] = point{u * 1e-9, -v * 1e9}
			}
		}
	}
	return pts
}
