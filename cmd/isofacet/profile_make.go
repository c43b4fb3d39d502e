package main

import (
	"context"
	"errors"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/interp/profile"
	"isofacet/io/lines"
	"isofacet/io/readings"
)

// profiling is the work of one run.
type profiling struct {
	*profileCommand
	surfaces []*profiled
	follow   []followed
	read     *lines.Set // the file of lines, nil if the line is typed
	places   *places
	cuts     []cut
	overlaps int

	xy, z, slope int // digits after the point
}

// followed is a line with its name, and its profile on each surface.
type followed struct {
	name     string
	line     *profile.Alignment
	profiles []profile.Profile
}

// cut is a section of a line, and its profile on each surface.
type cut struct {
	of       *followed
	section  profile.Section
	profiles []profile.Profile
}

// readLines reads the file of lines to follow.
func (j *profiling) readLines(ctx context.Context, in *input) error {
	if in == nil {
		return nil
	}
	set, err := lines.Paths(ctx, []readings.Source{in.Source}, lines.Options{Zeros: lines.UseZeros, Workers: j.workers()})
	if err != nil {
		return err
	}
	j.tellLines(in.Name, "line", set)
	j.read = set
	return nil
}

// layLines makes alignments. Lines of a file are in the units of the readings, typed
// ones in those of the outputs.
func (j *profiling) layLines() error {
	from := j.stationFrom.Value.Float64()
	add := func(name string, points []orb.Point) error {
		line, err := profile.NewAlignment(points, from)
		if err != nil {
			return status.With(status.WrongData, fmt.Errorf("line %q: %w", name, err), "look at its places")
		}
		j.follow = append(j.follow, followed{name: name, line: line})
		return nil
	}
	if j.read == nil {
		var points []orb.Point
		for _, p := range j.along.Places {
			points = append(points, orb.Point{p.X, p.Y})
		}
		return add("line", points)
	}
	j.measureLines(j.read)
	for i := range j.read.Lines {
		if err := add(j.read.Lines[i].Name, j.read.Lines[i].Points); err != nil {
			return err
		}
	}
	return nil
}

// bytesCrossing is what a crossing takes while all profiles are held.
const bytesCrossing = 96

// make traces the profiles and writes them.
func (j *profiling) make(ctx context.Context, list []*input, out *outputs) error {
	for _, s := range j.surfaces {
		xy, z := s.l.digits(j.decimals)
		j.xy, j.z = max(j.xy, xy), max(j.z, z)
	}
	if j.decimals.Resolve(0) < 0 {
		j.xy, j.z = -1, -1
	}
	j.slope = j.decimals.Resolve(slopeDigits)
	if err := j.cutAcross(); err != nil {
		return err
	}
	if err := j.announceTracing(); err != nil {
		return err
	}
	for _, s := range j.surfaces {
		if err := j.trace(ctx, s); err != nil {
			return err
		}
	}
	j.tell()
	if err := j.settleWarnings(); err != nil {
		return err
	}
	if j.rec != nil {
		j.recordReadings(list, j.surfaces[0].l)
		j.rec.Stable.Result = j.result()
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

// sectionsMost keeps a slip of the distance from filling the memory.
const sectionsMost = 1_000_000

// cutAcross makes the sections.
func (j *profiling) cutAcross() error {
	if !j.sections.IsSet() {
		return nil
	}
	step := j.sections.Value
	for i := range j.follow {
		f := &j.follow[i]
		if n := (f.line.End() - f.line.Start()) / step.Float64(); n > sectionsMost {
			return status.Usage(fmt.Errorf("--sections %s: some %.0f sections along line %q, which is %.6g long: expected at most %d", step, n, f.name, f.line.End()-f.line.Start(), sectionsMost),
				"use a larger distance")
		}
		sections, err := f.line.Sections(stationsAt(step, f.line.Start(), f.line.End()), j.left.Value.Float64(), j.right.Value.Float64())
		if err != nil {
			return status.With(status.WrongData, fmt.Errorf("sections of line %q: %w", f.name, err))
		}
		for _, s := range sections {
			j.cuts = append(j.cuts, cut{of: f, section: s})
		}
		j.tellOverlaps(f, sections)
	}
	return nil
}

// stationsAt returns both ends and the whole multiples of step between them.
func stationsAt(step decimal.Number, start, end float64) []float64 {
	all := []float64{start}
	k := int64(math.Ceil(start / step.Float64()))
	for ; ; k++ {
		n, err := step.Times(k)
		if err != nil || n.Float64() >= end {
			break
		}
		if n.Float64() > start {
			all = append(all, n.Float64())
		}
	}
	return append(all, end)
}

// tellOverlaps warns of sections that meet.
func (j *profiling) tellOverlaps(f *followed, sections []profile.Section) {
	overlaps := profile.Overlaps(sections)
	j.overlaps += len(overlaps)
	if len(overlaps) == 0 {
		return
	}
	first := overlaps[0]
	text := fmt.Sprintf("line %q: the sections at %v and %v meet", f.name, j.station(sections[first.First].Station), j.station(sections[first.Second].Station))
	if n := len(overlaps); n > 1 {
		text += fmt.Sprintf(", and %s more", counted(n-1, "pair"))
	}
	j.report.Warn("sections-meet", text+": on the inside of a bend the ground beyond is cut twice; shorter sections there do not", "line", f.name, "pairs", len(overlaps))
}

func (j *profiling) station(v float64) number { return number{v, j.xy} }

// announceTracing states what the profiles need. A straight line meets about twice the
// root of the number of triangles that it passes over.
func (j *profiling) announceTracing() error {
	n := 0.0
	for _, s := range j.surfaces {
		n += float64(3 * math.Sqrt(float64(s.l.surface.Mesh().NumTriangles())))
	}
	legs := len(j.cuts)
	for _, f := range j.follow {
		legs += len(f.line.Points()) - 1
	}
	most := 0
	for _, s := range j.surfaces {
		most += s.l.set.Len()
	}
	return j.announce(fmt.Sprintf("profiles along %s", counted(legs, "straight piece")),
		uint64(most)*bytesVertex+uint64(float64(legs)*min(n, 1e6))*bytesCrossing/4)
}

// trace makes the profiles on one surface.
func (j *profiling) trace(ctx context.Context, s *profiled) error {
	var all []*profile.Alignment
	for i := range j.follow {
		all = append(all, j.follow[i].line)
	}
	for i := range j.cuts {
		all = append(all, j.cuts[i].section.Line)
	}
	made, err := profile.Many(ctx, s.surface(), s.l.drawn.region, all, j.workers())
	if err != nil {
		return err
	}
	for i := range j.follow {
		j.follow[i].profiles = append(j.follow[i].profiles, made[i])
	}
	for i := range j.cuts {
		j.cuts[i].profiles = append(j.cuts[i].profiles, made[len(j.follow)+i])
	}
	return nil
}

// tell says how long the lines are, and where they have no surface.
func (j *profiling) tell() {
	for i := range j.follow {
		f := &j.follow[i]
		j.report.Note(fmt.Sprintf("line %q: %s, from station %v to %v", f.name, countedVertices(len(f.line.Points())), j.station(f.line.Start()), j.station(f.line.End())),
			"line", f.name, "from", f.line.Start(), "to", f.line.End())
		for k, s := range j.surfaces {
			p := &f.profiles[k]
			gaps := p.Gaps()
			on := ""
			if len(j.surfaces) > 1 {
				on = " of " + s.name
			}
			if len(p.Runs()) == 0 {
				j.report.Warn("no-surface", fmt.Sprintf("line %q lies outside the surface%s from end to end: are x and y in the right order?", f.name, on), "line", f.name)
				continue
			}
			j.listSome(len(gaps), func(g int) string {
				return fmt.Sprintf("gap: line %q has no surface%s from %v to %v", f.name, on, j.station(gaps[g].From), j.station(gaps[g].To))
			})
		}
	}
	if len(j.cuts) == 0 {
		return
	}
	gaps, empty := 0, 0
	for i := range j.cuts {
		p := &j.cuts[i].profiles[0]
		if len(p.Gaps()) > 0 {
			gaps++
		}
		if len(p.Runs()) == 0 {
			empty++
		}
	}
	j.report.Note(fmt.Sprintf("sections: %d, %d of them with gaps, %d without surface", len(j.cuts), gaps, empty),
		"sections", len(j.cuts), "with_gaps", gaps, "without_surface", empty)
}

// profileResult is what the run record says of the profiles.
type profileResult struct {
	Extent   extents       `json:"extent"`
	Surface  surfaceCounts `json:"surface"`
	Lines    []lineResult  `json:"lines"`
	Sections int           `json:"sections"`
	Meeting  int           `json:"meeting_pairs"`
}

type lineResult struct {
	Name   string   `json:"name"`
	From   number   `json:"from"`
	To     number   `json:"to"`
	Points int      `json:"points"`
	Gaps   []number `json:"gaps"` // from, to, from, to ...
}

func (j *profiling) result() *profileResult {
	l := j.surfaces[0].l
	r := &profileResult{Extent: l.extents(j.decimals), Surface: l.surfaceCounts(j.decimals), Sections: len(j.cuts), Meeting: j.overlaps}
	for i := range j.follow {
		f := &j.follow[i]
		one := lineResult{Name: f.name, From: j.station(f.line.Start()), To: j.station(f.line.End()), Points: len(f.profiles[0].Points), Gaps: []number{}}
		for _, g := range f.profiles[0].Gaps() {
			one.Gaps = append(one.Gaps, j.station(g.From), j.station(g.To))
		}
		r.Lines = append(r.Lines, one)
	}
	return r
}

// explainProfile is the way out of lines that cannot be followed.
func explainProfile(err error) (status.Code, string, bool) {
	if errors.Is(err, profile.ErrShort) {
		return status.WrongData, "a line needs two places that are not one", true
	}
	return 0, "", false
}

// samplesBeside asks the main surface at the places beside the line.
func (j *profiling) samplesBeside(ctx context.Context) ([]interp.Sample, error) {
	l := j.surfaces[0].l
	samples, err := l.surface.Query(ctx, j.places.points, j.workers())
	if err != nil {
		return nil, err
	}
	l.limitSamples(j.places.points, samples)
	return samples, nil
}
