package project

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// TestCell compares with the rule p = 0.5 * 5^(log10 d) worked out by hand:
// log10 of 1, 10 and 100 is 0, 1 and 2.
func TestCell(t *testing.T) {
	rectangle := func(w, h, turnRad float64) [][2]float64 {
		sin, cos := math.Sincos(turnRad)
		var p [][2]float64
		for _, c := range [][2]float64{{0, 0}, {w, 0}, {w, h}, {0, h}} {
			p = append(p, [2]float64{cos*c[0] - sin*c[1], sin*c[0] + cos*c[1]})
		}
		return p
	}
	for _, c := range []struct {
		name string
		w    WorkPlane
		want float64
	}{
		{"given", WorkPlane{SpacingM: 0.3}, 0.3},
		{"longer side 10 m", WorkPlane{PolygonM: rectangle(10, 8, 0)}, 2.5},
		{"turned", WorkPlane{PolygonM: rectangle(10, 8, 1)}, 2.5},
		{"long room: shorter side 1 m", WorkPlane{PolygonM: rectangle(10, 1, 0.3)}, 0.5},
		{"ratio of 2: shorter side 10 m", WorkPlane{PolygonM: rectangle(20, 10, 0)}, 2.5},
		{"at most 10 m", WorkPlane{PolygonM: rectangle(100, 100, 0)}, 10}, // the rule gives 12.5
	} {
		if got := c.w.Cell(); math.Abs(got-c.want) > 1e-9 {
			t.Errorf("%s: got %g m, want %g", c.name, got, c.want)
		}
	}
}

func TestPolygonProblem(t *testing.T) {
	for _, c := range []struct {
		name string
		poly [][2]float64
		ok   bool
	}{
		{"triangle", [][2]float64{{0, 0}, {1, 0}, {0, 1}}, true},
		{"clockwise", [][2]float64{{0, 0}, {0, 1}, {1, 0}}, true},
		{"L", [][2]float64{{0, 0}, {2, 0}, {2, 1}, {1, 1}, {1, 2}, {0, 2}}, true},
		{"far away", [][2]float64{{9e4, 9e4}, {9e4 + 1, 9e4}, {9e4, 9e4 + 1}}, true},
		{"a point on a side", [][2]float64{{0, 0}, {1, 0}, {2, 0}, {2, 2}}, true},
		{"a point twice", [][2]float64{{0, 0}, {1, 0}, {1, 0}, {0, 1}}, false},
		{"line", [][2]float64{{0, 0}, {1, 0}, {2, 0}}, false},
		{"bow tie", [][2]float64{{0, 0}, {1, 1}, {1, 0}, {0, 1}}, false},
		{"touches itself", [][2]float64{{0, 0}, {2, 0}, {2, 2}, {1, 0}, {0, 2}}, false},
		{"small", [][2]float64{{0, 0}, {0.1, 0}, {0.1, 0.05}}, false},
		{"none", nil, false},
	} {
		if why := polygonProblem(c.poly); (why == "") != c.ok {
			t.Errorf("%s: got %q, want it to pass: %v", c.name, why, c.ok)
		}
	}
}

// TestDirection has compass directions worked out by hand.
func TestDirection(t *testing.T) {
	for _, c := range []struct {
		azimuth, pitch, north float64
		want                  r3.Vec
	}{
		{0, 0, 0, r3.Vec{Y: 1}},
		{90, 0, 0, r3.Vec{X: 1}},
		{180, 0, 0, r3.Vec{Y: -1}},
		{90, 0, 90, r3.Vec{Y: 1}}, // model +y points east
		{0, 0, 90, r3.Vec{X: -1}},
		{123, 90, 45, r3.Vec{Z: 1}},
		{0, -30, 0, r3.Vec{Y: math.Sqrt(3) / 2, Z: -0.5}},
	} {
		if got := Direction(c.azimuth, c.pitch, c.north); r3.Norm(r3.Sub(got, c.want)) > 1e-12 {
			t.Errorf("azimuth %g, pitch %g, north %g: got %v, want %v", c.azimuth, c.pitch, c.north, got, c.want)
		}
	}
}

// TestOfficeFacade: model +y points to azimuth 15, so the facade in the plane
// y = 0 faces -y, azimuth 195.
func TestOfficeFacade(t *testing.T) {
	p, err := load(t, office(t))
	if err != nil {
		t.Fatal(err)
	}
	r, err := p.Openings[0].Rect(p.Site.NorthDeg)
	if err != nil {
		t.Fatal(err)
	}
	if r3.Norm(r3.Sub(r.Outward, r3.Vec{Y: -1})) > 1e-12 {
		t.Errorf("outward: got %v, want -y", r.Outward)
	}
	if faces, err := p.LightShelves[0].System().Build(r); err != nil || len(faces) != 24 {
		t.Errorf("shelf: got %d faces and %v, want 24", len(faces), err)
	}
	if _, err := p.Openings[1].Rect(0); err == nil {
		t.Error("an opening found in a mesh: got a rectangle, want an error")
	}
}
