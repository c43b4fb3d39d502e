package option

import (
	"strings"

	"isofacet/grid/decimal"
)

// Cell is the size of a cell: one number for a square, two for east-west and
// north-south. The zero value means not set.
type Cell struct {
	X, Y decimal.Number
}

const cellForm = "a size above zero such as 2, or two such as 2,2.5 (east-west, north-south)"

// Set reads S or SX,SY.
func (c *Cell) Set(text string) error {
	n, ok := numbers(text)
	if !ok || len(n) > 2 {
		return &BadValue{text, cellForm}
	}
	for _, v := range n {
		if v.Sign() <= 0 {
			return &BadValue{text, cellForm}
		}
	}
	c.X, c.Y = n[0], n[len(n)-1]
	return nil
}

// IsSet reports whether a cell was given.
func (c *Cell) IsSet() bool { return c.X.Sign() > 0 }

// String writes the cell as it is typed.
func (c *Cell) String() string {
	switch {
	case !c.IsSet():
		return ""
	case c.X == c.Y:
		return c.X.String()
	}
	return c.X.String() + "," + c.Y.String()
}

// Type names the form in help pages.
func (c *Cell) Type() string { return "S|SX,SY" }

// Extent is a rectangle. The zero value means not set.
type Extent struct {
	XMin, YMin, XMax, YMax decimal.Number
	set                    bool
}

const extentForm = "XMIN,YMIN,XMAX,YMAX with XMIN below XMAX and YMIN below YMAX"

// Set reads XMIN,YMIN,XMAX,YMAX.
func (e *Extent) Set(text string) error {
	n, ok := numbers(text)
	if !ok || len(n) != 4 || n[0].Cmp(n[2]) >= 0 || n[1].Cmp(n[3]) >= 0 {
		return &BadValue{text, extentForm}
	}
	*e = Extent{n[0], n[1], n[2], n[3], true}
	return nil
}

// IsSet reports whether an extent was given.
func (e *Extent) IsSet() bool { return e.set }

// String writes the extent as it is typed.
func (e *Extent) String() string {
	if !e.set {
		return ""
	}
	return strings.Join([]string{e.XMin.String(), e.YMin.String(), e.XMax.String(), e.YMax.String()}, ",")
}

// Type names the form in help pages.
func (e *Extent) Type() string { return "XMIN,YMIN,XMAX,YMAX" }

// numbers reads decimal numbers separated by commas.
func numbers(text string) ([]decimal.Number, bool) {
	var list []decimal.Number
	for word := range strings.SplitSeq(text, ",") {
		n, err := decimal.Parse(word)
		if err != nil {
			return nil, false
		}
		list = append(list, n)
	}
	return list, true
}

// Number is one decimal number, such as a no-data mark or a distance.
type Number struct {
	Value decimal.Number
	// Least is the smallest value taken, nil for no limit.
	Least *decimal.Number
	set   bool
}

// Set reads a number.
func (n *Number) Set(text string) error {
	v, err := decimal.Parse(text)
	if err != nil {
		return &BadValue{text, "a number such as 0.05"}
	}
	if n.Least != nil && v.Cmp(*n.Least) < 0 {
		return &BadValue{text, "a number of at least " + n.Least.String()}
	}
	n.Value, n.set = v, true
	return nil
}

// IsSet reports whether a number was given.
func (n *Number) IsSet() bool { return n.set }

// String writes the number as it is typed.
func (n *Number) String() string {
	if !n.set {
		return ""
	}
	return n.Value.String()
}

// Type names the form in help pages.
func (n *Number) Type() string { return "NUMBER" }
