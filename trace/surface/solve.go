package surface

import (
	"math"
	"math/bits"
	"unsafe"

	"squint/scene"
	"squint/scene/sky"
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
	// Sun holds the sun's rays of each moment.
	Sun []SunRays
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
		b.Sun = append(b.Sun, t.newSunRays(m))
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
	// settled keeps the values of the moments in done.
	settled []Row
	done    uint64
}

// sweepTolerance ends the iteration: the summed change of a sweep relative to
// the summed illuminance. The geometric tail that is left is of the same size.
const sweepTolerance = 2e-4

// maxSweeps is never reached below a mean reflectance of 0.99.
const maxSweeps = 400

// Solve computes the illuminance of every active side in batch b for a block.
// light is reused between calls. near is the solution of another batch for the
// same block, to start from: the batches differ by their noise alone. nil starts
// in the dark.
func (t *Transport) Solve(bl *Block, b int, light, near *Light) {
	n := len(t.sides)
	if len(light.E) != n {
		light.E, light.Sun, light.Rest, light.Lit = make([]Row, n), make([]Row, n), make([]Row, n), make([]uint64, n)
	}
	if len(light.settled) != n {
		light.settled = make([]Row, n)
	}
	light.done = 0
	t.sunOn(bl, b, light)
	rows := &t.rows[b]
	source := light.Rest
	copy(source, light.Sun)
	t.mirrored(bl, b, source)
	for i := range n {
		e := &source[i]
		gather(e, bl.Sky, rows.patches[rows.patchStart[i]:rows.patchStart[i+1]], 1)
		if g := rows.below[i]; g > 0 {
			AddScaled(e, &bl.Below, g)
		}
		light.E[i] = *e
		if near != nil {
			light.E[i] = light.Sun[i]
			AddScaled(&light.E[i], &near.Rest[i], 1)
		}
	}
	// Each moment is settled by its own change and keeps the values of that
	// sweep, so that it does not depend on what shares its block.
	open := ^uint64(0)
	for h := len(bl.Moments); h < Width; h++ {
		open &^= 1 << h
	}
	for light.Sweeps = 1; open != 0 && light.Sweeps <= maxSweeps; light.Sweeps++ {
		var change, total Row
		for j := range n {
			i := j
			if light.Sweeps%2 == 0 {
				i = n - 1 - j
			}
			e := source[i]
			gather(&e, light.E, rows.links[rows.linkStart[i]:rows.linkStart[i+1]], 1)
			gather(&e, light.E, rows.groundLink[rows.groundFrom[i]:rows.groundFrom[i+1]], bl.GroundReflectance)
			settle(&e, &light.E[i], &change, &total)
		}
		var still uint64
		for h := range bl.Moments {
			if open&(1<<h) != 0 && change[h] <= sweepTolerance*total[h] {
				still |= 1 << h
			}
		}
		if open &^= still; open == 0 {
			continue // the last to settle need no copy
		}
		light.done |= still
		if still == 0 {
			continue
		}
		for i := range n {
			from, to := &light.E[i], &light.settled[i]
			for m := still; m != 0; m &= m - 1 {
				h := bits.TrailingZeros64(m) & (Width - 1)
				to[h] = from[h]
			}
		}
	}
	for i := range n {
		for m := light.done; m != 0; m &= m - 1 {
			h := bits.TrailingZeros64(m)
			light.E[i][h] = light.settled[i][h]
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
	gather(out, light.E, rows.links[rows.linkStart[r]:rows.linkStart[r+1]], 1)
	gather(out, light.E, rows.groundLink[rows.groundFrom[r]:rows.groundFrom[r+1]], bl.GroundReflectance)
	gather(out, bl.Fine, rows.patches[rows.patchStart[r]:rows.patchStart[r+1]], 1)
	if g := rows.below[r]; g > 0 {
		AddScaled(out, &bl.Below, g)
	}
}

// AddScaled adds w times x to y.
func AddScaled(y, x *Row, w float32) {
	l := [1]Link{{0, w}}
	gather(y, unsafe.Slice(x, 1), l[:], 1)
}
