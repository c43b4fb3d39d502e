package lines

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"path"
	"strings"

	"isofacet/io/readings"
)

// Breaklines reads lines with heights. Every kind of line will do, closed or not:
// the rows of a text, the lines and the rings of polygons of a GeoJSON file.
//
// Errors are *Faults for lines that cannot be used, those of package readings for
// text that cannot be read (*readings.BadLines, *readings.PositionError,
// *readings.OptionError), or ctx.Err(). No Set comes with an error.
//
// Cost: see the package comment.
func Breaklines(ctx context.Context, sources []readings.Source, o Options) (*Set, error) {
	return read(ctx, sources, o, newChecker("line", o.Zeros))
}

// Rings reads the rings of a boundary or of voids: closed lines, whose heights may
// be missing. A polygon gives all its rings; whether a place is inside is told by
// how many of them surround it. Errors are those of Breaklines.
func Rings(ctx context.Context, sources []readings.Source, o Options) (*Set, error) {
	return read(ctx, sources, o, newChecker("ring", o.Zeros))
}

// Paths reads lines in the plane, such as those that profiles follow: every kind of line
// will do, closed or not. Heights that they have are read and dropped. Errors are those of
// Breaklines.
func Paths(ctx context.Context, sources []readings.Source, o Options) (*Set, error) {
	c := newChecker("line", o.Zeros)
	c.plane = true
	return read(ctx, sources, o, c)
}

func read(ctx context.Context, sources []readings.Source, o Options, c *checker) (*Set, error) {
	for _, src := range sources {
		data, err := whole(ctx, src, sizeMost)
		if err != nil {
			return nil, err
		}
		before := len(c.set.Lines) + c.faults.Total
		if looksLikeJSON(data) {
			err = c.geoJSON(ctx, src.Name, data)
		} else {
			err = c.text(ctx, src.Name, data, &o)
		}
		if err != nil {
			return nil, err
		}
		c.endSource()
		if before == len(c.set.Lines)+c.faults.Total {
			c.faults.add(&Fault{Place: Place{File: src.Name}, Kind: NoLines, Seen: "no " + c.what, Expected: "at least one"})
		}
	}
	return c.result()
}

// sizeMost bounds the size of a source in bytes: it is kept in memory while it
// is read.
const sizeMost = 1 << 30

// whole reads a source to its end, which must come within most bytes. Reading may wait
// for a person or a network; ctx does not wait with it.
func whole(ctx context.Context, src readings.Source, most int64) ([]byte, error) {
	unreadable := func(err error) error {
		return &readings.PositionError{File: src.Name, Kind: readings.Unreadable, Err: err}
	}
	r, err := src.Open()
	if err != nil {
		return nil, unreadable(err)
	}
	defer r.Close()
	type result struct {
		data []byte
		err  error
	}
	ready := make(chan result, 1)
	go func() {
		var b bytes.Buffer
		if src.Size > 0 && src.Size <= most {
			b.Grow(int(src.Size) + bytes.MinRead)
		}
		_, err := b.ReadFrom(io.LimitReader(r, most+1))
		ready <- result{b.Bytes(), err}
	}()
	select {
	case <-ctx.Done():
		return nil, ctx.Err()
	case got := <-ready:
		switch {
		case got.err != nil:
			return nil, unreadable(got.err)
		case int64(len(got.data)) > most:
			return nil, &Faults{[]*Fault{{Place: Place{File: src.Name}, Kind: TooLarge,
				Seen: fmt.Sprintf("more than %d bytes", most), Expected: "a file that fits into them"}}, 1}
		}
		return got.data, nil
	}
}

// looksLikeJSON reports whether the first character is one that begins a JSON object,
// and so no row of a text.
func looksLikeJSON(data []byte) bool {
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	data = bytes.TrimLeft(data, " \t\r\n")
	return len(data) > 0 && data[0] == '{'
}

// baseName is the name of a file without folder and ending.
func baseName(file string) string {
	name := path.Base(strings.ReplaceAll(file, `\`, "/"))
	if k := strings.LastIndexByte(name, '.'); k > 0 {
		name = name[:k]
	}
	return name
}
