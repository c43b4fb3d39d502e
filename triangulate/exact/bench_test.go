package exact

import (
	"math/rand/v2"
	"testing"
)

// Each benchmark runs over the same 4096 quadruples again and again. "floor" only
// loads them; the stages of InCircle are forced on squares whose value is exactly
// zero, where the filter never decides.

func benchQuads(kind string) [][8]float64 {
	r := rand.New(rand.NewPCG(13, 14))
	quads := make([][8]float64, 4096)
	for i := range quads {
		q := &quads[i]
		switch kind {
		case "uniform":
			for k := range q {
				q[k] = r.Float64()
			}
			continue
		case "lattice":
			x, y := float64(r.IntN(1000)), float64(r.IntN(1000))
			*q = [8]float64{x, y, x + 1, y, x + 1, y + 1, x, y + 1}
		case "survey": // 0.1 m at (430000, 5600000)
			x, y := r.IntN(1000), r.IntN(1000)
			at := func(k int) float64 { return (4300000 + float64(k)) / 10 }
			up := func(k int) float64 { return (56000000 + float64(k)) / 10 }
			*q = [8]float64{at(x), up(y), at(x + 1), up(y), at(x + 1), up(y + 1), at(x), up(y + 1)}
		}
	}
	return quads
}

var sink int

func BenchmarkOrient(b *testing.B) {
	for _, kind := range []string{"uniform", "lattice", "survey"} {
		quads := benchQuads(kind)
		run := func(name string, f func(q *[8]float64) int) {
			b.Run(name+"/"+kind, func(b *testing.B) {
				i, s := 0, 0
				for b.Loop() {
					s += f(&quads[i&4095])
					i++
				}
				sink = s
			})
		}
		run("floor", func(q *[8]float64) int { return int(q[0]) })
		run("filtered", func(q *[8]float64) int { return OrientXY(q[0], q[1], q[2], q[3], q[4], q[5]) })
		run("slow", func(q *[8]float64) int { return orientSlow(q[0], q[1], q[2], q[3], q[4], q[5]) })
		run("expansion", func(q *[8]float64) int { return orientExpansion(q[0], q[1], q[2], q[3], q[4], q[5]) })
	}
}

func BenchmarkInCircle(b *testing.B) {
	for _, kind := range []string{"uniform", "lattice", "survey"} {
		quads := benchQuads(kind)
		run := func(name string, f func(q *[8]float64) int) {
			b.Run(name+"/"+kind, func(b *testing.B) {
				i, s := 0, 0
				for b.Loop() {
					s += f(&quads[i&4095])
					i++
				}
				sink = s
			})
		}
		run("floor", func(q *[8]float64) int { return int(q[0]) })
		run("staged", func(q *[8]float64) int {
			return InCircleXY(q[0], q[1], q[2], q[3], q[4], q[5], q[6], q[7])
		})
		run("tied", func(q *[8]float64) int {
			return InCircleTiedXY(q[0], q[1], q[2], q[3], q[4], q[5], q[6], q[7])
		})
		run("slow", func(q *[8]float64) int {
			return inCircleSlow(q[0], q[1], q[2], q[3], q[4], q[5], q[6], q[7])
		})
		run("differences", func(q *[8]float64) int {
			return inCircleDifferences(q[0]-q[6], q[1]-q[7], q[2]-q[6], q[3]-q[7], q[4]-q[6], q[5]-q[7])
		})
		run("expansion", func(q *[8]float64) int {
			return inCircleExpansion(q[0], q[1], q[2], q[3], q[4], q[5], q[6], q[7])
		})
	}
}

func BenchmarkSum(b *testing.B) {
	x := make([]float64, 4096)
	r := rand.New(rand.NewPCG(15, 16))
	for i := range x {
		x[i] = r.NormFloat64() * 100
	}
	rate := func(b *testing.B) {
		b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "numbers/s")
	}
	b.Run("floor", func(b *testing.B) {
		i, s := 0, 0.0
		for b.Loop() {
			s += x[i&4095]
			i++
		}
		sink = int(s)
		rate(b)
	})
	b.Run("Add", func(b *testing.B) {
		var s Sum
		i := 0
		for b.Loop() {
			s.Add(x[i&4095])
			i++
		}
		rate(b)
	})
	b.Run("AddProduct", func(b *testing.B) {
		var s Sum
		i := 0
		for b.Loop() {
			s.AddProduct(x[i&4095], x[(i+1)&4095])
			i++
		}
		rate(b)
	})
	b.Run("Value", func(b *testing.B) {
		var s Sum
		for b.Loop() {
			s.Add(1)
			s.Value()
		}
	})
}
