package main

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/interp"
	"isofacet/interp/accuracy"
	"isofacet/io/numtext"
	"isofacet/io/readings"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// checkpoints are what the surface is compared with.
type checkpoints struct {
	set   *readings.Set
	names []string // of the files they come from
}

// at tells where checkpoint i was read.
func (c *checkpoints) at(i int) string {
	return fmt.Sprintf("%s:%d", c.names[c.set.Source(i)], c.set.Lines[i])
}

// loadBoth reads the checkpoints, which are few, and then readings and surface; or
// readings that a pattern puts apart.
func (a *accuracyCommand) loadBoth(ctx context.Context, list []*input, asked *input) (*loaded, *checkpoints, error) {
	if a.checkpoints.text == "" {
		l, err := a.load(ctx, &a.reading, list)
		return l, nil, err
	}
	if asked == nil {
		return a.loadApart(ctx, list)
	}
	set, err := readings.Read(ctx, []readings.Source{asked.Source}, readings.Options{
		Declared: readings.Declared{Columns: a.columns.value},
		Lenient:  bool(a.lenient), Workers: a.workers(),
	})
	if err != nil {
		return nil, nil, &checkpointsError{err}
	}
	asked.file.Layout = set.Layouts[0].String()
	a.report.Note("checkpoints: "+asked.Name+": "+set.Layouts[0].String(), "file", asked.Name, "layout", set.Layouts[0].String())
	for _, w := range set.Warnings {
		a.report.Warn("checkpoints", w.String(), "file", w.File, "line", w.Line)
	}
	for _, u := range a.notUsed([]*input{asked}, set) {
		a.report.Note(fmt.Sprintf("checkpoints: %s: %s:%d: %s", u.What, u.File, u.Line, u.Reason), "file", u.File, "line", u.Line, "id", u.ID)
	}
	if err := a.hasBy(set, asked.Name); err != nil {
		return nil, nil, err
	}
	l, err := a.load(ctx, &a.reading, list)
	return l, &checkpoints{set, []string{asked.Name}}, err
}

// loadApart holds readings out of the surface.
func (a *accuracyCommand) loadApart(ctx context.Context, list []*input) (*loaded, *checkpoints, error) {
	const held = "held out"
	hold := *a.checkpoints.value.hold
	parts, err := a.readParts(ctx, &a.reading, list, func(text func(readings.Role) string) string {
		if hold.Match(text(hold.Role)) {
			return held
		}
		return ""
	})
	if err != nil {
		return nil, nil, err
	}
	of := map[string]*readings.Set{}
	for _, part := range parts {
		if part.Err != nil {
			return nil, nil, part.Err
		}
		of[part.Name] = part.Set
	}
	if of[held] == nil || of[held].Len() == 0 {
		return nil, nil, status.With(status.WrongData, fmt.Errorf("--checkpoints %s: no reading matches: expected some to hold out", hold),
			"isofacet inspect counts the readings by code; a pattern is matched by the whole text, as in code=CHK*")
	}
	if of[""] == nil || of[""].Len() == 0 {
		return nil, nil, status.With(status.WrongData, fmt.Errorf("--checkpoints %s: matches every reading: expected some to make the surface of", hold), "hold fewer readings out")
	}
	a.report.Note(fmt.Sprintf("checkpoints: %s held out by %s", counted(of[held].Len(), "reading"), hold), "held_out", of[held].Len())
	if err := a.codesKnown(&a.reading.edges, of[""]); err != nil {
		return nil, nil, err
	}
	if err := a.hasBy(of[held], list[0].Name); err != nil {
		return nil, nil, err
	}
	l, err := a.stand(ctx, &a.reading, list, of[""])
	if err != nil {
		return nil, nil, err
	}
	a.remember(&a.reading, l)
	return l, &checkpoints{of[held], l.names}, nil
}

// hasBy refuses checkpoints without the role that they are reported by.
func (a *accuracyCommand) hasBy(set *readings.Set, name string) error {
	if a.by.text == "" || set.Has(a.by.value) {
		return nil
	}
	return status.With(status.WrongData, fmt.Errorf("%s: --by %s: no column for %s: expected one", name, a.by.text, a.by.value),
		fmt.Sprintf("say which column it is, as in --checkpoints-columns id=Point,x=East,y=North,z=Elev,%s=Kind", a.by.value))
}

// checkpointsError is a fault in the file of checkpoints: its columns are declared
// with another option than those of the readings.
type checkpointsError struct{ error }

func (e *checkpointsError) Unwrap() error { return e.error }

// A residual is one checkpoint compared.
type residual struct {
	index    int // in the checkpoints
	surface  float64
	residual float64
	place    triangulate.Place
}

// compare asks the surface at the checkpoints.
func (a *accuracyCommand) compare(ctx context.Context, l *loaded, c *checkpoints) (*accuracyReport, error) {
	pts := c.set.Points
	samples, err := l.surface.Query(ctx, pts, a.workers())
	if err != nil {
		return nil, err
	}
	if err := a.independent(l, c, samples); err != nil {
		return nil, err
	}
	l.limitSamples(pts, samples)
	// Written with the digits of whichever has more.
	l.decimalsXY, l.decimalsZ = max(l.decimalsXY, c.set.DecimalsXY), max(l.decimalsZ, c.set.DecimalsZ)
	r := &accuracyReport{c: c, by: a.by}
	for i, s := range samples {
		one := residual{i, s.Z, s.Z - c.set.Z[i], s.Location.Place}
		r.rows = append(r.rows, one)
		if s.Location.Place == triangulate.Outside {
			r.outside++
			if r.outside <= a.listMost {
				a.report.Note(fmt.Sprintf("outside the surface: %s: %s", c.at(i), placeText(pts[i])), "file", c.names[c.set.Source(i)], "line", c.set.Lines[i])
			}
			continue
		}
		r.residuals = append(r.residuals, one.residual)
		r.places = append(r.places, pts[i])
	}
	if r.outside > a.listMost {
		a.report.Note(fmt.Sprintf("and %d more outside the surface; the table of residuals lists all", r.outside-a.listMost))
	}
	if len(r.residuals) == 0 {
		return nil, status.With(status.WrongData, fmt.Errorf("%s, all outside the surface: expected some inside", counted(len(pts), "checkpoint")),
			"are x and y of the checkpoints in the same system and order as those of the readings?")
	}
	if err := a.ownError(r); err != nil {
		return nil, err
	}
	a.summarise(l, r)
	return r, nil
}

// ownError settles how wrong the checkpoints are themselves: what the command line
// says, or the root mean square of their column sigma if all that are compared have
// one.
func (a *accuracyCommand) ownError(r *accuracyReport) error {
	if a.own.IsSet() {
		r.own, r.combined = a.own.Value.Float64(), true
		return nil
	}
	set := r.c.set
	if !set.Has(readings.Sigma) {
		return nil
	}
	var squares exact.Sum
	stated := 0
	for _, row := range r.rows {
		text := set.Text(readings.Sigma, row.index)
		if row.place == triangulate.Outside || text == "" {
			continue
		}
		v, ok := numtext.Parse([]byte(text))
		if !ok || !(v >= 0 && v <= triangulate.CoordinateMost) {
			return status.With(status.WrongData, fmt.Errorf("%s: checkpoint %q: sigma %q: expected a number that is not below zero", r.c.at(row.index), set.ID(row.index), text),
				"the column sigma is how wrong each checkpoint is itself; --checkpoints-error states one figure for all and passes over the column")
		}
		squares.AddProduct(v, v)
		stated++
	}
	switch n := len(r.residuals); {
	case stated == n:
		r.own, r.combined = math.Sqrt(squares.Mean(n)), true
		a.report.Note(fmt.Sprintf("checkpoints: their own error is the root mean square of the column sigma: %v", number{r.own, -1}), "checkpoints_error", r.own)
	case stated > 0:
		a.report.Warn("sigma-missing", fmt.Sprintf("sigma: %d of %s state one: not combined with the RMSE; --checkpoints-error states one figure for all", stated, counted(n, "checkpoint")), "stated", stated, "checkpoints", n)
	}
	return nil
}

// independent refuses checkpoints at the place of a reading or a line's vertex that
// the surface was made from.
func (a *accuracyCommand) independent(l *loaded, c *checkpoints, samples []interp.Sample) error {
	merged := map[orb.Point]int{}
	for k, m := range l.set.Merged {
		merged[m.Point] = k + 1
	}
	var used []string
	n := 0
	inputs := l.surface.Mesh().Inputs()
	for i, s := range samples {
		at := c.set.Points[i]
		who := ""
		if s.Location.Place == triangulate.OnVertex {
			who = l.inputPlace(int(inputs[s.Location.Vertex]))
		} else if k := merged[at]; k > 0 {
			m := l.set.Merged[k-1]
			who = fmt.Sprintf("%s:%d, which is merged", l.names[m.File], m.Line)
		}
		if who == "" {
			continue
		}
		if n++; n <= a.listMost {
			used = append(used, fmt.Sprintf("%s: checkpoint %q at %s is where the surface was made from %s", c.at(i), c.set.ID(i), placeText(at), who))
		}
	}
	if n == 0 {
		return nil
	}
	if n > len(used) {
		used = append(used, fmt.Sprintf("and %d more", n-len(used)))
	}
	return status.With(status.WrongData, errors.New(strings.Join(used, "\n")+": expected checkpoints that the surface was not made from"),
		"leave the readings out of the surface (--without, --exclude), or the checkpoints out of their file: a checkpoint that was also used proves nothing")
}

// placeText writes a place as its file has it.
func placeText(p orb.Point) string {
	return fmt.Sprintf("(%v, %v)", number{p[0], -1}, number{p[1], -1})
}

// groupNames returns the groups in the order of the report: by text.
func groupNames(of map[string][]float64) []string {
	var names []string
	for name := range of {
		names = append(names, name)
	}
	slices.SortFunc(names, cmp.Compare[string])
	return names
}

// summarise makes the figures.
func (a *accuracyCommand) summarise(l *loaded, r *accuracyReport) {
	xy, z := l.digits(a.decimals)
	r.z, r.xy = z, xy
	all := r.figures("all", r.residuals)
	r.All = &all
	if a.by.text != "" {
		of := map[string][]float64{}
		for _, row := range r.rows {
			if row.place != triangulate.Outside {
				name := r.c.set.Text(a.by.value, row.index)
				of[name] = append(of[name], row.residual)
			}
		}
		for _, name := range groupNames(of) {
			r.Groups = append(r.Groups, r.figures(name, of[name]))
		}
	}
	c := r.c.set.Counts
	r.Checkpoints = &checkpointCounts{c.Read, len(r.residuals), r.outside, c.Merged, c.LeftOut, c.Refused}
	if a.checkpoints.value.hold != nil {
		r.Checkpoints.Read = c.Used + c.Merged + c.LeftOut + c.Refused
	}
	r.spread = accuracy.SpreadOf(r.places, l.reach())
	r.Spread = &spreadFigures{
		r.spread.Quadrants, number{r.spread.Closest, xy}, number{r.spread.Diagonal, xy}, r.spread.Even(),
	}
	n := len(r.residuals)
	switch {
	case n < accuracy.LeastNSSDA:
		a.report.Warn("few-checkpoints", fmt.Sprintf("%s: the NSSDA asks for at least %d, the ASPRS edition of 2023 for at least %d", counted(n, "checkpoint"), accuracy.LeastNSSDA, accuracy.Least2023), "checkpoints", n)
	case n < accuracy.Least2023:
		a.report.Warn("few-checkpoints", fmt.Sprintf("%s: enough for the NSSDA (at least %d), the ASPRS edition of 2023 asks for at least %d", counted(n, "checkpoint"), accuracy.LeastNSSDA, accuracy.Least2023), "checkpoints", n)
	}
}

// predict has every reading predicted from all the others. Residuals have the sign of
// those at checkpoints: surface minus reading.
func (a *accuracyCommand) predict(ctx context.Context, l *loaded, r *accuracyReport) error {
	_, finish := a.display.Stage("leaving readings out")
	left, err := l.surface.LeaveOneOut(ctx, a.workers())
	finish()
	if err != nil {
		return err
	}
	residuals := left.Residuals()
	for i := range residuals {
		residuals[i] = -residuals[i]
	}
	r.xy, r.z = l.digits(a.decimals)
	figures := r.figures("leave-one-out", residuals)
	// What standards make of checkpoints they do not make of this.
	none := number{math.NaN(), 0}
	figures.NSSDA95, figures.RMSE2023, figures.Interval1990, figures.IntervalNMAS = none, none, none, none
	r.LeaveOneOut = &leaveOneOutFigures{left.Predicted, left.Outline, left.Lined, figures}
	if left.Predicted < leastPredicted {
		a.report.Warn("few-predicted", fmt.Sprintf("leave-one-out: %s predicted: too few to say anything", counted(left.Predicted, "reading")), "predicted", left.Predicted)
	}
	return nil
}

// leastPredicted is how many predictions say something: common sense, no standard.
const leastPredicted = 5
