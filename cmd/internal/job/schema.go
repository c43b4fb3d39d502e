package job

import (
	"bytes"
	"encoding/json"
)

// SchemaID names the schema of job files.
const SchemaID = "isofacet:job.schema.json"

// Schema returns the JSON Schema (draft 2020-12) of job files, as JSON with a line
// end. It accepts what Decode accepts, but for what only a whole file shows (tasks
// with one name).
func Schema(v *Vocabulary) ([]byte, error) {
	settings := map[string]any{}
	for _, o := range v.Options() {
		settings[o.Name] = o.schema()
	}
	var commands []any
	var names []string
	for _, c := range v.Commands {
		names = append(names, c.Name)
		properties := map[string]any{
			"name":    map[string]any{"type": "string", "minLength": 1, "description": "what messages call the task"},
			"command": map[string]any{"const": c.Name},
			"files": map[string]any{
				"description": "files to read, as on the command line",
				"anyOf":       []any{fileName, map[string]any{"type": "array", "items": fileName}},
			},
		}
		for _, o := range c.Options {
			properties[o.Name] = o.schema()
		}
		commands = append(commands, map[string]any{
			"if":   map[string]any{"properties": map[string]any{"command": map[string]any{"const": c.Name}}},
			"then": map[string]any{"properties": properties, "additionalProperties": false},
		})
	}
	schema := map[string]any{
		"$schema":              "https://json-schema.org/draft/2020-12/schema",
		"$id":                  SchemaID,
		"title":                "isofacet job file",
		"description":          "Keys are the long options of the commands. A key of a task stands in place of the same key of the settings.",
		"type":                 "object",
		"additionalProperties": false,
		"required":             []string{"task"},
		"properties": map[string]any{
			"settings": map[string]any{
				"description": "for every task whose command takes them",
				"type":        "object", "properties": settings, "additionalProperties": false,
			},
			"task": map[string]any{
				"description": "what is to be done",
				"type":        "array", "minItems": 1,
				"items": map[string]any{
					"type": "object", "required": []string{"command"},
					"properties": map[string]any{"command": map[string]any{"enum": names}},
					"allOf":      commands,
				},
			},
		},
	}
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	err := enc.Encode(schema)
	return b.Bytes(), err
}

var fileName = map[string]any{"type": "string", "minLength": 1}

// schema describes the value of an option.
func (o *Option) schema() map[string]any {
	var one map[string]any
	switch o.Kind {
	case Switch:
		one = map[string]any{"type": "boolean"}
	case Words:
		one = map[string]any{"enum": o.Words}
	case Number:
		one = map[string]any{"type": []string{"number", "string"}}
	default:
		one = map[string]any{"type": "string"}
	}
	switch {
	case o.Repeatable:
		one = map[string]any{"anyOf": []any{one, map[string]any{"type": "array", "minItems": 1, "items": one}}}
	case o.Several:
		one = map[string]any{"anyOf": []any{one, map[string]any{"type": "array", "minItems": 1, "items": map[string]any{"type": "number"}}}}
	}
	one["description"] = o.About
	return one
}
