package method

import (
	"bufio"
	"fmt"
	"io"
	"slices"
	"strings"
)

// Facts are what a run knows. Empty texts are not known.
type Facts struct {
	Groundwater bool // levels of wells, not heights of ground
	Product     string
	Program     string
	Files       []string

	Rounds, Zones []string
	First, Last   string // time of the readings used

	Read, Used, Merged int
	IDs                []string // of the readings used, if they are few
	NotUsed            []NotUsed

	// Reduced is whether values are measuring point minus depth; Floating are the
	// wells where product floats, which was added.
	Reduced  bool
	Floating []string
	Values   []Value // of wells, if they are few

	System, HorizontalDatum, VerticalDatum string
	XYUnit, ZUnit                          string

	Interval, Levels, Cell string
	Bands                  bool

	Triangles        int
	ZMin, ZMax       string
	Breaklines       int
	Boundary, Voids  int
	LongestEdge      string
	SameSpot         string // the rule that was used, if one was
	Inferred         string // beyond which distance
	AccuracyRMSE     string
	AccuracyOf       int
	Exclusions       string // the file of decisions
	GradientAndArrow bool   // whether the product shows gradient and direction
}

// NotUsed is a reading that was left out, refused or merged.
type NotUsed struct{ ID, What, Reason string }

// Value is what was used of a well: the value, and how it came about if it was worked
// out.
type Value struct{ ID, Z, Work string }

// Write writes the statement as plain text.
func (f *Facts) Write(w io.Writer) error {
	b := bufio.NewWriter(w)
	section := func(title string, sentences []string) {
		fmt.Fprintf(b, "%s\n\n%s\n\n", title, strings.Join(sentences, " "))
	}
	section("METHOD", f.method())
	section("CAPTION", f.caption())
	if len(f.Values) > 0 {
		fmt.Fprintf(b, "VALUES\n\n")
	}
	for _, v := range f.Values {
		fmt.Fprintf(b, "- %s: %s\n", v.ID, withUnit(v.Z, f.ZUnit))
		if v.Work != "" {
			fmt.Fprintf(b, "  %s\n", v.Work)
		}
	}
	if len(f.Values) > 0 {
		fmt.Fprintf(b, "\n")
	}
	fmt.Fprintf(b, "NOT USED\n\n")
	if len(f.NotUsed) == 0 {
		fmt.Fprintf(b, "Every reading was used.\n")
	}
	for _, n := range f.NotUsed {
		fmt.Fprintf(b, "- %s: %s: %s\n", n.ID, n.What, n.Reason)
	}
	fmt.Fprintf(b, "\nMISSING\n\n")
	missing := f.missing()
	if len(missing) == 0 {
		fmt.Fprintf(b, "Nothing that the list knows.\n")
	}
	for _, m := range missing {
		fmt.Fprintf(b, "- %s\n", m)
	}
	return b.Flush()
}

// things are what the values are of.
func (f *Facts) things() string {
	if f.Groundwater {
		return "groundwater levels"
	}
	return "ground heights"
}

func (f *Facts) method() []string {
	s := []string{
		fmt.Sprintf("%s of %s were used, of %d read from %s.", plural(f.Used, "reading"), f.things(), f.Read, strings.Join(f.Files, ", ")),
	}
	if n := len(f.NotUsed); n > 0 {
		s = append(s, fmt.Sprintf("%s not used; each is listed below with its reason.", were(n, "reading")))
	}
	if f.Reduced {
		s = append(s, "A level is the elevation of the measuring point minus the depth to water.")
	}
	if len(f.Floating) > 0 {
		s = append(s, fmt.Sprintf("Where product floats, its thickness times its specific gravity was added: %s.", strings.Join(f.Floating, ", ")))
	}
	if f.SameSpot != "" && f.Merged > 0 {
		s = append(s, fmt.Sprintf("Where several readings stand at one place, the rule %q applied (%d merged).", f.SameSpot, f.Merged))
	}
	if f.Exclusions != "" {
		s = append(s, fmt.Sprintf("Decisions to leave readings out are recorded in %s.", f.Exclusions))
	}
	how := "The surface between them is made of planes over triangles that join neighbouring readings (Delaunay triangulation) and passes through every reading"
	if f.Triangles > 0 {
		how += fmt.Sprintf("; it has %s", plural(f.Triangles, "triangle"))
	}
	s = append(s, how+".")
	if f.Breaklines > 0 {
		s = append(s, fmt.Sprintf("%s kept as edges of triangles, with the heights that %s there.", were(f.Breaklines, "breakline"), hasOrHave(f.Breaklines)))
	}
	s = append(s, f.reach())
	switch {
	case f.Interval != "":
		s = append(s, fmt.Sprintf("Contours at an interval of %s follow the planes by straight-line interpolation; none was smoothed.", withUnit(f.Interval, f.ZUnit)))
	case f.Levels != "":
		s = append(s, fmt.Sprintf("Contours at the levels %s follow the planes by straight-line interpolation; none was smoothed.", withUnit(f.Levels, f.ZUnit)))
	}
	if f.Cell != "" {
		s = append(s, fmt.Sprintf("The raster has cells of %s and holds the surface's values at its nodes.", withUnit(f.Cell, f.XYUnit)))
	}
	if f.AccuracyRMSE != "" {
		s = append(s, fmt.Sprintf("Against %s that the surface was not made from, the root mean square error is %s.", plural(f.AccuracyOf, "checkpoint"), withUnit(f.AccuracyRMSE, f.ZUnit)))
	}
	s = append(s, fmt.Sprintf("Made with %s.", f.Program))
	return s
}

// reach says where the surface ends.
func (f *Facts) reach() string {
	var limits []string
	if f.Boundary > 0 {
		limits = append(limits, "a surveyed boundary")
	}
	if f.Voids > 0 {
		limits = append(limits, plural(f.Voids, "void"))
	}
	if f.LongestEdge != "" {
		limits = append(limits, "a longest outer edge of "+withUnit(f.LongestEdge, f.XYUnit))
	}
	if limits == nil {
		return "It ends at the convex hull of the readings; nothing is drawn outside."
	}
	return "It is limited by " + strings.Join(limits, ", ") + "; nothing is drawn outside."
}

func (f *Facts) caption() []string {
	title := strings.ToUpper(f.Product[:1]) + f.Product[1:] + " of " + f.things()
	if len(f.Zones) > 0 {
		title += ", zone " + strings.Join(f.Zones, ", ")
	}
	if len(f.Rounds) > 0 {
		title += ", round " + strings.Join(f.Rounds, ", ")
	}
	s := []string{title + "."}
	switch {
	case f.First != "" && f.First != f.Last:
		s = append(s, fmt.Sprintf("Measured from %s to %s.", f.First, f.Last))
	case f.First != "":
		s = append(s, fmt.Sprintf("Measured %s.", f.First))
	}
	s = append(s, fmt.Sprintf("%s from %s to %s.", plural(f.Used, "value"), f.ZMin, withUnit(f.ZMax, f.ZUnit)))
	if len(f.IDs) > 0 {
		s = append(s, "Used: "+strings.Join(f.IDs, ", ")+".")
	}
	if f.Interval != "" {
		s = append(s, "Contour interval "+withUnit(f.Interval, f.ZUnit)+".")
	}
	if f.Inferred != "" {
		s = append(s, "Dashed where further than "+withUnit(f.Inferred, f.XYUnit)+" from a reading: inferred.")
	}
	if f.VerticalDatum != "" {
		s = append(s, "Heights refer to "+f.VerticalDatum+".")
	}
	if f.HorizontalDatum != "" {
		s = append(s, "Horizontal datum "+f.HorizontalDatum+".")
	}
	if f.System != "" {
		s = append(s, "Coordinates in "+f.System+".")
	}
	s = append(s, "Between the readings the surface is straight-line interpolation and may miss what nobody measured.")
	if f.Groundwater {
		s = append(s, "Levels are those of the time stated; seasons, pumping and tides change them. A licensed professional has to review and sign this before it is relied on.")
	} else {
		s = append(s, "Computed from the readings listed; not a survey by itself. A licensed professional has to review and sign this before it is relied on. Have buried lines marked before digging.")
	}
	return s
}

// missing lists what neither the data nor the command line said.
func (f *Facts) missing() []string {
	var m []string
	add := func(absent bool, text string) {
		if absent {
			m = append(m, text)
		}
	}
	add(f.VerticalDatum == "", "vertical datum or benchmark (--vertical-datum)")
	add(f.HorizontalDatum == "" && f.System == "", "horizontal datum or coordinate system (--horizontal-datum, --crs)")
	add(f.ZUnit == "", "unit of the values, and which foot if feet")
	add(f.XYUnit == "", "unit of the coordinates, and which foot if feet")
	add(f.First == "", "date of the measurements (a column time)")
	if f.Groundwater {
		add(len(f.Rounds) == 0, "which round (a column round)")
		add(len(f.Zones) == 0, "which zone the wells tap (a column zone)")
		add(len(f.Zones) > 1, "one zone: "+strings.Join(f.Zones, ", ")+" are mixed (--only zone=NAME chooses)")
		add(len(f.IDs) == 0, "the wells' names (a column id)")
		add(!f.GradientAndArrow, "gradient and direction of flow, with their uncertainty (isofacet flow)")
		add(f.Inferred == "" && f.Interval != "", "whether any part is inferred (dashed)")
	} else {
		add(f.AccuracyRMSE == "", "accuracy, tested against checkpoints (isofacet accuracy)")
		add(f.Boundary == 0, "boundary of the survey (--boundary)")
		add(true, "client, and who did the field work")
	}
	add(f.Interval == "" && f.Levels == "" && f.Cell == "", "contour interval")
	m = append(m, "title of the project", "north arrow, bar scale, numeric scale, source of the base map", "names of those who drew, checked and approved; seal where one is required")
	return m
}

func withUnit(value, unit string) string {
	if unit == "" {
		return value
	}
	return value + " " + unit
}

func plural(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}

func were(n int, thing string) string {
	if n == 1 {
		return "1 " + thing + " was"
	}
	return fmt.Sprintf("%d %ss were", n, thing)
}

func hasOrHave(n int) string {
	if n == 1 {
		return "it has"
	}
	return "they have"
}

// Sorted returns texts once each, in order, without empty ones.
func Sorted(texts []string) []string {
	texts = slices.DeleteFunc(slices.Clone(texts), func(s string) bool { return s == "" })
	slices.Sort(texts)
	return slices.Compact(texts)
}
