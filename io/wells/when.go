package wells

import (
	"strings"
	"time"
)

// timeForms are the ways in which dates and times may be written. None can be read
// as two dates.
var timeForms = []string{
	"2006-01-02", "2006-01-02T15:04", "2006-01-02 15:04", "2006-01-02T15:04:05", "2006-01-02 15:04:05",
	"2006-01-02T15:04Z07:00", time.RFC3339, "2006-01-02 15:04Z07:00", "2006-01-02 15:04:05Z07:00",
	"02.01.2006", "02.01.2006 15:04", "02.01.2006 15:04:05", "2.1.2006", "2.1.2006 15:04", "2.1.2006 15:04:05",
}

// ExpectedTime says how a date or time is written.
const ExpectedTime = "a date such as 2024-03-12, or with a time 2024-03-12T08:10"

// ParseTime reads a date or a time. A date is the beginning of its day.
func ParseTime(text string) (t time.Time, ok bool) {
	text = strings.TrimSpace(text)
	for _, form := range timeForms {
		if t, err := time.Parse(form, text); err == nil {
			return t, true
		}
	}
	return t, false
}
