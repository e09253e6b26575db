package photograph

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/luminance"
	"squint/scene/view"
)

// ErrSpot is wrapped by the errors about measured spots.
var ErrSpot = errors.New("measured spot")

// Settings say what the picture does not say itself.
type Settings struct {
	Projection view.Projection
	FOVRad     float64 // full angle across the image circle
	Circle     *Circle // nil: the inscribed one
	RollRad    float64 // see view.Placement
	Vignetting Vignetting
	Masks      []Mask
	Factor     float64 // on all luminances; 0 means 1
	Spots      []Spot
}

// Spot is a place in the picture, in pixels, whose luminance was measured. All
// luminances are scaled so that the picture has the measured ones; with several
// spots, by the mean of their ratios.
type Spot struct{ X, Y, CdM2 float64 }

// SpotRad is the field of a spot meter, half angle: a spot's luminance in the
// picture is the mean over the pixels this near to it, or of its own pixel.
// Common practice, no published source: meters of 1 degree.
const SpotRad = 0.5 * math.Pi / 180

// Photograph is a picture with directions and luminances.
type Photograph struct {
	View view.View // at the origin, level, looking along +y
	// Lum is cd/m2, row by row from the top; 0 where Hidden and outside of
	// the image circle.
	Lum    []float32
	Hidden []bool // inside of the circle, but unknown or behind a mask

	Factor     float64   // on the file's luminances, spots included
	SpotRatios []float64 // measured over the picture's, for each spot, by Settings.Factor
	Unknown    int       // pixels without a number (NaN, infinite) or that the file marks, hidden
	Negative   int       // pixels below 0, which count as 0
	Plateau    Plateau
}

// Plateau is how often the largest luminance that no mask hides occurs.
type Plateau struct {
	CdM2   float64
	Pixels int
	Near   int // pixels less than plateauStep below it
	Inside int // pixels in the circle, all
}

// Own choices: noise makes even two pixels alike unlikely, where luminances
// are not rounded; where they are, to 11 bits in half floats, those next to the
// largest are as frequent unless the range ended.
const (
	clippedPixels = 4
	plateauStep   = 0.005 // relative
)

// Clipped tells whether the camera's range seems to have ended below the
// scene's: several pixels have the very same largest luminance, and few come
// near it. A picture of one luminance, more than half of it, is none.
func (p Plateau) Clipped() bool {
	return p.Pixels >= clippedPixels && p.Pixels > p.Near && 2*p.Pixels < p.Inside
}

// Develop gives the picture's pixels directions and cd/m2. The image must be
// valid; discs kept beside its pixels are not touched.
func Develop(im *luminance.Image, s Settings) (*Photograph, error) {
	v, err := view.New(r3.Vec{}, r3.Vec{Y: 1}, r3.Vec{Z: 1}, s.Projection, s.FOVRad, im.Width, im.Height)
	if err != nil {
		return nil, err
	}
	v.Placement.RollRad = s.RollRad
	if s.Circle != nil {
		v.Placement.X, v.Placement.Y, v.Placement.RadiusPx = s.Circle.X, s.Circle.Y, s.Circle.RadiusPx
	}
	if err := v.Validate(); err != nil {
		return nil, err
	}
	n := im.Width * im.Height
	p := &Photograph{View: v, Lum: make([]float32, n), Hidden: make([]bool, n), Factor: s.Factor}
	if p.Factor == 0 {
		p.Factor = 1
	}
	if !s.Projection.Fisheye() { // its corners are further out
		err = s.Vignetting.check(p.corner())
	} else {
		err = s.Vignetting.check(s.FOVRad / 2)
	}
	if err != nil {
		return nil, err
	}
	for i := range p.Lum {
		dir, ok := v.LocalPixelRay(i%im.Width, i/im.Width)
		if !ok {
			continue
		}
		p.pixel(im, i, s.Vignetting.At(math.Atan2(math.Hypot(dir.Y, dir.Z), dir.X)))
	}
	for _, m := range s.Masks {
		if len(m.Hidden) != n {
			return nil, fmt.Errorf("%w %s: got %d pixels, want %d", ErrMask, m.Name, len(m.Hidden), n)
		}
		for i, h := range m.Hidden {
			if _, inside := v.LocalPixelRay(i%im.Width, i/im.Width); h && inside {
				p.Hidden[i], p.Lum[i] = true, 0
			}
		}
	}
	p.findPlateau(im)
	return p, p.scale(s.Spots)
}

// corner is the largest angle from the line of sight in the picture, rad.
func (p *Photograph) corner() float64 {
	theta := 0.0
	for _, x := range []float64{0, float64(p.View.Width)} {
		if d, ok := p.View.LocalRay(x, 0); ok {
			theta = math.Max(theta, math.Acos(d.X))
		}
	}
	return theta
}

// pixel takes one over and counts what is wrong with it.
func (p *Photograph) pixel(im *luminance.Image, i int, vignetting float64) {
	lum, ok := im.At(i%im.Width, i/im.Width)
	p.Plateau.Inside++
	if !ok || math.IsNaN(float64(lum)) || math.IsInf(float64(lum), 0) {
		p.Unknown++
		p.Hidden[i] = true
		return
	}
	if lum < 0 {
		p.Negative++
		return
	}
	p.Lum[i] = float32(float64(lum) / vignetting)
}

// findPlateau looks at the picture as the camera took it: vignetting undone
// would tilt a plateau.
func (p *Photograph) findPlateau(im *luminance.Image) {
	var inside []float32
	for i, l := range p.Lum {
		if l > 0 {
			inside = append(inside, im.Lum[i])
		}
	}
	if len(inside) == 0 {
		return
	}
	most := slices.Max(inside)
	p.Plateau.CdM2 = float64(most)
	for _, l := range inside {
		switch {
		case l == most:
			p.Plateau.Pixels++
		case float64(l) > (1-plateauStep)*float64(most):
			p.Plateau.Near++
		}
	}
}

// scale turns the file's unit into cd/m2.
func (p *Photograph) scale(spots []Spot) error {
	sum := 0.0
	for _, s := range spots {
		seen, err := p.spot(s)
		if err != nil {
			return err
		}
		ratio := s.CdM2 / (seen * p.Factor)
		p.SpotRatios = append(p.SpotRatios, ratio)
		sum += ratio
	}
	if len(spots) > 0 {
		p.Factor *= sum / float64(len(spots))
	}
	p.Plateau.CdM2 *= p.Factor
	for i, l := range p.Lum {
		scaled := float64(l) * p.Factor
		if scaled > math.MaxFloat32 {
			return fmt.Errorf("%w: luminance: got %.3g cd/m2 after scaling by %.3g; check the factor", luminance.ErrInvalid, scaled, p.Factor)
		}
		p.Lum[i] = float32(scaled)
	}
	return nil
}

// spot is the mean luminance in the picture about a measured spot, in the
// file's unit.
func (p *Photograph) spot(s Spot) (float64, error) {
	centre, ok := p.View.LocalRay(s.X, s.Y)
	if !ok || !(s.CdM2 > 0) || math.IsInf(s.CdM2, 0) {
		return 0, fmt.Errorf("%w: got %g cd/m2 at (%g, %g), want more than 0 at a pixel inside of the image circle", ErrSpot, s.CdM2, s.X, s.Y)
	}
	w, h := p.View.Width, p.View.Height
	own := min(int(s.Y), h-1)*w + min(int(s.X), w-1)
	flux, omega := 0.0, 0.0
	for i := range p.Lum {
		dir, ok := p.View.LocalPixelRay(i%w, i/w)
		if !ok || p.Hidden[i] || i != own && r3.Norm(r3.Sub(dir, centre)) > 2*math.Sin(SpotRad/2) {
			continue
		}
		o := p.View.SolidAngle(i%w, i/w)
		flux += float64(p.Lum[i]) * o
		omega += o
	}
	if !(flux > 0) {
		return 0, fmt.Errorf("%w: the image is dark or unknown at (%g, %g); choose a bright, even place", ErrSpot, s.X, s.Y)
	}
	return flux / omega, nil
}
