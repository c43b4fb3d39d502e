package picture

import (
	"fmt"
	"strconv"
)

// Close writes frame, labels and legend and ends the picture. It does not close the io.Writer.
func (m *Map) Close() (Report, error) {
	if m.done {
		return m.report, m.err
	}
	m.done = true
	m.group("", "", "")
	m.levels()
	m.border()
	top := m.legendTop()
	if len(m.opt.Bands) > 0 {
		m.bandBar(top)
		top += 13
	}
	m.bar(top)
	m.samples(top)
	y := m.legendTop() + m.legendHeight()
	for i, note := range m.notes {
		m.words(marginSide, y+letters+float64(float64(i)*1.4*letters), letters, "start", note)
	}
	m.put("</svg>\n")
	m.flush()
	return m.report, m.err
}

// levels writes the texts of levels, each on a patch of paper that hides the line behind it.
func (m *Map) levels() {
	labels := m.placer.chosen()
	m.report.Labels = len(labels)
	if len(labels) == 0 {
		return
	}
	m.put(`<g font-size="`, mm(levelSize), `" text-anchor="middle" fill="`, indexInk, "\">\n")
	solid := ".8"
	if len(m.opt.Bands) > 0 {
		solid = ".65" // let the colours through
	}
	for _, l := range labels {
		w := l.half/50 - .4
		m.put(`<g transform="matrix(`, fixed4(l.ux), " ", fixed4(l.uy), " ", fixed4(-l.uy), " ", fixed4(l.ux), " ", mm(l.x/100), " ", mm(l.y/100), `)">`,
			`<rect x="`, mm(-w/2), `" y="`, mm(-.55*levelSize), `" width="`, mm(w), `" height="`, mm(1.1*levelSize), `" fill="#fff" fill-opacity="`, solid, `"/>`,
			`<text y="`, mm(.36*levelSize), `">`, escape(l.text), "</text></g>\n")
	}
	m.put("</g>\n")
}

// fixed4 returns a sine or cosine as text.
func fixed4(v float64) string {
	n := int(hundredths(10000 * v))
	if n < 0 {
		return "-" + fixed4(-v)
	}
	return fmt.Sprintf("%d.%04d", n/10000, n%10000)
}

func (m *Map) border() {
	f := &m.frame
	m.put(`<rect x="`, mm(f.left), `" y="`, mm(f.top), `" width="`, mm(f.width), `" height="`, mm(f.height), `" stroke="`, ink, `" stroke-width=".25"/>`, "\n")
	low, high := corners(f.ground)
	m.words(f.left, f.top+f.height+1.25*letters, letters, "start", low)
	m.words(f.left+f.width, f.top-.4*letters, letters, "end", high)
}

// bar draws the scale bar, half of it filled, and an arrow to the north.
func (m *Map) bar(top float64) {
	f := &m.frame
	ground, long := scaleBar(min(50, f.width), f.perMM)
	x, y := marginSide, top+letters+1.5
	m.put(`<g stroke="`, ink, `" stroke-width=".2">`,
		`<rect x="`, mm(x), `" y="`, mm(y), `" width="`, mm(long/2), `" height="1.4" fill="`, ink, `"/>`,
		`<rect x="`, mm(x+float64(long/2)), `" y="`, mm(y), `" width="`, mm(long/2), `" height="1.4" fill="#fff"/></g>`, "\n")
	m.words(x, y-1, letters, "start", "0")
	m.words(x+long, y-1, letters, "middle", ground.String())
	unit := unitName(m.opt.Labels.XYUnit)
	if unit == "" {
		unit = "unit not stated"
	}
	m.words(x, y+1.4+1.3*letters, letters, "start", unit)
	ax, ay := marginSide+legendLeast/2-12, top+1.
	m.put(`<path d="M`, mm(ax), " ", mm(ay+4.4), `l1.6 5.6-1.6-1.2-1.6 1.2z" fill="`, ink, `"/>`, "\n")
	m.words(ax, ay+3.4, letters, "middle", "N")
}

// samples shows what each kind of line is.
func (m *Map) samples(top float64) {
	x := marginSide + legendLeast/2
	row := 0
	sample := func(attributes, text string) {
		y := top + 2.2 + float64(float64(row)*legendRow)
		m.put(`<path d="M`, mm(x), " ", mm(y), `h12" `, attributes, "/>\n")
		m.words(x+15, y+.36*letters, letters, "start", text)
		row++
	}
	interval := "levels as listed"
	if m.opt.Interval != "" {
		interval = "interval " + withUnit(m.opt.Interval, m.opt.Labels.ZUnit)
	}
	if m.hasIndex {
		text := "index line"
		if m.opt.IndexEvery > 0 {
			text += ", every " + ordinal(m.opt.IndexEvery)
		}
		sample(`stroke="`+indexInk+`" stroke-width="`+mm(indexWidth)+`"`, text)
	}
	if m.hasLines {
		sample(`stroke="`+lineColour+`" stroke-width="`+mm(lineWidth)+`"`, interval)
	}
	if m.hasRim {
		sample(`stroke="`+rimColour+`" stroke-width="`+mm(rimWidth)+`" stroke-dasharray="3 .8 .5 .8"`, "edge of the surface")
	}
	if m.hasTrail {
		sample(`stroke="`+trailInk+`" stroke-width="`+mm(trailWidth)+`"`, "flow line")
	}
	if m.hasArrow {
		m.arrowHead(x+12, top+2.2+float64(float64(row)*legendRow), 1, 0, 1.6, indexInk)
		sample(`stroke="`+indexInk+`" stroke-width=".25"`, "direction of flow")
	}
	if m.report.Dots > 0 {
		y := top + 2.2 + float64(float64(row)*legendRow)
		m.put(`<circle cx="`, mm(x+6), `" cy="`, mm(y), `" r="`, mm(max(m.dotRadius, dotMost/2)), `" fill="`, dotColour, "\"/>\n")
		m.words(x+15, y+.36*letters, letters, "start", "reading")
	}
}

func ordinal(n int) string {
	end := "th"
	if n%100 < 11 || n%100 > 13 {
		switch n % 10 {
		case 1:
			end = "st"
		case 2:
			end = "nd"
		case 3:
			end = "rd"
		}
	}
	return strconv.Itoa(n) + end
}

// bandBar draws the colours of the bands with as many levels as there is room for.
func (m *Map) bandBar(top float64) {
	levels := m.opt.Bands
	const high = 4.
	long := min(m.width-2*marginSide, 140)
	each := long / float64(len(levels)+1)
	for k := range len(levels) + 1 {
		colour := m.bandColour(k)
		m.put(`<rect x="`, mm(marginSide+float64(float64(k)*each)), `" y="`, mm(top), `" width="`, mm(each), `" height="`, mm(high), `" fill="`, colour, `" stroke="`, colour, `" stroke-width=".05"/>`, "\n")
	}
	m.put(`<rect x="`, mm(marginSide), `" y="`, mm(top), `" width="`, mm(long), `" height="`, mm(high), `" stroke="`, ink, `" stroke-width=".2"/>`, "\n")
	every := bandStride(levels, each)
	for k := every - 1; k < len(levels); k += every {
		x := marginSide + float64(float64(k+1)*each)
		m.put(`<path d="M`, mm(x), " ", mm(top), "v", mm(high+1), `" stroke="`, ink, `" stroke-width=".2"/>`, "\n")
		m.words(x, top+high+1+letters, letters, "middle", levels[k])
	}
}

// bandStride returns how many levels there are from one that has its text written to the next, with each of the scale between two
// levels: 1, 2, 5, 10, ...
func bandStride(levels []string, each float64) int {
	widest := 0.0
	for _, l := range levels {
		widest = max(widest, float64(textWidth(l, letters))+1.6)
	}
	for power := 1; ; power *= 10 {
		for _, digit := range []int{1, 2, 5} {
			if n := digit * power; float64(n)*each >= widest || n >= len(levels) {
				return min(n, len(levels))
			}
		}
	}
}
