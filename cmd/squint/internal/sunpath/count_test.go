package sunpath

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"errors"
	"image/png"
	"math"
	"reflect"
	"strings"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
)

// TestCount: a sun that shines from 12 to 13 h every day, counted by clock,
// month, weekday and weather.
func TestCount(t *testing.T) {
	in := newModel(t).input(r3.Vec{})
	in.Sun = func(at time.Time) (r3.Vec, error) {
		if at.Hour() == 12 {
			return r3.Unit(r3.Vec{Y: -1, Z: 1}), nil
		}
		return r3.Vec{Z: -1}, nil
	}
	in.Calendar = daylight.Calendar{FirstWeekday: 5, Days: [7]bool{true, true, true, true, true}, FromH: 13, ToH: 14,
		SavingFrom: &daylight.MonthDay{Month: 4, Day: 1}, SavingTo: &daylight.MonthDay{Month: 10, Day: 1}}
	in.Bright = func(record int) bool { return record/24 < 31 && record%24 == 12 }
	y := compute(t, in)
	near := func(what string, got, want float64) {
		if math.Abs(got-want) > 1e-6 { // rounding of sums
			t.Errorf("%s: got %g, want %g", what, got, want)
		}
	}
	near("all", y.Direct.All, 365)
	near("by the weather", y.Direct.Bright, 31)
	// Weekdays from 1 April to 30 September 2022, from a calendar: 131.
	near("in use", y.Direct.InUse, 131)
	near("in use by the weather", y.Direct.BrightInUse, 0)
	for m := range 12 {
		clock := 12
		if m >= 3 && m < 9 {
			clock = 13
		}
		near("minutes", y.Direct.Minutes[clock][m], 60)
		near("minutes of the day", y.Direct.Month(m), 60)
	}
}

// TestWorkers: the number of threads changes nothing, not even in the picture.
func TestWorkers(t *testing.T) {
	var years []*Year
	var pictures [][]byte
	for _, workers := range []int{1, 7} {
		m := newModel(t)
		m.window(-.8, .6, .1, 1.3)
		in := m.input(r3.Vec{Y: 2})
		in.Workers = workers
		y := compute(t, in)
		var b bytes.Buffer
		if err := y.WritePNG(context.Background(), &b, Sheet{WidthPx: 400, World: in.World(r3.Vec{})}); err != nil {
			t.Fatal(err)
		}
		years, pictures = append(years, y), append(pictures, b.Bytes())
	}
	if !reflect.DeepEqual(years[0].Samples, years[1].Samples) || !reflect.DeepEqual(years[0].Direct, years[1].Direct) {
		t.Error("one and seven workers find other suns")
	}
	if !bytes.Equal(pictures[0], pictures[1]) {
		t.Error("one and seven workers draw another picture")
	}
	other := newModel(t).input(r3.Vec{Y: 2})
	if reflect.DeepEqual(compute(t, other).Samples, years[0].Samples) {
		t.Error("a point without a wall sees the same suns")
	}
}

// TestStop: a year that is stopped ends with the context's error.
func TestStop(t *testing.T) {
	ctx, stop := context.WithCancel(context.Background())
	stop()
	if y, err := Compute(ctx, newModel(t).input(r3.Vec{})); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v and %v, want the stop as an error", y, err)
	}
}

// TestForms: where the compass stands in the picture.
func TestForms(t *testing.T) {
	for _, c := range []struct {
		name  string
		form  Form
		north float64
		dir   r3.Vec
		x, y  float64
	}{
		{"zenith", Up, 0, r3.Vec{Z: 1}, 0, 0},
		{"north", Up, 0, r3.Vec{Y: 1}, 0, -1},
		{"east is right, as on a plan", Up, 0, r3.Vec{X: 1}, 1, 0},
		{"true north where +y is east", Up, math.Pi / 2, r3.Vec{Y: 1}, 1, 0},
		{"half way up", Up, 0, r3.Unit(r3.Vec{Y: -1, Z: 1}), 0, .5},
		{"ahead", Ahead, 0, r3.Vec{Y: -1}, 0, 0},
		{"right of one who looks south", Ahead, 0, r3.Vec{X: -1}, 1, 0},
		{"above", Ahead, 0, r3.Vec{Z: 1}, 0, -1},
	} {
		f, err := newFisheye(Point{Ahead: r3.Vec{Y: -1}}, c.form, c.north)
		if err != nil {
			t.Fatal(err)
		}
		x, y, ok := f.project(c.dir)
		if !ok || math.Hypot(x-c.x, y-c.y) > 1e-9 {
			t.Errorf("%s: got %g, %g, %v, want %g, %g", c.name, x, y, ok, c.x, c.y)
		}
		if dir, ok := f.ray(c.x*.999, c.y*.999); !ok || r3.Norm(r3.Sub(dir, c.dir)) > 2e-3 { // a thousandth of 90 degrees
			t.Errorf("%s: the ray there is %v", c.name, dir)
		}
	}
}

// TestFiles: the table keeps to 80 columns, the files hold every sample.
func TestFiles(t *testing.T) {
	y := mirrorYear(t, 0)
	var table, rows, doc, picture bytes.Buffer
	if err := y.WriteTable(&table); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimRight(table.String(), "\n"), "\n")
	for _, l := range lines {
		if len(l) > 80 || strings.HasSuffix(l, " ") {
			t.Errorf("line of %d columns: %q", len(l), l)
		}
	}
	if !strings.Contains(table.String(), "Mirrored sun") || !strings.Contains(table.String(), "12-13 h    60") {
		t.Errorf("got\n%s\nwant noon as full hours, and mirrored sun", table.String())
	}
	if err := y.WriteCSV(&rows, 0); err != nil {
		t.Fatal(err)
	}
	all, err := csv.NewReader(&rows).ReadAll()
	if err != nil || len(all) != len(y.Samples)+1 {
		t.Errorf("got %d rows and %v, want %d", len(all), err, len(y.Samples)+1)
	}
	if err := y.WriteJSON(&doc, 0, true); err != nil {
		t.Fatal(err)
	}
	var got struct {
		Invented bool                    `json:"invented"`
		Direct   struct{ Hours float64 } `json:"direct"`
		Samples  []row                   `json:"samples"`
	}
	if err := json.Unmarshal(doc.Bytes(), &got); err != nil || !got.Invented || len(got.Samples) != len(y.Samples) || math.Abs(got.Direct.Hours-y.Direct.All) > .01 {
		t.Errorf("got %d samples, %g h and %v", len(got.Samples), got.Direct.Hours, err)
	}
	for _, form := range []Form{Ahead, Up} {
		picture.Reset()
		if err := y.WritePNG(context.Background(), &picture, Sheet{Form: form, WidthPx: 600, World: y.Input.World(r3.Vec{}), FromH: 8, ToH: 18}); err != nil {
			t.Fatal(err)
		}
		if im, err := png.Decode(&picture); err != nil || im.Bounds().Dx() != 600 {
			t.Errorf("got %v and %v, want a picture of 600 pixels", im.Bounds(), err)
		}
	}
	if err := y.WritePNG(context.Background(), &picture, Sheet{WidthPx: 20, World: y.Input.World(r3.Vec{})}); err == nil {
		t.Error("a picture of 20 pixels is drawn")
	}
}
