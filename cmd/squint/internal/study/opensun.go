package study

import (
	"context"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/scene"
	"squint/trace/parallel"
)

// exposureShading is how what moves stands for ASE, which IES LM-83-12 asks for
// without blinds: open wherever it is operated.
func (in *Input) exposureShading() daylight.Shading {
	if s := shading(in.Project); in.operation == nil || s == daylight.AsStanding {
		return s
	}
	return daylight.Unshaded
}

// openSun is the sun on each sensor at each moment for ASE, lx. Where something is
// operated and does not stand open it is the sun's middle ray through what would
// be open.
func (in *Input) openSun(ctx context.Context, opt Options, y *year) ([][]float32, error) {
	o := in.operation
	if o == nil || in.exposureShading() != daylight.Unshaded {
		return y.light.Direct, nil
	}
	open, chosen := o.plan.Open(), o.plan.Chosen()
	out := make([][]float32, len(y.light.Direct))
	var sensors []scene.Sensor
	for _, w := range in.Scene.WorkPlanes {
		sensors = append(sensors, w.Sensors...)
	}
	return out, parallel.Each(ctx, opt.Workers, len(out), func(s int) {
		out[s] = slices.Clone(y.light.Direct[s])
		for i, m := range in.Climate.Moments {
			if chosen[i] == open {
				continue
			}
			out[s][i] = 0
			if cos := r3.Dot(sensors[s].Normal, m.Sun); m.SunNormalLx > 0 && cos > 0 {
				out[s][i] = float32(m.SunNormalLx * cos * sunThrough(o.open, sensors[s].Position, m.Sun))
			}
		}
	})
}
