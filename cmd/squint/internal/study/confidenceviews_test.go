package study

import (
	"math"
	"slices"
	"testing"

	"squint/glare/verdict"
	"squint/scene"
)

// TestConfidenceOfViews holds verdicts of many seeds on three scenes against the
// truth: the mean of 8 runs with finer pixels and more samples. Far is what lies
// more than one percentage point of the hours from the limit.
func TestConfidenceOfViews(t *testing.T) {
	level, n := medium(t), confidenceCount(t, 12)
	var all, far reliability
	for _, c := range confidenceScenes {
		in := confidenceScene(t, 2, c.from, c.to)
		in.Scene.WorkPlanes = nil
		in.Climate.Moments = slices.DeleteFunc(in.Climate.Moments, func(m *scene.Moment) bool { return !m.Occupied })
		in.Standings[0].Moments = in.Climate.Moments
		fine := oneLook(in)
		s := &fine.Project.Simulation
		s.FisheyePixels, s.TexelSamples, s.Photons = 96, 512, 20000
		fines := seeds(t, fine, 1<<40, confidenceTruths)
		truth := *fines[0]
		truth.Views = slices.Clone(truth.Views)
		for i := range truth.Views {
			v := &truth.Views[i]
			v.DGP, v.StdErr = meanOf(fines, func(r *Result) []float32 { return r.Views[i].DGP })
		}
		// As near to one view's truth as that is sure.
		of := func(v *ViewResult, over int) verdict.Outcome {
			return verdict.AtMost(truth.glareHours(v, level.DGP, truthZ).Hours, float64(over)-0.5)
		}
		beside := &truth.Views[c.near]
		over := int(truth.glareHours(beside, level.DGP, truthZ).Hours.Estimate)
		for _, step := range []int{0, 1, -1, 2, -2, 3, -3} {
			if of(beside, over+step) != verdict.Undecided {
				over += step
				break
			}
		}
		idle(in, over)
		first, runs := seeds(t, oneLook(in), 1, max(n/4, 4)), seeds(t, in, 1, n)
		for i := range truth.Views {
			v := &truth.Views[i]
			g := truth.glareHours(v, level.DGP, truthZ).Hours
			want := of(v, over)
			if want == verdict.Undecided {
				t.Fatalf("%s, %s: the truth itself is not sure: %v hours, limit %.1f", c.name, v.Viewpoint.Name, g, float64(over)-0.5)
			}
			var one reliability
			for _, r := range runs {
				one.add(r.Views[i].Levels[r.Views[i].Asked].Outcome, want)
			}
			for _, r := range first {
				one.addTwin(verdict.AtMost(narrow(r.glareHours(&r.Views[i], level.DGP, 0).Share), level.TimeShare), want)
			}
			isFar := math.Abs(g.Estimate/float64(len(in.Occupied))-level.TimeShare) > 0.01
			if all.join(one); isFar {
				far.join(one)
			}
			t.Logf("%s, %s: truth %v of %d hours, %v, far %v: %v", c.name, v.Viewpoint.Name, g, len(in.Occupied), want, isFar, &one)
		}
	}
	t.Logf("all: %v", &all)
	t.Logf("far: %v", &far)
	all.check(t, &far)
}
