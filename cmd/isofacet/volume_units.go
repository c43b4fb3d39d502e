package main

import (
	"fmt"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/io/units"
)

// volumeUnits are how volumes and areas are told.
type volumeUnits struct {
	volume, area units.Factor
	slopes       bool // z is in the unit of x and y, as areas on slopes need
}

// settleVolumeUnits works out the units of volumes and areas. Where x and y are in one
// unit and z in another, volumes are converted even if nobody asks: a square metre
// times a foot is no unit of the trade.
func (v *volumes) settleVolumeUnits() error {
	xyName, zName := v.sideUnit(func(s *surfaceSide) string { return s.labels.XYUnit }), v.sideUnit(func(s *surfaceSide) string { return s.labels.ZUnit })
	xy, z := lengthUnit(xyName), lengthUnit(zName)
	volume, area := v.volumeUnit.value, v.areaUnit.value
	mixed := xy != units.Unstated && z != units.Unstated && xy != z
	if mixed && volume == units.OwnVolume {
		volume = units.CubicFoot
		if xy == units.Metre {
			volume = units.CubicMetre
		}
	}
	u := &volumeUnits{slopes: !mixed}
	var ok bool
	if u.volume, ok = units.VolumeFactor(xy, z, volume); !ok {
		return status.Usage(fmt.Errorf("--volume-unit %s: the unit of x and y is %s, that of z %s: expected both to be stated", volume, xy, z),
			"say --xy-unit and --z-unit: m, ft-int or ft-us")
	}
	if u.area, ok = units.AreaFactor(xy, area); !ok {
		return status.Usage(fmt.Errorf("--area-unit %s: the unit of x and y is unstated: expected it to be stated", area), "say --xy-unit: m, ft-int or ft-us")
	}
	v.units = u
	v.areas, v.volumes = v.moreDigits(v.xy, u.area), v.moreDigits(v.z, u.volume)
	v.result.VolumeUnit, v.result.AreaUnit = volume.String(), area.String()
	if volume == units.OwnVolume {
		v.result.VolumeUnit = ownUnit(xy, "3")
	}
	if area == units.OwnArea {
		v.result.AreaUnit = ownUnit(xy, "2")
	}
	if mixed {
		v.report.Note(fmt.Sprintf("units: x and y in %s, z in %s: volumes are converted to %s exactly; areas on slopes are left out", xy, z, volume),
			"xy", xy.String(), "z", z.String(), "volume", volume.String())
	}
	return nil
}

// sideUnit is the unit that one of the sides has.
func (v *volumes) sideUnit(of func(*surfaceSide) string) string {
	for _, s := range v.sides() {
		if u := of(s); u != "" {
			return u
		}
	}
	return ""
}

func lengthUnit(name string) units.Unit {
	u, err := units.Parse(name)
	if err != nil {
		return units.Unstated
	}
	return u
}

func ownUnit(u units.Unit, power string) string {
	if u == units.Unstated {
		return "unstated"
	}
	if u == units.Metre {
		return "m" + power
	}
	return "ft" + power + " (" + u.String() + ")"
}

// moreDigits adds digits after the point as a larger unit makes numbers smaller.
func (v *volumes) moreDigits(digits int, f units.Factor) int {
	if digits < 0 || v.decimals != (option.Decimals{}) {
		return digits
	}
	for by := f.Float64(); by < 0.5 && digits < 15; by *= 10 {
		digits++
	}
	return digits
}

// volume and area are numbers as they are written.
func (v *volumes) volume(x float64) number { return number{v.units.volume.Of(x), v.volumes} }
func (v *volumes) area(x float64) number   { return number{v.units.area.Of(x), v.areas} }
