package picture

import (
	"io"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// canvas writes SVG: sizes and places in millimetres, with two decimals.
type canvas struct {
	w   io.Writer
	buf []byte
	err error // of w, for ever
}

const canvasBuffer = 1 << 16

// put writes text as it is.
func (c *canvas) put(text ...string) {
	for _, t := range text {
		c.buf = append(c.buf, t...)
	}
	if len(c.buf) >= canvasBuffer {
		c.flush()
	}
}

func (c *canvas) flush() {
	if c.err == nil {
		_, c.err = c.w.Write(c.buf)
	}
	c.buf = c.buf[:0]
}

// mm returns a number of millimetres as text.
func mm(v float64) string { return string(appendHundredths(nil, hundredths(100*v))) }

// hundredths rounds to whole hundredths of a millimetre. What lies beyond 20 km of paper stays there.
func hundredths(v float64) int32 { return int32(math.RoundToEven(max(-2e9, min(v, 2e9)))) }

// appendHundredths appends n / 100 without zeros at the end.
func appendHundredths(dst []byte, n int32) []byte {
	if n < 0 {
		dst = append(dst, '-')
		n = -n
	}
	whole, part := n/100, n%100
	if whole > 0 || part == 0 {
		dst = strconv.AppendInt(dst, int64(whole), 10)
	}
	if part > 0 {
		dst = append(dst, '.', byte('0'+part/10))
		if part%10 > 0 {
			dst = append(dst, byte('0'+part%10))
		}
	}
	return dst
}

// way appends the path through spots, in steps from place to place: "M1.5 2l.5-.25 1 0", with z at the end if it is closed.
func way(dst []byte, spots []spot) []byte {
	last := spots[0]
	closed := len(spots) > 2 && spots[len(spots)-1] == last
	dst = append(dst, 'M')
	dst = appendHundredths(dst, last.x)
	dst = separated(dst, last.y)
	rest := spots[1:]
	if closed {
		rest = rest[:len(rest)-1]
	}
	for i, s := range rest {
		if i == 0 {
			dst = append(dst, 'l')
			dst = appendHundredths(dst, s.x-last.x)
		} else {
			dst = separated(dst, s.x-last.x)
		}
		dst = separated(dst, s.y-last.y)
		last = s
	}
	if closed {
		dst = append(dst, 'z')
	}
	return dst
}

// separated appends a number behind another: a minus sign separates too.
func separated(dst []byte, n int32) []byte {
	if n >= 0 {
		dst = append(dst, ' ')
	}
	return appendHundredths(dst, n)
}

// words writes a line of text. anchor is start, middle or end.
func (c *canvas) words(x, y, size float64, anchor, text string) {
	c.put(`<text x="`, mm(x), `" y="`, mm(y), `" font-size="`, mm(size), `" text-anchor="`, anchor, `" fill="`, ink, `">`, escape(text), "</text>\n")
}

// escape returns text for use in elements and attributes. Characters that XML 1.0 does not allow, and bytes that are no
// UTF-8, become U+FFFD.
func escape(text string) string {
	var b strings.Builder
	for i := 0; i < len(text); {
		r, n := utf8.DecodeRuneInString(text[i:])
		i += n
		switch {
		case r == '&':
			b.WriteString("&amp;")
		case r == '<':
			b.WriteString("&lt;")
		case r == '>':
			b.WriteString("&gt;")
		case r == '"':
			b.WriteString("&quot;")
		case r == '\n' || r == '\t' || r == '\r':
			b.WriteByte(' ')
		case r < 0x20 || r == 0xfffe || r == 0xffff:
			b.WriteRune(utf8.RuneError)
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}

// textWidth returns the width of text for a size of letters, about: the letters of a reader's sans-serif are not known. Those of
// wide ones are taken.
func textWidth(text string, size float64) float64 {
	return 0.6 * size * float64(utf8.RuneCountInString(text))
}

// wrap breaks text into lines of at most width, between words, or within a word that is wider by itself.
func wrap(text string, size, width float64) []string {
	most := max(4, int(width/(0.6*size)))
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		for {
			runes := []rune(word)
			if len(runes) <= most {
				break
			}
			if line != "" {
				lines = append(lines, line)
				line = ""
			}
			lines, word = append(lines, string(runes[:most])), string(runes[most:])
		}
		switch {
		case line == "":
			line = word
		case utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) <= most:
			line += " " + word
		default:
			lines = append(lines, line)
			line = word
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}
