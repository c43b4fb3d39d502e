package main

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/io/wells"
)

const accountLong = `Writes every reading as it was read, one a row: used, merged, left out or refused,
with the reason, and for heads the arithmetic. It is the table that goes into the
report: used + merged + left out + refused = read. A bad line stops the run, as
in every command, unless --lenient has it refused and listed.

A row has file, line, id, x, y, z, use and reason, then the texts that the readings
have (zone, status, time, round, code ...), and where depths were reduced
measuring_point, valid_from, depth, product_depth, product, specific_gravity, head,
bound and arithmetic, in the unit of the file and with every decimal. x, y and z
are as used, in the units of --to-xy-unit and --to-z-unit. The z of a used reading
that others were merged into is the one that stands for all of them.

head = measuring point - depth to water + thickness of product x specific gravity.
The thickness is a column of its own, or depth to water less depth to product. A
bound such as <402.0 says that the head lies below: it never becomes a level, but
commands that make a surface warn where the surface is above it.

Meanings of a status, with the words for each; case and marks between words do not
matter, --status-table explains others:

`

const accountExample = `isofacet readings sample:landfill/gauging.csv --wells sample:landfill/wells.csv --round 2024-Q3 --only zone=shallow
isofacet readings sample:landfill/gauging.csv --wells sample:landfill/wells.csv --round 2024-Q3 --only zone=shallow --out wells.geojson
isofacet readings sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --without code=BP --out shots-used.csv`

// statusHelp lists the words for each meaning.
func statusHelp() string {
	var b strings.Builder
	usual := wells.Usual()
	for _, m := range wells.Meanings() {
		text := fmt.Sprintf("  %s: %s", m, strings.Join(usual.Words(m), ", "))
		for len(text) > 80 {
			k := strings.LastIndex(text[:80], " ")
			b.WriteString(text[:k] + "\n")
			text = "    " + text[k+1:]
		}
		b.WriteString(text + "\n")
	}
	return strings.TrimSuffix(b.String(), "\n")
}

// newReadings is "isofacet readings".
func newReadings(p *program) *cobra.Command {
	a := &accountCommand{program: p}
	cmd := &cobra.Command{
		Use:     "readings [options] [FILE...]",
		Short:   "every reading with its arithmetic, and what became of it",
		Long:    accountLong + statusHelp(),
		Example: accountExample,
		RunE:    a.run,
	}
	fs := cmd.Flags()
	manual.Add(fs, slices.DeleteFunc(a.reading.readingOptions(), func(o manual.Option) bool {
		return o.Group == groupEdges && o.Name != "code-table"
	})...)
	manual.Add(fs, a.writing.writingOptions([]string{"table"}, []string{formatCSV, formatGeoJSON})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

type accountCommand struct {
	*program
	reading
	writing
}

func (a *accountCommand) run(cmd *cobra.Command, files []string) error {
	a.begin(cmd, &a.writing)
	a.account = true
	list, err := a.inputs(files)
	if err != nil {
		return err
	}
	dests, err := a.destinations("table", files, byExtensions(map[string]string{".csv": formatCSV, ".geojson": formatGeoJSON}), formatCSV)
	if err != nil {
		return err
	}
	out, err := a.open(cmd.Context(), &a.writing, dests, a.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	set, err := a.read(cmd.Context(), &a.reading, list)
	if err != nil {
		return err
	}
	l := &loaded{set: set, decimalsXY: set.DecimalsXY, decimalsZ: set.DecimalsZ}
	for _, in := range list {
		l.names = append(l.names, in.Name)
	}
	l.measure()
	a.tellReadings(list, set)
	if err := a.guardReadings(&a.reading, l); err != nil {
		return err
	}
	if err := a.settleWarnings(); err != nil {
		return err
	}
	t := a.accountOf(l)
	if a.rec != nil {
		a.recordReadings(list, l)
		a.rec.Stable.Result = accountResult{Rows: len(t.rows), Columns: t.names()}
	}
	for _, d := range out.list {
		err := out.write(d, func(d *destination) error {
			if d.format == formatGeoJSON {
				return a.writeFeatures(d, a.featureOptions(a.labels(""), t.xy, t.z), t.features)
			}
			return t.write(d.w)
		})
		if err != nil {
			return err
		}
	}
	return out.commit()
}

// accountResult is what the run record says of the table.
type accountResult struct {
	Rows    int      `json:"rows"`
	Columns []string `json:"columns"`
}

// noNumber is the value of a reading that has none.
var noNumber = math.NaN()
