package study

import (
	"fmt"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"squint/glare"
	"squint/scene"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/picture"
)

// hourlySeed picks projects, views and hours, and seeds the pictures.
const hourlySeed = 1

// The sizes of pictures that hour-by-hour rendering may choose from: pixels
// across, and samples a pixel, of the plain tracer and of pictures with gathering.
var (
	hourlyPixels   = []int{64, 96}
	plainSamples   = []int{8, 16, 32, 64, 128}
	pictureSamples = []int{8, 16, 32}
)

// hourlyRMSE and hourlyMost are the errors of DGP asked for, as root mean square
// and at most.
const (
	hourlyRMSE = 0.005
	hourlyMost = 0.015
)

// plainTruth and pictureTruth are the samples of the references, at twice the year's resolution.
const (
	plainTruth   = 256
	pictureTruth = 32
)

// way is one way of rendering hour by hour, and its pictures by samples.
type way struct {
	name   string
	pixels int
	levels []*level
}

// level is what pictures of so many samples a pixel cost and were worth.
type level struct {
	samples int
	seconds float64
	dgp     map[*hourlyPicture]float64
}

func (w *way) at(samples int) *level {
	for _, l := range w.levels {
		if l.samples == samples {
			return l
		}
	}
	l := &level{samples: samples, dgp: map[*hourlyPicture]float64{}}
	w.levels = append(w.levels, l)
	return l
}

// equal is the CPU time of a picture at which the way has the error wanted,
// between two levels by the straight line between their logarithms: the first
// level that has it, or, with keeps, the first from which on all have it. The
// first may be luck: noise makes DGP larger, pixels that are too wide make it
// smaller, and somewhere the two cancel. reached is false where even most samples
// have a larger error: then the time is theirs.
func (w *way) equal(list []*hourlyPicture, rmse float64, keeps bool) (seconds, samples float64, reached bool) {
	errors := make([]float64, len(w.levels))
	for i, l := range w.levels {
		errors[i], _ = spread(list, func(p *hourlyPicture) float64 { return l.dgp[p] })
	}
	has := func(e float64) bool { return e <= rmse }
	i := slices.IndexFunc(errors, has)
	if keeps {
		for i = len(errors); i > 0 && has(errors[i-1]); i-- {
		}
	}
	cost := func(i int) (float64, float64) {
		return w.levels[i].seconds / float64(len(w.levels[i].dgp)), float64(w.levels[i].samples)
	}
	if i < 0 || i == len(errors) {
		seconds, samples = cost(len(errors) - 1)
		return seconds, samples, false
	}
	seconds, samples = cost(i)
	if i > 0 && errors[i-1] > errors[i] {
		s, n := cost(i - 1)
		x := math.Log(rmse/errors[i-1]) / math.Log(errors[i]/errors[i-1])
		seconds, samples = s*math.Pow(seconds/s, x), n*math.Pow(samples/n, x)
	}
	return seconds, samples, true
}

// field is a fisheye with its solid angles.
type field struct {
	view view.View
	of   *glare.Field
}

func newHourlyField(b testing.TB, v scene.Viewpoint, pixels int) field {
	vw, _ := fisheye(b, v, pixels)
	return field{vw, glare.NewField(vw)}
}

func pooled(images [bruteBatches][]float32) []float32 {
	mean := make([]float32, len(images[0]))
	for _, im := range images {
		for i, l := range im {
			mean[i] += l / bruteBatches
		}
	}
	return mean
}

// plainLadder renders one hour with more and more samples by the plain tracer.
func (p *hourlyPicture) plainLadder(b testing.TB, w *way) {
	v := p.sub.Scene.Viewpoints[p.view]
	f := newHourlyField(b, v, w.pixels)
	var scratch glare.Scratch
	sum := make([]float32, w.pixels*w.pixels)
	done, seconds := 0, 0.0
	for i, n := range plainSamples {
		start := cpuSeconds(b)
		part := pooled(bruteImages(b, p.sub.World, v, []*scene.Moment{p.moment}, w.pixels, (n-done)/bruteBatches, hourlySeed<<8+uint64(i), 1)[0])
		for k, l := range part {
			sum[k] += l * float32(n-done)
		}
		done = n
		mean := make([]float32, len(sum))
		for k := range sum {
			mean[k] = sum[k] / float32(n)
		}
		dgp, _ := glare.DGPOnly(f.of, mean, p.discs, sourceOptions(p.sub.Project.Criteria), &scratch)
		seconds += cpuSeconds(b) - start
		l := w.at(n)
		l.dgp[p] = dgp
		l.seconds += seconds
	}
}

// stages are the exchanges of surfaces, traced once for each way in which the
// systems stand. Their time does not count against rendering hour by hour.
type stages map[stageOf]*picture.Stage

type stageOf struct {
	world *trace.World
	seed  uint64
}

func (s stages) of(b testing.TB, sub *Input, cameras []picture.Camera, seed uint64) *picture.Stage {
	k := stageOf{sub.World, seed}
	if s[k] == nil {
		var err error
		s[k], err = picture.Prepare(b.Context(), sub.World, cameras, picture.Config{TexelSamples: sub.Project.Simulation.TexelSamples, Seed: seed, Workers: 1}, nil)
		if err != nil {
			b.Fatal(err)
		}
	}
	return s[k]
}

// cameras are those of all views of a sample.
func cameras(b testing.TB, in *Input) []picture.Camera {
	var list []picture.Camera
	for _, v := range in.Scene.Viewpoints {
		vw, _ := fisheye(b, v, 96)
		list = append(list, vw)
	}
	return list
}

// pictureLadder renders one hour with more and more samples, gathering from
// solved surfaces; the solution for the hour counts.
func (p *hourlyPicture) pictureLadder(b testing.TB, w *way, light *picture.Light, solved float64) {
	v := p.sub.Scene.Viewpoints[p.view]
	f := newHourlyField(b, v, w.pixels)
	var scratch glare.Scratch
	start := cpuSeconds(b)
	take := func(im *picture.Picture) {
		dgp, _ := glare.DGPOnly(f.of, im.Mean, p.discs, sourceOptions(p.sub.Project.Criteria), &scratch)
		l := w.at(im.Samples)
		l.dgp[p] = dgp
		l.seconds += solved + cpuSeconds(b) - start
	}
	if _, err := light.Render(b.Context(), f.view, picture.Options{Samples: pictureSamples[len(pictureSamples)-1], Progress: take}); err != nil {
		b.Fatal(err)
	}
}

// reference finds what the DGP of pictures of one view is, by pictures at twice
// the year's resolution: the plain tracer's where it finds all light.
func reference(b testing.TB, list []*hourlyPicture, s stages) {
	for len(list) > 0 {
		var together, rest []*hourlyPicture
		for _, p := range list {
			if p.sub == list[0].sub && p.view == list[0].view {
				together = append(together, p)
			} else {
				rest = append(rest, p)
			}
		}
		list = rest
		sub, v := together[0].sub, together[0].sub.Scene.Viewpoints[together[0].view]
		f := newHourlyField(b, v, brutePixels)
		var moments []*scene.Moment
		for _, p := range together {
			moments = append(moments, p.moment)
		}
		judge := func(p *hourlyPicture, mean []float32, batch [][]float32) {
			var scratch glare.Scratch
			p.want, _, p.wantErr, _ = glare.Pooled(f.of, mean, batch, p.discs, sourceOptions(sub.Project.Criteria), 0, &scratch)
		}
		if plain(sub.World) {
			images := bruteImages(b, sub.World, v, moments, brutePixels, plainTruth/bruteBatches, hourlySeed+76, 2)
			for i, p := range together {
				judge(p, pooled(images[i]), images[i][:])
			}
			continue
		}
		stage := s.of(b, sub, cameras(b, sub), hourlySeed+76)
		for _, p := range together {
			light, err := stage.Light(b.Context(), p.moment)
			if err != nil {
				b.Fatal(err)
			}
			im, err := light.Render(b.Context(), f.view, picture.Options{Samples: pictureTruth})
			if err != nil {
				b.Fatal(err)
			}
			judge(p, im.Mean, im.Batch)
		}
	}
}

// hourlyProject is one project's comparison.
type hourlyProject struct {
	name        string
	list        []*hourlyPicture
	yearSeconds float64 // a view and hour in use
	ways        []*way
}

func runHourly(b testing.TB, name string, views, hours int) *hourlyProject {
	in := hourlyOffice(b, name)
	h := &hourlyProject{name: name}
	h.list = hourlySample(b, in, name, views, hours, hourlySeed)
	start := cpuSeconds(b)
	r, err := Run(b.Context(), in, Options{Workers: 1, Bare: true})
	if err != nil {
		b.Fatal(err)
	}
	seconds, frames := cpuSeconds(b)-start, 0
	for _, m := range in.Climate.Moments {
		if m.Occupied {
			frames += len(r.Views)
		}
	}
	h.yearSeconds = seconds / float64(frames)
	b.Logf("%s: the year of %d views in %d positions of what moves: %.1f CPU s, %d views x hours", name, len(r.Views), len(in.Standings), seconds, frames)
	for _, p := range h.list {
		p.year = float64(r.Views[p.view].DGP[p.moment.Step])
	}
	s := stages{}
	reference(b, h.list, s)
	for _, pixels := range hourlyPixels {
		if plain(in.World) {
			w := &way{name: "plain paths", pixels: pixels}
			for _, p := range h.list {
				p.plainLadder(b, w)
			}
			h.ways = append(h.ways, w)
		}
		h.ways = append(h.ways, &way{name: "gathering", pixels: pixels})
	}
	for _, p := range h.list {
		stage := s.of(b, p.sub, cameras(b, in), hourlySeed)
		start := cpuSeconds(b)
		light, err := stage.Light(b.Context(), p.moment)
		if err != nil {
			b.Fatal(err)
		}
		solved := cpuSeconds(b) - start
		for _, w := range h.ways {
			if w.name == "gathering" {
				p.pictureLadder(b, w, light, solved)
			}
		}
	}
	return h
}

// best is the cheapest way at an error.
func (h *hourlyProject) best(rmse float64, keeps bool) (w *way, seconds, samples float64, reached bool) {
	for _, x := range h.ways {
		s, n, ok := x.equal(h.list, rmse, keeps)
		if w == nil || ok && !reached || ok == reached && s < seconds {
			w, seconds, samples, reached = x, s, n, ok
		}
	}
	return w, seconds, samples, reached
}

// BenchmarkHourByHour holds the yearly engine against rendering every hour by
// itself, at equal error of DGP: the CPU time of a view and hour in use, that of
// tracing included, against that of a picture by the cheapest way at hand. In
// favour of the pictures, tracing their surfaces is not counted, nor is looking
// for the sun's disc.
//
// The error is the root mean square over sampled hours against pictures at twice
// the year's resolution: by the plain tracer, or, where mirrors or glossy surfaces
// throw light that it does not find, by gathering with photons, which shares its
// method with one of the two sides. Sampled hours are harder than the year's:
// see hourlySample.
//
// SQUINT_HOURLY=PROJECTSxVIEWSxHOURS sets the sample, or NAME,NAME:VIEWSxHOURS;
// 2x2x4 takes some minutes. Needs -benchtime 1x -timeout 0.
func BenchmarkHourByHour(b *testing.B) {
	projects, views, hours := galleryProjects(b, hourlySeed), 2, 4
	n := 2
	if env := os.Getenv("SQUINT_HOURLY"); env != "" {
		names, rest, named := strings.Cut(env, ":")
		var err error
		if named {
			projects = strings.Split(names, ",")
			n = len(projects)
			_, err = fmt.Sscanf(rest, "%dx%d", &views, &hours)
		} else {
			_, err = fmt.Sscanf(env, "%dx%dx%d", &n, &views, &hours)
		}
		if err != nil || n < 1 || n > len(projects) || views < 1 || views > 6 || hours < 1 || hours > 100 {
			b.Fatalf("SQUINT_HOURLY: got %q, want PROJECTSxVIEWSxHOURS or NAME,NAME:VIEWSxHOURS, up to 6 views and 100 hours", env)
		}
	}
	for b.Loop() {
		var all []*hourlyPicture
		var year float64
		var hourly [2]float64 // by any level that has the error, and by one that keeps it
		for _, name := range projects[:n] {
			h := runHourly(b, name, views, hours)
			for _, p := range h.list {
				b.Logf("  %-44s reference %.4f +- %.4f  year %+.4f", p, p.want, p.wantErr, p.year-p.want)
			}
			rmse, worst := spread(h.list, func(p *hourlyPicture) float64 { return p.year })
			for _, w := range h.ways {
				for _, l := range w.levels {
					e, m := spread(h.list, func(p *hourlyPicture) float64 { return l.dgp[p] })
					b.Logf("  %-11s %3d px %4d samples: %7.3f CPU s, RMSE %.4f, largest %.4f", w.name, w.pixels, l.samples, l.seconds/float64(len(l.dgp)), e, m)
				}
			}
			b.Logf("%s: RMSE %.4f, largest %.4f, %.5f CPU s a view and hour", name, rmse, worst, h.yearSeconds)
			for k, what := range [2]string{"has", "keeps"} {
				w, seconds, samples, reached := h.best(min(rmse, hourlyRMSE), k == 1)
				more := ""
				if !reached {
					more = " or more: not reached"
				}
				b.Logf("%s: %s with %d px %s the error from %.0f samples on, %.3f CPU s: %.0f times%s", name, w.name, w.pixels, what, samples, seconds, seconds/h.yearSeconds, more)
				hourly[k] += seconds * float64(len(h.list))
			}
			all = append(all, h.list...)
			year += h.yearSeconds * float64(len(h.list))
		}
		rmse, worst := spread(all, func(p *hourlyPicture) float64 { return p.year })
		m := float64(len(all))
		b.Logf("all %d pictures: %d of %d projects, %d of 6 views, %d hours each: RMSE %.4f, largest %.4f (asked %g and %g)",
			len(all), n, len(galleryProjects(b, hourlySeed)), views, hours, rmse, worst, hourlyRMSE, hourlyMost)
		b.Logf("%.5f CPU s a view and hour; hour by hour %.3f (%.0f times) where the error is had, %.3f (%.0f times) where it is kept",
			year/m, hourly[0]/m, hourly[0]/year, hourly[1]/m, hourly[1]/year)
		b.ReportMetric(rmse, "rmse")
		b.ReportMetric(worst, "largest")
		b.ReportMetric(year/m, "year-cpu-s")
		b.ReportMetric(hourly[0]/year, "ratio-had")
		b.ReportMetric(hourly[1]/year, "ratio-kept")
	}
}

// TestHourlyEqual: the samples for an error are found between two levels, one
// over their root where that is the law; an error met by luck at few samples is
// had there, but kept only from where all have it; one that no level has is said
// not to be reached.
func TestHourlyEqual(t *testing.T) {
	p := &hourlyPicture{want: .3}
	made := func(errors ...float64) *way {
		w := &way{}
		for i, e := range errors {
			l := w.at(16 << i)
			l.dgp[p], l.seconds = p.want+e, float64(int(1)<<i)
		}
		return w
	}
	half := math.Sqrt2 / 2
	for _, c := range []struct {
		name             string
		w                *way
		keeps            bool
		seconds, samples float64
		reached          bool
	}{
		{"between", made(.008, .008*half, .004, .004*half), true, 2.56, 40.96, true},
		{"at once", made(.001, .001), true, 1, 16, true},
		{"by luck", made(.001, .009, .004), false, 1, 16, true},
		{"luck not kept", made(.001, .01, .0025), true, 2 * math.Sqrt2, 32 * math.Sqrt2, true},
		{"never", made(.02, .01), false, 2, 32, false},
		{"not kept", made(.001, .01), true, 2, 32, false},
	} {
		s, n, ok := c.w.equal([]*hourlyPicture{p}, .005, c.keeps)
		if math.Abs(s-c.seconds) > 1e-9*c.seconds || math.Abs(n-c.samples) > 1e-9*c.samples || ok != c.reached {
			t.Errorf("%s: got %g s, %g samples, %t; want %g, %g, %t", c.name, s, n, ok, c.seconds, c.samples, c.reached)
		}
	}
}
