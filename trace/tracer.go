package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
)

// Tracer is the plain path tracer: unbiased, without texels or patches, and
// slow. It answers for several moments at once, since where a path goes does
// not depend on the hour. Everything faster is tested against it.
//
// It finds the sun by aiming at it from every diffuse surface, so sun that
// reaches a diffuse surface by way of a mirror is not in its results, nor is
// the disc itself; both have estimators of their own.
//
// A Tracer serves one goroutine.
type Tracer struct {
	world   *World
	moments []*scene.Moment
	stack   []Found
	// Portals aims every second ray from a diffuse surface at the openings
	// (balance heuristic), where the surface sees any.
	Portals bool
	portals Portals
}

// NewTracer returns a tracer of some moments.
func NewTracer(w *World, moments []*scene.Moment) *Tracer {
	return &Tracer{world: w, moments: moments}
}

// Luminance adds to out[i], for moment i, one sample of the luminance (cd/m2)
// that arrives at org from unit dir, times weight.
// Source: Kajiya 1986, The rendering equation, SIGGRAPH; next event estimation
// after Shirley, Wang & Zimmerman 1996, Monte Carlo techniques for direct
// lighting calculations, ACM TOG 15(1).
func (t *Tracer) Luminance(org, dir r3.Vec, weight float64, s *sampling.Stream, out []float64) {
	t.follow(org, dir, weight, 1, 0, 1, s, out)
}

// follow adds what arrives from dir, times scale and throughput; roulette
// holds the throughput of what goes on near 1.
func (t *Tracer) follow(org, dir r3.Vec, scale, throughput float64, depth, split int, s *sampling.Stream, out []float64) {
	if depth >= len(t.stack) {
		t.stack = append(t.stack, Found{})
	}
	t.stack[depth].Reset()
	t.world.Walk(org, dir, 1, split, s, &t.stack[depth])
	for i := range t.stack[depth].Exits {
		x := t.stack[depth].Exits[i]
		t.exit(x.Dir, scale*throughput*x.Weight, out)
	}
	for i := range t.stack[depth].Shines {
		t.shine(t.stack[depth].Shines[i], scale*throughput, s, out)
	}
	for i := range t.stack[depth].Landings {
		t.land(t.stack[depth].Landings[i], scale, throughput, depth, s, out)
	}
}

func (t *Tracer) exit(dir r3.Vec, scale float64, out []float64) {
	sc := t.world.Scene
	hidden := t.hidden(dir)
	for k, m := range t.moments {
		if hidden {
			out[k] += scale * sc.GroundReflectance[m.Month] * m.GlobalLx / math.Pi
		} else {
			out[k] += scale * m.Sky.Luminance(dir)
		}
	}
}

// land adds what one diffuse surface sends along the path: the sun on it, and
// by one more ray all the rest.
func (t *Tracer) land(l Landing, scale, throughput float64, depth int, s *sampling.Stream, out []float64) {
	sc := t.world.Scene
	ground := sc.Parts[l.Hit.Part].Kind == scene.GroundPlane
	for _, side := range [2]materials.Side{l.Hit.Side, 1 - l.Hit.Side} {
		rho, tau := l.Hit.BSDF.Lambert(side)
		m := rho
		if side != l.Hit.Side {
			m = tau
		}
		if m <= 0 {
			continue
		}
		n := l.Hit.Normal
		if side == materials.Back {
			n = r3.Scale(-1, n)
		}
		if ground {
			// One reflectance for all moments: groups of moments share it.
			m = sc.GroundReflectance[t.moments[0].Month]
			if m <= 0 {
				continue
			}
		}
		p := t.world.Offset(l.Hit.Point, n)
		t.sun(p, n, scale*throughput*l.Weight*m/math.Pi, s, out)
		// Roulette before the direction is drawn: a ray aimed at an opening has
		// little weight and must still be let see the sky.
		next := throughput * l.Weight * m
		keep := math.Min(0.95, next)
		if keep <= 0 || s.Float64() >= keep {
			continue
		}
		if dir, over := t.scatter(p, n, s); over > 0 {
			t.follow(p, dir, scale, next/keep*over, depth+1, 0, s, out)
		}
	}
}

// scatter draws a direction from a diffuse surface; over is the cosine density
// over the density drawn from.
func (t *Tracer) scatter(p, n r3.Vec, s *sampling.Stream) (dir r3.Vec, over float64) {
	if t.Portals {
		t.world.seePortals(p, n, nil, &t.portals)
	}
	if !t.Portals || t.portals.Empty() {
		return CosineDirection(n, s.Float64(), s.Float64()), 1
	}
	if s.Float64() < 0.5 {
		dir = CosineDirection(n, s.Float64(), s.Float64())
	} else {
		dir = t.portals.Sample(p, s.Float64(), s.Float64())
	}
	cos := r3.Dot(dir, n)
	if cos <= 0 {
		return dir, 0
	}
	return dir, cos / math.Pi / (0.5*cos/math.Pi + 0.5*t.portals.PDF(p, dir))
}

// shine adds what a glossy surface shows of the sun.
func (t *Tracer) shine(x Shine, scale float64, s *sampling.Stream, out []float64) {
	g := x.Hit.BSDF.Gloss(x.Hit.Side)
	facing := x.Hit.Facing()
	p := t.world.Offset(x.Hit.Point, facing)
	for k, m := range t.moments {
		if m.SunNormalLx <= 0 {
			continue
		}
		dir := ConeDirection(m.Sun, photometry.SunDiameterRad/2, s.Float64(), s.Float64())
		f := Shining(g, facing, x.Wo, dir)
		if f <= 0 || t.hidden(dir) {
			continue
		}
		out[k] += scale * x.Weight * f * m.SunNormalLx * t.world.Transmittance(p, dir, math.Inf(1))
	}
}

func (t *Tracer) hidden(dir r3.Vec) bool {
	sc := t.world.Scene
	return dir.Z <= 0 || (sc.HasHorizon && sc.Horizon.Hides(dir))
}

// sun adds weight times the direct sun on the plane n at p, one ray a moment.
func (t *Tracer) sun(p, n r3.Vec, weight float64, s *sampling.Stream, out []float64) {
	for k, m := range t.moments {
		if m.SunNormalLx <= 0 || r3.Dot(n, m.Sun) <= -0.01 {
			continue
		}
		dir := ConeDirection(m.Sun, photometry.SunDiameterRad/2, s.Float64(), s.Float64())
		cos := r3.Dot(n, dir)
		if cos <= 0 || t.hidden(dir) {
			continue
		}
		if tr := t.world.Transmittance(p, dir, math.Inf(1)); tr > 0 {
			out[k] += weight * m.SunNormalLx * cos * tr
		}
	}
}

// Illuminance adds to out[i] one sample of the illuminance (lx) at p on the
// plane with unit normal n, direct sun included.
func (t *Tracer) Illuminance(p, n r3.Vec, s *sampling.Stream, out []float64) {
	t.sun(p, n, 1, s, out)
	if dir, over := t.scatter(p, n, s); over > 0 {
		t.follow(t.world.Offset(p, n), dir, math.Pi, over, 0, 0, s, out)
	}
}
