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

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/interp"
	"isofacet/interp/flow"
	"isofacet/io/readings"
	"isofacet/io/units"
	"isofacet/triangulate"
)

// flowing is the work of one run.
type flowing struct {
	*flowCommand
	list   []*input
	starts []flowStart
	states []*flowState
	parts  []readings.Part // as they were read, those without a state too
	ratio  float64         // z units in a unit of x and y, to make gradients plain numbers
	xy, z  int
	slope  int
	angle  int
}

// flowStart is where a flow line begins.
type flowStart struct {
	name string
	at   orb.Point
}

// flowState is the groundwater of one round in one zone.
type flowState struct {
	round, zone string
	heads       *readings.Set
	l           *loaded // nil if there are too few wells
	wells       int
	why         string // there is no direction
	sigmas      bool   // heads have uncertainties, of their own or by option
	plane       *flow.Plane
	worst       int // reading that the plane misses most
	three       []flow.Solution
	ids         []int32 // of every vertex, its first reading
	lines       []flowLine
	arrows      []flowArrow
}

type flowLine struct {
	flowStart
	flow.Line
	inside bool
}

type flowArrow struct {
	at            orb.Point
	head          float64
	size, azimuth float64
}

// name is what messages call a state.
func (s *flowState) name() string {
	var parts []string
	if s.round != "" {
		parts = append(parts, "round "+s.round)
	}
	if s.zone != "" {
		parts = append(parts, "zone "+s.zone)
	}
	if len(parts) == 0 {
		return "all wells"
	}
	return strings.Join(parts, ", ")
}

// readStarts reads the places where flow lines begin.
func (j *flowing) readStarts(ctx context.Context, in *input) error {
	if in == nil {
		return nil
	}
	found, err := readings.ReadPositions(ctx, in.Source, readings.Options{Lenient: bool(j.lenient), Workers: j.workers()})
	if err != nil {
		return &placesError{err}
	}
	in.file.Layout = found.Layout.String()
	j.report.Note("starts: "+in.Name+": "+found.Layout.String(), "file", in.Name, "layout", found.Layout.String())
	id := slices.IndexFunc(found.Layout.Columns, func(c readings.Column) bool { return c.Role == readings.ID })
	for i, p := range found.Points {
		s := flowStart{name: fmt.Sprint(i + 1), at: p}
		if id >= 0 {
			if row := found.Row(nil, i); id < len(row) && row[id] != "" {
				s.name = row[id]
			}
		}
		j.starts = append(j.starts, s)
	}
	return nil
}

// partMark stands between round and zone in the name of a part of the readings.
const partMark = "\x00"

// load reads the readings, a set a round and zone, and makes their surfaces.
func (j *flowing) load(ctx context.Context) error {
	parts, err := j.readParts(ctx, &j.reading, j.list, func(text func(readings.Role) string) string {
		return text(readings.Round) + partMark + text(readings.Zone)
	})
	if err != nil {
		return err
	}
	j.parts = parts
	several := 0
	for _, p := range parts {
		if p.Err != nil || p.Set.Len() > 0 {
			several++
		}
	}
	for _, p := range parts {
		round, zone, _ := strings.Cut(p.Name, partMark)
		s := &flowState{round: round, zone: zone, heads: p.Set}
		if p.Err != nil {
			return p.Err
		}
		if p.Set.Len() == 0 && several > 0 {
			j.tellReadings(j.list, p.Set) // left out before its zone was known
			continue
		}
		if several > 1 {
			j.report.Note(s.name() + ":")
		}
		if err := j.state(ctx, s, p.Set); err != nil {
			return err
		}
		j.states = append(j.states, s)
	}
	slices.SortFunc(j.states, func(a, b *flowState) int { return cmp.Or(cmp.Compare(a.round, b.round), cmp.Compare(a.zone, b.zone)) })
	return nil
}

// state makes the surface of a round and zone, if it has wells enough.
func (j *flowing) state(ctx context.Context, s *flowState, set *readings.Set) error {
	s.wells = set.Len()
	if s.wells < 3 {
		j.tellReadings(j.list, set)
		s.why = fmt.Sprintf("%s: no direction: it takes three", counted(s.wells, "well"))
		j.report.Warn("few-wells", s.name()+" has "+s.why, "round", s.round, "zone", s.zone, "wells", s.wells)
		return nil
	}
	l, err := j.stand(ctx, &j.reading, j.list, set)
	if err != nil {
		return err
	}
	s.l = l
	s.ids = l.surface.Mesh().Inputs()
	if l.shown().Mesh().NumTriangles() == 0 {
		s.why = "wells in line: a slope along that line only, no direction"
		j.report.Warn("in-line", s.name()+": "+s.why, "round", s.round, "zone", s.zone)
		s.l = nil
		return nil
	}
	j.tellSurface(l)
	return nil
}

// sigmas are the standard uncertainties of heads, in the order of the set, each its own or
// that of --sigma; nil if nothing is known of them.
func (j *flowing) sigmas(set *readings.Set) ([]float64, error) {
	column := set.Has(readings.Sigma)
	if !column && !j.sigma.IsSet() {
		return nil, nil
	}
	all := make([]float64, set.Len())
	for i := range all {
		own, ok, err := 0.0, false, error(nil)
		if column {
			own, ok, err = sigmaOf(set, i, &j.reading)
		}
		at := fmt.Sprintf("%s:%d", j.list[set.Source(i)].Name, set.Lines[i])
		switch {
		case err != nil:
			return nil, status.With(status.WrongData, fmt.Errorf("%s: %w", at, err), sigmaHint)
		case ok:
			all[i] = own
		case j.sigma.IsSet():
			all[i] = j.sigma.Value.Float64()
		default:
			return nil, status.With(status.WrongData, fmt.Errorf("%s: no sigma: expected one for every well, as others have one", at), "--sigma S says what holds where there is none")
		}
	}
	return all, nil
}

// settle works out digits and the ratio of units.
func (j *flowing) settle() error {
	j.ratio = 1
	xy, z := j.xyUnitOut(), j.zUnitOut()
	if c, ok := units.Between(z, xy); ok && c.Changes() {
		by, over := c.Ratio()
		j.ratio = float64(by) / float64(over)
		j.report.Note(fmt.Sprintf("gradients: heads times %d/%d, to be in the unit of x and y", by, over))
	}
	for _, s := range j.states {
		if s.l != nil {
			xy, z := s.l.digits(j.decimals)
			j.xy, j.z = max(j.xy, xy), max(j.z, z)
		}
	}
	if j.decimals.Resolve(0) < 0 {
		j.xy, j.z = -1, -1
	}
	j.slope, j.angle = j.decimals.Resolve(slopeDigits), j.decimals.Resolve(azimuthDigits)
	return nil
}

// xyUnitOut and zUnitOut are the units of the outputs.
func (j *flowing) xyUnitOut() units.Unit { return laterUnit(j.xyUnit.value, j.toXYUnit.value) }
func (j *flowing) zUnitOut() units.Unit  { return laterUnit(j.zUnit.value, j.toZUnit.value) }

func laterUnit(from, to units.Unit) units.Unit {
	if to != units.Unstated {
		return to
	}
	return from
}

// make works everything out and writes it.
func (j *flowing) make(ctx context.Context, out *outputs) error {
	if err := j.settle(); err != nil {
		return err
	}
	for _, s := range j.states {
		if s.l == nil {
			continue
		}
		if err := j.work(ctx, s, out); err != nil {
			return err
		}
	}
	if err := j.onlyOne(out); err != nil {
		return err
	}
	if err := j.settleWarnings(); err != nil {
		return err
	}
	if j.rec != nil {
		j.recordParts()
		j.rec.Stable.Result = j.rows()
	}
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error { return j.write(ctx, d) }); err != nil {
			return err
		}
	}
	if err := j.settleWarnings(); err != nil {
		return err
	}
	return out.commit()
}

// recordParts puts the account of all readings into the record: every line is in one
// part, but for lines that could not be taken apart, which are in each.
func (j *flowing) recordParts() {
	all := &record.Readings{NotUsed: []record.NotUsed{}}
	for _, p := range j.parts {
		c := p.Set.Counts
		all.Read, all.Used, all.Merged = all.Read+c.Read, all.Used+c.Used, all.Merged+c.Merged
		all.LeftOut, all.Refused = all.LeftOut+c.LeftOut, all.Refused+c.Refused
		all.NotUsed = append(all.NotUsed, j.notUsed(j.list, p.Set)...)
	}
	j.rec.Stable.Readings = all
}

// onlyOne refuses a map of several rounds or zones, and a rose without an arrow.
func (j *flowing) onlyOne(out *outputs) error {
	var can []*flowState
	for _, s := range j.states {
		if s.plane != nil {
			can = append(can, s)
		}
	}
	for _, d := range out.list {
		switch {
		case len(can) == 0 && d.part != partSummary:
			return status.With(status.WrongData, fmt.Errorf("--out %s=%s: no round or zone has three wells that are not in line: expected one that has", d.part, d.path), "isofacet inspect lists what is left out, and why")
		case d.part == partMap && len(can) > 1:
			return status.Usage(fmt.Errorf("--out map=%s: %d rounds and zones: expected one", d.path, len(can)), "choose with --round and --only zone=NAME")
		}
	}
	return nil
}

// work works out one state.
func (j *flowing) work(ctx context.Context, s *flowState, out *outputs) error {
	var at []orb.Point
	var heads []float64
	var used []int
	all, err := j.sigmas(s.l.set)
	if err != nil {
		return err
	}
	s.sigmas = all != nil
	var sigmas []float64
	for i, p := range s.l.set.Points {
		if s.l.contains(p) {
			at, heads, used = append(at, p), append(heads, s.l.set.Z[i]), append(used, i)
			if s.sigmas {
				sigmas = append(sigmas, all[i])
			}
		}
	}
	var plane *flow.Plane
	if s.sigmas {
		plane, err = flow.FitEach(at, heads, sigmas)
	} else {
		plane, err = flow.Fit(at, heads, math.NaN())
	}
	if errors.Is(err, flow.ErrInLine) {
		s.why = "wells in line: a slope along that line only, no direction"
		j.report.Warn("in-line", s.name()+": "+s.why, "round", s.round, "zone", s.zone)
		return nil
	}
	if err != nil {
		return err
	}
	s.plane, s.wells, s.worst = plane, plane.Wells, used[plane.Worst]
	if v := plane.Verdict(); v != flow.Sound {
		j.report.Warn("verdict", fmt.Sprintf("%s: %v%s", s.name(), v, j.because(s, v)), "round", s.round, "zone", s.zone, "verdict", v.String())
	}
	if j.method.Word() == methodPlane {
		j.report.Note(fmt.Sprintf("fitted plane: %s: it misses the heads by %v (root mean square), at most by %v at %s", s.name(),
			number{plane.RMS, j.z}, number{plane.WorstResidual, j.z}, j.wellName(s, s.worst)))
	}
	surface := s.l.surface
	m := surface.Mesh()
	var ofVertex []float64
	if s.sigmas {
		inputs := m.Inputs()
		ofVertex = make([]float64, len(inputs))
		for v, i := range inputs {
			if ofVertex[v] = math.NaN(); int(i) < len(all) {
				ofVertex[v] = all[i]
			} else if j.sigma.IsSet() {
				ofVertex[v] = j.sigma.Value.Float64()
			}
		}
	}
	for t := range m.CanonicalTriangles(m.Rank()) {
		if s.sigmas {
			s.three = append(s.three, flow.SolveEach(surface, t, ofVertex))
		} else {
			s.three = append(s.three, flow.Solve(surface, t, math.NaN()))
		}
	}
	j.trace(s)
	return j.point(ctx, s)
}

// givenSigma is what uncertainties of heads come to, as it was given; empty if it was not.
func (j *flowing) givenSigma(s *flowState) string {
	if s.l.set.Has(readings.Sigma) {
		return number{s.plane.Noise(), j.z}.String()
	}
	return j.sigma.String()
}

// because says by what a verdict is reached.
func (j *flowing) because(s *flowState, v flow.Verdict) string {
	switch v {
	case flow.BelowNoise:
		return fmt.Sprintf(": the heads differ by %v, less than %d x %s", number{s.plane.Range, j.z}, flow.NoiseFactor, j.givenSigma(s))
	case flow.InLine:
		return fmt.Sprintf(": the wells spread %.0f %% as far across as along", 100*s.plane.Across)
	case flow.Vague:
		return fmt.Sprintf(": ± %.0f degrees", s.plane.Gradient.AzimuthSigma())
	}
	return ""
}

// wellName is the id of a reading, or its place in the file.
func (j *flowing) wellName(s *flowState, i int) string {
	if i < 0 {
		return "-"
	}
	if id := s.l.set.ID(i); id != "" {
		return id
	}
	return s.l.inputPlace(i)
}

// trace traces the flow lines.
func (j *flowing) trace(s *flowState) {
	if len(j.starts) == 0 {
		return
	}
	t := flow.NewTracer(s.l.shown())
	outside := 0
	for _, begin := range j.starts {
		line := flowLine{flowStart: begin}
		if j.method.Word() == methodPlane {
			line.Line, line.inside = s.plane.Straight(s.l.shown(), begin.at)
		} else {
			line.Line, line.inside = t.Trace(begin.at)
		}
		if !line.inside {
			outside++
		}
		if line.inside && line.Ending == flow.Stopped {
			j.report.Warn("stopped", fmt.Sprintf("%s: the flow line from %s was given up after %d places: the ground is all but level there", s.name(), begin.name, len(line.Points)))
		}
		s.lines = append(s.lines, line)
	}
	j.report.Note(fmt.Sprintf("flow lines: %s: %d, %d begin outside the surface", s.name(), len(s.lines), outside), "lines", len(s.lines), "outside", outside)
	if outside == len(s.lines) {
		j.report.Warn("all-outside", s.name()+": every flow line begins outside the surface: are x and y in the right order?")
	}
}

// point makes the arrows.
func (j *flowing) point(ctx context.Context, s *flowState) error {
	if !j.arrows.IsSet() {
		return nil
	}
	b := orb.MultiPoint(s.l.shown().Mesh().Positions()).Bound()
	nodes, n := flow.Lattice(b, j.arrows.Value)
	if n > 0 {
		return status.Usage(fmt.Errorf("--arrows %s: some %.3g places: expected at most %d", j.arrows.Value, n, flow.LatticeMost), "use a larger distance")
	}
	samples, err := s.l.surface.Query(ctx, nodes, j.workers())
	if err != nil {
		return err
	}
	s.l.limitSamples(nodes, samples)
	for i := range samples {
		if samples[i].Location.Place == triangulate.Outside {
			continue
		}
		a := flowArrow{at: nodes[i], head: samples[i].Z}
		if j.method.Word() == methodPlane {
			a.head, a.size, a.azimuth = s.plane.At(nodes[i]), s.plane.Gradient.Size(), s.plane.Gradient.Azimuth()
		} else {
			dzdx, dzdy := s.l.surface.Gradient(samples[i].Location.Triangle)
			a.size, a.azimuth = interp.Slope(dzdx, dzdy), interp.DownhillAzimuth(dzdx, dzdy)
		}
		s.arrows = append(s.arrows, a)
	}
	if len(s.arrows) == 0 {
		j.report.Warn("no-arrows", fmt.Sprintf("%s: no whole multiple of %s in x and y lies on the surface", s.name(), j.arrows.Value))
	}
	return nil
}
