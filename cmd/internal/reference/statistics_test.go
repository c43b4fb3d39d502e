package reference

import (
	"math"
	"testing"

	"github.com/paulmach/orb"
)

// TestErrorStatistics compares how far the surface is from functions 1 to 10 over
// the 33 x 33 lattice of Algorithm 792, for two sets of nodes: largest error and
// where, mean, root mean square, and the sum of squares over that of the function
// about its mean. Source: computed for this project; no published table of the
// linear interpolant on this lattice is known. 1e-6 of each figure.
//
// Only nodes inside the hull count, and none within the one tie of franke33.
func TestErrorStatistics(t *testing.T) {
	figure := compare(t, "statistic")
	all := table(t, "scattered/pwl_error_statistics_33x33.csv")
	same(t, "number of rows", len(all), 20)
	for _, r := range all {
		set, k := r.get(t, "node_set"), r.count(t, "function_id")
		f := functions[k]
		same(t, r.name+": grid_n", r.count(t, "grid_n"), 33)
		values, n := raster(t, readings(t, nodes(t, set), f), "--cell", "0.03125", "--extent", "0,0,1,1", "--values-at", "corners")
		same(t, r.name+": nodes", n, 33*33)

		var errors, truths []float64
		left, most, column, line := 0, 0.0, 0, 0
		for i := range 33 {
			for j := range 33 {
				p := orb.Point{float64(i) / 32, float64(j) / 32}
				z, ok := values[p]
				if !ok {
					continue
				}
				if set == "franke33" && inTie(p) {
					left++
					continue
				}
				truth := f(p[0], p[1])
				off := math.Abs(z - truth)
				errors, truths = append(errors, off), append(truths, truth)
				if off > most {
					most, column, line = off, i, j
				}
			}
		}
		same(t, r.name+": nodes used", len(errors), r.count(t, "grid_points_used"))
		same(t, r.name+": nodes left out", left, r.count(t, "grid_points_left_out_because_triangle_not_unique"))
		same(t, r.name+": column of the largest error", column, r.count(t, "argmax_i_x"))
		same(t, r.name+": row of the largest error", line, r.count(t, "argmax_j_y"))

		mean, squares, truth, spread := 0.0, 0.0, 0.0, 0.0
		for i, e := range errors {
			mean += e / float64(len(errors))
			squares += sq(e)
			truth += truths[i] / float64(len(truths))
		}
		for _, v := range truths {
			spread += sq(v - truth)
		}
		figure.part(r.name+": largest", most, r.number(t, "max_abs_error"), 1e-6)
		figure.part(r.name+": mean", mean, r.number(t, "mean_abs_error"), 1e-6)
		figure.part(r.name+": root mean square", math.Sqrt(squares/float64(len(errors))), r.number(t, "rms_error"), 1e-6)
		figure.part(r.name+": sum of squares, relative", squares/spread, r.number(t, "sse_over_ssm"), 1e-6)
	}
}

// inTie reports whether p lies in the one quadrilateral of franke33 whose corners
// are on a circle, about (0.825, 0.325). Its sides lie on the lines x + y = 1.1,
// y = 2x - 1.45, x + 2y = 1.6 and y = x - 0.4, none of which meets a multiple of
// 1/32 in both x and y.
func inTie(p orb.Point) bool {
	corners := []orb.Point{{0.75, 0.35}, {0.85, 0.25}, {0.9, 0.35}, {0.8, 0.4}}
	for i, a := range corners {
		b := corners[(i+1)%4]
		if (b[0]-a[0])*(p[1]-a[1])-(b[1]-a[1])*(p[0]-a[0]) <= 0 {
			return false
		}
	}
	return true
}
