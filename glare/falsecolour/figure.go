package falsecolour

import (
	"errors"
	"fmt"
	"image"
	"math"
)

// ErrInvalid is wrapped by every error about what a caller asks for.
var ErrInvalid = errors.New("invalid figure")

// Figure is what Render draws.
type Figure struct {
	Width, Height int       // pixels of the data
	Values        []float32 // in Scale.Unit, len Width*Height, top row first; NaN stays paper
	Inside        []bool    // pixels to draw; nil: all
	Round         bool      // cut to the circle inscribed in the image: a fisheye

	Scale Scale
	Map   Map

	Title   string
	Caption []string // paragraphs below the legend: viewpoint, moment, sky, results with their errors

	Marks    []Mark
	Points   []Point
	Contours []float64 // values of labelled lines, in Scale.Unit

	// MinWidthPx is the least width of the picture; 0 means 600. The data
	// are enlarged by the smallest whole number that reaches it.
	MinWidthPx int
	// Smooth interpolates between pixels, on the scale; else each pixel of
	// the data is a square.
	Smooth bool
}

// Mark outlines a glare source and writes its rank beside it. It is a set of
// pixels, or a circle where there are none: the sun.
type Mark struct {
	Pixels   []int32 // indices into Values
	X, Y     float64 // centre of the circle, in pixels of the data
	RadiusPx float64 // in pixels of the data; drawn with at least 4 on the sheet
	Rank     int     // 0: no number
	Label    string  // instead of the rank
}

// Point writes the number of a place beside a small cross.
type Point struct {
	X, Y  float64 // in pixels of the data
	Label string  // instead of the number
}

// Limits. Own choice.
const (
	defaultWidthPx = 600
	maxPixels      = 1 << 26 // of a sheet: 256 MiB
)

func (f *Figure) validate() error {
	if f.Width < 1 || f.Height < 1 || f.Width > 1<<15 || f.Height > 1<<15 {
		return fmt.Errorf("%w: size: got %d x %d pixels, want 1 to %d each way", ErrInvalid, f.Width, f.Height, 1<<15)
	}
	n := f.Width * f.Height
	if len(f.Values) != n {
		return fmt.Errorf("%w: values: got %d, want %d x %d = %d", ErrInvalid, len(f.Values), f.Width, f.Height, n)
	}
	if f.Inside != nil && len(f.Inside) != n {
		return fmt.Errorf("%w: inside: got %d, want none or %d x %d = %d", ErrInvalid, len(f.Inside), f.Width, f.Height, n)
	}
	if f.Map < 0 || int(f.Map) >= len(maps) {
		return fmt.Errorf("%w: colour map: got %d, want 0 to %d", ErrInvalid, f.Map, len(maps)-1)
	}
	if f.MinWidthPx < 0 || f.MinWidthPx > 1<<13 {
		return fmt.Errorf("%w: width: got %d, want at most %d", ErrInvalid, f.MinWidthPx, 1<<13)
	}
	for i, m := range f.Marks {
		for _, p := range m.Pixels {
			if p < 0 || int(p) >= n {
				return fmt.Errorf("%w: mark %d: got pixel %d, want 0 to %d", ErrInvalid, i+1, p, n-1)
			}
		}
		if len(m.Pixels) == 0 && !(math.Abs(m.X) < 1e6 && math.Abs(m.Y) < 1e6 && m.RadiusPx >= 0 && m.RadiusPx < 1e6) {
			return fmt.Errorf("%w: mark %d: got a circle at (%g, %g) with radius %g, want it in the image", ErrInvalid, i+1, m.X, m.Y, m.RadiusPx)
		}
	}
	for i, p := range f.Points {
		if !(p.X >= 0 && p.X <= float64(f.Width) && p.Y >= 0 && p.Y <= float64(f.Height)) {
			return fmt.Errorf("%w: point %d: got (%g, %g), want it in the image", ErrInvalid, i+1, p.X, p.Y)
		}
	}
	for _, c := range f.Contours {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return fmt.Errorf("%w: contour: got %g, want a finite value", ErrInvalid, c)
		}
	}
	return f.Scale.validate()
}

// enlargement is the whole number by which the data are enlarged.
func (f *Figure) enlargement(defaultWidth int) (int, error) {
	want := f.MinWidthPx
	if want == 0 {
		want = defaultWidth
	}
	k := (want + f.Width - 1) / f.Width
	if f.Width*k > maxPixels/(f.Height*k) {
		return 0, fmt.Errorf("%w: size: got %d x %d pixels enlarged %d times, want at most %d pixels in all; reduce the image first", ErrInvalid, f.Width, f.Height, k, maxPixels)
	}
	return k, nil
}

// drawn tells whether data pixel i is shown.
func (f *Figure) drawn(i int) bool {
	return (f.Inside == nil || f.Inside[i]) && !math.IsNaN(float64(f.Values[i]))
}

// at returns the value at a place of the data; ok is false where there is none.
func (f *Figure) at(x, y float64) (v float64, ok bool) {
	i := min(int(y), f.Height-1)*f.Width + min(int(x), f.Width-1)
	return float64(f.Values[i]), f.drawn(i)
}

// circle is that of a round figure, in the picture at r.
func circleIn(r image.Rectangle) (c point, radius float64) {
	c = point{float64(r.Min.X+r.Max.X) / 2, float64(r.Min.Y+r.Max.Y) / 2}
	return c, float64(min(r.Dx(), r.Dy())) / 2
}
