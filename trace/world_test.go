package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// TestTransmittance: panes multiply, each once, whatever the ray crosses them
// by: also where it runs along the diagonal that the pane's two triangles
// share, and where the scene is so wide that float32 is coarse.
func TestTransmittance(t *testing.T) {
	for _, extent := range []float64{5, 400} {
		r := newRoom(t)
		g, err := materials.NewGlazing(.8, 1)
		glass := r.finish(g, err)
		p := r.part("panes")
		at := r3.Scale(extent-5, vec(.7, .7, 0))
		place := func(v r3.Vec) r3.Vec { return r3.Add(at, v) }
		r.rect(p, glass, place(vec(0, 0, 0)), vec(2, 0, 0), vec(0, 0, 2))
		r.rect(p, glass, place(vec(0, .012, 0)), vec(2, 0, 0), vec(0, 0, 2)) // 12 mm behind
		r.rect(r.part("wall"), r.matte(.5), place(vec(0, 3, 0)), vec(2, 0, 0), vec(0, 0, 1))
		w := r.world()
		s := sampling.Stream2(1, 3)
		bad := 0
		const n = 20000
		for i := range n {
			q := vec(2*s.Float64(), 0, 2*s.Float64())
			if i%2 == 0 {
				q.Z = q.X // on the diagonal
			}
			q = place(q)
			from := place(vec(4*s.Float64()-1, -.2-2*s.Float64(), 4*s.Float64()-1))
			d := r3.Unit(r3.Sub(q, from))
			// The second pane is met too unless the ray passes its edge.
			q2 := r3.Add(q, r3.Scale(.012/d.Y, d))
			q2 = r3.Sub(q2, at)
			if q2.X < .001 || q2.X > 1.999 || q2.Z < .001 || q2.Z > 1.999 || q.X-at.X < .001 || q.X-at.X > 1.999 {
				continue
			}
			one := g.Transmittance(d.Y)
			// The range ends 1 m behind the panes, before the wall.
			got := w.Transmittance(from, d, (r3.Norm(r3.Sub(q, from)) + 1))
			// float32 tells the incidence to 1e-7, times a slope below 20 near grazing.
			if math.Abs(got-one*one) > 1e-4 {
				bad++
				if bad < 4 {
					t.Errorf("extent %g, ray %d: got %.6f, want %.6f (two panes)", extent, i, got, one*one)
				}
			}
		}
		if bad > 0 {
			t.Errorf("extent %g: %d of %d rays do not cross each pane once", extent, bad, n)
		}
		mid := place(vec(1, -1, .5))
		if got := w.Transmittance(mid, vec(0, 1, 0), math.Inf(1)); got != 0 {
			t.Errorf("behind the wall: got %g, want 0", got)
		}
		if got := w.Transmittance(mid, vec(0, 1, 0), .5); got != 1 {
			t.Errorf("before the panes: got %g, want 1", got)
		}
	}
}

// TestSides: front is where the corners run counter-clockwise, and the hit
// lies on the ray.
func TestSides(t *testing.T) {
	r := newRoom(t)
	r.rect(r.part("a"), r.matte(.5), vec(0, 0, 1), vec(1, 0, 0), vec(0, 1, 0)) // front up
	w := r.world()
	for _, c := range []struct {
		z, dz float64
		side  materials.Side
	}{{3, -1, materials.Front}, {-1, 1, materials.Back}} {
		h, ok := w.Closest(vec(.3, .6, c.z), vec(0, 0, c.dz))
		if !ok || h.Side != c.side || math.Abs(h.T-2) > 1e-6 || math.Abs(h.Cos-1) > 1e-9 || math.Abs(h.Point.Z-1) > 1e-6 {
			t.Errorf("from z %g: got %+v, want side %v at distance 2", c.z, h, c.side)
		}
		if r3.Dot(h.Facing(), vec(0, 0, c.dz)) != -1 {
			t.Errorf("from z %g: Facing is %v, want against the ray", c.z, h.Facing())
		}
	}
}

// TestTracerFurnace: in a closed shell that lets tau through from luminance 1
// outside and reflects rho, the luminance is tau/(1-rho) everywhere (exact, L
// = tau + rho L). Limit 3.6 standard errors for 12 cases. The twin holds the same
// samples against a value 5 % off. With 40,000 samples one case (rho 0.2, point
// 3) stood at z = -3.61; the same stream's first 2,000,000 give 0.9993 +- 0.0004,
// so that was chance, and the number of samples was raised, not the seed changed.
func TestTracerFurnace(t *testing.T) {
	const limit = 3.6
	n := 160000
	if testing.Short() {
		n = 8000
	}
	for _, rho := range []float64{.2, .5, .7, .9} {
		r := newRoom(t)
		tau := 1 - rho
		d, err := materials.NewDiffuser(tau, rho)
		f := r.finish(d, err)
		r.shell(f)
		r.rect(r.part("window"), f, vec(1, 0, 1), vec(2, 0, 0), vec(0, 0, 1.2))
		r.s.GroundReflectance[0] = 1
		w := r.world()
		ms := []*scene.Moment{moment(t, 5, 0)}
		tr := trace.NewTracer(w, ms)
		power := false
		for i, p := range []r3.Vec{vec(2, 1, .8), vec(2, 6, .8), vec(.5, 4, 2.5)} {
			var a tally
			out := make([]float64, 1)
			for k := range n {
				s := sampling.Stream4(1, uint64(1000*rho), uint64(i), uint64(k))
				out[0] = 0
				tr.Illuminance(p, vec(0, 0, 1), &s, out)
				a.add(out[0] / math.Pi)
			}
			z := (a.mean() - 1) / a.stdErr()
			t.Logf("rho %.1f, point %d: want 1, got %.4f +- %.4f, z %+.2f", rho, i+1, a.mean(), a.stdErr(), z)
			if !(math.Abs(z) <= limit) {
				t.Errorf("rho %g, point %d: got luminance %.4f, want 1 within %g x %.4f", rho, i+1, a.mean(), limit, a.stdErr())
			}
			power = power || math.Abs(a.mean()*1.05-1) > limit*a.stdErr()
		}
		if !power {
			t.Errorf("rho %g: twin: values 5 %% larger were not rejected", rho)
		}
	}
}

func glazedRoom(b *testing.B) *trace.World {
	r := newRoom(b)
	r.shell(r.matte(.5))
	g, err := materials.NewGlazing(.8, 2)
	r.rect(r.part("pane"), r.finish(g, err), vec(1, 0, 1), vec(2, 0, 0), vec(0, 0, 1.2))
	slats, p := r.matte(.7), r.part("slats")
	for i := range 24 {
		r.rect(p, slats, vec(1, -.1, 1+.05*float64(i)), vec(2, 0, 0), vec(0, .04, .04))
	}
	return r.world()
}

// rays are random starts in the room with random directions.
func rays(n int) (org, dir []r3.Vec) {
	s := sampling.Stream2(1, 9)
	for range n {
		org = append(org, vec(4*s.Float64(), 8*s.Float64(), 3*s.Float64()))
		dir = append(dir, sampling.UniformSphere(s.Float64(), s.Float64()))
	}
	return org, dir
}

func BenchmarkClosest(b *testing.B) {
	w := glazedRoom(b)
	org, dir := rays(4096)
	i := 0
	for b.Loop() {
		w.Closest(org[i&4095], dir[i&4095])
		i++
	}
}

func BenchmarkTransmittance(b *testing.B) {
	w := glazedRoom(b)
	org, _ := rays(4096)
	sun := r3.Unit(vec(.2, -.8, .5))
	i := 0
	for b.Loop() {
		w.Transmittance(org[i&4095], sun, math.Inf(1))
		i++
	}
}

func BenchmarkTracer(b *testing.B) {
	w := glazedRoom(b)
	tr := trace.NewTracer(w, []*scene.Moment{moment(b, 12, 0)})
	out := make([]float64, 1)
	s := sampling.Stream2(1, 1)
	for b.Loop() {
		tr.Illuminance(vec(2, 5, .8), vec(0, 0, 1), &s, out)
	}
}
