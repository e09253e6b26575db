package study

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/trace"
)

// WorldUnder is the scene as it stands under a sun that shines: that of the
// moment of the year whose sun is nearest. Hours lie 15 degrees apart, so that
// slats that follow the sun in finer steps may be a step off.
func (in *Input) WorldUnder(sun r3.Vec) *trace.World {
	if len(in.Standings) == 1 {
		return in.Standings[0].World
	}
	best, least := in.World, math.Inf(1)
	for k := range in.Standings {
		for _, m := range in.Standings[k].Moments {
			if d := r3.Norm2(r3.Sub(m.Sun, sun)); m.SunNormalLx > 0 && d < least {
				best, least = in.Standings[k].World, d
			}
		}
	}
	return best
}
