package main

import (
	"bufio"
	"cmp"
	"context"
	"errors"
	"fmt"
	"io"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/interp/accuracy"
	"isofacet/io/geojson"
	"isofacet/io/numtext"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// A changeRow is one well of either side.
type changeRow struct {
	id       string
	at       orb.Point
	from, to int // the reading of each side, -1 for none
	change   float64
}

func (r *changeRow) state() string {
	switch {
	case r.from < 0:
		return "added"
	case r.to < 0:
		return "lost"
	}
	return "common"
}

// A changeSide is what one side holds.
type changeSide struct {
	name string
	set  *readings.Set
	list []*input // where it was read
}

// at tells where reading i of the side was read.
func (s *changeSide) at(i int) string {
	return fmt.Sprintf("%s:%d", s.list[s.set.Source(i)].Name, s.set.Lines[i])
}

// changes is one run.
type changes struct {
	*changeCommand
	from, to changeSide
	byID     bool
	rows     []changeRow
	xy, z    int // digits
	result   changeResult
}

// changeResult is what the run record says.
type changeResult struct {
	From       string   `json:"from"`
	To         string   `json:"to"`
	MatchedBy  string   `json:"matched_by"`
	Common     int      `json:"common"`
	Added      []string `json:"added"`
	Lost       []string `json:"lost"`
	Mean       number   `json:"mean"`
	RootMeanSq number   `json:"root_mean_square"`
	Min        number   `json:"min"`
	Max        number   `json:"max"`
}

func (c *changeCommand) make(ctx context.Context, list []*input, dests []*destination, out *outputs) error {
	g := &changes{changeCommand: c}
	if err := g.read(ctx, list); err != nil {
		return err
	}
	if err := g.match(); err != nil {
		return err
	}
	maps := slices.ContainsFunc(dests, func(d *destination) bool { return d.part != partTable })
	drawing, err := g.maps(ctx, maps)
	if err != nil {
		return err
	}
	if err := g.settleWarnings(); err != nil {
		return err
	}
	if g.rec != nil {
		g.rec.Stable.Result = &g.result
	}
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error {
			switch {
			case d.part != partTable:
				return drawing.write(ctx, d)
			case d.format == formatGeoJSON:
				return g.writeFeatures(d, g.featureOptions(g.labels(""), g.xy, g.z), g.features)
			}
			return g.writeTable(d.w)
		}); err != nil {
			return err
		}
	}
	return out.commit()
}

// read reads both sides: two rounds of the same files at once, or two files.
func (g *changes) read(ctx context.Context, list []*input) error {
	g.from.name, g.to.name = g.changeCommand.from.text, g.changeCommand.to.text
	a, rounds := isRound(g.from.name)
	if !rounds {
		for i, side := range []*changeSide{&g.from, &g.to} {
			side.list = list[i : i+1]
			g.again = i > 0 // a table of wells holds for both
			var err error
			side.set, err = g.program.read(ctx, &g.reading, side.list)
			g.again = false
			if err != nil {
				return err
			}
			g.tellReadings(side.list, side.set)
		}
		return nil
	}
	b, _ := isRound(g.to.name)
	g.apart = true
	parts, err := g.readParts(ctx, &g.reading, list, readings.ByRole(readings.Round))
	g.apart = false
	if err != nil {
		return err
	}
	for _, side := range []struct {
		of   *changeSide
		name string
	}{{&g.from, a}, {&g.to, b}} {
		side.of.list = list
		if side.of.set, err = ofRound(parts, side.name); err != nil {
			return err
		}
		if err := g.codesKnown(&g.edges, side.of.set); err != nil {
			return err
		}
		g.report.Note("round: "+side.name, "round", side.name)
		g.tellReadings(list, side.of.set)
	}
	return nil
}

// match finds the wells that both sides have: by id, or by place where readings have
// no ids.
func (g *changes) match() error {
	a, b := g.from.set, g.to.set
	g.byID = a.Has(readings.ID) && b.Has(readings.ID)
	g.result.From, g.result.To, g.result.MatchedBy = g.from.name, g.to.name, "place"
	if g.byID {
		g.result.MatchedBy = "id"
	}
	decimals := max(a.DecimalsZ, b.DecimalsZ)
	g.xy, g.z = g.decimals.Resolve(max(a.DecimalsXY, b.DecimalsXY)+2), g.decimals.Resolve(decimals+2)
	// Reduced heads have more decimals than what they are made of.
	const reduced = 6
	before, err := g.index(&g.from)
	if err != nil {
		return err
	}
	after, err := g.index(&g.to)
	if err != nil {
		return err
	}
	moved := 0
	for i := range b.Len() {
		row := changeRow{b.ID(i), b.Points[i], -1, i, 0}
		if k, ok := before[g.key(b, i)]; ok {
			row.from, row.change = k, readings.Difference(b.Z[i], a.Z[k], decimals+reduced)
			if a.Points[k] != b.Points[i] {
				if moved++; moved <= g.listMost {
					g.report.Note(fmt.Sprintf("moved: %s: %s in %s, %s in %s", row.id, placeText(a.Points[k]), g.from.name, placeText(b.Points[i]), g.to.name), "id", row.id)
				}
			}
		}
		g.rows = append(g.rows, row)
	}
	for i := range a.Len() {
		if _, ok := after[g.key(a, i)]; !ok {
			g.rows = append(g.rows, changeRow{a.ID(i), a.Points[i], i, -1, 0})
		}
	}
	if moved > 0 {
		g.report.Warn("moved", fmt.Sprintf("%s with another place than before: the change is taken at the later one", counted(moved, "well")), "wells", moved)
	}
	slices.SortStableFunc(g.rows, func(p, q changeRow) int {
		return cmp.Or(compareIDs(p.id, q.id), cmp.Compare(p.at[0], q.at[0]), cmp.Compare(p.at[1], q.at[1]))
	})
	return g.summarise()
}

// compareIDs orders names so that MW-2 stands before MW-10.
func compareIDs(a, b string) int {
	for a != "" && b != "" {
		da, db := digits(a), digits(b)
		if da > 0 && db > 0 {
			x, y := trimZeros(a[:da]), trimZeros(b[:db])
			if c := cmp.Or(cmp.Compare(len(x), len(y)), cmp.Compare(x, y)); c != 0 {
				return c
			}
			a, b = a[da:], b[db:]
			continue
		}
		if a[0] != b[0] {
			return cmp.Compare(a[0], b[0])
		}
		a, b = a[1:], b[1:]
	}
	return cmp.Compare(len(a), len(b))
}

func digits(s string) int {
	n := 0
	for n < len(s) && s[n] >= '0' && s[n] <= '9' {
		n++
	}
	return n
}

func trimZeros(s string) string {
	for len(s) > 1 && s[0] == '0' {
		s = s[1:]
	}
	return s
}

// key is what makes a reading the same well.
func (g *changes) key(s *readings.Set, i int) any {
	if g.byID {
		return s.ID(i)
	}
	return s.Points[i]
}

// index finds readings by key, and refuses a key that two readings have.
func (g *changes) index(side *changeSide) (map[any]int, error) {
	of := make(map[any]int, side.set.Len())
	for i := range side.set.Len() {
		key := g.key(side.set, i)
		if key == "" {
			return nil, status.With(status.WrongData, fmt.Errorf("%s: no id: expected one in every row of %s: wells are matched by it", side.at(i), side.name),
				"fill the ids in, or skip the column with - in --columns to match by place")
		}
		if other, twice := of[key]; twice {
			return nil, status.With(status.WrongData, fmt.Errorf("%s: id %v: is in %s as well: expected every id once in %s", side.at(i), key, side.at(other), side.name),
				"choose with --only or --without, as in --only zone=shallow, or leave one out with --exclude")
		}
		of[key] = i
	}
	return of, nil
}

// summarise counts, and names those added and lost.
func (g *changes) summarise() error {
	name := func(r *changeRow) string {
		if r.id != "" {
			return r.id
		}
		return placeText(r.at)
	}
	var all []float64
	g.result.Added, g.result.Lost = []string{}, []string{}
	for i := range g.rows {
		switch r := &g.rows[i]; r.state() {
		case "added":
			g.result.Added = append(g.result.Added, name(r))
		case "lost":
			g.result.Lost = append(g.result.Lost, name(r))
		default:
			all = append(all, r.change)
		}
	}
	for _, of := range []struct {
		what  string
		names []string
	}{{"added", g.result.Added}, {"lost", g.result.Lost}} {
		if n := len(of.names); n > 0 {
			shown := of.names
			if more := n - idsMost; more > 0 {
				shown = append(slices.Clone(shown[:idsMost]), fmt.Sprintf("%d more", more))
			}
			g.report.Note(fmt.Sprintf("%s: %s: %s", of.what, counted(n, "well"), listed(shown)), of.what, of.names)
		}
	}
	if len(all) == 0 {
		return status.With(status.WrongData, fmt.Errorf("%s and %s: no common wells by %s, of %d and %d: expected some", g.from.name, g.to.name, g.result.MatchedBy, g.from.set.Len(), g.to.set.Len()),
			"two surveys with readings at different places: isofacet volume draws the difference of their surfaces")
	}
	s := accuracy.Describe(all)
	value := func(v float64) number { return number{v, g.z} }
	g.result.Common, g.result.Mean, g.result.RootMeanSq = s.Count, value(s.Mean), value(s.RMSE)
	g.result.Min, g.result.Max = value(s.Min), value(s.Max)
	g.report.Note(fmt.Sprintf("change: %s common, matched by %s: mean %v, from %v to %v; positive is a rise", counted(s.Count, "well"), g.result.MatchedBy, g.result.Mean, g.result.Min, g.result.Max),
		"common", s.Count, "mean", g.result.Mean, "min", g.result.Min, "max", g.result.Max)
	return nil
}

// maps makes the surface of the change over the common wells.
func (g *changes) maps(ctx context.Context, wanted bool) (*differenceMaps, error) {
	var keep []int
	var z []float64
	of := map[int]float64{}
	for _, r := range g.rows {
		if r.from >= 0 && r.to >= 0 {
			keep = append(keep, r.to)
			of[r.to] = r.change
		}
	}
	slices.Sort(keep)
	for _, i := range keep {
		z = append(z, of[i])
	}
	set := g.to.set.Subset(keep, z, max(g.from.set.DecimalsZ, g.to.set.DecimalsZ))
	set.DecimalsXY = max(set.DecimalsXY, g.from.set.DecimalsXY)
	l := &loaded{set: set, decimalsXY: set.DecimalsXY, decimalsZ: set.DecimalsZ}
	for _, in := range g.to.list {
		l.names = append(l.names, in.Name)
	}
	l.measure()
	if err := g.draw(ctx, &g.reading, l, triangulate.Options{Workers: g.workers()}); err != nil {
		return nil, l.whichReading(g.to.list, err)
	}
	g.remember(&g.reading, l)
	if !wanted {
		return nil, nil
	}
	if err := l.needsTriangles(); err != nil {
		return nil, err
	}
	g.tellSurface(l)
	if l.drawn.cut != nil {
		l.surface = l.shown() // maps of the change end where boundary and voids do
		l.drawn = &drawn{}
	}
	c := &volumeCommand{program: g.program, reading: g.reading, writing: g.writing, grid: g.grid, contour: g.contour}
	c.noData = g.grid.noData
	labels := g.labels(showDifference)
	return &differenceMaps{
		volumes: &volumes{volumeCommand: c, from: &surfaceSide{kind: kindReadings, labels: labels}, to: &surfaceSide{kind: kindReadings, labels: labels}, xy: g.xy, z: g.z},
		l:       l,
	}, nil
}

// changeNames head the columns of the table.
const changeNames = "id,x,y,from_z,to_z,change,state\n"

// writeTable writes a row a well.
func (g *changes) writeTable(w io.Writer) error {
	b := bufio.NewWriter(w)
	b.WriteString(changeNames)
	var row []byte
	for i := range g.rows {
		r := &g.rows[i]
		row = append(appendField(row[:0], r.id), ',')
		row = append(numtext.Append(row, r.at[0], g.xy), ',')
		row = append(numtext.Append(row, r.at[1], g.xy), ',')
		if r.from >= 0 {
			row = numtext.Append(row, g.from.set.Z[r.from], g.z)
		}
		row = append(row, ',')
		if r.to >= 0 {
			row = numtext.Append(row, g.to.set.Z[r.to], g.z)
		}
		row = append(row, ',')
		if r.from >= 0 && r.to >= 0 {
			row = numtext.Append(row, r.change, g.z)
		}
		row = append(append(append(row, ','), r.state()...), '\n')
		if _, err := b.Write(row); err != nil {
			return err
		}
	}
	return b.Flush()
}

// features writes the wells as points; those in common have the change as height.
func (g *changes) features(w *geojson.Writer) error {
	for i := range g.rows {
		r := &g.rows[i]
		from, to, change := geojson.Null(), geojson.Null(), geojson.Null()
		f := geojson.Feature{Geometry: geojson.Geometry{Shape: r.at}}
		if r.from >= 0 {
			from = geojson.Fixed(g.from.set.Z[r.from], g.z)
		}
		if r.to >= 0 {
			to = geojson.Fixed(g.to.set.Z[r.to], g.z)
		}
		if r.state() == "common" {
			change = geojson.Fixed(r.change, g.z)
			f.Geometry.Z = []float64{r.change}
		}
		f.Properties = []geojson.Property{
			{Name: "id", Value: geojson.String(r.id)}, {Name: "from_z", Value: from}, {Name: "to_z", Value: to},
			{Name: "change", Value: change}, {Name: "state", Value: geojson.String(r.state())},
		}
		if err := w.Write(&f); err != nil {
			return err
		}
	}
	return nil
}

var errTwoSurfaces = errors.New("--each with a command that compares two surfaces: expected --from and --to")
