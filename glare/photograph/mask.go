package photograph

import (
	"errors"
	"fmt"
	"image"

	"squint/scene/view"
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
		m.Hidden[i] = view.InPolygon(corners, x, y)
		hidden = hidden || m.Hidden[i]
	}
	if !hidden {
		return Mask{}, fmt.Errorf("%w %s: covers no pixel of the image, %d x %d; corners are in pixels from the top left", ErrMask, name, w, h)
	}
	return m, nil
}
