package falsecolour

import (
	"fmt"
	"image"
	"math"
)

// The sheet's colours as 0xRRGGBB, for other drawings in its manner.
const (
	Paper    = paper
	Ink      = ink
	Quiet    = quiet
	Hairline = hairline
	LowSun   = 0xC8761B
)

// Canvas draws lines, dots and text as the figures have them, on a sheet of
// its own. Places and sizes are in units of a sheet 640 wide, whatever its width in
// pixels, and count from the top left corner. Not safe for concurrent use.
type Canvas struct {
	Image *image.RGBA

	width int
	scale float64
	faces typefaces
}

// Face names a style of type.
type Face int

// The styles: one bold title, running text, and small text regular and bold.
const (
	TitleFace Face = iota
	TextFace
	SmallFace
	BoldFace
)

// Place is a place on a canvas.
type Place struct{ X, Y float64 }

// NewCanvas measures type for a sheet of some width in pixels, 200 to 8192;
// Open makes the sheet.
func NewCanvas(widthPx int) (*Canvas, error) {
	const least, most = 200, 1 << 13
	if widthPx < least || widthPx > most {
		return nil, fmt.Errorf("%w: width: got %d pixels, want %d to %d", ErrInvalid, widthPx, least, most)
	}
	c := &Canvas{width: widthPx, scale: float64(widthPx) / 640}
	var err error
	c.faces, err = newTypefaces(c.scale)
	return c, err
}

// Open makes the sheet, of paper.
func (c *Canvas) Open(height float64) {
	c.Image = image.NewRGBA(image.Rect(0, 0, c.width, int(math.Ceil(height*c.scale))))
	fill(c.Image, c.Image.Rect, rgb(paper))
}

// Scale is the number of pixels of a unit.
func (c *Canvas) Scale() float64 { return c.scale }

func (c *Canvas) style(f Face) *style {
	return [...]*style{&c.faces.title, &c.faces.text, &c.faces.small, &c.faces.bold}[f]
}

// TextWidth is the advance of a text.
func (c *Canvas) TextWidth(f Face, text string) float64 { return c.style(f).width(text) / c.scale }

// LineHeight is the distance of lines.
func (c *Canvas) LineHeight(f Face) float64 { return float64(c.style(f).height) / c.scale }

// Capital is the height of capitals and figures.
func (c *Canvas) Capital(f Face) float64 { return float64(c.style(f).ascent) / c.scale }

// Wrap breaks a text into lines no wider than limit.
func (c *Canvas) Wrap(f Face, text string, limit float64) []string {
	return c.style(f).wrap(text, limit*c.scale)
}

// Text writes a line of text from the left end of its baseline on; a cased one
// can be read on any ground.
func (c *Canvas) Text(f Face, at Place, text string, colour uint32, cased bool) {
	s, baseline := c.style(f), int(math.Round(at.Y*c.scale))
	if cased {
		s.cased(c.Image, at.X*c.scale, baseline, text, rgb(colour), rgb(paper), 1.6*c.scale)
		return
	}
	s.draw(c.Image, at.X*c.scale, baseline, text, rgb(colour))
}

// Lines draws lines through places. They cover each pixel once: crossings are
// no darker.
func (c *Canvas) Lines(width float64, colour uint32, lines ...[]Place) {
	l := newLayer(c.Image.Rect)
	for _, line := range lines {
		for i := 1; i < len(line); i++ {
			l.line(c.point(line[i-1]), c.point(line[i]), width*c.scale)
		}
	}
	l.paint(c.Image, rgb(colour))
}

// Rings draws circle lines of one radius.
func (c *Canvas) Rings(radius, width float64, colour uint32, centres ...Place) {
	l := newLayer(c.Image.Rect)
	for _, p := range centres {
		l.ring(c.point(p), radius*c.scale, width*c.scale)
	}
	l.paint(c.Image, rgb(colour))
}

// Dots draws discs of one radius.
func (c *Canvas) Dots(radius float64, colour uint32, centres ...Place) {
	l := newLayer(c.Image.Rect)
	for _, p := range centres {
		l.line(c.point(p), c.point(p), 2*radius*c.scale)
	}
	l.paint(c.Image, rgb(colour))
}

// Box fills a rectangle.
func (c *Canvas) Box(from, to Place, colour uint32) {
	px := func(x float64) int { return int(math.Round(x * c.scale)) }
	fill(c.Image, image.Rect(px(from.X), px(from.Y), px(to.X), px(to.Y)).Intersect(c.Image.Rect), rgb(colour))
}

func (c *Canvas) point(p Place) point { return point{p.X * c.scale, p.Y * c.scale} }
