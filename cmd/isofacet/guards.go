package main

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/io/readings"
	"isofacet/io/units"
	"isofacet/io/wells"
)

// guards is what the command line says that readings must be.
type guards struct {
	expectExtent option.Extent
	expectZ      parsed[[2]decimal.Number]
	roundSpan    parsed[time.Duration]
}

// guardOptions returns the options of every command that reads readings.
func (g *guards) guardOptions() []manual.Option {
	g.expectZ = parsed[[2]decimal.Number]{form: "LOW,HIGH", parse: parseRange}
	g.roundSpan = parsed[time.Duration]{value: 24 * time.Hour, text: "24h", form: "TIME", parse: parseSpan}
	const group = "Guards"
	return []manual.Option{
		{Group: group, Name: "expect-extent", Value: &g.expectExtent,
			Text: "box in which all used readings have to lie; says so if they would with x and y exchanged"},
		{Group: group, Name: "expect-z", Value: &g.expectZ, Text: "range in which all used values have to lie"},
		{Group: group, Name: "round-span", Value: &g.roundSpan, Text: "how long a round of heads may take before a warning: 24h, 3d"},
	}
}

func parseRange(text string) (r [2]decimal.Number, err error) {
	low, high, ok := strings.Cut(text, ",")
	if ok {
		var errLow, errHigh error
		r[0], errLow = decimal.Parse(low)
		r[1], errHigh = decimal.Parse(high)
		ok = errLow == nil && errHigh == nil && r[0].Cmp(r[1]) <= 0
	}
	if !ok {
		return r, errors.New("two numbers LOW,HIGH such as 180,260")
	}
	return r, nil
}

func parseSpan(text string) (time.Duration, error) {
	days, ok := strings.CutSuffix(text, "d")
	hours := time.Hour
	if ok {
		hours = 24 * time.Hour
	} else if days, ok = strings.CutSuffix(text, "h"); !ok {
		days = ""
	}
	n, err := decimal.Parse(days)
	if f := n.Float64(); err != nil || n.Sign() <= 0 || f > 1e5 {
		return 0, errors.New("a time such as 24h or 3d")
	}
	return time.Duration(n.Float64() * float64(hours)), nil
}

// guardReadings refuses or warns of readings that are not what they should be.
func (p *program) guardReadings(r *reading, l *loaded) error {
	p.unitsInHeaders(&r.measures, l.set)
	for _, check := range []func(*reading, *loaded) error{p.guardExtent, p.guardZ, p.guardDegrees, p.guardSigns} {
		if err := check(r, l); err != nil {
			return err
		}
	}
	if l.set.Heads() {
		p.guardSpan(r, l)
	}
	return nil
}

// guardExtent refuses readings outside the expected box.
func (p *program) guardExtent(r *reading, l *loaded) error {
	e := &r.expectExtent
	if !e.IsSet() {
		return nil
	}
	box := orb.Bound{Min: orb.Point{e.XMin.Float64(), e.YMin.Float64()}, Max: orb.Point{e.XMax.Float64(), e.YMax.Float64()}}
	swapped := true
	return p.refuseOutside(l, "place", "within "+e.String(), func(i int) (string, bool) {
		pt := l.set.Points[i]
		return plain(pt[0]) + "," + plain(pt[1]), box.Contains(pt)
	}, func() string {
		for _, pt := range l.set.Points {
			swapped = swapped && box.Contains(orb.Point{pt[1], pt[0]})
		}
		if swapped {
			return "all readings lie there when x and y are exchanged: look at --columns"
		}
		return "look at the columns, at the units and at the box; --exclude leaves readings out for a reason"
	})
}

// guardZ refuses values outside the expected range.
func (p *program) guardZ(r *reading, l *loaded) error {
	if r.expectZ.text == "" {
		return nil
	}
	low, high := r.expectZ.value[0].Float64(), r.expectZ.value[1].Float64()
	return p.refuseOutside(l, "z", fmt.Sprintf("from %s to %s", r.expectZ.value[0], r.expectZ.value[1]), func(i int) (string, bool) {
		z := l.set.Z[i]
		return plain(z), low <= z && z <= high
	}, func() string {
		return "a number that stands for no value is named with --missing; --exclude leaves readings out for a reason"
	})
}

// refuseOutside is the error of readings for which a test fails, nil if none does.
func (p *program) refuseOutside(l *loaded, what, expected string, test func(i int) (string, bool), hint func() string) error {
	var b strings.Builder
	n := 0
	for i := range l.set.Len() {
		seen, ok := test(i)
		if ok {
			continue
		}
		if n++; n <= 5 {
			fmt.Fprintf(&b, "%s:%d: %s%s %s\n", l.names[l.set.Source(i)], l.set.Lines[i], named(l.set.ID(i)), what, seen)
		}
	}
	if n == 0 {
		return nil
	}
	if n > 5 {
		fmt.Fprintf(&b, "and %d more\n", n-5)
	}
	return status.With(status.WrongData, fmt.Errorf("%s%s of %d outside: expected all %s", b.String(), counted(n, "reading"), l.set.Len(), expected), hint())
}

// plain is the shortest text of a number that is no power of ten.
func plain(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// named is an id in front of something that is said of a reading.
func named(id string) string {
	if id == "" {
		return ""
	}
	return id + ": "
}

// How degrees are told from lengths: within the ranges of longitude and latitude,
// fine for their small extent, with heights that such an extent in lengths does not
// have. A survey 2 units across with 20 units of relief is a wall.
const (
	degreesAcross = 2
	degreesRelief = 10
)

// looksLikeDegrees tells longitudes and latitudes from places in a plane.
func (l *loaded) looksLikeDegrees() bool {
	b := l.bound
	if l.set.Len() == 0 || b.Min[0] < -180 || b.Max[0] > 180 || b.Min[1] < -90 || b.Max[1] > 90 {
		return false
	}
	for i := range l.set.Layouts {
		for _, c := range l.set.Layouts[i].Columns {
			if c.Role == readings.X && readings.NamesLongitude(c.Name) {
				return true
			}
		}
	}
	across := max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1])
	return l.decimalsXY >= 4 && across > 0 && across < degreesAcross && l.zRange[1]-l.zRange[0] > degreesRelief*across
}

// guardDegrees refuses degrees that are declared as lengths, and warns of others.
func (p *program) guardDegrees(r *reading, l *loaded) error {
	if !l.looksLikeDegrees() {
		return nil
	}
	xy, _ := l.digits(option.Decimals{})
	b := l.bound
	seen := fmt.Sprintf("x %v to %v, y %v to %v look like degrees", number{b.Min[0], xy}, number{b.Max[0], xy}, number{b.Min[1], xy}, number{b.Max[1], xy})
	if r.xyUnit.value != units.Unstated {
		return status.With(status.WrongData, fmt.Errorf("%s: expected coordinates in %s, as --xy-unit says", seen, r.xyUnit.value), degreesHint)
	}
	p.report.Warn("degrees", seen+": distances, slopes, areas and cells mean nothing in them")
	return nil
}

const degreesHint = "project longitude and latitude to a plane first; a degree is not the same length east and north"

// guardCell refuses a cell as large as half of what is to be covered if the places
// are degrees: it is meant for metres.
func (l *loaded) guardCell(cell float64, text string) error {
	b := l.bound
	if across := max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1]); !l.looksLikeDegrees() || cell < across/2 {
		return nil
	}
	return status.With(status.WrongData, fmt.Errorf("x %s to %s, y %s to %s look like degrees: expected projected coordinates for a cell of %s",
		plain(b.Min[0]), plain(b.Max[0]), plain(b.Min[1]), plain(b.Max[1]), text), degreesHint)
}

// guardSigns warns of depths that are all negative: they may be elevations.
func (p *program) guardSigns(r *reading, l *loaded) error {
	if !r.depthFrom.IsSet() || l.set.Len() == 0 {
		return nil
	}
	from := r.depthFrom.Value.Float64()
	if r.z.Changes() {
		from = r.z.Of(from)
	}
	if l.zRange[0] > from {
		p.report.Warn("negative-depths", fmt.Sprintf("all depths are negative, z from %s to %s: are they elevations? then declare the column as z", plain(l.zRange[0]), plain(l.zRange[1])))
	}
	return nil
}

// guardSpan warns of a round of heads that took too long: what changed meanwhile
// looks like a gradient.
func (p *program) guardSpan(r *reading, l *loaded) {
	if !l.set.Has(readings.Time) {
		return
	}
	var first, last time.Time
	var who [2]int
	found := false
	for i := range l.set.Len() {
		text := l.set.Text(readings.Time, i)
		if text == "" {
			continue
		}
		t, ok := wells.ParseTime(text)
		if !ok {
			p.report.Warn("times", fmt.Sprintf("%s:%d: time %q: expected %s; how long the round took is not looked at",
				l.names[l.set.Source(i)], l.set.Lines[i], text, wells.ExpectedTime))
			return
		}
		if !found || t.Before(first) {
			first, who[0] = t, i
		}
		if !found || t.After(last) {
			last, who[1] = t, i
		}
		found = true
	}
	if span := last.Sub(first); found && span > r.roundSpan.value {
		p.report.Warn("round-span", fmt.Sprintf("the round took %s, from %s (%s) to %s (%s): more than %s: levels that changed meanwhile look like a gradient",
			spanText(span), l.set.Text(readings.Time, who[0]), l.set.ID(who[0]), l.set.Text(readings.Time, who[1]), l.set.ID(who[1]), spanText(r.roundSpan.value)),
			"hours", math.Round(span.Hours()*100)/100)
	}
}

// spanText writes a time for people, in hours or days.
func spanText(d time.Duration) string {
	if d >= 48*time.Hour {
		return fmt.Sprintf("%.4g days", d.Hours()/24)
	}
	return fmt.Sprintf("%.4g hours", d.Hours())
}
