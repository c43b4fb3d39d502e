// Package geojsontest checks GeoJSON texts that tests of other packages have written. It is for tests alone.
//
// In: the whole text. Out: nil, or the first thing in it that RFC 7946 does not allow.
//
//	if err := geojsontest.Check(text); err != nil {
//		t.Error(err)
//	}
//
// The check is independent of package geojson: the text is parsed by encoding/json, compared with a JSON schema
// of RFC 7946 that was written for this project (testdata/rfc7946.schema.json), and every ring must be closed and go the way
// of section 3.1.6, by rational arithmetic on the decimals as written.
//
// Sources: RFC 7946; JSON Schema draft 2020-12.
package geojsontest
