package weather

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"
)

// offsetToleranceH: the equation of time of the closed form is good to 35 s
// (Spencer 1971, 0.0025 rad), 0.010 h.
const offsetToleranceH = 0.010

func TestPiedmont(t *testing.T) {
	y, err := Read(os.DirFS(sharedDir(t)), "piedmont-45n-8e-pvgis.epw")
	if err != nil {
		t.Fatal(err)
	}
	// Place, offsets and closures: findings of the README beside the file.
	if s := y.Site; s.LatitudeDeg != 45 || s.LongitudeDeg != 8 || s.UTCOffsetH != 1 || s.ElevationM != 250 || s.Name != "45.00 N 8.00 E" {
		t.Errorf("site %+v", s)
	}
	if y.ReferenceYear != DefaultReferenceYear || y.Invented {
		t.Errorf("reference year %d, invented %t", y.ReferenceYear, y.Invented)
	}
	sun := y.Site.roughSun()
	f := y.FitMoment(sun)
	if math.Abs(f.OffsetH-0.176) > offsetToleranceH {
		t.Errorf("fitted %.4f h, want 0.176 +- %g", f.OffsetH, offsetToleranceH)
	}
	if f.RMSWm2 > 1.8 {
		t.Errorf("closure %.2f W/m2, want at most 1.8", f.RMSWm2)
	}
	if f.ClaimedOffsetH != -0.8239 || math.Abs(f.ClaimedRMSWm2-54) > 0.6 { // README: to whole W/m2
		t.Errorf("claim %g h, %.2f W/m2, want -0.8239 h, 54", f.ClaimedOffsetH, f.ClaimedRMSWm2)
	}
	if mid := newClosure(y, sun).rms(IntervalOffsetH); math.Abs(mid-37) > 0.6 {
		t.Errorf("closure at mid-interval %.2f W/m2, want 37", mid)
	}
	if !f.Contradicts || !strings.Contains(f.Text, "against the file's claim") || !strings.Contains(y.Claim, "0.824 h before") {
		t.Errorf("contradiction not reported: %+v; claim %q", f, y.Claim)
	}
	for i, r := range y.Records {
		if math.Signbit(r.DNI) || math.Signbit(r.GHI) || math.Signbit(r.DHI) {
			t.Fatalf("record %d keeps a negative zero: %+v", i, r)
		}
		if !math.IsNaN(r.GlobalLx) || !math.IsNaN(r.DirectLx) || !math.IsNaN(r.DiffuseLx) || !math.IsNaN(r.ZenithCdM2) {
			t.Fatalf("record %d: missing illuminance read as a value: %+v", i, r)
		}
		// An instant: never moved into a sunlit part.
		if at, _ := y.SunlitMoment(i, f.OffsetH, sun); !at.Equal(y.Moment(i, f.OffsetH)) {
			t.Fatalf("record %d stands for %v, want the fitted instant", i, at)
		}
	}
	if e := y.Efficacy(); !math.IsNaN(e.GlobalScale) || !strings.Contains(e.Text, "no illuminance columns") {
		t.Errorf("efficacy %+v", e)
	}
}

func TestGreensboro(t *testing.T) {
	y, err := Read(os.DirFS(sharedDir(t)), "greensboro-nc-tmy3.csv")
	if err != nil {
		t.Fatal(err)
	}
	// Place and findings: README beside the file.
	if s := y.Site; s.LatitudeDeg != 36.1 || s.LongitudeDeg != -79.95 || s.UTCOffsetH != -5 || s.ElevationM != 273 ||
		s.Name != "GREENSBORO PIEDMONT TRIAD INT, NC" {
		t.Errorf("site %+v", s)
	}
	f := y.FitMoment(y.Site.roughSun())
	if math.Abs(f.OffsetH+0.5) > offsetToleranceH || f.Contradicts {
		t.Errorf("got %+v, want mid-interval, -0.5 h, as claimed", f)
	}
	e := y.Efficacy()
	if e.GlobalScale != 100 || e.DirectScale != 100 || e.DiffuseScale != 100 || e.ZenithScale != 10 {
		t.Errorf("got %+v, want hundreds of lx and tens of cd/m2", e)
	}
	if !strings.Contains(e.Text, "units of 100 lx") || !strings.Contains(strings.Join(y.Notes, "\n"), "different years") {
		t.Errorf("text %q, notes %q", e.Text, y.Notes)
	}
	// Line 11, 1 January 09:00, as it stands in the file.
	if r := y.Records[8]; r.Line != 11 || r.GHI != 46 || r.DNI != 3 || r.DHI != 46 || r.GlobalLx != 53 || r.DirectLx != 1 ||
		r.DiffuseLx != 53 || r.ZenithCdM2 != 164 || r.DryBulbC != 10 || r.DewPointC != 9.4 || r.PressurePa != 99300 {
		t.Errorf("got %+v", r)
	}
}

// The file's makers give, for each hour, the extraterrestrial radiation on the
// horizontal (ETR) and normal to the sun (ETRN), both summed over the sunlit
// part of the hour: ETRN over its value in a whole hour is the sunlit share,
// and ETR over ETRN the mean cosine of the zenith angle in that part (Wilcox,
// Marion 2008, table 1-2). Neither uses our sun.
func TestGreensboroPartHours(t *testing.T) {
	dir := sharedDir(t)
	const name = "greensboro-nc-tmy3.csv"
	y, err := Read(os.DirFS(dir), name)
	if err != nil {
		t.Fatal(err)
	}
	etr, etrn := extraterrestrial(t, filepath.Join(dir, name))
	sun := y.Site.roughSun()
	offset := y.FitMoment(sun).OffsetH
	up := apparent(sun)
	var shareErr, cosErr, midErr []float64
	for day := 0; day < 365; day++ {
		whole := etrn[day*24+12]
		for h := 0; h < 24; h++ {
			i := day*24 + h
			at, share := y.SunlitMoment(i, offset, up)
			theirs := etrn[i] / whole
			if (theirs == 0 || theirs > 0.999) && (share == 0 || share == 1) {
				continue
			}
			shareErr = append(shareErr, math.Abs(share-theirs))
			if share > 0.1 && theirs > 0.1 {
				cosErr = append(cosErr, math.Abs(up(at)-etr[i]/etrn[i]))
				midErr = append(midErr, math.Abs(up(y.Moment(i, offset))-etr[i]/etrn[i]))
			}
		}
	}
	t.Logf("%d part-hours: share off by %.4f in the median, %.4f at most; cos Z by %.4f, %.4f; at mid-hour by %.4f in the median",
		len(shareErr), median(shareErr), slices.Max(shareErr), median(cosErr), slices.Max(cosErr), median(midErr))
	if n := len(shareErr); n < 2*365-30 { // a sunrise and a sunset a day, few on the hour
		t.Errorf("only %d part-hours, want about 730", n)
	}
	// Hour angle of the closed form, 35 s: 0.010 h. Declination: one day of the
	// other year, 0.4 degrees, and 0.034 of the series, by tan(36.1)/15 h per
	// degree: 0.021 h. ETRN in whole W/m2: 0.0004.
	const shareTolerance = 0.032
	if worst := slices.Max(shareErr); worst > shareTolerance {
		t.Errorf("sunlit share off by %.4f, want at most %g", worst, shareTolerance)
	}
	// Half of that time, by pi/12 cos(36.1) an hour: 0.0034; declination, by
	// sin(36.1): 0.0045; ETR in whole W/m2 over at least 0.1 of 1400: 0.0036.
	const cosTolerance = 0.0115
	if worst := slices.Max(cosErr); worst > cosTolerance {
		t.Errorf("cos Z off by %.4f, want at most %g", worst, cosTolerance)
	}
	// Twin: the sun left at mid-hour must miss the bound.
	if worst := slices.Max(midErr); worst <= cosTolerance {
		t.Errorf("the sun at mid-hour passes too, off by %.4f", worst)
	}
}

// apparent lifts the sun by the refraction of Reda, Andreas 2004, Solar Energy
// 76(5), for 1010 mbar and 10 degrees C; the file's makers use an apparent sun.
func apparent(sun CosZenith) CosZenith {
	return func(t time.Time) float64 {
		altDeg := math.Asin(sun(t)) * 180 / math.Pi
		if altDeg < -0.26667-0.5667 {
			return sun(t)
		}
		arg := altDeg + 10.3/(altDeg+5.11)
		return math.Sin((altDeg + 1.02/(60*math.Tan(arg*math.Pi/180))) * math.Pi / 180)
	}
}

func extraterrestrial(t *testing.T, path string) (etr, etrn []float64) {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.FieldsPerRecord = -1
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows[2:] {
		for col, to := range map[int]*[]float64{2: &etr, 3: &etrn} {
			v, err := strconv.ParseFloat(row[col], 64)
			if err != nil {
				t.Fatal(err)
			}
			*to = append(*to, v)
		}
	}
	return etr, etrn
}
