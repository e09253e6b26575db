package sunpath

import (
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene/photometry"
	"squint/trace"
)

// Sample is the sun at one moment as the point sees it.
type Sample struct {
	Time time.Time // standard time of the site
	Sun  r3.Vec    // unit, seen through the air
	// Free is the share of the disc's solid angle that nothing opaque hides,
	// Cloth the share of the disc seen through cloth or perforation, and Tau the
	// share of its luminance that is left, a mean over what is free.
	Free, Cloth, Tau float64
	// Mirrored is the light of the sun's images in mirrors and panes in
	// multiples of the unhidden sun's; 0 below leastMirrored. Image is the
	// direction of the strongest and Mirror what it is seen in.
	Mirrored float64
	Image    r3.Vec
	Mirror   string
}

// Direct reports that the point sees a part of the disc.
func (s *Sample) Direct() bool { return s.Free > 0 }

// Veiled reports that what it sees is mostly behind cloth or perforation.
func (s *Sample) Veiled() bool { return s.Cloth > s.Free/2 }

const (
	// discRays is the number of lines of sight over the disc: shares come in
	// steps of a thirty-second. discScramble spreads them, the same everywhere.
	// Own choice.
	discRays     = 32
	discScramble = 0x5d15c
	// leastMirrored is the share of the sun's own light from which on its images
	// count. Own choice: a thousandth still outshines the sky by far.
	leastMirrored = 0.001
)

// watcher looks for suns from a point and keeps what they share. Not safe for
// concurrent use.
type watcher struct {
	point   Point
	mirrors map[*trace.World][]int32 // facets that may show the sun
	images  []trace.Image            // memory to use again
}

func newWatcher(p Point) *watcher {
	return &watcher{point: p, mirrors: map[*trace.World][]int32{}}
}

// sample looks for a sun in the scene as it stands.
func (a *watcher) sample(w *trace.World, t time.Time, sun r3.Vec) Sample {
	p := a.point
	s := Sample{Time: t, Sun: sun}
	free, cloth := 0, 0
	for k := range discRays {
		u, v := sampling.OwenSobol2(uint32(k), discScramble)
		dir := trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, v)
		if !p.sees(dir) || dir.Z <= 0 {
			continue
		}
		seen := look(w, p.Position, dir)
		if !seen.kind.free() {
			continue
		}
		free++
		s.Tau += seen.tau
		if seen.kind == skyCloth {
			cloth++
		}
	}
	if free > 0 {
		s.Tau /= float64(free)
	}
	s.Free, s.Cloth = float64(free)/discRays, float64(cloth)/discRays
	mirrors, known := a.mirrors[w]
	if !known {
		mirrors = w.MirrorsFrom(p.Position)
		a.mirrors[w] = mirrors
	}
	images := w.Images(p.Position, sun, mirrors, func(d r3.Vec) bool { return hidden(w.Scene, d) }, a.images[:0])
	a.images = images
	best := -1
	for i, im := range images {
		if !p.sees(im.Dir) {
			continue
		}
		s.Mirrored += light(im)
		if best < 0 || light(im) > light(images[best]) {
			best = i
		}
	}
	if s.Mirrored < leastMirrored {
		s.Mirrored = 0
		return s
	}
	// Facets that meet each show a part of one image.
	sum := r3.Vec{}
	for _, im := range images {
		if im.Part == images[best].Part && r3.Norm(r3.Sub(im.Dir, images[best].Dir)) < photometry.SunDiameterRad {
			sum = r3.Add(sum, r3.Scale(light(im), im.Dir))
		}
	}
	s.Image, s.Mirror = r3.Unit(sum), w.Scene.Parts[images[best].Part].Name
	return s
}

// light is what an image adds, in multiples of the unhidden sun.
func light(im trace.Image) float64 { return im.Share * im.Luminous }
