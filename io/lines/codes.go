package lines

import (
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
)

// Codes looks the codes of readings up in a table while they are read, and counts
// them: its Choose goes into readings.Selection.
//
//	codes := lines.NewCodes(table)
//	set, err := readings.Read(ctx, sources, readings.Options{Select: readings.Selection{Code: codes.Choose}})
//	...
//	if err := codes.Unknown(); err != nil {
//		return err // codes.toml: code EPX (14 points) unknown; known: CR, GR, TOE
//	}
//	strings, err := lines.Strung(set, table)
//
// Safe for several goroutines.
type Codes struct {
	table *CodeTable
	mu    sync.RWMutex
	met   map[string]*metCode
}

type metCode struct {
	Coded
	reason string
	count  atomic.Int64
}

// NewCodes begins a count of codes.
func NewCodes(t *CodeTable) *Codes { return &Codes{table: t, met: make(map[string]*metCode)} }

// Choose counts a code and returns why a reading with it is left out, "" if it is
// not. A code that the table does not know is not left out: see Unknown.
func (c *Codes) Choose(code []byte) (reason string) {
	c.mu.RLock()
	m := c.met[string(code)]
	c.mu.RUnlock()
	if m == nil {
		m = c.meet(string(code))
	}
	m.count.Add(1)
	return m.reason
}

func (c *Codes) meet(code string) *metCode {
	c.mu.Lock()
	defer c.mu.Unlock()
	if m := c.met[code]; m != nil {
		return m
	}
	m := &metCode{Coded: c.table.Take(code)}
	if m.Use == LeaveOut {
		m.reason = fmt.Sprintf("code %s is left out by %s", codeText(m.Code), c.table.Name)
	}
	c.met[code] = m
	return m
}

// A CodeCount is a row of the histogram of codes.
type CodeCount struct {
	Code     string // without numbers and marks
	Use      Use
	Readings int
	Numbers  int // how many unlike numbers of strings
}

// Histogram returns the codes met, in the order of their text. Readings that something
// else left out first (a pattern of Only or Without) are not among them.
func (c *Codes) Histogram() []CodeCount {
	c.mu.RLock()
	defer c.mu.RUnlock()
	byCode := make(map[string]*CodeCount)
	numbers := make(map[[2]string]bool)
	for _, m := range c.met {
		h := byCode[m.Code]
		if h == nil {
			h = &CodeCount{Code: m.Code, Use: m.Use}
			byCode[m.Code] = h
		}
		h.Readings += int(m.count.Load())
		if key := [2]string{m.Code, m.Number}; m.Number != "" && !numbers[key] {
			numbers[key] = true
			h.Numbers++
		}
	}
	var all []CodeCount
	for _, h := range byCode {
		all = append(all, *h)
	}
	slices.SortFunc(all, func(a, b CodeCount) int { return cmp.Compare(a.Code, b.Code) })
	return all
}

// UnknownCodes are codes that a table does not know, or for which it has patterns
// of unlike uses.
type UnknownCodes struct {
	Table   string
	Codes   []CodeCount // most readings first
	Clashes []Clash
	Known   []string // the patterns of the table
}

// A Clash is a code with the two patterns that fit it.
type Clash struct {
	CodeCount
	Patterns [2]string // with their uses: line "TOE*"
}

// Unknown returns an *UnknownCodes if there are any.
func (c *Codes) Unknown() error {
	e := &UnknownCodes{Table: c.table.Name}
	for _, h := range c.Histogram() {
		if h.Use != Unknown {
			continue
		}
		coded := Coded{Code: h.Code}
		c.table.lookUp(&coded)
		if coded.Clash[0] != "" {
			e.Clashes = append(e.Clashes, Clash{h, coded.Clash})
		} else {
			e.Codes = append(e.Codes, h)
		}
	}
	if len(e.Codes)+len(e.Clashes) == 0 {
		return nil
	}
	slices.SortStableFunc(e.Codes, func(a, b CodeCount) int { return cmp.Compare(b.Readings, a.Readings) })
	for i := range c.table.patterns {
		e.Known = append(e.Known, c.table.patterns[i].Text)
	}
	slices.Sort(e.Known)
	e.Known = slices.Compact(e.Known)
	return e
}

func (e *UnknownCodes) Error() string {
	var all []string
	if n := len(e.Codes); n > 0 {
		var b strings.Builder
		b.WriteString(e.Table + ": code ")
		for i, h := range e.Codes[:min(n, firstFew)] {
			if i > 0 {
				b.WriteString(", ")
			}
			b.WriteString(codeText(h.Code) + " (" + counted(h.Readings, "point") + ")")
		}
		if n > firstFew {
			fmt.Fprintf(&b, " and %d more codes", n-firstFew)
		}
		b.WriteString(" unknown; known: " + listed(e.Known))
		all = append(all, b.String())
	}
	for _, c := range e.Clashes[:min(len(e.Clashes), firstFew)] {
		all = append(all, fmt.Sprintf("%s: code %s (%s) fits %s and %s: expected one use", e.Table, codeText(c.Code), counted(c.Readings, "point"),
			c.Patterns[0], c.Patterns[1]))
	}
	if more := len(e.Clashes) - firstFew; more > 0 {
		all = append(all, fmt.Sprintf("%s: and %d more codes fit patterns of two uses", e.Table, more))
	}
	return strings.Join(all, "\n")
}

// listed writes the known patterns, the first few of a long table.
func listed(known []string) string {
	const most = 24
	var texts []string
	for _, k := range known[:min(len(known), most)] {
		texts = append(texts, codeText(k))
	}
	if more := len(known) - most; more > 0 {
		texts = append(texts, fmt.Sprintf("and %d more", more))
	}
	if texts == nil {
		return "none"
	}
	return strings.Join(texts, ", ")
}

// codeText writes a code plainly, in quotes where that would not be clear.
func codeText(code string) string {
	quoted := strconv.Quote(shorten(code))
	if code == "" || strings.ContainsAny(code, " ,;\"()") || len(quoted) != len(code)+2 {
		return quoted
	}
	return code
}
