package readings

import (
	"cmp"
	"context"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// groups are the sets of two or more readings that stand at one place: the numbers
// of each in rising order, group after group, and where each begins.
type groups struct {
	members []int32
	start   []int32 // one more than there are groups
}

func (g *groups) count() int { return max(len(g.start)-1, 0) }

func (g *groups) of(k int) []int32 { return g.members[g.start[k]:g.start[k+1]] }

// mergeSpots makes one reading of those at one place.
func (s *collected) mergeSpots(ctx context.Context) error {
	o := s.o
	var g groups
	var err error
	if o.Spots.Within > 0 {
		g, err = s.chains(ctx)
	} else {
		g = samePlaces(s.Points, o.Workers)
	}
	if err == nil {
		err = ctx.Err()
	}
	if err != nil || g.count() == 0 {
		return err
	}
	if err := s.conflicts(&g); err != nil {
		return err
	}
	merged := make([]Merged, 0, len(g.members)-g.count())
	into := make([]int32, 0, cap(merged)) // who stands for each merged reading
	gone := make([]int32, 0, cap(merged))
	var sum exact.Sum
	for k := range g.count() {
		m := g.of(k)
		s.SpotCount++
		s.SpotSpread = max(s.SpotSpread, s.spread(m))
		stays := s.representative(m, o.Spots.Rule)
		for _, i := range m {
			if i != stays {
				m := Merged{File: int32(s.Source(int(i))), Line: s.Lines[i], Point: s.Points[i], Z: s.Z[i],
					ID: strings.Clone(s.text(idSlot, i)), Code: strings.Clone(s.text(codeSlot, i)), LineName: strings.Clone(s.text(lineSlot, i))}
				if o.Account {
					m.Row = s.keptRow(i)
				}
				merged = append(merged, m)
				into = append(into, stays)
				gone = append(gone, i)
			}
		}
		if o.Spots.Rule == SpotAgree || o.Spots.Rule == SpotMean {
			s.Z[stays] = s.mean(&sum, m)
		}
		s.Points[stays] = s.place(m)
	}
	slices.Sort(gone)
	for i := range merged {
		before, _ := slices.BinarySearch(gone, into[i])
		merged[i].Into = int(into[i]) - before
	}
	slices.SortFunc(merged, func(a, b Merged) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line))
	})
	s.Merged = merged
	s.Counts.Merged = len(merged)
	s.Counts.Used -= len(merged)
	s.remove(gone)
	return nil
}

// keptRow copies what was read of a reading.
func (s *collected) keptRow(i int32) *KeptRow {
	k := &KeptRow{Placed: true, Valued: true, Point: s.Points[i], Z: s.Z[i], Work: s.work[i]}
	for slot := range k.texts {
		k.texts[slot] = strings.Clone(s.text(slot, i))
	}
	return k
}

var idSlot, codeSlot, lineSlot, zoneSlot = int(textSlot[ID]), int(textSlot[Code]), int(textSlot[Line]), int(textSlot[Zone])

// spread is the highest minus the lowest z.
func (s *collected) spread(m []int32) float64 {
	lo, hi := s.Z[m[0]], s.Z[m[0]]
	for _, i := range m[1:] {
		lo, hi = min(lo, s.Z[i]), max(hi, s.Z[i])
	}
	return asWritten(hi-lo, s.DecimalsZ)
}

// asWritten rounds a difference of numbers with a few decimals to that many, so
// that 10.3 - 10.2 is 0.1 and not the 0.10000000000000142 of the doubles: limits
// are compared with what the file says. Differences that have no such meaning (too
// large, or of full doubles) stay as they are.
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
func (s *collected) mean(sum *exact.Sum, m []int32) float64 {
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
func (s *collected) place(m []int32) orb.Point {
	p := s.Points[m[0]]
	for _, i := range m[1:] {
		if exact.CompareXY(s.Points[i], p) < 0 {
			p = s.Points[i]
		}
	}
	return p
}

// representative is the reading of a group that stays, with its id, code and line.
// It does not depend on the order of the input, but under SpotFirst and SpotLast:
// equal readings are settled by everything that is kept of them.
func (s *collected) representative(m []int32, rule SpotRule) int32 {
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

// before orders readings by z if the rule looks at it, then by (x, y), z, texts. A
// reading with a name goes before one without.
func (s *collected) before(i, j int32, rule SpotRule) bool {
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
		a, b := s.text(t, i), s.text(t, j)
		if c = cmp.Compare(a, b); a == "" || b == "" {
			c = -c
		}
	}
	return c < 0
}

// conflicts returns a *SpotError if any group may not be merged.
func (s *collected) conflicts(g *groups) error {
	type conflict struct {
		group  int
		place  orb.Point
		reason SpotReason
	}
	var all []conflict
	e := &SpotError{Within: s.o.Spots.Within}
	for k := range g.count() {
		m := g.of(k)
		if why := s.objection(m, &s.o.Spots); why != 0 {
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
			spot.Members = append(spot.Members, SpotMember{File: s.sources[s.Source(int(i))].Name, Line: int(s.Lines[i]),
				ID: strings.Clone(s.text(idSlot, i)), Zone: strings.Clone(s.text(zoneSlot, i)), Z: s.Z[i]})
		}
		e.First = append(e.First, spot)
	}
	return e
}

// objection says why a group may not be merged, 0 if it may.
func (s *collected) objection(m []int32, rule *Spots) SpotReason {
	if s.differ(zoneSlot, m) {
		return UnlikeZones
	}
	heads := false
	for _, i := range m {
		heads = heads || s.Layouts[s.Source(int(i))].Heads
	}
	if heads && s.differ(idSlot, m) {
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

// differ reports whether the readings have unlike texts in a slot.
func (s *collected) differ(slot int, m []int32) bool {
	for _, i := range m[1:] {
		if s.text(slot, i) != s.text(slot, m[0]) {
			return true
		}
	}
	return false
}
