package readings

import (
	"bytes"
	"fmt"
	"io"
)

// readWhole returns the text of a source of at most limit bytes behind its first
// skip lines, decoded and readable.
func readWhole(src Source, skip, limit int) (b []byte, skipped int, perr *PositionError) {
	r, err := src.Open()
	if err != nil {
		return nil, 0, &PositionError{Kind: Unreadable, Err: err}
	}
	defer r.Close()
	text, _, err := decoded(r)
	if err == nil {
		b, err = io.ReadAll(io.LimitReader(text, int64(limit)+1))
	}
	if err != nil {
		return nil, 0, &PositionError{Kind: Unreadable, Err: err}
	}
	if len(b) > limit {
		return nil, 0, &PositionError{Kind: LongLine, What: "file", Expected: fmt.Sprintf("at most %d bytes", limit)}
	}
	if k := bytes.IndexByte(b, 0); k >= 0 {
		e := binaryError()
		e.Line, e.Column = position(b, 0, k)
		e.Line++
		return nil, 0, e
	}
	b, _, _ = readable(b)
	for ; skipped < skip && len(b) > 0; skipped++ {
		b = b[behindLineEnd(b, lineEnd(b, 0)):]
	}
	return b, skipped, nil
}
