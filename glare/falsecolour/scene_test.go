package falsecolour

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// office is a made-up fisheye picture, n pixels each way, of a room 6 m wide,
// 8 m deep and 3 m high with a window in the wall ahead, a desk, and the
// sun's patch on the floor, with noise of the given relative size. It is
// something to look at, no calculation of light.
func office(n int, noise float64) Figure {
	v := view.View{Direction: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Projection: view.Equidistant, FOVRad: math.Pi, Width: n, Height: n}
	f := Figure{
		Width: n, Height: n, Values: make([]float32, n*n), Inside: make([]bool, n*n), Round: true,
		Title: "Desk 7, looking south",
		Caption: []string{
			"21 March, 10:00, clear sky (turbidity 3), blinds up. Glare is noticeable: DGP 0.38 \u00b1 0.01, at the eye 2\u2009450 \u00b1 30 lx.",
			"Numbered outlines: glare sources, brightest first, above 2\u2009000 cd/m\u00b2. Lines: equal luminance, cd/m\u00b2.",
		},
		Contours: []float64{100, 500}, Map: Inferno,
	}
	rng := rand.New(rand.NewPCG(5, 6))
	sun := r3.Unit(r3.Vec{X: 1, Y: 0.35, Z: 0.55})
	for i := range f.Values {
		d, ok := v.LocalPixelRay(i%n, i/n)
		if f.Inside[i] = ok; !ok {
			continue
		}
		l := room(d, sun)
		f.Values[i] = float32(l * (1 + noise*(2*rng.Float64()-1)))
	}
	bright := Mark{Rank: 1}
	for i, l := range f.Values {
		if l > 2000 {
			bright.Pixels = append(bright.Pixels, int32(i))
		}
	}
	px, py, _ := v.LocalProject(sun)
	f.Marks = []Mark{bright, {X: px, Y: py, RadiusPx: 0.533 / 2 / 180 * float64(n), Rank: 2}}
	down, _, _ := v.LocalProject(r3.Vec{X: 1, Z: -0.9})
	f.Points = []Point{{X: down, Y: float64(n) * 0.73}, {X: float64(n) * 0.12, Y: float64(n) / 2}, {X: float64(n) * 0.5, Y: float64(n) * 0.1}}
	f.Scale = FitScale("Luminance", "cd/m2", true, f.Values)
	return f
}

// room is the luminance in a direction from an eye 1.2 m high, 3 m from the
// window wall.
func room(d, sun r3.Vec) float64 {
	const ahead, half, up, down = 3.0, 3.0, 1.8, -1.2
	t := math.Inf(1)
	base := 0.0
	hit := func(s, l float64) {
		if s > 0 && s < t {
			t, base = s, l
		}
	}
	hit(ahead/d.X, 60)
	hit(half/d.Y, 120)
	hit(-half/d.Y, 120)
	hit(up/d.Z, 180)
	hit(down/d.Z, 45)
	p := r3.Scale(t, d)
	if base == 60 { // window wall: sill at 0.9 m, head at 2.7 m, two panes
		if y := math.Abs(p.Y); y > 0.06 && y < 2.2 && p.Z > -0.3 && p.Z < 1.5 {
			if d.Z < 0 {
				return 1800
			}
			return 3000 + 9000*math.Exp(-6*math.Acos(math.Min(1, r3.Dot(d, sun)))) - 800*d.Z
		}
	}
	// Desk: 0.75 m high, between 0.3 and 1.1 m ahead.
	if s := -0.45 / d.Z; s > 0 && s < t && s*d.X > 0.2 && s*d.X < 1.1 && math.Abs(s*d.Y) < 0.8 {
		q := r3.Scale(s, d)
		if math.Abs(q.Y) < 0.2 && q.X < 0.55 {
			return 420 // paper
		}
		return 160
	}
	if base == 45 && p.X > 0.6 && p.X < 2.2 && p.Y < -0.2 && p.Y > -1.9 {
		return 2600 // the sun's patch
	}
	return base * (0.4 + 1.6*math.Exp(-math.Hypot(p.X-ahead, p.Z)/3))
}
