package glare

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// Cones of known luminance: each zone must return its own.
func TestContrast(t *testing.T) {
	const size, radius = 180, 12 * deg // a pixel is 1 degree
	v := fisheye(t, view.Equidistant, 180, size)
	f := NewField(v)
	task := toward(8*deg, -5*deg)
	lum := make([]float32, size*size)
	for i, d := range f.Dir {
		switch {
		case !f.Inside[i]:
		case r3.Dot(d, task) >= math.Cos(radius):
			lum[i] = 300
		case d.X >= math.Cos(30*deg): // cones of 60 and 120 degrees: Meyer et al. 1996
			lum[i] = 100
		case d.X >= math.Cos(62*deg): // 2 degrees beyond the background's edge
			lum[i] = 30
		default:
			lum[i] = 7
		}
	}
	o := Options{TaskCentre: task, TaskRadiusRad: radius}
	c := ContrastOf(f, lum, o)
	near(t, "task", c.Task, 300, 1e-9)
	near(t, "surround", c.Surround, 100, 1e-9)
	near(t, "background", c.Background, 30, 1e-9)

	// Up to 62 degrees lie 2 pi (1 - cos 62) sr, 0.19 sr more than half of the half
	// space; one row of pixels on the border, 2 pi sin 62 x 1 degree = 0.10 sr at
	// most, does not change that.
	if got := Median(f, lum); got != 30 {
		t.Errorf("median: got %g, want 30", got)
	}
	lum[size*size/2+size/2] = 1e9 // one pixel moves the mean, not the median
	if got := Median(f, lum); got != 30 {
		t.Errorf("median with a bright pixel: got %g, want 30", got)
	}
	hidden := make([]bool, size*size)
	for i, d := range f.Dir {
		if hidden[i] = d.X < math.Cos(60*deg); hidden[i] {
			lum[i] = 0
		}
	}
	// Of what is left, pi sr, 2 pi (cos 30 - cos 60) = 2.3 sr have 30.
	if got := Median(f.Without(hidden), lum); got != 30 {
		t.Errorf("median of the cone of 120 degrees: got %g, want 30", got)
	}
	if c := ContrastOf(f.Without(hidden), lum, o); math.Abs(c.Background-30) > 1e-9 {
		t.Errorf("background without what is hidden: got %g, want 30", c.Background)
	}
	empty := make([]bool, size*size)
	for i := range empty {
		empty[i] = true
	}
	if c := ContrastOf(f.Without(empty), make([]float32, size*size), o); !math.IsNaN(c.Task) {
		t.Errorf("task with nothing seen: got %g, want NaN", c.Task)
	}
	if got := Median(f.Without(empty), make([]float32, size*size)); !math.IsNaN(got) {
		t.Errorf("median of nothing: got %g, want NaN", got)
	}
}
