package units

import (
	"errors"
	"math/big"
)

// Volume and Area are units in which volumes and areas are told. The zero value is none.
type (
	Volume uint8
	Area   uint8
)

// The units of volumes.
const (
	OwnVolume Volume = iota // what x, y and z make
	CubicMetre
	CubicFoot
	CubicYard
	AcreFoot
)

// The units of areas.
const (
	OwnArea Area = iota // what x and y make
	SquareMetre
	SquareFoot
	Hectare
	Acre
)

var (
	volumeNames = []string{"", "m3", "ft3", "yd3", "acre-ft"}
	areaNames   = []string{"", "m2", "ft2", "ha", "acre"}
)

// String returns the word that ParseVolume reads.
func (v Volume) String() string { return volumeNames[v] }

// String returns the word that ParseArea reads.
func (a Area) String() string { return areaNames[a] }

// ParseVolume reads m3, ft3, yd3 or acre-ft.
func ParseVolume(text string) (Volume, error) {
	for i, n := range volumeNames {
		if n == text && i > 0 {
			return Volume(i), nil
		}
	}
	return 0, errors.New("m3, ft3, yd3 or acre-ft")
}

// ParseArea reads m2, ft2, ha or acre.
func ParseArea(text string) (Area, error) {
	for i, n := range areaNames {
		if n == text && i > 0 {
			return Area(i), nil
		}
	}
	return 0, errors.New("m2, ft2, ha or acre")
}

// A Factor multiplies by a ratio of whole numbers and rounds once. The zero value
// leaves numbers as they are.
type Factor struct{ ratio *big.Rat }

// Of returns the double nearest to v times the ratio. v must be finite.
func (f Factor) Of(v float64) float64 {
	if f.ratio == nil {
		return v
	}
	r := new(big.Rat).SetFloat64(v)
	x, _ := r.Mul(r, f.ratio).Float64()
	return x
}

// Float64 returns the double nearest to the ratio, 1 for the zero value.
func (f Factor) Float64() float64 { return f.Of(1) }

// metres returns a unit of length in metres.
func (u Unit) metres() *big.Rat {
	return new(big.Rat).SetFrac(new(big.Int).SetUint64(ratios[u][0]), new(big.Int).SetUint64(ratios[u][1]))
}

// footOf is the foot that feet, yards and acres are of: the one that coordinates are in,
// and the international foot with metres.
func footOf(xy Unit) Unit {
	if xy == FootUS {
		return FootUS
	}
	return FootInternational
}

func product(f ...*big.Rat) *big.Rat {
	p := big.NewRat(1, 1)
	for _, x := range f {
		p.Mul(p, x)
	}
	return p
}

// VolumeFactor returns the factor from volumes of coordinates in xy and heights in z to
// a unit of volumes. A yard is 3 feet, an acre 43560 square feet, each of the foot that
// xy is, of the international foot where xy is in metres. ok is false where a unit is
// unstated.
func VolumeFactor(xy, z Unit, to Volume) (f Factor, ok bool) {
	if to == OwnVolume {
		return f, true
	}
	if xy == Unstated || z == Unstated {
		return f, false
	}
	foot := footOf(xy).metres()
	one := product() // the unit in cubic metres
	switch to {
	case CubicFoot:
		one = product(foot, foot, foot)
	case CubicYard:
		one = product(foot, foot, foot, big.NewRat(27, 1))
	case AcreFoot:
		one = product(foot, foot, foot, big.NewRat(43560, 1))
	}
	ratio := product(xy.metres(), xy.metres(), z.metres())
	return Factor{ratio.Quo(ratio, one)}, true
}

// AreaFactor is VolumeFactor for areas.
func AreaFactor(xy Unit, to Area) (f Factor, ok bool) {
	if to == OwnArea {
		return f, true
	}
	if xy == Unstated {
		return f, false
	}
	foot := footOf(xy).metres()
	one := product()
	switch to {
	case SquareFoot:
		one = product(foot, foot)
	case Hectare:
		one = big.NewRat(10000, 1)
	case Acre:
		one = product(foot, foot, big.NewRat(43560, 1))
	}
	ratio := product(xy.metres(), xy.metres())
	return Factor{ratio.Quo(ratio, one)}, true
}
