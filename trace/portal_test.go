package trace_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// lit sums what a gather found: the sky where it left, and a light of its own
// on every surface, so that all directions count and not the window's alone.
func lit(f *trace.Found, m *scene.Moment) float64 {
	var e float64
	for _, x := range f.Exits {
		if x.Dir.Z > 0 {
			e += x.Weight * m.Sky.Luminance(x.Dir)
		}
	}
	for i := range f.Landings {
		p := f.Landings[i].Hit.Point
		e += f.Landings[i].Weight * .05 * (1 + math.Sin(3*p.X+2*p.Y+p.Z))
	}
	return e
}

func gathered(w *trace.World, sn scene.Sensor, ps trace.Portals, m *scene.Moment, seed uint64, n int) tally {
	var a tally
	var found trace.Found
	for k := range n {
		s := sampling.Stream3(seed, 1, uint64(k))
		found.Reset()
		w.Gather(sn.Position, sn.Normal, &ps, 16, 16, &s, &found)
		a.add(lit(&found, m))
	}
	return a
}

// TestPortalsKeepTheMean: a gather with portals and one without estimate the
// same illuminance, wherever the portals are; right ones lower the variance,
// wrong ones may raise it. The limit is 3.6 standard errors of the difference:
// 0.01 for 4 sensors x 6 sets of portals (Sidak 1967: 3.53).
func TestPortalsKeepTheMean(t *testing.T) {
	const limit = 3.6 // two-sided, 1-(1-.01)^(1/24): 3.53
	n := 4000
	if testing.Short() {
		n = 800
	}
	m := moment(t, 12, 0)
	sensors := []scene.Sensor{
		{Position: vec(2, 1, .8), Normal: vec(0, 0, 1)}, {Position: vec(2, 6, .8), Normal: vec(0, 0, 1)},
		{Position: vec(2, 4, 1.2), Normal: vec(0, -1, 0)}, {Position: vec(1, 5, 1.6), Normal: r3.Unit(vec(.2, -.5, -.4))},
	}
	window := func(r *room) { r.opening(vec(3, 0, 1), vec(-2, 0, 0), vec(0, 0, 1.2)) }
	cases := []struct {
		name    string
		portals func(r *room)
	}{
		{"the window", window},
		{"half the window", func(r *room) { r.opening(vec(3, 0, 1), vec(-1, 0, 0), vec(0, 0, 1.2)) }},
		{"wider than the window", func(r *room) { r.opening(vec(4, 0, 0), vec(-4, 0, 0), vec(0, 0, 3)) }},
		{"a blind wall", func(r *room) { r.opening(vec(0, 8, 0), vec(4, 0, 0), vec(0, 0, 3)) }},
		{"in mid-air", func(r *room) { r.opening(vec(3.5, 3, 2.2), vec(-3, 0, 0), vec(0, 0, .7)) }},
		{"two that overlap, one blind", func(r *room) {
			window(r)
			r.opening(vec(2.5, -.1, 1), vec(-2, 0, 0), vec(0, 0, 1))
			r.opening(vec(0, 6, 0), vec(0, -4, 0), vec(0, 0, 3))
		}},
	}
	detected := false
	for c, x := range cases {
		r := newRoom(t)
		r.shell(r.matte(.5))
		x.portals(r)
		w := r.world()
		for i, sn := range sensors {
			ps := w.PortalsSeen(sn.Position, sn.Normal)
			a := gathered(w, sn, ps, m, uint64(100*c+i), n)
			b := gathered(w, sn, trace.Portals{}, m, uint64(100*c+i+50), n)
			se := math.Hypot(a.stdErr(), b.stdErr())
			z := (a.mean() - b.mean()) / se
			t.Logf("%-28s sensor %d: with %.4f, without %.4f, z %+.2f, variance x %.2f (portals used: %v)", x.name, i+1, a.mean(), b.mean(), z, a.variance()/b.variance(), !ps.Empty())
			if !(math.Abs(z) <= limit) {
				t.Errorf("%s, sensor %d: got %.5f with portals, want %.5f (without) within %g x %.3g", x.name, i+1, a.mean(), b.mean(), limit, se)
			}
			if x.name == "the window" && i == 1 && !(a.variance() < .5*b.variance()) {
				t.Errorf("%s, sensor %d: the variance with portals is %.2f times that without, want under 0.5", x.name, i+1, a.variance()/b.variance())
			}
			detected = detected || math.Abs(1.05*a.mean()-b.mean()) > limit*se
		}
	}
	if !detected {
		t.Error("twin: values larger by 5 % were never rejected: the test has no power")
	}
}

// TestPortalDensity: PDF is the density of Sample. For random boxes of
// directions, the share of samples that fall there is the integral of PDF over
// them; all of it sums to 1. Limit 4.5 standard errors for 2 x 65 cases.
func TestPortalDensity(t *testing.T) {
	const limit, n, bins = 4.5, 200000, 8
	r := newRoom(t)
	r.shell(r.matte(.5))
	r.opening(vec(3, 0, 1), vec(-2, 0, 0), vec(0, 0, 1.2))
	r.opening(vec(1, 3, 3), vec(2, 0, 0), vec(0, -2, 0))
	w := r.world()
	for i, sn := range []scene.Sensor{{Position: vec(2, 5, .8), Normal: r3.Unit(vec(0, -.5, .5))}, {Position: vec(1, 2, .8), Normal: vec(0, 0, 1)}} {
		ps := w.PortalsSeen(sn.Position, sn.Normal)
		if ps.Empty() {
			t.Fatal("no portals seen")
		}
		bin := func(d r3.Vec) int {
			a := int((math.Atan2(d.X, -d.Y)/math.Pi + 1) / 2 * bins)
			b := int((d.Z + 1) / 2 * bins)
			return min(a, bins-1)*bins + min(b, bins-1)
		}
		var drawn, density [bins*bins + 1]tally
		s := sampling.Stream2(uint64(i), 7)
		for range n {
			d := ps.Sample(sn.Position, s.Float64(), s.Float64())
			u := sampling.UniformSphere(s.Float64(), s.Float64())
			f := 4 * math.Pi * ps.PDF(sn.Position, u)
			kd, ku := bin(d), bin(u)
			for k := range drawn {
				one, two := 0.0, 0.0
				if k == kd || k == bins*bins {
					one = 1
				}
				if k == ku || k == bins*bins {
					two = f
				}
				drawn[k].add(one)
				density[k].add(two)
			}
			if ps.PDF(sn.Position, d) <= 0 {
				t.Fatalf("sensor %d: density 0 at the sampled direction %v", i+1, d)
			}
		}
		for k := range drawn {
			se := math.Hypot(drawn[k].stdErr(), density[k].stdErr())
			if d := drawn[k].mean() - density[k].mean(); math.Abs(d) > limit*se+1e-12 {
				t.Errorf("sensor %d, bin %d: samples %.5f, integral of the density %.5f, want the same within %g x %.2g", i+1, k, drawn[k].mean(), density[k].mean(), limit, se)
			}
		}
	}
}

func BenchmarkGather(b *testing.B) {
	r := newRoom(b)
	r.shell(r.matte(.5))
	r.opening(vec(3, 0, 1), vec(-2, 0, 0), vec(0, 0, 1.2))
	w := r.world()
	p, n := vec(2, 5, .8), vec(0, 0, 1)
	ps := w.PortalsSeen(p, n)
	var found trace.Found
	s := sampling.Stream2(1, 1)
	for _, c := range []int{16, 256} {
		b.Run(fmt.Sprintf("rays=%d", 2*c), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				found.Reset()
				w.Gather(p, n, &ps, c, c, &s, &found)
			}
			b.ReportMetric(float64(b.N*2*c)/b.Elapsed().Seconds(), "rays/s")
		})
	}
}
