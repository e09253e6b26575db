package sky

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// line makes points from azimuth and altitude in degrees.
func line(degrees ...float64) []HorizonPoint {
	var points []HorizonPoint
	for i := 0; i+1 < len(degrees); i += 2 {
		points = append(points, HorizonPoint{degrees[i] * degree, degrees[i+1] * degree})
	}
	return points
}

func TestHorizonAltitude(t *testing.T) {
	// Wanted values are linear interpolation by hand.
	for _, c := range []struct {
		name          string
		points        []HorizonPoint
		azimuth, want float64
	}{
		{"at a point", line(90, 10, 270, 30), 90, 10},
		{"between", line(90, 10, 270, 30), 180, 20},
		{"around north, from the west", line(90, 10, 270, 30), 315, 25},
		{"around north, from the east", line(90, 10, 270, 30), 45, 15},
		{"any order", line(270, 30, 90, 10), 45, 15},
		{"more turns", line(90, 10, 270, 30), 45 + 720, 15},
		{"negative", line(90, 10, 270, 30), -315, 15},
		{"closed at 360", line(0, 5, 180, 15, 360, 5), 270, 10},
		{"closed at 360, at north", line(0, 5, 180, 15, 360, 5), 360, 5},
		{"edge at north, east", line(0, 5, 180, 5, 360, 45), 0, 5},
		{"edge at north, west", line(0, 5, 180, 5, 360, 45), 359.999999, 45},
		{"edge of a building, west of it", line(80, 0, 80, 20, 100, 20, 100, 0), 79.999999, 0},
		{"edge of a building", line(80, 0, 80, 20, 100, 20, 100, 0), 80, 20},
		{"on the building", line(80, 0, 80, 20, 100, 20, 100, 0), 90, 20},
		{"other edge", line(80, 0, 80, 20, 100, 20, 100, 0), 100, 0},
		{"opposite", line(80, 0, 80, 20, 100, 20, 100, 0), 300, 0},
		{"valley", line(0, 90, 180, 90), 111, 90},
	} {
		h, err := NewHorizon(c.points)
		if err != nil {
			t.Fatal(c.name, err)
		}
		if got := h.AltitudeRad(c.azimuth*degree) / degree; math.Abs(got-c.want) > 1e-5 {
			t.Errorf("%s: altitude at %g: got %g, want %g", c.name, c.azimuth, got, c.want)
		}
	}
	h, err := NewHorizon(line(90, 10, 270, 30))
	if err != nil {
		t.Fatal(err)
	}
	for _, azimuth := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if got := h.AltitudeRad(azimuth); got != 0 {
			t.Errorf("AltitudeRad(%g) = %g, want 0", azimuth, got)
		}
	}
}

func TestHorizonHides(t *testing.T) {
	h, err := NewHorizon(line(90, 10, 270, 30))
	if err != nil {
		t.Fatal(err)
	}
	valley, err := NewHorizon(line(0, 90, 180, 90))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name    string
		horizon Horizon
		dir     r3.Vec
		want    bool
	}{
		{"below", h, at(90-19.9, 180), true},
		{"above", h, at(90-20.1, 180), false},
		{"below, north-west", h, at(90-24.9, 315), true},
		{"above, north-west", h, at(90-25.1, 315), false},
		{"zenith", h, r3.Vec{Z: 1}, false},
		{"nadir", h, r3.Vec{Z: -1}, true},
		{"valley", valley, at(1, 50), true},
		{"flat, above", Horizon{}, at(89.9, 50), false},
		{"flat, level", Horizon{}, r3.Vec{X: 1}, false},
		{"flat, below", Horizon{}, at(90.1, 50), true},
	} {
		if got := c.horizon.Hides(c.dir); got != c.want {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

func TestNewHorizonRefuses(t *testing.T) {
	for name, points := range map[string][]HorizonPoint{
		"none":             nil,
		"one":              line(90, 10),
		"azimuth low":      line(-1, 10, 90, 10),
		"azimuth high":     line(0, 10, 361, 10),
		"azimuth no no.":   line(0, 10, math.NaN(), 10),
		"altitude low":     line(0, -1, 90, 10),
		"altitude high":    line(0, 10, 90, 91),
		"altitude no no.":  line(0, math.NaN(), 90, 10),
		"three at once":    line(0, 0, 90, 1, 90, 2, 90, 3),
		"infinite azimuth": line(0, 0, math.Inf(1), 1),
	} {
		if _, err := NewHorizon(points); !errors.Is(err, ErrHorizon) {
			t.Errorf("%s: error %v, want %v", name, err, ErrHorizon)
		}
	}
}

func TestNewHorizonLeavesItsInputAlone(t *testing.T) {
	points := line(270, 30, 90, 10)
	h, err := NewHorizon(points)
	if err != nil {
		t.Fatal(err)
	}
	if points[0] != line(270, 30)[0] {
		t.Error("NewHorizon sorted the caller's points")
	}
	points[0].AltitudeRad = 1
	if got := h.AltitudeRad(270*degree) / degree; math.Abs(got-30) > 1e-9 {
		t.Errorf("the caller's change reached the horizon: %g, want 30", got)
	}
}

func BenchmarkHides(b *testing.B) {
	var degrees []float64
	for a := 0.0; a < 360; a += 5 {
		degrees = append(degrees, a, math.Mod(a*7, 30))
	}
	h, err := NewHorizon(line(degrees...))
	if err != nil {
		b.Fatal(err)
	}
	dir := at(80, 123)
	for b.Loop() {
		h.Hides(dir)
	}
}
