package scene

import (
	"math"
	"testing"
)

// TestFinerSteps wants parts of hours in order, with suns of their own, that
// keep each record's light, and the same daylight hours as without.
func TestFinerSteps(t *testing.T) {
	year := invented(t)
	fsys := file(t, year, nil)
	hourly := mustRead(t, fsys, "", nil)
	occupied := make([]bool, len(year.Records))
	occupied[172*24+12] = true
	c := mustRead(t, fsys, "[simulation]\nstep_min = 30\n", occupied)
	if hourly.Parts != 1 || c.Parts != 2 {
		t.Errorf("got %d and %d parts, want 1 and 2", hourly.Parts, c.Parts)
	}
	direct, diffuse, used := map[int]float64{}, map[int]float64{}, 0.0
	for i, m := range c.Moments {
		if m.Share != 0.5 || m.Step < 0 || m.Step > 1 {
			t.Fatalf("hour %d: got part %d of share %g, want 0 or 1 of 0.5", m.Hour, m.Step, m.Share)
		}
		if i > 0 {
			if b := c.Moments[i-1]; !m.Time.After(b.Time) || 2*m.Hour+m.Step <= 2*b.Hour+b.Step {
				t.Fatalf("hour %d part %d follows hour %d part %d", m.Hour, m.Step, b.Hour, b.Step)
			}
		}
		direct[m.Hour] += m.DNI * math.Max(0, m.Sun.Z) * m.Share
		diffuse[m.Hour] += m.DHI * m.Share
		if m.Occupied {
			used += m.Share
		}
	}
	if used != 1 {
		t.Errorf("got %g hours in use, want 1", used)
	}
	for _, m := range hourly.Moments {
		r := &c.Year.Records[m.Hour]
		if m.Share != 1 || m.Step != 0 || m.DHI != r.DHI {
			t.Fatalf("hour %d: got part %d of share %g with DHI %g, want the whole record, %g", m.Hour, m.Step, m.Share, m.DHI, r.DHI)
		}
		// Parts that count as night, below 10 lx, are left out: less than
		// 0.1 W/m2 each, as an efficacy is at least 100 lm/W at twilight.
		if math.Abs(diffuse[m.Hour]-r.DHI) > 0.1 || math.Abs(direct[m.Hour]+diffuse[m.Hour]-r.GHI) > 0.2 {
			t.Errorf("hour %d: got %.3f diffuse and %.3f direct, want %g of GHI %g", m.Hour, diffuse[m.Hour], direct[m.Hour], r.DHI, r.GHI)
		}
	}
	for i, s := range hourly.SinAltitude {
		if c.SinAltitude[i] != s {
			t.Fatalf("record %d: the sun that chooses the daylight hours has moved", i)
		}
		// The luminous efficacy is that of other moments, by a few percent. In
		// hours of sunrise and sunset it jumps, since the light of the whole
		// hour there is that of a part.
		if got, want := c.DiffuseLx[i], hourly.DiffuseLx[i]; s > 0.15 && math.Abs(got-want) > 0.1*want {
			t.Errorf("record %d: got %.0f lx diffuse, %.0f without parts", i, got, want)
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
	if c.Parts != 1 || c.Moments[0].Share != 1 {
		t.Errorf("got %d parts of an hour, the first of share %g, want one whole hour", c.Parts, c.Moments[0].Share)
	}
}
