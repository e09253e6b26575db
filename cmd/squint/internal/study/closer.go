package study

import (
	"context"
	"fmt"
	"slices"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/project"
)

// openSensors is what leaves criteria on work planes undecided.
type openSensors struct {
	planes  []int // with an open sensor
	sensors []int // by rising number among all
	// Open values by sensor: records, moments under a clear sky, and whether the
	// daylight factor is.
	hours, clear map[int]map[int]bool
	factor       map[int]bool
}

// records are the hours of the year that are open at any sensor.
func (o *openSensors) records() map[int]bool {
	all := map[int]bool{}
	for _, hours := range o.hours {
		for h := range hours {
			all[h] = true
		}
	}
	return all
}

// findOpen finds what is open within z standard errors.
func (r *Result) findOpen(in *Input, y *year, z float64) *openSensors {
	o := &openSensors{hours: map[int]map[int]bool{}, clear: map[int]map[int]bool{}, factor: map[int]bool{}}
	first := 0
	for i, w := range r.Scene.WorkPlanes {
		asked := r.asked(w.Room)
		n := len(w.Sensors)
		planes := map[series]daylight.Plane{ofFactor: daylight.FactorPlane(y.factors[first:first+n], y.factorE[first:first+n], z)}
		if slices.ContainsFunc(slices.Concat(asked...), func(c condition) bool { return c.of == ofYear }) {
			planes[ofYear] = daylight.Plane{E: r.spread(slices.Clone(y.light.E[first : first+n])), SE: r.spread(slices.Clone(y.light.StdErr[first : first+n])), Z: z}
		}
		// Without a record of its hour a clear moment is of the first standing, which
		// where glare decides need not be that of the daylight factors.
		if y.clear != nil && (in.recorded(in.Clear) || in.operation == nil || !in.operation.glare) {
			planes[ofClear] = daylight.Plane{E: y.clear.E[first : first+n], SE: y.clear.StdErr[first : first+n], Z: z}
		}
		open := map[int]bool{}
		for _, criterion := range asked {
			for _, c := range openOf(criterion, planes) {
				for s := range n {
					hours := c.openHours(planes[c.of], s)
					if len(hours) == 0 {
						continue
					}
					open[first+s] = true
					switch c.of {
					case ofYear:
						mark(o.hours, first+s, hours)
					case ofClear:
						mark(o.clear, first+s, hours)
					case ofFactor:
						o.factor[first+s] = true
					}
				}
			}
		}
		if len(open) > 0 {
			o.planes = append(o.planes, i)
		}
		for s := first; s < first+n; s++ {
			if open[s] {
				o.sensors = append(o.sensors, s)
			}
		}
		first += n
	}
	return o
}

func mark(of map[int]map[int]bool, sensor int, hours []int) {
	if of[sensor] == nil {
		of[sensor] = map[int]bool{}
	}
	for _, h := range hours {
		of[sensor][h] = true
	}
}

// lookCloser is refine for work planes: the sensors that leave a criterion
// undecided are computed anew at the hours that do, with refineFactor times
// what their errors come from.
func (r *Result) lookCloser(ctx context.Context, in *Input, opt Options, y *year) error {
	y.looks = make([]int, len(in.Scene.WorkPlanes))
	z := r.zSensors()
	again := opt.again()
	size := in.Project.Simulation
	var from noise
	for round := 1; round <= refineRounds; round++ {
		o := r.findOpen(in, y, z)
		if len(o.sensors) == 0 {
			return nil
		}
		if round == 1 {
			var err error
			if from, err = variances(ctx, sensorsOf(in, o, size, 0), again); err != nil {
				return err
			}
		}
		size.SensorSamples *= refineFactor
		from.rays /= refineFactor
		if from.shared > from.rays {
			size.TexelSamples *= refineFactor
			size.Photons *= refineFactor
			size.Batches = from.batches(size)
			from.shared /= refineFactor
		}
		var own Result
		sub := sensorsOf(in, o, size, round)
		closer, err := computeYear(ctx, sub, again, &own)
		if err != nil {
			return err
		}
		if own.Settings.Coarsen > r.Settings.Coarsen {
			r.Notes = append(r.Notes, fmt.Sprintf("no closer look at the sensors: it does not fit memory_mib = %d.", size.MemoryMiB))
			return nil
		}
		y.replace(in, sub, o, closer, float32(r.zSensorsOf(size.Batches)/z))
		for _, i := range o.planes {
			y.looks[i] = round
		}
		first := in.Project.Simulation
		what := count(len(o.sensors), "sensor")
		if n := len(o.records()); n > 0 { // else daylight factors or a clear sky alone
			what = count(n, stepWord(in.Climate)) + " of " + what
		}
		r.Notes = append(r.Notes, fmt.Sprintf("look %d: %s lay too near a limit and were computed again with %d times the rays and %d times the samples of surfaces.", round+1,
			what, size.SensorSamples/first.SensorSamples, size.TexelSamples/first.TexelSamples))
	}
	return nil
}

// replace takes over what was open. Errors are given a scale: more batches tell
// them better, so that fewer of them make the same interval; times z they are
// as wide as Student's distribution asks of the look's own batches.
func (y *year) replace(in, sub *Input, o *openSensors, from *year, scale float32) {
	at := map[int]int{}
	for k, m := range sub.Climate.Moments {
		at[m.Step] = k
	}
	for k, m := range in.Climate.Moments {
		c, ok := at[m.Step]
		if !ok {
			continue
		}
		for j, s := range o.sensors {
			if o.hours[s][m.Step] {
				y.light.E[s][k], y.light.StdErr[s][k] = from.light.E[j][c], scale*from.light.StdErr[j][c]
			}
		}
	}
	for j, s := range o.sensors {
		if o.factor[s] {
			y.factors[s], y.factorE[s] = from.factors[j], float64(scale)*from.factorE[j]
		}
		for k := range o.clear[s] {
			y.clear.E[s][k], y.clear.StdErr[s][k] = from.clear.E[j][k], scale*from.clear.StdErr[j][k]
		}
	}
}

// sensorsOf is the input reduced to what is open, of some size, with random
// numbers of its own by round.
func sensorsOf(in *Input, o *openSensors, size project.Simulation, round int) *Input {
	sub := *in
	p := *in.Project
	p.Simulation = size
	seed := sampling.Stream3(size.Seed, streamCloser, uint64(round))
	p.Simulation.Seed = seed.Uint64()
	sub.Project = &p
	records := o.records()
	if len(o.clear) == 0 {
		sub.Clear = nil
	}
	// Moments under a clear sky are computed in the standing of their hour.
	for _, m := range sub.Clear {
		records[m.Step] = true
	}
	sub.narrow(records, func(s *scene.Scene) *scene.Scene { return sensorsIn(s, o.sensors) })
	if len(o.factor) > 0 || !in.recorded(sub.Clear) {
		st := in.factorStanding()
		st.Scene, st.Moments = sensorsIn(st.Scene, o.sensors), nil
		sub.Standings = append([]Standing{st}, sub.Standings...)
	}
	return &sub
}

// recorded is whether the year has a record of each moment's hour.
func (in *Input) recorded(moments []*scene.Moment) bool {
	for _, m := range moments {
		if !slices.ContainsFunc(in.Climate.Moments, func(x *scene.Moment) bool { return x.Step == m.Step }) {
			return false
		}
	}
	return true
}

// factorStanding is the one whose daylight factors the year has.
func (in *Input) factorStanding() Standing {
	if o := in.operation; o != nil && o.glare {
		return o.built[o.factorsOf]
	}
	return in.Standings[0]
}

// sensorsIn is a scene with some of its sensors, by number among all, and no
// viewpoints.
func sensorsIn(s *scene.Scene, sensors []int) *scene.Scene {
	few := *s
	few.Viewpoints, few.WorkPlanes = nil, nil
	first, k := 0, 0
	for _, w := range s.WorkPlanes {
		n := len(w.Sensors)
		var list []scene.Sensor
		for ; k < len(sensors) && sensors[k] < first+n; k++ {
			list = append(list, w.Sensors[sensors[k]-first])
		}
		first += n
		if w.Sensors = list; len(list) > 0 {
			few.WorkPlanes = append(few.WorkPlanes, w)
		}
	}
	return &few
}

// streamCloser keeps the seeds of closer looks at sensors apart from others.
const streamCloser = 32

// zSensors is the number of standard errors by which a sensor's hours are
// bracketed: all sensors and all looks together at the confidence.
func (r *Result) zSensors() float64 { return r.zSensorsOf(r.Project.Simulation.Batches) }

func (r *Result) zSensorsOf(batches int) float64 {
	looks := r.Scene.Sensors() * (1 + refineRounds)
	return verdict.T(confidence, max(looks, 1), max(batches-1, 1))
}
