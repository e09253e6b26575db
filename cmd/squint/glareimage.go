package main

import (
	"errors"
	"fmt"
	"image/png"
	"io/fs"
	"math"
	"os"
	"path/filepath"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/report"
	"squint/glare"
	"squint/glare/luminance"
	"squint/glare/photograph"
	"squint/scene/view"
)

// evaluateImage evaluates one image, whose discs it takes out of the pixels.
func evaluateImage(name string, im *luminance.Image, o glareOptions) (*report.Image, error) {
	out := &report.Image{File: name, Options: o.Sources.options(), Lux: o.Lux, AgeYears: o.AgeYears, Pigmentation: o.Pigmentation}
	if err := im.GatherDiscs(); err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	s, fit, err := o.Camera.settings(name, im)
	if err != nil {
		return nil, err
	}
	if out.Photo, err = photograph.Develop(im, s); err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	p := out.Photo
	whole := glare.NewField(p.View)
	if whole.Count == 0 {
		return nil, fmt.Errorf("%s: image circle: no pixel of the image lies in it; check --circle", name)
	}
	f := whole.Without(p.Hidden)
	if f.Count == 0 {
		return nil, fmt.Errorf("%s: nothing of the image is left: all pixels are masked or without a number", name)
	}
	out.Inside = f.Inside
	out.Covered = whole.Projected() / math.Pi
	out.Hidden = hiddenShares(whole, s.Masks)
	discs := visibleDiscs(p, im.Attr.Discs)
	out.Indices = p.View.Projection.Fisheye()
	out.Result = glare.Evaluate(f, p.Lum, discs, out.Options, nil)
	out.Median = glare.Median(f, p.Lum)
	out.Contrast = glare.ContrastOf(f, p.Lum, out.Options)
	for _, l := range p.Lum {
		out.Largest = max(out.Largest, float64(l))
	}
	for _, d := range discs {
		out.Largest = max(out.Largest, d.Luminance)
	}
	out.Veil = glare.VeilOf(f, p.Lum, out.Result.Sources, o.AgeYears, o.Pigmentation)
	out.Circle = circleWords(p.View, fit, s.Circle != nil)
	out.Warnings, out.Notes = imageWarnings(out, im, fit, o, len(discs))
	return out, nil
}

// readImage reads a file of the kinds that squint knows.
func readImage(name string) (*luminance.Image, error) {
	if info, err := os.Stat(name); err == nil && info.IsDir() {
		return nil, fmt.Errorf("%s: got a folder, want an image; name the files in it", name)
	}
	im, err := luminance.Read(os.DirFS(filepath.Dir(name)), filepath.Base(name))
	var parse *luminance.ParseError
	switch {
	case errors.As(err, &parse):
		parse.File = name
	case errors.Is(err, fs.ErrNotExist):
		return nil, fmt.Errorf("%s: there is no such file", name)
	}
	if err != nil {
		return nil, err
	}
	if err := im.Validate(); err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	return im, nil
}

// settings are what image and flags say together; the flags come first.
func (c *cameraFlags) settings(name string, im *luminance.Image) (s photograph.Settings, fit *photograph.Fit, err error) {
	fail := func(format string, args ...any) (photograph.Settings, *photograph.Fit, error) {
		return s, nil, fmt.Errorf("%s: %w", name, fmt.Errorf(format, args...))
	}
	own := im.Attr.Projection != ""
	projection := c.Projection
	if projection == "" {
		projection = im.Attr.Projection
	}
	if projection == "" {
		return fail("projection: the image does not say it; give the lens's with --projection, such as equidistant or equisolid")
	}
	if s.Projection, err = view.ParseProjection(projection); err != nil {
		return fail("%w", err)
	}
	fov := c.FOVDeg
	if fov == 0 {
		fov = im.Attr.FOVDeg
	}
	if fov == 0 {
		return fail("field of view: the image does not say it; give the full angle across the image circle with --fov-deg, such as 180")
	}
	s.FOVRad, s.RollRad = fov*math.Pi/180, c.RollDeg*math.Pi/180
	if im.Attr.Relative && !c.factorGiven && len(c.Spots) == 0 {
		return fail("luminance: the image does not say its unit; give --luminance-factor (1 where its values are cd/m2) or a measured --spot x,y=cd/m2")
	}
	s.Factor = c.Factor
	if s.Projection.Fisheye() {
		find := !own
		if c.circleGiven {
			if s.Circle, find, err = c.circle(); err != nil {
				return fail("%w", err)
			}
		}
		if find {
			f, err := photograph.FindCircle(im)
			if err != nil {
				return fail("%w; give --circle x,y,radius in pixels, or --circle inscribed", err)
			}
			fit, s.Circle = &f, &f.Circle
		}
	} else if c.circleGiven {
		return fail("--circle: got one for the %s projection, which has none", s.Projection)
	}
	if c.Vignetting != "" {
		coefficients, err := numbers(c.Vignetting)
		if err != nil {
			return fail("--vignetting: %w", err)
		}
		s.Vignetting = photograph.VignettingPolynomial(coefficients)
	}
	if c.VignettingTable != "" {
		if s.Vignetting, err = readVignetting(c.VignettingTable); err != nil {
			return s, nil, err
		}
	}
	for _, text := range c.Spots {
		spot, err := parseSpot(text)
		if err != nil {
			return fail("%w", err)
		}
		s.Spots = append(s.Spots, spot)
	}
	s.Masks, err = c.masks(im)
	return s, fit, err
}

// openInput opens a file that a flag names.
func openInput(name string) (*os.File, error) {
	f, err := os.Open(name)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("%s: there is no such file", name)
	}
	return f, err
}

func readVignetting(name string) (photograph.Vignetting, error) {
	f, err := openInput(name)
	if err != nil {
		return photograph.Vignetting{}, err
	}
	defer f.Close()
	return photograph.ReadVignetting(f, name)
}

func (c *cameraFlags) masks(im *luminance.Image) ([]photograph.Mask, error) {
	var all []photograph.Mask
	for _, name := range c.Masks {
		f, err := openInput(name)
		if err != nil {
			return nil, err
		}
		picture, err := png.Decode(f)
		f.Close()
		if err != nil {
			return nil, fmt.Errorf("%s: mask: %w; want a PNG file", name, err)
		}
		m, err := photograph.MaskOf(name, picture, im.Width, im.Height)
		if err != nil {
			return nil, err
		}
		all = append(all, m)
	}
	for _, text := range c.MaskPolygons {
		name, corners, err := parsePolygon(text)
		if err != nil {
			return nil, err
		}
		m, err := photograph.MaskPolygon(name, corners, im.Width, im.Height)
		if err != nil {
			return nil, err
		}
		all = append(all, m)
	}
	return all, nil
}

func hiddenShares(f *glare.Field, masks []photograph.Mask) []report.HiddenShare {
	var all []report.HiddenShare
	projected := f.Projected()
	for _, m := range masks {
		h := report.HiddenShare{Name: m.Name}
		for i, hidden := range m.Hidden {
			if hidden {
				h.OmegaShare += f.Omega[i] / f.TotalOmega
				h.LuxShare += f.Omega[i] * f.CosTheta[i] / projected
			}
		}
		all = append(all, h)
	}
	return all
}

// visibleDiscs are the sources that the file keeps beside its pixels, those
// behind a mask left out.
func visibleDiscs(p *photograph.Photograph, discs []luminance.Disc) []glare.Disc {
	var out []glare.Disc
	for _, d := range discs {
		dir := r3.Vec{X: d.Direction[0], Y: d.Direction[1], Z: d.Direction[2]}
		x, y, ok := p.View.LocalProject(dir)
		if !ok || p.Hidden[min(int(y), p.View.Height-1)*p.View.Width+min(int(x), p.View.Width-1)] {
			continue
		}
		out = append(out, glare.Disc{Dir: dir, OmegaSr: d.OmegaSr, Luminance: d.Luminance * p.Factor})
	}
	return out
}
