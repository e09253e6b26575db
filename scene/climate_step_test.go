package scene

import (
	"math"
	"testing"
	"time"

	"squint/scene/sky"
)

// TestFinerSteps wants quarters of hours in order, with suns of their own, that
// keep each record's light.
func TestFinerSteps(t *testing.T) {
	year := invented(t)
	fsys := file(t, year, nil)
	hourly := mustRead(t, fsys, "", nil)
	const n = 4
	occupied := make([]bool, n*len(year.Records))
	used := n*(172*24+12) + 1 // the second quarter of 12 to 13 h
	occupied[used] = true
	c := mustRead(t, fsys, "[simulation]\nstep_min = 15\n", occupied)
	if hourly.PerHour() != 1 || c.PerHour() != n || len(c.DiffuseLx) != n*len(year.Records) {
		t.Errorf("got %d and %d steps an hour and %d values, want 1, 4 and %d", hourly.PerHour(), c.PerHour(), len(c.DiffuseLx), n*len(year.Records))
	}
	direct, diffuse, inUse := map[int]float64{}, map[int]float64{}, 0.0
	for i, m := range c.Moments {
		if m.Share != 1.0/n || c.DiffuseLx[m.Step] != m.DiffuseLx || c.SinAltitude[m.Step] != m.Sun.Z {
			t.Fatalf("step %d: got a share of %g, %g lx and the sun at %g, want a quarter, %g and %g of the series", m.Step, m.Share, m.DiffuseLx, m.Sun.Z, c.DiffuseLx[m.Step], c.SinAltitude[m.Step])
		}
		if i > 0 {
			if b := c.Moments[i-1]; !m.Time.After(b.Time) || m.Step <= b.Step {
				t.Fatalf("step %d follows step %d", m.Step, b.Step)
			}
		}
		direct[m.Step/n] += m.DNI * math.Max(0, m.Sun.Z) * m.Share
		diffuse[m.Step/n] += m.DHI * m.Share
		if m.Occupied {
			if m.Step != used {
				t.Errorf("step %d is in use", m.Step)
			}
			inUse += m.Share
		}
	}
	if inUse != 0.25 {
		t.Errorf("got %g hours in use, want a quarter of one", inUse)
	}
	byStep := c.byHour()
	for _, m := range hourly.Moments {
		r := &c.Year.Records[m.Step]
		if m.Share != 1 || m.DHI != r.DHI {
			t.Fatalf("hour %d: got a share of %g with DHI %g, want the whole record, %g", m.Step, m.Share, m.DHI, r.DHI)
		}
		// Parts that count as night, below 10 lx, are left out: less than
		// 0.1 W/m2 each, as an efficacy is at least 100 lm/W at twilight.
		if math.Abs(diffuse[m.Step]-r.DHI) > 0.1 || math.Abs(direct[m.Step]+diffuse[m.Step]-r.GHI) > 0.2 {
			t.Errorf("hour %d: got %.3f diffuse and %.3f direct, want %g of GHI %g", m.Step, diffuse[m.Step], direct[m.Step], r.DHI, r.GHI)
		}
	}
	for i, s := range hourly.SinAltitude {
		// Over an hour of full day the sun's sine bends by less than 15 degrees
		// squared, so that its mean over the quarters' middles differs from that in
		// the middle by less than (5/16) (pi/24)^2 / 2.
		mean, lx := 0.0, 0.0
		for k := range n {
			mean, lx = mean+c.SinAltitude[n*i+k]/n, lx+c.DiffuseLx[n*i+k]/n
		}
		if s > 0.3 && math.Abs(mean-s) > 0.003 {
			t.Fatalf("record %d: got a mean sine of the sun's altitude of %g, want it about %g", i, mean, s)
		}
		// The luminous efficacy is that of other moments, by a few percent. In
		// hours of sunrise and sunset it jumps, since the light of the whole
		// hour there is that of a part.
		if got, want := lx, hourly.DiffuseLx[i]; s > 0.15 && math.Abs(got-want) > 0.1*want {
			t.Errorf("record %d: got %.0f lx diffuse, %.0f without parts", i, got, want)
		}
	}
	for k := range n {
		at := time.Date(2022, 6, 21, 10, 0, 0, 0, time.UTC).Add(time.Duration(2*k+1) * time.Hour / (2 * n)) // 11 h at the site
		want, err := sky.SunAt(hill, at)
		if err != nil {
			t.Fatal(err)
		}
		m := byStep[n*(171*24+11)+k]
		// Refraction as in testMoments; the fitted moment is good to 0.02 h, 5e-3.
		if m == nil || apart(m.Sun, want.Direction) > 5.2e-3 {
			t.Errorf("quarter %d: got %+v, want the sun at %v", k, m, want.Direction)
		}
		if k > 0 && apart(m.Sun, byStep[m.Step-1].Sun) < 0.05 {
			t.Errorf("quarter %d: the sun stands still", k)
		}
	}
}

// TestNoStep: a project put together without the length of a step has hours.
func TestNoStep(t *testing.T) {
	p := load(t, roomMesh)
	p.Simulation.StepMin = 0
	c, err := ReadClimate(file(t, invented(t), nil), p, nil)
	if err != nil {
		t.Fatal(err)
	}
	if c.PerHour() != 1 || c.Moments[0].Share != 1 {
		t.Errorf("got %d parts of an hour, the first of share %g, want one whole hour", c.PerHour(), c.Moments[0].Share)
	}
}
