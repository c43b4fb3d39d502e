package job

import (
	"slices"
	"strings"

	"github.com/pelletier/go-toml/v2/unstable"

	"isofacet/io/nearword"
)

// values returns what a key is set to as the command line would have it.
func (d *decoder) values(o Option, p pair) (Setting, bool) {
	s := Setting{Option: o, At: p.at}
	if p.value.kind == unstable.Array && o.Several && !o.Repeatable {
		return d.joined(s, p)
	}
	list := []literal{p.value}
	if p.value.kind == unstable.Array && o.Repeatable {
		list = p.value.items
		if len(list) == 0 {
			d.fail(p.value.at, p.key, p.key+" = []", "at least one value", "")
			return s, false
		}
	}
	good := true
	for _, l := range list {
		text, ok := o.scalar(l)
		if !ok {
			d.fail(l.at, p.key, p.key+" = "+l.shown(), o.expected(), "")
			good = false
			continue
		}
		s.Values = append(s.Values, Value{text, l.at})
	}
	return s, good
}

// joined makes "1,2,3" of a list of numbers.
func (d *decoder) joined(s Setting, p pair) (Setting, bool) {
	var words []string
	for _, l := range p.value.items {
		text, ok := number(l)
		if !ok {
			d.fail(l.at, p.key, p.key+" = "+l.shown(), "a list of numbers", "")
			return s, false
		}
		words = append(words, text)
	}
	if len(words) == 0 {
		d.fail(p.value.at, p.key, p.key+" = []", "at least one number", "")
		return s, false
	}
	s.Values = []Value{{strings.Join(words, ","), p.value.at}}
	return s, true
}

// scalar returns a single value as text.
func (o *Option) scalar(l literal) (string, bool) {
	switch o.Kind {
	case Switch:
		return l.text, l.kind == unstable.Bool
	case Words:
		return l.text, l.kind == unstable.String && slices.Contains(o.Words, l.text)
	case Number:
		if text, ok := number(l); ok {
			return text, true
		}
	}
	return l.text, l.kind == unstable.String
}

// number returns a decimal number as it is written: what is between the digits for
// the eye is taken out, nothing is rounded.
func number(l literal) (string, bool) {
	if l.kind != unstable.Integer && l.kind != unstable.Float {
		return "", false
	}
	text := strings.ReplaceAll(l.text, "_", "")
	if strings.Trim(text, "+-.0123456789eE") != "" {
		return "", false // 0x1F, inf, nan
	}
	return strings.TrimPrefix(text, "+"), true
}

// expected says what a key may be set to.
func (o *Option) expected() string {
	what := "text in quotes"
	switch o.Kind {
	case Switch:
		what = "true or false"
	case Words:
		what = "one of " + quoted(o.Words)
	case Number:
		what = "a number, or text in quotes"
		if o.Several {
			what = "a number, a list of numbers, or text in quotes"
		}
	}
	if o.Repeatable {
		what += ", or a list of these"
	}
	return what
}

func quoted(words []string) string {
	list := make([]string, len(words))
	for i, w := range words {
		list[i] = `"` + w + `"`
	}
	return strings.Join(list, ", ")
}

// Nearest returns the word that the fewest changes of a letter lead to, of equally
// near ones the first by name.
func Nearest(word string, known []string) string {
	best, fewest := "", 0
	for _, k := range known {
		d := nearword.Distance(word, k)
		if best == "" || d < fewest || d == fewest && k < best {
			best, fewest = k, d
		}
	}
	return best
}
