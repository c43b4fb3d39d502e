package gen

import (
	"cmp"
	"math"
	"slices"
)

// line is a chain of places along which two kinds of ground meet. A closed
// line repeats its first place at the end.
type line []place

// meeting returns the lines along which pieces of one kind touch pieces of
// another, each chain as long as possible, sorted by its first place.
//
// Pieces may share an edge only in part (a corner of one lies in the middle
// of the other's side), so every side is first divided at all corners that
// lie on it; of each part, the ground just beyond decides.
func meeting(s surface, pieces []piece, one, other string) []line {
	var corners []place
	for _, p := range pieces {
		corners = append(corners, p.ring...)
	}
	var parts [][2]place
	for _, p := range pieces {
		if p.top.name != one {
			continue
		}
		for i, a := range p.ring {
			b := p.ring[(i+1)%len(p.ring)]
			for _, e := range divide(a, b, corners) {
				if beyond(s, e[0], e[1]) == other {
					parts = append(parts, e)
				}
			}
		}
	}
	return chains(parts)
}

// beyond names the ground a millimetre to the right of the middle of a→b,
// which is outside of a counter-clockwise ring.
func beyond(s surface, a, b place) string {
	du, dv := b.u-a.u, b.v-a.v
	f := 0.001 / math.Sqrt(float64(du*du)+float64(dv*dv))
	return s.top(float64((a.u+b.u)/2)+float64(f*dv), float64((a.v+b.v)/2)-float64(f*du)).name
}

// divide cuts a→b at every corner that lies on it to a micrometre. Parts
// shorter than a millimetre are left out.
func divide(a, b place, corners []place) [][2]place {
	length := distance(a, b)
	if length < 1e-3 {
		return nil
	}
	type stop struct {
		t float64
		p place
	}
	stops := []stop{{0, a}, {length, b}}
	for _, c := range corners {
		t := (float64((c.u-a.u)*(b.u-a.u)) + float64((c.v-a.v)*(b.v-a.v))) / length
		if t < 1e-3 || t > length-1e-3 || math.Abs(corner(a, b, c))/length > 1e-6 {
			continue
		}
		stops = append(stops, stop{t, c})
	}
	slices.SortFunc(stops, func(x, y stop) int { return cmp.Compare(x.t, y.t) })
	var parts [][2]place
	for i := 1; i < len(stops); i++ {
		if stops[i].t-stops[i-1].t > 1e-3 {
			parts = append(parts, [2]place{stops[i-1].p, stops[i].p})
		}
	}
	return parts
}

func distance(a, b place) float64 {
	du, dv := b.u-a.u, b.v-a.v
	return math.Sqrt(float64(du*du) + float64(dv*dv))
}

// chains joins parts end to start. Places count as one when they agree to a
// tenth of a millimetre. Places in the middle of a straight run are dropped.
func chains(parts [][2]place) []line {
	type key [2]int64
	at := func(p place) key {
		return key{int64(math.Round(p.u * 1e4)), int64(math.Round(p.v * 1e4))}
	}
	slices.SortFunc(parts, func(x, y [2]place) int {
		return cmp.Or(cmp.Compare(x[0].u, y[0].u), cmp.Compare(x[0].v, y[0].v))
	})
	from := map[key]int{} // start of a part -> its number + 1
	into := map[key]bool{}
	for i, p := range parts {
		from[at(p[0])] = i + 1
		into[at(p[1])] = true
	}
	used := make([]bool, len(parts))
	follow := func(i int) line {
		l := line{parts[i][0]}
		for !used[i] {
			used[i] = true
			l = append(l, parts[i][1])
			next := from[at(parts[i][1])]
			if next == 0 {
				break
			}
			i = next - 1
		}
		return l.straightened()
	}
	var out []line
	for i, p := range parts { // open chains begin where nothing arrives
		if !used[i] && !into[at(p[0])] {
			out = append(out, follow(i))
		}
	}
	for i := range parts { // what is left is closed
		if !used[i] {
			out = append(out, follow(i))
		}
	}
	return out
}

// straightened drops the places between which a line does not turn.
func (l line) straightened() line {
	out := line{l[0]}
	for i := 1; i+1 < len(l); i++ {
		a, b := out[len(out)-1], l[i+1]
		if math.Abs(corner(a, b, l[i]))/distance(a, b) > 1e-5 {
			out = append(out, l[i])
		}
	}
	return append(out, l[len(l)-1])
}

// every returns the places of a line with others put in between, so that
// neighbours are at most step apart.
func (l line) every(step float64) line {
	out := line{l[0]}
	for i := 1; i < len(l); i++ {
		a, b := l[i-1], l[i]
		n := math.Ceil(distance(a, b) / step)
		for k := 1.0; k < n; k++ {
			t := k / n
			out = append(out, place{a.u + float64(t*(b.u-a.u)), a.v + float64(t*(b.v-a.v))})
		}
		out = append(out, b)
	}
	return out
}
