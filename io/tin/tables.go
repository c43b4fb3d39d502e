package tin

import (
	"context"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/numtext"
)

// ReadTables reads a table of vertices and one of triangles. Errors are *Error, those
// of the readers, or ctx.Err().
func ReadTables(ctx context.Context, vertices io.Reader, verticesName string, triangles io.Reader, trianglesName string) (*Set, error) {
	s := &Set{}
	number := map[string]int32{}
	err := eachRow(ctx, vertices, verticesName, []string{"vertex", "x", "y", "z"}, func(line int, f []string) error {
		if _, twice := number[f[0]]; twice {
			return &Error{File: verticesName, Line: line, Seen: fmt.Sprintf("vertex %q again", f[0]), Expected: "every vertex once"}
		}
		var v [3]float64
		for k := range v {
			var ok bool
			if v[k], ok = numtext.Parse([]byte(strings.TrimSpace(f[k+1]))); !ok || math.IsInf(v[k], 0) {
				return &Error{File: verticesName, Line: line, Seen: fmt.Sprintf("%s %q", "xyz"[k:k+1], f[k+1]), Expected: "a number"}
			}
		}
		number[f[0]] = int32(len(s.Points))
		at := orb.Point{v[0], v[1]}
		s.noteDecimals(at, v[2])
		s.Points, s.Z = append(s.Points, at), append(s.Z, v[2])
		return nil
	})
	if err != nil {
		return nil, err
	}
	err = eachRow(ctx, triangles, trianglesName, []string{"vertex_1", "vertex_2", "vertex_3"}, func(line int, f []string) error {
		var t [3]int32
		for k := range t {
			i, ok := number[f[k]]
			if !ok {
				return &Error{File: trianglesName, Line: line, Seen: fmt.Sprintf("vertex %q", f[k]), Expected: "one of the table " + verticesName}
			}
			t[k] = i
		}
		s.Triangles = append(s.Triangles, t)
		return nil
	})
	if err != nil {
		return nil, err
	}
	if len(s.Triangles) == 0 {
		return nil, &Error{File: trianglesName, Seen: "no triangle", Expected: "at least one"}
	}
	return s, nil
}

// IsTriangleTable and IsVertexTable tell what the first line of a text is.
func IsTriangleTable(header string) bool {
	return hasAll(header, "vertex_1", "vertex_2", "vertex_3")
}

// IsVertexTable tells whether a header is that of a table of vertices.
func IsVertexTable(header string) bool {
	return hasAll(header, "vertex", "x", "y", "z")
}

func hasAll(header string, names ...string) bool {
	fields := strings.Split(strings.TrimRight(strings.TrimPrefix(header, "\ufeff"), "\r\n"), ",")
	for _, n := range names {
		if !slices.Contains(fields, n) {
			return false
		}
	}
	return true
}

// looksEvery rows ctx is looked at.
const looksEvery = 1 << 12

// eachRow gives the named fields of every row.
func eachRow(ctx context.Context, r io.Reader, name string, columns []string, use func(line int, fields []string) error) error {
	in := csv.NewReader(r)
	in.ReuseRecord = true
	head, err := in.Read()
	if err != nil {
		return badCSV(name, err, columns)
	}
	head[0] = strings.TrimPrefix(head[0], "\ufeff")
	at := make([]int, len(columns))
	for k, c := range columns {
		if at[k] = slices.Index(head, c); at[k] < 0 {
			return &Error{File: name, Line: 1, Seen: "no column " + c, Expected: "the columns " + strings.Join(columns, ", ")}
		}
	}
	fields := make([]string, len(columns))
	for n := 0; ; n++ {
		row, err := in.Read()
		if err == io.EOF {
			return nil
		}
		if err != nil {
			return badCSV(name, err, columns)
		}
		if n%looksEvery == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		line, _ := in.FieldPos(0)
		for k := range fields {
			fields[k] = strings.Clone(row[at[k]])
		}
		if err := use(line, fields); err != nil {
			return err
		}
	}
}

func badCSV(name string, err error, columns []string) error {
	expected := "a table with the columns " + strings.Join(columns, ", ")
	if err == io.EOF {
		return &Error{File: name, Seen: "nothing", Expected: expected}
	}
	if e, ok := errors.AsType[*csv.ParseError](err); ok {
		return &Error{File: name, Line: e.Line, Seen: e.Err.Error() + " at column " + strconv.Itoa(e.Column), Expected: expected}
	}
	return err
}
