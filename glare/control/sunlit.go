package control

import "squint/glare/daylight"

// roundingH is far more than the rounding of times, and far less than a step.
const roundingH = 1e-9

// FacadeSun closes the unit while the irradiance of its opening's plane is
// above CloseWm2, and opens it again when it has not been above ReopenWm2 for
// DelayH hours. Each day starts open.
type FacadeSun struct {
	CloseWm2, ReopenWm2 float64 // ReopenWm2 at most CloseWm2
	DelayH              float64
	Open, Closed        int
}

// Choose implements Law.
func (l FacadeSun) Choose(u *Unit, steps []Step, f Facts) ([]int, error) {
	if f.FacadeWm2 == nil {
		return nil, lacking(u, "the irradiance of the facade")
	}
	list := make([]int, len(steps))
	closed, since := false, 0.0
	for i, s := range steps {
		if i == 0 || s.Day != steps[i-1].Day {
			closed = false
		}
		e := f.FacadeWm2(i)
		if e > l.ReopenWm2 {
			since = s.ClockH
		}
		switch {
		case e > l.CloseWm2:
			closed = true
		case closed && e <= l.ReopenWm2 && s.ClockH-since >= l.DelayH-roundingH:
			closed = false
		}
		list[i] = l.pick(closed)
	}
	return list, nil
}

func (l FacadeSun) pick(closed bool) int {
	if closed {
		return l.Closed
	}
	return l.Open
}

// WorkPlaneSun closes the unit while the sun through its group of openings
// strikes more than a share of the sensors, and opens it otherwise.
// Source: IES LM-83-12, see daylight.BlindRule.
type WorkPlaneSun struct {
	Rule         daylight.BlindRule
	Open, Closed int
}

// Choose implements Law.
func (l WorkPlaneSun) Choose(u *Unit, steps []Step, f Facts) ([]int, error) {
	if f.DirectLx == nil {
		return nil, lacking(u, "the sun on the work planes")
	}
	list := make([]int, len(steps))
	for i := range steps {
		direct := f.DirectLx(i)
		list[i] = l.Open
		if l.Rule.Closes(len(direct), func(sensor int) float32 { return direct[sensor] }) {
			list[i] = l.Closed
		}
	}
	return list, nil
}
