package option

import "strconv"

// Threads is a number of threads; 0, the zero value, means one per processor.
type Threads int

// threadsMax is far above any machine: it only catches slips.
const threadsMax = 4096

// Set reads a number from 1.
func (t *Threads) Set(text string) error {
	n, err := strconv.Atoi(text)
	if err != nil || n < 1 || n > threadsMax {
		return &BadValue{text, "a number of threads from 1 to 4096"}
	}
	*t = Threads(n)
	return nil
}

// String writes the number, nothing when it is not set.
func (t Threads) String() string {
	if t == 0 {
		return ""
	}
	return strconv.Itoa(int(t))
}

// Type names the form in help pages.
func (t *Threads) Type() string { return "N" }

// Rows is a number of rows at the head of a file.
type Rows int

// Set reads a number from 0.
func (r *Rows) Set(text string) error {
	n, err := strconv.Atoi(text)
	if err != nil || n < 0 {
		return &BadValue{text, "a number of rows, 0 or more"}
	}
	*r = Rows(n)
	return nil
}

// String writes the number, nothing when it is 0.
func (r Rows) String() string {
	if r == 0 {
		return ""
	}
	return strconv.Itoa(int(r))
}

// Type names the form in help pages.
func (r *Rows) Type() string { return "N" }
