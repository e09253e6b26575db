package report

import (
	"fmt"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/scene/weather"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// sample is a small study made by hand: n viewpoints, of which the first fails
// and the second is undecided, and one work plane of two sensors. Numbers are
// chosen, not computed.
func sample(names ...string) *study.Result {
	y := &weather.Year{File: "site.epw", Format: "EPW", Site: weather.Site{Name: "Nowhere", LatitudeDeg: 47.6, LongitudeDeg: -8.2, ElevationM: 6}}
	sin := make([]float64, daylight.HoursPerYear)
	c := &scene.Climate{Year: y, OffsetH: -0.5, SinAltitude: sin}
	c.Fit = weather.Fit{OffsetH: -0.5, ClaimedOffsetH: -0.5, Decided: true, RMSWm2: 0.1, Text: "The irradiances of site.epw fit together best with the sun taken 0.500 h before the labelled hour."}
	at := time.Date(2022, 1, 1, 0, 30, 0, 0, time.UTC)
	for h := range daylight.HoursPerYear {
		t := at.Add(time.Duration(h) * time.Hour)
		y.Records = append(y.Records, weather.Record{Month: int(t.Month()), Day: t.Day(), EndH: float64(h%24 + 1)})
		sin[h] = 0.5 * math.Sin(float64(h%24-6)*math.Pi/12)
		if sin[h] > 0.05 {
			a := float64(h%24) * math.Pi / 12
			c.Moments = append(c.Moments, &scene.Moment{Step: h, Time: t, Month: int(t.Month()) - 1,
				Sun: r3.Unit(r3.Vec{X: -math.Sin(a), Y: -math.Cos(a) * -1, Z: sin[h]}), SunNormalLx: 60000, DiffuseLx: 12000, GlobalLx: 40000, Occupied: true})
		}
	}
	p := &project.Project{File: "office/room.toml", Hash: "ab12", Title: "Office in the yard",
		Criteria:   project.Criteria{Glare: "minimum", Provision: "minimum"},
		Occupancy:  project.Occupancy{Days: [7]bool{true, true, true, true, true}, FromH: 8, ToH: 18},
		Weather:    project.Weather{File: "site.epw"},
		Simulation: project.Simulation{Seed: 1, Batches: 8, FisheyePixels: 64, SamplesPerPixel: 16, SensorSamples: 4096, TexelM: 0.2, TexelSamples: 256, Photons: 4000, MemoryMiB: 1024}}
	s := &scene.Scene{Project: p, Meshes: []scene.MeshSummary{{File: "office/room.obj", Role: "room", Triangles: 1234, Degenerate: 2, SHA256: "cd34", Bounds: r3.Box{Min: r3.Vec{X: -1}, Max: r3.Vec{X: 3, Y: 8.2, Z: 2.8}}}}}
	r := &study.Result{Project: p, Scene: s, Climate: c,
		Notes:    []string{"office/room.obj: 2 triangles without area were left out."},
		Settings: study.Settings{Workers: 2, TexelSides: 8000, Coarsen: 1, Confidence: 0.95, ZViews: 3.1, ZSensors: 4.2, Kernel: "plain"}}
	r.Calendar = daylight.Calendar{Days: p.Occupancy.Days, FromH: 8, ToH: 18}
	r.Occupied, r.Clock = r.Calendar.Occupied(), r.Calendar.Clock(8, 18)
	r.Daylight = daylight.SunHighest(sin, daylight.DaylightHoursPerYear)
	for i, n := range names {
		r.Views = append(r.Views, sampleView(r, i, n))
		s.Viewpoints = append(s.Viewpoints, r.Views[i].Viewpoint)
		r.Verdicts = append(r.Verdicts, r.Views[i].Levels[0])
	}
	samplePlane(r)
	r.Outcome = verdict.Combine(r.Verdicts)
	return r
}

func sampleView(r *study.Result, i int, name string) study.ViewResult {
	n := daylight.HoursPerYear
	v := study.ViewResult{Viewpoint: scene.Viewpoint{Name: name, Position: r3.Vec{X: 1, Y: 2, Z: 1.2}, Direction: r3.Vec{X: 1}},
		DGP: make([]float32, n), StdErr: make([]float32, n), Ev: make([]float32, n), InRange: make([]bool, n), Cause: make([]int16, n),
		Causes: []study.Cause{{Kind: study.SunDisc, Via: "window 4"}, {Kind: study.SkySeen, Via: "window 5"}}}
	over := []int{143, 132, 20, 0}[min(i, 3)]
	used := r.Occupied.Mask(n)
	for h := range n {
		v.Cause[h] = -1
		if !used[h] {
			v.DGP[h], v.StdErr[h], v.Ev[h] = float32(math.NaN()), float32(math.NaN()), float32(math.NaN())
			continue
		}
		v.DGP[h], v.StdErr[h], v.Ev[h] = 0.25, 0.002, 1200.5
		if over > 0 && h%24 == 10 {
			v.DGP[h], v.Cause[h], v.Ev[h] = 0.4725, 0, 5210.75
			over--
			if i == 1 {
				v.StdErr[h] = 0.02 // too wide to tell
			}
		}
	}
	dgp, se := make([]float32, len(r.Occupied)), make([]float32, len(r.Occupied))
	for k, h := range r.Occupied {
		dgp[k], se[k] = v.DGP[h], v.StdErr[h]
	}
	v.When = "mostly 10 to 11 h from January to July, by the sun's disc through window 4"
	for _, l := range verdict.ProtectionLevels {
		g := verdict.CountGlare(dgp, se, l.DGP, r.Settings.ZViews)
		v.Hours = append(v.Hours, g)
		told := v.When
		if g.Hours.Surely == 0 && g.Hours.Possibly > 0 {
			told = fmt.Sprintf("%d hours open: %s, DGP within 0.02 of the limit", int(g.Hours.Possibly), v.When)
		}
		v.Levels = append(v.Levels, verdict.Glare(name+", looking east", l, g, told))
	}
	v.Worst = sampleWorst(r)
	return v
}

// sampleWorst is a picture of 32 pixels with a bright window and the sun.
func sampleWorst(r *study.Result) *study.Worst {
	vw, err := view.New(r3.Vec{X: 1, Y: 2, Z: 1.2}, r3.Vec{X: 1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, 32, 32)
	if err != nil {
		panic(err)
	}
	w := &study.Worst{Moment: r.Climate.Moments[5], StdErr: 0.004, InsideOf: &coeff.Eye{View: vw}, Lum: make([]float32, 32*32)}
	f := glare.NewField(vw)
	for y := range 32 {
		for x := range 32 {
			i := y*32 + x
			switch {
			case !f.Inside[i]:
			case x > 8 && x < 15 && y > 8 && y < 15:
				w.Lum[i] = 8000
				w.InsideOf.Inside = append(w.InsideOf.Inside, int32(i))
			default:
				w.Lum[i] = 120
				w.InsideOf.Inside = append(w.InsideOf.Inside, int32(i))
			}
		}
	}
	d := annual.Disc{Dir: r3.Unit(r3.Vec{X: 1, Y: 0.3, Z: 0.4}), OmegaSr: 5e-5, Luminance: 4e8, Mirror: -1, Via: -1}
	w.Discs = []annual.Disc{d}
	w.Result = glare.Evaluate(f, w.Lum, []glare.Disc{{Dir: vw.Local(d.Dir), OmegaSr: d.OmegaSr, Luminance: d.Luminance}}, glare.Options{}, nil)
	w.DGP, w.Ev = w.Result.DGP, w.Result.Ev
	return w
}

func samplePlane(r *study.Result) {
	w := scene.WorkPlane{Name: "open plan", SpacingM: 0.6, HeightM: 0.85, Sensors: []scene.Sensor{{Position: r3.Vec{X: 1, Y: 1, Z: 0.85}}, {Position: r3.Vec{X: 2, Y: 1, Z: 0.85}}}}
	p := study.PlaneResult{Plane: w, Asked: 0, DA: []float64{0.5, 0.25}, CDA: []float64{0.75, 0.5}, UDI: make([]daylight.UsefulShares, 2), MeanDA: 0.375, MeanCDA: 0.625,
		MeanUDI: daylight.UsefulShares{FellShort: 0.25, Supplementary: 0.25, Autonomous: 0.375, Exceeded: 0.125}, Factor: []float64{0.01, 0.03}, FactorError: []float64{0.001, 0.001}}
	for range w.Sensors {
		e := make([]float32, daylight.HoursPerYear)
		for h := range e {
			if h%24 > 6 && h%24 < 18 {
				e[h] = 412.25
			}
		}
		p.E, p.StdErr, p.Direct = append(p.E, e), append(p.StdErr, make([]float32, len(e))), append(p.Direct, make([]float32, len(e)))
	}
	p.Factors = daylight.Factors(p.Factor)
	plane := daylight.Plane{E: p.E, SE: p.StdErr, Z: r.Settings.ZSensors}
	p.SDA = daylight.SDA(plane, r.Clock, daylight.DefaultSpatial, 1)
	p.ASE = daylight.ASE(p.Direct, r.Clock, daylight.DefaultExposure, 1)
	for _, l := range daylight.ProvisionLevels {
		q := daylight.Provision(plane, r.Daylight, l)
		p.Provision, p.Levels = append(p.Provision, q), append(p.Levels, verdict.Provision(w.Name, q))
	}
	r.Scene.WorkPlanes = append(r.Scene.WorkPlanes, w)
	r.Planes = append(r.Planes, p)
	r.Verdicts = append(r.Verdicts, p.Levels[0])
}
