package interp

import (
	"context"
	"encoding/csv"
	"flag"
	"math"
	"math/big"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// long measures errors on a million cases instead of some thousand.
var long = flag.Bool("long", false, "measure rounding errors on 1e6 cases")

func cases(short int) int {
	if *long {
		return 1e6
	}
	return short
}

// surfaceOf triangulates pts and puts heights z on them.
func surfaceOf(t testing.TB, pts []orb.Point, z []float64) *Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// heights applies f to every point.
func heights(pts []orb.Point, f func(x, y float64) float64) []float64 {
	z := make([]float64, len(pts))
	for i, p := range pts {
		z[i] = f(p[0], p[1])
	}
	return z
}

// table reads a CSV file; each row as a map from the column's name.
func table(t *testing.T, path string) []map[string]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, rec := range records[1:] {
		row := map[string]string{}
		for i, name := range records[0] {
			row[name] = rec[i]
		}
		rows = append(rows, row)
	}
	return rows
}

// reference reads a table of the reference folder, much of which must not be
// copied here.
func reference(t *testing.T, name string) []map[string]string {
	t.Helper()
	dir := os.Getenv("ISOFACET_REFERENCE")
	if dir == "" {
		t.Skip("ISOFACET_REFERENCE is not set: the reference folder is needed for " + name)
	}
	return table(t, filepath.Join(dir, filepath.FromSlash(name)))
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// near fails unless |got-want| <= tolerance.
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.15g, want %.15g within %.3g", what, got, want, tolerance)
	}
}

func rat(x float64) *big.Rat { return new(big.Rat).SetFloat64(x) }

// ulp is the distance of float64 numbers just above |x|.
func ulp(x float64) float64 {
	x = math.Abs(x)
	return math.Nextafter(x, math.Inf(1)) - x
}

// ulpsOff is the exact error of got in ulps of z.
func ulpsOff(got float64, want *big.Rat, z float64) float64 {
	e := new(big.Rat).Sub(rat(got), want)
	off, _ := e.Quo(e, rat(ulp(z))).Float64()
	return math.Abs(off)
}

// ratArea2 is twice the area of a, b, c.
func ratArea2(a, b, c orb.Point) *big.Rat {
	sub := func(p, q float64) *big.Rat { return new(big.Rat).Sub(rat(p), rat(q)) }
	l := new(big.Rat).Mul(sub(b[0], a[0]), sub(c[1], a[1]))
	r := new(big.Rat).Mul(sub(b[1], a[1]), sub(c[0], a[0]))
	return l.Sub(l, r)
}

// ratInside is the height at p of the plane through three points, by the
// definition of its weights.
func ratInside(c [3]orb.Point, z [3]float64, p orb.Point) *big.Rat {
	sum := new(big.Rat)
	for i := range 3 {
		w := ratArea2(p, c[(i+1)%3], c[(i+2)%3])
		sum.Add(sum, w.Mul(w, rat(z[i])))
	}
	return sum.Quo(sum, ratArea2(c[0], c[1], c[2]))
}

// someTriangle draws corners of one of many kinds, fat and thin, at the origin and
// in map coordinates, counter-clockwise and not on a line.
func someTriangle(r *rand.Rand) (c [3]orb.Point, kind string) {
	for {
		x0, y0, size := 0.0, 0.0, 1.0
		thin := false
		k := r.IntN(8)
		switch k {
		case 0:
			kind = "unit square"
		case 1:
			kind = "sliver at the origin"
			thin, x0, y0 = true, -0.5, -0.5
		case 2:
			kind = "millimetres at 5e5, 5e6"
			x0, y0, size = 512345.678, 5100000.321, 37
		case 3:
			kind = "sliver of millimetres at 5e5, 5e6"
			thin, x0, y0, size = true, 512345.678, 5100000.321, 37
		case 4:
			kind = "across an axis"
			x0, y0, size = -13, 5100000, 26
		case 5:
			kind = "sizes from 1e-9 to 1e9"
		case 6:
			kind = "small integers"
		case 7:
			kind = "sliver of last places"
		}
		a, b := r.Float64(), r.Float64()
		for i := range c {
			u, v := r.Float64(), r.Float64()
			if thin {
				v = a*u + b + (v-0.5)*math.Ldexp(1, -r.IntN(45))
			}
			c[i] = orb.Point{x0 + size*u, y0 + size*v}
			switch k {
			case 2, 3:
				c[i] = orb.Point{math.Round(c[i][0]*1000) / 1000, math.Round(c[i][1]*1000) / 1000}
			case 5:
				c[i] = orb.Point{(u - 0.5) * math.Pow(10, r.Float64()*18-9), (v - 0.5) * math.Pow(10, r.Float64()*18-9)}
			case 6:
				c[i] = orb.Point{float64(r.IntN(9) - 4), float64(r.IntN(9) - 4)}
			case 7:
				y := a*(u-0.5) + 1e-3*b
				c[i] = orb.Point{u - 0.5, y + float64(r.IntN(5)-2)*ulp(y)}
			}
		}
		switch ratArea2(c[0], c[1], c[2]).Sign() {
		case 1:
			return c, kind
		case -1:
			c[1], c[2] = c[2], c[1]
			return c, kind
		}
	}
}

// heightKinds name what someHeights draws.
var heightKinds = [5]string{"ground at 300", "around zero", "just below 2, opposite signs", "sizes from 1e-6 to 1e6", "level but for the last place"}

// someHeights draws three heights of one of several kinds.
func someHeights(r *rand.Rand) (z [3]float64) {
	return heightsOfKind(r, r.IntN(len(heightKinds)))
}

func heightsOfKind(r *rand.Rand, k int) (z [3]float64) {
	for i := range z {
		switch k {
		case 0: // ground
			z[i] = math.Round((300+20*r.Float64())*1000) / 1000
		case 1: // around zero
			z[i] = r.Float64() - 0.5
		case 2: // where an ulp is smallest against the range: the worst case
			z[i] = math.Nextafter(2, 1) * float64(1-2*(i%2))
		case 3: // sizes from 1e-6 to 1e6
			z[i] = (r.Float64() - 0.5) * math.Pow(10, r.Float64()*12-6)
		case 4: // level but for the last place
			z[i] = math.Nextafter(812.5, float64(r.IntN(3))*1000)
		}
	}
	return z
}
