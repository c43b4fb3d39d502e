package readings

import "strings"

// UnitOf returns the unit of length that a header name ends with or has in brackets:
// "m", "ft", or "" if it names none. "Easting (ft)" and "elev_ft" say feet, and not
// which.
func UnitOf(name string) string {
	words := strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return (r < 'a' || r > 'z') && r < 0x80 })
	if len(words) < 2 {
		return ""
	}
	switch words[len(words)-1] {
	case "m", "metre", "metres", "meter", "meters", "masl", "mamsl", "mnn", "mod":
		return "m"
	case "ft", "feet", "foot", "usft", "ftus", "ftint", "ift", "ftmsl":
		return "ft"
	}
	return ""
}

// NamesLongitude reports whether a header name says longitude.
func NamesLongitude(name string) bool {
	switch wordKey(name) {
	case "lon", "long", "lng", "longitude", "londeg", "longitudedeg", "decimallongitude":
		return true
	}
	return false
}
