package picture

import (
	"cmp"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"

	"github.com/paulmach/orb"

	"isofacet/grid"
)

// MapOptions say what a Map shows beside its lines.
type MapOptions struct {
	Title  string
	Extent orb.Bound // of everything that will be drawn
	Labels grid.Labels
	// Interval is the step between levels as text, without its unit; empty if they are a list.
	Interval string
	// IndexEvery tells that every so manieth level is drawn heavier; 0 if none is.
	IndexEvery int
	// Bands are the texts of the levels between bands, rising; empty if there are no bands.
	Bands []string
	// Rows is how many kinds of lines and marks the legend has room for; 0 means 4.
	Rows int
	// Notes are written below the legend.
	Notes []string
	// WidthMost and HeightMost bound the frame in millimetres; 0 means 180 and 220. Smaller ones than 20 count as 20.
	WidthMost, HeightMost float64
}

// Isoline is one line of a Map.
type Isoline struct {
	Level string // its text
	Index bool
	// Inferred draws it dashed.
	Inferred bool
	Points   orb.LineString
}

// Report says what became of what was given to a Map.
type Report struct {
	Scale    float64 // ground a millimetre of paper
	Points   int     // of lines, outlines and bands
	Drawn    int     // of these
	TooSmall int     // lines and rings that a hundredth of a millimetre holds: not drawn
	Dots     int     // readings drawn
	Covered  int     // readings that would hide behind the dot of another: not drawn
	Labels   int     // of levels
}

// An InputError is something that a picture cannot show.
type InputError struct {
	What     string
	Seen     string
	Expected string
}

func (e *InputError) Error() string {
	return fmt.Sprintf("picture: %s: %s: expected %s", e.What, e.Seen, e.Expected)
}

// The look. Widths and sizes in millimetres.
const (
	ink        = "#2b2f33"
	lineColour = "#47828d"
	indexInk   = "#124c58"
	rimColour  = "#75797d"
	dotColour  = "#b0413e"

	lineWidth  = .13
	indexWidth = .35
	rimWidth   = .25
	dotMost    = .4 // radius
	dotLeast   = .12
	dotMany    = 2000 // so many readings are drawn as large as that; more make smaller dots
	letters    = 2.7  // size of letters
	levelSize  = 2.2
	titleSize  = 4.2

	marginSide  = 8.
	marginTop   = 6.
	marginFoot  = 6.
	legendLeast = 150. // the width that a legend takes
	legendRow   = 4.6
)

// Map writes an SVG picture of isolines, bands, outline and readings, as they come: what comes later lies on top. Labels and legend
// follow at Close. It is not for several goroutines at once.
type Map struct {
	canvas
	opt    MapOptions
	frame  frame
	width  float64 // of the paper
	height float64
	notes  []string
	report Report
	open   string // what the open group holds; empty: none is open

	placer    placer
	hasIndex  bool
	hasLines  bool
	hasRim    bool
	hasTrail  bool
	hasArrow  bool
	dots      map[spot]bool
	dotRadius float64      // of the last readings
	places    [][2]float64 // scratch
	spots     []spot
	done      bool
}

// NewMap begins a picture. It returns a *InputError if the extent is not finite or the wrong way round, and what w returns
// comes out of Close at the latest.
func NewMap(w io.Writer, opt MapOptions) (*Map, error) {
	b := opt.Extent
	if !isFinite(b.Min[0]+b.Min[1]+b.Max[0]+b.Max[1]) || b.Min[0] > b.Max[0] || b.Min[1] > b.Max[1] {
		return nil, &InputError{"extent", fmt.Sprintf("(%v, %v) to (%v, %v)", b.Min[0], b.Min[1], b.Max[0], b.Max[1]), "finite corners, the lower left one first"}
	}
	most := func(asked, otherwise float64) float64 {
		if !(asked > 0) {
			return otherwise
		}
		return max(20, min(asked, 2000))
	}
	m := &Map{canvas: canvas{w: w}, opt: opt, dots: map[spot]bool{}}
	m.frame = newFrame(b, most(opt.WidthMost, 180), most(opt.HeightMost, 220))
	m.report.Scale = m.frame.perMM
	m.layout()
	m.head()
	return m, nil
}

// layout places the parts of the page, top down: title, frame with the coordinates of two corners, legend, notes.
func (m *Map) layout() {
	f := &m.frame
	m.width = max(f.width, legendLeast) + 2*marginSide
	f.left, f.top = marginSide, marginTop
	if title := wrap(m.opt.Title, titleSize, m.width-2*marginSide); len(title) > 0 {
		f.top += float64(float64(len(title))*1.3*titleSize) + 1
	}
	f.top += 1.3 * letters // the upper right corner
	m.notes = nil
	for _, note := range append([]string{valueNote(m.opt.Labels), placeNote(m.opt.Labels)}, m.opt.Notes...) {
		m.notes = append(m.notes, wrap(note, letters, m.width-2*marginSide)...)
	}
	m.height = m.legendTop() + m.legendHeight() + float64(float64(len(m.notes))*1.4*letters) + marginFoot
	m.placer = newPlacer(f)
}

func (m *Map) legendTop() float64 { return m.frame.top + m.frame.height + 1.3*letters + 5 }

func (m *Map) legendHeight() float64 {
	h := float64(float64(max(4, m.opt.Rows))*legendRow) + 2
	if len(m.opt.Bands) > 0 {
		h += 13
	}
	return h
}

func (m *Map) head() {
	w, h := mm(m.width), mm(m.height)
	m.put(`<svg xmlns="http://www.w3.org/2000/svg" width="`, w, `mm" height="`, h, `mm" viewBox="0 0 `, w, " ", h, `" font-family="sans-serif" fill="none">`, "\n")
	if m.opt.Title != "" {
		m.put("<title>", escape(m.opt.Title), "</title>\n")
	}
	m.put(`<rect width="`, w, `" height="`, h, `" fill="#fff"/>`, "\n")
	for i, line := range wrap(m.opt.Title, titleSize, m.width-2*marginSide) {
		m.words(marginSide, marginTop+titleSize+float64(float64(i)*1.3*titleSize), titleSize, "start", line)
	}
}

// group closes the open group and opens another, unless it is the same.
func (m *Map) group(what, attributes, title string) {
	if what == m.open {
		return
	}
	if m.open != "" {
		m.put("</g>\n")
	}
	m.open = what
	if what == "" {
		return
	}
	m.put("<g ", attributes, ">\n")
	if title != "" {
		m.put("<title>", escape(title), "</title>\n")
	}
}

// drawn returns the spots of a line on the paper, at most one if it is too small to see.
func (m *Map) drawn(points []orb.Point, what string) ([]spot, error) {
	m.places = m.places[:0]
	for i, p := range points {
		if !isFinite(p[0]) || !isFinite(p[1]) {
			return nil, &InputError{what + ", point " + strconv.Itoa(i+1), fmt.Sprintf("(%v, %v)", p[0], p[1]), "finite coordinates"}
		}
		m.places = append(m.places, m.frame.place(p))
	}
	m.spots = simplify(m.spots[:0], m.places)
	m.report.Points += len(points)
	if len(m.spots) < 2 {
		m.report.TooSmall++
		return nil, nil
	}
	m.report.Drawn += len(m.spots)
	return m.spots, nil
}

// inferredDash is how inferred lines are drawn: dashes of 2 mm, as is the trade's custom.
const inferredDash = ` stroke-dasharray="2 1.2"`

// Isoline draws a line. Lines of one level that come one behind the other are one group, with the level as its title.
func (m *Map) Isoline(l Isoline) error {
	spots, err := m.drawn(l.Points, "isoline at "+l.Level)
	if err != nil || spots == nil {
		return err
	}
	colour, width, kind := lineColour, lineWidth, "level "
	if l.Index {
		colour, width, kind = indexInk, indexWidth, "index "
	}
	dash := ""
	if l.Inferred {
		kind, dash = "inferred "+kind, inferredDash
	}
	m.group(kind+l.Level, `stroke="`+colour+`" stroke-width="`+mm(width)+`"`+dash+` stroke-linejoin="round" stroke-linecap="round"`, withUnit(l.Level, m.opt.Labels.ZUnit))
	m.put(`<path d="`)
	m.buf = way(m.buf, spots)
	m.put("\"/>\n")
	m.hasLines = true
	m.hasIndex = m.hasIndex || l.Index
	m.placer.offer(spots, l.Level, l.Index)
	return m.err
}

// Outline draws rims of the surface.
func (m *Map) Outline(rings ...orb.Ring) error {
	for _, ring := range rings {
		spots, err := m.drawn(ring, "outline")
		if err != nil {
			return err
		}
		if spots == nil {
			continue
		}
		m.group("outline", `stroke="`+rimColour+`" stroke-width="`+mm(rimWidth)+`" stroke-dasharray="3 .8 .5 .8" stroke-linejoin="round"`, "edge of the surface")
		m.put(`<path d="`)
		m.buf = way(m.buf, spots)
		m.put("\"/>\n")
		m.hasRim = true
	}
	return m.err
}

// Band fills a polygon that lies between two levels: number of MapOptions.Bands below it are at or below its values, from 0 for the
// lowest band to all of them for the highest. It returns a *InputError for other numbers.
func (m *Map) Band(p orb.Polygon, number int) error {
	if number < 0 || number > len(m.opt.Bands) || len(m.opt.Bands) == 0 {
		return &InputError{"band", strconv.Itoa(number), "0 to the number of levels, " + strconv.Itoa(len(m.opt.Bands))}
	}
	begun := false
	for _, ring := range p {
		spots, err := m.drawn(ring, "band")
		if err != nil {
			return err
		}
		if spots == nil {
			continue
		}
		if !begun {
			colour := m.bandColour(number)
			// A hairline of its own colour closes the seams that viewers leave between neighbours.
			m.group("band "+strconv.Itoa(number), `fill="`+colour+`" stroke="`+colour+`" stroke-width=".05" fill-rule="evenodd"`, m.bandName(number))
			m.put(`<path d="`)
			begun = true
		}
		m.buf = way(m.buf, spots)
	}
	if begun {
		m.put("\"/>\n")
	}
	return m.err
}

func (m *Map) bandColour(number int) string {
	r, g, b := heightTint.at(uint32(number), uint32(len(m.opt.Bands)))
	return fmt.Sprintf("#%02x%02x%02x", r, g, b)
}

func (m *Map) bandName(number int) string {
	unit := m.opt.Labels.ZUnit
	switch levels := m.opt.Bands; number {
	case 0:
		return "below " + withUnit(levels[0], unit)
	case len(levels):
		return withUnit(levels[number-1], unit) + " and above"
	default:
		return levels[number-1] + " to " + withUnit(levels[number], unit)
	}
}

// dotApart is how far apart dots are, in hundredths of a millimetre: at most one in each square of that size, the first that comes.
const dotApart = 30

// Readings draws dots, smaller ones if there are many, so that lines below them stay visible. Which of those that would hide each
// other is drawn does not depend on their order.
func (m *Map) Readings(points []orb.Point) error {
	points = slices.Clone(points)
	slices.SortFunc(points, func(p, q orb.Point) int { return cmp.Or(cmp.Compare(p[0], q[0]), cmp.Compare(p[1], q[1])) })
	m.dotRadius = dotMost
	if n := len(points); n > dotMany {
		m.dotRadius = max(dotLeast, dotMost*math.Sqrt(dotMany/float64(n)))
	}
	for _, p := range points {
		if !isFinite(p[0]) || !isFinite(p[1]) {
			return &InputError{"reading", fmt.Sprintf("(%v, %v)", p[0], p[1]), "finite coordinates"}
		}
		at := m.frame.place(p)
		s := spot{hundredths(at[0]), hundredths(at[1])}
		square := spot{s.x / dotApart, s.y / dotApart}
		if m.dots[square] {
			m.report.Covered++
			continue
		}
		m.dots[square] = true
		m.report.Dots++
		m.group("readings", `fill="`+dotColour+`"`, "readings")
		m.put(`<circle cx="`, string(appendHundredths(nil, s.x)), `" cy="`, string(appendHundredths(nil, s.y)), `" r="`, mm(m.dotRadius), "\"/>\n")
	}
	return m.err
}
