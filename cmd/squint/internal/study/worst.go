package study

import "context"

// worstHours gives some views the pictures of their worst hours as the series
// have them. have lists pictures of a view that may be of that hour, the best
// first; where none is, one is made.
func (y *year) worstHours(ctx context.Context, in *Input, opt Options, views []int, have func(view, hour int) []*Worst) error {
	var lack, hour []int // views, and the worst hour of each
	open := map[int]bool{}
	for _, i := range views {
		v := &y.glare.views[i]
		h := v.worstHour(in)
		v.Worst = nil
		if h < 0 {
			continue
		}
		for _, w := range have(i, h) {
			if w != nil && v.DGP[w.Moment.Step] == v.DGP[h] {
				v.show(w)
				break
			}
		}
		if v.Worst == nil {
			lack, hour, open[h] = append(lack, i), append(hour, h), true
		}
	}
	if len(lack) == 0 {
		return nil
	}
	few := subset(in, lack, open, 1, 0)
	few.Project = in.Project
	opt.shots = nil
	opt.keep = func(k, h int) bool { return hour[k] == h }
	again, err := computeYear(ctx, few, opt, &Result{})
	if err != nil {
		return err
	}
	for k, i := range lack {
		if w := again.glare.views[k].Worst; w != nil {
			y.glare.views[i].show(w)
		}
	}
	return nil
}

// worstHour is the hour in use of highest DGP, -1 for none.
func (v *ViewResult) worstHour(in *Input) int {
	worst, use := -1, in.UseOf(v.Viewpoint.Room)
	for _, m := range in.Climate.Moments {
		if use.mask[m.Step] && (worst < 0 || v.DGP[m.Step] > v.DGP[worst]) {
			worst = m.Step
		}
	}
	return worst
}

// show takes a picture of the worst hour, with the numbers of the series: the
// picture may come from other random numbers.
func (v *ViewResult) show(w *Worst) {
	if h := w.Moment.Step; float32(w.DGP) != v.DGP[h] {
		w.DGP, w.StdErr, w.Ev = float64(v.DGP[h]), float64(v.StdErr[h]), float64(v.Ev[h])
	}
	v.Worst = w
}

// allViews are the numbers of the views.
func (y *year) allViews() []int {
	all := make([]int, len(y.glare.views))
	for i := range all {
		all[i] = i
	}
	return all
}
