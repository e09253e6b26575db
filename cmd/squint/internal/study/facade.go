package study

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/system"
	"squint/trace"
)

// facade is a point on the plane of an opening outdoors, as a meter there sees
// the sun, the sky and the ground.
type facade struct {
	world   *trace.World
	at      r3.Vec
	outward r3.Vec
	sky     []r3.Vec // directions spread by the cosine that meet the sky
	ground  float64  // share of the directions that meet the ground or a building
}

// facadeRays is the number of directions; own choice. The irradiance that they
// give is compared with a threshold, not reported.
const facadeRays = 256

// facadeClearM is the meter's distance from the glass; own choice.
const facadeClearM = 0.01

// goldenAngle is pi (3 - sqrt 5), rad.
const goldenAngle = 2.399963229728653

func (o *operation) facade(name string, rect system.Rect) *facade {
	if f := o.facades[name]; f != nil {
		return f
	}
	f := &facade{world: o.open, at: rect.Point(rect.WidthM/2, rect.HeightM/2, facadeClearM), outward: rect.Outward}
	frame := materials.NewFrame(rect.Outward)
	for i := range facadeRays {
		// A spiral even over the disc that the hemisphere is projected on, turning
		// by the golden angle. Source: Vogel 1979, A better way to construct the
		// sunflower head, Mathematical Biosciences 44, from memory.
		r := math.Sqrt((float64(i) + 0.5) / facadeRays)
		sin, cos := math.Sincos(goldenAngle * float64(i))
		d := r3.Add(r3.Scale(r*cos, frame.T), r3.Add(r3.Scale(r*sin, frame.B), r3.Scale(math.Sqrt(1-r*r), rect.Outward)))
		if d.Z > 0 && !hidden(f.world, d) && !f.world.Blocked(f.at, d, math.Inf(1)) {
			f.sky = append(f.sky, d)
		} else {
			f.ground += 1.0 / facadeRays
		}
	}
	o.facades[name] = f
	return f
}

// irradiance is that of the opening's plane, W/m2. What stands before the
// facade counts as ground, lit as openly as that, and shades the sun; so does
// the land up to the horizon line. Own choices: the isotropic ground of common
// practice, the sky's luminances in their ratio to the diffuse illuminance.
func (f *facade) irradiance(m *scene.Moment) float64 {
	e := 0.0
	beam := m.DNI * math.Max(0, m.Sun.Z) // on the ground
	if hidden(f.world, m.Sun) {
		beam = 0
	}
	if cos := r3.Dot(f.outward, m.Sun); cos > 0 && m.DNI > 0 && m.Sun.Z > 0 {
		e += m.DNI * cos * sunThrough(f.world, f.at, m.Sun)
	}
	if m.DiffuseLx > 0 {
		sum := 0.0
		for _, d := range f.sky {
			sum += m.Sky.Luminance(d)
		}
		e += math.Pi * sum / facadeRays * m.DHI / m.DiffuseLx
	}
	return e + f.world.Scene.GroundReflectance[m.Month]*f.ground*(m.DHI+beam)
}

// hidden is whether the project's horizon line covers a direction.
func hidden(w *trace.World, d r3.Vec) bool {
	return w.Scene.HasHorizon && w.Scene.Horizon.Hides(d)
}

// sunThrough is the share of the sun's middle ray that arrives at p.
func sunThrough(w *trace.World, p, sun r3.Vec) float64 {
	if hidden(w, sun) {
		return 0
	}
	return w.Transmittance(p, sun, math.Inf(1))
}
