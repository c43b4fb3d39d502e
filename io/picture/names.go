package picture

import (
	"strings"

	"isofacet/grid"
)

// unitName returns a unit as people write it on a map.
func unitName(unit string) string {
	switch unit {
	case "ft-int":
		return "ft (international)"
	case "ft-us":
		return "ft (US survey)"
	}
	return unit
}

// withUnit appends a unit, if there is one.
func withUnit(number, unit string) string {
	if unit == "" {
		return number
	}
	return number + " " + unitName(unit)
}

// valueNote says what the values are.
func valueNote(l grid.Labels) string {
	what := "values"
	switch l.Show {
	case "", "value":
	case "slope":
		return "slope, rise over run"
	case "downhill-azimuth":
		return "downhill azimuth, degrees clockwise from north"
	case shades:
		return "shade, the share of a light from the north-west"
	default:
		what = l.Show
	}
	parts := []string{what + " in a unit that is not stated"}
	if l.ZUnit != "" {
		parts[0] = what + " in " + unitName(l.ZUnit)
	}
	if l.VerticalDatum != "" {
		parts = append(parts, "heights from "+l.VerticalDatum)
	}
	return strings.Join(parts, ", ")
}

// placeNote says what the coordinates are.
func placeNote(l grid.Labels) string {
	var parts []string
	if l.CRS != "" {
		parts = append(parts, l.CRS)
	} else {
		parts = append(parts, "system not stated")
	}
	if l.HorizontalDatum != "" {
		parts = append(parts, l.HorizontalDatum)
	}
	if l.XYUnit != "" {
		parts = append(parts, unitName(l.XYUnit))
	}
	return "coordinates: " + strings.Join(parts, ", ")
}
