package export

import (
	"math"

	"squint/materials"
	"squint/scene"
)

// Shade is a finish as drawing programs know it: one grey, some of which shows
// what is behind. Shares are of the light that arrives straight on the front, 0
// to 1; a back of its own is not shown.
type Shade struct {
	Name string
	// Diffuse and Mirrored are the shares reflected evenly and about the mirror
	// direction, Scattered and Through those let through evenly and straight.
	Diffuse, Mirrored, Scattered, Through float64
	// Roughness is the square root of the width of the mirrored part's
	// distribution of facets: 0 for a mirror, 1 where nothing is mirrored.
	Roughness float64
}

func newShade(f scene.Finish) Shade {
	s := Shade{Name: f.Name, Roughness: 1}
	s.Diffuse, s.Scattered = f.BSDF.Lambert(materials.Front)
	s.Mirrored, s.Through = f.BSDF.Delta(materials.Front, 1)
	if s.Mirrored > 0 {
		s.Roughness = 0
	}
	if g := f.BSDF.Gloss(materials.Front); g != nil {
		if s.Mirrored == 0 {
			// The width is the square of the roughness: Khronos Group, 2021,
			// "glTF 2.0 Specification", appendix B (from memory).
			s.Roughness = math.Sqrt(g.Alpha)
		}
		s.Mirrored += g.Reflectance
	}
	return s
}

// Reflectance is the share that comes back, the grey.
func (s Shade) Reflectance() float64 { return unit(s.Diffuse + s.Mirrored) }

// Transmittance is the share that passes.
func (s Shade) Transmittance() float64 { return unit(s.Scattered + s.Through) }

// Metal is the share of what comes back that is mirrored, of an opaque finish;
// what lets light through mirrors as glass does, which is no metal.
func (s Shade) Metal() float64 {
	if r := s.Diffuse + s.Mirrored; r > 0 && s.Transmittance() == 0 {
		return unit(s.Mirrored / r)
	}
	return 0
}

func (s *Shade) scale(by float64) {
	s.Diffuse *= by
	s.Mirrored *= by
	s.Scattered *= by
	s.Through *= by
}

// unit keeps the rounding of sums within 0 to 1.
func unit(x float64) float64 { return min(max(x, 0), 1) }
