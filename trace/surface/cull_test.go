package surface

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
)

// suns are moments over a year's range of sun positions before the facade, of
// 50,000 lx on a plane facing the sun.
func suns(t testing.TB) []*scene.Moment {
	var out []*scene.Moment
	for i := range 24 {
		out = append(out, sunAt(t, i, 8+float64(i*29%56), -75+float64(i*47%150), 50000))
	}
	return out
}

// indoors reports whether the texel side's middle lies in the room's air.
func indoors(t *Transport, i int) bool {
	p, n := t.Texels.Sample(t.sides[i]/2, .5, .5, .5)
	if t.sides[i]&1 == 1 {
		n = r3.Scale(-1, n)
	}
	p = r3.Add(p, r3.Scale(1e-3, n))
	return p.X > 0 && p.X < 3.6 && p.Y > 0 && p.Y < 8.2 && p.Z > 0 && p.Z < 2.8
}

// sunFlux sums the direct sun on sides indoors and elsewhere, lm times batches.
func sunFlux(t *Transport, bl *Block) (in, out float64) {
	var light Light
	n := len(t.sides)
	light.Sun, light.Lit = make([]Row, n), make([]uint64, n)
	for b := range t.Config.Batches {
		t.sunOn(bl, b, &light)
		for i := range n {
			area := t.Texels.AreaM2(t.sides[i] / 2)
			var sum float64
			for h := range bl.Moments {
				sum += float64(light.Sun[i][h])
			}
			if indoors(t, i) {
				in += sum * area
			} else {
				out += sum * area
			}
		}
	}
	return in, out
}

// TestCullingKeepsTheSun: sides that see no sky near the sun are passed over
// (maySee). The same random rays without that show what is lost. It is judged
// indoors, where the eyes and sensors are.
func TestCullingKeepsTheSun(t *testing.T) {
	const most = 2e-3 // of the sun's flux indoors: well under the engine's own noise
	for _, c := range []struct {
		name    string
		slats   bool
		samples int
	}{{"open window", false, 256}, {"slats", true, 256}, {"slats, few rays", true, 64}} {
		if testing.Short() && c.samples > 64 {
			continue
		}
		tr := everySide(t, facadeRoom(t, .25, c.slats).world(), Config{Batches: 8, Samples: c.samples, Seed: 1, Workers: 1})
		bl := tr.NewBlock(suns(t), nil)
		in, out := sunFlux(tr, bl)
		near := tr.near
		for i := range tr.near.looksUp {
			tr.near.looksUp[i] = true
		}
		tr.near.sees = make([]uint64, len(near.sees))
		for k := range tr.near.sees {
			tr.near.sees[k] = ^uint64(0)
		}
		allIn, allOut := sunFlux(tr, bl)
		lost := 1 - in/allIn
		t.Logf("%s, %d rays a side: culling loses %.2g of the sun's flux indoors, %.2g elsewhere", c.name, c.samples, lost, 1-out/allOut)
		if c.samples == 256 && !(lost <= most) {
			t.Errorf("%s: culling loses %.3g of the sun's flux indoors, want at most %g", c.name, lost, most)
		}
		// Twin: sides that see one patch of sky only, and forget their neighbours.
		for k := range tr.near.sees {
			tr.near.sees[k] &= 0x8888888888888888
		}
		if in, _ := sunFlux(tr, bl); 1-in/allIn <= most {
			t.Errorf("%s: twin: three of four patches forgotten lose only %g", c.name, 1-in/allIn)
		}
	}
}

// TestLitNearKeepsTheSun: views look for the sun only on sides where, or next
// to where, a batch found it. Points drawn on sides indoors, weighed by area,
// show which share of the sunlight a view so passes over.
func TestLitNearKeepsTheSun(t *testing.T) {
	const most = 2e-3
	for _, slats := range []bool{false, true} {
		if testing.Short() && !slats {
			continue
		}
		tr := everySide(t, facadeRoom(t, .25, slats).world(), Config{Batches: 8, Samples: 256, Seed: 2, Workers: 1})
		bl := tr.NewBlock(suns(t), nil)
		lights := make([]Light, tr.Config.Batches)
		n := len(tr.sides)
		for b := range lights {
			lights[b].Sun, lights[b].Lit = make([]Row, n), make([]uint64, n)
			tr.sunOn(bl, b, &lights[b])
		}
		lit := tr.LitNear(lights)
		var all, missed float64
		s := sampling.NewStream(3, 1)
		for i, side := range tr.sides {
			if !indoors(tr, i) {
				continue
			}
			area := tr.Texels.AreaM2(side / 2)
			for h := range bl.Sun {
				p, nn := tr.Texels.Sample(side/2, s.Float64(), s.Float64(), s.Float64())
				if side&1 == 1 {
					nn = r3.Scale(-1, nn)
				}
				dir, ok := bl.Sun[h].Draw(s.Uint64())
				cos := r3.Dot(dir, nn)
				if !ok || cos <= 0 || tr.World.Blocked(tr.World.Offset(p, nn), dir, 1e3) {
					continue
				}
				all += area * cos
				if lit[i]&(1<<h) == 0 {
					missed += area * cos
				}
			}
		}
		t.Logf("slats %v: views pass over %.2g of the sunlight on surfaces indoors", slats, missed/all)
		if !(missed <= most*all) {
			t.Errorf("slats %v: views pass over %.3g of the sunlight on surfaces indoors, want at most %g", slats, missed/all, most)
		}
	}
}

// TestSunFluxOnTexels: the flux on all lit sides is what crosses the window:
// E_n times the window's area as the sun sees it, less what the wall's 0.3 m of
// depth keep out. Exact for a sun on the facade's normal plane, x being straight:
// the outer edge of the head and the inner edge of the sill bound the beam.
func TestSunFluxOnTexels(t *testing.T) {
	tr := everySide(t, facadeRoom(t, .25, false).world(), Config{Batches: 8, Samples: 64, Seed: 4, Workers: 1})
	const normal, altDeg = 50000.0, 30.0
	var same []*scene.Moment
	for i := range Width {
		same = append(same, sunAt(t, i, altDeg, 0, normal))
	}
	bl := tr.NewBlock(same, nil)
	var light Light
	n := len(tr.sides)
	light.Sun, light.Lit = make([]Row, n), make([]uint64, n)
	var sum, square float64
	var count int
	for b := range tr.Config.Batches {
		tr.sunOn(bl, b, &light)
		for h := range bl.Moments {
			var flux float64
			for i := range n {
				if indoors(tr, i) {
					flux += float64(light.Sun[i][h]) * tr.Texels.AreaM2(tr.sides[i]/2)
				}
			}
			sum += flux
			square += flux * flux
			count++
		}
	}
	mean := sum / float64(count)
	se := stdErr(sum, square, count)
	// Beam through the inner plane y = 0: from the sill's top at z = 0.9 to the
	// head's outer edge, lowered by 0.3 tan(alt).
	const tan30, cos30 = 0.5773502691896258, 0.8660254037844387
	height := 2.6 - 0.3*tan30 - 0.9
	want := normal * cos30 * 3.2 * height
	// Texels that lie in part under or in a wall (their middle decides what
	// counts as indoors) hold no more than a strip of one cell: the sun's patch
	// lies clear of the walls, y = 1.3 m and further.
	z := (mean - want) / se
	t.Logf("flux of the sun indoors: exact %.1f lm, ours %.1f, standard error %.1f, z %.2f", want, mean, se, z)
	if z > 4 || z < -4 {
		t.Errorf("flux of the sun indoors: got %.1f lm, want %.1f within 4 x %.2f", mean, want, se)
	}
	if d := .03 * want; d < 4*se {
		t.Errorf("twin: 3 %% of the flux, %.1f lm, is under 4 standard errors of %.1f", d, se)
	}
}
