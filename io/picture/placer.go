package picture

import "math"

// placer finds places for the texts of levels: few, each on a straight stretch of its line, none over another.
//
// Index lines are labelled, or all lines if there is no index line. A line gets a text about every labelEvery of its
// length; the straightest place nearby that is free is taken, and a line shorter than a few texts has none.
type placer struct {
	frame       *frame
	index, rest crowd
	along       []float64 // scratch: the way along the line to each spot
}

// All in hundredths of a millimetre.
const (
	labelEvery = 11000
	labelLook  = 2500 // how far to either side a better place is looked for
	labelStep  = 150
	labelApart = 1400 // between the middles of two texts
	straight   = 0.97 // chord over way, at least
)

// label is a text on a line.
type label struct {
	text   string
	x, y   float64 // its middle
	ux, uy float64 // the way it reads
	half   float64 // of its width
}

// crowd is labels, in order, and by squares of the size labelApart.
type crowd struct {
	labels  []label
	squares map[spot][]int32
}

func newPlacer(f *frame) placer {
	return placer{frame: f, index: crowd{squares: map[spot][]int32{}}, rest: crowd{squares: map[spot][]int32{}}}
}

// chosen returns the labels to write.
func (p *placer) chosen() []label {
	if len(p.index.labels) > 0 {
		return p.index.labels
	}
	return p.rest.labels
}

// offer labels a line, if there is a place.
func (p *placer) offer(line []spot, text string, index bool) {
	to := &p.rest
	if index {
		to, p.rest = &p.index, crowd{squares: map[spot][]int32{}} // from now on only index lines count
	} else if len(p.index.labels) > 0 {
		return
	}
	half := float64(50*textWidth(text, levelSize)) + 40
	p.along = append(p.along[:0], 0)
	for i := 1; i < len(line); i++ {
		p.along = append(p.along, p.along[i-1]+length(float64(line[i].x-line[i-1].x), float64(line[i].y-line[i-1].y)))
	}
	total := p.along[len(line)-1]
	if total < 5*half {
		return
	}
	n := 1 + int(total/labelEvery)
	for k := range n {
		middle := (float64(k) + 0.5) * total / float64(n)
		best, score := label{}, straight
		look := min(labelLook, total/float64(2*n))
		for at := max(middle-look, half); at <= min(middle+look, total-half); at += labelStep {
			a, b := p.point(line, at-half), p.point(line, at+half)
			chord := length(b[0]-a[0], b[1]-a[1])
			if s := chord / (2 * half); s > score {
				l := label{text: text, half: half, x: (a[0] + b[0]) / 2, y: (a[1] + b[1]) / 2, ux: (b[0] - a[0]) / chord, uy: (b[1] - a[1]) / chord}
				if l.ux < 0 || l.ux == 0 && l.uy > 0 {
					l.ux, l.uy = -l.ux, -l.uy // never upside down; upright ones read upward
				}
				if p.inside(&l) && to.free(&l) {
					best, score = l, s
				}
			}
		}
		if best.text != "" {
			to.add(best)
		}
	}
}

// point returns the place at a way along the line.
func (p *placer) point(line []spot, at float64) [2]float64 {
	lo, hi := 0, len(line)-1
	for hi-lo > 1 {
		if mid := (lo + hi) / 2; p.along[mid] <= at {
			lo = mid
		} else {
			hi = mid
		}
	}
	t := 0.0
	if d := p.along[hi] - p.along[lo]; d > 0 {
		t = (at - p.along[lo]) / d
	}
	a, b := line[lo], line[hi]
	return [2]float64{float64(a.x) + float64(t*float64(b.x-a.x)), float64(a.y) + float64(t*float64(b.y-a.y))}
}

// inside reports whether the text keeps off the frame.
func (p *placer) inside(l *label) bool {
	f := p.frame
	reachX := float64(math.Abs(l.ux)*l.half) + float64(math.Abs(l.uy)*100)
	reachY := float64(math.Abs(l.uy)*l.half) + float64(math.Abs(l.ux)*100)
	return l.x-reachX > 100*f.left && l.x+reachX < 100*(f.left+f.width) && l.y-reachY > 100*f.top && l.y+reachY < 100*(f.top+f.height)
}

func square(l *label) spot { return spot{int32(l.x / labelApart), int32(l.y / labelApart)} }

func (c *crowd) free(l *label) bool {
	s := square(l)
	for dx := int32(-1); dx <= 1; dx++ {
		for dy := int32(-1); dy <= 1; dy++ {
			for _, k := range c.squares[spot{s.x + dx, s.y + dy}] {
				o := &c.labels[k]
				if length(o.x-l.x, o.y-l.y) < max(labelApart, 1.2*(l.half+o.half)) {
					return false
				}
			}
		}
	}
	return true
}

func (c *crowd) add(l label) {
	s := square(&l)
	c.squares[s] = append(c.squares[s], int32(len(c.labels)))
	c.labels = append(c.labels, l)
}
