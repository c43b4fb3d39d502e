package picture

import (
	"image"
	"slices"

	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// Letters are filled by whole numbers alone: the rasteriser that package font comes with computes in float32, and its pixels differ
// by processor (seen between GOAMD64=v1 and v3).
//
// Outlines come in 64ths of a pixel, y down. Each row of pixels is cut by scanRows lines; where a line is inside the
// outline, by its winding number, its pixels get their share of 64ths.

const (
	scanRows   = 4
	curveSteps = 8 // pieces of a curve; letters are small
	covered    = 64 * scanRows
)

// cut is where an outline crosses a scan line, and whether it goes down (1) or up (-1) there.
type cut struct{ x, way int }

// letter adds a glyph with its origin at x (64ths) and baseline y (pixels) to img, in the pen's ink.
func (p *pen) letter(img *image.RGBA, x, y int, glyph sfnt.GlyphIndex) {
	segments, err := p.font.LoadGlyph(&p.buf, glyph, fixed.I(p.em), nil)
	if err != nil {
		return // a font that was parsed has its glyphs; one without an outline is a gap
	}
	lines := flatten(segments, x, 64*y)
	if len(lines) == 0 {
		return
	}
	low, high := lines[0].Min, lines[0].Min
	for _, l := range lines {
		for _, e := range []image.Point{l.Min, l.Max} {
			low = image.Pt(min(low.X, e.X), min(low.Y, e.Y))
			high = image.Pt(max(high.X, e.X), max(high.Y, e.Y))
		}
	}
	left, width := low.X>>6, high.X>>6-low.X>>6+2
	share := make([]int, width)
	var cuts []cut
	for row := low.Y >> 6; row <= high.Y>>6; row++ {
		clear(share)
		for k := range scanRows {
			// In the middle of a slice, an odd half of a 64th away from every end: counted in 128ths.
			at := 128*row + (2*k+1)*128/(2*scanRows) + 1
			cuts = crossings(cuts[:0], lines, at)
			winding := 0
			for i := 0; i+1 < len(cuts); i++ {
				if winding += cuts[i].way; winding != 0 {
					span(share, cuts[i].x-64*left, cuts[i+1].x-64*left)
				}
			}
		}
		for i, s := range share {
			if s > 0 {
				p.blend(img, left+i, row, min(s, covered))
			}
		}
	}
}

// flatten returns the straight pieces of an outline, moved by x and y, as pairs of ends.
func flatten(segments sfnt.Segments, x, y int) []image.Rectangle {
	var lines []image.Rectangle
	point := func(f fixed.Point26_6) image.Point { return image.Pt(int(f.X)+x, int(f.Y)+y) }
	var last, first image.Point
	to := func(p image.Point) {
		lines = append(lines, image.Rectangle{Min: last, Max: p})
		last = p
	}
	const n = curveSteps
	for _, s := range segments {
		a, b, c := point(s.Args[0]), point(s.Args[1]), point(s.Args[2])
		from := last
		switch s.Op {
		case sfnt.SegmentOpMoveTo:
			if last != first {
				to(first)
			}
			first, last = a, a
		case sfnt.SegmentOpLineTo:
			to(a)
		case sfnt.SegmentOpQuadTo:
			for k := 1; k <= n; k++ {
				j := n - k
				to(from.Mul(j * j).Add(a.Mul(2 * j * k)).Add(b.Mul(k * k)).Div(n * n))
			}
		case sfnt.SegmentOpCubeTo:
			for k := 1; k <= n; k++ {
				j := n - k
				to(from.Mul(j * j * j).Add(a.Mul(3 * j * j * k)).Add(b.Mul(3 * j * k * k)).Add(c.Mul(k * k * k)).Div(n * n * n))
			}
		}
	}
	if last != first {
		to(first)
	}
	return lines
}

// crossings appends where lines meet the scan line at y, in 128ths, from left to right.
func crossings(cuts []cut, lines []image.Rectangle, y int) []cut {
	for _, l := range lines {
		a, b, way := l.Min, l.Max, 1
		if a.Y > b.Y {
			a, b, way = b, a, -1
		}
		if 2*a.Y < y && y < 2*b.Y { // y is odd: never an end
			cuts = append(cuts, cut{a.X + (y-2*a.Y)*(b.X-a.X)/(2*(b.Y-a.Y)), way})
		}
	}
	slices.SortFunc(cuts, func(a, b cut) int { return a.x - b.x })
	return cuts
}

// span adds the 64ths from a to b to the pixels they lie in.
func span(share []int, a, b int) {
	for a < b {
		end := min(b, (a>>6+1)<<6)
		share[a>>6] += end - a
		a = end
	}
}

// blend lays ink over a pixel, in share parts of covered.
func (p *pen) blend(img *image.RGBA, x, y, share int) {
	if !image.Pt(x, y).In(img.Rect) {
		return
	}
	pix := img.Pix[img.PixOffset(x, y):]
	for i, ink := range []uint8{p.ink.R, p.ink.G, p.ink.B} {
		pix[i] = uint8((int(pix[i])*(covered-share) + int(ink)*share + covered/2) / covered)
	}
}

// advance returns how far the pen moves for a letter, in 64ths of a pixel, and its glyph.
func (p *pen) advance(r rune) (int, sfnt.GlyphIndex) {
	glyph, err := p.font.GlyphIndex(&p.buf, r)
	if err != nil {
		glyph = 0 // the mark of a letter that the font does not have
	}
	a, err := p.font.GlyphAdvance(&p.buf, glyph, fixed.I(p.em), font.HintingNone)
	if err != nil {
		return 0, glyph
	}
	return int(a), glyph
}
