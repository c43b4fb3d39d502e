package main

import (
	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/record"
)

// schemaText returns the schema that --schema asks for.
func (r *runCommand) schemaText() ([]byte, error) {
	if r.schema.value == "record" {
		return record.Schema, nil
	}
	return job.Schema(r.vocabulary())
}
