package record

import _ "embed"

// Schema is the JSON Schema (draft 2020-12) of run records.
//
//go:embed record.schema.json
var Schema []byte
