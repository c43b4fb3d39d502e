package suspect

import (
	"context"
	"math"
	"slices"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// clusterMost is how many neighbouring readings, all off to one side, count as so many
// blunders. More of them are part of the ground: where a face has no lines at its crest and
// toe, its readings contradict each other, and taking out one after the other would eat
// the ground on one side.
const clusterMost = 5

// roundsMost bounds how often it is begun anew; each time more readings are pinned.
const roundsMost = 8

// settle judges all and takes out what is off; where that takes out whole clusters it
// begins anew, with these pinned.
func (f *finder) settle(ctx context.Context) error {
	if err := f.judgeAll(ctx); err != nil {
		return err
	}
	for round := 1; ; round++ {
		if err := f.takeOut(ctx); err != nil {
			return err
		}
		clusters := f.clusters()
		if len(clusters) == 0 || round == roundsMost {
			return f.release(ctx)
		}
		for _, v := range clusters {
			f.pinned[v] = true
		}
		f.restore()
	}
}

// clusters returns those taken out that are neighbours of more than clusterMost others, on
// the same side, over one another.
func (f *finder) clusters() (all []triangulate.Vertex) {
	side := make(map[triangulate.Vertex]float64, len(f.out))
	for _, v := range f.out {
		side[v] = math.Copysign(1, f.was[v])
	}
	whole := newSurroundings(f.work.Mesh())
	for _, v := range f.out {
		s, ok := side[v]
		if !ok {
			continue
		}
		delete(side, v)
		cluster := []triangulate.Vertex{v}
		for k := 0; k < len(cluster); k++ {
			for _, w := range whole.neighbours(cluster[k]) {
				if t, ok := side[w]; ok && t == s {
					delete(side, w)
					cluster = append(cluster, w)
				}
			}
		}
		if len(cluster) > clusterMost {
			all = append(all, cluster...)
		}
	}
	return all
}

// release looks once more at what is pinned, the worst first: a reading that is off, and
// without which its neighbours agree better, is a blunder within the cluster.
func (f *finder) release(ctx context.Context) error {
	var list []entry
	for v := range f.pinned {
		if _, lined := f.lines[v]; f.off[v] > f.opt.Factor && !lined {
			list = append(list, entry{v, f.off[v]})
		}
	}
	slices.SortFunc(list, f.order)
	var link []triangulate.Vertex
	for k, e := range list {
		if k%256 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		if f.off[e.v] <= f.opt.Factor {
			continue
		}
		link = append(link[:0], f.near.neighbours(e.v)...)
		if !f.agreeWithout(e.v, link) {
			continue
		}
		delete(f.pinned, e.v)
		f.drop(e.v)
		for _, u := range link {
			f.expect(u)
		}
		for _, u := range link {
			f.judge(u, f.near)
		}
	}
	return nil
}

// agreeWithout tells whether the neighbours of v lie less far off without it than with
// it, taken together.
func (f *finder) agreeWithout(v triangulate.Vertex, link []triangulate.Vertex) bool {
	with, without := 0.0, 0.0
	var left []triangulate.Left
	for _, u := range link {
		if _, lined := f.lines[u]; lined || f.residual[u] != f.residual[u] {
			continue
		}
		left = f.near.r.WithoutAll(left[:0], []triangulate.Vertex{v, u})
		with += math.Abs(f.residual[u])
		without += math.Abs(f.own[u] - f.work.ValueOf(left[1], f.near.pos[u]))
	}
	return without < agreeShare*with
}

// agreeShare is how much of their misses may be left without a blunder.
const agreeShare = 0.7

// restore puts back all that was taken out. What was known of the others about them is
// worked out anew.
func (f *finder) restore() {
	touched := map[triangulate.Vertex]bool{}
	f.near.r.Reset()
	copy(f.z, f.own)
	for _, v := range f.out {
		touched[v] = true
		f.residual[v] = 0 // to be expected again
	}
	for _, v := range f.out {
		for _, u := range f.near.neighbours(v) {
			touched[u] = true
		}
	}
	for v := range f.changed {
		touched[v] = true
	}
	clear(f.changed)
	f.out = f.out[:0]
	clear(f.was)
	for v := range touched {
		f.expect(v)
	}
	for v := range touched {
		f.judge(v, f.near)
	}
}

// together returns what is pinned and off, in (x, y) order.
func (f *finder) together() []triangulate.Vertex {
	all := make([]triangulate.Vertex, 0, len(f.pinned))
	for v := range f.pinned {
		if f.off[v] > f.opt.Factor {
			all = append(all, v)
		}
	}
	slices.SortFunc(all, func(a, b triangulate.Vertex) int { return exact.CompareXY(f.near.pos[a], f.near.pos[b]) })
	return all
}
