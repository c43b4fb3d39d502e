package main

import (
	"bufio"
	"cmp"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"slices"

	"isofacet/cmd/internal/advice"
	"isofacet/cmd/internal/report"
	"isofacet/grid/decimal"
	"isofacet/io/readings"
)

// finding is what inspect writes. Every number in it is a function of the set of
// readings; what names files and lines goes to standard error.
type finding struct {
	Readings    counts           `json:"readings"`
	Units       unitsFound       `json:"units"`
	Extent      extents          `json:"extent"`
	Spacing     number           `json:"spacing"`
	Surface     surfaceCounts    `json:"surface"`
	Constraints constraintCounts `json:"constraints"`
	Limits      limitsFound      `json:"limits"`
	Quality     qualityFound     `json:"quality"`
	Suspects    *suspectsFound   `json:"suspects"`
	Suggest     suggestions      `json:"suggest"`
	Warnings    []report.Warning `json:"warnings"`

	reasons [4]string // of the suggestions
}

// unitsFound are the units that the numbers are in, null where unstated.
type unitsFound struct {
	XY *string `json:"xy"`
	Z  *string `json:"z"`
}

func (m *measures) unitsFound() unitsFound {
	stated := func(unit string) *string {
		if unit == "" {
			return nil
		}
		return &unit
	}
	return unitsFound{stated(m.xyOut()), stated(m.zOut())}
}

type counts struct {
	Read    int `json:"read"`
	Used    int `json:"used"`
	Merged  int `json:"merged"`
	LeftOut int `json:"left_out"`
	Refused int `json:"refused"`
}

type extents struct {
	XMin number `json:"xmin"`
	YMin number `json:"ymin"`
	XMax number `json:"xmax"`
	YMax number `json:"ymax"`
	ZMin number `json:"zmin"`
	ZMax number `json:"zmax"`
}

type surfaceCounts struct {
	Vertices        int    `json:"vertices"`
	Triangles       int    `json:"triangles"`
	OutlineVertices int    `json:"outline_vertices"`
	Area            number `json:"area"`
	VolumeAboveZero number `json:"volume_above_zero"`
}

type suggestions struct {
	Cell        suggested `json:"cell"`
	Interval    suggested `json:"interval"`
	MaxEdge     suggested `json:"max_edge"`
	TouchWithin suggested `json:"touch_within"`
}

// suggested is a decimal number, null where there is none.
type suggested struct {
	value decimal.Number
	ok    bool
}

func (s suggested) MarshalJSON() ([]byte, error) {
	if !s.ok {
		return []byte("null"), nil
	}
	return []byte(s.value.String()), nil
}

func (s suggested) String() string {
	if !s.ok {
		return "none"
	}
	return s.value.String()
}

// muchArea is how large a part of the area behind long outer edges may be before
// it is warned of. A tenth of a map is more than anyone overlooks knowingly.
const muchArea = 0.1

// find looks at what was loaded.
func (p *program) find(l *loaded, r *reading, w *writing) (*finding, error) {
	m := l.surface.Mesh()
	c := l.set.Counts
	xy, _ := l.digits(w.decimals)
	spacing := advice.Spacing(m, p.workers())
	cell, interval, edge := advice.Cell(spacing), advice.Interval(l.surface.Z()), advice.MaxEdge(spacing)
	touch := p.touchWithin(l, &r.edges)
	quality, err := l.quality(xy)
	if err != nil {
		return nil, err
	}
	f := &finding{
		Readings:    counts{c.Read, c.Used, c.Merged, c.LeftOut, c.Refused},
		Units:       r.unitsFound(),
		Extent:      l.extents(w.decimals),
		Spacing:     number{spacing, xy},
		Surface:     l.surfaceCounts(w.decimals),
		Constraints: l.constraints(),
		Limits:      l.limits(xy),
		Quality:     quality,
		Suggest: suggestions{
			suggested{cell.Value, cell.OK}, suggested{interval.Value, interval.OK}, suggested{edge.Value, edge.OK},
			suggested{touch.Value, touch.OK},
		},
		reasons: [4]string{cell.Reason, interval.Reason, edge.Reason, touch.Reason},
	}
	if m.NumTriangles() == 0 {
		p.report.Warn("no-surface", cell.Reason)
		return f, nil
	}
	p.warnOfLongOutline(l, edge)
	return f, nil
}

// warnOfLongOutline tells when the convex hull, which nobody chose, stands in for
// the outline of the measured area.
func (p *program) warnOfLongOutline(l *loaded, edge advice.Suggestion) {
	if !edge.OK || l.drawn.trimming || l.drawn.rings.boundaries > 0 {
		return
	}
	share := advice.LongOutline(l.surface.Mesh(), edge.Value.Float64())
	if share > muchArea {
		p.report.Warn("hull-outline", fmt.Sprintf("outer edges longer than %v enclose %.0f %% of the area: the convex hull stands in for an outline there, and values between far readings are guesses",
			edge.Value, 100*share), "share", share, "max_edge", edge.Value.String())
	}
}

// writeJSON writes the finding as one JSON object.
func (f *finding) writeJSON(w io.Writer) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(f)
}

// writeText writes the finding for people, a subject a line.
func (f *finding) writeText(w io.Writer, l *loaded, r *reading) error {
	b := bufio.NewWriter(w)
	line := func(subject, format string, values ...any) {
		fmt.Fprintf(b, "%-10s "+format+"\n", append([]any{subject}, values...)...)
	}
	c, e, s := f.Readings, f.Extent, f.Surface
	line("readings", "%d read: %d used, %d merged, %d left out, %d refused", c.Read, c.Used, c.Merged, c.LeftOut, c.Refused)
	if l.set.SpotCount > 0 {
		line("same spot", "%s with several readings, largest spread of z %v", counted(l.set.SpotCount, "place"), number{l.set.SpotSpread, e.ZMin.digits})
	}
	across := func(low, high number) number { return number{high.v - low.v, low.digits} }
	line("x", "%v to %v, across %v", e.XMin, e.XMax, across(e.XMin, e.XMax))
	line("y", "%v to %v, across %v", e.YMin, e.YMax, across(e.YMin, e.YMax))
	line("z", "%v to %v, across %v", e.ZMin, e.ZMax, across(e.ZMin, e.ZMax))
	line("units", "%s", r.unitsLine())
	for _, label := range [][2]string{{"system", r.crs.String()}, {"datum xy", r.horizontalDatum.String()}, {"datum z", r.verticalDatum.String()}} {
		if label[1] != "" {
			line(label[0], "%s", label[1])
		}
	}
	line("surface", "%s, %s, %d on the outline", countedVertices(s.Vertices), counted(s.Triangles, "triangle"), s.OutlineVertices)
	line("area", "%v in plan", s.Area)
	line("volume", "%v net of height zero: what is above it less what is below", s.VolumeAboveZero)
	if !math.IsNaN(f.Spacing.v) {
		line("spacing", "%v, the median length of an edge", f.Spacing)
	}
	writeCodes(line, l.set)
	f.writeEdges(line)
	f.Suspects.writeText(line)
	for i, v := range []struct {
		option string
		suggested
	}{{"cell", f.Suggest.Cell}, {"interval", f.Suggest.Interval}, {"max edge", f.Suggest.MaxEdge}, {"touch within", f.Suggest.TouchWithin}} {
		if i == 3 && f.Constraints.Lines == 0 {
			break // it is about lines
		}
		line("suggested", "%s %v: %s", v.option, v.suggested, f.reasons[i])
	}
	for _, warning := range f.Warnings {
		line("warning", "%s", warning.Text)
	}
	if len(f.Warnings) == 0 {
		line("warnings", "none")
	}
	return b.Flush()
}

// codesMost is how many codes are listed: more than an office's usual list.
const codesMost = 40

// writeCodes counts the used readings by their code, the commonest first.
func writeCodes(line func(string, string, ...any), set *readings.Set) {
	if !set.Has(readings.Code) {
		return
	}
	count := map[string]int{}
	for i := range set.Len() {
		count[set.Text(readings.Code, i)]++
	}
	var codes []string
	for code := range count {
		codes = append(codes, code)
	}
	slices.SortFunc(codes, func(a, b string) int {
		return cmp.Or(cmp.Compare(count[b], count[a]), cmp.Compare(a, b))
	})
	for i, code := range codes {
		if i == codesMost {
			line("code", "and %d more", len(codes)-i)
			break
		}
		name := code
		if name == "" {
			name = "(none)"
		}
		line("code", "%-12s %d", name, count[code])
	}
}
