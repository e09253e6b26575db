package coeff

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/surface"
)

// Eye is a viewpoint's fisheye with everything its samples met.
type Eye struct {
	View view.View
	// Inside lists the pixels (row-major index) within the image circle;
	// pixel numbers below are positions in this list.
	Inside []int32
	// Seen says, by pixel, what its first sample ended on.
	Seen    []Seen
	Batches []EyeBatch
	// Mirrors are the facets that may show the sun, for trace.World.Images.
	Mirrors []int32
}

// Seen names what stands in a pixel, for the reasons given with glare.
type Seen struct {
	// Part ended on; SkySeen or GroundSeen where the path left the scene.
	Part int32
	// Via is the part of the first pane or cloth looked through, -1 for none.
	Via      int32
	Mirrored bool
}

// What Seen.Part holds when the path left the scene.
const (
	SkySeen    int32 = -1
	GroundSeen int32 = -2
)

// EyeBatch holds one batch's samples, pixel after pixel: those of pixel p are
// start[p] up to start[p+1].
type EyeBatch struct {
	surfaceStart []int32
	Surfaces     []SurfaceSample
	exitStart    []int32
	Exits        []ExitSample
	shineStart   []int32
	Shines       []ShineSample
	Below        []float32 // by pixel: weight of the endless ground
}

// SurfaceSample is a point on a diffuse surface. Weight times illuminance on
// that side of the surface is luminance in the pixel; on the ground plane it
// must be multiplied by the month's reflectance as well.
type SurfaceSample struct {
	Side   int32 // dense index of the texel side; set by Bind
	Weight float32
	Point  [3]float32
	Normal [3]float32
	Ground bool
}

// ShineSample is a point on a glossy surface, which shows the sun as far as
// its lobe is wide.
type ShineSample struct {
	Point, Facing, Wo r3.Vec
	Gloss             *materials.Gloss
	Weight            float32
}

// Shines turns the glossy surfaces that paths met into samples.
func Shines(w *trace.World, f *trace.Found, scale float64, out []ShineSample) []ShineSample {
	for i := range f.Shines {
		x := &f.Shines[i]
		facing := x.Hit.Facing()
		out = append(out, ShineSample{
			Point: w.Offset(x.Hit.Point, facing), Facing: facing, Wo: x.Wo,
			Gloss: x.Hit.BSDF.Gloss(x.Hit.Side), Weight: float32(x.Weight * scale),
		})
	}
	return out
}

// ExitSample is a direction to the sky.
type ExitSample struct {
	Dir    r3.Vec
	Weight float32
}

// EyeConfig sets a view's resolution.
type EyeConfig struct {
	Pixels          int // across the fisheye
	SamplesPerPixel int // over all batches
	Batches         int
	Seed            uint64
}

// streamEye keeps the random streams of views apart from others.
const (
	streamEye    = 11
	streamSensor = 12
)

// eyeSplit is the number of panes behind which both the transmitted and the
// mirrored way are followed.
const eyeSplit = 1

// rimTries bounds the search for a point of a rim pixel inside the circle: a
// pixel of which a hundredth is inside is missed with a chance of 1e-9.
const rimTries = 2000

// TraceEye traces the equidistant hemispherical fisheye of a viewpoint. index
// numbers the viewpoint for its random streams.
func TraceEye(t *surface.Transport, v scene.Viewpoint, index int, cfg EyeConfig) (*Eye, error) {
	up := r3.Vec{Z: 1}
	if math.Abs(v.Direction.Z) > 0.999 {
		up = r3.Vec{Y: 1}
	}
	vw, err := view.New(v.Position, v.Direction, up, view.Equidistant, math.Pi, cfg.Pixels, cfg.Pixels)
	if err != nil {
		return nil, err
	}
	e := &Eye{View: vw, Batches: make([]EyeBatch, cfg.Batches), Mirrors: t.World.MirrorsFrom(v.Position)}
	for iy := range cfg.Pixels {
		for ix := range cfg.Pixels {
			if vw.SolidAngle(ix, iy) > 0 {
				e.Inside = append(e.Inside, int32(iy*cfg.Pixels+ix))
			}
		}
	}
	e.Seen = make([]Seen, len(e.Inside))
	per := max(cfg.SamplesPerPixel/cfg.Batches, 1)
	var found trace.Found
	for b := range e.Batches {
		eb := &e.Batches[b]
		eb.surfaceStart = []int32{0}
		eb.exitStart = []int32{0}
		eb.shineStart = []int32{0}
		eb.Below = make([]float32, len(e.Inside))
		for p, px := range e.Inside {
			// One scrambled sequence a pixel, its points dealt out to the batches.
			seed := sampling.Stream4(cfg.Seed, streamEye, uint64(index), uint64(px))
			scramble := seed.Uint32()
			s := sampling.NewStream(cfg.Seed, streamEye, uint64(index), uint64(px), uint64(b)+1)
			found.Reset()
			n := 0
			for k := range per {
				u, w := sampling.OwenSobol2(uint32(b*per+k), scramble)
				dir, ok := vw.Ray(float64(int(px)%cfg.Pixels)+u, float64(int(px)/cfg.Pixels)+w)
				// A pixel on the rim is the part of it inside the circle.
				for try := 0; !ok && try < rimTries; try++ {
					dir, ok = vw.Ray(float64(int(px)%cfg.Pixels)+s.Float64(), float64(int(px)/cfg.Pixels)+s.Float64())
				}
				if !ok {
					continue
				}
				n++
				t.World.Walk(v.Position, dir, 1, eyeSplit, &s, &found)
			}
			if n > 0 {
				e.add(t, b, p, &found, 1/float64(n))
				eb.Shines = Shines(t.World, &found, 1/float64(n), eb.Shines)
			}
			eb.shineStart = append(eb.shineStart, int32(len(eb.Shines)))
			eb.surfaceStart = append(eb.surfaceStart, int32(len(eb.Surfaces)))
			eb.exitStart = append(eb.exitStart, int32(len(eb.Exits)))
		}
	}
	return e, nil
}

// add files what the samples of pixel p in batch b met.
func (e *Eye) add(t *surface.Transport, b, p int, f *trace.Found, scale float64) {
	eb := &e.Batches[b]
	heaviest := 0.0
	for i := range f.Landings {
		l := &f.Landings[i]
		if b == 0 && l.Weight > heaviest {
			heaviest = l.Weight
			e.Seen[p] = Seen{Part: l.Hit.Part, Via: l.Via, Mirrored: l.Mirrored}
		}
		ground := t.World.Scene.Parts[l.Hit.Part].Kind == scene.GroundPlane
		for _, side := range []materials.Side{l.Hit.Side, 1 - l.Hit.Side} {
			rho, tau := l.Hit.BSDF.Lambert(side)
			m := rho
			if side != l.Hit.Side {
				m = tau
			}
			if m <= 0 {
				continue
			}
			if ground {
				m = 1
			}
			n := l.Hit.Normal
			if side == materials.Back {
				n = r3.Scale(-1, n)
			}
			h := l.Hit
			h.Side = side
			eb.Surfaces = append(eb.Surfaces, SurfaceSample{
				Side:   t.SideAt(&h),
				Weight: float32(l.Weight * m / math.Pi * scale),
				Point:  f32(t.World.Offset(l.Hit.Point, n)),
				Normal: f32(n),
				Ground: ground,
			})
		}
	}
	for i := range f.Exits {
		x := &f.Exits[i]
		below := t.Hidden(x.Dir)
		if b == 0 && x.Weight > heaviest {
			heaviest = x.Weight
			e.Seen[p] = Seen{Part: SkySeen, Via: x.Via, Mirrored: x.Mirrored}
			if below {
				e.Seen[p].Part = GroundSeen
			}
		}
		if below {
			eb.Below[p] += float32(x.Weight * scale)
			continue
		}
		eb.Exits = append(eb.Exits, ExitSample{Dir: x.Dir, Weight: float32(x.Weight * scale)})
	}
}

// Sides lists the texel sides that the eye reads, for Transport.Activate.
func (e *Eye) Sides() []int32 {
	var out []int32
	for b := range e.Batches {
		for i := range e.Batches[b].Surfaces {
			out = append(out, e.Batches[b].Surfaces[i].Side)
		}
	}
	return out
}

// Bind rewrites texel sides to the dense indices of a traced transport.
func (e *Eye) Bind(t *surface.Transport) {
	for b := range e.Batches {
		for i := range e.Batches[b].Surfaces {
			s := &e.Batches[b].Surfaces[i]
			s.Side = t.Index(s.Side)
		}
	}
}

// SurfacesOf are the surface samples of pixel p.
func (b *EyeBatch) SurfacesOf(p int) []SurfaceSample {
	return b.Surfaces[b.surfaceStart[p]:b.surfaceStart[p+1]]
}

// ExitsOf are the sky samples of pixel p.
func (b *EyeBatch) ExitsOf(p int) []ExitSample {
	return b.Exits[b.exitStart[p]:b.exitStart[p+1]]
}

// ShinesOf are the glossy samples of pixel p.
func (b *EyeBatch) ShinesOf(p int) []ShineSample {
	return b.Shines[b.shineStart[p]:b.shineStart[p+1]]
}

func f32(v r3.Vec) [3]float32 { return [3]float32{float32(v.X), float32(v.Y), float32(v.Z)} }
