package picture_test

import (
	"testing"

	"isofacet/grid"
	"isofacet/io/picture"
)

func TestMapOfThePit(t *testing.T) {
	s := pit(t)
	opt := picture.MapOptions{Title: "Gravel pit, isolines", Interval: "1", IndexEvery: 5, Labels: grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832", VerticalDatum: "DHHN2016"}}
	text, report := s.draw(t, s.levels(t, "1", 5), opt, false, true)
	keep(t, "pit.svg", text)
	t.Logf("%+v %d bytes", report, len(text))
	text, report = s.draw(t, s.levels(t, "2.5", 0), picture.MapOptions{Interval: "2.5"}, true, false)
	keep(t, "pit-bands.svg", text)
	t.Logf("%+v %d bytes", report, len(text))
}
