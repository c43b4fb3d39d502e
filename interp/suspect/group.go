package suspect

import (
	"math"

	"isofacet/triangulate"
)

// A Group is a set of shots, by their code, most of which lie off to one side: what was
// shot is likely no ground.
type Group struct {
	Group  int32
	Shots  int     // of the group that can be expected
	Amount float64 // the median of their residuals
	Off    float64 // the median of how many scales they lie off, with its sign
}

// A group is looked at if it has as many shots as groupLeast, and no more than
// groupShare of all: where most shots are of one code, that code is the ground.
const (
	groupLeast = 3
	groupShare = 0.25
)

// groups finds the groups whose shots lie off, half of them further than Factor scales and
// to one side. What lies on lines is passed over: crests and toes lie off what surrounds
// them by their nature.
func (f *finder) groups(of []int32, found []Suspect) (off []Group) {
	if of == nil {
		return nil
	}
	var count int32
	for _, g := range of {
		count = max(count, g+1)
	}
	residuals, offs := make([][]float64, count), make([][]float64, count)
	all := 0
	add := func(v triangulate.Vertex, r, scale float64) {
		if g := of[v]; g >= 0 && r == r && scale > 0 {
			residuals[g], offs[g] = append(residuals[g], r), append(offs[g], r/scale)
		}
	}
	for v := range of {
		v := triangulate.Vertex(v)
		if _, lined := f.lines[v]; lined {
			continue
		}
		all++
		add(v, f.residual[v], f.scale[v]) // NaN of those taken out
	}
	for _, s := range found {
		if _, lined := f.lines[s.Vertex]; !lined {
			add(s.Vertex, s.Residual, s.Scale)
		}
	}
	for g := range residuals {
		n := len(offs[g])
		if n < groupLeast || float64(n) > groupShare*float64(all) {
			continue
		}
		if m := median(offs[g]); math.Abs(m) > f.opt.Factor {
			off = append(off, Group{int32(g), n, median(residuals[g]), m})
		}
	}
	return off
}
