package materials

import "math"

// Perforated is a sheet with round holes too small to be resolved. Light on
// the holes passes straight through as far as the thickness lets it; the walls
// of the holes are taken as black. Between the holes the sheet is Base.
type Perforated struct {
	OpenShare     float64 // share of the area that is holes
	HoleDiameterM float64
	ThicknessM    float64 // 0: the holes pass their share at every incidence
	Base          BSDF

	gloss [2]*Gloss // Base's lobes, reduced to the share between the holes
}

// NewPerforated checks the numbers and prepares the lobes.
func NewPerforated(p Perforated) (*Perforated, error) {
	if err := checkShare("open_share", p.OpenShare); err != nil {
		return nil, err
	}
	if !(p.HoleDiameterM > 0) || math.IsInf(p.HoleDiameterM, 0) {
		return nil, &RangeError{Key: "hole_diameter_m", Got: p.HoleDiameterM, Want: "above 0"}
	}
	if !(p.ThicknessM >= 0) || math.IsInf(p.ThicknessM, 0) {
		return nil, &RangeError{Key: "thickness_m", Got: p.ThicknessM, Want: "0 or more"}
	}
	if p.Base == nil {
		return nil, errNoBase
	}
	for side := Front; side <= Back; side++ {
		p.gloss[side] = p.Base.Gloss(side).scaled(1 - p.OpenShare)
	}
	return &p, nil
}

func (p *Perforated) Lambert(side Side) (rho, tau float64) {
	rho, tau = p.Base.Lambert(side)
	return rho * (1 - p.OpenShare), tau * (1 - p.OpenShare)
}

// Delta passes OpenShare times the overlap of a hole's two rims seen along the
// light, (2/pi)(acos k - k sqrt(1-k^2)), k = (thickness/diameter) tan theta.
// Source: the area common to two equal circles, elementary geometry.
func (p *Perforated) Delta(side Side, cosTheta float64) (mirror, through float64) {
	mirror, through = p.Base.Delta(side, cosTheta)
	mirror *= 1 - p.OpenShare
	through *= 1 - p.OpenShare
	return mirror, through + p.OpenShare*rimOverlap(p.ThicknessM/p.HoleDiameterM, cosTheta)
}

func (p *Perforated) Gloss(side Side) *Gloss { return p.gloss[side] }

func rimOverlap(thicknessOverDiameter, cosTheta float64) float64 {
	if thicknessOverDiameter == 0 {
		return 1
	}
	c := min(max(cosTheta, 0), 1)
	s := math.Sqrt(1 - c*c)
	// k >= 1 without dividing by a cosine of 0.
	if thicknessOverDiameter*s >= c {
		return 0
	}
	k := thicknessOverDiameter * s / c
	return 2 / math.Pi * (math.Acos(k) - k*math.Sqrt(1-k*k))
}
