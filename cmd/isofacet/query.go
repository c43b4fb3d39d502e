package main

import (
	"errors"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/io/readings"
)

const queryLong = `Asks the surface at places: its value, slope and downhill azimuth, and whether
the place lies at a vertex, on an edge, inside a triangle or outside the surface.
Outside there is no value; the fields stay empty and such places are counted on
standard error.

Places are typed as --at X,Y, or read from one file, whose columns are found like
those of readings and written in front of the answers as they are. Formats by
extension: .csv, and .geojson, where a place is a point with the value as height.

--spots asks at the spot heights of a map instead: summits, pits and saddles, which
are vertices inside the surface with all about them lower, higher, or both in turns.
--spots-every D adds places at whole multiples of D. The rows begin with the kind of
spot, the reading there, x and y.

Where triangles meet, slope and azimuth are those of the triangle that owns the
place: the one just east of it, or north where an edge runs east.

With --explain a row also holds the triangle's number (from 1, triangles sorted by
their corners), its three readings counter-clockwise, the one with the smallest x
first, and the weight of each: the value is the sum of weight times reading.

--add adds how far values can be trusted. ` + trustLong

const queryExample = `isofacet query sample:gravel-pit/shots.csv --at 431250,5621500 --at 431260,5621500
isofacet query sample:gravel-pit/shots.csv --at sample:gravel-pit/checks.csv --out checked.csv
isofacet query sample:gravel-pit/shots.csv --spots --spots-every 50 --out spots.geojson
isofacet query sample:gravel-pit/shots.csv --at 431250,5621500 --add distance
echo 431250 5621500 | isofacet query sample:gravel-pit/shots.csv --at - --explain`

// newQuery is "isofacet query".
func newQuery(p *program) *cobra.Command {
	q := &queryCommand{program: p}
	cmd := &cobra.Command{
		Use:     "query --at X,Y|FILE [options] [FILE...]",
		Short:   "the surface at places",
		Long:    queryLong,
		Example: queryExample,
		RunE:    q.run,
	}
	q.also = parsed[[]string]{form: "LIST", parse: parseTrust}
	q.atColumns = parsed[readings.Columns]{form: "LIST", parse: readings.ParseColumns}
	zero := decimal.FromInt(0)
	q.spotsEvery = option.Number{Least: &zero}
	const group = "Places"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: group, Name: "at", Value: &q.at, Repeatable: true, Text: "a place, or a file of places, - for standard input"},
		manual.Option{Group: group, Name: "at-columns", Value: &q.atColumns, Default: "the header's words",
			Text: "what the columns of the file of places hold, like --columns"},
		manual.Option{Group: group, Name: "spots", Value: &q.spots, Switch: true, Text: "ask at the summits, pits and saddles of the surface"},
		manual.Option{Group: group, Name: "spots-every", Value: &q.spotsEvery, Default: "none", Text: "ask on a lattice of this distance, at its whole multiples in x and y"},
		manual.Option{Group: group, Name: "explain", Value: &q.explain, Switch: true, Text: "add the triangle, its readings and their weights"},
		manual.Option{Group: group, Name: "add", Value: &q.also, Default: "nothing", Text: "columns to add: some of " + strings.Join(trustNames, ", ") + ", with commas between"})
	manual.Add(fs, q.trustOptions(group)...)
	manual.Add(fs, q.reading.readingOptions()...)
	manual.Add(fs, q.writing.writingOptions([]string{"table"}, []string{formatCSV, formatGeoJSON})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

type queryCommand struct {
	*program
	reading
	writing
	asking
	trusting
	explain    manual.Switch
	also       parsed[[]string]
	spots      manual.Switch
	spotsEvery option.Number
}

func (q *queryCommand) run(cmd *cobra.Command, files []string) error {
	q.begin(cmd, &q.writing)
	if err := q.check(files); err != nil {
		return err
	}
	list, err := q.inputs(files)
	if err != nil {
		return err
	}
	dests, err := q.destinations("table", files, byExtensions(map[string]string{".csv": formatCSV, ".geojson": formatGeoJSON}), formatCSV)
	if err != nil {
		return err
	}
	asked, err := q.askedInput(q.program)
	if err != nil {
		return err
	}
	out, err := q.open(cmd.Context(), &q.writing, dests, q.paths())
	if err != nil {
		return err
	}
	defer out.abort()

	// The places are read first: they are few, and a fault in them should not
	// show only after the readings have been worked on.
	places, err := q.asking.places(cmd.Context(), q.program, asked, bool(q.lenient), slices.Concat(answerNames, q.also.value, explainNames()))
	if err != nil {
		return err
	}
	l, err := q.load(cmd.Context(), &q.reading, list)
	if err != nil {
		return err
	}
	if err := l.needsTriangles(); err != nil {
		return err
	}
	q.tellSurface(l)
	if q.wantsSpots() {
		if places, err = q.spotPlaces(l); err != nil {
			return err
		}
	}
	return q.answer(cmd, list, l, places, out)
}

// check refuses what can be refused before anything is read.
func (q *queryCommand) check(files []string) error {
	if err := q.checkSpots(); err != nil {
		return err
	}
	if q.sigma.IsSet() && !slices.Contains(q.also.value, showUncertainty) {
		return status.Usage(errors.New("--sigma without uncertainty: expected it to be asked for"), "add --add uncertainty, or leave --sigma out")
	}
	return q.asking.check(len(files) == 0 || slices.Contains(files, "-"))
}
