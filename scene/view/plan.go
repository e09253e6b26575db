package view

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Plan is a parallel projection straight down: what is seen from above with
// everything above a height cut away. The image is a rectangle of the model, its
// top edge towards +y, its pixels squares.
type Plan struct {
	// MinX, MaxX and MinY, MaxY bound the rectangle, m.
	MinX, MaxX, MinY, MaxY float64
	CutM                   float64 // height from which one looks down, m
	Width, Height          int     // pixels
}

// NewPlan makes a plan whose longer side has pixels pixels. The rectangle is
// widened, by less than a pixel, to whole pixels about its middle.
func NewPlan(minX, maxX, minY, maxY, cutM float64, pixels int) (Plan, error) {
	w, h := maxX-minX, maxY-minY
	for _, x := range [...]float64{minX, maxX, minY, maxY, cutM, w, h} {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return Plan{}, fmt.Errorf("%w: plan: got %g to %g by %g to %g m cut at %g m, want finite numbers", ErrInvalid, minX, maxX, minY, maxY, cutM)
		}
	}
	if !(w > 0 && h > 0) {
		return Plan{}, fmt.Errorf("%w: plan: got %g x %g m, want more than 0 each way", ErrInvalid, w, h)
	}
	if pixels < 1 || pixels > MaxPixels {
		return Plan{}, fmt.Errorf("%w: size: got %d pixels, want 1 to %d", ErrInvalid, pixels, MaxPixels)
	}
	edge := math.Max(w, h) / float64(pixels)
	p := Plan{CutM: cutM, Width: wholePixels(w, edge), Height: wholePixels(h, edge)}
	dx, dy := float64(p.Width)*edge/2, float64(p.Height)*edge/2
	x, y := (minX+maxX)/2, (minY+maxY)/2
	p.MinX, p.MaxX, p.MinY, p.MaxY = x-dx, x+dx, y-dy, y+dy
	return p, nil
}

// wholePixels covers a length; a millionth of a pixel is rounding.
func wholePixels(length, edge float64) int { return max(1, int(math.Ceil(length/edge-1e-6))) }

// pixelM is the edge of a pixel, m.
func (p Plan) pixelM() float64 { return (p.MaxX - p.MinX) / float64(p.Width) }

// Size is the image's size in pixels.
func (p Plan) Size() (width, height int) { return p.Width, p.Height }

// Through returns where the line of sight of continuous pixel coordinates
// begins and its unit direction, straight down; ok is false outside of the image.
func (p Plan) Through(px, py float64) (org, dir r3.Vec, ok bool) {
	if !(px >= 0 && py >= 0 && px <= float64(p.Width) && py <= float64(p.Height)) {
		return r3.Vec{}, r3.Vec{}, false
	}
	e := p.pixelM()
	return r3.Vec{X: p.MinX + px*e, Y: p.MaxY - py*e, Z: p.CutM}, r3.Vec{Z: -1}, true
}

// Pixel is Through the middle of pixel (ix, iy).
func (p Plan) Pixel(ix, iy int) (org, dir r3.Vec, ok bool) {
	return p.Through(float64(ix)+0.5, float64(iy)+0.5)
}
