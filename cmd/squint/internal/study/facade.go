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

// facadeClearM is the meter's distance from the glass.
const facadeClearM = 0.01

func (o *operation) facade(name string, rect system.Rect) *facade {
	if f := o.facades[name]; f != nil {
		return f
	}
	f := &facade{world: o.open, at: rect.Point(rect.WidthM/2, rect.HeightM/2, facadeClearM), outward: rect.Outward}
	frame := materials.NewFrame(rect.Outward)
	for i := range facadeRays {
		// A spiral even over the disc that the hemisphere is projected on.
		r := math.Sqrt((float64(i) + 0.5) / facadeRays)
		sin, cos := math.Sincos(2.399963229728653 * float64(i)) // the golden angle
		d := r3.Add(r3.Scale(r*cos, frame.T), r3.Add(r3.Scale(r*sin, frame.B), r3.Scale(math.Sqrt(1-r*r), rect.Outward)))
		if d.Z > 0 && !f.world.Blocked(f.at, d, math.Inf(1)) {
			f.sky = append(f.sky, d)
		} else {
			f.ground += 1.0 / facadeRays
		}
	}
	o.facades[name] = f
	return f
}

// irradiance is that of the opening's plane, W/m2. What stands before the
// facade counts as ground, and shades the sun.
func (f *facade) irradiance(m *scene.Moment) float64 {
	e := 0.0
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
	return e + f.world.Scene.GroundReflectance[m.Month]*f.ground*(m.DHI+m.DNI*math.Max(0, m.Sun.Z))
}

// sunThrough is the share of the sun's middle ray that arrives at p.
func sunThrough(w *trace.World, p, sun r3.Vec) float64 {
	return w.Transmittance(p, sun, math.Inf(1))
}
