package option

import (
	"fmt"
	"strings"
)

// Out is one output: the part of the results that goes there, empty for the
// command's usual one, and the file, "-" for standard output.
type Out struct {
	Part string
	File string
}

// Outs collects every --out of a command line, in the order given.
type Outs struct {
	// Parts are the names that may stand before the equals sign.
	Parts []string
	List  []Out
}

// Set reads FILE or PART=FILE. A word before an equals sign that is not a part
// of this command is refused: a file of such a name is written with a folder,
// as in ./a=b.csv.
func (o *Outs) Set(text string) error {
	out := Out{File: text}
	if part, file, ok := strings.Cut(text, "="); ok && isWord(part) {
		if !contains(o.Parts, part) {
			return &BadValue{text, fmt.Sprintf("FILE, or PART=FILE with one of the parts %s", strings.Join(o.Parts, ", "))}
		}
		out = Out{part, file}
	}
	if out.File == "" {
		return &BadValue{text, "a file name, or - for standard output"}
	}
	o.List = append(o.List, out)
	return nil
}

// String writes the outputs as they are typed, separated by blanks.
func (o *Outs) String() string {
	var b strings.Builder
	for i, out := range o.List {
		if i > 0 {
			b.WriteByte(' ')
		}
		if out.Part != "" {
			b.WriteString(out.Part + "=")
		}
		b.WriteString(out.File)
	}
	return b.String()
}

// Type names the form in help pages.
func (o *Outs) Type() string { return "FILE" }

// isWord reports whether s can be the name of a part: small letters and
// hyphens, so that neither a path nor a file extension is taken for one.
func isWord(s string) bool {
	for _, r := range s {
		if (r < 'a' || r > 'z') && r != '-' {
			return false
		}
	}
	return s != ""
}

func contains(list []string, s string) bool {
	for _, v := range list {
		if v == s {
			return true
		}
	}
	return false
}
