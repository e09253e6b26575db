package study

import (
	"context"
	"fmt"
	"io/fs"
	"math"
	"slices"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/picture"
)

// LookOptions say which pictures to make. The pictures are all combinations of
// designs, moments and views, in that order.
type LookOptions struct {
	Views      []string // by name; none: the first
	AllViews   bool
	Projection view.Projection
	FOVDeg     float64
	Width      int // pixels
	Height     int
	// Plan, where not nil, is looked at instead of Views.
	Plan    *PlanOptions
	When    []When
	Workers int
	Seed    *uint64 // nil for the project's
}

// PlanOptions set a plan: seen from straight above, cut at a height.
type PlanOptions struct {
	CutM     *float64 // nil: planAboveM over the highest viewpoint or work plane
	Quantity picture.Quantity
	Pixels   int // along the longer side
}

// planAboveM is the cut's height over the highest viewpoint or work plane where
// none is given. Own choice: above desks and eyes, below ceilings.
const planAboveM = 0.5

// When is a moment of a picture: made for the climate of its design, with words
// for its sky.
type When func(c *scene.Climate, p *project.Project) (m *scene.Moment, sky string, err error)

// lookSet are the shots of one scene: they share the exchange of its surfaces.
type lookSet struct {
	world   *trace.World
	cameras []picture.Camera
	stage   *picture.Stage
	moment  *scene.Moment
	light   *picture.Light
}

// Look is a list of pictures to make, in order.
type Look struct {
	Shots []*Shot
	Notes []string
	opt   LookOptions
	last  *lookSet
}

// Design is a project with the words that tell it from the others; "" where it
// is alone.
type Design struct {
	Project *project.Project
	Words   string
}

// PrepareLook reads and builds what the pictures of designs need; all lie in
// fsys. Errors are the user's to mend.
func PrepareLook(fsys fs.FS, designs []Design, o LookOptions) (*Look, error) {
	k := &Look{opt: o}
	for _, d := range designs {
		p := d.Project
		if o.Seed != nil {
			q := *p
			q.Simulation.Seed = *o.Seed
			p = &q
		}
		c, err := scene.ReadClimate(fsys, p, nil)
		if err != nil {
			return nil, err
		}
		first, err := scene.Build(fsys, p)
		if err != nil {
			return nil, err
		}
		in := &Input{Project: p, Scene: first}
		if len(p.ViewGrids) > 0 {
			in.World = trace.Accelerate(first, o.Workers)
			if err := in.leaveOut(); err != nil {
				return nil, err
			}
			p = in.Project
		}
		for _, n := range slices.Concat(in.Notes, first.Notes, c.Notes) {
			if !slices.Contains(k.Notes, n) {
				k.Notes = append(k.Notes, n)
			}
		}
		if err := k.addDesign(fsys, p, d.Words, c, first); err != nil {
			return nil, err
		}
	}
	return k, nil
}

// addDesign adds a design's shots; moments at which followers stand alike share
// a scene.
func (k *Look) addDesign(fsys fs.FS, p *project.Project, words string, c *scene.Climate, first *scene.Scene) error {
	type stood struct {
		set   *lookSet
		shots []*Shot
	}
	sets := map[string]*stood{}
	var order []string
	following := followers(p)
	days, before := calendar(p, c), len(k.Shots)
	for i, when := range k.opt.When {
		m, sky, err := when(c, p)
		if err != nil {
			return err
		}
		choice, key, label := follow(following, first, m)
		st := sets[key]
		if st == nil {
			s := first
			if len(choice) > 0 {
				if s, err = scene.Build(fsys, project.WithStates(p, choice)); err != nil {
					return err
				}
			}
			st = &stood{set: &lookSet{world: trace.Accelerate(s, k.opt.Workers)}}
			sets[key] = st
			order = append(order, key)
		}
		shots, err := k.shots(p, st.set.world.Scene)
		if err != nil {
			return err
		}
		clock := m.Time.Add(time.Duration(days.ClockShiftH(m.Time.YearDay()-1) * float64(time.Hour)))
		for _, s := range shots {
			s.Clock, s.Design, s.Order = clock, words, before+i
			s.Project, s.Climate, s.Scene, s.Moment, s.Sky, s.Stands, s.set = p, c, st.set.world.Scene, m, sky, label, st.set
		}
		st.shots = append(st.shots, shots...)
	}
	for _, l := range order {
		st := sets[l]
		for _, s := range st.shots {
			if !slices.Contains(st.set.cameras, s.Camera()) {
				st.set.cameras = append(st.set.cameras, s.Camera())
			}
		}
		k.Shots = append(k.Shots, st.shots...)
	}
	return nil
}

// shots are the views asked for.
func (k *Look) shots(p *project.Project, s *scene.Scene) ([]*Shot, error) {
	if k.opt.Plan != nil {
		plan, err := planOf(s, k.opt.Plan)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", p.File, err)
		}
		return []*Shot{{Name: "plan", Plan: &plan, Seen: k.opt.Plan.Quantity}}, nil
	}
	var out []*Shot
	for _, v := range s.Viewpoints {
		if !k.opt.AllViews && !slices.Contains(k.opt.Views, v.Name) && (len(k.opt.Views) > 0 || len(out) > 0) {
			continue
		}
		up := r3.Vec{Z: 1}
		if math.Abs(v.Direction.Z) > 0.999 {
			up = r3.Vec{Y: 1}
		}
		vw, err := view.New(v.Position, v.Direction, up, k.opt.Projection, k.opt.FOVDeg*math.Pi/180, k.opt.Width, k.opt.Height)
		if err != nil {
			return nil, err
		}
		out = append(out, &Shot{Name: v.Name, View: vw})
	}
	for _, name := range k.opt.Views {
		if names := viewpointNames(s); !slices.Contains(names, name) {
			return nil, fmt.Errorf("%s: got view %q, want a viewpoint of the project; %s", p.File, name, project.DidYouMean(name, names))
		}
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("%s: got no viewpoint to look from, want one; add [[viewpoint]] or ask for a plan", p.File)
	}
	return out, nil
}

func viewpointNames(s *scene.Scene) (names []string) {
	for _, v := range s.Viewpoints {
		names = append(names, v.Name)
	}
	return names
}

// planOf is the plan of the rooms.
func planOf(s *scene.Scene, o *PlanOptions) (view.Plan, error) {
	lo, hi := r3.Vec{X: math.Inf(1), Y: math.Inf(1)}, r3.Vec{X: math.Inf(-1), Y: math.Inf(-1)}
	for _, t := range s.Triangles {
		if s.Parts[t.Part].Kind != scene.Room {
			continue
		}
		for _, v := range t.V {
			lo.X, lo.Y = math.Min(lo.X, v.X), math.Min(lo.Y, v.Y)
			hi.X, hi.Y = math.Max(hi.X, v.X), math.Max(hi.Y, v.Y)
		}
	}
	cut := math.Inf(-1)
	for _, v := range s.Viewpoints {
		cut = math.Max(cut, v.Position.Z+planAboveM)
	}
	for _, w := range s.WorkPlanes {
		cut = math.Max(cut, w.HeightM+planAboveM)
	}
	if o.CutM != nil {
		cut = *o.CutM
	}
	if math.IsInf(cut, 0) {
		return view.Plan{}, fmt.Errorf("plan: got neither viewpoint nor work plane to set the height of its cut by; want --cut")
	}
	return view.NewPlan(lo.X, hi.X, lo.Y, hi.Y, cut, o.Pixels)
}

// Take makes one of the pictures, those of one scene in a row: they share work.
// Where the context ends after the first samples, the picture is what there is.
func (k *Look) Take(ctx context.Context, s *Shot, o picture.Options, progress func(stage Stage, done, total int)) error {
	if progress == nil {
		progress = func(Stage, int, int) {}
	}
	set := s.set
	if k.last != nil && k.last != set {
		k.last.stage, k.last.light, k.last.moment = nil, nil, nil
	}
	k.last = set
	var err error
	if set.stage == nil {
		sim := s.Project.Simulation
		cfg := picture.Config{TexelSamples: sim.TexelSamples, Seed: sim.Seed, Workers: k.opt.Workers}
		set.stage, err = picture.Prepare(ctx, set.world, set.cameras, cfg, func(done, known int) { progress(StageSurfaces, done, known) })
		if err != nil {
			set.stage = nil
			return err
		}
	}
	if set.moment != s.Moment {
		if set.light, err = set.stage.Light(ctx, s.Moment); err != nil {
			return err
		}
		set.moment = s.Moment
	}
	o.Quantity = s.Seen
	if s.Picture, err = set.light.Render(ctx, s.Camera(), o); err != nil {
		return err
	}
	if s.Plan == nil {
		s.Discs = set.light.Discs(s.View)
		s.judge()
	}
	return nil
}

// TakeAll makes all the pictures of one project's designs, for generators: the
// whole of what look does but for its command line and files.
func TakeAll(ctx context.Context, fsys fs.FS, designs []Design, o LookOptions, until picture.Options) ([]*Shot, error) {
	k, err := PrepareLook(fsys, designs, o)
	if err != nil {
		return nil, err
	}
	for _, s := range k.Shots {
		if err := k.Take(ctx, s, until, nil); err != nil {
			return nil, err
		}
	}
	return k.Shots, ctx.Err()
}
