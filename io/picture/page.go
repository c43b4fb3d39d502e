package picture

import (
	"fmt"
	"image"
	"image/color"
	"math"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// page is where the parts of a raster's picture stand, top down: title, upper right corner, map, lower left corner, scale bar, scale of
// values, notes.
type page struct {
	width, height int
	margin        int
	title, notes  []string
	bar, scale    int // y of their tops
	foot          int // y of the top of the notes
}

// lay places the parts and makes the image, in white.
func (p *plate) lay() {
	f := p.f
	em := max(15, min(max(f.width, f.height)/60, 160))
	var err error
	if p.pen, err = newPen(em); err == nil {
		p.titlePen, err = newPen(em * 14 / 10)
	}
	if err != nil {
		panic("picture: the font built in cannot be read: " + err.Error())
	}
	g := &p.page
	g.margin = em
	inner := max(f.width, 34*em)
	g.width = inner + 2*g.margin
	g.title = p.titlePen.wrap(p.opt.Title, inner)
	y := g.margin
	if len(g.title) > 0 {
		y += len(g.title)*em*18/10 + em/3
	}
	y += em * 14 / 10 // the upper right corner
	p.at = image.Pt(g.margin, y)
	y += f.height + em*14/10 // the lower left corner
	g.bar = y + em*8/10
	g.scale = g.bar + em*28/10
	g.foot = g.scale + em*47/10
	for _, note := range p.notes() {
		g.notes = append(g.notes, p.pen.wrap(note, inner)...)
	}
	g.height = g.foot + len(g.notes)*em*13/10 + g.margin
	p.img = image.NewRGBA(image.Rect(0, 0, g.width, g.height))
	p.pen.box(p.img, p.img.Rect, color.White)
}

func (p *plate) notes() []string {
	f := p.f
	all := []string{valueNote(p.g.Labels), placeNote(p.g.Labels)}
	if p.times > 0 && f.low == f.low {
		light := "light from the north-west"
		if p.times > 1 {
			light += ", heights times " + string(numtext.Append(nil, p.times, numtext.Shortest)) + " for the shading"
		}
		all = append(all, light)
	}
	if f.cols < p.g.Spec.Cols || f.rows < p.g.Spec.Rows {
		does := "is the mean of"
		if p.g.Labels.Show == azimuths {
			does = "shows one of"
		}
		all = append(all, fmt.Sprintf("each pixel %s about %s x %s nodes", does, about(p.g.Spec.Cols, f.cols), about(p.g.Spec.Rows, f.rows)))
	}
	if f.missing > 0 {
		all = append(all, "hatched: no data")
	}
	return all
}

// about returns a / b with one digit behind the point, or none if it is whole.
func about(a, b int) string {
	return decimalText(math.RoundToEven(10*float64(a)/float64(b)) / 10)
}

func decimalText(v float64) string { return string(numtext.Append(nil, v, numtext.Shortest)) }

// furnish draws everything but the map.
func (p *plate) furnish() {
	g, em := &p.page, p.pen.em
	for i, line := range g.title {
		p.titlePen.words(p.img, g.margin, g.margin+em*14/10+i*em*18/10, fromX, line)
	}
	r := image.Rectangle{p.at, p.at.Add(image.Pt(p.f.width, p.f.height))}
	p.pen.border(p.img, r)
	low, high := rasterCorners(p.g.Spec)
	p.pen.words(p.img, r.Min.X, r.Max.Y+em*12/10, fromX, low)
	p.pen.words(p.img, max(r.Max.X, r.Min.X+p.pen.width(high)), r.Min.Y-em*4/10, upToX, high)
	p.distances()
	if p.f.low == p.f.low {
		p.values()
	} else {
		p.pen.words(p.img, g.margin, g.scale+em*13/10, fromX, "no node has a value")
	}
	for i, line := range g.notes {
		p.pen.words(p.img, g.margin, g.foot+em+i*em*13/10, fromX, line)
	}
}

// rasterCorners returns the texts of the outer corners of the lower left and the upper right cell.
func rasterCorners(s grid.Spec) (lowerLeft, upperRight string) {
	half := func(cell decimal.Number) decimal.Number {
		if s.ValuesAt == grid.Centres {
			return decimal.Number{}
		}
		if h, err := cell.Times(5); err == nil {
			if h, err = decimal.New(h.Unscaled, int(h.Scale)+1); err == nil {
				return h
			}
		}
		return decimal.Number{} // beyond 18 digits: the corner of the nodes then
	}
	text := func(n, away decimal.Number, outward func(decimal.Number, decimal.Number) (decimal.Number, error)) string {
		if moved, err := outward(n, away); err == nil {
			return moved.String()
		}
		return n.String()
	}
	e, x, y := s.Extent(), half(s.CellX), half(s.CellY)
	return "x " + text(e.XMin, x, decimal.Number.Sub) + ", y " + text(e.YMin, y, decimal.Number.Sub),
		"x " + text(e.XMax, x, decimal.Number.Add) + ", y " + text(e.YMax, y, decimal.Number.Add)
}

// distances draws the scale bar, half of it filled, and an arrow to the north.
func (p *plate) distances() {
	g, em := &p.page, p.pen.em
	perPixel := float64(p.f.cellX*float64(p.f.cols)) / float64(p.f.width)
	ground, long := scaleBar(float64(min(14*em, g.width-8*em)), perPixel)
	unit := unitName(p.g.Labels.XYUnit)
	if unit == "" {
		unit = "(unit not stated)"
	}
	x, y, end := g.margin, g.bar+em*12/10, g.margin+int(math.RoundToEven(long))
	r := image.Rect(x, y, end, y+em/2)
	p.pen.box(p.img, r.Inset(-max(1, em/12)), p.pen.ink)
	p.pen.box(p.img, image.Rect((x+end)/2, r.Min.Y, end, r.Max.Y), color.White)
	p.pen.words(p.img, x, y-em*3/10, fromX, "0")
	p.pen.words(p.img, end-p.pen.width(ground.String())/2, y-em*3/10, fromX, ground.String()+" "+unit)
	p.arrow(g.width-g.margin-em, g.bar)
}

// arrow points north: a triangle under an N.
func (p *plate) arrow(x, top int) {
	em := p.pen.em
	p.pen.words(p.img, x, top+em*8/10, aboutX, "N")
	tip, high := top+em, em*12/10
	for dy := range high {
		half := dy * em * 4 / 10 / high
		notch := max(0, dy-high*7/10) // cut out of its foot
		p.pen.box(p.img, image.Rect(x-half, tip+dy, x-notch, tip+dy+1), p.pen.ink)
		p.pen.box(p.img, image.Rect(x+notch, tip+dy, x+half+1, tip+dy+1), p.pen.ink)
	}
}

// values draws the scale of values: lowest and highest above it, round ones below.
func (p *plate) values() {
	g, em := &p.page, p.pen.em
	long := min(g.width-2*g.margin, 30*em)
	r := image.Rect(g.margin, g.scale+em*14/10, g.margin+long, g.scale+em*25/10)
	for x := range long {
		part := uint32(uint64(x) * tintSteps / uint64(long-1))
		if !(p.high > p.low) {
			part = tintSteps / 2
		}
		c := p.tint.light(part, tintSteps).bytes()
		p.pen.box(p.img, image.Rect(r.Min.X+x, r.Min.Y, r.Min.X+x+1, r.Max.Y), color.RGBA{c[0], c[1], c[2], 255})
	}
	p.pen.border(p.img, r)
	span := p.high - p.low
	places := numtext.Shortest
	var ticks []decimal.Number
	if p.g.Labels.Show == azimuths {
		ticks = multiples(decimal.Number{Unscaled: 90}, 0, 360, 5)
		places = 1
	} else if span > 0 && isFinite(span) {
		step := roundUp(span / 6)
		ticks = multiples(step, p.low, p.high, 8)
		places = step.Decimals() + 1
	}
	lowest := "lowest " + string(numtext.Append(nil, p.f.low, places))
	highest := "highest " + string(numtext.Append(nil, p.f.high, places))
	p.pen.words(p.img, r.Min.X, r.Min.Y-em*4/10, fromX, lowest)
	p.pen.words(p.img, max(r.Max.X, r.Min.X+p.pen.width(lowest)+em+p.pen.width(highest)), r.Min.Y-em*4/10, upToX, highest)
	free := math.MinInt
	for _, n := range ticks {
		x := r.Min.X + int(uint64(p.part(n.Float64()))*uint64(long-1)/tintSteps)
		text := n.String()
		half := p.pen.width(text)/2 + em/4
		p.pen.box(p.img, image.Rect(x, r.Max.Y, x+max(1, em/12), r.Max.Y+em*4/10), p.pen.ink)
		if x-half < free || x-half < 0 || x+half > g.width {
			continue
		}
		free = x + half
		p.pen.words(p.img, x, r.Max.Y+em*15/10, aboutX, text)
	}
}
