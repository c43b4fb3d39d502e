package lines

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"

	"isofacet/io/nearword"
	"isofacet/io/readings"
)

// A TableError is one trouble in a code table.
//
// It prints as file:line:column: what was seen: expected ..., without a place if it
// is about the whole file.
type TableError struct {
	File         string
	Line, Column int // count from 1; 0: the whole file
	Seen         string
	Expected     string
}

func (e *TableError) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d:%d", e.Line, e.Column)
	}
	b.WriteString(": " + e.Seen)
	if e.Expected != "" {
		b.WriteString(": expected " + e.Expected)
	}
	return b.String()
}

// tableMost bounds the size of a code table: a person writes it.
const tableMost = 1 << 20

// ReadCodeTable reads a code table, a TOML text such as
//
//	ground    = ["GR", "SP*"]       # shell patterns, as in readings.Pattern
//	line      = ["TOE", "CR", "HR"]
//	leave-out = ["BP", "TREE*"]
//	# others  = "leave-out"         # what no pattern fits; without it that is an error
//
//	[parts]                         # how TOE1 B is taken apart
//	separator = " "                 # what stands between the parts; blanks are a run of any length
//	number    = "behind"            # TOE1; "part" is TOE 1; "none" if there are no numbers
//	mark      = "last"              # TOE1 B; "first" is B TOE1; "none" if there are no marks
//
//	[marks]
//	begin = ["B"]                   # the first reading of a string
//	end   = ["E"]                   # the last
//	close = ["C"]                   # the last, from which the string runs back to its first
//
// Without parts, a code is compared as it is written, and readings of one code make
// one string.
//
// Errors are *TableError; *readings.PositionError if it cannot be read; ctx.Err().
func ReadCodeTable(ctx context.Context, src readings.Source) (*CodeTable, error) {
	data, err := whole(ctx, src, tableMost)
	if f, ok := errors.AsType[*Fault](err); ok {
		return nil, &TableError{File: src.Name, Seen: f.Seen, Expected: "a table of codes, which a person writes"}
	}
	if err != nil {
		return nil, err
	}
	// The library checks the grammar and that nothing is said twice; its syntax tree
	// has the places of what is said.
	if err := toml.Unmarshal(data, &map[string]any{}); err != nil {
		e := &TableError{File: src.Name, Seen: strings.TrimPrefix(err.Error(), "toml: ")}
		if d, ok := err.(*toml.DecodeError); ok {
			e.Line, e.Column = d.Position()
		}
		return nil, e
	}
	w := tableWriter{table: &CodeTable{Name: src.Name, marks: make(map[string]markKind)}, said: make(map[string]entry)}
	w.parser.Reset(data)
	if e := w.read(); e != nil {
		e.File = src.Name
		return nil, e
	}
	return w.table, nil
}

// entry is a key with its value.
type entry struct {
	key       string // parts.separator
	at        unstable.Position
	shown     string // key = value, as written
	isText    bool
	isList    bool
	text      string
	list      []element
	badMember *element // of a list: the first that is no text
}

type element struct {
	text string
	at   unstable.Position
}

// tableWriter makes a table of a text.
type tableWriter struct {
	table  *CodeTable
	parser unstable.Parser
	said   map[string]entry // by key
}

// tableKeys are the keys that a table may have, in the order of the documentation.
var tableKeys = []string{"ground", "line", "leave-out", "others", "parts.separator", "parts.number", "parts.mark",
	"marks.begin", "marks.end", "marks.close"}

func (w *tableWriter) read() *TableError {
	prefix := ""
	for w.parser.NextExpression() {
		switch n := w.parser.Expression(); n.Kind {
		case unstable.Table, unstable.ArrayTable:
			key, at := w.key(n)
			if n.Kind == unstable.ArrayTable {
				return tableError(at, "list of tables "+strconv.Quote(shorten(key)), "a table in single brackets, such as [parts]")
			}
			if !slices.ContainsFunc(tableKeys, func(k string) bool { return strings.HasPrefix(k, key+".") }) {
				return unknownKey("table", key, at, []string{"parts", "marks"})
			}
			prefix = key + "."
		case unstable.KeyValue:
			if e := w.keyValue(prefix, n); e != nil {
				return e
			}
		}
	}
	if err := w.parser.Error(); err != nil {
		return &TableError{Seen: err.Error()} // the grammar has been checked: not reached
	}
	return w.make()
}

// key returns the dotted key of a node, and where it stands.
func (w *tableWriter) key(n *unstable.Node) (key string, at unstable.Position) {
	var names []string
	for it := n.Key(); it.Next(); {
		if len(names) == 0 {
			at = w.parser.Shape(it.Node().Raw).Start
		}
		names = append(names, string(it.Node().Data))
	}
	return strings.Join(names, "."), at
}

func unknownKey(what, key string, at unstable.Position, known []string) *TableError {
	return tableError(at, what+" "+strconv.Quote(shorten(key)), strings.Join(known, ", ")+"; the nearest is "+nearest(key, known))
}

func tableError(at unstable.Position, seen, expected string) *TableError {
	return &TableError{Line: at.Line, Column: at.Column, Seen: seen, Expected: expected}
}

// keyValue notes what a key is set to.
func (w *tableWriter) keyValue(prefix string, n *unstable.Node) *TableError {
	key, at := w.key(n)
	key = prefix + key
	value := n.Value()
	if value.Kind == unstable.InlineTable {
		for it := value.Children(); it.Next(); {
			if e := w.keyValue(key+".", it.Node()); e != nil {
				return e
			}
		}
		return nil
	}
	if !slices.Contains(tableKeys, key) {
		return unknownKey("key", key, at, tableKeys)
	}
	e := entry{key: key, at: at, shown: key + " = " + w.shown(value), isText: value.Kind == unstable.String, text: string(value.Data)}
	if value.Kind == unstable.Array {
		e.isList = true
		for it := value.Children(); it.Next(); {
			m := it.Node()
			x := element{string(m.Data), w.parser.Shape(m.Raw).Start}
			if m.Kind != unstable.String && e.badMember == nil {
				e.badMember = &element{w.shown(m), at}
			}
			e.list = append(e.list, x)
		}
	}
	w.said[key] = e
	return nil
}

// shown writes a value as it stands in the text, shortened.
func (w *tableWriter) shown(n *unstable.Node) string {
	switch n.Kind {
	case unstable.String:
		return strconv.Quote(shorten(string(n.Data)))
	case unstable.Array, unstable.InlineTable:
		return "a " + strings.ToLower(n.Kind.String())
	}
	return shorten(string(n.Data))
}

// nearest returns the known word that the fewest changes of a character lead to.
func nearest(word string, known []string) string {
	best, fewest := "", 0
	for _, k := range known {
		// A key may lack the name of its table.
		d := min(nearword.Distance(word, k), nearword.Distance(word, k[strings.LastIndexByte(k, '.')+1:]))
		if best == "" || d < fewest {
			best, fewest = k, d
		}
	}
	return best
}
