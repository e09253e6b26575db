package falsecolour

import (
	"errors"
	"image/color"
	"testing"
)

// TestCanvas: places and sizes are the same share of the sheet at any width.
func TestCanvas(t *testing.T) {
	for _, width := range []int{640, 1280} {
		c, err := NewCanvas(width)
		if err != nil {
			t.Fatal(err)
		}
		c.Open(200)
		k := float64(width) / 640
		if c.Image.Rect.Dx() != width || c.Image.Rect.Dy() != int(200*k) || c.Scale() != k {
			t.Errorf("got a sheet of %v at %g", c.Image.Rect, c.Scale())
		}
		c.Lines(4, Ink, []Place{{100, 50}, {200, 50}})
		c.Dots(5, LowSun, Place{300, 50})
		c.Rings(10, 4, Quiet, Place{400, 50})
		c.Box(Place{500, 40}, Place{520, 60}, hairline)
		for _, e := range []struct {
			what string
			x, y float64
			want uint32
		}{
			{"line", 150, 50, Ink}, {"beside the line", 150, 54, Paper}, {"beyond its end", 205, 50, Paper},
			{"dot", 303, 50, LowSun}, {"beside the dot", 307, 50, Paper},
			{"ring", 410, 50, Quiet}, {"within the ring", 400, 50, Paper}, {"without it", 414, 50, Paper},
			{"box", 510, 50, hairline}, {"beside the box", 522, 50, Paper},
		} {
			if got := c.Image.RGBAAt(int(e.x*k), int(e.y*k)); got != rgb(e.want) {
				t.Errorf("%d wide, %s: got %v, want %v", width, e.what, got, rgb(e.want))
			}
		}
		// A text of one length, between its baseline and the height of capitals.
		w := c.TextWidth(TextFace, "Noon")
		if w < 25 || w > 60 {
			t.Errorf("%d wide: a word of four letters is %g wide", width, w)
		}
		c.Text(TextFace, Place{100, 150}, "Noon", Ink, false)
		inked := func(x0, y0, x1, y1 float64) (n int) {
			for y := int(y0 * k); y < int(y1*k); y++ {
				for x := int(x0 * k); x < int(x1*k); x++ {
					if c.Image.RGBAAt(x, y) != (color.RGBA{0xFB, 0xFA, 0xF6, 255}) {
						n++
					}
				}
			}
			return n
		}
		high := c.Capital(TextFace)
		if inked(100, 150-high-1, 100+w+1, 151) == 0 || inked(60, 130, 99, 170) > 0 || inked(100+w+2, 130, 200, 170) > 0 || inked(100, 120, 200, 150-high-2) > 0 {
			t.Errorf("%d wide: the text stands elsewhere", width)
		}
	}
	for _, width := range []int{-1, 0, 199, 1 << 14} {
		if _, err := NewCanvas(width); !errors.Is(err, ErrInvalid) {
			t.Errorf("%d wide: got %v, want an error", width, err)
		}
	}
}
