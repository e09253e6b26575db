package study

import (
	"fmt"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
)

// confidenceViews look along the window, askew, and at it.
const confidenceViews = `[[viewpoint]]
name = "along"
position_m = [2, 2, 1.2]
azimuth_deg = 90

[[viewpoint]]
name = "askew"
position_m = [2, 2.5, 1.2]
azimuth_deg = 120

[[viewpoint]]
name = "toward"
position_m = [1, 3, 1.2]
azimuth_deg = 180

`

const confidenceScreen = `
[[roller]]
name = "screen"
opening = "window"
openness = 0.05
diffuse_transmittance = 0.1
reflectance = 0.5
`

// confidenceScenes are the tiny room with changes, each with the view that the
// limit is put beside.
var confidenceScenes = []struct {
	name, from, to string
	near           int
}{
	{"light walls", "", "", 0},
	{"dark walls", "reflectance = 0.6", "reflectance = 0.3", 1},
	{"screen", "[criteria]", confidenceScreen + "[criteria]", 1},
}

func confidenceScene(t *testing.T, texelM float64, from, to string) *Input {
	t.Helper()
	text := fmt.Sprintf(tinyProject, texelM)
	if from != "" {
		text = replaceOnce(text, from, to)
	}
	views := strings.Index(text, "[[viewpoint]]")
	text = text[:views] + confidenceViews + text[strings.Index(text, "[[work_plane]]"):]
	fsys := fstest.MapFS{
		"project.toml": {Data: []byte(text)},
		"room.obj":     {Data: []byte(tinyRoom())},
		"site.epw":     {Data: tinyYear(t)},
	}
	in, err := prepareFile(fsys, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	// Sensors count the hours from 8 to 18, of which views have every other one.
	var lit []*scene.Moment
	in.Occupied, in.Clock = nil, nil
	for _, m := range in.Climate.Moments {
		if h := m.Step % 24; h >= 8 && h < 18 {
			lit, in.Clock = append(lit, m), append(in.Clock, m.Step)
			if m.Occupied = h%2 == 0; m.Occupied {
				in.Occupied = append(in.Occupied, m.Step)
			}
		}
	}
	in.Climate.Moments, in.Standings[0].Moments = lit, lit
	in.Daylight = in.Clock
	// A plane for each sensor has verdicts on it alone.
	all := in.Scene.WorkPlanes[0]
	in.Scene.WorkPlanes = nil
	for _, s := range all.Sensors {
		one := all
		one.Sensors = []scene.Sensor{s}
		in.Scene.WorkPlanes = append(in.Scene.WorkPlanes, one)
	}
	s := &in.Project.Simulation
	s.FisheyePixels, s.SamplesPerPixel, s.TexelSamples, s.SensorSamples, s.Photons = 24, 8, 128, 1024, 1000
	return in
}

// idle adds hours of use in the dark, so that the limit of 5 % lies half an hour
// below that many.
func idle(in *Input, over int) {
	in.Occupied = slices.Clone(in.Occupied)
	for h := 0; len(in.Occupied) < 20*over-10; h += 24 { // midnight, then 1 h
		if h >= daylight.HoursPerYear {
			h = h%24 + 1
		}
		in.Occupied = append(in.Occupied, h)
	}
	slices.Sort(in.Occupied)
}

// seeded is the input with random numbers of its own.
func seeded(in *Input, seed uint64) *Input {
	sub, p := *in, *in.Project
	p.Simulation.Seed = seed
	sub.Project = &p
	return &sub
}

// confidenceTruths is the number of runs whose mean is the truth, each with more
// samples and pixels five times finer, and truthZ how many of the standard
// errors of their mean the truth is uncertain by. What single runs measure of
// their error shrinks little with samples, since the sun's edges on texels of 2 m
// are felt with a fixed number of rays.
const (
	confidenceTruths = 8
	truthZ           = 3
)

// meanOf is the mean of series of some runs and the standard error of the mean.
func meanOf(runs []*Result, series func(*Result) []float32) (mean, se []float32) {
	n := float64(len(runs))
	first := series(runs[0])
	mean, se = make([]float32, len(first)), make([]float32, len(first))
	for h := range first {
		var sum, squares float64
		for _, r := range runs {
			sum += float64(series(r)[h])
		}
		m := sum / n
		for _, r := range runs {
			squares += (float64(series(r)[h]) - m) * (float64(series(r)[h]) - m)
		}
		mean[h], se[h] = float32(m), float32(math.Sqrt(squares/(n-1)/n))
	}
	return mean, se
}

// reliability counts verdicts against the truth, and those of a twin.
type reliability struct{ all, undecided, sure, wrong, twins, twinWrong int }

// add judges a verdict. Where the truth is not sure itself, none is wrong, but
// undecided it may be.
func (c *reliability) add(got, truth verdict.Outcome) {
	c.all++
	if got == verdict.Undecided {
		c.undecided++
	}
	if truth == verdict.Undecided {
		return
	}
	c.sure++
	if got != truth && got != verdict.Undecided {
		c.wrong++
	}
}

func (c *reliability) addTwin(got, truth verdict.Outcome) {
	if truth == verdict.Undecided {
		return
	}
	if c.twins++; got != truth {
		c.twinWrong++
	}
}

func (c *reliability) join(o reliability) {
	c.all, c.undecided, c.sure, c.wrong = c.all+o.all, c.undecided+o.undecided, c.sure+o.sure, c.wrong+o.wrong
	c.twins, c.twinWrong = c.twins+o.twins, c.twinWrong+o.twinWrong
}

func share(n, of int) float64 { return float64(n) / math.Max(float64(of), 1) }

func (c *reliability) String() string {
	return fmt.Sprintf("undecided %d of %d (%.1f %%), wrong %d of %d (%.2f %%); without width wrong %d of %d",
		c.undecided, c.all, 100*share(c.undecided, c.all), c.wrong, c.sure, 100*share(c.wrong, c.sure), c.twinWrong, c.twins)
}

func narrow(b verdict.Bracket) verdict.Bracket {
	return verdict.Bracket{Surely: b.Estimate, Estimate: b.Estimate, Possibly: b.Estimate}
}

// seeds runs an input with many seeds, from a first one on.
func seeds(t *testing.T, in *Input, first uint64, n int) []*Result {
	t.Helper()
	runs := make([]*Result, n)
	opt := Options{Workers: 2, Progress: func(Stage, int, int) {}}
	err := each(t.Context(), opt, StageYear, n, func(k int) (err error) {
		runs[k], err = Run(t.Context(), seeded(in, first+uint64(k)), Options{Workers: 1, Bare: true})
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return runs
}

// confidenceCount is the number of seeds: SQUINT_SEEDS, 200 for a check in full,
// or what a minute of CPU time allows, most of which goes into the truth.
func confidenceCount(t *testing.T, usual int) int {
	t.Helper()
	if os.Getenv("SQUINT_LONG") == "" {
		t.Skip("takes a minute; set SQUINT_LONG=1")
	}
	text := os.Getenv("SQUINT_SEEDS")
	if text == "" {
		return usual
	}
	n, err := strconv.Atoi(text)
	if err != nil || n < 4 {
		t.Fatalf("SQUINT_SEEDS: got %q, want a number from 4 on", text)
	}
	return n
}

// check holds counts against what is asked: less than 1 % wrong of all, at most
// 10 % undecided of those far from the limit, and a twin, brackets of no width,
// that is wrong more often than allowed.
func (c *reliability) check(t *testing.T, far *reliability) {
	t.Helper()
	if share(c.wrong, c.sure) >= 0.01 {
		t.Errorf("got %d of %d wrong, want less than 1 %%", c.wrong, c.sure)
	}
	if share(far.undecided, far.all) > 0.1 {
		t.Errorf("got %d of %d undecided, want at most 10 %%", far.undecided, far.all)
	}
	if share(c.twinWrong, c.twins) < 0.01 {
		t.Errorf("got %d of %d wrong without width: the test sees nothing", c.twinWrong, c.twins)
	}
}

// oneLook is the input with no closer looks.
func oneLook(in *Input) *Input {
	once := seeded(in, 0)
	once.Project.Criteria.Glare = "none"
	return once
}
