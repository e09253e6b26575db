package materials

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// Kind says which part of a finish a sample belongs to.
type Kind int

const (
	KindDiffuse        Kind = iota // Lambertian, back to the viewer's side
	KindDiffuseThrough             // Lambertian, from the other side
	KindMirror                     // mirror direction exactly
	KindThrough                    // straight through exactly
	KindGlossy                     // glossy lobe
)

// IsDelta reports whether a sample of this kind has one possible direction.
func (k Kind) IsDelta() bool { return k == KindMirror || k == KindThrough }

// Scattered is a direction drawn for a viewer.
type Scattered struct {
	Wi r3.Vec // to the light, local frame, unit length
	// Weight is what the radiance from Wi is multiplied with: BSDF x cosine /
	// PDF, or for the delta kinds share / probability.
	Weight float64
	// PDF is the density per steradian of Wi over all parts but the delta ones,
	// equal to PDF(b, wo, Wi); 0 for the delta kinds.
	PDF  float64
	Kind Kind
}

// PDF returns the density per steradian with which Sample draws wi for a
// viewer at wo, without the delta parts. Its integral over the sphere is one
// less the chance of the delta kinds and of glossy directions lost below the
// surface.
func PDF(b BSDF, wo, wi r3.Vec) float64 {
	if wo.Z == 0 || wi.Z == 0 {
		return 0
	}
	c := newChances(b, wo)
	return c.pdf(wo, wi)
}

// Sample draws a direction to the light for a viewer at wo; u1, u2, u3 are
// uniform in [0, 1). u1 picks the part of the finish, in proportion to the
// light it sends to the viewer, u2 and u3 the direction. It reports false where
// nothing reaches the viewer, which counts as a sample of weight 0.
//
// Where a glossy lobe lies over a diffuse part, Weight and PDF are of both
// together and Kind only says which drew the direction. A method that treats
// the parts differently calls Lambert, Delta and Gloss itself.
func Sample(b BSDF, wo r3.Vec, u1, u2, u3 float64) (Scattered, bool) {
	if wo.Z == 0 {
		return Scattered{}, false
	}
	c := newChances(b, wo)
	return c.sample(wo, u1, u2, u3)
}

// chances holds the share of light that each part of a finish sends to a
// viewer, in the order of Kind. For the lobe it is the stated reflectance.
type chances struct {
	share [5]float64
	total float64
	side  Side // the viewer's
	gloss *Gloss
}

func newChances(b BSDF, wo r3.Vec) chances {
	side := SideOf(wo)
	cos := math.Abs(wo.Z)
	c := chances{side: side, gloss: b.Gloss(side)}
	c.share[KindDiffuse], _ = b.Lambert(side)
	_, c.share[KindDiffuseThrough] = b.Lambert(side.Opposite())
	c.share[KindMirror], _ = b.Delta(side, cos)
	_, c.share[KindThrough] = b.Delta(side.Opposite(), cos)
	if c.gloss != nil {
		c.share[KindGlossy] = c.gloss.Reflectance
	}
	for _, s := range c.share {
		c.total += s
	}
	return c
}

func (c *chances) pdf(wo, wi r3.Vec) float64 {
	if c.total <= 0 {
		return 0
	}
	if SideOf(wi) != c.side {
		return c.share[KindDiffuseThrough] / c.total * sampling.CosineHemispherePDF(math.Abs(wi.Z))
	}
	p := c.share[KindDiffuse] * sampling.CosineHemispherePDF(math.Abs(wi.Z))
	if c.gloss != nil {
		p += c.share[KindGlossy] * c.gloss.PDF(toSide(wo, c.side), toSide(wi, c.side))
	}
	return p / c.total
}

func (c *chances) sample(wo r3.Vec, u1, u2, u3 float64) (Scattered, bool) {
	if c.total <= 0 {
		return Scattered{}, false
	}
	kind, rest := KindDiffuse, u1*c.total
	for k, s := range c.share {
		if s <= 0 {
			continue
		}
		kind = Kind(k)
		if rest < s {
			break
		}
		rest -= s
	}
	s := Scattered{Kind: kind, Weight: c.total}
	switch kind {
	case KindMirror:
		s.Wi = r3.Vec{X: -wo.X, Y: -wo.Y, Z: wo.Z}
		return s, true
	case KindThrough:
		s.Wi = r3.Scale(-1, wo)
		return s, true
	case KindDiffuse:
		s.Wi = toSide(sampling.CosineHemisphere(u2, u3), c.side)
	case KindDiffuseThrough:
		s.Wi = toSide(sampling.CosineHemisphere(u2, u3), c.side.Opposite())
	case KindGlossy:
		wi, ok := c.gloss.Sample(toSide(wo, c.side), u2, u3)
		if !ok {
			return Scattered{}, false
		}
		s.Wi = toSide(wi, c.side)
	}
	if c.gloss == nil || kind == KindDiffuseThrough {
		// One density over the hemisphere: the weight is the constant set above.
		s.PDF = c.share[kind] / c.total * sampling.CosineHemispherePDF(math.Abs(s.Wi.Z))
		return s, s.PDF > 0
	}
	s.PDF = c.pdf(wo, s.Wi)
	if s.PDF <= 0 {
		return Scattered{}, false
	}
	up, ui := toSide(wo, c.side), toSide(s.Wi, c.side)
	f := c.share[KindDiffuse]/math.Pi + c.gloss.Eval(up, ui)
	s.Weight = f * ui.Z / s.PDF
	return s, true
}
