package geojson

import (
	"fmt"
	"math"
	"strconv"

	"github.com/paulmach/orb"
)

// Coordinates are nested lists, and what they mean depends on a type that may stand behind them. So they are taken as they
// come: all positions in one list, and for every depth the ends of its lists, counted in parts one depth further in.
//
//	MultiPolygon   [ [ [ [x,y], [x,y], ... ], hole ], polygon ]
//	depth          1 2 3 4
//
//	ends[3]  after which position each ring ends      places[k]  where ring k begins, for messages
//	ends[2]  after which ring each polygon ends
//	ends[1]  after which polygon everything ends
//	depth 4  that of the positions
type coordinates struct {
	at     place // where the whole begins
	depth  int   // of the positions, 0 while there is none
	points []orb.Point
	z      []float64 // NaN where a position has none
	ends   [5][]int
	places []place
	// deepestEmpty is the depth of the innermost list that holds nothing.
	deepestEmpty int
	withZ        int
}

// depthMost is that of the positions of a MultiPolygon.
const depthMost = 4

// sizes of a number beside 0 that the whole of this module accepts.
const smallest, largest = 1e-60, 1e60

func (c *coordinates) reset(at place) {
	c.at, c.depth, c.deepestEmpty, c.withZ = at, 0, 0, 0
	c.points, c.z, c.places = c.points[:0], c.z[:0], c.places[:0]
	for i := range c.ends {
		c.ends[i] = c.ends[i][:0]
	}
}

// count returns how many parts of depth d have been completed.
func (c *coordinates) count(d int) int {
	if d == c.depth {
		return len(c.points)
	}
	if d > depthMost {
		return 0
	}
	return len(c.ends[d])
}

// list takes a list at depth d and everything in it.
func (r *Reader) list(c *coordinates, d int) error {
	s := &r.scan
	if got, err := s.peek("'['"); err != nil {
		return err
	} else if got != '[' {
		return s.unexpected("a list of coordinates in square brackets")
	}
	at := s.here()
	s.pos++
	got, err := s.peek("a position")
	if err != nil {
		return err
	}
	switch got {
	case '[':
	case ']':
		s.pos++
		if c.depth != 0 && d >= c.depth {
			return s.fault(at, Structure, "position", "", "2 or 3 numbers, not none", nil)
		}
		c.deepestEmpty = max(c.deepestEmpty, d)
		return r.close(c, d, at)
	default:
		return r.position(c, d, at)
	}
	if d >= depthMost || c.depth != 0 && d >= c.depth {
		return s.fault(at, Structure, "coordinates", "", fmt.Sprintf("numbers %d brackets deep, not further brackets", d), nil)
	}
	for first := true; ; first = false {
		ok, err := s.next(first, ']')
		if err != nil {
			return err
		}
		if !ok {
			return r.close(c, d, at)
		}
		if err := r.list(c, d+1); err != nil {
			return err
		}
	}
}

// close ends a list at depth d.
func (r *Reader) close(c *coordinates, d int, at place) error {
	if err := r.use(1); err != nil {
		return err
	}
	c.ends[d] = append(c.ends[d], c.count(d+1))
	if d == c.depth-1 {
		c.places = append(c.places, at)
	}
	return nil
}

// position takes the numbers of a position, the bracket of which is taken.
func (r *Reader) position(c *coordinates, d int, at place) error {
	s := &r.scan
	if c.depth == 0 {
		if d <= c.deepestEmpty {
			return s.fault(at, Structure, "coordinates", "", "positions, or none, all at one depth of brackets", nil)
		}
		c.depth = d
	}
	if d != c.depth {
		return s.fault(at, Structure, "position", "", fmt.Sprintf("%d brackets around each position, as at the first, not %d", c.depth, d), nil)
	}
	p := [3]float64{2: math.NaN()}
	n := 0
	for first := true; ; first = false {
		ok, err := s.next(first, ']')
		if err != nil {
			return err
		}
		if !ok {
			break
		}
		if n == numbersMost {
			return s.fault(s.here(), TooBig, "position", "", "at most "+strconv.Itoa(numbersMost)+" numbers", nil)
		}
		if _, err := s.peek("a number"); err != nil {
			return err
		}
		begin := s.here()
		v, literal, _, err := s.number(axis(n))
		if err != nil {
			return err
		}
		if size := math.Abs(v); size != 0 && !(size >= smallest && size <= largest) || v == 0 && !isZero(literal) {
			return s.fault(begin, BadNumber, axis(n), string(literal), "0 or a number from 1e-60 to 1e60 in size", nil)
		}
		if n < 3 {
			p[n] = v + 0 // -0 becomes 0
		}
		n++
	}
	if n < 2 {
		return s.fault(at, Structure, "position", "", "2 or 3 numbers, not "+strconv.Itoa(n), nil)
	}
	if n > 3 {
		r.warn(ExtraNumbers, "", at)
	}
	if err := r.use(1); err != nil {
		return err
	}
	c.points = append(c.points, orb.Point{p[0], p[1]})
	c.z = append(c.z, p[2])
	if n > 2 {
		c.withZ++
	}
	return nil
}

// numbersMost bounds a position; three are more than most files have.
const numbersMost = 64

// isZero reports whether a number that reads as zero is one, and not something below the range of doubles.
func isZero(literal []byte) bool {
	for _, c := range literal {
		if c >= '1' && c <= '9' {
			return false
		}
		if c|0x20 == 'e' {
			break
		}
	}
	return true
}

func axis(n int) string {
	if n < 3 {
		return "xyz"[n : n+1]
	}
	return "number " + strconv.Itoa(n+1) + " of a position"
}
