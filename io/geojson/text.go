package geojson

import "unicode/utf8"

// appendString appends s as a JSON string. Bytes that are no UTF-8 become U+FFFD; the two separators that end a line in scripts
// but not in JSON (U+2028, U+2029) are escaped.
func appendString(dst []byte, s string) []byte {
	const hex = "0123456789abcdef"
	dst = append(dst, '"')
	start := 0
	for i := 0; i < len(s); {
		c := s[i]
		if c >= 0x20 && c < utf8.RuneSelf && c != '"' && c != '\\' {
			i++
			continue
		}
		if c >= utf8.RuneSelf {
			r, n := utf8.DecodeRuneInString(s[i:])
			switch {
			case r == utf8.RuneError && n == 1:
				dst = append(append(dst, s[start:i]...), "\uFFFD"...)
				start = i + 1
			case r == 0x2028 || r == 0x2029:
				dst = append(append(dst, s[start:i]...), `\u202`...)
				dst = append(dst, hex[r&15])
				start = i + n
			}
			i += n
			continue
		}
		dst = append(dst, s[start:i]...)
		switch c {
		case '"', '\\':
			dst = append(dst, '\\', c)
		case '\n':
			dst = append(dst, '\\', 'n')
		case '\r':
			dst = append(dst, '\\', 'r')
		case '\t':
			dst = append(dst, '\\', 't')
		default:
			dst = append(dst, '\\', 'u', '0', '0', hex[c>>4], hex[c&15])
		}
		i++
		start = i
	}
	return append(append(dst, s[start:]...), '"')
}
