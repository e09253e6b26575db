package study

import (
	"context"
	"fmt"
	"slices"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/materials/sampling"
	"squint/scene"
)

// refineRounds is the number of times that what is undecided is looked at
// again, each time with refineFactor times the samples, which halves the error;
// of views these are pixels twice as fine, while the surfaces, dear to trace
// anew, get them once. Where their noise rules the error, it stays as it is
// and so does the verdict: undecided. So it stays after the last look. The looks
// are paid for in z. Both numbers are own choices.
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
	again := opt.again()
	factor := 1
	pictures := make([][]*Worst, len(y.glare.views)) // of the looks, the last first
	for round := 1; round <= refineRounds; round++ {
		factor *= refineFactor
		var views []int
		var hours [][]int      // by entry of views
		open := map[int]bool{} // records
		for i := range y.glare.views {
			v := &y.glare.views[i]
			if verdict.AtMost(r.glareHours(v, level.DGP, z).Share, level.TimeShare) != verdict.Undecided {
				continue
			}
			views, hours = append(views, i), append(hours, r.openHours(v, level.DGP, z))
			for _, h := range hours[len(hours)-1] {
				open[h] = true
			}
		}
		if len(views) == 0 || len(open) == 0 {
			break
		}
		again.keep = func(k, h int) bool { return slices.Contains(hours[k], h) }
		closer, err := computeYear(ctx, subset(in, views, open, factor, round), again, &Result{})
		if err != nil {
			return err
		}
		for k, i := range views {
			to, from := &y.glare.views[i], &closer.glare.views[k]
			for _, h := range hours[k] {
				to.DGP[h], to.StdErr[h], to.Ev[h], to.EvErr[h], to.InRange[h] = from.DGP[h], from.StdErr[h], from.Ev[h], from.EvErr[h], from.InRange[h]
				to.Coarse[h], to.Bias[h], to.Cause[h] = from.Coarse[h], from.Bias[h], -1
				if c := from.Cause[h]; c >= 0 {
					to.Cause[h] = y.glare.causeID(i, from.Causes[c])
				}
			}
			to.Refined = round
			pictures[i] = append([]*Worst{from.Worst}, pictures[i]...)
		}
		r.Notes = append(r.Notes, fmt.Sprintf("look %d: %s of %s lay too near the limit and were computed again with %d times the samples.", round+1, count(len(open), stepWord(in.Climate)), count(len(views), "viewpoint"), factor))
	}
	var changed []int
	for i := range pictures {
		if pictures[i] != nil {
			pictures[i], changed = append(pictures[i], y.glare.views[i].Worst), append(changed, i)
		}
	}
	return y.worstHours(ctx, in, opt, changed, func(view, _ int) []*Worst { return pictures[view] })
}

// again is how a further look is run: without small pictures, and heard of as
// such.
func (opt Options) again() Options {
	heard := opt.Progress
	opt.shots = nil
	opt.Progress = func(s Stage, done, total int) {
		if s == StageYear {
			heard(StageAgain, done, total)
		}
	}
	return opt
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
	sub.narrow(open, func(s *scene.Scene) *scene.Scene { return reduced(s, views) })
	return &sub
}

// narrow leaves some hours and of the scenes some receivers.
func (in *Input) narrow(hours map[int]bool, few func(*scene.Scene) *scene.Scene) {
	among := func(moments []*scene.Moment) (list []*scene.Moment) {
		for _, m := range moments {
			if hours[m.Step] {
				list = append(list, m)
			}
		}
		return list
	}
	all := in.Standings
	in.Standings = nil
	for _, st := range all {
		if st.Moments = among(st.Moments); len(st.Moments) > 0 {
			st.Scene = few(st.Scene)
			in.Standings = append(in.Standings, st)
		}
	}
	in.Scene = few(in.Scene)
	c := *in.Climate
	c.Moments = among(c.Moments)
	in.Climate = &c
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
