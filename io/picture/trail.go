package picture

import (
	"fmt"

	"github.com/paulmach/orb"
)

// The look of flow lines and arrows on a Map.
const (
	trailInk   = "#8a5a12"
	trailWidth = .3
)

// Trail draws a flow line, with the head of an arrow at its end.
func (m *Map) Trail(points orb.LineString, title string) error {
	spots, err := m.drawn(points, "flow line")
	if err != nil || spots == nil {
		return err
	}
	m.group("trail "+title, `stroke="`+trailInk+`" stroke-width="`+mm(trailWidth)+`" stroke-linejoin="round"`, title)
	m.put(`<path d="`)
	m.buf = way(m.buf, spots)
	m.put("\"/>\n")
	m.hasTrail = true
	// The head shows the way of the last two millimetres or so.
	end := m.frame.place(points[len(points)-1])
	for i := len(points) - 2; i >= 0; i-- {
		p := m.frame.place(points[i])
		if dx, dy := end[0]-p[0], end[1]-p[1]; length(dx, dy) > 200 || i == 0 && length(dx, dy) > 10 {
			l := length(dx, dy)
			m.arrowHead(end[0]/100, end[1]/100, dx/l, -dy/l, 1.8, trailInk)
			break
		}
	}
	return m.err
}

// Arrow draws an arrow of so many millimetres about a place.
func (m *Map) Arrow(at orb.Point, azimuth, long float64) error {
	if !isFinite(at[0]) || !isFinite(at[1]) || !(azimuth >= -360 && azimuth <= 720) || !isFinite(long) {
		return &InputError{"arrow", fmt.Sprintf("(%v, %v), azimuth %v, length %v", at[0], at[1], azimuth, long), "finite numbers, the azimuth in degrees"}
	}
	p := m.frame.place(at)
	s, k := turn(azimuth)
	x, y := p[0]/100, p[1]/100
	hx, hy := float64(long/2*s), float64(long/2*k)
	m.group("arrows", `stroke="`+indexInk+`" stroke-width=".25"`, "direction of flow")
	m.put(`<path d="M`, mm(x-hx), " ", mm(y+hy), "L", mm(x+hx), " ", mm(y-hy), "\"/>\n")
	m.arrowHead(x+hx, y-hy, s, k, min(1.6, long/2), indexInk)
	m.hasArrow = true
	return m.err
}

// PerMM returns the ground that a millimetre of paper shows.
func (m *Map) PerMM() float64 { return m.frame.perMM }
