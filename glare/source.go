package glare

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// Disc is the visible disc of the sun or of its mirror image, with the image
// giving the luminances without it. It stays a source of its own even inside
// a bright group of pixels: DGP squares a source's luminance after averaging
// it over the source, so smearing 1e9 cd/m2 over a pixel 35 times as large,
// or over the sky around, loses most of the term (0.26 DGP in
// TestDiscInsideBrightGroup).
//
// Hidden in part by something opaque, its OmegaSr shrinks; seen through cloth
// or glass, its Luminance does.
type Disc struct {
	Dir       r3.Vec  // unit, view frame
	OmegaSr   float64 // visible solid angle, sr
	Luminance float64 // mean over OmegaSr, cd/m2
}

// illuminance on the plane of the eye, lx: exact for a whole circular disc in
// front of it, L pi sin^2(r) cos(sigma) with omega = 2 pi (1-cos r); for the
// sun the factor in brackets is 1 - 5e-6.
func (d Disc) illuminance() float64 {
	return d.Luminance * d.OmegaSr * (1 - d.OmegaSr/(4*math.Pi)) * d.Dir.X
}

// counts tells whether the eye can see the disc at all.
func (d Disc) counts() bool { return d.Dir.X > 0 && d.OmegaSr > 0 && d.Luminance > 0 }

// Source is one glare source.
type Source struct {
	Dir           r3.Vec  // luminance-weighted centroid, unit, view frame
	MeanLuminance float64 // over solid angle, cd/m2
	PeakLuminance float64 // brightest pixel, cd/m2
	OmegaSr       float64 // solid angle, sr
	PositionIndex float64 // by Options.Position; +Inf at or behind the plane of the eye
	Contribution  float64 // L^2 omega/P^2, its term in the sum of DGP, cd2/m4 sr
	Pixels        []int32 // ascending; nil for a disc
	Disc          bool
}

// Detect returns the glare sources, largest contribution first (ties: pixel
// groups in reading order, then discs in theirs). lum has length
// f.Width*f.Height, else Detect panics. scratch may be nil; the result does
// not share memory with it.
func Detect(f *Field, lum []float32, discs []Disc, o Options, scratch *Scratch) []Source {
	if scratch == nil {
		scratch = new(Scratch)
	}
	scratch.gather(f, lum, o)
	scratch.group(f, lum, o)
	return scratch.sources(f, lum, discs, o)
}

// sources turns the groups found into sources.
func (s *Scratch) sources(f *Field, lum []float32, discs []Disc, o Options) []Source {
	var out []Source
	if len(s.groups)+len(discs) > 0 {
		out = make([]Source, len(s.groups), len(s.groups)+len(discs))
	}
	for i, g := range s.groups {
		l, p := g.luminance(), g.position(o.Position)
		out[i] = Source{
			Dir: g.centroid(), MeanLuminance: l, PeakLuminance: float64(g.peak),
			OmegaSr: g.omega, PositionIndex: p, Contribution: l * l * g.omega / (p * p),
			Pixels: make([]int32, 0, g.count),
		}
	}
	for i, b := range s.bright {
		g := s.groupOf[i]
		out[g].Pixels = append(out[g].Pixels, b.pixel)
	}
	for _, d := range discs {
		if !d.counts() {
			continue
		}
		p := PositionIndex(d.Dir)
		out = append(out, Source{
			Dir: d.Dir, MeanLuminance: d.Luminance, PeakLuminance: d.Luminance,
			OmegaSr: d.OmegaSr, PositionIndex: p,
			Contribution: d.Luminance * d.Luminance * d.OmegaSr / (p * p), Disc: true,
		})
	}
	slices.SortStableFunc(out, func(a, b Source) int { return cmp.Compare(b.Contribution, a.Contribution) })
	return out
}
