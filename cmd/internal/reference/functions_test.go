package reference

import (
	"math"
	"testing"
)

// functions are test functions of the unit square, by their usual numbers.
//
// Sources: 1 to 6 R. Franke, A critical comparison of some methods for
// interpolation of scattered data, Naval Postgraduate School report
// NPS-53-79-003, 1979; 7 to 10 R. J. Renka and R. Brown, Algorithm 792, ACM
// Trans. Math. Softw. 25(1), 1999, 78-94; 11 to 13 from the public test library
// that goes with it.
var functions = map[int]func(x, y float64) float64{
	1: func(x, y float64) float64 {
		return 0.75*math.Exp(-(sq(9*x-2)+sq(9*y-2))/4) + 0.75*math.Exp(-sq(9*x+1)/49-(9*y+1)/10) +
			0.5*math.Exp(-(sq(9*x-7)+sq(9*y-3))/4) - 0.2*math.Exp(-sq(9*x-4)-sq(9*y-7))
	},
	2: func(x, y float64) float64 { return (math.Tanh(9*(y-x)) + 1) / 9 },
	3: func(x, y float64) float64 { return (1.25 + math.Cos(5.4*y)) / (6 + 6*sq(3*x-1)) },
	4: func(x, y float64) float64 { return math.Exp(-81*(sq(x-0.5)+sq(y-0.5))/16) / 3 },
	5: func(x, y float64) float64 { return math.Exp(-81*(sq(x-0.5)+sq(y-0.5))/4) / 3 },
	6: func(x, y float64) float64 {
		s := 64 - 81*(sq(x-0.5)+sq(y-0.5))
		if s < 0 {
			return 0
		}
		return math.Sqrt(s)/9 - 0.5
	},
	7: func(x, y float64) float64 { return 2*math.Cos(10*x)*math.Sin(10*y) + math.Sin(10*x*y) },
	8: func(x, y float64) float64 {
		a, b := math.Exp(-sq(5-10*x)/2), math.Exp(-sq(5-10*y)/2)
		return a + 0.75*b*(1+a)
	},
	9: func(x, y float64) float64 {
		p, q := math.Exp((10-20*x)/3), math.Exp((10-20*y)/3)
		r, s := 1/(1+p), 1/(1+q)
		return sq(math.Pow(20.0/3, 3)*p*q) * math.Pow(r*s, 5) * (p - 2*r) * (q - 2*s)
	},
	10: func(x, y float64) float64 {
		t := math.Sqrt(sq(80*x-40) + sq(90*y-45))
		return math.Exp(-0.04*t) * math.Cos(0.15*t)
	},
	11: func(x, y float64) float64 { return x * (y + 1) },
	12: func(x, y float64) float64 {
		r, t := math.Hypot(x, y), math.Atan2(y, x)
		return 1.5 * (0.8*r + 0.35*math.Sin(2.4*math.Pi*r/math.Sqrt2)) * math.Sin(1.3*t)
	},
	13: func(x, y float64) float64 { return 1 / (sq(10*x-5) + sq(10*y-5) + 1) },
}

func sq(v float64) float64 { return v * v }

// The readings of other tests come from these functions, so the functions are
// proved first. Source: values printed to 15 digits by the public test library.
func TestFunctions(t *testing.T) {
	value := compare(t, "test function")
	for _, r := range table(t, "scattered/test_function_values.csv") {
		k := r.count(t, "function_id")
		value.near(r.name, functions[k](r.number(t, "x"), r.number(t, "y")), r.number(t, "f"), 1e-12)
	}
	same(t, "number of values", value.n, 5*len(functions))
}
