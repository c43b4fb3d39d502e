package readings

import (
	"bytes"
	"io"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"
)

// chunkSize is how much is read and parsed at a time: enough that a chunk costs far
// more than handing it over, little enough that it stays in a core's cache.
const chunkSize = 256 << 10

// chunks cuts a stream into pieces that hold whole records.
type chunks struct {
	r      io.Reader
	buf    []byte // what is read and not handed out
	have   int
	ended  bool
	err    error
	size   int         // of a chunk
	spare  chan []byte // buffers to use again
	format format
}

// decoded returns r without its byte order mark, UTF-16 made UTF-8, and the name of
// the encoding. Without a mark the bytes pass as they are.
func decoded(r io.Reader) (io.Reader, string, error) {
	r = &insistent{r: r}
	var mark [3]byte
	n, err := io.ReadFull(r, mark[:])
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		return nil, "", err
	}
	whole := io.MultiReader(bytes.NewReader(mark[:n]), r)
	name := "UTF-8"
	switch {
	case n == 3 && mark == [3]byte{0xef, 0xbb, 0xbf}:
		return r, "UTF-8 with a byte order mark", nil
	case n >= 2 && mark[0] == 0xff && mark[1] == 0xfe:
		name = "UTF-16 little-endian"
	case n >= 2 && mark[0] == 0xfe && mark[1] == 0xff:
		name = "UTF-16 big-endian"
	default:
		return whole, name, nil
	}
	return transform.NewReader(whole, unicode.BOMOverride(transform.Nop)), name, nil
}

// insistent gives up on a reader that keeps returning nothing, which callers that
// want a full buffer would ask for ever.
type insistent struct {
	r    io.Reader
	idle int
}

func (i *insistent) Read(b []byte) (int, error) {
	n, err := i.r.Read(b)
	if i.idle++; n > 0 {
		i.idle = 0
	} else if err == nil && i.idle == 100 {
		err = io.ErrNoProgress
	}
	return n, err
}

// fill reads until the buffer is full or the input ends.
func (c *chunks) fill() {
	for c.have < len(c.buf) && !c.ended {
		n, err := c.r.Read(c.buf[c.have:])
		c.have += n
		if err != nil {
			c.ended = true
			if err != io.EOF {
				c.err = err
			}
		}
	}
}

// start makes the first buffer, for an input of about size bytes (0 if unknown),
// and passes over the first n lines, which may have any length. It returns how many
// there were.
func (c *chunks) start(size int64, n int) (skipped int) {
	first := 4 * c.size // detection looks at many lines
	if size > 0 && size < int64(first) {
		first = int(size) + 1 // one more, to see the end
	}
	c.buf = c.buffer(first)
	c.fill()
	p := 0
	for skipped < n && p < c.have {
		b := c.buf[p:c.have]
		end := lineEnd(b, 0)
		if end+1 >= len(b) && !c.ended {
			// The line goes on, or its CR may have an LF. Only its end matters.
			c.have, p = copy(c.buf, b[end:]), 0
			c.fill()
			continue
		}
		p += behindLineEnd(b, end)
		skipped++
	}
	c.drop(p)
	return skipped
}

// drop passes over n bytes of the buffer and fills it again.
func (c *chunks) drop(n int) {
	c.have = copy(c.buf, c.buf[n:c.have])
	c.fill()
}

func (c *chunks) buffer(size int) []byte {
	select {
	case b := <-c.spare:
		if cap(b) >= size {
			return b[:size]
		}
	default:
	}
	// One byte more, so that a line end can be added to the last line.
	return make([]byte, size, size+1)
}

// next hands out the next whole records, nil at the end of the input. The caller
// gives the memory back to c.spare.
//
// A record longer than maxRecord is an error of kind LongLine (or Binary) at the
// line behind what was handed out before; a read error comes after all that was
// read is handed out.
func (c *chunks) next() ([]byte, *PositionError) {
	for {
		c.fill()
		if c.have == 0 {
			if c.err != nil {
				return nil, &PositionError{Kind: Unreadable, What: "read", Err: c.err}
			}
			return nil, nil
		}
		if c.have > 2*c.size {
			// What detection looked at: enough for several workers.
			if n := c.format.cut(c.buf[:c.size], false); n > 0 {
				b := c.buf[:n:n]
				c.buf, c.have = c.buf[n:], c.have-n
				return b, nil
			}
		}
		b := c.buf[:c.have]
		n := c.format.cut(b, c.ended)
		if c.ended && c.err != nil {
			// The last line is cut off by the error.
			n = c.format.cut(b, false)
			if n == 0 {
				c.have = 0
				continue
			}
		}
		if n > 0 {
			fresh := c.buffer(max(c.size, c.have-n))
			c.have = copy(fresh, b[n:])
			c.buf = fresh
			return b[:n], nil
		}
		if c.have >= maxRecord {
			return nil, tooLong(b)
		}
		c.grow()
	}
}

// grow makes the buffer larger, up to the longest record.
func (c *chunks) grow() {
	size := min(2*len(c.buf), maxRecord)
	larger := make([]byte, size, size+1)
	copy(larger, c.buf[:c.have])
	c.buf = larger
	c.fill()
}

// tooLong says what is wrong with bytes that hold no whole record.
func tooLong(b []byte) *PositionError {
	if bytes.IndexByte(b, 0) >= 0 {
		return binaryError()
	}
	return &PositionError{Column: 1, Kind: LongLine, What: "line", Seen: shorten(string(b[:min(len(b), 256)])),
		Expected: "lines of less than 1,048,576 bytes"}
}

func binaryError() *PositionError {
	return &PositionError{Kind: Binary, What: "a zero byte: looks like a binary file", Expected: "text in UTF-8, Windows-1252, or UTF-16 with a byte order mark"}
}

// readable returns b, or where lines of it are not UTF-8, a copy with those lines
// taken as Windows-1252, how many they are, and the number of the first in b from
// 0.
func readable(b []byte) (text []byte, converted, first int) {
	if utf8.Valid(b) {
		return b, 0, 0
	}
	text = make([]byte, 0, len(b)+len(b)/8+1)
	for line, p := 0, 0; p < len(b); line++ {
		next := behindLineEnd(b, lineEnd(b, p))
		if utf8.Valid(b[p:next]) {
			text = append(text, b[p:next]...)
		} else {
			if converted == 0 {
				first = line
			}
			converted++
			for _, c := range b[p:next] {
				text = utf8.AppendRune(text, charmap.Windows1252.DecodeByte(c))
			}
		}
		p = next
	}
	return text, converted, first
}
