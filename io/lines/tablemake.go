package lines

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"

	"isofacet/io/readings"
)

// make turns what the text says into the table, and checks that it fits together.
func (w *tableWriter) make() *TableError {
	uses := []struct {
		key string
		use Use
	}{{"ground", Ground}, {"line", OnLine}, {"leave-out", LeaveOut}}
	for _, u := range uses {
		if e := w.patterns(u.key, u.use); e != nil {
			return e
		}
	}
	choice, e := w.choice("others", "ground", "line", "leave-out")
	if e != nil {
		return e
	}
	w.table.others = Use(choice)
	if len(w.table.patterns) == 0 && choice == 0 {
		return &TableError{Seen: "no patterns", Expected: `some codes, as in ground = ["GR"]`}
	}
	return w.takingApart()
}

// list returns the texts of a list, nil if the key is not there.
func (w *tableWriter) list(key, example string) ([]element, *TableError) {
	e, ok := w.said[key]
	switch {
	case !ok:
		return nil, nil
	case !e.isList:
		return nil, tableError(e.at, e.shown, "a list such as "+example)
	case e.badMember != nil:
		return nil, tableError(e.badMember.at, key+" with "+e.badMember.text, "a list of texts such as "+example)
	}
	return e.list, nil
}

// choice returns which of the words the key is set to, from 1, 0 if it is not there.
func (w *tableWriter) choice(key string, words ...string) (int, *TableError) {
	e, ok := w.said[key]
	if !ok {
		return 0, nil
	}
	for i, word := range words {
		if e.isText && e.text == word {
			return i + 1, nil
		}
	}
	return 0, tableError(e.at, e.shown, strings.Join(words[:len(words)-1], ", ")+" or "+words[len(words)-1])
}

func (w *tableWriter) patterns(key string, use Use) *TableError {
	list, e := w.list(key, `["GR", "SP*"]`)
	if e != nil {
		return e
	}
	for _, m := range list {
		p, err := readings.ParsePattern(key, "code="+m.text)
		if bad, ok := err.(*readings.OptionError); ok {
			return tableError(m.at, "pattern "+strconv.Quote(shorten(m.text)), bad.Expected)
		}
		for i := range w.table.patterns {
			if q := &w.table.patterns[i]; q.Text == p.Text && q.use != use {
				return tableError(m.at, fmt.Sprintf("pattern %q for %s", shorten(m.text), key), "one use; it is for "+q.use.String()+" as well")
			}
		}
		w.table.patterns = append(w.table.patterns, codePattern{use, p})
	}
	return nil
}

// takingApart reads the tables parts and marks.
func (w *tableWriter) takingApart() *TableError {
	t := w.table
	if e, ok := w.said["parts.separator"]; ok {
		if !e.isText || e.text == "" || strings.ContainsFunc(e.text, unicode.IsControl) && strings.TrimSpace(e.text) != "" {
			return tableError(e.at, e.shown, `the text between the parts of a code, such as " " or "-"`)
		}
		t.separator = e.text
	}
	number, e := w.choice("parts.number", "none", "behind", "part")
	if e != nil {
		return e
	}
	mark, e := w.choice("parts.mark", "none", "first", "last")
	if e != nil {
		return e
	}
	t.number, t.mark = numberPlace(max(number-1, 0)), markPlace(max(mark-1, 0))
	if said := w.said["parts.number"]; t.number == numberPart && t.separator == "" {
		return tableError(said.at, said.shown, "parts.separator to say what stands between code and number")
	}
	if said := w.said["parts.mark"]; t.mark != markNone && t.separator == "" {
		return tableError(said.at, said.shown, "parts.separator to say what stands between code and mark")
	}
	for k, key := range []string{"marks.begin", "marks.end", "marks.close"} {
		if e := w.markWords(key, markKind(1)<<k); e != nil {
			return e
		}
	}
	if said := w.said["parts.mark"]; t.mark != markNone && len(t.marks) == 0 {
		return tableError(said.at, said.shown, `the marks themselves, as in marks.begin = ["B"]`)
	}
	return nil
}

var markNames = map[markKind]string{markBegin: "begin", markEnd: "end", markClose: "close"}

func (w *tableWriter) markWords(key string, kind markKind) *TableError {
	list, e := w.list(key, `["B"]`)
	if e != nil {
		return e
	}
	for _, m := range list {
		switch parts := w.table.parts(m.text); {
		case w.table.mark == markNone:
			return tableError(m.at, "mark "+strconv.Quote(shorten(m.text)), "parts.mark to say where marks stand, first or last")
		case len(parts) != 1 || parts[0] != m.text:
			return tableError(m.at, "mark "+strconv.Quote(shorten(m.text)), "a word without the separator")
		case w.table.marks[m.text] != 0 && w.table.marks[m.text] != kind:
			return tableError(m.at, fmt.Sprintf("mark %q for %s", shorten(m.text), markNames[kind]), "one meaning; it is for "+markNames[w.table.marks[m.text]]+" as well")
		}
		w.table.marks[m.text] = kind
	}
	return nil
}
