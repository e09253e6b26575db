package glare

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// Field holds what depends on the pixels only, not on the scene: compute it
// once per projection and resolution and share it between all viewpoints and
// hours. It is read only after NewField and safe for concurrent use.
//
// All slices have length Width*Height, row by row from the top left corner.
type Field struct {
	Width, Height int

	Dir      []r3.Vec  // representative unit direction; zero outside
	Omega    []float64 // solid angle of the part inside the image, sr
	CosTheta []float64 // mean cosine to the line of sight; 0 behind the eye
	// PositionIndex is that of Dir. It is +Inf for pixels that cannot
	// contribute: outside, and at or behind the plane of the eye.
	PositionIndex []float64
	Inside        []bool // some part of the pixel is inside the image

	TotalOmega float64 // sum of Omega, sr
	Count      int     // pixels inside

	weight []float32 // Omega*CosTheta: illuminance per luminance
	spans  []span    // inside pixels of each row
}

// span is a row's first inside pixel and the one after the last; projections
// leave no gaps within a row.
type span struct{ from, to int }

// NewField computes the field of the view's pixels. Pose is ignored: only
// projection, field of view and size matter. The view must be valid.
func NewField(v view.View) *Field {
	n := v.Width * v.Height
	f := &Field{
		Width: v.Width, Height: v.Height,
		Dir: make([]r3.Vec, n), Omega: make([]float64, n), CosTheta: make([]float64, n),
		PositionIndex: make([]float64, n), Inside: make([]bool, n),
		weight: make([]float32, n), spans: make([]span, v.Height),
	}
	for y := range v.Height {
		s := span{}
		for x := range v.Width {
			i := y*v.Width + x
			f.PositionIndex[i] = math.Inf(1)
			omega := v.SolidAngle(x, y)
			dir, ok := v.LocalPixelRay(x, y)
			if !ok || omega <= 0 {
				continue
			}
			projected := v.ProjectedSolidAngle(x, y)
			f.Dir[i], f.Omega[i], f.Inside[i] = dir, omega, true
			f.CosTheta[i] = math.Min(projected/omega, 1)
			f.weight[i] = float32(projected)
			f.PositionIndex[i] = PositionIndex(dir)
			if s.to == 0 {
				s.from = x
			}
			s.to = x + 1
			f.TotalOmega += omega
			f.Count++
		}
		f.spans[y] = s
	}
	return f
}

// Without returns a field in which the hidden pixels (length Width*Height) are
// outside: unknown, or behind what the observer's mask covers. They send no
// light and are no part of the means. In images for it their luminance must
// be 0.
func (f *Field) Without(hidden []bool) *Field {
	g := *f
	g.Omega, g.CosTheta = slices.Clone(f.Omega), slices.Clone(f.CosTheta)
	g.PositionIndex, g.Inside = slices.Clone(f.PositionIndex), slices.Clone(f.Inside)
	g.weight = slices.Clone(f.weight)
	g.TotalOmega, g.Count = 0, 0
	for i := range g.Omega {
		if hidden[i] {
			g.Omega[i], g.CosTheta[i], g.weight[i] = 0, 0, 0
			g.PositionIndex[i], g.Inside[i] = math.Inf(1), false
		}
		if g.Inside[i] {
			g.TotalOmega += g.Omega[i]
			g.Count++
		}
	}
	return &g
}

// Projected is the sum over the pixels of solid angle times cosine to the line
// of sight, sr: pi for a whole half space.
func (f *Field) Projected() float64 {
	sum := 0.0
	for i, omega := range f.Omega {
		sum += omega * f.CosTheta[i]
	}
	return sum
}
