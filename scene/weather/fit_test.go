package weather

import (
	"math"
	"strings"
	"testing"
	"time"
)

func TestFitMomentFindsKnownOffsets(t *testing.T) {
	sites := []Site{synthSite,
		{LatitudeDeg: -34, LongitudeDeg: 151, UTCOffsetH: 10},
		{LatitudeDeg: 0.5, LongitudeDeg: -78, UTCOffsetH: -5},
		{LatitudeDeg: 67, LongitudeDeg: 26, UTCOffsetH: 2},
		{LatitudeDeg: 28.6, LongitudeDeg: 77.2, UTCOffsetH: 5.5}}
	if testing.Short() {
		sites = sites[:2]
	}
	for _, site := range sites {
		for _, want := range []float64{-1.9, -0.8239, -0.5, -0.25, 0, 0.176, 0.5, 1.3} { // the offsets that the years are made with
			y := synthYear(site, want)
			f := y.FitMoment(site.roughSun())
			// Golden section ends within 0.001 h; interpolation adds nothing that
			// shows: 2e-6 of cos Z is worth 0.00001 h.
			if math.Abs(f.OffsetH-want) > 0.001 || !f.Decided {
				t.Errorf("latitude %g: got %.4f h, want %.4f; %s", site.LatitudeDeg, f.OffsetH, want, f.Text)
			}
			// 0.001 h move cos Z by at most 0.00026, 0.25 W/m2 of 950.
			if f.RMSWm2 > 0.25 {
				t.Errorf("latitude %g, offset %g: closure %.3f W/m2, want below 0.25", site.LatitudeDeg, want, f.RMSWm2)
			}
			// Twin: the same year read with a sun 0.05 h late must miss the bound.
			late := func(at time.Time) float64 { return site.roughSun()(at.Add(hours(0.05))) }
			if want < 1 {
				if f := y.FitMoment(late); math.Abs(f.OffsetH-want) <= 0.001 {
					t.Errorf("latitude %g, offset %g: a late sun was not noticed", site.LatitudeDeg, want)
				}
			}
		}
	}
}

func TestFitMomentWarns(t *testing.T) {
	sun := synthSite.roughSun()
	for _, test := range []struct {
		name        string
		offset      float64
		comment     string
		contradicts bool
		words       string
	}{
		{"as prescribed", -0.5, "", false, "in keeping with the file's claim of 0.500 h before"},
		{"at the label", 0, "", true, "at the labelled hour"},
		{"within tolerance", -0.42, "", false, "in keeping"},
		{"as its comment says", 0.25, "Irradiance Time Offset (h): 0.25", false, "in keeping"},
		{"against its comment", 0.176, "Irradiance Time Offset (h):-0.8239", true, "against the file's claim of 0.824 h before the labelled hour"},
		{"out of range", 2.6, "", true, "check the longitude and the time zone"},
	} {
		y := synthYear(synthSite, test.offset)
		y.Comments = append(y.Comments, test.comment)
		f := y.FitMoment(sun)
		if f.Contradicts != test.contradicts || !strings.Contains(f.Text, test.words) {
			t.Errorf("%s: contradicts %t, want %t: %q, want %q in it", test.name, f.Contradicts, test.contradicts, f.Text, test.words)
		}
	}
}

func TestFitMomentCannotTell(t *testing.T) {
	sun := synthSite.roughSun()
	overcast := synthYear(synthSite, 0)
	for i := range overcast.Records {
		overcast.Records[i].DNI, overcast.Records[i].GHI = 0, overcast.Records[i].DHI
	}
	dark := synthYear(synthSite, 0)
	for i := range dark.Records {
		dark.Records[i].GHI = 0
	}
	for name, f := range map[string]Fit{
		"overcast": overcast.FitMoment(sun),
		"dark":     dark.FitMoment(sun),
		"no sun":   synthYear(synthSite, 0).FitMoment(func(time.Time) float64 { return math.NaN() }),
	} {
		if f.Decided || f.Contradicts || f.OffsetH != IntervalOffsetH || !strings.Contains(f.Text, "as the file says") {
			t.Errorf("%s: got %+v, want the claimed offset, undecided", name, f)
		}
	}
}

func TestFitMomentNeedsFewSuns(t *testing.T) {
	asked := 0
	sun := synthSite.roughSun()
	f := synthYear(synthSite, 0.3).FitMoment(func(at time.Time) float64 { asked++; return sun(at) })
	if asked > 20000 {
		t.Errorf("asked for the sun %d times over %d hours, want at most 20000", asked, f.Hours)
	}
}

func TestLagrangeBound(t *testing.T) {
	// The bound of the comment on closure, for a cosine of unit amplitude.
	bound := math.Pow(math.Pi/12, 6) / 720 * sqr(0.5*1.5*2.5)
	worst := 0.0
	for x := 0.0; x <= 1; x += 0.01 {
		w := lagrange6(x)
		for phase := 0.0; phase < 2*math.Pi; phase += 0.1 {
			got := 0.0
			for k := range w {
				got += w[k] * math.Cos(float64(k-2)*math.Pi/12+phase)
			}
			worst = math.Max(worst, math.Abs(got-math.Cos(x*math.Pi/12+phase)))
		}
	}
	if worst > bound || worst < bound/10 {
		t.Errorf("largest error %g, want below %g and near it", worst, bound)
	}
}

func BenchmarkFitMoment(b *testing.B) {
	y := synthYear(synthSite, 0.176)
	sun := synthSite.roughSun()
	for b.Loop() {
		y.FitMoment(sun)
	}
}
