package localgrid

import (
	"errors"

	"isofacet/io/readings"
)

// ReadPairs reads a table with the columns from_x, from_y, to_x and to_y (or
// from_easting and so on) and perhaps id. Errors are those of readings.ReadWords, of
// several lines joined.
func ReadPairs(src readings.Source) ([]Pair, error) {
	t, err := readings.ReadWords(src, readings.Declared{}, []readings.Word{
		{Names: []string{"fromx", "fromeasting", "fromeast"}}, {Names: []string{"fromy", "fromnorthing", "fromnorth"}},
		{Names: []string{"tox", "toeasting", "toeast"}}, {Names: []string{"toy", "tonorthing", "tonorth"}},
		{Names: []string{"id", "point", "name", "pointid"}, Optional: true},
	})
	if err != nil {
		return nil, err
	}
	var pairs []Pair
	var faults []error
	for row := range t.Len() {
		p := Pair{ID: t.Text(row, 4), Line: t.Line(row)}
		for k, v := range []*float64{&p.From[0], &p.From[1], &p.To[0], &p.To[1]} {
			n := t.Number(row, k)
			if !n.OK() {
				faults = append(faults, t.NumberFault(row, k, n.Kind))
				break
			}
			*v = n.Value
		}
		pairs = append(pairs, p)
	}
	return pairs, errors.Join(faults...)
}
