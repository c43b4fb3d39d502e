package main

import (
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/io/readings"
)

const accuracyLong = `Compares the surface with checkpoints: independent measurements that the surface
was not made from. They come from a file, or are readings that a pattern holds out
of the surface. A residual is surface minus checkpoint: above zero the surface is
too high. Checkpoints outside the surface are listed and not counted.

The report has count, mean, median, standard deviation (n-1), skewness and excess
kurtosis (of the population), RMSE, 95th percentile without signs, and the
smallest and the largest, of all and by the texts of a role (--by class). From
the RMSE it states
  NSSDA (FGDC-STD-007.3-1998): 1.9600 x RMSE, at least 20 checkpoints;
  ASPRS edition 2 (2023): the RMSE, combined with the checkpoints' own error where
  --checkpoints-error or their column sigma gives it, at least 30 checkpoints;
  the contour interval it supports: 3 x RMSE (ASPRS 1990, class 1), 3.2898 x RMSE
  (National Map Accuracy Standards, 1947).
The NSSDA's rules were read in a paraphrase of the whole standard, the ASPRS
figures in secondary sources and from memory: look into the standard that your
contract names. Which class a survey meets is for a licensed person to state.

--leave-one-out predicts every reading from all the others, with or without
checkpoints. It says how well the readings agree and how dense they are for this
ground, not how accurate they are: one error that all share does not show.

A checkpoint at the place of a reading that the surface was made from is an error:
it is not independent. Formats by extension: report .txt, .json and .csv (a row a
group); residuals .csv and .geojson.`

const accuracyExample = `isofacet accuracy sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --without code=BP --checkpoints sample:gravel-pit/checks.csv
isofacet accuracy sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --without code=BP --checkpoints sample:gravel-pit/checks.csv --checkpoints-columns id=check,x=easting,y=northing,z=elevation,class=where --by class
isofacet accuracy sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --without code=BP --leave-one-out
isofacet accuracy sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --checkpoints code=BP --out residuals=residuals.csv --out report.json`

// newAccuracy is "isofacet accuracy".
func newAccuracy(p *program) *cobra.Command {
	a := &accuracyCommand{program: p}
	cmd := &cobra.Command{
		Use:     "accuracy --checkpoints FILE|ROLE=PATTERN [options] [FILE...]",
		Short:   "the surface against checkpoints",
		Long:    accuracyLong,
		Example: accuracyExample,
		RunE:    a.run,
	}
	zero := decimal.FromInt(0)
	a.checkpoints = parsed[checkpointSource]{form: "FILE|ROLE=PATTERN", parse: parseCheckpoints}
	a.columns = parsed[readings.Columns]{form: "LIST", parse: readings.ParseColumns}
	a.own = option.Number{Least: &zero}
	a.by = parsed[readings.Role]{form: "ROLE", parse: parseKeptRole}
	const group = "Checkpoints"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: group, Name: "checkpoints", Value: &a.checkpoints,
			Text: "a file of checkpoints, - for standard input; or readings to hold out of the surface, as in code=CHK*"},
		manual.Option{Group: group, Name: "checkpoints-columns", Value: &a.columns, Default: "the header's words",
			Text: "what the columns of the file of checkpoints hold, like --columns"},
		manual.Option{Group: group, Name: "checkpoints-error", Value: &a.own, Default: "that of their column sigma, if all have one",
			Text: "root mean square error of the checkpoints themselves"},
		manual.Option{Group: group, Name: "by", Value: &a.by,
			Text: "report by the texts of this role as well: " + strings.Join(keptRoleNames(), ", ")},
		manual.Option{Group: group, Name: "leave-one-out", Value: &a.leaveOneOut, Switch: true,
			Text: "say how far each reading is from the surface of all the others"})
	manual.Add(fs, a.reading.readingOptions()...)
	manual.Add(fs, a.writing.writingOptions([]string{"report", "residuals"}, []string{formatText, formatJSON, formatCSV, formatGeoJSON})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

type accuracyCommand struct {
	*program
	reading
	writing
	checkpoints parsed[checkpointSource]
	columns     parsed[readings.Columns]
	own         option.Number
	by          parsed[readings.Role]
	leaveOneOut manual.Switch
}

// checkpointSource is where checkpoints come from: a file, or readings that a
// pattern holds out.
type checkpointSource struct {
	file string
	hold *readings.Pattern
}

// parseCheckpoints takes what begins with a role and an equals sign for a pattern; a
// file of such a name is reached with a folder in front.
func parseCheckpoints(text string) (checkpointSource, error) {
	word, _, ok := strings.Cut(text, "=")
	if _, isRole := readings.ParseRole(word); ok && isRole {
		p, err := readings.ParsePattern("checkpoints", text)
		return checkpointSource{hold: &p}, err
	}
	if text == "" {
		return checkpointSource{}, errors.New("a file, or ROLE=PATTERN such as code=CHK*")
	}
	return checkpointSource{file: text}, nil
}

// parseKeptRole reads the name of a role whose text stays with every reading.
func parseKeptRole(text string) (readings.Role, error) {
	r, ok := readings.ParseRole(text)
	if !ok || !r.Kept() {
		return 0, errors.New("one of " + strings.Join(keptRoleNames(), ", "))
	}
	return r, nil
}

func keptRoleNames() []string {
	var names []string
	for _, r := range readings.Roles() {
		if r.Kept() {
			names = append(names, r.String())
		}
	}
	return names
}

func (a *accuracyCommand) run(cmd *cobra.Command, files []string) error {
	a.begin(cmd, &a.writing)
	if err := a.check(files); err != nil {
		return err
	}
	list, err := a.inputs(files)
	if err != nil {
		return err
	}
	named := byExtensions(map[string]string{".txt": formatText, ".json": formatJSON, ".csv": formatCSV, ".geojson": formatGeoJSON})
	dests, err := a.destinations("report", files, named, formatText)
	if err != nil {
		return err
	}
	if err := fitParts(dests); err != nil {
		return err
	}
	for _, d := range dests {
		if d.part == "residuals" && a.checkpoints.text == "" {
			return status.Usage(fmt.Errorf("--out residuals=%s without checkpoints: expected --checkpoints", d.path), "isofacet inspect --write-suspects writes readings that are off the surface of the others")
		}
	}
	var asked *input
	if name := a.checkpoints.value.file; name != "" {
		if asked, err = a.input(name); err != nil {
			return err
		}
	}
	out, err := a.open(cmd.Context(), &a.writing, dests, a.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	l, found, err := a.loadBoth(cmd.Context(), list, asked)
	if err != nil {
		return err
	}
	if err := l.needsTriangles(); err != nil {
		return err
	}
	a.tellSurface(l)
	r := &accuracyReport{}
	if found != nil {
		if r, err = a.compare(cmd.Context(), l, found); err != nil {
			return err
		}
	}
	if a.leaveOneOut {
		if err := a.predict(cmd.Context(), l, r); err != nil {
			return err
		}
	}
	if err := a.settleWarnings(); err != nil {
		return err
	}
	return a.write(list, l, r, out)
}

// check refuses what can be refused before anything is read.
func (a *accuracyCommand) check(files []string) error {
	source := a.checkpoints.value
	switch {
	case a.checkpoints.text == "" && bool(a.leaveOneOut):
		for option, given := range map[string]bool{"--checkpoints-columns": a.columns.text != "", "--checkpoints-error": a.own.IsSet(), "--by": a.by.text != ""} {
			if given {
				return status.Usage(fmt.Errorf("%s without checkpoints: expected --checkpoints", option), "leave it out: leave-one-out has no checkpoints")
			}
		}
	case a.checkpoints.text == "":
		return status.Usage(errors.New("--checkpoints is missing: expected a file of checkpoints, or readings to hold out"),
			"as in --checkpoints checks.csv, or --checkpoints code=CHK*; --leave-one-out does without")
	case source.hold != nil && a.columns.text != "":
		return status.Usage(errors.New("--checkpoints-columns without a file of checkpoints: expected --checkpoints FILE"),
			"leave it out: checkpoints that are held out have the columns of the readings")
	case source.file == "-" && readsStandardInput(files):
		return status.Usage(errors.New(`--checkpoints "-": standard input holds the readings: expected one of the two from a file`), "name the file of readings")
	}
	return nil
}

// readsStandardInput tells whether readings come from there.
func readsStandardInput(files []string) bool {
	for _, f := range files {
		if f == "-" {
			return true
		}
	}
	return len(files) == 0
}

// fitParts refuses a format that a part does not have.
func fitParts(dests []*destination) error {
	has := map[string][]string{"report": {formatText, formatJSON, formatCSV}, "residuals": {formatCSV, formatGeoJSON}}
	for _, d := range dests {
		known := false
		for _, f := range has[d.part] {
			known = known || f == d.format
		}
		switch {
		case known:
		case d.path == "-" && d.format == formatText:
			d.format = formatCSV
		default:
			return status.Usage(fmt.Errorf("--out %s=%s: format %s: expected one of %s for the part %s", d.part, d.path, d.format, strings.Join(has[d.part], ", "), d.part),
				"--out residuals=FILE.csv is a row a checkpoint, --out report=FILE.json the statistics")
		}
	}
	return nil
}
