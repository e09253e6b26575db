package report

import (
	"bytes"
	"encoding/csv"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/scene"
)

func parse(t *testing.T, write func(io.Writer, *study.Result) error, r *study.Result) (comments []string, rows [][]string) {
	t.Helper()
	var b bytes.Buffer
	if err := write(&b, r); err != nil {
		t.Fatal(err)
	}
	for _, l := range strings.Split(b.String(), "\n") {
		if strings.HasPrefix(l, "#") {
			comments = append(comments, l)
		}
	}
	c := csv.NewReader(&b)
	c.Comment = '#'
	rows, err := c.ReadAll() // also checks that all rows are as long as the first
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != daylight.HoursPerYear+1 {
		t.Fatalf("got %d rows, want a head and %d", len(rows), daylight.HoursPerYear)
	}
	return comments, rows
}

func TestViewHours(t *testing.T) {
	r := sample(`a "quoted", name`, "=1+1", "line\nbreak")
	r.Project.Invented = true
	r.Views[2].Causes[1] = study.Cause{Kind: study.Surface, Name: "=danger, \"really\""}
	r.Views[2].Cause[9] = 1
	comments, rows := parse(t, writeViewHours, r)
	if !strings.Contains(strings.Join(comments, "\n"), inventedWords) {
		t.Error("comments do not say that the data are invented")
	}
	if got, want := rows[0][6], `DGP: a "quoted", name`; got != want {
		t.Errorf("head: got %q, want %q", got, want)
	}
	for h, row := range rows[1:] {
		for i := range r.Views {
			v := &r.Views[i]
			for k, want := range []float32{v.DGP[h], v.StdErr[h], v.Ev[h]} {
				cell := row[6+4*i+k]
				if want != want {
					if cell != "" {
						t.Fatalf("record %d: got %q, want nothing", h, cell)
					}
					continue
				}
				got, err := strconv.ParseFloat(cell, 32)
				if err != nil || float32(got) != want { // to the bit
					t.Fatalf("record %d: got %q, want %v", h, cell, want)
				}
			}
		}
	}
	if got, want := rows[1+9][6+4*2+3], `'=danger, "really"`; got != want {
		t.Errorf("cause: got %q, want %q", got, want)
	}
	// 1 January, 10 to 11 h; sun at 0.5 sin(60 degrees) by the sample.
	at := rows[1+10]
	if got, want := strings.Join(at[:5], " "), "10 1 1 10:00 25.66"; got != want {
		t.Errorf("record 10 begins %q, want %q", got, want)
	}
	if rows[1+2][5] != "" || at[5] == "" {
		t.Errorf("azimuths at night %q and by day %q, want only the second", rows[1+2][5], at[5])
	}
}

func TestSensorHours(t *testing.T) {
	r := sample("desk 1")
	comments, rows := parse(t, writeSensorHours, r)
	if got, want := strings.Join(rows[0][4:], "|"), "lx: open plan 1|lx: open plan 2"; got != want {
		t.Errorf("heads %q, want %q", got, want)
	}
	for h, row := range rows[1:] {
		if got, err := strconv.ParseFloat(row[5], 32); err != nil || float32(got) != r.Planes[0].E[1][h] {
			t.Fatalf("record %d: got %q, want %v", h, row[5], r.Planes[0].E[1][h])
		}
	}
	if got, want := comments[len(comments)-3], "# x m,,,,1.000,2.000"; got != want {
		t.Errorf("positions %q, want %q", got, want)
	}
}

// TestClockHour: in daylight saving time clocks stand one hour ahead.
func TestClockHour(t *testing.T) {
	c := daylight.Calendar{SavingFrom: &daylight.MonthDay{Month: 3, Day: 29}, SavingTo: &daylight.MonthDay{Month: 10, Day: 25}}
	for _, x := range []struct{ day, hour, want int }{{0, 9, 9}, {87, 9, 10}, {87, 23, 24}, {86, 23, 23}, {297, 0, 0}} {
		c.PerHour = 1
		if got, m := clockStart(c, x.day*24+x.hour); got != x.want || m != 0 {
			t.Errorf("day %d hour %d: got %d:%02d, want %d:00", x.day, x.hour, got, m, x.want)
		}
		c.PerHour = 4
		for quarter := range 4 {
			if got, m := clockStart(c, 4*(x.day*24+x.hour)+quarter); got != x.want || m != 15*quarter {
				t.Errorf("day %d hour %d, quarter %d: got %d:%02d, want %d:%02d", x.day, x.hour, quarter, got, m, x.want, 15*quarter)
			}
		}
	}
}

func TestAzimuth(t *testing.T) {
	for _, x := range []struct {
		d           r3.Vec
		north, want float64
	}{{r3.Vec{Y: 1}, 0, 0}, {r3.Vec{X: 1}, 0, 90}, {r3.Vec{Y: -1}, 0, 180}, {r3.Vec{X: -1}, 0, 270}, {r3.Vec{Y: -1}, 345, 165}, {r3.Vec{X: -1e-17, Y: 1}, 0, 0}, {r3.Vec{X: 1}, -100, 350}} {
		if got := scene.AzimuthDeg(x.d, x.north); math.Abs(got-x.want) > 1e-9 {
			t.Errorf("%v, north %g: got %g, want %g", x.d, x.north, got, x.want)
		}
	}
}

// wide is a year of 380 sensors with all digits.
func wide() *study.Result {
	r := sample("desk 1")
	p := &r.Planes[0]
	p.E, p.Plane.Sensors = nil, nil
	for s := range 380 {
		e := make([]float32, daylight.HoursPerYear)
		for h := range e {
			if h%24 >= 6 && h%24 < 18 {
				e[h] = float32(math.Mod(float64(h*7919+s*104729)*0.3183, 4000))
			}
		}
		p.E = append(p.E, e)
		p.Plane.Sensors = append(p.Plane.Sensors, scene.Sensor{})
	}
	r.Scene.WorkPlanes[0] = p.Plane
	return r
}

// BenchmarkSensorHours writes 8760 x 380 values.
func BenchmarkSensorHours(b *testing.B) {
	r := wide()
	b.ReportAllocs()
	for b.Loop() {
		if err := writeSensorHours(io.Discard, r); err != nil {
			b.Fatal(err)
		}
	}
}
