package gen

import (
	"fmt"
	"strconv"
	"strings"
)

func itoa(n int) string { return strconv.Itoa(n) }

// fixed writes a whole number of units as a decimal with the given number of
// places: fixed(1234, 3) is 1.234.
func fixed(n, places int) string {
	sign := ""
	if n < 0 {
		sign, n = "-", -n
	}
	unit := 1
	for range places {
		unit *= 10
	}
	return fmt.Sprintf("%s%d.%0*d", sign, n/unit, places, n%unit)
}

// table collects rows of comma-separated text.
type table struct{ strings.Builder }

func (t *table) row(fields ...string) {
	t.WriteString(strings.Join(fields, ","))
	t.WriteByte('\n')
}
