package main

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"
	"github.com/spf13/cobra"

	"isofacet/cmd/internal/advice"
	"isofacet/cmd/internal/option"
	"isofacet/interp"
	"isofacet/io/numtext"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// places are what is asked about: positions, each with a row of its own columns.
type places struct {
	points []orb.Point
	names  []string
	// row appends the fields of row i.
	row func(dst []string, i int) []string
}

func typedPlaces(list []option.Place) *places {
	p := &places{names: []string{"x", "y"}}
	for _, t := range list {
		p.points = append(p.points, orb.Point{t.X, t.Y})
	}
	p.row = func(dst []string, i int) []string { return append(dst, list[i].TextX, list[i].TextY) }
	return p
}

func filePlaces(found *readings.Positions) *places {
	return &places{found.Points, found.Names, found.Row}
}

// answerNames head the columns of the answers.
var answerNames = []string{"surface_z", "slope", "downhill_azimuth", "place"}

// explainNames head the columns of --explain.
func explainNames() []string {
	names := []string{"triangle"}
	for i := 1; i <= 3; i++ {
		for _, part := range []string{"id", "x", "y", "z", "weight"} {
			names = append(names, fmt.Sprintf("%s_%d", part, i))
		}
	}
	return names
}

// bytesPlace is what a place takes: position and answer (40), the order of the
// visits (20), and its row as written.
const bytesPlace = 120

// queryResult is what the run record says of the answers.
type queryResult struct {
	Extent  extents       `json:"extent"`
	Surface surfaceCounts `json:"surface"`
	Asked   int           `json:"asked"`
	Outside int           `json:"outside"`
	// Also says what the added columns include.
	Also []alsoResult `json:"also,omitempty"`
}

type alsoResult struct {
	Column   string `json:"column"`
	Includes string `json:"includes"`
}

// answer asks the surface and writes the table.
func (q *queryCommand) answer(cmd *cobra.Command, list []*input, l *loaded, asked *places, out *outputs) error {
	need := uint64(l.set.Len())*bytesVertex + uint64(len(asked.points))*bytesPlace
	if err := q.announce("asking at "+counted(len(asked.points), "place"), need); err != nil {
		return err
	}
	samples, err := l.surface.Query(cmd.Context(), asked.points, q.workers())
	if err != nil {
		return err
	}
	l.limitSamples(asked.points, samples)
	outside := 0
	for i := range samples {
		if samples[i].Location.Place == triangulate.Outside {
			outside++
		}
	}
	q.report.Note(fmt.Sprintf("places: %d asked, %d outside the surface", len(samples), outside), "asked", len(samples), "outside", outside)
	if outside == len(samples) && outside > 0 {
		q.report.Warn("all-outside", "every place lies outside the surface: are x and y in the right order?")
	}
	q.warnOfLongOutline(l, advice.MaxEdge(advice.Spacing(l.surface.Mesh(), q.workers())))
	if err := q.settleWarnings(); err != nil {
		return err
	}
	if q.rec != nil {
		q.recordReadings(list, l)
		q.rec.Stable.Result = &queryResult{l.extents(q.decimals), l.surfaceCounts(q.decimals), len(samples), outside, alsoResults(q.also.value)}
	}
	t := q.table(l, asked, samples)
	t.trust = &trust{p: q.program, l: l, r: &q.reading, t: &q.trusting}
	for _, name := range q.also.value {
		if err := t.trust.prepare(cmd.Context(), name); err != nil {
			return err
		}
		if name == showDistance {
			t.finder = t.trust.nearest.Finder()
		}
	}
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error {
			if d.format == formatGeoJSON {
				return q.writeFeatures(d, q.featureOptions(q.labels(""), t.xy, t.z), t.features)
			}
			return t.write(d.w)
		}); err != nil {
			return err
		}
	}
	return out.commit()
}

func alsoResults(names []string) (all []alsoResult) {
	for _, name := range names {
		all = append(all, alsoResult{name, trustIncludes(name)})
	}
	return all
}

// A table writes answers as CSV.
type table struct {
	l       *loaded
	asked   *places
	samples []interp.Sample

	z, slope, azimuth, xy, weight int // digits after the point
	numbers                       map[triangulate.Triangle]int
	inputs                        []int32 // of every vertex the first reading; nil unless explained

	also   []string // of trustNames
	digits []int    // of those
	trust  *trust
	finder *interp.Finder
}

func (q *queryCommand) table(l *loaded, asked *places, samples []interp.Sample) *table {
	t := &table{l: l, asked: asked, samples: samples, also: q.also.value}
	for _, name := range t.also {
		t.digits = append(t.digits, trustDigits(l, q.decimals, name))
	}
	t.xy, t.z = l.digits(q.decimals)
	t.slope, t.azimuth, t.weight = q.decimals.Resolve(slopeDigits), q.decimals.Resolve(azimuthDigits), q.decimals.Resolve(weightDigits)
	if q.explain {
		m := l.surface.Mesh()
		t.inputs = m.Inputs()
		t.numbers = map[triangulate.Triangle]int{}
		for i := range samples {
			t.numbers[samples[i].Location.Triangle] = 0
		}
		n := 0
		for triangle := range m.CanonicalTriangles(m.Rank()) {
			n++
			if _, asked := t.numbers[triangle]; asked {
				t.numbers[triangle] = n
			}
		}
	}
	return t
}

// write writes the header and a row a place.
func (t *table) write(w io.Writer) error {
	b := bufio.NewWriterSize(w, 1<<16)
	names := slices.Concat(t.asked.names, answerNames, t.also)
	if t.inputs != nil {
		names = append(names, explainNames()...)
	}
	row := appendFields(nil, names)
	var fields []string
	for i := range t.samples {
		row[len(row)-1] = '\n'
		if _, err := b.Write(row); err != nil {
			return err
		}
		fields = t.asked.row(fields[:0], i)
		row = appendFields(row[:0], fields)
		row = t.appendAnswer(row, i)
	}
	row[len(row)-1] = '\n'
	if _, err := b.Write(row); err != nil {
		return err
	}
	return b.Flush()
}

// appendAnswer appends the answer at place i, a comma behind every field.
func (t *table) appendAnswer(row []byte, i int) []byte {
	s := &t.samples[i]
	loc := s.Location
	if loc.Place == triangulate.Outside {
		row = append(row, ",,,outside,"...)
		row = append(row, strings.Repeat(",", len(t.also))...)
		if t.inputs != nil {
			row = append(row, strings.Repeat(",", len(explainNames()))...)
		}
		return row
	}
	dzdx, dzdy := t.l.surface.Gradient(loc.Triangle)
	row = append(numtext.Append(row, s.Z, t.z), ',')
	row = append(numtext.Append(row, interp.Slope(dzdx, dzdy), t.slope), ',')
	if azimuth := interp.DownhillAzimuth(dzdx, dzdy); !math.IsNaN(azimuth) {
		row = numtext.Append(row, azimuth, t.azimuth)
	}
	row = append(row, ',')
	row = append(append(row, loc.Place.String()...), ',')
	for k, name := range t.also {
		row = append(numtext.Append(row, t.trust.at(name, loc, t.asked.points[i], t.finder), t.digits[k]), ',')
	}
	if t.inputs != nil {
		row = t.appendReasons(row, i)
	}
	return row
}

// appendReasons appends the triangle, its readings and their weights.
func (t *table) appendReasons(row []byte, i int) []byte {
	loc := t.samples[i].Location
	row = append(numtext.Append(row, float64(t.numbers[loc.Triangle]), 0), ',')
	corners, weights := t.l.surface.Weights(loc, t.asked.points[i])
	for k, v := range corners {
		at := t.l.surface.Mesh().Position(v)
		row = append(appendField(row, t.l.id(int(t.inputs[v]))), ',')
		row = append(numtext.Append(row, at[0], t.xy), ',')
		row = append(numtext.Append(row, at[1], t.xy), ',')
		row = append(numtext.Append(row, t.l.surface.Z()[v], t.z), ',')
		row = append(numtext.Append(row, weights[k], t.weight), ',')
	}
	return row
}

// appendFields appends fields with a comma behind each.
func appendFields(row []byte, fields []string) []byte {
	for _, f := range fields {
		row = append(appendField(row, f), ',')
	}
	return row
}

// appendField appends a text, in quotes where RFC 4180 asks for them.
func appendField(row []byte, text string) []byte {
	if !strings.ContainsAny(text, ",\"\r\n") {
		return append(row, text...)
	}
	row = append(row, '"')
	for i := range len(text) {
		if text[i] == '"' {
			row = append(row, '"')
		}
		row = append(row, text[i])
	}
	return append(row, '"')
}
