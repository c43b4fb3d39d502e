package readings

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// columns settles which column plays which role, and returns how many rows at the
// beginning are headers: 0, 1, or 2 with a row of units.
func (s *sniffer) columns(b []byte, rows []row) (headers int, err *PositionError) {
	declared := &s.declared.Columns
	if n := len(rows[0].fields); n > maxColumns {
		return 0, s.atField(b, rows[0], -1, &PositionError{Kind: FieldCount, What: fields(n), Expected: fmt.Sprintf("at most %d", maxColumns)})
	}
	first := s.line + countLines(b[:rows[0].at[0]]) + 1
	s.layout.HeaderLine = first // for warnings; 0 again if it is none
	switch {
	case declared.IsZero():
		headers, err = s.columnsByWords(b, rows)
	case declared.named:
		headers, err = s.columnsByName(b, rows)
	default:
		headers, err = s.columnsInOrder(b, rows)
	}
	if err != nil {
		return 0, err
	}
	s.layout.HeaderLine = 0
	if headers == 1 {
		s.layout.HeaderLine = first
		if len(rows) > 1 && s.isUnitRow(rows[1]) {
			headers = 2
			s.layout.Note = join(s.layout.Note, "a row of units follows the header")
		}
	}
	if err := s.complete(); err != nil {
		return 0, s.atField(b, rows[0], -1, err)
	}
	return headers, nil
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// columnsInOrder follows a list such as id,x,y,z.
func (s *sniffer) columnsInOrder(b []byte, rows []row) (headers int, err *PositionError) {
	list := s.declared.Columns.list
	s.layout.Columns = make([]Column, len(list))
	for i, c := range list {
		s.layout.Columns[i].Role = c.role
	}
	s.layout.Heads = s.declared.Columns.heads
	first := rows[0]
	if !s.isHeader(first) {
		return 0, nil
	}
	if n := len(trimEmpty(first.fields)); n != len(list) {
		return 0, s.atField(b, first, -1, &PositionError{Kind: FieldCount, What: "header with " + fields(n),
			Expected: fmt.Sprintf("%d, as declared", len(list))})
	}
	s.name(first)
	return 1, nil
}

// columnsByName follows a list such as x=East,y=North,z=4.
func (s *sniffer) columnsByName(b []byte, rows []row) (headers int, err *PositionError) {
	first := rows[0]
	names := trimEmpty(first.fields)
	s.layout.Columns = make([]Column, len(names))
	s.layout.Heads = s.declared.Columns.heads
	byName := false
	for _, c := range s.declared.Columns.list {
		i := c.number - 1
		if c.number == 0 {
			byName = true
			if i, err = s.find(b, first, c.name); err != nil {
				return 0, err
			}
		}
		if i >= len(names) {
			return 0, s.atField(b, first, -1, &PositionError{Kind: MissingColumn, What: fields(len(names)),
				Expected: fmt.Sprintf("a column %d for %s", c.number, c.role)})
		}
		if taken := s.layout.Columns[i].Role; taken != NoRole {
			return 0, s.atField(b, first, i, &PositionError{Kind: TwoColumns, What: fmt.Sprintf("column %d", i+1), Seen: shorten(names[i]),
				Expected: fmt.Sprintf("one role, not both %s and %s", taken, c.role)})
		}
		s.layout.Columns[i].Role = c.role
	}
	if !byName && !s.isHeader(first) {
		return 0, nil
	}
	s.name(first)
	return 1, nil
}

// find returns the column with a name, as written or but for the case.
func (s *sniffer) find(b []byte, header row, name string) (int, *PositionError) {
	exact, folded, folds := -1, -1, 0
	for i, f := range header.fields {
		if f == name && exact < 0 {
			exact = i
		} else if f == name {
			return 0, s.atField(b, header, i, &PositionError{Kind: TwoColumns, What: "column", Seen: shorten(name),
				Expected: "one column of that name; give its number"})
		}
		if strings.EqualFold(f, name) {
			folded = i
			folds++
		}
	}
	switch {
	case exact >= 0:
		return exact, nil
	case folds == 1:
		return folded, nil
	}
	return 0, s.atField(b, header, -1, &PositionError{Kind: MissingColumn, What: "header", Seen: shorten(strings.Join(header.fields, ", ")),
		Expected: fmt.Sprintf("a column named %q", name)})
}

// columnsByWords looks the names of the header up in the table of words.
func (s *sniffer) columnsByWords(b []byte, rows []row) (headers int, err *PositionError) {
	first := rows[0]
	names := trimEmpty(first.fields)
	numbers, known := 0, [roleCount]bool{}
	level := -1
	for i, name := range names {
		if isNumber(name) {
			numbers++
		}
		key := wordKey(name)
		known[headerWords[key].role] = true
		if levelWords[key] && level < 0 {
			level = i
		}
	}
	if numbers > 0 && !(known[X] && known[Y]) {
		return 0, s.headerless(b, first, numbers)
	}
	known[NoRole] = false
	if known == [roleCount]bool{} && level < 0 {
		return 0, s.atField(b, first, -1, &PositionError{Kind: UnknownHeader, What: "header", Seen: shorten(strings.Join(names, ", ")),
			Expected: "names such as easting, northing, elevation, or the columns to be declared"})
	}
	if level >= 0 && s.need == needValue {
		return 0, s.atField(b, first, level, &PositionError{Kind: DepthOrLevel, What: "column", Seen: shorten(names[level]),
			Expected: "to be told whether it is a depth or an elevation"})
	}
	s.layout.Columns = make([]Column, len(names))
	s.name(first)
	for r := ID; r < roleCount; r++ {
		if err := s.claim(b, first, r); err != nil {
			return 0, err
		}
	}
	return 1, nil
}

// claim gives a role to the column whose name means it.
func (s *sniffer) claim(b []byte, header row, r Role) *PositionError {
	var strong, weak []int
	for i, c := range s.layout.Columns {
		if w := headerWords[wordKey(c.Name)]; w.role == r && w.weak {
			weak = append(weak, i)
		} else if w.role == r {
			strong = append(strong, i)
		}
	}
	if len(strong) == 0 {
		strong = weak
	}
	switch {
	case len(strong) == 0:
		return nil
	case len(strong) > 1 && s.isNumeric(r) && (r <= Z || s.need == needTable || s.nameOf(Z) == ""):
		i, j := strong[0], strong[1]
		return s.atField(b, header, j, &PositionError{Kind: TwoColumns, What: "column", Seen: shorten(s.layout.Columns[j].Name),
			Expected: fmt.Sprintf("one column for %s; column %d, %q, is one too", r, i+1, shorten(s.layout.Columns[i].Name))})
	case len(strong) > 1:
		if r.Kept() && s.need == needValue {
			s.warnings = append(s.warnings, Warning{s.layout.File, s.layout.HeaderLine,
				fmt.Sprintf("columns %q and %q could both be %s: neither is taken", shorten(s.layout.Columns[strong[0]].Name),
					shorten(s.layout.Columns[strong[1]].Name), r)})
		}
		return nil
	}
	s.layout.Columns[strong[0]].Role = r
	if r == Z {
		s.layout.Heads = headerWords[wordKey(s.layout.Columns[strong[0]].Name)].head
	}
	return nil
}

// headerless takes two or three numbers between blanks for a place and a value.
func (s *sniffer) headerless(b []byte, first row, numbers int) *PositionError {
	n := len(first.fields)
	blanks := s.format.delimiter == ' ' || s.format.delimiter == '\t'
	if blanks && numbers == n && (n == 3 || n == 2 && s.need == needPlace) {
		s.layout.Columns = []Column{{Role: X}, {Role: Y}, {Role: Z}}[:n]
		s.layout.Note = "three numbers a line without a header are taken as x y z"
		if n == 2 {
			s.layout.Note = "two numbers a line without a header are taken as x y"
		}
		return nil
	}
	return s.atField(b, first, -1, &PositionError{Kind: NoHeader, What: "no header line above " + fields(n), Expected: "the columns to be declared"})
}

// isHeader reports whether a row has words in every column that is to hold a
// number. A row with any number there is data, good or bad.
func (s *sniffer) isHeader(r row) bool {
	found := false
	for i, c := range s.layout.Columns {
		if !s.isNumeric(c.Role) {
			continue
		}
		if i >= len(r.fields) {
			return false
		}
		first, _ := utf8.DecodeRuneInString(r.fields[i])
		if !unicode.IsLetter(first) || s.isMissing(r.fields[i]) || classify([]byte(r.fields[i]), '.') == NotFinite {
			return false
		}
		found = true
	}
	return found
}

func (s *sniffer) isMissing(text string) bool {
	for _, m := range s.declared.Missing {
		if markKey(m) == markKey(text) {
			return true
		}
	}
	return false
}

// isUnitRow reports whether a row has a unit in every column for numbers.
func (s *sniffer) isUnitRow(r row) bool {
	found := false
	for i, c := range s.layout.Columns {
		if !s.isNumeric(c.Role) {
			continue
		}
		if i < len(r.fields) && c.Role == SpecificGravity && (r.fields[i] == "" || r.fields[i] == "-") {
			continue // it has no unit
		}
		if i >= len(r.fields) || !isUnit(r.fields[i]) {
			return false
		}
		found = true
	}
	return found
}

// name puts the names of the header to the columns. A name that plainly says
// easting above a column declared as northing, say, is worth a warning: it is the
// commonest way to mirror a job.
func (s *sniffer) name(header row) {
	for i := range s.layout.Columns {
		if i >= len(header.fields) {
			break
		}
		c := &s.layout.Columns[i]
		c.Name = header.fields[i]
		said := headerWords[wordKey(c.Name)].role
		if s.isNumeric(c.Role) && (said == X || said == Y || said == Z) && said != c.Role {
			s.warnings = append(s.warnings, Warning{s.layout.File, s.layout.HeaderLine,
				fmt.Sprintf("column %d is headed %q but declared as %s", i+1, shorten(c.Name), c.Role)})
		}
	}
}

// complete reports a role that is missing, or one that is declared in vain.
func (s *sniffer) complete() *PositionError {
	var found []string
	has := [roleCount]bool{}
	for _, c := range s.layout.Columns {
		if c.Role != NoRole {
			has[c.Role] = true
			found = append(found, c.Role.String())
		}
	}
	if len(found) == 0 {
		found = []string{"none"}
	}
	needed, all := []Role{X, Y, Z}, "x, y and z"
	switch {
	case s.need == needPlace:
		needed, all = needed[:2], "x and y"
	case s.need == needTable:
		needed, all = s.tableNeeds, listRoles(s.tableNeeds)
	case s.soundings(&has):
		s.layout.Down = true
		needed, all = []Role{X, Y, Depth}, "x, y and depth"
	case s.reducer != nil:
		var err *PositionError
		if s.reduce, err = s.reducer.Begin(&s.layout); err != nil {
			err.File = s.layout.File
			return err
		}
		if s.reduce {
			needed = nil
		}
	}
	for _, r := range needed {
		if !has[r] {
			return &PositionError{File: s.layout.File, Kind: MissingRole, What: "no column for " + r.String(),
				Expected: all + "; the roles found are " + strings.Join(found, ", ")}
		}
	}
	for i := range s.layout.Columns {
		r := s.layout.Columns[i].Role
		switch {
		case r == NoRole, r == X, r == Y, r == Z, r.Kept(), s.need != needValue,
			s.reduce && s.reducer.Uses(r), s.layout.Down && r == Depth:
			continue
		case r == Depth && has[Z] && !s.layout.ColumnsDeclared:
			s.warnings = append(s.warnings, Warning{s.layout.File, s.layout.HeaderLine,
				fmt.Sprintf("column %q is a depth and not used: column %q is the value", shorten(s.layout.Columns[i].Name), shorten(s.nameOf(Z)))})
		}
		if s.layout.ColumnsDeclared {
			return &PositionError{File: s.layout.File, Kind: UnusedRole, What: "role " + r.String(),
				Expected: "a role that is used here: x y z " + keptList()}
		}
		s.layout.Columns[i].Role = NoRole // a word of the header that asks for nothing
	}
	return nil
}

// soundings reports whether the file has depths that count from one number, and
// nothing else that makes values of them.
func (s *sniffer) soundings(has *[roleCount]bool) bool {
	if s.depthFrom == nil || !has[Depth] || has[Z] || has[MeasuringPoint] {
		return false
	}
	return s.reducer == nil || !has[Status] && !has[Product] && !has[ProductDepth]
}

// nameOf returns the name of the column that has a role.
func (s *sniffer) nameOf(r Role) string {
	for _, c := range s.layout.Columns {
		if c.Role == r {
			return c.Name
		}
	}
	return ""
}

func keptList() string { return strings.ReplaceAll(listRoles(keptRoles[:]), ", ", " ") }

// listRoles names roles for people.
func listRoles(roles []Role) string {
	names := make([]string, len(roles))
	for i, r := range roles {
		names[i] = r.String()
	}
	return strings.Join(names, ", ")
}

// trimEmpty takes off what a delimiter at the end of a header line leaves.
func trimEmpty(names []string) []string {
	for len(names) > 1 && names[len(names)-1] == "" {
		names = names[:len(names)-1]
	}
	return names
}

func fields(n int) string {
	if n == 1 {
		return "1 field"
	}
	return fmt.Sprintf("%d fields", n)
}
