package study

import (
	"cmp"
	"fmt"
	"io/fs"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/control"
	"squint/scene"
	"squint/scene/project"
	"squint/trace"
)

// operation is how the systems that move stand over the year.
type operation struct {
	in        *Input
	fsys      fs.FS
	workers   int
	units     []control.Unit
	steps     []control.Step // of the climate's moments
	plan      *control.Plan
	moving    []int        // units that do not stand the whole year in one state
	glare     bool         // some close for glare: their states show in rounds
	open      *trace.World // everything in its most open state
	built     map[control.Combination]Standing
	facades   map[string]*facade           // by opening
	openYear  *look                        // with everything open, where it was computed
	factorsOf control.Combination          // whose daylight factors the year has, where glare decides
	direct    map[int]map[string][]float32 // by step and group of openings
}

// maxStandings bounds the scenes of a study: each is traced on its own.
const maxStandings = 64

// newOperation chooses what can be chosen before anything is computed; nil
// where everything stands as the project says.
func newOperation(in *Input, fsys fs.FS, workers int) (*operation, error) {
	o := &operation{in: in, fsys: fsys, workers: workers, units: control.Units(in.Project),
		built: map[control.Combination]Standing{}, facades: map[string]*facade{}, direct: map[int]map[string][]float32{}}
	for i, u := range o.units {
		if _, still := u.Law.(control.Always); !still || u.Glare != nil {
			o.moving = append(o.moving, i)
		}
		o.glare = o.glare || u.Glare != nil
	}
	if len(o.moving) == 0 && len(in.Project.Controls) == 0 {
		return nil, nil
	}
	o.steps = control.Steps(in.Climate.Moments, in.Calendar)
	open, err := o.stand(control.Open(o.units))
	if err != nil {
		return nil, err
	}
	o.open = open.World
	o.plan, err = control.New(o.units, o.steps, o.facts)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", in.Project.File, err)
	}
	return o, nil
}

// standings are the combinations that were chosen, each with its moments: the
// most open one first, where it occurs, whose daylight factors stand for all, then
// by their labels. Those of units that glare closes may change in rounds.
func (o *operation) standings() ([]Standing, error) {
	moments := map[control.Combination][]*scene.Moment{}
	var order []control.Combination
	for i, c := range o.plan.Chosen() {
		if moments[c] == nil {
			order = append(order, c)
		}
		moments[c] = append(moments[c], o.in.Climate.Moments[i])
	}
	if len(order) > maxStandings {
		return nil, fmt.Errorf("%s: got %d combinations of positions over the year, want at most %d; give slats fewer steps, operate systems of one facade together, or let them share their dimensions", o.in.Project.File, len(order), maxStandings)
	}
	var out []Standing
	for _, c := range order {
		s, err := o.stand(c)
		if err != nil {
			return nil, err
		}
		s.Moments = moments[c]
		out = append(out, s)
	}
	open := o.built[o.mostOpen(order)].World
	slices.SortFunc(out, func(a, b Standing) int {
		switch {
		case a.World == open:
			return -1
		case b.World == open:
			return 1
		}
		return cmp.Compare(a.Label, b.Label)
	})
	return out, nil
}

// mostOpen is the combination of the list whose units are the fewest states from
// being open.
func (o *operation) mostOpen(list []control.Combination) control.Combination {
	open := o.plan.Open()
	shut := func(c control.Combination) (n int) {
		for k := range o.units {
			n += max(c.State(k)-open.State(k), open.State(k)-c.State(k))
		}
		return n
	}
	return slices.MinFunc(list, func(a, b control.Combination) int {
		return cmp.Or(cmp.Compare(shut(a), shut(b)), cmp.Compare(a, b))
	})
}

// stand is the scene of a combination, without moments.
func (o *operation) stand(c control.Combination) (Standing, error) {
	if s, ok := o.built[c]; ok {
		return s, nil
	}
	choice := map[string]string{}
	for i, u := range o.units {
		choice[u.Name] = u.States[c.State(i)]
	}
	s, err := scene.Build(o.fsys, project.WithStates(o.in.Project, choice))
	if err != nil {
		return Standing{}, err
	}
	st := Standing{Scene: s, World: trace.Accelerate(s, o.workers)}
	if len(o.moving) > 0 {
		st.Label = c.Label(o.units, o.moving...)
	}
	o.built[c] = st
	return st, nil
}

// facts are what a unit's law may ask for.
func (o *operation) facts(unit int) control.Facts {
	u := &o.units[unit]
	moments := o.in.Climate.Moments
	k, ok := openingOf(o.in.Scene, u.Opening)
	if !ok {
		return control.Facts{} // scene.Build has said so
	}
	rect := o.in.Scene.Openings[k].Rect
	served, masks := o.served(u), map[string][]bool{}
	for room := range served {
		masks[room] = o.in.UseOf(room).mask
	}
	f := control.Facts{
		InUse: func(step int) bool {
			for _, mask := range masks {
				if mask[moments[step].Step] {
					return true
				}
			}
			return false
		},
		FacadeWm2: func(step int) float64 { return o.facade(u.Opening, rect).irradiance(moments[step]) },
		DirectLx:  func(step int) []float32 { return o.directBy(step)[u.Group] },
		DeskWm2: func(step int) []float64 {
			m := moments[step]
			desks := make([]float64, len(o.in.Scene.Viewpoints))
			if m.DNI > 0 && m.Sun.Z > 0 {
				for i, v := range o.in.Scene.Viewpoints {
					if !served[v.Room] || !masks[v.Room][m.Step] {
						continue
					}
					desks[i] = m.DNI * m.Sun.Z * sunThrough(o.open, v.Position, m.Sun)
				}
			}
			return desks
		},
	}
	for _, m := range project.Movables(o.in.Project) {
		if m.Name == u.Name && m.Follow != nil {
			f.Following = func(step int) string { return stateUnder(m, rect, moments[step]) }
		}
	}
	return f
}

// served are the rooms whose people a unit reacts to: that of its users, those of
// the viewpoints that it watches, else all.
func (o *operation) served(u *control.Unit) map[string]bool {
	served := map[string]bool{}
	switch {
	case u.Room != "":
		served[u.Room] = true
	case u.Glare != nil && len(u.Glare.Viewpoints) > 0:
		for _, i := range u.Glare.Viewpoints {
			served[o.in.Scene.Viewpoints[i].Room] = true
		}
	default:
		for _, use := range o.in.allUses() {
			served[use.Room] = true
		}
	}
	return served
}

// directBy is the sun on each sensor by the group of openings through which it
// comes, with everything open, lx.
func (o *operation) directBy(step int) map[string][]float32 {
	if by, ok := o.direct[step]; ok {
		return by
	}
	by := map[string][]float32{}
	n := o.in.Scene.Sensors()
	for _, op := range o.in.Scene.Openings {
		if by[op.Group] == nil {
			by[op.Group] = make([]float32, n)
		}
	}
	m := o.in.Climate.Moments[step]
	world := o.open
	if m.SunNormalLx > 0 {
		i := 0
		for _, w := range o.in.Scene.WorkPlanes {
			for _, s := range w.Sensors {
				cos := r3.Dot(s.Normal, m.Sun)
				if cos > 0 {
					if tau := sunThrough(world, s.Position, m.Sun); tau > 0 {
						part := world.FirstPane(s.Position, m.Sun)
						if part >= 0 && world.Scene.Parts[part].Opening >= 0 {
							by[world.Scene.Openings[world.Scene.Parts[part].Opening].Group][i] += float32(m.SunNormalLx * cos * tau)
						}
					}
				}
				i++
			}
		}
	}
	o.direct[step] = by
	return by
}

// report adds up how long each group of openings stands in each of its states,
// what view that leaves, and what daylight it takes where the year with
// everything open was computed too.
func (o *operation) report(y *year) control.Report {
	l := control.Losses{View: control.ViewLeft(o.in.Scene, o.units)}
	if n := len(y.light.E); n > 0 && o.openYear != nil && o.openYear.inUse(o.steps) {
		var masks [][]bool // by sensor
		for _, w := range o.in.Scene.WorkPlanes {
			mask := o.in.UseOf(w.Room).mask
			for range w.Sensors {
				masks = append(masks, mask)
			}
		}
		mean := func(of *year, step int) float64 {
			sum := 0.0
			for s := range of.light.E {
				if masks[s][o.steps[step].At] {
					sum += float64(of.light.E[s][step])
				}
			}
			return sum / float64(n)
		}
		l.Light = func(step int, c control.Combination) float64 {
			if c == o.plan.Open() {
				return mean(o.openYear.year, step)
			}
			return mean(y, step)
		}
	}
	return o.plan.Report(l)
}

// mostStates is how many states of a group are told one by one; own choice.
const mostStates = 6

// positions tells the groups' states in words.
func positions(r *control.Report) (list []string) {
	for _, g := range r.Groups {
		for i, s := range g.States {
			if i == mostStates {
				list = append(list, fmt.Sprintf("%s: and %d more states.", g.Group, len(g.States)-i))
				break
			}
			list = append(list, fmt.Sprintf("%s, %s: %.0f h with daylight, %.0f h of them in use.", g.Group, s.State, s.DaylightH, s.InUseH))
		}
		if len(g.States) > 1 && g.ViewLost > 0 {
			list = append(list, fmt.Sprintf("%s: shaded %.0f %% of the time in use, which takes %.0f %% of the view straight out.", g.Group, 100*g.ShadedShare, 100*g.ViewLost))
		}
	}
	if r.LightLost == r.LightLost && r.LightLost != 0 {
		list = append(list, fmt.Sprintf("Shading takes %.0f %% of the daylight on the work planes in use.", 100*r.LightLost))
	}
	return list
}
