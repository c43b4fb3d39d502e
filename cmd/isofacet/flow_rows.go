package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"isofacet/interp/flow"
)

// flowReport is what flow writes as JSON, and what the run record says.
type flowReport struct {
	Sigma        *number   `json:"sigma"`        // of --sigma, null if it was not given
	Conductivity string    `json:"conductivity"` // with its unit; empty if it was not given
	Porosity     *number   `json:"porosity"`
	Rows         []flowRow `json:"rows"`
	Cautions     []string  `json:"cautions"`
}

// flowRow is the plane of one round in one zone.
type flowRow struct {
	Round         string `json:"round"`
	Zone          string `json:"zone"`
	Wells         int    `json:"wells"`
	HeadRange     number `json:"head_range"`
	Gradient      number `json:"gradient"`
	GradientSigma number `json:"gradient_sigma"`
	Azimuth       number `json:"azimuth"`
	AzimuthSigma  number `json:"azimuth_sigma"`
	SigmaUsed     number `json:"sigma_used"`
	SigmaFrom     string `json:"sigma_from"` // given, misfit or unknown
	RMS           number `json:"misfit_rms"`
	Misfit        number `json:"misfit_standard_deviation"`
	WorstWell     string `json:"worst_well"`
	WorstResidual number `json:"worst_residual"`
	Across        number `json:"across"`
	Verdict       string `json:"verdict"`
	Velocity      number `json:"velocity"`
	VelocityUnit  string `json:"velocity_unit"`
	Triangles     int    `json:"triangles"`
	SoundOnes     int    `json:"triangles_sound"`
}

// velocityDigits are more than anyone knows a conductivity to.
const velocityDigits = 6

var nothing = number{math.NaN(), 0}

// row is the row of a state.
func (j *flowing) row(s *flowState) flowRow {
	r := flowRow{Round: s.round, Zone: s.zone, Wells: s.wells, HeadRange: nothing, Gradient: nothing, GradientSigma: nothing, Azimuth: nothing,
		AzimuthSigma: nothing, SigmaUsed: nothing, RMS: nothing, Misfit: nothing, WorstResidual: nothing, Across: nothing, Velocity: nothing, SigmaFrom: "unknown", Verdict: s.why}
	p := s.plane
	if p == nil {
		return r
	}
	g := p.Gradient
	r.HeadRange, r.Across = number{p.Range, j.z}, number{p.Across, j.slope}
	r.Gradient, r.GradientSigma = number{float64(g.Size() * j.ratio), j.slope}, number{float64(g.SizeSigma() * j.ratio), j.slope}
	r.Azimuth, r.AzimuthSigma = number{g.Azimuth(), j.angle}, number{g.AzimuthSigma(), j.angle}
	r.SigmaUsed, r.RMS, r.Misfit = number{p.Sigma, j.z}, number{p.RMS, j.z}, number{p.Misfit, j.z}
	switch {
	case p.FromMisfit:
		r.SigmaFrom = "misfit"
	case s.sigmas:
		r.SigmaFrom = "given"
	}
	r.WorstWell, r.WorstResidual = j.wellName(s, s.worst), number{p.WorstResidual, j.z}
	r.Verdict = p.Verdict().String()
	if j.porosity.IsSet() {
		r.Velocity = number{flow.SeepageVelocity(j.conductivity.value, float64(g.Size()*j.ratio), j.porosity.Value.Float64()), j.decimals.Resolve(velocityDigits)}
		r.VelocityUnit = j.conductivity.value.Unit()
	}
	r.Triangles = len(s.three)
	for i := range s.three {
		if s.three[i].Verdict == flow.Sound {
			r.SoundOnes++
		}
	}
	return r
}

func (j *flowing) rows() *flowReport {
	r := &flowReport{Cautions: j.cautions(), Rows: []flowRow{}}
	if j.sigma.IsSet() {
		r.Sigma = &number{j.sigma.Value.Float64(), -1}
	}
	if j.porosity.IsSet() {
		r.Conductivity, r.Porosity = j.conductivity.value.String(), &number{j.porosity.Value.Float64(), -1}
	}
	for _, s := range j.states {
		r.Rows = append(r.Rows, j.row(s))
	}
	return r
}

// cautions are what goes with every result.
func (j *flowing) cautions() []string {
	all := []string{
		"levels are those of the time of the round; seasons, pumping and tides change them",
		"directions are apparent and horizontal, and take the aquifer to conduct equally in all horizontal directions",
		"computed from the wells listed; a licensed geologist or engineer, by local rules, reviews and signs what others rely on",
	}
	if j.porosity.IsSet() {
		all = append(all, "the velocity is the mean of water between grains; contaminants need not move with it")
	}
	return all
}

// summaryColumns head the table of rounds.
const summaryColumns = "round,zone,wells,head_range,gradient,gradient_sigma,azimuth,azimuth_sigma,sigma_used,sigma_from," +
	"misfit_rms,misfit_standard_deviation,worst_well,worst_residual,across,verdict,velocity,velocity_unit,triangles,triangles_sound\n"

// writeSummary writes the rounds and zones.
func (j *flowing) writeSummary(w io.Writer, format string) error {
	report := j.rows()
	switch format {
	case formatJSON:
		enc := json.NewEncoder(w)
		enc.SetEscapeHTML(false)
		enc.SetIndent("", "  ")
		return enc.Encode(report)
	case formatText:
		return j.writeText(w, report)
	}
	b := bufio.NewWriter(w)
	b.WriteString(summaryColumns)
	for _, r := range report.Rows {
		var row []byte
		row = appendFields(row, []string{r.Round, r.Zone, strconv.Itoa(r.Wells)})
		row = appendFields(row, []string{orBlank(r.HeadRange), orBlank(r.Gradient), orBlank(r.GradientSigma), orBlank(r.Azimuth), orBlank(r.AzimuthSigma), orBlank(r.SigmaUsed), r.SigmaFrom,
			orBlank(r.RMS), orBlank(r.Misfit), r.WorstWell, orBlank(r.WorstResidual), orBlank(r.Across), r.Verdict, orBlank(r.Velocity), r.VelocityUnit, strconv.Itoa(r.Triangles), strconv.Itoa(r.SoundOnes)})
		row[len(row)-1] = '\n'
		b.Write(row)
	}
	return b.Flush()
}

// orBlank is a number in a table, empty for none.
func orBlank(n number) string {
	if !isFinite(n.v) {
		return ""
	}
	return n.String()
}

// writeText writes the summary for people.
func (j *flowing) writeText(w io.Writer, report *flowReport) error {
	b := bufio.NewWriter(w)
	line := func(subject, format string, values ...any) {
		fmt.Fprintf(b, "%-11s "+format+"\n", append([]any{subject}, values...)...)
	}
	for i, r := range report.Rows {
		s := j.states[i]
		if i > 0 {
			fmt.Fprintln(b)
		}
		if len(report.Rows) > 1 || r.Round != "" || r.Zone != "" {
			fmt.Fprintln(b, s.name())
		}
		if s.plane == nil {
			line("wells", "%d: %s", r.Wells, r.Verdict)
			continue
		}
		line("wells", "%d, heads differ by %v", r.Wells, r.HeadRange)
		line("gradient", "%v%s", r.Gradient, plusMinus(r.GradientSigma, ""))
		line("azimuth", "%v%s", r.Azimuth, plusMinus(r.AzimuthSigma, " degrees clockwise from grid north"))
		line("verdict", "%s", r.Verdict)
		line("misfit", "%v root mean square about the plane, at most %v at %s", r.RMS, r.WorstResidual, r.WorstWell)
		line("", "%s", sigmaText(r, j.givenSigma(s)))
		if j.porosity.IsSet() {
			line("velocity", "%v %s with conductivity %s and porosity %s", r.Velocity, r.VelocityUnit, report.Conductivity, j.porosity.Value)
		}
		line("triangles", "%d of three wells, %d of them sound", r.Triangles, r.SoundOnes)
		if best := j.largest(s); best != nil {
			line("", "the largest sound one, %s: %v towards %v degrees", strings.Join(j.wellNames(s, best), " "),
				number{float64(best.Gradient.Size() * j.ratio), j.slope}, number{best.Gradient.Azimuth(), j.angle})
		}
	}
	fmt.Fprintln(b)
	for _, c := range report.Cautions {
		fmt.Fprintln(b, "caution: "+c)
	}
	return b.Flush()
}

// plusMinus is an uncertainty behind its number.
func plusMinus(n number, unit string) string {
	if !isFinite(n.v) {
		return unit
	}
	return fmt.Sprintf(" ± %v%s", n, unit)
}

// sigmaText says what uncertainties rest on.
func sigmaText(r flowRow, given string) string {
	switch r.SigmaFrom {
	case "given":
		return "± are standard uncertainties from that of a head, " + given
	case "misfit":
		if given != "" {
			return fmt.Sprintf("± are standard uncertainties from the misfit, %v: the plane misses the heads by more than %s each", r.Misfit, given)
		}
		return fmt.Sprintf("± are standard uncertainties from the misfit, %v: neither --sigma nor a column sigma was given", r.Misfit)
	}
	return "no uncertainties: neither --sigma nor a column sigma was given, and three wells have no misfit"
}

// largest is the largest triangle with a sound solution, of several the first.
func (j *flowing) largest(s *flowState) *flow.Solution {
	var best *flow.Solution
	for i := range s.three {
		if x := &s.three[i]; x.Verdict == flow.Sound && (best == nil || x.Area > best.Area) {
			best = x
		}
	}
	return best
}

func (j *flowing) wellNames(s *flowState, x *flow.Solution) []string {
	var names []string
	for _, v := range x.Wells {
		names = append(names, j.wellName(s, int(s.ids[v])))
	}
	return names
}
