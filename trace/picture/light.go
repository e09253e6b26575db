package picture

import (
	"context"

	"squint/scene"
	"squint/trace"
	"squint/trace/parallel"
	"squint/trace/surface"
)

// lanes is the number of copies of a moment that are solved together, each with
// random numbers of its own for sun and photons: a block has room for
// surface.Width moments anyway. Own choice.
const lanes = 16

// texelPhotons is the number of photons over all batches that each of the
// copies shoots at mirrors, for the light beyond the first surface. Own choice.
const texelPhotons = 1 << 14

// noHour numbers the streams of moments that are no record of a year.
const noHour = 9000

// Light is the solution of a Stage for one moment.
type Light struct {
	stage  *Stage
	moment *scene.Moment
	world  *trace.World
	sun    []surface.SunRays // by lane
	below  float64           // luminance of the endless ground
	ground float64           // reflectance of the ground
	// rest[b][i] is the illuminance of active side i in batch b without the
	// direct sun on it, lx; lit tells where that sun may fall.
	rest [][]float32
	lit  []bool
	// bright are sides to aim at.
	bright brights
	aim    *trace.Photons
}

// Light solves the exchange for a moment.
func (s *Stage) Light(ctx context.Context, m *scene.Moment) (*Light, error) {
	copies := make([]*scene.Moment, lanes)
	step := m.Step
	if step < 0 {
		step = noHour
	}
	for i := range copies {
		c := *m
		c.Step = step*lanes + i
		copies[i] = &c
	}
	t := *s.t
	t.Config.Photons = texelPhotons
	bl := t.NewBlock(copies, nil)
	l := &Light{stage: s, moment: m, world: s.world, sun: bl.Sun, below: float64(bl.Below[0]),
		ground: float64(bl.GroundReflectance), rest: make([][]float32, Batches), lit: make([]bool, t.Len())}
	if m.SunNormalLx > 0 && bl.Sun[0].NormalLx > 0 {
		l.aim = s.world.Aim(m.Sun)
		if l.aim.Empty() {
			l.aim = nil
		}
	}
	near, whole := make([][]uint64, Batches), make([][]float32, Batches)
	err := parallel.Each(ctx, s.cfg.Workers, Batches, func(b int) {
		lights := make([]surface.Light, 1)
		t.Solve(bl, b, &lights[0], nil)
		near[b] = t.LitNear(lights)
		l.rest[b], whole[b] = overLanes(lights[0].Rest), overLanes(lights[0].E)
	})
	if err != nil {
		return nil, err
	}
	for _, n := range near {
		for i, mask := range n {
			l.lit[i] = l.lit[i] || mask != 0
		}
	}
	for b := 1; b < Batches; b++ {
		for i, e := range whole[b] {
			whole[0][i] += e
		}
	}
	l.bright = s.findBright(whole[0])
	return l, nil
}

// overLanes is the mean over the copies of the moment.
func overLanes(rows []surface.Row) []float32 {
	out := make([]float32, len(rows))
	for i := range rows {
		var sum float32
		for h := range lanes {
			sum += rows[i][h]
		}
		out[i] = sum / lanes
	}
	return out
}
