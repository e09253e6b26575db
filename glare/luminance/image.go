package luminance

import (
	"errors"
	"fmt"
	"math"
)

// MaxSide is the largest width or height in pixels that is read or written.
// Own choice, that of scene/view.
const MaxSide = 32768

// ErrInvalid is wrapped by the errors of Validate and Check and, for an
// unusable image, by those of the writers.
var ErrInvalid = errors.New("invalid luminance image")

// Image is a luminance image.
type Image struct {
	Width, Height int       // pixels, 1 to MaxSide
	Lum           []float32 // cd/m2, len Width*Height, top row first

	// Valid tells which pixels were measured or computed; nil means all of
	// them. Where it is false, Lum is written as 0. Pixels outside of a
	// fisheye's circle follow from the projection and need no mask.
	Valid []bool

	Attr Attributes
}

// Validate reports the first thing about sizes and attributes that keeps the
// image from being written, or nil. Luminances are Check's.
func (im *Image) Validate() error {
	if im.Width < 1 || im.Width > MaxSide || im.Height < 1 || im.Height > MaxSide {
		return fmt.Errorf("%w: size: got %d x %d pixels, want 1 to %d each way", ErrInvalid, im.Width, im.Height, MaxSide)
	}
	if n := im.Width * im.Height; len(im.Lum) != n {
		return fmt.Errorf("%w: luminances: got %d, want %d x %d = %d", ErrInvalid, len(im.Lum), im.Width, im.Height, n)
	} else if im.Valid != nil && len(im.Valid) != n {
		return fmt.Errorf("%w: valid mask: got %d, want none or %d x %d = %d", ErrInvalid, len(im.Valid), im.Width, im.Height, n)
	}
	return im.Attr.validate()
}

// Check reports how many of the valid pixels hold no luminance at all (NaN,
// infinite, negative) and where the first of them is, or nil. Measured images
// have some; who evaluates them must decide what to do.
func (im *Image) Check() error {
	bad, first := 0, 0
	for i, l := range im.Lum {
		if im.Valid != nil && !im.Valid[i] {
			continue
		}
		if !(l >= 0) || l > math.MaxFloat32 {
			if bad == 0 {
				first = i
			}
			bad++
		}
	}
	if bad == 0 {
		return nil
	}
	return fmt.Errorf("%w: luminance: got %g at column %d, row %d (and %d more pixels like it), want finite and not negative",
		ErrInvalid, im.Lum[first], first%im.Width, first/im.Width, bad-1)
}

// At is the luminance of a pixel, cd/m2; ok is false outside of the image and
// where the mask says that nothing is known.
func (im *Image) At(x, y int) (lum float32, ok bool) {
	if x < 0 || y < 0 || x >= im.Width || y >= im.Height {
		return 0, false
	}
	i := y*im.Width + x
	if im.Valid != nil && !im.Valid[i] {
		return 0, false
	}
	return im.Lum[i], true
}
