package main

import (
	"io"

	"isofacet/grid"
	"isofacet/io/geojson"
)

// standardOutput is what messages call it.
const standardOutput = "standard output"

// name is what messages call an output.
func (d *destination) name() string {
	if d.path == "-" {
		return standardOutput
	}
	return d.path
}

// featureOptions returns how GeoJSON is written whose coordinates and values are
// what the labels say. Digits are those after the point, -1 for the shortest text.
func (p *program) featureOptions(labels grid.Labels, xyDigits, zDigits int) geojson.Options {
	opt := geojson.Options{XYDecimals: xyDigits, ZDecimals: zDigits, CoordinatesIn: labels.CRS, Workers: p.workers()}
	if opt.CoordinatesIn == "" {
		opt.CoordinatesIn = labels.HorizontalDatum
	}
	for _, m := range []struct{ name, label string }{
		{"xy_unit", labels.XYUnit}, {"z_unit", labels.ZUnit}, {"horizontal_datum", labels.HorizontalDatum}, {"vertical_datum", labels.VerticalDatum},
	} {
		if m.label != "" {
			opt.Members = append(opt.Members, geojson.Property{Name: m.name, Value: geojson.String(m.label)})
		}
	}
	return opt
}

// writeFeatures writes one GeoJSON output; fill writes its features. Warnings come
// before a byte is written as far as they can be known, since what went to a pipe
// cannot be taken back. Where they are errors, what goes to a pipe is made
// beforehand to learn the others.
func (p *program) writeFeatures(d *destination, opt geojson.Options, fill func(*geojson.Writer) error) error {
	told := map[geojson.WarningKind]bool{}
	tell := func(w *geojson.Writer) error {
		for _, warning := range w.Warnings() {
			if !told[warning.Kind] {
				told[warning.Kind] = true
				p.report.Warn(featureWarnings[warning.Kind], d.name()+": "+warning.String(), "file", d.path, "count", warning.Count)
			}
		}
		return p.settleWarnings()
	}
	if err := tell(geojson.NewWriter(io.Discard, opt)); err != nil {
		return err
	}
	all := func(to io.Writer) (*geojson.Writer, error) {
		w := geojson.NewWriter(to, opt)
		if err := fill(w); err != nil {
			return w, err
		}
		return w, w.Close()
	}
	if d.path == "-" && p.warnings.Word() == "fail" {
		w, err := all(io.Discard)
		if err != nil {
			return err
		}
		if err := tell(w); err != nil {
			return err
		}
	}
	w, err := all(d.w)
	if err != nil {
		return err
	}
	return tell(w)
}

// featureWarnings are the codes of the warnings of a GeoJSON writer.
var featureWarnings = map[geojson.WarningKind]string{
	geojson.NotDegrees:     "not-degrees",
	geojson.OutsideDegrees: "outside-degrees",
	geojson.Flattened:      "flattened",
}
