package report

import (
	"io"
	"math"
	"strconv"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/scene"
)

// table builds CSV rows: RFC 4180, with comment lines that begin with #.
type table struct{ row []byte }

func (t *table) comment(s string) { t.row = append(append(append(t.row, "# "...), plain(s)...), '\n') }

func (t *table) sep() {
	if n := len(t.row); n > 0 && t.row[n-1] != '\n' {
		t.row = append(t.row, ',')
	}
}

// text quotes where it must.
func (t *table) text(s string) {
	t.sep()
	s = plain(s)
	// A spreadsheet would take a name that begins like this for a formula.
	if s != "" && strings.ContainsRune("=+-@", rune(s[0])) {
		s = "'" + s
	}
	if strings.ContainsAny(s, "\",") {
		s = `"` + strings.ReplaceAll(s, `"`, `""`) + `"`
	}
	t.row = append(t.row, s...)
}

func (t *table) int(i int) {
	t.sep()
	t.row = strconv.AppendInt(t.row, int64(i), 10)
}

// single writes a value so that it reads back exactly; nothing where there is
// none.
func (t *table) single(v float32) {
	t.sep()
	switch {
	case v == 0:
		t.row = append(t.row, '0')
	case v != v || v > math.MaxFloat32 || v < -math.MaxFloat32:
	default:
		t.row = strconv.AppendFloat(t.row, float64(v), 'f', -1, 32)
	}
}

func (t *table) fixed(x float64, n int) {
	t.sep()
	if !math.IsNaN(x) && !math.IsInf(x, 0) {
		t.row = strconv.AppendFloat(t.row, x, 'f', n, 64)
	}
}

func (t *table) end() { t.row = append(t.row, '\n') }

// flush hands the rows on once there are many.
func (t *table) flush(w io.Writer, atLeast int) error {
	if len(t.row) < atLeast {
		return nil
	}
	_, err := w.Write(t.row)
	t.row = t.row[:0]
	return err
}

const flushAt = 1 << 16

// stamp writes the columns that both files begin with.
func (t *table) stamp(r *study.Result, h int) {
	record := h / r.Climate.PerHour()
	rec := &r.Climate.Year.Records[record]
	t.int(record)
	t.int(rec.Month)
	t.int(rec.Day)
	t.sep()
	c, m := clockStart(r.Calendar, h)
	t.row = append(t.row, byte('0'+c/10), byte('0'+c%10), ':', byte('0'+m/10), byte('0'+m%10))
}

// stepWord is what a row is: a record of the weather file or a part of one.
func stepWord(r *study.Result) string {
	if r.Climate.PerHour() > 1 {
		return "step"
	}
	return "record"
}

var stampHeads = []string{"record", "month", "day", "clock"}

// commonComments say what both files have in common.
func (t *table) commonComments(r *study.Result, f paths) {
	t.comment(title(r.Project, f))
	if invented(r.Project, r.Climate.Year) {
		t.comment(inventedWords + ": not those of a real place or building")
	}
	step := "hour"
	if n := r.Climate.PerHour(); n > 1 {
		step = "step"
		t.comment("a step is " + strconv.Itoa(60/n) + " minutes: each hour of the weather file is cut into " + strconv.Itoa(n))
	}
	t.comment("record: hours of the weather file, counted from 0; month and day: its own, in standard time; " +
		"clock: start of the " + step + " as clocks show it, 24:00 being the hour after midnight in daylight saving time")
}

// writeViewHours writes every step of the year for every viewpoint.
func writeViewHours(w io.Writer, r *study.Result) error {
	var t table
	t.commonComments(r, newPaths(r.Project, r.Scene))
	t.comment("sun altitude: of the sun's centre, without refraction, at the moment of the " + stepWord(r) + ", degrees; " +
		"sun azimuth: clockwise from north, degrees, empty at night")
	t.comment("DGP: daylight glare probability, 0 to 1; error: its standard error; Ev: illuminance at the eye, lx; " +
		"cause: what carries most of the glare where DGP is high. Empty: room not in use; 0: in use, dark")
	for _, h := range stampHeads {
		t.text(h)
	}
	t.text("sun altitude deg")
	t.text("sun azimuth deg")
	for i := range r.Views {
		name := r.Views[i].Viewpoint.Name
		for _, q := range []string{"DGP", "error", "Ev lx", "cause"} {
			t.text(q + ": " + name)
		}
	}
	t.end()
	azimuth := sunAzimuths(r)
	for h := range r.Climate.SinAltitude {
		t.stamp(r, h)
		t.fixed(degreesOfSine(r.Climate.SinAltitude[h]), 2)
		t.fixed(azimuth[h], 2)
		for i := range r.Views {
			v := &r.Views[i]
			t.single(v.DGP[h])
			t.single(v.StdErr[h])
			t.single(v.Ev[h])
			cause := ""
			if c := v.Cause[h]; c >= 0 && int(c) < len(v.Causes) {
				cause = v.Causes[c].String()
			}
			t.text(cause)
		}
		t.end()
		if err := t.flush(w, flushAt); err != nil {
			return err
		}
	}
	return t.flush(w, 0)
}

// sunAzimuths are degrees by step, NaN at night.
func sunAzimuths(r *study.Result) []float64 {
	a := make([]float64, len(r.Climate.SinAltitude))
	for h := range a {
		a[h] = math.NaN()
	}
	for _, m := range r.Climate.Moments {
		a[m.Step] = scene.AzimuthDeg(m.Sun, r.Project.Site.NorthDeg)
	}
	return a
}

// writeSensorHours writes every step of the year for every sensor.
func writeSensorHours(w io.Writer, r *study.Result) error {
	var t table
	t.commonComments(r, newPaths(r.Project, r.Scene))
	t.comment("illuminance on the work plane, lx, sky and sun with all their reflections; 0 at night")
	t.comment("the next three lines are the sensors' positions in the model, m")
	for axis, name := range []string{"x m", "y m", "z m"} {
		t.row = append(t.row, "# "...)
		t.row = append(t.row, name...)
		t.row = append(t.row, ",,,"...)
		for i := range r.Planes {
			for _, s := range r.Planes[i].Plane.Sensors {
				t.fixed([3]float64{s.Position.X, s.Position.Y, s.Position.Z}[axis], 3)
			}
		}
		t.end()
	}
	for _, h := range stampHeads {
		t.text(h)
	}
	for i := range r.Planes {
		for k := range r.Planes[i].Plane.Sensors {
			t.text("lx: " + r.Planes[i].Plane.Name + " " + strconv.Itoa(k+1))
		}
	}
	t.end()
	for h := range r.Climate.SinAltitude {
		t.stamp(r, h)
		for i := range r.Planes {
			for _, e := range r.Planes[i].E {
				t.single(e[h])
			}
		}
		t.end()
		if err := t.flush(w, flushAt); err != nil {
			return err
		}
	}
	return t.flush(w, 0)
}

// writeOpeningHours writes every step of the year for every opening.
func writeOpeningHours(w io.Writer, r *study.Result) error {
	var t table
	t.commonComments(r, newPaths(r.Project, r.Scene))
	t.comment("share of the opening's area that the sun reaches from outdoors, 0 to 1, behind cloth or perforations by what they pass straight; " +
		"empty: no sun, or the sun behind the opening")
	for _, h := range stampHeads {
		t.text(h)
	}
	for i := range r.Openings {
		t.text("sunlit: " + r.Openings[i].Opening.Name)
	}
	t.end()
	for h := range r.Climate.SinAltitude {
		t.stamp(r, h)
		for i := range r.Openings {
			t.single(r.Openings[i].Sunlit[h])
		}
		t.end()
		if err := t.flush(w, flushAt); err != nil {
			return err
		}
	}
	return t.flush(w, 0)
}
