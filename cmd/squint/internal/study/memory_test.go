package study

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"squint/scene/sky"
	"squint/trace/surface"
)

// bits writes everything a study found apart from the number of its workers,
// numbers by their bits.
func bits(r *Result) string {
	var b strings.Builder
	series := func(name string, s []float32) {
		h := uint64(14695981039346656037) // FNV-1a, its published offset and prime
		for _, v := range s {
			h = (h ^ uint64(math.Float32bits(v))) * 1099511628211
		}
		fmt.Fprintf(&b, "%s %d %x\n", name, len(s), h)
	}
	for i := range r.Views {
		v := &r.Views[i]
		series("DGP", v.DGP)
		series("error", v.StdErr)
		series("Ev", v.Ev)
		fmt.Fprintf(&b, "%v %v %d %q %v\n", v.Cause, v.Causes, v.Refined, v.When, v.Levels)
		if v.Worst != nil {
			series("worst", v.Worst.Lum)
			fmt.Fprintf(&b, "%d %v %v\n", v.Worst.Moment.Step, v.Worst.Discs, v.Worst.DGP)
		}
	}
	for _, p := range r.Planes {
		for s := range p.E {
			series("E", p.E[s])
			series("error", p.StdErr[s])
			series("direct", p.Direct[s])
		}
		fmt.Fprintf(&b, "%v %v %v\n", p.Factor, p.FactorError, p.Levels)
	}
	fmt.Fprintf(&b, "%v %v %v %v %d %g\n", r.Outcome, r.Verdicts, r.Warnings, r.Notes, r.Settings.TexelSides, r.Settings.Coarsen)
	return b.String()
}

// TestTightMemory: where texels of the size asked for do not fit into
// memory_mib they are made larger until they do, the result says so, and it is
// the same whatever the number of workers.
func TestTightMemory(t *testing.T) {
	// Less than a project may ask for, so that the test takes a second.
	budget, texelM := 8, .12
	if testing.Short() {
		budget, texelM = 2, .25
	}
	in := tiny(t, texelM, budget)
	one := study(t, in, 1)
	if one.Settings.Coarsen <= 1 {
		t.Fatalf("texels of %g m in %d MiB: got %g times coarser, want more than 1", texelM, budget, one.Settings.Coarsen)
	}
	want := fmt.Sprintf("surfaces are cut %.1f times more coarsely than asked, to fit memory_mib = %d.", one.Settings.Coarsen, budget)
	if !strings.Contains(strings.Join(one.Warnings, "\n"), want) {
		t.Errorf("warnings: got %q, want %q among them", one.Warnings, want)
	}
	// One worker's texels fit, and would not had they been cut much finer.
	need := func(coarsen float64) float64 {
		cfg := surface.Config{Batches: in.Project.Simulation.Batches, Coarsen: coarsen}
		for _, v := range in.Scene.Viewpoints {
			cfg.Receivers = append(cfg.Receivers, v.Position)
		}
		return memoryMiB(surface.NewTransport(in.World, sky.NewPatches(patchFactor), cfg), cfg.Batches)
	}
	if got := need(one.Settings.Coarsen); got > float64(budget) {
		t.Errorf("after coarsening: got %.0f MiB, want at most %d", got, budget)
	}
	// Each step enlarges by the root of the excess, at least by 1.1: a step back
	// of 1.25 cannot fit (texels at borders make the number fall more slowly
	// than by the square).
	if got := need(one.Settings.Coarsen / 1.25); got <= float64(budget) {
		t.Errorf("texels are coarser than need be: 1.25 times finer take %.0f of %d MiB", got, budget)
	}
	for _, h := range in.Occupied {
		if v := one.Views[0].DGP[h]; !(v >= 0 && v < 2) {
			t.Errorf("record %d: got a DGP of %v", h, v)
		}
	}
	many := study(t, in, 7)
	if many.Settings.Workers >= 7 {
		t.Errorf("got %d workers in a budget filled by one, want fewer than 7", many.Settings.Workers)
	}
	if a, b := bits(one), bits(many); a != b {
		t.Errorf("1 worker and 7 differ:\n%s", difference(a, b))
	}
	// Twin: another seed must not pass for the same result.
	in.Project.Simulation.Seed++
	if bits(one) == bits(study(t, in, 2)) {
		t.Errorf("twin: another seed gives the same bits")
	}
	// Nothing is coarsened and nobody is warned where memory suffices.
	wide := study(t, tiny(t, 1, 64), 2)
	if wide.Settings.Coarsen != 1 || strings.Contains(strings.Join(wide.Warnings, " "), "coarsely") {
		t.Errorf("texels of 1 m: got %g times coarser and warnings %q, want neither", wide.Settings.Coarsen, wide.Warnings)
	}
	// What is bought with coarser texels is not a different room: the light on
	// the sensors keeps within 4 standard errors of both and a tenth.
	for s := range wide.Planes[0].Factor {
		a, b := one.Planes[0].Factor[s], wide.Planes[0].Factor[s]
		if tol := 4*math.Hypot(one.Planes[0].FactorError[s], wide.Planes[0].FactorError[s]) + .1*b; math.Abs(a-b) > tol {
			t.Errorf("sensor %d: daylight factor %.4f, with texels of 1 m %.4f; want within %.4f", s, a, b, tol)
		}
	}
}

func difference(a, b string) string {
	x, y := strings.Split(a, "\n"), strings.Split(b, "\n")
	for i := range x {
		if i >= len(y) || x[i] != y[i] {
			return fmt.Sprintf("line %d: %.300s\nand: %.300s", i, x[i], strings.Join(y[min(i, len(y)):min(i+1, len(y))], ""))
		}
	}
	return "the second has more"
}

// TestNoMemory: a budget that nothing fits is an error that names its key.
func TestNoMemory(t *testing.T) {
	in := tiny(t, 1, 0)
	_, err := Run(context.Background(), in, Options{Workers: 1})
	if err == nil || !strings.Contains(err.Error(), "project.toml: simulation.memory_mib: got 0, want more") {
		t.Errorf("got %v, want an error that names simulation.memory_mib", err)
	}
}
