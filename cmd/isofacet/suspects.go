package main

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"runtime/debug"
	"slices"
	"strconv"
	"strings"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/grid/decimal"
	"isofacet/interp/accuracy"
	"isofacet/interp/suspect"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// suspecting is what the command line says of readings that lie off.
type suspecting struct {
	write  typed
	factor option.Number
}

func (s *suspecting) suspectOptions() []manual.Option {
	one := decimal.FromInt(1)
	s.write, s.factor = typed{form: "FILE"}, option.Number{Least: &one}
	const group = "Suspects"
	return []manual.Option{
		{Group: group, Name: "suspect-factor", Value: &s.factor, Default: strconv.Itoa(suspect.FactorUsual),
			Text: "how many scales a reading must lie off what the others expect to be listed; the scale is what readings about it lie off"},
		{Group: group, Name: "write-suspects", Value: &s.write,
			Text: "CSV file of the suspects with empty columns decision and reason: filled in, it is a file for --exclude"},
	}
}

// suspectsFound is what inspect says of readings that lie off what the others expect.
type suspectsFound struct {
	Factor   number         `json:"factor"`
	Expected int            `json:"expected"`
	Judged   int            `json:"judged"`
	Outline  int            `json:"outline"`
	LeaveOut leaveOutFound  `json:"leave_one_out"`
	Listed   []suspectFound `json:"listed"`
	Runs     []runFound     `json:"runs"`
	Codes    []codeFound    `json:"codes"`
	// Together counts readings that are off in larger groups of neighbours.
	Together int `json:"off_together"`
	// NoRuns says why runs were not looked for, if so.
	NoRuns string `json:"runs_not_looked_for,omitempty"`
}

type leaveOutFound struct {
	Mean   number `json:"mean"`
	Median number `json:"median"`
	SD     number `json:"standard_deviation"`
	RMSE   number `json:"rmse"`
	P95    number `json:"percentile_95"`
}

type suspectFound struct {
	ID       *string `json:"id"`
	X        number  `json:"x"`
	Y        number  `json:"y"`
	Z        number  `json:"z"`
	Expected number  `json:"expected"`
	Residual number  `json:"residual"`
	Scale    number  `json:"scale"`
	Off      number  `json:"off"` // in scales
	Reason   string  `json:"reason"`

	// Where it was read is said in words and in the file of suspects: the report is the
	// same in whatever order the lines come.
	file    string
	line    int
	inRun   bool
	reading int // -1 for a vertex of a line
	place   string
	vertex  triangulate.Vertex
}

type runFound struct {
	First  placeFound `json:"first"`
	Last   placeFound `json:"last"`
	Shots  int        `json:"shots"`
	Amount number     `json:"amount"`
	Spread number     `json:"spread"`
	Scale  number     `json:"scale"`

	found    suspect.Run
	from, to string
}

type codeFound struct {
	Code   string `json:"code"`
	Shots  int    `json:"shots"`
	Amount number `json:"amount"`
	Off    number `json:"off"`
}

// runsMost is how many readings are looked through for runs: books of shots are much
// smaller, and sweeps of a scanner have no rod.
const runsMost = 200_000

// bytesSuspect is what looking for suspects takes a reading beside the surface.
const bytesSuspect = 110

// suspects looks for readings that lie off what the others expect.
func (p *program) suspects(ctx context.Context, l *loaded, r *reading, opt *suspecting, w *writing) (*suspectsFound, error) {
	m := l.surface.Mesh()
	if m.NumTriangles() == 0 {
		return nil, nil
	}
	if err := p.announce("looking for suspects among "+counted(l.set.Len(), "reading"), uint64(m.NumVertices())*(bytesSuspect+bytesVertex)); err != nil {
		return nil, err
	}
	_, finish := p.display.Stage("looking for suspects")
	defer finish()
	left, err := l.surface.LeaveOneOut(ctx, p.workers())
	if err != nil {
		return nil, err
	}
	xy, z := l.digits(w.decimals)
	all := accuracy.Describe(left.Residuals())
	f := &suspectsFound{
		Factor: number{suspect.FactorUsual, -1}, Expected: left.Predicted, Outline: left.Outline,
		LeaveOut: leaveOutFound{number{all.Mean, z}, number{all.Median, z}, number{all.StdDev, z}, number{all.RMSE, z}, number{all.Percentile95, z}},
		Listed:   []suspectFound{}, Runs: []runFound{}, Codes: []codeFound{},
	}
	if opt.factor.IsSet() {
		f.Factor.v = opt.factor.Value.Float64()
	}
	o := suspect.Options{Factor: f.Factor.v, ScaleLeast: decimal.Float64(1, l.decimalsZ), Workers: p.workers()}
	var sequence []int
	if l.set.Len() > runsMost {
		f.NoRuns = fmt.Sprintf("more than %d readings", runsMost)
	} else {
		sequence = l.sequence()
		o.Sequence = make([]triangulate.Vertex, len(sequence))
		for k, i := range sequence {
			o.Sequence[k] = m.VertexOf(i)
		}
	}
	var codes []string
	o.Group, codes = l.codeGroups()
	if l.set.Len() > runsMost {
		// What is let go of must be gone before Find copies the mesh in one go.
		debug.FreeOSMemory()
	}
	res, err := suspect.Find(ctx, l.surface, left, o)
	if err != nil {
		return nil, err
	}
	f.Judged, f.Together = res.Judged, len(res.Together)
	f.name(l, res, sequence, codes, xy, z)
	f.explain(l, r)
	f.sort(l)
	p.tellSuspects(f)
	return f, nil
}

// sequence returns the readings in the order in which they were shot: by the number that
// ends their ids if all have one, else as they come in the files.
func (l *loaded) sequence() []int {
	n := l.set.Len()
	order := make([]int, n)
	type key struct {
		prefix string
		number uint64
	}
	keys := make([]key, 0, n)
	for i := range order {
		order[i] = i
		id := l.set.ID(i)
		k := len(id)
		for k > 0 && id[k-1] >= '0' && id[k-1] <= '9' {
			k--
		}
		number, err := strconv.ParseUint(id[k:], 10, 64)
		if err == nil && len(keys) == i {
			keys = append(keys, key{id[:k], number})
		}
	}
	if len(keys) == n {
		slices.SortStableFunc(order, func(a, b int) int {
			return cmp.Or(cmp.Compare(keys[a].prefix, keys[b].prefix), cmp.Compare(keys[a].number, keys[b].number))
		})
	}
	return order
}

// codeGroups numbers the codes, which come back in the order of their numbers, and tells
// which vertex has which; nil if readings have none.
func (l *loaded) codeGroups() (of []int32, codes []string) {
	if !l.set.Has(readings.Code) {
		return nil, nil
	}
	number := map[string]int32{}
	for i := range l.set.Len() {
		number[l.set.Text(readings.Code, i)] = 0
	}
	for code := range number {
		codes = append(codes, code)
	}
	slices.Sort(codes)
	for k, code := range codes {
		number[code] = int32(k)
	}
	m := l.surface.Mesh()
	of = make([]int32, m.NumVertices())
	for v := range of {
		of[v] = -1
	}
	for i := range l.set.Len() {
		if code := l.set.Text(readings.Code, i); code != "" {
			of[m.VertexOf(i)] = number[code]
		}
	}
	return of, codes
}

// name puts names to what was found.
func (f *suspectsFound) name(l *loaded, res *suspect.Result, sequence []int, codes []string, xy, z int) {
	listed := map[triangulate.Vertex]bool{}
	add := func(v triangulate.Vertex, residual, scale, off float64) {
		listed[v] = true
		at, own := l.surface.Mesh().Position(v), l.surface.Z()[v]
		s := suspectFound{
			X: number{at[0], xy}, Y: number{at[1], xy}, Z: number{own, z}, Expected: number{own - residual, z},
			Residual: number{residual, z}, Scale: number{scale, z}, Off: number{off, 1}, vertex: v, reading: -1,
		}
		name := l.nameVertex(v, xy)
		i := int(l.inputs[v])
		if i < l.set.Len() {
			s.reading, s.ID, s.file, s.line = i, name.Reading, l.names[l.set.Source(i)], int(l.set.Lines[i])
		}
		s.place = l.inputPlace(i)
		f.Listed = append(f.Listed, s)
	}
	for _, s := range res.Suspects {
		add(s.Vertex, s.Residual, s.Scale, s.Off)
	}
	for _, run := range res.Runs {
		first, last := sequence[run.First], sequence[run.Last]
		f.Runs = append(f.Runs, runFound{
			l.nameVertex(l.surface.Mesh().VertexOf(first), xy), l.nameVertex(l.surface.Mesh().VertexOf(last), xy), run.Last - run.First + 1,
			number{run.Amount, z}, number{run.Spread, z}, number{run.Scale, z}, run, l.shotName(first), l.shotName(last),
		})
		for _, shot := range run.Shots {
			if !listed[shot.Vertex] {
				add(shot.Vertex, shot.Residual, run.Scale, math.Abs(shot.Residual)/run.Scale)
			}
		}
	}
	for _, g := range res.Groups {
		f.Codes = append(f.Codes, codeFound{codes[g.Group], g.Shots, number{g.Amount, z}, number{g.Off, 1}})
	}
}

// shotName is a reading's id, or where it was read.
func (l *loaded) shotName(i int) string {
	if id := l.id(i); id != "" {
		return id
	}
	return l.inputPlace(i)
}

// explain says what may have happened: the run or the code that a suspect belongs to, or a
// usual slip. Heights that are converted or worked out are not those that were written
// down: their digits say nothing.
func (f *suspectsFound) explain(l *loaded, r *reading) {
	asWritten := r.transform() == nil && !r.wells.set && !l.set.Heads()
	for k := range f.Listed {
		s := &f.Listed[k]
		var reasons []string
		for _, run := range f.Runs {
			if slices.ContainsFunc(run.found.Shots, func(x suspect.Shot) bool { return x.Vertex == s.vertex }) {
				s.inRun = true
				reasons = append(reasons, fmt.Sprintf("one of %s to %s, all %s by %v", run.from, run.to, aboveBelow(run.Amount.v), number{math.Abs(run.Amount.v), run.Amount.digits}))
			}
		}
		for _, code := range f.Codes {
			if s.reading >= 0 && l.set.Text(readings.Code, s.reading) == code.Code {
				reasons = append(reasons, "code "+strconv.Quote(code.Code)+" lies off the ground about it")
			}
		}
		if len(reasons) == 0 && asWritten && s.reading >= 0 {
			const slipsMost = 2
			slips := suspect.Slips(s.Z.v, s.Expected.v, 3*s.Scale.v, l.decimalsZ)
			for _, slip := range slips[:min(slipsMost, len(slips))] {
				reasons = append(reasons, "perhaps "+slip.What)
			}
		}
		if len(reasons) == 0 {
			reasons = append(reasons, aboveBelow(s.Residual.v)+" what the others expect")
		}
		s.Reason = strings.Join(reasons, "; ")
	}
}

func aboveBelow(v float64) string {
	if v < 0 {
		return "below"
	}
	return "above"
}

// sort puts what is furthest off first.
func (f *suspectsFound) sort(l *loaded) {
	m := l.surface.Mesh()
	slices.SortFunc(f.Listed, func(a, b suspectFound) int {
		p, q := m.Position(a.vertex), m.Position(b.vertex)
		return cmp.Or(cmp.Compare(b.Off.v, a.Off.v), cmp.Compare(p[0], q[0]), cmp.Compare(p[1], q[1]))
	})
}

// tellSuspects says where they were read.
func (p *program) tellSuspects(f *suspectsFound) {
	p.listSome(len(f.Listed), func(i int) string {
		s := &f.Listed[i]
		return fmt.Sprintf("suspect: %s: %s", s.place, s.words())
	})
	if f.NoRuns != "" {
		p.report.Note("runs of shots are not looked for: " + f.NoRuns)
	}
}

// words tells of a suspect.
func (s *suspectFound) words() string {
	name := "a vertex of a line"
	if s.reading >= 0 {
		name = "a reading"
	}
	if s.ID != nil {
		name = *s.ID
	}
	return fmt.Sprintf("%s (%v, %v): z %v, expected %v, off %v, %v scales of %v: %s", name, s.X, s.Y, s.Z, s.Expected, s.Residual, s.Off, s.Scale, s.Reason)
}

// suspectsMost is how many suspects the report for people lists, beside those of runs.
const suspectsMost = 10

// writeText tells of suspects.
func (f *suspectsFound) writeText(line func(subject, format string, values ...any)) {
	if f == nil {
		return
	}
	line("leave out", "%s expected from the others, off by %v in the root mean square, 95 %% within %v; %d on the outline cannot be",
		counted(f.Expected, "reading"), f.LeaveOut.RMSE, f.LeaveOut.P95, f.Outline)
	if f.Judged == 0 {
		line("suspects", "none can be told: too few readings inside the outline to compare with")
		return
	}
	line("suspects", "%s of %d judged off by more than %v scales; nothing is corrected", counted(len(f.Listed), "reading"), f.Judged, f.Factor)
	if f.Together > 0 {
		line("together", "%s off to one side with their neighbours, not listed: steps of the ground without lines along them, or runs", counted(f.Together, "reading"))
	}
	shown, more := 0, 0
	for i := range f.Listed {
		switch s := &f.Listed[i]; {
		case s.inRun:
		case shown == suspectsMost:
			more++
		default:
			line("suspect", "%s", s.words())
			shown++
		}
	}
	if more > 0 {
		line("suspect", "and %d more; --write-suspects writes all", more)
	}
	for _, run := range f.Runs {
		line("run", "shots %s to %s (%d): %v %s what others expect, spread %v: rod height?", run.from, run.to, run.Shots,
			number{math.Abs(run.Amount.v), run.Amount.digits}, aboveBelow(run.Amount.v), run.Spread)
	}
	for _, c := range f.Codes {
		line("off ground", "code %s: %s, half of them more than %v %s what the others expect: ground?", strconv.Quote(c.Code), counted(c.Shots, "shot"),
			number{math.Abs(c.Amount.v), c.Amount.digits}, aboveBelow(c.Amount.v))
	}
}
