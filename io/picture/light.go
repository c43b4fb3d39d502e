package picture

import (
	"math"
	"sync"
)

// Colours are mixed and shaded as light: a byte of sRGB stands for an amount of light that is not proportional to it, and
// half of two amounts is not the byte half-way.
//
// Light is counted in whole numbers from 0 to fullLight, so that mixing is exact and the same on every processor. The way
// from bytes to light is a table; the way back looks for the nearest entry.

const fullLight = 1 << 16

// lightOf is the light of each byte, by the transfer function of sRGB (IEC 61966-2-1): b/12.92 up to b = 0.04045, else
// ((b + 0.055)/1.055)^2.4.
var lightOf = func() (table [256]uint32) {
	for i := range table {
		b := float64(i) / 255
		light := b / 12.92
		if b > 0.04045 {
			base := (b + 0.055) / 1.055
			square := float64(base * base)
			light = float64(square * fifthRoot(square)) // x^2.4 = x² (x²)^(1/5)
		}
		table[i] = uint32(math.RoundToEven(float64(fullLight * light)))
	}
	return table
}()

// fifthRoot returns the fifth root of x, from 0 to 1, by Newton's method with pinned products: package math's Pow
// differs by processor in its last bits.
func fifthRoot(x float64) float64 {
	if x == 0 {
		return 0
	}
	y := 1.0
	for range 100 {
		y2 := float64(y * y)
		y = (float64(4*y) + x/float64(y2*y2)) / 5
	}
	return y
}

// bytesOf is the byte with the nearest light, for every light.
var bytesOf = sync.OnceValue(func() *[fullLight + 1]uint8 {
	var table [fullLight + 1]uint8
	b := 0
	for light := range table {
		for b < 255 && int(lightOf[b+1])-light <= light-int(lightOf[b]) {
			b++
		}
		table[light] = uint8(b)
	}
	return &table
})

// rgb is a colour in bytes of sRGB.
type rgb [3]uint8

// lights is a colour as light.
type lights [3]uint32

func (c rgb) lights() lights { return lights{lightOf[c[0]], lightOf[c[1]], lightOf[c[2]]} }

func (l lights) bytes() rgb {
	t := bytesOf()
	return rgb{t[l[0]], t[l[1]], t[l[2]]}
}

// mix returns the colour at part of whole from a to b.
func mix(a, b lights, part, whole uint32) lights {
	var m lights
	for i := range m {
		m[i] = uint32((uint64(a[i])*uint64(whole-part) + uint64(b[i])*uint64(part) + uint64(whole)/2) / uint64(whole))
	}
	return m
}

// brightness returns the relative luminance of light, from 0 to fullLight: 0.2126 R + 0.7152 G + 0.0722 B (IEC 61966-2-1).
func (l lights) brightness() uint32 {
	return uint32((2126*uint64(l[0]) + 7152*uint64(l[1]) + 722*uint64(l[2])) / 10000)
}
