package weather

import (
	"math"
	"os"
	"testing"
	"time"

	"squint/scene/photometry"
)

// checkSteps wants the light of every record kept, steps in order of time, no
// direct light without sun, components that belong together, and none beyond
// the clear-sky bound but where the record is. It returns the records that are.
func checkSteps(t *testing.T, y *Year, steps []Step, parts int, offset float64, sun func(int, time.Time) float64) (beyond int) {
	t.Helper()
	if len(steps) != len(y.Records)*parts {
		t.Fatalf("got %d steps, want %d of each of %d records", len(steps), parts, len(y.Records))
	}
	faults := 0
	fault := func(format string, args ...any) {
		t.Helper()
		if faults++; faults < 10 {
			t.Errorf(format, args...)
		}
	}
	mid, interval := intervalMiddleH(offset)
	if !interval {
		mid = offset
	}
	for i, r := range y.Records {
		var global, diffuse, direct, bound float64
		own := steps[i*parts : (i+1)*parts]
		for k, s := range own {
			if s.Hour != i || s.Part != k {
				fault("step %d of record %d: got %d of %d", k, i, s.Part, s.Hour)
			}
			start := y.Moment(i, mid-0.5+float64(k)/float64(parts))
			if s.Time.Before(start) || s.Time.After(start.Add(time.Hour/time.Duration(parts))) {
				fault("record %d part %d: got %v, want it within the part from %v", i, k, s.Time, start)
			}
			cos := math.Max(0, sun(i, s.Time))
			global, diffuse, direct = global+s.GHI, diffuse+s.DHI, direct+s.DNI*cos
			most := r.clearBound(s.Time, cos) * s.SunlitShare
			bound += most * cos
			switch {
			case !(s.GHI >= 0 && s.DHI >= 0 && s.DNI >= 0):
				fault("record %d part %d: got %+v, want nothing below 0", i, k, s)
			case s.SunlitShare == 0 && s.DNI > 0:
				fault("record %d part %d: got direct light %g without sun", i, k, s.DNI)
			case s.DNI > 0 && s.DNI < photometry.ExtraterrestrialNormal(s.Time.YearDay()) && math.Abs(s.GHI-s.DHI-s.DNI*cos) > 1e-9*(1+s.GHI):
				fault("record %d part %d: GHI %g is not DHI %g and DNI %g times %g", i, k, s.GHI, s.DHI, s.DNI, cos)
			}
		}
		n := float64(parts)
		if math.Abs(global/n-r.GHI) > 1e-9*(1+r.GHI) || math.Abs(diffuse/n-r.DHI) > 1e-9*(1+r.DHI) {
			fault("record %d: got means of %.6f and %.6f, want GHI %g and DHI %g", i, global/n, diffuse/n, r.GHI, r.DHI)
		}
		if bound < (r.GHI-r.DHI)*n*(1-1e-9) {
			if bound > 0 {
				beyond++
			}
			continue
		}
		for k, s := range own {
			if most := r.clearBound(s.Time, math.Max(0, sun(i, s.Time))) * s.SunlitShare; s.DNI > most*(1+1e-9) {
				fault("record %d part %d: got DNI %g, want at most %g of a clear sky", i, k, s.DNI, most)
			}
		}
	}
	return beyond
}

// ofRecord makes a sun that does not ask for the record.
func ofRecord(cz CosZenith) func(int, time.Time) float64 {
	return func(_ int, t time.Time) float64 { return cz(t) }
}

func TestStepsKeepTheLight(t *testing.T) {
	for _, c := range []struct{ latitude, offset float64 }{{50, -0.5}, {50, 0.5}, {69, -0.5}, {-35, 0.176}} {
		site := synthSite
		site.LatitudeDeg = c.latitude
		y := synthYear(site, c.offset)
		sun := ofRecord(site.roughSun())
		for _, parts := range []int{2, 3, 4, 6, 12} {
			if testing.Short() && parts > 2 && parts < 12 {
				continue
			}
			steps := y.Steps(parts, c.offset, sun)
			checkSteps(t, y, steps, parts, c.offset, sun)
			if k := 172*24*parts + 12*parts; steps[k].GHI == steps[k+parts-1].GHI {
				t.Errorf("latitude %g, %d parts: the light of noon does not change within the hour", c.latitude, parts)
			}
		}
	}
}

// TestStepsOfOnePart are the records as they are.
func TestStepsOfOnePart(t *testing.T) {
	y := synthYear(synthSite, -0.5)
	sun := synthSite.roughSun()
	for i, s := range y.Steps(1, -0.5, ofRecord(sun)) {
		r := y.Records[i]
		at, share := y.SunlitMoment(i, -0.5, sun)
		if want := (Step{Hour: i, Time: at, SunlitShare: share, GHI: r.GHI, DNI: r.DNI, DHI: r.DHI}); s != want {
			t.Fatalf("got %+v, want %+v", s, want)
		}
	}
}

// clearYear is a year of hourly means of a cloudless sky with a known light at
// every instant, which it returns.
func clearYear(parts int) (y *Year, truth []Step) {
	y = synthYear(synthSite, -0.5)
	sun := synthSite.roughSun()
	for i := range y.Records {
		r := &y.Records[i]
		r.GHI, r.DNI, r.DHI = 0, 0, 0
		for k := range parts {
			s := Step{Hour: i, Part: k, Time: y.Moment(i, -1+(float64(k)+0.5)/float64(parts))}
			if c := sun(s.Time); c > 0 {
				mass := photometry.AirMassKastenYoung1989(math.Acos(c))
				s.DNI = photometry.ClearDirectNormal(1361, mass, 3.5) // clear and warm
				s.DHI = 90*c + 12*math.Sqrt(c)
				s.GHI = s.DHI + s.DNI*c
			}
			n := float64(parts)
			r.GHI, r.DNI, r.DHI = r.GHI+s.GHI/n, r.DNI+s.DNI/n, r.DHI+s.DHI/n
			truth = append(truth, s)
		}
	}
	return y, truth
}

// rms is the root mean square error of the direct light, over steps with it.
func rms(got, want []Step, pick func(Step) float64) float64 {
	sum, n := 0.0, 0
	for k := range want {
		if want[k].GHI > 0 {
			sum += sqr(pick(got[k]) - pick(want[k]))
			n++
		}
	}
	return math.Sqrt(sum / float64(n))
}

// TestStepsOfAClearYear wants a smooth day back from its hourly means, much
// better than hours that stay the same. Of a curve with the period of a day those
// are off by h s/sqrt(12), rms, h = 2 pi/24 the hour and s the slope, and straight
// lines between their middles by h^2 c/sqrt(120), c the curvature, as large as s
// in these units: 0.26 sqrt(12/120) = 0.083 times as much. Diffuse light is the
// product of two such lines: sqrt(2) times that, 0.117. Hours of sunrise and
// sunset, two of twelve, have one neighbour and the index of a low sun: direct
// light, which is what is left over the sine of that sun's altitude, may be as
// far off there as in hours that stay the same, sqrt(2/12) = 0.41 over the day.
func TestStepsOfAClearYear(t *testing.T) {
	const parts = 12
	y, truth := clearYear(parts)
	sun := ofRecord(synthSite.roughSun())
	got := y.Steps(parts, -0.5, sun)
	flat := make([]Step, len(truth))
	for k := range flat {
		r := y.Records[k/parts]
		flat[k] = Step{GHI: r.GHI, DNI: r.DNI, DHI: r.DHI}
	}
	for _, c := range []struct {
		name string
		most float64
		pick func(Step) float64
	}{
		{"GHI", 0.083, func(s Step) float64 { return s.GHI }},
		{"DHI", 0.117, func(s Step) float64 { return s.DHI }},
		{"DNI", 0.41, func(s Step) float64 { return s.DNI }},
	} {
		ours, stiff := rms(got, truth, c.pick), rms(flat, truth, c.pick)
		t.Logf("%s: %.2f W/m2 off, hours that stay the same %.2f", c.name, ours, stiff)
		if ours > c.most*stiff {
			t.Errorf("%s: got %.2f W/m2 off, want at most %g times the %.2f of hours that stay the same", c.name, ours, c.most, stiff)
		}
	}
}

// TestFill by hand.
func TestFill(t *testing.T) {
	for _, c := range []struct {
		name               string
		values, most, want []float64
		sum                float64
	}{
		{"below the bound", []float64{1, 2, 1}, []float64{9, 9, 9}, []float64{2, 4, 2}, 8},
		{"moved to where there is room", []float64{1, 2, 1}, []float64{3, 3, 5}, []float64{2 + 1.0/4, 3, 2 + 3.0/4}, 8},
		{"to where nothing was", []float64{0, 1}, []float64{4, 4}, []float64{2, 4}, 6},
		{"from nothing", []float64{0, 0}, []float64{4, 4}, []float64{3, 3}, 6},
		{"more than the bound", []float64{1, 0, 1}, []float64{1, 3, 0}, []float64{2, 6, 0}, 8},
		{"no bound at all", []float64{1, 3}, []float64{0, 0}, []float64{4, 4}, 8},
	} {
		fill(c.values, c.most, c.sum)
		for k := range c.want {
			if math.Abs(c.values[k]-c.want[k]) > 1e-12 {
				t.Errorf("%s: got %v, want %v", c.name, c.values, c.want)
				break
			}
		}
	}
}

// TestStepsOfRealYears keeps the light of both real files, in five minutes.
func TestStepsOfRealYears(t *testing.T) {
	dir := sharedDir(t)
	for _, name := range []string{"greensboro-nc-tmy3.csv", "piedmont-45n-8e-pvgis.epw"} {
		y, err := Read(os.DirFS(dir), name)
		if err != nil {
			t.Fatal(err)
		}
		fit := y.FitMoment(y.Site.roughSun())
		sun := ofRecord(apparent(y.Site.roughSun()))
		steps := y.Steps(12, fit.OffsetH, sun)
		beyond := checkSteps(t, y, steps, 12, fit.OffsetH, sun)
		lit := 0
		for _, r := range y.Records {
			if r.GHI > r.DHI {
				lit++
			}
		}
		t.Logf("%s: %d of %d records with direct light are beyond the clear-sky bound", name, beyond, lit)
		// The bound is that of very clear cold air, boundTurbidity: rare. Own
		// choice of how rare.
		if beyond > lit/50 {
			t.Errorf("%s: %d of %d records are beyond the clear-sky bound, want at most a fiftieth", name, beyond, lit)
		}
	}
}
