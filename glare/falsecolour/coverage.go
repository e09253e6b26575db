package falsecolour

import (
	"image"
	"image/color"
	"image/draw"
	"math"
)

// layer collects how much of each pixel some lines and shapes cover; where
// they overlap the larger share counts, so that joints do not darken.
type layer struct{ *image.Alpha }

func newLayer(r image.Rectangle) layer { return layer{image.NewAlpha(r)} }

// paint lays the colour over dst where the layer covers it.
func (l layer) paint(dst *image.RGBA, c color.RGBA) {
	draw.DrawMask(dst, l.Rect, image.NewUniform(c), image.Point{}, l.Alpha, l.Rect.Min, draw.Over)
}

// shape covers the pixels of a box by the signed distance of their centres
// from an edge, negative inside.
func (l layer) shape(x0, y0, x1, y1 float64, distance func(x, y float64) float64) {
	box := image.Rect(int(math.Floor(x0))-1, int(math.Floor(y0))-1, int(math.Ceil(x1))+1, int(math.Ceil(y1))+1).Intersect(l.Rect)
	for y := box.Min.Y; y < box.Max.Y; y++ {
		row := l.Pix[l.PixOffset(box.Min.X, y):]
		for i := range box.Dx() {
			c := min(max(0.5-distance(float64(box.Min.X+i)+0.5, float64(y)+0.5), 0), 1)
			if v := uint8(c*255 + 0.5); v > row[i] {
				row[i] = v
			}
		}
	}
}

// line covers a line with round ends.
func (l layer) line(a, b point, width float64) {
	r := width / 2
	dx, dy := b.x-a.x, b.y-a.y
	length2 := dx*dx + dy*dy
	l.shape(min(a.x, b.x)-r, min(a.y, b.y)-r, max(a.x, b.x)+r, max(a.y, b.y)+r, func(x, y float64) float64 {
		t := 0.0
		if length2 > 0 {
			t = min(max(((x-a.x)*dx+(y-a.y)*dy)/length2, 0), 1)
		}
		return math.Hypot(x-a.x-t*dx, y-a.y-t*dy) - r
	})
}

// ring covers a circle line.
func (l layer) ring(c point, r, width float64) {
	o := r + width/2
	l.shape(c.x-o, c.y-o, c.x+o, c.y+o, func(x, y float64) float64 {
		return math.Abs(math.Hypot(x-c.x, y-c.y)-r) - width/2
	})
}

// grown returns the layer with every pixel as much covered as the most
// covered one within r pixels: the casing of a text.
func (l layer) grown(r float64) layer {
	out := newLayer(l.Rect.Inset(-int(math.Ceil(r))))
	n := int(math.Ceil(r))
	for y := l.Rect.Min.Y; y < l.Rect.Max.Y; y++ {
		for x := l.Rect.Min.X; x < l.Rect.Max.X; x++ {
			a := l.AlphaAt(x, y).A
			if a == 0 {
				continue
			}
			for dy := -n; dy <= n; dy++ {
				for dx := -n; dx <= n; dx++ {
					share := min(max(r+0.5-math.Hypot(float64(dx), float64(dy)), 0), 1)
					v := uint8(float64(a)*share + 0.5)
					if i := out.PixOffset(x+dx, y+dy); v > out.Pix[i] {
						out.Pix[i] = v
					}
				}
			}
		}
	}
	return out
}

// point is a place on the sheet or in the picture, in continuous pixels.
type point struct{ x, y float64 }

// fill paints a rectangle.
func fill(dst *image.RGBA, r image.Rectangle, c color.RGBA) {
	draw.Draw(dst, r, image.NewUniform(c), image.Point{}, draw.Src)
}
