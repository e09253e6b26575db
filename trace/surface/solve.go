package surface

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/sky"
	"squint/trace"
)

// Width is the number of moments solved together: one row of Width float32
// fills four cache lines, and the links are read once for all of them.
const Width = 64

// Row is a quantity at one place over the moments of a block.
type Row [Width]float32

// Block is up to Width moments that share the ground's reflectance, with their
// skies averaged over patches.
type Block struct {
	Moments []*scene.Moment
	// Sky[p] holds the mean luminance of patch p at each moment.
	Sky []Row
	// Fine is the same over the finer patches that sensors use.
	Fine []Row
	// Below holds the luminance of the endless ground.
	Below Row
	// GroundReflectance of these moments.
	GroundReflectance float32
}

// NewBlock averages the skies of moments over the patches.
func (t *Transport) NewBlock(moments []*scene.Moment, fine *sky.Patches) *Block {
	b := &Block{Moments: moments}
	b.GroundReflectance = float32(t.World.Scene.GroundReflectance[moments[0].Month])
	b.Sky = averages(moments, t.Patches)
	if fine != nil {
		b.Fine = averages(moments, fine)
	}
	for h, m := range moments {
		b.Below[h] = float32(GroundLuminance(t.World.Scene, m))
	}
	return b
}

func averages(moments []*scene.Moment, patches *sky.Patches) []Row {
	rows := make([]Row, patches.Count())
	mean := make([]float64, patches.Count())
	for h, m := range moments {
		patches.Average(m.Sky, mean)
		for p, l := range mean {
			rows[p][h] = float32(l)
		}
	}
	return rows
}

// GroundLuminance is that of the unshaded endless ground, in cd/m2: Lambertian
// with the month's reflectance.
func GroundLuminance(s *scene.Scene, m *scene.Moment) float64 {
	return s.GroundReflectance[m.Month] * m.GlobalLx / math.Pi
}

// Light is the solution for one block and one batch.
type Light struct {
	// Sun[i] is the direct sun on active side i, E[i] everything and Rest[i]
	// everything but the direct sun, in lx.
	Sun, E, Rest []Row
	// Lit[i] has bit h set where the sun fell on side i at moment h.
	Lit []uint64
	// Sweeps says how often the exchange was iterated.
	Sweeps int
}

// sweepTolerance ends the iteration: the summed change of a sweep relative to
// the summed illuminance. The geometric tail that is left is of the same size.
const sweepTolerance = 2e-4

// maxSweeps is never reached below a mean reflectance of 0.99.
const maxSweeps = 400

// SunOn samples the direct sun on every active side for all moments of a
// block in batch b: one ray from a random point of the texel to a random point
// of the disc. Sides that look at no sky near the sun, nor have neighbours that
// do, are passed over (Transport.maySee).
func (t *Transport) SunOn(bl *Block, b int, light *Light) {
	w := t.World
	alpha := photometry.SunDiameterRad / 2
	patch := make([]int, len(bl.Moments))
	for h, m := range bl.Moments {
		patch[h] = -1
		if m.SunNormalLx > 0 {
			patch[h] = t.Patches.Index(m.Sun)
		}
	}
	for i, side := range t.sides {
		sun := &light.Sun[i]
		*sun = Row{}
		light.Lit[i] = 0
		if !t.near.looksUp[i] {
			continue
		}
		k := side / 2
		sign := 1.0
		if side&1 == int32(materials.Back) {
			sign = -1
		}
		for h, m := range bl.Moments {
			if patch[h] < 0 || !t.near.maySee(i, patch[h]) {
				continue
			}
			s := sampling.Stream4(t.Config.Seed, streamSun, uint64(m.Hour)<<32|uint64(side), uint64(b))
			p, n := t.Texels.Sample(k, s.Float64(), s.Float64(), s.Float64())
			n = r3.Scale(sign, n)
			dir := trace.ConeDirection(m.Sun, alpha, s.Float64(), s.Float64())
			cos := r3.Dot(dir, n)
			if cos <= 0 || t.Hidden(dir) {
				continue
			}
			if tr := w.Transmittance(w.Offset(p, n), dir, math.Inf(1)); tr > 0 {
				sun[h] = float32(m.SunNormalLx * cos * tr)
				light.Lit[i] |= 1 << h
			}
		}
	}
}

// Solve computes the illuminance of every active side in batch b for a block.
// light is reused between calls.
func (t *Transport) Solve(bl *Block, b int, light *Light) {
	n := len(t.sides)
	if len(light.E) != n {
		light.E, light.Sun, light.Rest, light.Lit = make([]Row, n), make([]Row, n), make([]Row, n), make([]uint64, n)
	}
	t.SunOn(bl, b, light)
	rows := &t.rows[b]
	source := light.Rest
	for i := range n {
		e := &source[i]
		*e = light.Sun[i]
		for _, p := range rows.patches[rows.patchStart[i]:rows.patchStart[i+1]] {
			axpy(e, &bl.Sky[p.Patch], p.W)
		}
		if g := rows.below[i]; g > 0 {
			axpy(e, &bl.Below, g)
		}
		light.E[i] = *e
	}
	for light.Sweeps = 1; light.Sweeps <= maxSweeps; light.Sweeps++ {
		var change, total float64
		for j := range n {
			i := j
			if light.Sweeps%2 == 0 {
				i = n - 1 - j
			}
			e := source[i]
			for _, l := range rows.links[rows.linkStart[i]:rows.linkStart[i+1]] {
				axpy(&e, &light.E[l.Side], l.W)
			}
			for _, l := range rows.groundLink[rows.groundFrom[i]:rows.groundFrom[i+1]] {
				axpy(&e, &light.E[l.Side], l.W*bl.GroundReflectance)
			}
			c, s := difference(&e, &light.E[i])
			change += c
			total += s
			light.E[i] = e
		}
		if change <= sweepTolerance*total {
			break
		}
	}
	for i := range n {
		rest := &light.Rest[i]
		for h := range rest {
			rest[h] = light.E[i][h] - light.Sun[i][h]
		}
	}
}

// Gather applies rows (of sensors) to a solved block: out[r] becomes the
// illuminance of receiver r without the sun's direct light on it.
func (bl *Block) Gather(rows *Rows, light *Light, r int, out *Row) {
	*out = Row{}
	for _, l := range rows.links[rows.linkStart[r]:rows.linkStart[r+1]] {
		axpy(out, &light.E[l.Side], l.W)
	}
	for _, l := range rows.groundLink[rows.groundFrom[r]:rows.groundFrom[r+1]] {
		axpy(out, &light.E[l.Side], l.W*bl.GroundReflectance)
	}
	for _, p := range rows.patches[rows.patchStart[r]:rows.patchStart[r+1]] {
		axpy(out, &bl.Fine[p.Patch], p.W)
	}
	if g := rows.below[r]; g > 0 {
		axpy(out, &bl.Below, g)
	}
}

// axpy adds w times x to y.
func axpy(y, x *Row, w float32) {
	for i := 0; i < Width; i += 8 {
		y[i] += w * x[i]
		y[i+1] += w * x[i+1]
		y[i+2] += w * x[i+2]
		y[i+3] += w * x[i+3]
		y[i+4] += w * x[i+4]
		y[i+5] += w * x[i+5]
		y[i+6] += w * x[i+6]
		y[i+7] += w * x[i+7]
	}
}

// difference sums |a-b| and a over a row.
func difference(a, b *Row) (change, total float64) {
	var c, s float32
	for i := range a {
		d := a[i] - b[i]
		if d < 0 {
			d = -d
		}
		c += d
		s += a[i]
	}
	return float64(c), float64(s)
}

// AddScaled adds w times x to y.
func AddScaled(y, x *Row, w float32) { axpy(y, x, w) }
