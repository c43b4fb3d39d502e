package picture

import (
	"image"
	"image/color"
	"image/draw"
	"strings"
	"sync"

	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/sfnt"
)

// goRegular is the font of all texts in pictures of pixels.
var goRegular = sync.OnceValues(func() (*sfnt.Font, error) { return sfnt.Parse(goregular.TTF) })

// pen writes and rules on an image.
type pen struct {
	em   int // size of letters in pixels
	font *sfnt.Font
	buf  sfnt.Buffer
	ink  color.RGBA
}

func newPen(em int) (pen, error) {
	f, err := goRegular()
	return pen{em: em, font: f, ink: color.RGBA{43, 47, 51, 255}}, err
}

// width returns that of a text in pixels, rounded up.
func (p *pen) width(text string) int {
	sum := 0
	for _, r := range text {
		a, _ := p.advance(r)
		sum += a
	}
	return (sum + 63) / 64
}

// Where a text stands about its x.
type side uint8

const (
	fromX  side = iota // begins there
	aboutX             // has its middle there
	upToX              // ends there
)

// words writes text with its baseline at y.
func (p *pen) words(img *image.RGBA, x, y int, where side, text string) {
	switch where {
	case aboutX:
		x -= p.width(text) / 2
	case upToX:
		x -= p.width(text)
	}
	at := 64 * x
	for _, r := range text {
		a, glyph := p.advance(r)
		p.letter(img, at, y, glyph)
		at += a
	}
}

// box fills a rectangle.
func (p *pen) box(img draw.Image, r image.Rectangle, c color.Color) {
	draw.Draw(img, r, image.NewUniform(c), image.Point{}, draw.Src)
}

// border rules the rim of a rectangle, outside it.
func (p *pen) border(img draw.Image, r image.Rectangle) {
	thick := max(1, p.em/12)
	outer := r.Inset(-thick)
	p.box(img, image.Rect(outer.Min.X, outer.Min.Y, outer.Max.X, r.Min.Y), p.ink)
	p.box(img, image.Rect(outer.Min.X, r.Max.Y, outer.Max.X, outer.Max.Y), p.ink)
	p.box(img, image.Rect(outer.Min.X, r.Min.Y, r.Min.X, r.Max.Y), p.ink)
	p.box(img, image.Rect(r.Max.X, r.Min.Y, outer.Max.X, r.Max.Y), p.ink)
}

// wrap breaks text into lines of at most width pixels, between words, or within a word that is wider by itself.
func (p *pen) wrap(text string, width int) []string {
	var lines []string
	line := ""
	add := func(piece, gap string) bool {
		if line == "" && p.width(piece) <= width {
			line = piece
			return true
		}
		if line != "" && p.width(line+gap+piece) <= width {
			line += gap + piece
			return true
		}
		return false
	}
	for _, word := range strings.Fields(text) {
		if add(word, " ") {
			continue
		}
		if line != "" {
			lines, line = append(lines, line), ""
		}
		for _, r := range word {
			if !add(string(r), "") {
				lines, line = append(lines, line), string(r)
			}
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}
