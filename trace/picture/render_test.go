package picture

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/view"
	"squint/trace"
)

func pictureOf(t *testing.T, workers, samples int) *Picture {
	t.Helper()
	v := eye(t, 24)
	p, err := light(t, office(t), sunny(t), workers, v).Render(context.Background(), v, Options{Samples: samples})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// same compares bits, since NaN stands outside of the picture.
func same(a, b []float32) bool {
	return slices.EqualFunc(a, b, func(x, y float32) bool { return math.Float32bits(x) == math.Float32bits(y) })
}

// TestSameBytes: 1 and 7 workers give the same bits; other samples do not.
func TestSameBytes(t *testing.T) {
	a, b, c := pictureOf(t, 1, 16), pictureOf(t, 7, 16), pictureOf(t, 7, 24)
	if !same(a.Mean, b.Mean) || !same(a.StdErr, b.StdErr) {
		t.Error("1 and 7 workers differ, want the same bits")
	}
	if same(a.Mean, c.Mean) {
		t.Error("twin: 16 and 24 samples gave the same bits")
	}
}

// TestEnds: a picture says why it ended, and a stop keeps complete rounds.
func TestEnds(t *testing.T) {
	v := eye(t, 16)
	l := light(t, office(t), sunny(t), 2, v)
	ctx := context.Background()
	p, err := l.Render(ctx, v, Options{Error: 0.5})
	if err != nil || p.Ended != HasError || p.MedianError > 0.5 {
		t.Errorf("error of 0.5: got %+v, %v, want that reached", p.Ended, err)
	}
	p, err = l.Render(ctx, v, Options{Samples: 20})
	if err != nil || p.Ended != HadSamples || p.Samples != 24 {
		t.Errorf("20 samples: got %d, %v, %v, want 24, whole rounds", p.Samples, p.Ended, err)
	}
	p, err = l.Render(ctx, v, Options{Enough: func() bool { return true }})
	if err != nil || p.Ended != HadTime || p.Samples != Batches {
		t.Errorf("no time: got %d samples, %v, %v, want one round", p.Samples, p.Ended, err)
	}
	stop, cancel := context.WithCancel(ctx)
	p, err = l.Render(stop, v, Options{Progress: func(*Picture) { cancel() }})
	if err != nil || p.Ended != Stopped || p.Samples != Batches {
		t.Errorf("stopped after the first round: got %d samples, %v, %v, want that round", p.Samples, p.Ended, err)
	}
	if _, err := l.Render(stop, v, Options{}); !errors.Is(err, ErrNothing) {
		t.Errorf("stopped at once: got %v, want ErrNothing", err)
	}
}

// TestErrorIsHonest: over pictures with other random numbers, the standard error
// that is stated matches the spread. Of two pictures' difference, squared, over
// the sum of their squared errors, the median over pixels is looked at, as heavy
// tails move the mean. The errors come from 8 batches each, so that the quotient
// is distributed as the square of Student's t of 14 degrees of freedom (equal
// variances): the median is 0.692^2 = 0.479, with the quantile of t at 0.75 from
// tables (from memory).
func TestErrorIsHonest(t *testing.T) {
	v := eye(t, 24)
	w, m := office(t), sunny(t)
	render := func(seed uint64) *Picture {
		s, err := Prepare(context.Background(), w, []Camera{v}, Config{TexelSamples: 64, Seed: seed, Workers: 2}, nil)
		if err != nil {
			t.Fatal(err)
		}
		l, err := s.Light(context.Background(), m)
		if err != nil {
			t.Fatal(err)
		}
		p, err := l.Render(context.Background(), v, Options{Samples: 32})
		if err != nil {
			t.Fatal(err)
		}
		return p
	}
	pairs := uint64(12)
	if testing.Short() {
		pairs = 6
	}
	var pictures [][2]*Picture
	for k := range pairs {
		pictures = append(pictures, [2]*Picture{render(10 + 2*k), render(11 + 2*k)})
	}
	// ratio is the mean over the pairs of the median quotient of errors stated
	// scale times as large, with its standard error.
	ratio := func(scale float64) (mean, stdErr float64) {
		var sum, square float64
		for _, p := range pictures {
			var all []float64
			for i, x := range p[0].Mean {
				if x > 0 {
					d, e, f := float64(x-p[1].Mean[i]), scale*float64(p[0].StdErr[i]), scale*float64(p[1].StdErr[i])
					all = append(all, d*d/(e*e+f*f))
				}
			}
			slices.Sort(all)
			x := all[len(all)/2]
			sum += x
			square += x * x
		}
		n := float64(pairs)
		mean = sum / n
		return mean, math.Sqrt(math.Max(0, square/n-mean*mean) / (n - 1))
	}
	// Errors half or twice as large have four times the quotient or a quarter: a
	// band below 0.6 x 0.479 = 0.287 refuses both wherever it accepts the truth.
	const median, allowed = 0.479, 0.25
	got, stdErr := ratio(1)
	t.Logf("median squared ratio %.3f +- %.3f, want %.3f", got, stdErr, median)
	if math.Abs(got-median) > allowed {
		t.Errorf("errors stated are off: median squared ratio %.3f, want %.3f +- %.2f", got, median, allowed)
	}
	if 3*stdErr > allowed {
		t.Errorf("the ratio is known to %.3f only, want a third of %.2f: more pairs", stdErr, allowed)
	}
	for _, scale := range []float64{0.5, 2} {
		if twin, _ := ratio(scale); math.Abs(twin-median) <= allowed {
			t.Errorf("twin with errors %g times as large was accepted: %.3f", scale, twin)
		}
	}
}

// TestLevelsOfOnePart: of a pixel that shows a table's edge, the samples on the
// floor below, of the same part, do not count as light on the table top.
func TestLevelsOfOnePart(t *testing.T) {
	const samples = 4 * Batches
	counts := func(height float64) (edge, table int32) {
		m := newModel(t)
		part, white := scenetest.Part(m.s, "room", scene.Room, 0.2), m.matte(0.5)
		scenetest.Rect(m.s, part, white, at(0, 0, 0), at(4, 0, 0), at(0, 4, 0))
		scenetest.Rect(m.s, part, white, at(0, 0, height), at(2.06, 0, 0), at(0, 4, 0))
		c, err := view.NewPlan(0, 4, 0, 4, 1.5, 40)
		if err != nil {
			t.Fatal(err)
		}
		l := light(t, trace.Accelerate(m.s, 1), sunny(t), 1, c)
		f, err := l.newFilm(context.Background(), c, Illuminance)
		if err != nil {
			t.Fatal(err)
		}
		for f.rounds*Batches < samples {
			if err := l.round(context.Background(), f); err != nil {
				t.Fatal(err)
			}
		}
		for b := range f.batch {
			edge += f.batch[b][20*f.width+20].count
			table += f.batch[b][20*f.width+10].count
		}
		return edge, table
	}
	// The edge at 2.06 m lies in the pixel from 2.0 to 2.1 m, the table under its
	// middle: 0.6 of 32 samples, 19.2, within one of 4 strata in each of 8 batches.
	if edge, table := counts(0.75); edge < 12 || edge > 26 || table != samples {
		t.Errorf("got %d samples that share light at the edge and %d on the table, want 19 and %d", edge, table, samples)
	}
	// Twin: a sheet on the floor is one level with it.
	if edge, _ := counts(0.005); edge != samples {
		t.Errorf("a sheet of 5 mm: got %d samples that share light, want %d", edge, samples)
	}
}

// TestPlanShowsTheFloor: a plan cut below the ceiling looks at floor and desk,
// and there the sun patch is brighter than all else.
func TestPlanShowsTheFloor(t *testing.T) {
	c, err := view.NewPlan(0, 4, 0, 5, 1.5, 40)
	if err != nil {
		t.Fatal(err)
	}
	m := sunny(t)
	l := light(t, office(t), m, 2, c)
	p, err := l.Render(context.Background(), c, Options{Quantity: Illuminance, Samples: 32})
	if err != nil {
		t.Fatal(err)
	}
	// By the sun's direction a point of the floor at (x, y, 0) is lit where the
	// way to the sun crosses the wall's plane within the opening and passes below
	// the shelf's outer edge, 0.3 m farther out and 1.9 m high: exact geometry,
	// with a pixel's width to spare.
	up := m.Sun.Z / -m.Sun.Y
	over := m.Sun.X / -m.Sun.Y
	lit, dark := 0, 0
	for iy := range p.Height {
		for ix := range p.Width {
			org, _, _ := c.Pixel(ix, iy)
			x, z := org.X+over*org.Y, up*org.Y
			e := float64(p.Mean[iy*p.Width+ix])
			desk := org.X > 0.8 && org.X < 2.8 && org.Y > 1.8 && org.Y < 3
			switch {
			case desk:
			case x > 0.7 && x < 3.3 && z > 1.1 && z+0.3*up < 1.8:
				lit++
				// The sun alone gives normal illuminance times sine of altitude.
				if e < m.SunNormalLx*m.Sun.Z {
					t.Fatalf("floor at (%.2f, %.2f) in the sun: got %.0f lx, want more than %.0f", org.X, org.Y, e, m.SunNormalLx*m.Sun.Z)
				}
			case z > 3.2 || x < 0.2 || x > 3.8:
				dark++
				if e > 0.5*m.SunNormalLx*m.Sun.Z || !(e > 0) {
					t.Fatalf("floor at (%.2f, %.2f) in the shade: got %.0f lx, want some, below half the sun's", org.X, org.Y, e)
				}
			}
		}
	}
	if lit < 20 || dark < 100 {
		t.Errorf("got %d places in the sun and %d in the shade, want enough of both", lit, dark)
	}
}

// TestPlanLeavesCuts: where the cut goes through a solid there is no value, as
// through a pillar of 0.4 m; a room whose fronts are turned round, which looks
// solid everywhere, is drawn whole.
func TestPlanLeavesCuts(t *testing.T) {
	m := newModel(t)
	grey := m.matte(0.5)
	m.rect(grey, 0.5, at(0, 0, 0), at(2, 0, 0), at(0, 2, 0))
	pillar := func(x, y, edge, height float64) {
		u, v, up := at(edge, 0, 0), at(0, edge, 0), at(0, 0, height)
		m.rect(grey, 0.5, at(x, y, 0), u, up)
		m.rect(grey, 0.5, at(x+edge, y, 0), v, up)
		m.rect(grey, 0.5, at(x, y+edge, 0), up, u)
		m.rect(grey, 0.5, at(x, y, 0), up, v)
		m.rect(grey, 0.5, at(x, y, height), u, v)
	}
	empty := func() int {
		c, err := view.NewPlan(0, 2, 0, 2, 1.5, 20)
		if err != nil {
			t.Fatal(err)
		}
		p, err := light(t, trace.Accelerate(m.s, 2), sunny(t), 2, c).Render(context.Background(), c, Options{Quantity: Illuminance, Samples: 8})
		if err != nil {
			t.Fatal(err)
		}
		n := 0
		for _, e := range p.Mean {
			if e != e {
				n++
			}
		}
		return n
	}
	pillar(0.8, 0.8, 0.4, 3)
	if n := empty(); n != 16 {
		t.Errorf("pillar: got %d pixels of 0.1 m without value, want 4 x 4", n)
	}
	pillar(-1, -1, 4, 3) // all around, its fronts outwards
	if n := empty(); n != 0 {
		t.Errorf("room turned round: got %d pixels without value, want none", n)
	}
}
