package coeff

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/surface"
)

// open is a scene with one level square of 2 m at the height z, reflectance
// rho, and nothing else.
func open(t testing.TB, z, rho float64) *surface.Transport {
	b, err := materials.NewMatte(rho)
	if err != nil {
		t.Fatal(err)
	}
	v := func(x, y float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }
	s := &scene.Scene{
		Project:  &project.Project{File: "test"},
		Finishes: []scene.Finish{{Name: "board", BSDF: b}},
		Parts:    []scene.Part{{Name: "board", Opening: -1, TexelM: .2}},
		Triangles: []scene.Triangle{
			{V: [3]r3.Vec{v(-1, -1), v(1, -1), v(1, 1)}},
			{V: [3]r3.Vec{v(-1, -1), v(1, 1), v(-1, 1)}},
		},
	}
	w := trace.Accelerate(s, 1)
	return surface.NewTransport(w, sky.NewPatches(1), surface.Config{Batches: 8, Samples: 256, Seed: 1, Workers: 1})
}

// TestEyeWeights: in every batch and pixel the weights of what is met sum to
// 1: a path neither gains nor loses where nothing absorbs, and a matte surface
// weighs rho/pi for each lux.
func TestEyeWeights(t *testing.T) {
	const rho = .6
	tr := open(t, .5, rho)
	e, err := TraceEye(tr, scene.Viewpoint{Position: r3.Vec{X: .1, Y: -.2, Z: 1.3}, Direction: r3.Unit(r3.Vec{X: .3, Y: 1, Z: -.4})}, 0,
		EyeConfig{Pixels: 32, SamplesPerPixel: 16, Batches: 8, Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	var seen, board, below, up, wrong int
	var lost, whole float64
	for b := range e.Batches {
		eb := &e.Batches[b]
		for p := range e.Inside {
			sum := float64(eb.Below[p])
			for _, s := range eb.SurfacesOf(p) {
				sum += float64(s.Weight) * math.Pi / rho
				seen++
				if d := math.Abs(float64(s.Point[2]) - .5); d > 1e-4 {
					t.Fatalf("pixel %d: a point on the board lies at z %g, want 0.5", p, s.Point[2])
				}
			}
			for _, x := range eb.ExitsOf(p) {
				sum += float64(x.Weight)
				if x.Dir.Z <= 0 {
					t.Fatalf("pixel %d: a direction to the sky points down: %v", p, x.Dir)
				}
			}
			// Sums of two float32.
			if math.Abs(sum-1) > 1e-5 {
				wrong++
				if wrong == 1 {
					t.Errorf("batch %d, pixel %d (solid angle %.2g of a whole one's): weights sum to %.7f, want 1", b, p, share(e, p), sum)
				}
				lost += (1 - sum) * share(e, p) / float64(len(e.Batches))
			}
			whole += share(e, p) / float64(len(e.Batches))
		}
	}
	if wrong > 0 {
		t.Errorf("%d of %d pixels x batches have weights that do not sum to 1; %.2g of the view's solid angle is dark by that", wrong, len(e.Inside)*len(e.Batches), lost/whole)
	}
	for _, s := range e.Seen {
		switch s.Part {
		case 0:
			board++
		case GroundSeen:
			below++
		case SkySeen:
			up++
		}
	}
	if seen == 0 || board == 0 || below == 0 || up == 0 || board+below+up != len(e.Inside) {
		t.Errorf("got %d pixels of the board, %d of the ground and %d of the sky, want some of each and %d in all", board, below, up, len(e.Inside))
	}
}

// share is the solid angle of pixel p over that of the middle pixel: rim
// pixels lie in the image circle in part.
func share(e *Eye, p int) float64 {
	px := int(e.Inside[p])
	return e.View.SolidAngle(px%e.View.Width, px/e.View.Width) / e.View.SolidAngle(e.View.Width/2, e.View.Height/2)
}

// TestSensorWeights: under the open sky a level sensor's weight of each patch
// is the patch's projected solid angle (closed form of sky.Patches). Limit 5.0
// standard errors over 256 batches, for 145 patches and their sum.
func TestSensorWeights(t *testing.T) {
	const limit = 5.0
	tr := open(t, -3, .5)
	tr.Config.Batches = 256
	patches := sky.NewPatches(1)
	var found trace.Found
	g, _ := TraceSensor(tr, scene.Sensor{Position: r3.Vec{}, Normal: r3.Vec{Z: 1}}, 0, 256*256, 1, patches, &found)
	sum, square := make([]float64, patches.Count()), make([]float64, patches.Count())
	var total float64
	for b := range g {
		if g[b].Below != 0 || len(g[b].Links) != 0 {
			t.Fatalf("batch %d: a level sensor sees what is below it", b)
		}
		for _, p := range g[b].Patches {
			sum[p.Side] += float64(p.W)
			square[p.Side] += float64(p.W) * float64(p.W)
			total += float64(p.W)
		}
	}
	n := float64(len(g))
	power := false
	for p := range sum {
		mean := sum[p] / n
		se := math.Sqrt((square[p]/n - mean*mean) / (n - 1))
		want := patches.ProjectedSolidAngle(p)
		if math.Abs(mean-want) > limit*se {
			t.Errorf("patch %d: got a weight of %.5f sr, want %.5f (projected solid angle) within %g x %.2g", p, mean, want, limit, se)
		}
		power = power || math.Abs(1.2*mean-want) > limit*se
	}
	if total /= n; math.Abs(total-math.Pi) > 1e-4 {
		t.Errorf("all patches: got %.6f sr, want pi: cosine-distributed rays all weigh the same", total)
	}
	if !power {
		t.Error("twin: weights larger by 20 % were not rejected")
	}
}

// TestLookingDown: a sensor that looks down sees the board below it under the view
// factor of 08a's closed form, and the ground under the rest.
// Want: 4 x dA to a parallel rectangle over its corner, X = Y = 1: 4 x 0.138531606
// (Siegel & Howell, reference 8.1).
func TestLookingDown(t *testing.T) {
	const want = 4 * 0.138531606 * math.Pi
	tr := open(t, -1, .5)
	tr.Config.Batches = 256
	var found trace.Found
	g, _ := TraceSensor(tr, scene.Sensor{Normal: r3.Vec{Z: -1}}, 0, 256*256, 2, sky.NewPatches(1), &found)
	var sum, square, below float64
	for b := range g {
		var w float64
		for _, l := range g[b].Links {
			w += float64(l.W) / .5 * math.Pi // W is rho/pi x solid angle
		}
		sum, square, below = sum+w, square+w*w, below+float64(g[b].Below)
	}
	n := float64(len(g))
	mean := sum / n
	se := math.Sqrt((square/n - mean*mean) / (n - 1))
	if math.Abs(mean-want) > 4*se {
		t.Errorf("board: got %.5f sr, want %.5f within 4 x %.2g", mean, want, se)
	}
	if rest := below / n; math.Abs(mean+rest-math.Pi) > 1e-4 {
		t.Errorf("board and ground: got %.5f sr, want pi", mean+rest)
	}
	if math.Abs(1.03*mean-want) <= 4*se {
		t.Error("twin: a weight larger by 3 % was not rejected")
	}
}

func BenchmarkTraceEye(b *testing.B) {
	tr := open(b, .5, .5)
	v := scene.Viewpoint{Position: r3.Vec{Z: 1.3}, Direction: r3.Vec{Y: 1}}
	for b.Loop() {
		if _, err := TraceEye(tr, v, 0, EyeConfig{Pixels: 64, SamplesPerPixel: 16, Batches: 8, Seed: 1}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkTraceSensor(b *testing.B) {
	tr := open(b, -1, .5)
	var found trace.Found
	fine := sky.NewPatches(2)
	for b.Loop() {
		TraceSensor(tr, scene.Sensor{Normal: r3.Vec{Z: 1}}, 0, 4096, 1, fine, &found)
	}
}
