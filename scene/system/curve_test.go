package system

import (
	"math"
	"testing"
)

// steepest is the largest angle between a facet and the curve over it, whose
// slope is given.
func steepest(points [][2]float64, slope func(x float64) float64) float64 {
	most := 0.0
	for i := range len(points) - 1 {
		a, b := points[i], points[i+1]
		facet := math.Atan2(b[1]-a[1], b[0]-a[0])
		for k := range 21 {
			x := a[0] + (b[0]-a[0])*float64(k)/20
			most = max(most, math.Abs(math.Atan(slope(x))-facet))
		}
	}
	return most
}

// TestCurves: points lie on the curve, facets are off it by the angle stated
// and by hardly less, so that no facets are wasted.
func TestCurves(t *testing.T) {
	for _, c := range []struct{ length, sagitta, facet float64 }{
		{0.08, 0.008, MirrorFacetRad}, {0.08, -0.008, MirrorFacetRad}, {0.9, 0.05, MirrorFacetRad}, {0.9, 0.2, MatteFacetRad},
		{0.025, 0.002, MatteFacetRad}, {1, maxSagitta(1), MirrorFacetRad}, {1, -1e-5, MirrorFacetRad},
	} {
		h, l := math.Abs(c.sagitta), c.length
		up := math.Copysign(1, c.sagitta)
		// A circle through both ends and the middle: R = h/2 + l^2/8h.
		radius := h/2 + l*l/8/h
		circle := func(x float64) float64 {
			// sqrt(R^2-d^2) - (R-h), without the difference of large numbers
			d := x - l/2
			return up * (h - d*d/(radius+math.Sqrt(radius*radius-d*d)))
		}
		circleSlope := func(x float64) float64 {
			d := x - l/2
			return -up * d / math.Sqrt(radius*radius-d*d)
		}
		hollow := func(x float64) float64 { d := 2*x/l - 1; return up * h * (1 - d*d) }
		hollowSlope := func(x float64) float64 { return -up * h * 4 / l * (2*x/l - 1) }
		for _, k := range []struct {
			name         string
			points       [][2]float64
			curve, slope func(float64) float64
		}{{"arc", arc(l, c.sagitta, c.facet), circle, circleSlope}, {"parabola", parabola(l, c.sagitta, c.facet), hollow, hollowSlope}} {
			off := 0.0
			for _, p := range k.points {
				off = max(off, math.Abs(p[1]-k.curve(p[0])))
			}
			if off > 1e-12*max(1, radius) {
				t.Errorf("%s %+v: a point lies %g m off the curve", k.name, c, off)
			}
			got := steepest(k.points, k.slope)
			if got > c.facet*(1+1e-6) {
				t.Errorf("%s %+v: a facet is %g degrees off the curve, want at most %g", k.name, c, deg(got), deg(c.facet))
			}
			if len(k.points) > 20 && got < 0.85*c.facet {
				t.Errorf("%s %+v: facets are only %g degrees off the curve, want nearly %g", k.name, c, deg(got), deg(c.facet))
			}
			if len(k.points) > 3 { // a planted defect: every second point left out
				var half [][2]float64
				for i := 0; i < len(k.points); i += 2 {
					half = append(half, k.points[i])
				}
				if steepest(half, k.slope) <= c.facet*(1+1e-6) {
					t.Errorf("%s %+v: half the facets are not noticed", k.name, c)
				}
			}
		}
	}
}

// TestFocus: rays along the axis meet in the focus (the defining property of a
// parabola), but for the facets' angle, which turns a ray by twice as much.
func TestFocus(t *testing.T) {
	const depth, focus = 1.2, 2.0
	line, err := Profile{Shape: Parabola, FocusM: focus}.line("outside", depth, MirrorFacetRad)
	if err != nil {
		t.Fatal(err)
	}
	lowest := math.Inf(1)
	for _, p := range line {
		lowest = min(lowest, p[1])
	}
	for i := range len(line) - 1 {
		a, b := line[i], line[i+1]
		mid := [2]float64{(a[0] + b[0]) / 2, (a[1] + b[1]) / 2}
		slope := math.Atan2(b[1]-a[1], b[0]-a[0])
		// Straight down, -90 degrees, mirrored: 2 slope + 90.
		got := 2*slope + math.Pi/2
		want := math.Atan2(lowest+focus-mid[1], depth/2-mid[0])
		if math.Abs(got-want) > 2*MirrorFacetRad {
			t.Fatalf("facet %d: a ray along the axis leaves at %g degrees, want %g, to the focus", i, deg(got), deg(want))
		}
	}
}
