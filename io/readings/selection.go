package readings

import (
	"strings"
	"unicode/utf8"
)

// A Pattern is a shell pattern for the text of a role: * stands for any text, ? for
// one character, [a-f] and [^a-f] for one of a range, and \ takes the next
// character as it is. The whole text must match; case matters. It is the pattern of
// path.Match, but a slash is a character like any other.
type Pattern struct {
	Role Role
	Text string
}

// ParsePattern reads ROLE=PATTERN. Errors are *OptionError.
func ParsePattern(option, text string) (Pattern, error) {
	word, pattern, ok := strings.Cut(text, "=")
	role, known := ParseRole(word)
	if !ok || !known {
		return Pattern{}, &OptionError{option, text, "ROLE=PATTERN such as code=GRD*"}
	}
	p := Pattern{role, pattern}
	return p, p.check(option)
}

// Literal returns a pattern that fits one text and no other.
func Literal(role Role, text string) Pattern {
	var b strings.Builder
	for _, r := range text {
		if strings.ContainsRune(`*?[\`, r) {
			b.WriteByte('\\')
		}
		b.WriteRune(r)
	}
	return Pattern{role, b.String()}
}

func (p Pattern) String() string { return p.Role.String() + "=" + p.Text }

func (p Pattern) check(option string) error {
	if !p.Role.Kept() {
		names := make([]string, len(keptRoles))
		for i, r := range keptRoles {
			names[i] = r.String()
		}
		return &OptionError{option, p.String(), "one of the roles " + strings.Join(names, " ")}
	}
	if !validPattern(p.Text) {
		return &OptionError{option, p.String(), "every [ closed by a ], and something behind every \\"}
	}
	return nil
}

// Match reports whether the whole text fits the pattern, which must be one that
// ParsePattern takes.
func (p Pattern) Match(text string) bool { return match(p.Text, text) }

// A Selection says which readings to use. A reading is used if, for every role that
// Only names, one of its patterns of that role matches, no pattern of Without
// matches, Code gives no reason against it, and no row of Exclude leaves it out;
// they are asked in this order.
type Selection struct {
	Only, Without []Pattern
	// Code, if not nil, is told the code of each reading, empty if it has none, and
	// returns why to leave the reading out, or "". It is called by several
	// goroutines and must not keep the bytes.
	Code    func(code []byte) (reason string)
	Exclude *Exclusions
}

func (s *Selection) check() error {
	for _, p := range s.Only {
		if err := p.check("only"); err != nil {
			return err
		}
	}
	for _, p := range s.Without {
		if err := p.check("without"); err != nil {
			return err
		}
	}
	return nil
}

// validPattern reports whether every bracket is closed and every escape complete.
func validPattern(p string) bool {
	if !utf8.ValidString(p) {
		return false
	}
	for p != "" {
		if p[0] == '[' {
			rest, _, ok := matchRange(p, 'a')
			if !ok {
				return false
			}
			p = rest
			continue
		}
		if p[0] == '\\' {
			if p = p[1:]; p == "" {
				return false
			}
		}
		_, n := utf8.DecodeRuneInString(p)
		p = p[n:]
	}
	return true
}

// match reports whether the whole text fits a valid pattern. Only the last star met
// is ever taken back, since an earlier one that reached it need not take more: time
// is at most the product of the lengths.
func match(pattern, text string) bool {
	star, starText := -1, 0 // pattern behind the last *, text where it now ends
	p, t := 0, 0
	for t < len(text) {
		if p < len(pattern) && pattern[p] == '*' {
			p++
			star, starText = p, t
			continue
		}
		r, n := utf8.DecodeRuneInString(text[t:])
		if rest, ok := matchOne(pattern[p:], r); ok {
			p, t = len(pattern)-len(rest), t+n
			continue
		}
		if star < 0 {
			return false
		}
		_, n = utf8.DecodeRuneInString(text[starText:])
		starText += n
		p, t = star, starText
	}
	for p < len(pattern) && pattern[p] == '*' {
		p++
	}
	return p == len(pattern)
}

// matchOne matches one character and returns the pattern behind it.
func matchOne(p string, r rune) (rest string, ok bool) {
	if p == "" {
		return "", false
	}
	switch p[0] {
	case '?':
		return p[1:], true
	case '[':
		rest, hit, _ := matchRange(p, r)
		return rest, hit
	case '\\':
		p = p[1:]
	}
	c, n := utf8.DecodeRuneInString(p)
	return p[n:], c == r
}

// matchRange matches one character against the brackets that p begins with. valid
// is false if they are not closed or empty.
func matchRange(p string, r rune) (rest string, hit, valid bool) {
	p = p[1:]
	negated := strings.HasPrefix(p, "^")
	if negated {
		p = p[1:]
	}
	for n := 0; ; n++ {
		if p == "" {
			return "", false, false
		}
		if p[0] == ']' && n > 0 {
			return p[1:], hit != negated, true
		}
		lo, rest, ok := rangeEnd(p)
		if !ok {
			return "", false, false
		}
		hi := lo
		if p = rest; strings.HasPrefix(p, "-") {
			if hi, p, ok = rangeEnd(p[1:]); !ok {
				return "", false, false
			}
		}
		hit = hit || lo <= r && r <= hi
	}
}

func rangeEnd(p string) (c rune, rest string, ok bool) {
	if p == "" || p[0] == '-' || p[0] == ']' {
		return 0, "", false
	}
	if p[0] == '\\' {
		if p = p[1:]; p == "" {
			return 0, "", false
		}
	}
	c, n := utf8.DecodeRuneInString(p)
	return c, p[n:], true
}
