package photograph

import (
	"errors"
	"fmt"
	"image"
)

// ErrMask is wrapped by the errors about masks.
var ErrMask = errors.New("mask")

// Mask names pixels that are hidden: the observer's brow and nose, a tripod,
// the photographer.
type Mask struct {
	Name   string
	Hidden []bool // row by row from the top
}

// MaskOf hides what is dark (less than half of white) or transparent in a
// picture of the photograph's own size, w x h pixels. Half is our own choice.
func MaskOf(name string, im image.Image, w, h int) (Mask, error) {
	b := im.Bounds()
	if b.Dx() != w || b.Dy() != h {
		return Mask{}, fmt.Errorf("%s: %w: got %d x %d pixels, want those of the image, %d x %d", name, ErrMask, b.Dx(), b.Dy(), w, h)
	}
	m := Mask{Name: name, Hidden: make([]bool, w*h)}
	for i := range m.Hidden {
		// Premultiplied: what is transparent is dark.
		r, g, bl, _ := im.At(b.Min.X+i%w, b.Min.Y+i/w).RGBA()
		m.Hidden[i] = r+g+bl < 3*0x8000
	}
	return m, nil
}

// MaskPolygon hides the pixels whose centres lie in a polygon, of at least
// three corners in pixels; where it crosses itself, by the even-odd rule.
func MaskPolygon(name string, corners [][2]float64, w, h int) (Mask, error) {
	if len(corners) < 3 {
		return Mask{}, fmt.Errorf("%w %s: got %d corners, want at least 3", ErrMask, name, len(corners))
	}
	m := Mask{Name: name, Hidden: make([]bool, w*h)}
	hidden := false
	for i := range m.Hidden {
		x, y := float64(i%w)+0.5, float64(i/w)+0.5
		in := false
		for k, a := range corners {
			b := corners[(k+1)%len(corners)]
			if (a[1] > y) != (b[1] > y) && x < a[0]+(y-a[1])/(b[1]-a[1])*(b[0]-a[0]) {
				in = !in
			}
		}
		m.Hidden[i] = in
		hidden = hidden || in
	}
	if !hidden {
		return Mask{}, fmt.Errorf("%w %s: covers no pixel of the image, %d x %d; corners are in pixels from the top left", ErrMask, name, w, h)
	}
	return m, nil
}
