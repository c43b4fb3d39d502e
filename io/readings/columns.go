package readings

import (
	"strconv"
	"strings"
)

// Columns say which column of a file plays which role. The zero value leaves it to
// the header line.
type Columns struct {
	list []column
	// named is true for ROLE=NAME and ROLE=NUMBER, false for a list in the order of
	// the file.
	named bool
	heads bool
}

type column struct {
	role   Role
	name   string // header name, when named
	number int    // column number from 1, when named; 0 goes by name
}

// ParseColumns reads a list of columns in one of two forms:
//
//	id,northing,easting,elevation,code    every column of the file in order, - skips one
//	x=East,y=North,z=4                    by header name or by number, the others are skipped
//
// The words are those of ParseRole. Every role may be given once. A header name
// that holds a comma or is a whole number must be given by its number. The empty
// string is the zero Columns. Errors are *OptionError.
func ParseColumns(text string) (Columns, error) {
	var c Columns
	if strings.TrimSpace(text) == "" {
		return c, nil
	}
	bad := func(seen, expected string) (Columns, error) {
		return Columns{}, &OptionError{"columns", seen, expected}
	}
	c.named = strings.Contains(text, "=")
	var taken [roleCount]bool
	for _, item := range strings.Split(text, ",") {
		word, where, isNamed := strings.Cut(item, "=")
		word, where = strings.TrimSpace(word), strings.TrimSpace(where)
		if isNamed != c.named {
			return bad(item, "either a list in the order of the file (x,y,z) or names and numbers throughout (x=East,y=North,z=4)")
		}
		if !isNamed && word == "-" {
			c.list = append(c.list, column{})
			continue
		}
		role, ok := ParseRole(word)
		if !ok {
			return bad(word, "a role such as "+roleList())
		}
		if taken[role] {
			return bad(word, "every role once; "+role.String()+" is named twice")
		}
		taken[role] = true
		c.heads = c.heads || strings.EqualFold(word, "head")
		col := column{role: role}
		if isNamed {
			if where == "" {
				return bad(item, "a header name or a column number behind the equals sign")
			}
			col.name = where
			if isDigits(where) {
				n, err := strconv.Atoi(where)
				if err != nil || n < 1 || n > maxColumns {
					return bad(item, "a column number from 1 to "+strconv.Itoa(maxColumns))
				}
				col.name, col.number = "", n
			}
		}
		c.list = append(c.list, col)
	}
	if len(c.list) > maxColumns {
		return bad(shorten(text), "at most "+strconv.Itoa(maxColumns)+" columns")
	}
	return c, nil
}

// maxColumns bounds a line's fields: no field file comes near.
const maxColumns = 4096

func isDigits(s string) bool {
	for i := range len(s) {
		if s[i] < '0' || s[i] > '9' {
			return false
		}
	}
	return s != ""
}

func roleList() string {
	var b strings.Builder
	for i, r := range Roles() {
		if i > 0 {
			b.WriteByte(' ')
		}
		b.WriteString(r.String())
	}
	return b.String()
}

// IsZero reports whether nothing is declared.
func (c Columns) IsZero() bool { return len(c.list) == 0 }

// String writes the columns as ParseColumns reads them.
func (c Columns) String() string {
	var b strings.Builder
	for i, col := range c.list {
		if i > 0 {
			b.WriteByte(',')
		}
		word := col.role.String()
		if col.role == Z && c.heads {
			word = "head"
		}
		b.WriteString(word)
		switch {
		case col.number > 0:
			b.WriteString("=" + strconv.Itoa(col.number))
		case c.named:
			b.WriteString("=" + col.name)
		}
	}
	return b.String()
}
