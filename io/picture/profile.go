package picture

import (
	"fmt"
	"io"
	"math"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// ProfileOptions say what a drawing of profiles shows beside its lines.
type ProfileOptions struct {
	Title  string
	Labels grid.Labels
	// Along names the horizontal axis: "station", "offset".
	Along string
	// WidthMost and HeightMost bound each panel in millimetres; 0 means 230 and 90.
	WidthMost, HeightMost float64
	Notes                 []string // written below
}

// Panel is one frame of a drawing of profiles: surfaces along one line.
type Panel struct {
	Title    string
	From, To float64 // stations of the ends
	Lines    []ProfileLine
	// Bends are the stations where the line bends, its ends left out.
	Bends []float64
}

// ProfileLine is one surface in a panel: its straight pieces as runs of (station, height).
type ProfileLine struct {
	Name string
	Runs []orb.LineString
}

// ProfileReport says how profiles were drawn.
type ProfileReport struct {
	// Along and Up are the ground that a millimetre shows along the line and in height. Exaggeration is Along / Up.
	Along, Up    float64
	Exaggeration decimal.Number
}

// The look of profiles beside that of maps.
const (
	panelWidth  = 230.
	panelHeight = 90.
	panelSide   = 22. // for elevations left and right
	panelGap    = 14.
	tickLong    = 1.2
	gridColour  = "#dfe2e4"
	gapColour   = "#f1efe9"
	bendColour  = "#75797d"
)

// profileInks are the lines of the first, second and further surfaces.
var profileInks = []struct{ colour, dashes string }{
	{indexInk, ""}, {dotColour, "2.4 1"}, {"#8a6d1f", ".7 .9"}, {"#5b4a8a", "4 1 .7 1"},
}

// WriteProfiles draws profiles as SVG, a panel below the other, all at one scale: stations along the foot, elevations on both
// sides, one line for each surface, and grey where a panel's first surface has none. The exaggeration, the largest of
// 1, 2, 5, 10 and so on that fits, is written below. The lines are simplified as those of a Map are.
//
// It returns an *InputError for a number that is not finite and for no panels.
func WriteProfiles(w io.Writer, panels []Panel, opt ProfileOptions) (ProfileReport, error) {
	d := &profileDrawing{canvas: canvas{w: w}, opt: opt, panels: panels}
	if err := d.measure(); err != nil {
		return ProfileReport{}, err
	}
	d.draw()
	d.flush()
	return d.report, d.err
}

type profileDrawing struct {
	canvas
	opt    ProfileOptions
	panels []Panel
	report ProfileReport

	long, low, high float64 // the longest panel; the range of all heights
	width, height   float64 // of a panel, mm
	places          [][2]float64
	spots           []spot
}

// measure finds the extents and the scales.
func (d *profileDrawing) measure() error {
	if len(d.panels) == 0 {
		return &InputError{"profiles", "none", "at least one"}
	}
	low, high := math.Inf(1), math.Inf(-1)
	for i := range d.panels {
		p := &d.panels[i]
		if !isFinite(p.From) || !isFinite(p.To) || p.To < p.From {
			return &InputError{fmt.Sprintf("profile %d", i+1), fmt.Sprintf("stations %v to %v", p.From, p.To), "finite stations that rise"}
		}
		d.long = max(d.long, p.To-p.From)
		for _, l := range p.Lines {
			for _, run := range l.Runs {
				for _, at := range run {
					if !isFinite(at[0]) || !isFinite(at[1]) {
						return &InputError{fmt.Sprintf("profile %d", i+1), fmt.Sprintf("(%v, %v)", at[0], at[1]), "a finite station and height"}
					}
					low, high = min(low, at[1]), max(high, at[1])
				}
			}
		}
	}
	if low > high {
		low, high = 0, 0 // no surface anywhere
	}
	if !(d.long > 0) {
		d.long = 1
	}
	most := func(asked, otherwise float64) float64 {
		if !(asked > 0) {
			return otherwise
		}
		return max(20, min(asked, 2000))
	}
	widthMost, heightMost := most(d.opt.WidthMost, panelWidth), most(d.opt.HeightMost, panelHeight)
	d.report.Along = d.long / widthMost
	d.width = widthMost
	// Room above and below, and something to see of level ground.
	span := max(high-low, float64(d.long*1e-6), float64((math.Abs(low)+math.Abs(high))*1e-9))
	if high == low {
		span = max(float64(d.long/20), span)
	}
	pad := float64(span / 10)
	fits := float64(heightMost*d.report.Along) / (span + float64(2*pad))
	d.report.Exaggeration = roundDown(fits)
	d.report.Up = d.report.Along / d.report.Exaggeration.Float64()
	step := d.step()
	d.low, d.high = outward(step, low-float64(pad/2), high+float64(pad/2))
	d.height = (d.high - d.low) / d.report.Up
	return nil
}

// step is the distance of elevations that are written: about one a centimetre.
func (d *profileDrawing) step() decimal.Number { return roundUp(float64(10 * d.report.Up)) }

func (d *profileDrawing) draw() {
	const row = 1.35 * letters
	paper := d.width + 2*panelSide
	titles := wrap(d.opt.Title, titleSize, paper-2*marginSide)
	var notes []string
	for _, n := range append([]string{d.scaleNote(), valueNote(d.opt.Labels), placeNote(d.opt.Labels)}, d.opt.Notes...) {
		notes = append(notes, wrap(n, letters, paper-2*marginSide)...)
	}
	names := d.names()
	top := marginTop + float64(float64(len(titles))*1.3*titleSize) + float64(float64(len(names))*row) + 4
	each := d.height + panelGap + row
	foot := top + float64(float64(len(d.panels))*each)
	w, h := mm(paper), mm(foot+float64(float64(len(notes))*row)+marginFoot)
	d.put(`<svg xmlns="http://www.w3.org/2000/svg" width="`, w, `mm" height="`, h, `mm" viewBox="0 0 `, w, " ", h, `" font-family="sans-serif" fill="none">`, "\n")
	if d.opt.Title != "" {
		d.put("<title>", escape(d.opt.Title), "</title>\n")
	}
	d.put(`<rect width="`, w, `" height="`, h, `" fill="#fff"/>`, "\n")
	y := marginTop
	for _, line := range titles {
		y += 1.3 * titleSize
		d.words(marginSide, y-.3*titleSize, titleSize, "start", line)
	}
	for i, name := range names {
		y += row
		ink := profileInks[i%len(profileInks)]
		d.put(`<path d="M`, mm(marginSide), " ", mm(y-.36*letters), `h12" stroke="`, ink.colour, `" stroke-width=".4"`, dashed(ink.dashes), "/>\n")
		d.words(marginSide+15, y, letters, "start", name)
	}
	for i := range d.panels {
		d.panel(&d.panels[i], top+float64(float64(i)*each)+row)
	}
	for i, note := range notes {
		d.words(marginSide, foot+float64(float64(i+1)*row), letters, "start", note)
	}
	d.put("</svg>\n")
}

func dashed(pattern string) string {
	if pattern == "" {
		return ""
	}
	return ` stroke-dasharray="` + pattern + `"`
}

// scaleNote states the scales and the exaggeration.
func (d *profileDrawing) scaleNote() string {
	unit := unitName(d.opt.Labels.XYUnit)
	if unit == "" {
		unit = "units"
	}
	text := fmt.Sprintf("vertical exaggeration %s to 1: 1 mm along is %.4g %s, 1 mm up is %.4g", d.report.Exaggeration, d.report.Along, unit, d.report.Up)
	if d.opt.Labels.ZUnit != "" {
		text += " " + unitName(d.opt.Labels.ZUnit)
	}
	if x, z := d.opt.Labels.XYUnit, d.opt.Labels.ZUnit; x != z {
		text += " (the units differ: the exaggeration is that of the numbers)"
	}
	return text
}

// names are those of the surfaces, if there are several.
func (d *profileDrawing) names() []string {
	var names []string
	for _, p := range d.panels {
		for k, l := range p.Lines {
			if k == len(names) {
				names = append(names, l.Name)
			}
		}
	}
	if len(names) < 2 {
		return nil
	}
	return names
}

// panel draws one frame, whose upper edge is at top.
func (d *profileDrawing) panel(p *Panel, top float64) {
	left := panelSide
	x := func(station float64) float64 { return left + (station-p.From)/d.report.Along }
	y := func(z float64) float64 { return top + (d.high-z)/d.report.Up }
	right := max(x(p.To), left+.01)
	d.words(left, top-1.2, letters, "start", p.Title)
	d.gaps(p, x, top)
	step := d.step()
	for _, n := range multiples(step, d.low, d.high, 200) {
		at := y(n.Float64())
		d.put(`<path d="M`, mm(left), " ", mm(at), "H", mm(right), `" stroke="`, gridColour, `" stroke-width=".13"/>`, "\n")
		d.words(left-1.5, at+.36*levelSize, levelSize, "end", n.String())
		d.words(right+1.5, at+.36*levelSize, levelSize, "start", n.String())
	}
	for _, n := range multiples(roundUp(float64(22*d.report.Along)), p.From, p.To, 200) {
		at := x(n.Float64())
		d.put(`<path d="M`, mm(at), " ", mm(top+d.height), "v", mm(tickLong), `" stroke="`, ink, `" stroke-width=".2"/>`, "\n")
		d.words(at, top+d.height+tickLong+levelSize, levelSize, "middle", n.String())
	}
	d.words(right, top+d.height+tickLong+2.2*levelSize, levelSize, "end", d.opt.Along+", from "+rounded(p.From)+" to "+rounded(p.To))
	for _, b := range p.Bends {
		d.put(`<path d="M`, mm(x(b)), " ", mm(top), "v", mm(d.height), `" stroke="`, bendColour, `" stroke-width=".15" stroke-dasharray=".6 .8"><title>bend of the line at `, rounded(b), "</title></path>\n")
	}
	for k := range p.Lines {
		d.line(&p.Lines[k], k, x, y)
	}
	d.put(`<rect x="`, mm(left), `" y="`, mm(top), `" width="`, mm(right-left), `" height="`, mm(d.height), `" stroke="`, ink, `" stroke-width=".25"/>`, "\n")
}

// rounded is a station for people.
func rounded(v float64) string {
	return string(numtext.Append(nil, numtext.Rounded(v, 2), numtext.Shortest))
}

// gaps shades where the first surface is missing.
func (d *profileDrawing) gaps(p *Panel, x func(float64) float64, top float64) {
	if len(p.Lines) == 0 {
		return
	}
	at := p.From
	shade := func(to float64) {
		if to > at {
			d.put(`<rect x="`, mm(x(at)), `" y="`, mm(top), `" width="`, mm(x(to)-x(at)), `" height="`, mm(d.height), `" fill="`, gapColour, `"><title>no surface from `,
				rounded(at), " to ", rounded(to), "</title></rect>\n")
		}
	}
	for _, run := range p.Lines[0].Runs {
		if len(run) > 0 {
			shade(run[0][0])
			at = run[len(run)-1][0]
		}
	}
	shade(p.To)
}

// line draws a surface.
func (d *profileDrawing) line(l *ProfileLine, number int, x, y func(float64) float64) {
	ink := profileInks[number%len(profileInks)]
	d.put(`<g stroke="`, ink.colour, `" stroke-width=".4" stroke-linejoin="round"`, dashed(ink.dashes), "><title>", escape(l.Name), "</title>\n")
	for _, run := range l.Runs {
		d.places = d.places[:0]
		for _, at := range run {
			d.places = append(d.places, [2]float64{float64(100 * x(at[0])), float64(100 * y(at[1]))})
		}
		d.spots = simplify(d.spots[:0], d.places)
		if len(d.spots) < 2 {
			continue
		}
		d.put(`<path d="`)
		d.buf = way(d.buf, d.spots)
		d.put("\"/>\n")
	}
	d.put("</g>\n")
}
