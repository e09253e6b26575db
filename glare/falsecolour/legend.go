package falsecolour

import (
	"image"
	"image/color"
	"math"
)

// premultiplied is a colour that covers a/255.
func premultiplied(r, g, b, a uint8) color.RGBA {
	m := func(v uint8) uint8 { return uint8(uint16(v) * uint16(a) / 255) }
	return color.RGBA{m(r), m(g), m(b), a}
}

// legend is the bar of colours with its quantity, unit and round numbers.
type legend struct {
	scale        Scale
	colours      Map
	contours     []float64
	below, above bool // values lie outside of the scale
	faces        *typefaces
	size         float64 // scale of text and lines
}

// beyond notes whether the figure's values leave the scale.
func (l *legend) beyond(f *Figure) {
	for i, v := range f.Values {
		if f.drawn(i) {
			l.below = l.below || float64(v) < f.Scale.Min
			l.above = l.above || float64(v) > f.Scale.Max
		}
	}
}

func (l *legend) px(v float64) int { return int(math.Round(v * l.size)) }

// height of the legend, pixels.
func (l *legend) height() int {
	return l.heading() + l.px(14) + l.px(6) + l.px(4) + l.faces.small.height
}

// heading is the height of the line above the bar; 0 without a text.
func (l *legend) heading() int {
	if l.title() == "" {
		return 0
	}
	return l.faces.small.height + l.px(2)
}

func (l *legend) title() string {
	title, unit := l.scale.Quantity, prettyUnit(l.scale.Unit)
	if title != "" && unit != "" {
		title += ", "
	}
	return title + unit
}

// draw draws the legend from (x, y) over the given width and returns the
// boxes of its labels.
func (l *legend) draw(dst *image.RGBA, x, y, width int) []image.Rectangle {
	s := l.faces.small
	if l.heading() > 0 {
		s.draw(dst, float64(x), y+s.ascent+l.px(1), l.title(), rgb(ink))
		y += l.heading()
	}
	bar := image.Rect(x, y, x+width, y+l.px(14))
	for px := bar.Min.X; px < bar.Max.X; px++ {
		c := l.colours.At((float64(px-x) + 0.5) / float64(width))
		fill(dst, image.Rect(px, bar.Min.Y, px+1, bar.Max.Y), c)
	}
	column := func(fraction float64) int {
		return x + min(max(int(math.Round(fraction*float64(width)))-l.px(1)/2, 0), width-l.px(1))
	}
	for _, v := range l.contours {
		if f := l.scale.Fraction(v); f > 0 && f < 1 {
			at := column(f)
			fill(dst, image.Rect(at-l.px(1), bar.Min.Y, at+2*l.px(1), bar.Max.Y), rgb(ink))
			fill(dst, image.Rect(at, bar.Min.Y, at+l.px(1), bar.Max.Y), rgb(paper))
		}
	}
	var boxes []image.Rectangle
	r := ruler{length: float64(width), overhang: l.size * 12, gap: l.size * 9, width: s.width}
	for _, t := range l.scale.ticks(r, l.below, l.above) {
		at := column(t.fraction)
		if t.label == "" {
			fill(dst, image.Rect(at, bar.Max.Y, at+l.px(1), bar.Max.Y+l.px(3)), rgb(quiet))
			continue
		}
		fill(dst, image.Rect(at, bar.Max.Y, at+l.px(1), bar.Max.Y+l.px(6)), rgb(ink))
		left, right := r.span(t.fraction, t.label)
		baseline := bar.Max.Y + l.px(10) + s.ascent
		s.draw(dst, float64(x)+left, baseline, t.label, rgb(ink))
		boxes = append(boxes, image.Rect(x+int(math.Floor(left)), baseline-s.ascent, x+int(math.Ceil(right)), baseline))
	}
	return boxes
}
