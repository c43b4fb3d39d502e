package picture

import (
	"fmt"
	"io"
	"math"
	"strconv"

	"isofacet/grid/decimal"
)

// RoseArrow is one direction of a rose.
type RoseArrow struct {
	Name    string
	Azimuth float64 // degrees clockwise from north
	Spread  float64 // standard uncertainty in degrees; NaN or 0 if unknown
	Size    float64 // gradient
	Faint   bool    // not to be relied on
}

// RoseOptions say what a rose shows beside its arrows.
type RoseOptions struct {
	Title string
	Notes []string
}

// The look of roses.
const (
	roseRadius = 60.
	roseRows   = 5.2
)

// WriteRose draws directions as SVG: an arrow each from the middle, as long as its gradient, north up, with a wedge one standard
// uncertainty to either side; rings at round gradients; and a list of the arrows below. Faint arrows are dashed.
//
// It returns an *InputError for no arrows or a number that is not finite.
func WriteRose(w io.Writer, arrows []RoseArrow, opt RoseOptions) error {
	longest := 0.0
	for _, a := range arrows {
		if !(a.Azimuth >= -360 && a.Azimuth <= 720) || !isFinite(a.Size) || a.Size < 0 {
			return &InputError{"arrow " + a.Name, fmt.Sprintf("azimuth %v, size %v", a.Azimuth, a.Size), "an azimuth in degrees, and a size"}
		}
		longest = max(longest, a.Size)
	}
	if len(arrows) == 0 || !(longest > 0) {
		return &InputError{"rose", "no arrow with a size", "at least one"}
	}
	c := &rose{canvas: canvas{w: w}, arrows: arrows, opt: opt}
	c.step = roundUp(longest / 4)
	c.full = float64(c.step.Float64() * math.Ceil(longest/c.step.Float64()))
	c.draw()
	c.flush()
	return c.err
}

type rose struct {
	canvas
	arrows []RoseArrow
	opt    RoseOptions
	step   decimal.Number // of the rings
	full   float64        // the gradient at the rim
	x, y   float64        // the middle
}

func (c *rose) draw() {
	const row = 1.35 * letters
	width := 2*roseRadius + 2*marginSide + 30
	titles := wrap(c.opt.Title, titleSize, width-2*marginSide)
	var notes []string
	for _, n := range c.opt.Notes {
		notes = append(notes, wrap(n, letters, width-2*marginSide)...)
	}
	top := marginTop + float64(float64(len(titles))*1.3*titleSize) + 6
	c.x, c.y = width/2, top+roseRadius
	list := c.y + roseRadius + 12
	height := list + float64(float64(len(c.arrows))*roseRows) + float64(float64(len(notes)+1)*row) + marginFoot
	ws, hs := mm(width), mm(height)
	c.put(`<svg xmlns="http://www.w3.org/2000/svg" width="`, ws, `mm" height="`, hs, `mm" viewBox="0 0 `, ws, " ", hs, `" font-family="sans-serif" fill="none">`, "\n")
	if c.opt.Title != "" {
		c.put("<title>", escape(c.opt.Title), "</title>\n")
	}
	c.put(`<rect width="`, ws, `" height="`, hs, `" fill="#fff"/>`, "\n")
	for i, line := range titles {
		c.words(marginSide, marginTop+titleSize+float64(float64(i)*1.3*titleSize), titleSize, "start", line)
	}
	c.rings()
	for i := range c.arrows {
		c.wedge(&c.arrows[i], i)
	}
	for i := range c.arrows {
		c.arrow(&c.arrows[i], i)
	}
	c.numbers()
	for i, a := range c.arrows {
		y := list + float64(float64(i)*roseRows)
		ink := profileInks[i%len(profileInks)]
		c.put(`<path d="M`, mm(marginSide), " ", mm(y-.36*letters), `h8" stroke="`, ink.colour, `" stroke-width=".6"`, faint(a.Faint), "/>\n")
		text := fmt.Sprintf("%d  %s: %.4g towards %.1f degrees", i+1, a.Name, a.Size, a.Azimuth)
		if a.Spread > 0 {
			text += fmt.Sprintf(" ± %.1f", a.Spread)
		}
		c.words(marginSide+11, y, letters, "start", text)
	}
	foot := list + float64(float64(len(c.arrows))*roseRows)
	for i, note := range notes {
		c.words(marginSide, foot+float64(float64(i)*row), letters, "start", note)
	}
	c.put("</svg>\n")
}

func faint(is bool) string {
	if is {
		return ` stroke-dasharray="1.2 .9"`
	}
	return ""
}

// rings draws round gradients and the eight winds.
func (c *rose) rings() {
	for _, n := range multiples(c.step, c.step.Float64(), c.full*(1+1e-9), 20) {
		r := float64(n.Float64() / c.full * roseRadius)
		c.put(`<circle cx="`, mm(c.x), `" cy="`, mm(c.y), `" r="`, mm(r), `" stroke="`, gridColour, `" stroke-width=".2"/>`, "\n")
		c.words(c.x+1, c.y-r+letters, levelSize, "start", n.String())
	}
	for i, name := range []string{"N", "E", "S", "W"} {
		dx, dy := winds[i][0], winds[i][1]
		c.put(`<path d="M`, mm(c.x), " ", mm(c.y), "L", mm(c.x+float64(dx*roseRadius)), " ", mm(c.y+float64(dy*roseRadius)), `" stroke="`, gridColour, `" stroke-width=".2"/>`, "\n")
		c.words(c.x+float64(dx*(roseRadius+3.5)), c.y+float64(dy*(roseRadius+3.5))+.36*letters, letters, "middle", name)
	}
}

var winds = [4][2]float64{{0, -1}, {1, 0}, {0, 1}, {-1, 0}}

// at is the place on the paper at an azimuth, as far from the middle as a gradient says.
func (c *rose) at(azimuth, size float64) (x, y float64) {
	s, k := turn(azimuth)
	r := float64(size / c.full * roseRadius)
	return c.x + float64(r*s), c.y - float64(r*k)
}

// wedge shades one uncertainty to either side.
func (c *rose) wedge(a *RoseArrow, i int) {
	if !(a.Spread > 0 && a.Spread < 90) {
		return
	}
	x1, y1 := c.at(a.Azimuth-a.Spread, a.Size)
	x2, y2 := c.at(a.Azimuth+a.Spread, a.Size)
	r := mm(float64(a.Size/c.full) * roseRadius)
	c.put(`<path d="M`, mm(c.x), " ", mm(c.y), "L", mm(x1), " ", mm(y1), "A", r, " ", r, " 0 0 1 ", mm(x2), " ", mm(y2), `z" fill="`, profileInks[i%len(profileInks)].colour, `" fill-opacity=".12"/>`, "\n")
}

func (c *rose) arrow(a *RoseArrow, i int) {
	ink := profileInks[i%len(profileInks)].colour
	x, y := c.at(a.Azimuth, a.Size)
	c.put(`<path d="M`, mm(c.x), " ", mm(c.y), "L", mm(x), " ", mm(y), `" stroke="`, ink, `" stroke-width=".6"`, faint(a.Faint), `><title>`, escape(a.Name), "</title></path>\n")
	east, north := turn(a.Azimuth)
	c.arrowHead(x, y, east, north, 2.6, ink)
}

// numbers writes the number of each arrow beyond its tip, above all arrows; arrows
// that end at nearly one place share one text.
func (c *rose) numbers() {
	type label struct {
		x, y float64
		text string
	}
	var all []label
next:
	for i := range c.arrows {
		a := &c.arrows[i]
		x, y := c.at(a.Azimuth, a.Size)
		east, north := turn(a.Azimuth)
		x, y = x+float64(2.4*east), y-float64(2.4*north)
		for k := range all {
			l := &all[k]
			if math.Abs(l.x-x) < 1.2*levelSize && math.Abs(l.y-y) < levelSize {
				l.text += ", " + strconv.Itoa(i+1)
				continue next
			}
		}
		all = append(all, label{x, y, strconv.Itoa(i + 1)})
	}
	for _, l := range all {
		c.put(`<g stroke="#fff" stroke-width=".8" stroke-linejoin="round">`, "\n")
		c.words(l.x, l.y+.36*levelSize, levelSize, "middle", l.text)
		c.put("</g>\n")
		c.words(l.x, l.y+.36*levelSize, levelSize, "middle", l.text)
	}
}

// arrowHead draws the head of an arrow whose tip is at (x, y), in the direction of a unit vector.
func (c *canvas) arrowHead(x, y, s, k, size float64, colour string) {
	bx, by := x-float64(size*s), y+float64(size*k)
	wx, wy := float64(.36*size*k), float64(.36*size*s)
	c.put(`<path d="M`, mm(x), " ", mm(y), "L", mm(bx+wx), " ", mm(by+wy), "L", mm(bx-wx), " ", mm(by-wy), `z" fill="`, colour, "\"/>\n")
}
