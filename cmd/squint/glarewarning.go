package main

import (
	"fmt"
	"math"

	"squint/cmd/squint/internal/report"
	"squint/glare/luminance"
	"squint/glare/photograph"
	"squint/scene/view"
)

// From where on an image is warned about. Own choice, but for the tolerance,
// which is a flag.
const (
	cutOffShare   = 0.002 // of the field's illuminance, were it even
	offCentre     = 0.03  // of the circle's radius
	stretched     = 0.01  // width over height of the circle
	faintEdge     = 0.7   // of the circle's edge
	coarsePixel   = 1.0   // degrees
	manyNegative  = 0.001 // of the pixels in the circle
	hugeDeviation = 0.5   // of the lux reading: a wrong factor rather than an error
)

// imageWarnings lists what may make the results wrong, and what is worth
// knowing.
func imageWarnings(out *report.Image, im *luminance.Image, fit *photograph.Fit, o glareOptions, discs int) (warnings, notes []string) {
	warn := func(format string, args ...any) { warnings = append(warnings, fmt.Sprintf(format, args...)) }
	note := func(format string, args ...any) { notes = append(notes, fmt.Sprintf(format, args...)) }
	p, v := out.Photo, out.Photo.View
	if p.View.Projection.Fisheye() {
		circleWarnings(out, im, fit, warn, note)
	}
	if p.Plateau.Clipped() {
		warn("%d pixels share the largest luminance, %.4g cd/m2: the camera's range ended there (clipped), and what is brighter, the sun above all, is missing from illuminance, DGP and sources. Take shorter exposures.", p.Plateau.Pixels, p.Plateau.CdM2)
	}
	if p.Unknown > 0 {
		warn("%d pixels have no number or are marked invalid; they count as dark and are left out of means.", p.Unknown)
	}
	switch share := float64(p.Negative) / float64(p.Plateau.Inside); {
	case share > manyNegative:
		warn("%d pixels are negative (%.1f %%) and count as 0; check how the image was made.", p.Negative, 100*share)
	case p.Negative > 0:
		note("%d pixels are negative and count as 0.", p.Negative)
	}
	if out.Largest == 0 {
		warn("the image is black.")
	}
	luxWarning(out, o, warn, note)
	if n := len(p.SpotRatios); n > 1 {
		lo, hi := p.SpotRatios[0], p.SpotRatios[0]
		for _, r := range p.SpotRatios {
			lo, hi = min(lo, r), max(hi, r)
		}
		if hi/lo-1 > o.LuxTolerance/100 {
			warn("the measured spots disagree: their factors run from %.4g to %.4g, by more than %g %%.", lo, hi, o.LuxTolerance)
		}
	}
	if discs > 0 {
		note("the file keeps %d discs of the sun or its images apart from the pixels.", discs)
	}
	if o.Camera.Projection != "" && im.Attr.Projection != "" && o.Camera.Projection != im.Attr.Projection {
		note("the file calls its projection %s; --projection is followed.", im.Attr.Projection)
	}
	if a := pixelDeg(v); a > coarsePixel {
		note("a pixel in the middle is %.1f° wide; smaller sources are spread over it and count too little.", a)
	}
	return warnings, notes
}

// pixelDeg is the width of the pixel on the line of sight, degrees.
func pixelDeg(v view.View) float64 {
	x, y, _ := v.Circle()
	return math.Sqrt(v.SolidAngle(min(int(x), v.Width-1), min(int(y), v.Height-1))) * 180 / math.Pi
}

func circleWarnings(out *report.Image, im *luminance.Image, fit *photograph.Fit, warn, note func(string, ...any)) {
	v := out.Photo.View
	half := v.FOVRad / 2
	sin := math.Sin(math.Min(half, math.Pi/2))
	if missing := 1 - out.Covered/(sin*sin); missing > cutOffShare {
		warn("the image circle is cut off: %.1f %% of its field, by illuminance, lies outside of the image; DGP and illuminance are too low.", 100*missing)
	}
	if half < math.Pi/2*(1-1e-9) {
		warn("a field of view of %.4g° does not cover the half space in front of the eye: %.1f %% of it, by illuminance, is not seen; DGP and illuminance are too low.", 2*half*180/math.Pi, 100*(1-sin*sin))
	}
	x, y, r := v.Circle()
	dx, dy := x-float64(v.Width)/2, y-float64(v.Height)/2
	if math.Hypot(dx, dy) > offCentre*r {
		side, height := "right", "below"
		if dx < 0 {
			side = "left"
		}
		if dy < 0 {
			height = "above"
		}
		note("the image circle's centre lies %.0f pixels %s of that of the image and %.0f %s it; it is taken where it is.", math.Abs(dx), side, math.Abs(dy), height)
	}
	if v.Placement.RadiusPx == 0 && v.Width != v.Height {
		warn("the image is %d x %d pixels, not square, and the inscribed circle is taken; if the lens's circle lies elsewhere, give --circle.", v.Width, v.Height)
	}
	if fit == nil {
		return
	}
	if math.Abs(fit.Stretch) > stretched {
		warn("the image circle is an ellipse, %.1f %% wider than high: the image was resized unequally, so directions are wrong. Resize it back.", 100*fit.Stretch)
	}
	if fit.Agree < faintEdge {
		warn("only %.0f %% of the image circle's edge shows; see in the picture whether the circle is right, or give --circle.", 100*fit.Agree)
	}
}

func luxWarning(out *report.Image, o glareOptions, warn, note func(string, ...any)) {
	if o.Lux <= 0 || !out.Indices {
		return
	}
	off := out.Result.Ev/o.Lux - 1
	text := fmt.Sprintf("the image gives %.0f lx at the eye, the lux meter %g lx: %+.1f %%", out.Result.Ev, o.Lux, 100*off)
	switch {
	case math.Abs(off) <= o.LuxTolerance/100:
		note("%s, within %g %%.", text, o.LuxTolerance)
	case out.Photo.Plateau.Clipped() && off < 0:
		warn("%s; clipped pixels may be the reason.", text)
	case math.Abs(off) > hugeDeviation:
		warn("%s; check factor, circle and field of view.", text)
	default:
		warn("%s, more than %g %%.", text, o.LuxTolerance)
	}
}

func circleWords(v view.View, fit *photograph.Fit, given bool) string {
	if !v.Projection.Fisheye() {
		return ""
	}
	x, y, r := v.Circle()
	text := fmt.Sprintf("image circle at %.1f, %.1f, radius %.1f pixels", x, y, r)
	switch {
	case fit != nil:
		return text + fmt.Sprintf(", found (%.0f %% of its edge, %.2f pixels rms)", 100*fit.Agree, fit.RMSPx)
	case given:
		return text + ", as given"
	}
	return "image circle inscribed"
}
