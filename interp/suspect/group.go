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
	all := 0
	each := func(do func(g int32, r, off float64)) {
		all = 0
		add := func(v triangulate.Vertex, r, scale float64) {
			if g := of[v]; g >= 0 && r == r && scale > 0 {
				do(g, r, r/scale)
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
	}
	// Counted first: the most common code, often that of all, takes no memory.
	shots := make([]int, count)
	each(func(g int32, _, _ float64) { shots[g]++ })
	residuals, offs := make([][]float64, count), make([][]float64, count)
	for g, n := range shots {
		if n >= groupLeast && float64(n) <= groupShare*float64(all) {
			residuals[g], offs[g] = make([]float64, 0, n), make([]float64, 0, n)
		}
	}
	each(func(g int32, r, off float64) {
		if offs[g] != nil {
			residuals[g], offs[g] = append(residuals[g], r), append(offs[g], off)
		}
	})
	for g := range offs {
		if offs[g] == nil {
			continue
		}
		if m := median(offs[g]); math.Abs(m) > f.opt.Factor {
			off = append(off, Group{int32(g), shots[g], median(residuals[g]), m})
		}
	}
	return off
}
