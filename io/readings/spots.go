package readings

import (
	"cmp"
	"context"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// groups are the sets of two or more readings that stand at one place: the
// numbers of each in rising order, group after group, and where each begins.
type groups struct {
	members []int32
	start   []int32 // one more than there are groups
}

func (g *groups) count() int { return max(len(g.start)-1, 0) }

func (g *groups) of(k int) []int32 { return g.members[g.start[k]:g.start[k+1]] }

// mergeSpots makes one reading of those at one place.
func (s *Set) mergeSpots(ctx context.Context, o *Options, sources []Source) error {
	var g groups
	var err error
	if o.Spots.Within > 0 {
		g, err = s.chains(ctx, o)
	} else {
		g = samePlaces(s.Points, o.Workers)
	}
	if err == nil {
		err = ctx.Err()
	}
	if err != nil || g.count() == 0 {
		return err
	}
	if err := s.conflicts(&g, o, sources); err != nil {
		return err
	}
	kept := make([]bool, len(s.Points))
	for i := range kept {
		kept[i] = true
	}
	into := make([]int32, 0, len(g.members)) // who stands for each merged reading
	merged := make([]Merged, 0, len(g.members)-g.count())
	var sum exact.Sum
	for k := range g.count() {
		m := g.of(k)
		s.SpotCount++
		s.SpotSpread = max(s.SpotSpread, s.spread(m))
		stays := s.representative(m, o.Spots.Rule)
		for _, i := range m {
			if i == stays {
				continue
			}
			kept[i] = false
			merged = append(merged, Merged{File: int32(s.Source(int(i))), Line: s.Lines[i], Point: s.Points[i], Z: s.Z[i],
				ID: s.ID(int(i))})
			into = append(into, stays)
		}
		if o.Spots.Rule == SpotAgree || o.Spots.Rule == SpotMean {
			s.Z[stays] = s.mean(&sum, m)
		}
		s.Points[stays] = s.place(m)
	}
	// The numbers of the used readings, once the others are gone.
	rank := make([]int32, len(kept))
	n := int32(0)
	for i, k := range kept {
		rank[i] = n
		if k {
			n++
		}
	}
	for i := range merged {
		merged[i].Into = int(rank[into[i]])
	}
	slices.SortFunc(merged, func(a, b Merged) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line))
	})
	s.Merged = merged
	s.Counts.Merged = len(merged)
	s.Counts.Used -= len(merged)
	s.keep(kept, int(n))
	return nil
}

// spread is the highest minus the lowest z.
func (s *Set) spread(m []int32) float64 {
	lo, hi := s.Z[m[0]], s.Z[m[0]]
	for _, i := range m[1:] {
		lo, hi = min(lo, s.Z[i]), max(hi, s.Z[i])
	}
	return asWritten(hi-lo, s.DecimalsZ)
}

// asWritten rounds a difference of numbers with a few decimals to that many, so
// that 10.3 - 10.2 is 0.1 and not the 0.10000000000000142 of the doubles: limits
// are compared with what the file says. Differences that have no such meaning
// (too large, or of full doubles) stay as they are.
func asWritten(d float64, decimals int) float64 {
	if decimals >= len(powersOfTen) {
		return d
	}
	if scaled := d * powersOfTen[decimals]; math.Abs(scaled) < 1<<50 {
		return math.Round(scaled) / powersOfTen[decimals]
	}
	return d
}

// mean is the exact mean of the values, rounded once.
func (s *Set) mean(sum *exact.Sum, m []int32) float64 {
	if z := s.Z[m[0]]; len(m) == 2 && s.Z[m[1]] == z {
		return z
	}
	*sum = exact.Sum{}
	for _, i := range m {
		sum.Add(s.Z[i])
	}
	return sum.Mean(len(m))
}

// place is the smallest (x, y) of a group.
func (s *Set) place(m []int32) orb.Point {
	p := s.Points[m[0]]
	for _, i := range m[1:] {
		if exact.CompareXY(s.Points[i], p) < 0 {
			p = s.Points[i]
		}
	}
	return p
}

// representative is the reading of a group that stays, with its id, code and
// line. It does not depend on the order of the input, but under SpotFirst and
// SpotLast: equal readings are settled by everything that is kept of them.
func (s *Set) representative(m []int32, rule SpotRule) int32 {
	switch rule {
	case SpotFirst:
		return m[0]
	case SpotLast:
		return m[len(m)-1]
	}
	best := m[0]
	for _, i := range m[1:] {
		if s.before(i, best, rule) {
			best = i
		}
	}
	return best
}

// before orders readings by z if the rule looks at it, then by (x, y), z, texts.
func (s *Set) before(i, j int32, rule SpotRule) bool {
	c := 0
	switch rule {
	case SpotLowest:
		c = cmp.Compare(s.Z[i], s.Z[j])
	case SpotHighest:
		c = cmp.Compare(s.Z[j], s.Z[i])
	}
	if c == 0 {
		c = cmp.Or(exact.CompareXY(s.Points[i], s.Points[j]), cmp.Compare(s.Z[i], s.Z[j]))
	}
	for t := 0; c == 0 && t < textSlots; t++ {
		if s.texts[t].len() > 0 {
			c = cmp.Compare(s.texts[t].at(int(i)), s.texts[t].at(int(j)))
		}
	}
	return c < 0
}

// conflicts returns a *SpotError if any group may not be merged.
func (s *Set) conflicts(g *groups, o *Options, sources []Source) error {
	type conflict struct {
		group  int
		place  orb.Point
		reason SpotReason
	}
	var all []conflict
	e := &SpotError{Within: o.Spots.Within}
	for k := range g.count() {
		m := g.of(k)
		if why := s.objection(m, &o.Spots); why != 0 {
			all = append(all, conflict{k, s.place(m), why})
			e.Total++
			e.Readings += len(m)
		}
	}
	if len(all) == 0 {
		return nil
	}
	slices.SortFunc(all, func(a, b conflict) int { return exact.CompareXY(a.place, b.place) })
	for _, c := range all[:min(len(all), firstFew)] {
		m := g.of(c.group)
		spot := Spot{Place: c.place, Spread: s.spread(m), Count: len(m), Why: c.reason}
		for _, i := range m[:min(len(m), firstFew)] {
			spot.Members = append(spot.Members, SpotMember{File: sources[s.Source(int(i))].Name, Line: int(s.Lines[i]),
				ID: s.ID(int(i)), Zone: s.Text(Zone, int(i)), Z: s.Z[i]})
		}
		e.First = append(e.First, spot)
	}
	return e
}

// objection says why a group may not be merged, 0 if it may.
func (s *Set) objection(m []int32, rule *Spots) SpotReason {
	if s.differ(Zone, m) {
		return UnlikeZones
	}
	heads := false
	for _, i := range m {
		heads = heads || s.Layouts[s.Source(int(i))].Heads
	}
	if heads && s.differ(ID, m) {
		return UnlikeIDs
	}
	switch {
	case rule.Rule == SpotRefuse:
		return EveryRepeat
	case rule.Rule == SpotAgree || rule.SpreadGiven:
		if s.spread(m) > rule.Spread {
			return SpreadTooLarge
		}
	}
	return 0
}

func (s *Set) differ(r Role, m []int32) bool {
	if !s.Has(r) {
		return false
	}
	for _, i := range m[1:] {
		if s.Text(r, int(i)) != s.Text(r, int(m[0])) {
			return true
		}
	}
	return false
}
