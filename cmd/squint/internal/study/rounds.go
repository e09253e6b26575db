package study

import (
	"context"
	"slices"

	"squint/glare/control"
	"squint/scene"
	"squint/trace/annual"
)

// operatedYear is computeYear where systems close for glare: whether they do
// shows only when the combinations before are computed. in.Standings becomes
// what was chosen in the end.
func operatedYear(ctx context.Context, in *Input, opt Options, r *Result) (*year, error) {
	o := in.operation
	if o == nil || !o.glare {
		opt.anyWorst = true // found here, where it is not kept
		y, err := computeYear(ctx, in, opt, r)
		if err != nil {
			return nil, err
		}
		return y, y.worstHours(ctx, in, opt, y.allViews(), func(view, _ int) []*Worst { return []*Worst{y.glare.views[view].Worst} })
	}
	looks := map[control.Combination]*look{}
	for needs := o.plan.Needs(); len(needs) > 0; needs = o.plan.Needs() {
		asked := map[control.Combination][]int{}
		var order []control.Combination
		for _, n := range needs {
			if asked[n.States] == nil {
				order = append(order, n.States)
			}
			asked[n.States] = append(asked[n.States], n.Step)
		}
		// Steps that are settled in the same combination, such as those out of
		// use, come along: tracing it is dear, a step is cheap.
		for i, c := range o.plan.Chosen() {
			if asked[c] != nil && !slices.Contains(asked[c], i) {
				asked[c] = append(asked[c], i)
			}
		}
		for _, c := range order {
			if err := o.look(ctx, looks, c, asked[c], opt, r); err != nil {
				return nil, err
			}
		}
		for _, n := range needs {
			if err := o.plan.Learn(n, o.observed(looks[n.States].year, n.Step)); err != nil {
				return nil, err
			}
		}
	}
	return o.settled(ctx, looks, opt, r)
}

// look is what was computed of one combination.
type look struct {
	year *year
	has  []bool // by step
}

// inUse is whether all steps in use are known.
func (l *look) inUse(steps []control.Step) bool {
	for i, s := range steps {
		if s.Occupied && !l.has[i] {
			return false
		}
	}
	return true
}

// look computes a combination at the steps that it does not know yet.
func (o *operation) look(ctx context.Context, looks map[control.Combination]*look, c control.Combination, steps []int, opt Options, r *Result) error {
	l := looks[c]
	if l == nil {
		l = &look{has: make([]bool, len(o.steps))}
		looks[c] = l
	}
	slices.Sort(steps)
	var moments []*scene.Moment
	for _, i := range steps {
		if !l.has[i] {
			l.has[i] = true
			moments = append(moments, o.in.Climate.Moments[i])
		}
	}
	if len(moments) == 0 {
		return nil
	}
	st, err := o.stand(c)
	if err != nil {
		return err
	}
	st.Moments = moments
	sub := *o.in
	sub.Standings = []Standing{st}
	opt.anyWorst = true // worstHours finds what is missing in the end
	y, err := computeYear(ctx, &sub, opt, r)
	if err != nil {
		return err
	}
	if l.year == nil {
		l.year = y
		return nil
	}
	l.year.adopt(y, o.in, moments)
	return nil
}

// observed is what the viewpoints saw at a step, and through which groups of
// openings what glared most.
func (o *operation) observed(y *year, step int) control.Observed {
	h := o.in.Climate.Moments[step].Step
	seen := control.Observed{DGP: make([]float64, len(y.glare.views)), Through: make([][]string, len(y.glare.views))}
	for i := range y.glare.views {
		v := &y.glare.views[i]
		if v.DGP[h] != v.DGP[h] {
			continue // nobody is there: its room is not in use
		}
		seen.DGP[i] = float64(v.DGP[h])
		if v.Cause[h] < 0 {
			continue
		}
		if k, ok := openingOf(o.in.Scene, v.Causes[v.Cause[h]].Via); ok {
			seen.Through[i] = []string{o.in.Scene.Openings[k].Group}
		}
	}
	return seen
}

// settled puts the year together from the combinations chosen, and computes
// what of them was not looked at.
func (o *operation) settled(ctx context.Context, looks map[control.Combination]*look, opt Options, r *Result) (*year, error) {
	var err error
	if o.in.Standings, err = o.standings(); err != nil {
		return nil, err
	}
	chosen := o.plan.Chosen()
	steps := map[control.Combination][]int{}
	var order []control.Combination
	for i, c := range chosen {
		if steps[c] == nil {
			order = append(order, c)
		}
		steps[c] = append(steps[c], i)
	}
	var whole *year
	for _, c := range order {
		if err := o.look(ctx, looks, c, steps[c], opt, r); err != nil {
			return nil, err
		}
		var moments []*scene.Moment
		for _, i := range steps[c] {
			moments = append(moments, o.in.Climate.Moments[i])
		}
		if whole == nil {
			whole = newYear(o.in, opt)
			whole.factors, whole.factorE = looks[c].year.factors, looks[c].year.factorE
		}
		whole.adopt(looks[c].year, o.in, moments)
	}
	// Daylight factors are those of the most open combination that was computed.
	var known []control.Combination
	for c := range looks {
		known = append(known, c)
	}
	o.factorsOf = o.mostOpen(known)
	whole.factors, whole.factorE = looks[o.factorsOf].year.factors, looks[o.factorsOf].year.factorE
	o.openYear = looks[o.plan.Open()]
	whole.adoptClear(o, looks, chosen)
	if err := o.reshoot(ctx, chosen, opt); err != nil {
		return nil, err
	}
	opt.shots = nil
	at := make(map[int]control.Combination, len(chosen))
	for i, c := range chosen {
		at[o.in.Climate.Moments[i].Step] = c
	}
	return whole, whole.worstHours(ctx, o.in, opt, whole.allViews(), func(view, hour int) []*Worst {
		return []*Worst{looks[at[hour]].year.glare.views[view].Worst}
	})
}

// reshoot makes the small pictures anew of hours that were looked at last in
// another combination than the one chosen.
func (o *operation) reshoot(ctx context.Context, chosen []control.Combination, opt Options) error {
	if opt.shots == nil {
		return nil
	}
	wrong := map[control.Combination][]*scene.Moment{}
	var order []control.Combination
	for i, m := range o.in.Climate.Moments {
		frame := opt.shots.frame[m.Step]
		if frame < 0 || opt.shots.of[frame] == nil {
			continue
		}
		st, err := o.stand(chosen[i])
		if err != nil {
			return err
		}
		if opt.shots.of[frame] == st.Scene {
			continue
		}
		if wrong[chosen[i]] == nil {
			order = append(order, chosen[i])
		}
		wrong[chosen[i]] = append(wrong[chosen[i]], m)
	}
	for _, c := range order {
		st, err := o.stand(c)
		if err != nil {
			return err
		}
		st.Moments = wrong[c]
		sub := *o.in
		sub.Standings = []Standing{st}
		if _, err := computeYear(ctx, &sub, opt, &Result{}); err != nil {
			return err
		}
	}
	return nil
}

// adoptClear takes each moment under a clear sky from the combination that
// stands at that hour of the year, else from the first.
func (y *year) adoptClear(o *operation, looks map[control.Combination]*look, chosen []control.Combination) {
	for i, m := range o.in.Clear {
		c := chosen[0]
		for k, s := range o.steps {
			if s.At == m.Step {
				c = chosen[k]
			}
		}
		from := looks[c].year.clear
		if from == nil {
			continue
		}
		if y.clear == nil {
			y.clear = annual.NewDaylight(len(from.E), len(o.in.Clear))
		}
		for s := range from.E {
			y.clear.E[s][i], y.clear.StdErr[s][i] = from.E[s][i], from.StdErr[s][i]
		}
	}
}

// adopt takes over the values of some moments.
func (y *year) adopt(from *year, in *Input, moments []*scene.Moment) {
	at := make(map[*scene.Moment]int, len(in.Climate.Moments))
	for i, m := range in.Climate.Moments {
		at[m] = i
	}
	for _, m := range moments {
		i := at[m]
		for s := range y.light.E {
			y.light.E[s][i], y.light.StdErr[s][i], y.light.Direct[s][i] = from.light.E[s][i], from.light.StdErr[s][i], from.light.Direct[s][i]
		}
	}
	for i := range y.glare.views {
		a, b := &y.glare.views[i], &from.glare.views[i]
		if b.Worst != nil && brighter(b.Worst.DGP, b.Worst.Moment.Step, a.Worst) {
			a.Worst = b.Worst
		}
		for _, m := range moments {
			h := m.Step
			a.DGP[h], a.StdErr[h], a.Ev[h], a.EvErr[h], a.InRange[h] = b.DGP[h], b.StdErr[h], b.Ev[h], b.EvErr[h], b.InRange[h]
			a.Coarse[h], a.Bias[h], a.Cause[h] = b.Coarse[h], b.Bias[h], -1
			if b.Cause[h] >= 0 {
				a.Cause[h] = y.glare.causeID(i, b.Causes[b.Cause[h]])
			}
		}
	}
}
