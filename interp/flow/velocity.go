package flow

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// Conductivity is how readily an aquifer conducts water: a length per time.
type Conductivity struct {
	Value        float64
	Length, Time string // "m", "cm", "ft", "ft-int", "ft-us"; "s", "min", "h", "d", "yr"
}

// The units that ParseConductivity takes.
var (
	lengthUnits = []string{"m", "cm", "mm", "ft", "ft-int", "ft-us"}
	timeUnits   = []string{"s", "min", "h", "d", "yr"}
)

// A ConductivityError reports a text that is no conductivity.
type ConductivityError struct{ Seen string }

func (e *ConductivityError) Error() string {
	return fmt.Sprintf("%q: expected a number above zero and a unit such as 12 ft/d or 0.0003 m/s: lengths %s, times %s",
		e.Seen, strings.Join(lengthUnits, " "), strings.Join(timeUnits, " "))
}

// ParseConductivity reads "12 ft/d" or "3e-4 m/s".
func ParseConductivity(text string) (Conductivity, error) {
	number, unit, _ := strings.Cut(strings.TrimSpace(text), " ")
	length, time, ok := strings.Cut(strings.TrimSpace(unit), "/")
	v, err := strconv.ParseFloat(number, 64)
	if err != nil || !ok || !(v > 0 && v <= 1e30) || !slices.Contains(lengthUnits, length) || !slices.Contains(timeUnits, time) {
		return Conductivity{}, &ConductivityError{text}
	}
	return Conductivity{v, length, time}, nil
}

// String writes the conductivity as it is read.
func (k Conductivity) String() string {
	if k.Value == 0 {
		return ""
	}
	return strconv.FormatFloat(k.Value, 'g', -1, 64) + " " + k.Unit()
}

// Unit returns the unit, that of velocities too.
func (k Conductivity) Unit() string { return k.Length + "/" + k.Time }

// SeepageVelocity returns the mean velocity of groundwater between the grains,
//
//	v = K i / n
//
// in the unit of the conductivity K; i is the gradient, head per length in one unit,
// and n the effective porosity. Source: Heath 1983, p. 25 (from memory).
func SeepageVelocity(k Conductivity, gradient, porosity float64) float64 {
	return float64(k.Value*gradient) / porosity
}
