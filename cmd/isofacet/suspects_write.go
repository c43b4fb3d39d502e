package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"strconv"

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/io/numtext"
	"isofacet/io/outfile"
)

// openSuspects begins the file of suspects, nil if none is wanted.
func (o *outputs) openSuspects(s *suspecting, inputs []string) (io.Writer, error) {
	if !s.write.set {
		return nil, nil
	}
	const name = "--write-suspects"
	if s.write.text == "-" {
		return nil, status.Usage(errors.New(`--write-suspects "-": expected a file name: standard output is for the report`), "name a file")
	}
	f, err := o.create(name, s.write.text, outfile.Options{}, inputs)
	if err != nil {
		return nil, err
	}
	return o.writer(f, record.File{Name: s.write.text, Part: "suspects", Format: formatCSV}), nil
}

// suspectNames head the table of suspects. decision and reason are for a person to fill
// in; id, x and y say which reading to leave out.
var suspectNames = []string{"id", "x", "y", "z", "expected", "residual", "scale", "note", "file", "line", "decision", "reason"}

// writeTable writes the suspects among the readings; vertices of lines cannot be left out.
//
// x and y are written as they read back, so that the row finds its reading; where they
// were converted they would not, and stay empty.
func (f *suspectsFound) writeTable(w io.Writer, l *loaded, r *reading) error {
	if w == nil {
		return nil
	}
	b := bufio.NewWriter(w)
	row := func(fields ...string) error {
		line := appendFields(nil, fields)
		line[len(line)-1] = '\n'
		_, err := b.Write(line)
		return err
	}
	if err := row(suspectNames...); err != nil {
		return err
	}
	if f == nil {
		return b.Flush()
	}
	for i := range f.Listed {
		s := &f.Listed[i]
		if s.reading < 0 {
			continue
		}
		id, x, y := "", "", ""
		if s.ID != nil {
			id = *s.ID
		}
		if r.transform() == nil {
			x, y = string(numtext.Append(nil, s.X.v, -1)), string(numtext.Append(nil, s.Y.v, -1))
		} else if id == "" {
			return status.With(status.WrongData, fmt.Errorf("%s: a suspect without an id, at a place that was converted: expected ids, by which --exclude can find it", s.place),
				"write the suspects before converting: leave --to-xy-unit and --fit out")
		}
		if err := row(id, x, y, s.Z.String(), s.Expected.String(), s.Residual.String(), s.Scale.String(), s.Reason, s.file, strconv.Itoa(s.line), "", ""); err != nil {
			return err
		}
	}
	return b.Flush()
}
