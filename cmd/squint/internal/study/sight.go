package study

import (
	"context"
	"fmt"
	"io/fs"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
	"squint/trace"
	"squint/trace/outlook"
)

// Sight is what a kind of system takes of the view out.
type Sight struct {
	Name  string // of the systems, "light shelves" or that of one that moves
	State string // the most closed one, of what moves
	// LowM and HighM are the heights of the lowest and the highest shelf's top
	// above the floor; NaN for what moves.
	LowM, HighM float64
	// Taken is the share of the view out that is lost, by viewpoint: that
	// through all openings as the viewpoint sees them. NaN where it sees none.
	Taken []float64
	// Factor is the mean daylight factor of the sensors with closed perforated
	// slats; NaN for everything else.
	Factor float64
}

// sightCells is the number of lines of sight along each side of an opening; own
// choice: what is taken is told in per cent, and is good to a row of them.
const sightCells = 24

// sights looks at shelves, which the open scene has and a scene without them
// has not, and at everything that moves, closed against open.
func sights(ctx context.Context, fsys fs.FS, in *Input, opt Options) ([]Sight, error) {
	p := in.Project
	moving := project.Movables(p)
	if fsys == nil || len(p.LightShelves)+len(moving) == 0 {
		return nil, nil
	}
	open := map[string]string{}
	for _, m := range moving {
		open[m.Name] = m.OpenToClosed()[0]
	}
	var with *trace.World
	var err error
	if in.operation != nil {
		with = in.operation.open
	} else if with, err = worldOf(fsys, project.WithStates(p, open), opt.Workers); err != nil {
		return nil, err
	}
	var list []Sight
	if len(p.LightShelves) > 0 {
		bare := *project.WithStates(p, open)
		bare.LightShelves = nil
		without, err := worldOf(fsys, &bare, opt.Workers)
		if err != nil {
			return nil, err
		}
		s := Sight{Name: "light shelves", LowM: math.Inf(1), HighM: math.Inf(-1), Factor: math.NaN()}
		floor := floorUnder(with)
		for _, shelf := range p.LightShelves {
			if k, ok := openingOf(with.Scene, shelf.Opening); ok {
				r := with.Scene.Openings[k].Rect
				top := r.Point(r.WidthM/2, shelf.HeightM, 0).Z - floor
				s.LowM, s.HighM = min(s.LowM, top), max(s.HighM, top+float64(shelf.Stack-1)*shelf.StackSpacingM)
			}
		}
		s.Taken = taken(with, without, in.Scene.Viewpoints)
		list = append(list, s)
	}
	// Systems of one kind and state are told together, as they are bought.
	kinds := map[string]*closing{}
	var order []string
	for _, m := range moving {
		states := m.OpenToClosed()
		closed := states[len(states)-1]
		key := m.Kind + "\n" + closed
		if kinds[key] == nil {
			kinds[key] = &closing{choice: map[string]string{}, kind: m.Kind, state: closed}
			for n, s := range open {
				kinds[key].choice[n] = s
			}
			order = append(order, key)
		}
		k := kinds[key]
		k.choice[m.Name] = closed
		k.names = append(k.names, m.Name)
		k.perforated = k.perforated || perforatedSlats(p, m.Name)
	}
	for _, key := range order {
		k := kinds[key]
		q := project.WithStates(p, k.choice)
		shut, err := worldOf(fsys, q, opt.Workers)
		if err != nil {
			return nil, err
		}
		s := Sight{Name: k.words(), State: k.state, LowM: math.NaN(), HighM: math.NaN(), Factor: math.NaN(), Taken: taken(shut, with, in.Scene.Viewpoints)}
		if k.perforated && in.Scene.Sensors() > 0 {
			if s.Factor, err = closedFactor(ctx, in, shut, opt); err != nil {
				return nil, err
			}
		}
		list = append(list, s)
	}
	return list, nil
}

// closing is what is closed together to see what that takes.
type closing struct {
	choice      map[string]string
	kind, state string
	names       []string
	perforated  bool
}

func (c *closing) words() string {
	if len(c.names) == 1 {
		return c.names[0]
	}
	return fmt.Sprintf("%s and %d more", c.names[0], len(c.names)-1)
}

func worldOf(fsys fs.FS, p *project.Project, workers int) (*trace.World, error) {
	s, err := scene.Build(fsys, p)
	if err != nil {
		return nil, err
	}
	return trace.Accelerate(s, workers), nil
}

// taken is what of the view a scene has less than another, by viewpoint: the
// openings count by the solid angle that they have from there.
func taken(with, without *trace.World, views []scene.Viewpoint) []float64 {
	list := make([]float64, len(views))
	for i, v := range views {
		var sum, all float64
		for _, o := range without.Scene.Openings {
			left := outlook.ViewShare(with, without, v.Position, o.Rect, sightCells)
			if left != left {
				continue
			}
			// The solid angle of a small rectangle; good enough to weigh by.
			d := r3.Sub(o.Rect.Point(o.Rect.WidthM/2, o.Rect.HeightM/2, 0), v.Position)
			omega := o.Rect.WidthM * o.Rect.HeightM * math.Abs(r3.Dot(d, o.Rect.Outward)) / math.Pow(r3.Norm(d), 3)
			sum += (1 - left) * omega
			all += omega
		}
		list[i] = sum / all // NaN where nothing is seen
	}
	return list
}

// floorUnder is the lowest thing straight below viewpoints and sensors.
func floorUnder(w *trace.World) float64 {
	low := math.Inf(1)
	look := func(p r3.Vec) {
		if h, ok := w.Closest(p, r3.Vec{Z: -1}); ok {
			low = min(low, h.Point.Z)
		}
	}
	for _, v := range w.Scene.Viewpoints {
		look(v.Position)
	}
	for _, plane := range w.Scene.WorkPlanes {
		for _, s := range plane.Sensors {
			look(s.Position)
		}
	}
	return low
}

// perforatedSlats is whether a blind or louvres of that name have holes.
func perforatedSlats(p *project.Project, name string) bool {
	upper := ""
	for _, b := range p.Blinds {
		if b.Name == name {
			upper = b.Upper
		}
	}
	for _, l := range p.Louvres {
		if l.Name == name {
			upper = l.Upper
		}
	}
	for _, f := range p.Finishes {
		if f.Name == upper && upper != "" {
			return f.Type == "perforated"
		}
	}
	return false
}

// closedFactor is the mean daylight factor of the sensors of a closed scene.
func closedFactor(ctx context.Context, in *Input, shut *trace.World, opt Options) (float64, error) {
	sub := *in
	sub.Clear = nil
	s := *shut.Scene
	s.Viewpoints = nil
	sub.Scene = &s
	sub.Standings = []Standing{{Scene: &s, World: shut}}
	opt.shots = nil
	y, err := computeYear(ctx, &sub, opt, &Result{})
	if err != nil {
		return 0, err
	}
	return daylight.Factors(y.factors).Mean, nil
}
