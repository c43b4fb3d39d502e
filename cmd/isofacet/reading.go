package main

import (
	"slices"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/grid/decimal"
	"isofacet/io/readings"
)

// reading is how the input is read: what the command line says of its text, and
// which readings are used.
type reading struct {
	columns   parsed[readings.Columns]
	delimiter parsed[readings.Delimiter]
	decimal   parsed[readings.Decimal]
	comment   typed
	skipRows  option.Rows
	missing   parsed[[]string]
	lenient   manual.Switch

	spotRule   parsed[readings.SpotRule]
	spotSpread option.Number
	spotWithin option.Number
	only       parsedList[readings.Pattern]
	without    parsedList[readings.Pattern]
	exclude    typed

	depths
	edges
	measures
	guards
	rounds

	account bool // keep what was read of readings that are not used

	crs             option.System
	horizontalDatum option.Label
	verticalDatum   option.Label
}

const groupLabels = "Labels, carried into every output"

// readingOptions returns the options of every command that reads readings.
func (r *reading) readingOptions() []manual.Option {
	zero := decimal.FromInt(0)
	r.columns = parsed[readings.Columns]{form: "LIST", parse: readings.ParseColumns}
	r.delimiter = parsed[readings.Delimiter]{form: "NAME", parse: readings.ParseDelimiter}
	r.decimal = parsed[readings.Decimal]{form: "point|comma", parse: readings.ParseDecimal}
	r.comment, r.exclude = typed{form: "MARK"}, typed{form: "FILE"}
	r.missing = parsed[[]string]{form: "LIST", parse: func(s string) ([]string, error) { return readings.ParseMissing(s), nil }}
	r.spotRule = parsed[readings.SpotRule]{form: "RULE", parse: readings.ParseSpotRule}
	r.spotSpread, r.spotWithin = option.Number{Least: &zero}, option.Number{Least: &zero}
	r.only = parsedList[readings.Pattern]{form: "ROLE=PATTERN", parse: pattern("only")}
	r.without = parsedList[readings.Pattern]{form: "ROLE=PATTERN", parse: pattern("without")}

	const text, which, labels = "Text of the readings", "Which readings", groupLabels
	return slices.Concat([]manual.Option{
		{Group: text, Name: "columns", Value: &r.columns, Default: "the header's words",
			Text: "what the columns hold: in order, as in id,northing,easting,elevation,code (- skips one), or by header name or number, as in x=East,y=North,z=4"},
		{Group: text, Name: "delimiter", Value: &r.delimiter, Default: "detected",
			Text: "comma, semicolon, tab, blanks, or the character itself"},
		{Group: text, Name: "decimal", Value: &r.decimal, Default: "detected", Text: "the decimal mark"},
		{Group: text, Name: "comment", Value: &r.comment, Default: "#, if the file begins with one",
			Text: "what begins a line that is passed over; none: nothing does"},
		{Group: text, Name: "skip-rows", Value: &r.skipRows, Default: "0", Text: "rows to pass over at the top of each file"},
		{Group: text, Name: "missing", Value: &r.missing, Default: "none",
			Text: "texts that mean no value, as in -9999,NM,blank; such readings are left out and listed"},
		{Group: text, Name: "lenient", Value: &r.lenient, Switch: true,
			Text: "leave bad lines out and list them; without it a bad line stops the run"},

		{Group: which, Name: "same-spot", Value: &r.spotRule, Default: "mean if they agree, otherwise refuse",
			Text: "what becomes of several readings at one place: refuse, mean, first, last, lowest or highest"},
		{Group: which, Name: "same-spot-spread", Value: &r.spotSpread, Default: "0",
			Text: "how far apart the values at one place may lie and still agree"},
		{Group: which, Name: "same-spot-within", Value: &r.spotWithin, Default: "0",
			Text: "distance within which readings count as at one place"},
		{Group: which, Name: "only", Value: &r.only, Repeatable: true,
			Text: "use only readings whose text matches a shell pattern, as in code=GRD*"},
		{Group: which, Name: "without", Value: &r.without, Repeatable: true,
			Text: "leave out readings whose text matches a shell pattern"},
		{Group: which, Name: "exclude", Value: &r.exclude,
			Text: "file of readings to leave out: columns id (or x and y), decision and reason; a row counts if its decision is \"leave out\" and it has a reason"},
	}, r.depths.depthOptions(), r.rounds.roundOptions(r), r.measures.measureOptions(), r.guards.guardOptions(), r.edges.edgeOptions(), []manual.Option{
		{Group: labels, Name: "crs", Value: &r.crs, Text: "coordinate system of x and y"},
		{Group: labels, Name: "horizontal-datum", Value: &r.horizontalDatum, Text: "what x and y refer to"},
		{Group: labels, Name: "vertical-datum", Value: &r.verticalDatum, Text: "what z refers to"},
	})
}

func pattern(name string) func(string) (readings.Pattern, error) {
	return func(s string) (readings.Pattern, error) { return readings.ParsePattern(name, s) }
}

// declared returns what the command line says about the text of the files.
func (r *reading) declared() readings.Declared {
	return readings.Declared{
		Columns:   r.columns.value,
		Delimiter: r.delimiter.value,
		Decimal:   r.decimal.value,
		Comment:   r.comment.text,
		SkipRows:  int(r.skipRows),
		Missing:   r.missing.value,
	}
}

// spots returns the rule for several readings at one place.
func (r *reading) spots() readings.Spots {
	return readings.Spots{
		Rule:        r.spotRule.value,
		Spread:      r.spotSpread.Value.Float64(),
		SpreadGiven: r.spotSpread.IsSet(),
		Within:      r.spotWithin.Value.Float64(),
	}
}
