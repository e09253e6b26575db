package study

import (
	"context"
	"fmt"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/materials/sampling"
	"squint/scene"
)

// refineRounds is the number of times that what is undecided is looked at
// again, each time with refineFactor times the samples (half the error), which
// are pixels twice as fine; the surfaces, dear to trace anew, get them once. Where their noise rules the
// error, it stays as it is and so does the verdict: undecided.
// After that a verdict stays undecided. The looks are paid for in z.
const (
	refineRounds = 2
	refineFactor = 4
)

// refine computes anew, with more samples, the hours that leave a view's
// verdict open: those whose DGP lies within z standard errors of the asked
// limit. The first look only chooses the hours and is thrown away for them,
// since a running estimate that decides where to sample more biases the mean.
func (r *Result) refine(ctx context.Context, in *Input, opt Options, y *year) error {
	level, ok := verdict.ProtectionByName(in.Project.Criteria.Glare)
	if !ok {
		return nil
	}
	z := r.zViews()
	again := opt
	again.shots = nil
	again.Progress = func(s Stage, done, total int) {
		if s == StageYear {
			opt.Progress(StageAgain, done, total)
		}
	}
	factor := 1
	for round := 1; round <= refineRounds; round++ {
		factor *= refineFactor
		var views []int
		open := map[int]bool{} // records
		for i := range y.glare.views {
			v := &y.glare.views[i]
			hours := r.openHours(v, level.DGP, z)
			if verdict.AtMost(r.glareHours(v, level.DGP, z).Share, level.TimeShare) != verdict.Undecided {
				continue
			}
			views = append(views, i)
			for _, h := range hours {
				open[h] = true
			}
		}
		if len(views) == 0 || len(open) == 0 {
			return nil
		}
		sub := subset(in, views, open, factor, round)
		closer, err := computeYear(ctx, sub, again, &Result{})
		if err != nil {
			return err
		}
		for k, i := range views {
			to, from := &y.glare.views[i], &closer.glare.views[k]
			hours := r.openHours(to, level.DGP, z)
			for _, h := range hours {
				to.DGP[h], to.StdErr[h], to.Ev[h], to.EvErr[h], to.InRange[h] = from.DGP[h], from.StdErr[h], from.Ev[h], from.EvErr[h], from.InRange[h]
				to.Coarse[h], to.Bias[h] = from.Coarse[h], from.Bias[h]
			}
			to.Refined = round
			to.lookCloser(from)
		}
		r.Notes = append(r.Notes, fmt.Sprintf("look %d: %s of %s lay too near the limit and were computed again with %d times the samples.", round+1, count(len(open), stepWord(in.Climate)), count(len(views), "viewpoint"), factor))
	}
	return nil
}

// lookCloser keeps the worst hour true to the series after some hours were
// computed again.
func (v *ViewResult) lookCloser(again *ViewResult) {
	if v.Worst != nil {
		h := v.Worst.Moment.Step
		v.Worst.DGP, v.Worst.StdErr, v.Worst.Ev = float64(v.DGP[h]), float64(v.StdErr[h]), float64(v.Ev[h])
	}
	if again.Worst != nil && (v.Worst == nil || again.Worst.DGP >= v.Worst.DGP) {
		v.Worst = again.Worst
	}
}

// stepWord is what the year is counted in.
func stepWord(c *scene.Climate) string {
	if c.PerHour() > 1 {
		return "step"
	}
	return "hour"
}

func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// openHours are the hours in use whose DGP may lie on either side of limit.
func (r *Result) openHours(v *ViewResult, limit, z float64) []int {
	var out []int
	for _, h := range r.UseOf(v.Viewpoint.Room).Hours {
		d, e := float64(v.DGP[h]), z*float64(v.StdErr[h])+float64(v.Bias[h])
		if d-e <= limit && d+e > limit {
			out = append(out, h)
		}
	}
	return out
}

// subset is the input reduced to some views and hours, with more samples and
// streams of its own.
func subset(in *Input, views []int, open map[int]bool, factor, round int) *Input {
	sub := *in
	p := *in.Project
	for n := factor; n > 1; n /= refineFactor {
		p.Simulation.FisheyePixels *= 2
	}
	p.Simulation.TexelSamples *= min(factor, refineFactor)
	seed := sampling.Stream3(p.Simulation.Seed, streamRefine, uint64(round))
	p.Simulation.Seed = seed.Uint64()
	sub.Project = &p
	sub.Standings = nil
	for _, st := range in.Standings {
		few := Standing{Label: st.Label, World: st.World, Scene: reduced(st.Scene, views)}
		for _, m := range st.Moments {
			if open[m.Step] {
				few.Moments = append(few.Moments, m)
			}
		}
		if len(few.Moments) > 0 {
			sub.Standings = append(sub.Standings, few)
		}
	}
	sub.Scene = reduced(in.Scene, views)
	c := *in.Climate
	c.Moments = nil
	for _, m := range in.Climate.Moments {
		if open[m.Step] {
			c.Moments = append(c.Moments, m)
		}
	}
	sub.Climate = &c
	return &sub
}

// reduced is a scene with some of its viewpoints and no work planes.
func reduced(s *scene.Scene, views []int) *scene.Scene {
	r := *s
	r.WorkPlanes, r.Viewpoints = nil, nil
	for _, i := range views {
		r.Viewpoints = append(r.Viewpoints, s.Viewpoints[i])
	}
	return &r
}

// streamRefine keeps the seeds of further looks apart from the project's.
const streamRefine = 31

// zViews is the number of standard errors by which a view's hours are
// bracketed: all views and all looks together at the confidence.
func (r *Result) zViews() float64 {
	looks := len(r.Scene.Viewpoints) * (1 + refineRounds)
	return verdict.T(confidence, max(looks, 1), max(r.Project.Simulation.Batches-1, 1))
}

// glareHours counts a view's hours in use over a limit.
func (r *Result) glareHours(v *ViewResult, limit, z float64) verdict.GlareHours {
	used := r.UseOf(v.Viewpoint.Room).Hours
	dgp, half := make([]float32, len(used)), make([]float32, len(used))
	for k, h := range used {
		dgp[k] = v.DGP[h]
		if dgp[k] != 0 || v.StdErr[h] != 0 { // 0: in the dark
			half[k] = float32(z)*v.StdErr[h] + v.Bias[h]
		}
	}
	return verdict.CountGlare(dgp, half, limit, 1).OfSteps(r.Calendar.Steps() / daylight.HoursPerYear)
}
