package materials

import "math"

// Range of SpreadRad, our choice: a sharper lobe is about as wide as the sun's
// disc (0.533 degrees across) and serves as a mirror; a softer one can hardly
// be told from a matte finish.
const (
	MinSpreadRad = 0.5 * math.Pi / 180
	MaxSpreadRad = math.Pi / 3
)

// Glossy is an opaque finish with a diffuse part and a glossy lobe, the same on
// both sides and at every incidence: anodised or brushed aluminium, satin
// paint.
//
// Energy: as much light leaves as TotalReflectance says, at every incidence;
// see Gloss.
type Glossy struct {
	TotalReflectance float64
	SpecularShare    float64 // share of TotalReflectance in the lobe, 0 to 1
	// SpreadRad is the angle from the mirror direction at which the lobe of a
	// beam at normal incidence has fallen to half its peak.
	SpreadRad float64

	lobe *Gloss
}

// NewGlossy checks the numbers and prepares the lobe.
func NewGlossy(totalReflectance, specularShare, spreadRad float64) (*Glossy, error) {
	if err := checkShare("reflectance", totalReflectance); err != nil {
		return nil, err
	}
	if err := checkShare("specular_share", specularShare); err != nil {
		return nil, err
	}
	if !(spreadRad >= MinSpreadRad && spreadRad <= MaxSpreadRad) {
		return nil, &RangeError{Key: "spread_deg", Got: spreadRad * 180 / math.Pi, Want: "0.5 to 60",
			Advice: "use a mirror for sharper reflection, a matte finish for softer"}
	}
	g := &Glossy{TotalReflectance: totalReflectance, SpecularShare: specularShare, SpreadRad: spreadRad}
	if s := totalReflectance * specularShare; s > 0 {
		g.lobe = newGloss(s, spreadRad)
	}
	return g, nil
}

func (g *Glossy) Lambert(Side) (rho, tau float64) {
	return g.TotalReflectance * (1 - g.SpecularShare), 0
}
func (g *Glossy) Delta(Side, float64) (mirror, through float64) { return 0, 0 }
func (g *Glossy) Gloss(Side) *Gloss                             { return g.lobe }

// alphaOf returns the roughness at which the density of facet normals falls to
// half its peak at half the spread: a facet turned by an angle turns the light
// by twice as much. From Walter et al., 2007, equation 33, solved for alpha.
func alphaOf(spreadRad float64) float64 {
	s := math.Sin(spreadRad / 2)
	return math.Sqrt(s * s / (math.Sqrt2 - 1 + s*s))
}
