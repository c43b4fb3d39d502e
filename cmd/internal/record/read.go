package record

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
)

// Kind is what every record says it is.
const Kind = "isofacet run record"

// readMost bounds what Read takes: a record lists every reading that is not used.
const readMost = 1 << 30

// Read reads a record that Write has written. A member that it does not know is an
// error: a record of a later version may mean something else.
func Read(r io.Reader) (*Record, error) {
	data, err := io.ReadAll(io.LimitReader(r, readMost))
	if err != nil {
		return nil, err
	}
	var head struct {
		Kind string `json:"kind"`
	}
	if err := json.Unmarshal(data, &head); err != nil {
		return nil, fmt.Errorf("is no JSON object: %w: expected a run record", err)
	}
	if head.Kind != Kind {
		return nil, fmt.Errorf("kind %q: expected %q", head.Kind, Kind)
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	var rec Record
	if err := dec.Decode(&rec); err != nil {
		return nil, fmt.Errorf("%w: expected a run record of this version", err)
	}
	return &rec, rec.Stable.check()
}

// ReadStable reads the stable part of a task.
func ReadStable(text json.RawMessage) (*Stable, error) {
	var s Stable
	if err := json.Unmarshal(text, &s); err != nil {
		return nil, err
	}
	return &s, s.check()
}

// check refuses what no run can have written, so that nobody trips over it.
func (s *Stable) check() error {
	if s.Command == "" {
		return errors.New("no command: expected a run record")
	}
	for _, f := range slices.Concat(s.Inputs, s.Outputs) {
		if f == nil || f.Name == "" {
			return errors.New("an input or output without a name: expected a run record")
		}
	}
	return nil
}
