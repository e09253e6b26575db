package materials

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// Gloss is an isotropic glossy lobe: light mirrored by facets whose slopes
// follow the GGX distribution, plus what they throw onto one another and then
// out. Its directions are in a frame whose z points to the viewer's side; below
// the horizon it is 0. NewGlossy makes lobes.
//
// Energy: the lobe sends on Reflectance of the light at every incidence, no
// more and no less, apart from the interpolation of a table (glossy_test.go
// states the error). Without the second part a lobe of 20 degrees would lose
// about 9 per cent at normal incidence.
//
// Sources, equation numbers from memory: Walter, Marschner, Li, Torrance, 2007,
// "Microfacet models for refraction through rough surfaces", EGSR, equations
// 20, 33, 34; correlated masking: Heitz, 2014, "Understanding the
// masking-shadowing function in microfacet-based BRDFs", JCGT 3(2), equations
// 72, 99; sampling of visible normals: Heitz, 2018, "Sampling the GGX
// distribution of visible normals", JCGT 7(4); the part between facets:
// Kelemen, Szirmay-Kalos, 2001, "A microfacet based coupled specular-matte BRDF
// model with importance sampling", Eurographics; Kulla, Conty, 2017, "Revisiting
// physically based shading", SIGGRAPH course.
type Gloss struct {
	// Reflectance is the share of light that the lobe sends on, at every
	// incidence.
	Reflectance float64
	// Alpha is the roughness of the distribution, above 0.
	Alpha float64

	once *albedoTable // shares sent on after a single reflection
}

func newGloss(reflectance, spreadRad float64) *Gloss {
	alpha := alphaOf(spreadRad)
	return &Gloss{Reflectance: reflectance, Alpha: alpha, once: newAlbedoTable(alpha)}
}

// Eval returns the lobe per steradian, the cosine omitted.
func (g *Gloss) Eval(wo, wi r3.Vec) float64 {
	if wo.Z <= 0 || wi.Z <= 0 {
		return 0
	}
	d := g.normals(unit(r3.Add(wo, wi)))
	f := d / (4 * (wo.Z*wi.Z + wi.Z*g.masked(wo) + wo.Z*g.masked(wi)))
	if rest := 1 - g.once.mean; rest > 0 {
		f += (1 - g.once.at(wo.Z)) * (1 - g.once.at(wi.Z)) / (math.Pi * rest)
	}
	return g.Reflectance * f
}

// PDF returns the density per steradian of Sample. Its integral falls short of
// 1 by the directions that would go below the horizon.
func (g *Gloss) PDF(wo, wi r3.Vec) float64 {
	if wo.Z <= 0 || wi.Z <= 0 {
		return 0
	}
	q := g.once.at(wo.Z)
	d := g.normals(unit(r3.Add(wo, wi)))
	return q*d/(4*(wo.Z+g.masked(wo))) + (1-q)*g.once.restPDF(wi.Z)
}

// Sample draws a direction with density PDF; u and v are uniform in [0, 1).
// False: the direction fell below the horizon, a sample of weight 0. The
// weight of others, Eval x cosine / PDF, stays near Reflectance, also at
// grazing views.
func (g *Gloss) Sample(wo r3.Vec, u, v float64) (wi r3.Vec, ok bool) {
	if wo.Z <= 0 {
		return r3.Vec{}, false
	}
	if q := g.once.at(wo.Z); u < q {
		x, y := sampling.Disc(u/q, v)
		wi = g.reflect(wo, x, y)
	} else {
		wi = g.once.sampleRest((u-q)/(1-q), v)
	}
	return wi, wi.Z > grazing
}

// grazing is the cosine below which a drawn direction counts as lost: nearer
// the horizon Eval may overflow.
const grazing = 1e-12

// reflect mirrors wo in the visible normal that the point x, y of the unit
// disc stands for.
func (g *Gloss) reflect(wo r3.Vec, x, y float64) r3.Vec {
	a := g.Alpha
	// Stretch the view, then take a point of the hemisphere that is seen from it.
	vh := unit(r3.Vec{X: a * wo.X, Y: a * wo.Y, Z: wo.Z})
	t1 := r3.Vec{X: 1}
	if n := math.Sqrt(vh.X*vh.X + vh.Y*vh.Y); n > 0 {
		t1 = r3.Vec{X: -vh.Y / n, Y: vh.X / n}
	}
	t2 := r3.Cross(vh, t1)
	s := (1 + vh.Z) / 2
	y = (1-s)*math.Sqrt(max(0, 1-x*x)) + s*y
	z := math.Sqrt(max(0, 1-x*x-y*y))
	nh := r3.Vec{
		X: x*t1.X + y*t2.X + z*vh.X,
		Y: x*t1.Y + y*t2.Y + z*vh.Y,
		Z: y*t2.Z + z*vh.Z,
	}
	m := unit(r3.Vec{X: a * nh.X, Y: a * nh.Y, Z: max(0, nh.Z)})
	return r3.Sub(r3.Scale(2*r3.Dot(wo, m), m), wo)
}

// scaled returns the lobe with its reflectance multiplied; nil for nil.
func (g *Gloss) scaled(by float64) *Gloss {
	if g == nil || by == 0 {
		return nil
	}
	s := *g
	s.Reflectance *= by
	return &s
}

// normals is the density of facet normals m per steradian and unit area.
func (g *Gloss) normals(m r3.Vec) float64 {
	a2 := g.Alpha * g.Alpha
	// sin^2 + alpha^2 cos^2: no cancellation for narrow lobes.
	t := m.X*m.X + m.Y*m.Y + a2*m.Z*m.Z
	return a2 / (math.Pi * t * t)
}

// masked is Smith's auxiliary function Lambda of masking times the cosine of
// w, which stays finite at grazing directions: masking is cos/(cos + masked).
func (g *Gloss) masked(w r3.Vec) float64 {
	return (math.Sqrt(w.Z*w.Z+g.Alpha*g.Alpha*(w.X*w.X+w.Y*w.Y)) - w.Z) / 2
}

// unit returns v at length 1, z where v has no length. Lengths here are near 1,
// so that the scaling that guards r3.Unit against overflow is not needed.
func unit(v r3.Vec) r3.Vec {
	n := r3.Dot(v, v)
	if n == 0 {
		return r3.Vec{Z: 1}
	}
	return r3.Scale(1/math.Sqrt(n), v)
}
