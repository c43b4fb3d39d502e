package main

import (
	"bufio"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"strings"
)

// writeFigures writes the figures of all regions.
func (v *volumes) writeFigures(d *destination) error {
	switch d.format {
	case formatJSON:
		enc := json.NewEncoder(d.w)
		enc.SetEscapeHTML(false)
		enc.SetIndent("", "  ")
		return enc.Encode(&v.result)
	case formatCSV:
		return v.figuresTable(d.w)
	}
	return v.figuresText(d.w)
}

// blank is a number in a table, empty where there is none.
func blank(n *number) string {
	if n == nil {
		return ""
	}
	return n.String()
}

var figureColumns = []string{
	"region", "cut_volume", "fill_volume", "net_volume", "cut_area", "fill_area", "same_area", "covered_area",
	"cut_slope_area_from", "cut_slope_area_to", "fill_slope_area_from", "fill_slope_area_to",
	"region_area", "share_of_region", "share_of_from", "share_of_to",
	"cut_uncertainty", "fill_uncertainty", "net_uncertainty",
}

func (v *volumes) figuresTable(to io.Writer) error {
	rows := [][]string{figureColumns}
	for i := range v.result.Regions {
		r := &v.result.Regions[i]
		row := []string{
			r.Region, r.Cut.Volume.String(), r.Fill.Volume.String(), r.Net.String(), r.Cut.Area.String(), r.Fill.Area.String(), r.Same.String(), r.Covered.String(),
			blank(r.Cut.SlopeAreaFrom), blank(r.Cut.SlopeAreaTo), blank(r.Fill.SlopeAreaFrom), blank(r.Fill.SlopeAreaTo),
			blank(r.Area), blank(r.ShareOf), blank(r.ShareOfFrom), blank(r.ShareOfTo), "", "", "",
		}
		if u := r.Uncertainty; u != nil {
			row[16], row[17], row[18] = u.Cut.String(), u.Fill.String(), u.Net.String()
		}
		rows = append(rows, row)
	}
	return writeRows(to, rows)
}

func writeRows(to io.Writer, rows [][]string) error {
	w := csv.NewWriter(to)
	if err := w.WriteAll(rows); err != nil {
		return err
	}
	w.Flush()
	return w.Error()
}

// figuresText writes the figures for people.
func (v *volumes) figuresText(to io.Writer) error {
	b := bufio.NewWriter(to)
	line := func(subject, format string, values ...any) {
		if subject == "" {
			fmt.Fprintln(b)
			return
		}
		fmt.Fprintf(b, "%-12s "+format+"\n", append([]any{subject}, values...)...)
	}
	if v.from != nil {
		line("from", "%s%s", v.from.details, areaOf(v.result.From))
	}
	line("to", "%s%s", v.to.details, areaOf(v.result.To))
	line("units", "volumes %s, areas %s", v.result.VolumeUnit, v.result.AreaUnit)
	for i := range v.result.Regions {
		v.regionText(line, &v.result.Regions[i])
	}
	if v.result.Sections != nil {
		v.sectionsText(line)
	}
	if v.result.Stages != nil {
		fmt.Fprintln(b)
		if err := columns(b, v.stageRows()); err != nil {
			return err
		}
	}
	fmt.Fprintln(b)
	for _, c := range v.result.Cautions {
		line("caution", "%s", c)
	}
	for _, w := range v.result.Warnings {
		line("warning", "%s", w.Text)
	}
	return b.Flush()
}

// areaOf tells the area of a surface, in the unit of all areas.
func areaOf(s *sideResult) string {
	if s == nil || s.Area == nil {
		return ""
	}
	return fmt.Sprintf(", area %v", *s.Area)
}

// slopes are the areas on the slopes of both surfaces.
func slopes(p *partResult) string {
	if p.SlopeAreaFrom == nil {
		return ""
	}
	return fmt.Sprintf(" (%v and %v on the slopes)", *p.SlopeAreaFrom, *p.SlopeAreaTo)
}

func percent(n *number) string { return string(number{100 * n.v, 2}.String()) + " %" }

// regionText writes one region. Cut and fill are said both ways: by what is done, and
// by which surface is higher.
func (v *volumes) regionText(line func(string, string, ...any), r *regionResult) {
	line("", "")
	before := "the surface before"
	if r.Base != nil {
		before = "the base"
	}
	line("region", "%s", r.Region)
	if b := r.Base; b != nil {
		switch b.Kind {
		case "level":
			line("base", "level %s", b.Level)
		case "plane":
			line("base", "plane through the ring's vertices, which lie up to %v off it; it rises %v eastward and %v northward; taken without uncertainty", *b.Off, *b.DzDx, *b.DzDy)
		default:
			line("base", "triangles between the ring's vertices; taken without uncertainty")
		}
	}
	plusMinus := func(of func(*spreadResult) number) string {
		if r.Uncertainty == nil {
			return ""
		}
		return fmt.Sprintf(" +- %v", of(r.Uncertainty))
	}
	line("cut", "%v%s taken away: the surface after lies below %s, over %v of area%s", r.Cut.Volume,
		plusMinus(func(s *spreadResult) number { return s.Cut }), before, r.Cut.Area, slopes(&r.Cut))
	line("fill", "%v%s brought in: the surface after lies above %s, over %v of area%s", r.Fill.Volume,
		plusMinus(func(s *spreadResult) number { return s.Fill }), before, r.Fill.Area, slopes(&r.Fill))
	net := "more fill than cut"
	n := r.Net
	if n.v < 0 {
		net, n.v = "more cut than fill", -n.v
	}
	line("net", "%v%s %s", n, plusMinus(func(s *spreadResult) number { return s.Net }), net)
	if r.Same.v > 0 {
		line("same", "%v of area without any difference", r.Same)
	}
	text, within := fmt.Sprintf("%v of area by both", r.Covered), ""
	if r.ShareOf != nil {
		text += fmt.Sprintf(", %s of the region", percent(r.ShareOf))
		within = " in the region"
	}
	for _, s := range []struct {
		share *number
		of    string
	}{{r.ShareOfFrom, "before"}, {r.ShareOfTo, "after"}} {
		if s.share != nil {
			text += fmt.Sprintf(", %s of the surface %s%s", percent(s.share), s.of, within)
		}
	}
	line("covered", "%s", text)
	if s := r.Simulation; s != nil {
		line("draws", "%d: cut %v, deviation %v; fill %v, %v; net %v, %v", s.Draws, s.Mean.Cut, s.Deviation.Cut, s.Mean.Fill, s.Deviation.Fill, s.Mean.Net, s.Deviation.Net)
	}
}

func (v *volumes) sectionsText(line func(string, string, ...any)) {
	s := v.result.Sections
	for _, t := range s.Totals {
		line("", "")
		line("sections", "%s, from station %v to %v; approximations beside the exact volume of the whole region", t.Region, s.From, s.To)
		line("average", "cut %v, fill %v by average end area", t.Average.Cut, t.Average.Fill)
		text := ""
		if n := t.Prismoidal.Averaged; n > 0 {
			text = fmt.Sprintf("; %s by average end area", reaches(n))
		}
		line("prismoidal", "cut %v, fill %v by the prismoidal rule%s", t.Prismoidal.Cut, t.Prismoidal.Fill, text)
		line("exact", "cut %v, fill %v", t.Exact.Cut, t.Exact.Fill)
	}
}

func reaches(n int) string {
	if n == 1 {
		return "1 reach"
	}
	return fmt.Sprintf("%d reaches", n)
}

func (v *volumes) stageRows() [][]string {
	rows := [][]string{{"region", "level", "area_below", "volume_below", "area_above", "volume_above", "below_by_average_end_area", "below_by_cones"}}
	for _, s := range v.result.Stages {
		rows = append(rows, []string{s.Region, s.Level, s.AreaBelow.String(), s.VolumeBelow.String(), s.AreaAbove.String(), s.VolumeAbove.String(), s.AverageEndArea.String(), s.Conic.String()})
	}
	return rows
}

func (v *volumes) writeStages(d *destination) error {
	if d.format == formatText {
		return columns(d.w, v.stageRows())
	}
	return writeRows(d.w, v.stageRows())
}

func (v *volumes) writeSections(d *destination) error {
	rows := [][]string{{"region", "station", "cut_area", "fill_area", "width_covered"}}
	for _, s := range v.result.Sections.Rows {
		rows = append(rows, []string{s.Region, s.Station.String(), s.Cut.String(), s.Fill.String(), s.Width.String()})
	}
	if d.format == formatText {
		return columns(d.w, rows)
	}
	return writeRows(d.w, rows)
}

// columns writes rows with their fields below each other, numbers to the right.
func columns(to io.Writer, rows [][]string) error {
	width := make([]int, len(rows[0]))
	for _, row := range rows {
		for k, f := range row {
			width[k] = max(width[k], len([]rune(f)))
		}
	}
	b := bufio.NewWriter(to)
	for _, row := range rows {
		for k, f := range row {
			space := strings.Repeat(" ", width[k]-len([]rune(f)))
			switch {
			case k == 0:
				b.WriteString(f + space)
			default:
				b.WriteString("  " + space + f)
			}
		}
		b.WriteByte('\n')
	}
	return b.Flush()
}
