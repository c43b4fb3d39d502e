package picture

// tint is a row of colours for low to high values: anchors at equal distances, with light mixed between them.
type tint []rgb

// heightTint goes from slate blue over green and sand to ivory. Each anchor is lighter than the one before, so that higher is
// lighter everywhere, also in grey and to eyes that do not tell the hues apart. No end is so dark or light that
// shading could not be seen on it.
var heightTint = tint{{62, 92, 128}, {74, 128, 134}, {108, 156, 112}, {176, 177, 104}, {222, 198, 140}, {248, 236, 214}}

// roundTint is for directions, which begin again where they end: north light, south dark, east warm and west cool.
var roundTint = tint{{236, 230, 214}, {204, 146, 104}, {98, 74, 92}, {92, 142, 164}, {236, 230, 214}}

// greyTint is for shade, from dark to light. Colour would say something about height.
var greyTint = tint{{28, 30, 32}, {250, 250, 248}}

// at returns the colour at part of whole. whole is at least part, and above 0.
func (t tint) at(part, whole uint32) (r, g, b uint8) {
	c := t.light(part, whole).bytes()
	return c[0], c[1], c[2]
}

func (t tint) light(part, whole uint32) lights {
	along := uint64(part) * uint64(len(t)-1)
	k := along / uint64(whole)
	if k >= uint64(len(t)-1) {
		return t[len(t)-1].lights()
	}
	return mix(t[k].lights(), t[k+1].lights(), uint32(along-k*uint64(whole)), whole)
}
