package readings

import (
	"strings"
	"unicode"
)

// Header words.
//
// A header name is compared without case, without what stands in brackets, without
// a unit at its end, and without anything but letters and digits: "Easting (m)",
// "EASTING_M" and "easting" are one word. A weak word counts only if no other
// column has a strong word for the role: beside "Code", a column "Description" is
// passed over.

type headerWord struct {
	role Role
	weak bool
	head bool // z is a head of groundwater
}

// headerWords is the table by role. Words that could be two things are missing on
// purpose ("n" beside "e" is clear, "d" and "h" are not), or ask (levelWords).
var headerWords = buildWords([]struct {
	role   Role
	strong string
	weak   string
}{
	{X, "x easting east e xcoord xcoordinate coordx eastcoordinate eastingcoordinate", ""},
	{Y, "y northing north n ycoord ycoordinate coordy northcoordinate northingcoordinate", ""},
	{Z, "z elevation elev height hgt altitude zcoord zcoordinate coordz reducedlevel spotheight", ""},
	{ID, "id pointid pointno pointnumber pointname ptid ptno ptname shotid shotno shotnumber wellid wellno wellnumber " +
		"wellname boreholeid boreholeno boreholename stationid stationno stationname siteid siteno sitenumber sitename locationid",
		"point pt pointnum name no number nr shot well borehole bore station site location"},
	{Code, "code pointcode featurecode fcode shotcode codes", "description desc descriptor feature pointdescription remark remarks"},
	{Line, "line lineid lineno linenumber linename string stringid stringno stringnumber breaklineid", "breakline"},
	{Depth, "depth depthtowater dtw waterdepth depthtogroundwater depthtowaterlevel depthtohead", ""},
	{MeasuringPoint, "measuringpoint measuringpointelevation measuringpointelev mp mpelevation mpelev topofcasing topofcasingelevation " +
		"toc tocelevation tocelev casingelevation casingelev referenceelevation refelevation refelev", ""},
	{Product, "product productthickness lnaplthickness", ""},
	{ProductDepth, "productdepth depthtoproduct dtp", ""},
	{SpecificGravity, "specificgravity sg", ""},
	{Ground, "ground groundelevation groundelev groundsurface groundsurfaceelevation gse", ""},
	{ScreenTop, "screentop topofscreen screentopelevation screentopelev", ""},
	{ScreenBottom, "screenbottom bottomofscreen screenbottomelevation screenbottomelev", ""},
	{Zone, "zone aquifer aquiferzone waterbearingzone", ""},
	{Status, "status statuscode wellstatus", ""},
	{Time, "datetime timestamp dateandtime", "date time measured measuredon dateofmeasurement"},
	{Round, "round gauginground roundname roundid", "campaign event"},
	{ValidFrom, "validfrom effectivefrom", ""},
	{Sigma, "sigma uncertainty standarduncertainty standarddeviation stddev", ""},
	{Class, "class classification classcode", "category"},
	{Qualifier, "qualifier dataqualifier qualifiercode", "flag flags"},
	{Limit, "limit reportinglimit detectionlimit", ""},
}, "head hydraulichead piezometrichead potentiometrichead groundwaterhead groundwaterelevation groundwaterelev gwelevation gwelev "+
	"waterelevation waterelev waterlevelelevation waterlevelelev watertableelevation watertableelev headelevation")

// levelWords name a level of water without saying whether it is counted up from a
// datum or down from the casing.
var levelWords = words("level waterlevel groundwaterlevel gwlevel staticwaterlevel swl gwl wl watertable staticlevel")

func buildWords(table []struct {
	role   Role
	strong string
	weak   string
}, heads string) map[string]headerWord {
	m := make(map[string]headerWord)
	add := func(list string, w headerWord) {
		for _, word := range strings.Fields(list) {
			if _, twice := m[word]; twice {
				panic("readings: header word " + word + " stands twice in the table")
			}
			m[word] = w
		}
	}
	for _, t := range table {
		add(t.strong, headerWord{role: t.role})
		add(t.weak, headerWord{role: t.role, weak: true})
	}
	add(heads, headerWord{role: Z, head: true})
	return m
}

func words(list string) map[string]bool {
	m := make(map[string]bool)
	for _, w := range strings.Fields(list) {
		m[w] = true
	}
	return m
}

// unitWords may end a header name, stand in brackets behind it, or fill a row of
// units below the header.
var unitWords = words("m mm cm km metre metres meter meters ft feet foot usft ftus ftint ift masl mamsl amsl asl msl ftmsl " +
	"mnn mod us int intl survey international")

// wordKey reduces a header name to what is looked up.
func wordKey(name string) string {
	var parts []string
	var b strings.Builder
	end := func() {
		if b.Len() > 0 {
			parts = append(parts, b.String())
			b.Reset()
		}
	}
	depth := 0
	for _, r := range strings.ToLower(name) {
		switch {
		case r == '(' || r == '[' || r == '{':
			depth++
		case r == ')' || r == ']' || r == '}':
			depth = max(depth-1, 0)
		case depth > 0 || r == '\'' || r == '’':
		case unicode.IsLetter(r) || unicode.IsDigit(r):
			b.WriteRune(r)
			continue
		}
		end()
	}
	end()
	for len(parts) > 1 && unitWords[parts[len(parts)-1]] {
		parts = parts[:len(parts)-1]
	}
	return strings.Join(parts, "")
}

// isUnit reports whether a text is a unit of length, in brackets or without.
func isUnit(text string) bool {
	text = strings.Trim(strings.ToLower(text), "()[] ")
	found := false
	for _, w := range strings.FieldsFunc(text, func(r rune) bool { return !unicode.IsLetter(r) }) {
		if !unitWords[w] {
			return false
		}
		found = true
	}
	return found
}
