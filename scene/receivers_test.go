package scene

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// TestGridRule: cells by the rule of EN 17037 (as project.WorkPlane.Cell has
// it), worked out by hand: of 4 m by 6 m the longer side counts, 0.5 *
// 5^0.77815 = 1.7493 m; 3 m by 5 m remain inside the band: 2 by 3 cells.
func TestGridRule(t *testing.T) {
	s := mustBuild(t, roomMesh+"\n[[work_plane]]\nname = \"desks\"\npolygon_m = [[0, 0], [4, 0], [4, 6], [0, 6]]\n", room().files())
	w := s.WorkPlanes[0]
	if w.Name != "desks" || w.HeightM != 0.85 || math.Abs(w.SpacingM-1.7493) > 1e-4 || len(w.Sensors) != 6 || s.Sensors() != 6 {
		t.Fatalf("got %d sensors, spacing %g: %+v", len(w.Sensors), w.SpacingM, w)
	}
	i := 0
	for _, y := range []float64{0.5 + 5./6, 3, 5.5 - 5./6} {
		for _, x := range []float64{1.25, 2.75} {
			q := w.Sensors[i]
			if apart(q.Position, r3.Vec{X: x, Y: y, Z: 0.85}) > near || q.Normal != (r3.Vec{Z: 1}) || math.Abs(q.AreaM2-2.5) > near {
				t.Errorf("sensor %d: got %+v, want at %g %g", i, q, x, y)
			}
			i++
		}
	}
	// Twice as long or more: the shorter side, 0.5 * 5^(log10 10) = 2.5 m.
	s = mustBuild(t, roomMesh+"\n[[work_plane]]\nname = \"desks\"\npolygon_m = [[0, 0], [20, 0], [20, 10], [0, 10]]\nperimeter_m = 0\n", room().files())
	if w := s.WorkPlanes[0]; math.Abs(w.SpacingM-2.5) > near || len(w.Sensors) != 32 {
		t.Errorf("20 by 10: got %d sensors, spacing %g, want 32 at 2.5", len(w.Sensors), w.SpacingM)
	}
}

// TestGridPolygon: of an L and of a turned square no sensor lies in the band.
func TestGridPolygon(t *testing.T) {
	for _, c := range []struct {
		name, polygon string
		perimeter     float64
		want          int
	}{
		// By hand, cells of 0.5 m: 10 by 4 below the notch, 4 by 6 beside it.
		{"L", "[[0, 0], [6, 0], [6, 3], [3, 3], [3, 6], [0, 6]]", 0.5, 64},
		{"L the other way round", "[[0, 6], [3, 6], [3, 3], [6, 3], [6, 0], [0, 0]]", 0.5, 64},
		// By hand: 12 by 12 cells less the notch's 6 by 6.
		{"L without a band", "[[0, 0], [6, 0], [6, 3], [3, 3], [3, 6], [0, 6]]", 0, 108},
		// |x| + |y| <= 3 less the band: |x| + |y| <= 3 - 0.5 sqrt 2 = 2.293.
		// Inside 5 m by 5 m cell centres lie at odd quarters: |x| and |y| of
		// .25 .. 2.25, whose sum is at most 2.25 (.25+.25 .. 4 pairs of sums
		// .5, 1, 1.5, 2: 1 + 2 + 3 + 4 = 10 a quadrant).
		{"turned square", "[[3, 0], [0, 3], [-3, 0], [0, -3]]", 0.5, 40},
	} {
		tables := fmt.Sprintf("%s\n[[work_plane]]\nname = \"p\"\npolygon_m = %s\nperimeter_m = %g\nspacing_m = 0.5\nheight_m = 1.5\n", roomMesh, c.polygon, c.perimeter)
		w := mustBuild(t, tables, room().files()).WorkPlanes[0]
		if len(w.Sensors) != c.want {
			t.Errorf("%s: got %d sensors, want %d", c.name, len(w.Sensors), c.want)
		}
		for _, q := range w.Sensors {
			if q.Position.Z != 1.5 || math.Abs(q.AreaM2-0.25) > near {
				t.Errorf("%s: sensor %+v", c.name, q)
			}
		}
	}
}

// TestViewpoints: compass directions in the model, by hand. At north_deg 90 the
// model's +y points east.
func TestViewpoints(t *testing.T) {
	for _, c := range []struct {
		north    float64
		look     string
		want     r3.Vec
		position r3.Vec
	}{
		{0, "azimuth_deg = 180", r3.Vec{Y: -1}, r3.Vec{X: 2, Y: 3, Z: 1.2}},
		{90, "azimuth_deg = 90", r3.Vec{Y: 1}, r3.Vec{X: 2, Y: 3, Z: 1.2}},
		{90, "azimuth_deg = 0", r3.Vec{X: -1}, r3.Vec{X: 2, Y: 3, Z: 1.2}},
		{0, "azimuth_deg = 90\npitch_deg = -30", r3.Vec{X: math.Sqrt(3) / 2, Z: -0.5}, r3.Vec{X: 2, Y: 3, Z: 1.2}},
		{45, "toward_m = [2, 0, 1.2]", r3.Vec{Y: -1}, r3.Vec{X: 2, Y: 3, Z: 1.2}},       // in the model, whatever north is
		{0, "toward_m = [5, 7, 1.2]", r3.Vec{X: .6, Y: .8}, r3.Vec{X: 2, Y: 3, Z: 1.2}}, // 3, 4, 5
	} {
		tables := fmt.Sprintf("[site]\nnorth_deg = %g\n\n%s\n[[viewpoint]]\nname = \"v\"\nposition_m = [2, 3, 1.2]\n%s\n", c.north, roomMesh, c.look)
		v := mustBuild(t, tables, room().files()).Viewpoints[0]
		if apart(v.Direction, c.want) > near || v.Position != c.position || v.Name != "v" || v.Line != 28 {
			t.Errorf("north %g, %s: got %+v, want %v", c.north, strings.ReplaceAll(c.look, "\n", ", "), v, c.want)
		}
	}
}
