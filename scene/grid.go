package scene

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
)

// maxCells keeps a slip in spacing_m from asking for millions of sensors: a
// floor of 50 m by 50 m in cells of 0.1 m is a quarter of it.
const maxCells = 1_000_000

// sensorGrid lays cells of at most the asked spacing over the outline's
// bounding box less the perimeter band, one sensor in the middle of each cell
// that lies inside the outline and clear of the band. It fails where no sensor
// fits, and where cells are more than maxCells.
func sensorGrid(def *project.WorkPlane) (WorkPlane, error) {
	w := WorkPlane{Name: def.Name, HeightM: def.HeightM, PolygonM: def.PolygonM, Line: def.Line}
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, p := range def.PolygonM {
		for k := range 2 {
			lo[k], hi[k] = math.Min(lo[k], p[k]), math.Max(hi[k], p[k])
		}
	}
	spacing := def.Cell()
	w.SpacingM = spacing
	var n [2]int
	var step [2]float64
	for k := range 2 {
		lo[k] += def.PerimeterM
		hi[k] -= def.PerimeterM
		if hi[k]-lo[k] <= 0 {
			return w, noSensor(def, spacing)
		}
		n[k] = int(math.Max(1, math.Ceil((hi[k]-lo[k])/spacing-1e-9)))
		step[k] = (hi[k] - lo[k]) / float64(n[k])
	}
	if float64(n[0])*float64(n[1]) > maxCells {
		return w, fmt.Errorf("spacing_m: got %g, which makes %d by %d cells, want at most %d in all; give a larger spacing_m or split the plane", spacing, n[0], n[1], maxCells)
	}
	for j := range n[1] {
		for i := range n[0] {
			x, y := lo[0]+(float64(i)+0.5)*step[0], lo[1]+(float64(j)+0.5)*step[1]
			if !inside(def.PolygonM, x, y) || distance(def.PolygonM, x, y) < def.PerimeterM-1e-9 {
				continue
			}
			w.Sensors = append(w.Sensors, Sensor{
				Position: r3.Vec{X: x, Y: y, Z: def.HeightM},
				Normal:   r3.Vec{Z: 1},
				AreaM2:   step[0] * step[1],
			})
		}
	}
	if len(w.Sensors) == 0 {
		return w, noSensor(def, spacing)
	}
	return w, nil
}

func noSensor(def *project.WorkPlane, spacing float64) error {
	return fmt.Errorf("polygon_m: no sensor fits between the perimeter band of %g m and the outline with %.2g m spacing; want a larger outline, or smaller perimeter_m or spacing_m", def.PerimeterM, spacing)
}

// inside is the even-odd rule.
func inside(poly [][2]float64, x, y float64) bool {
	in := false
	for i, a := range poly {
		b := poly[(i+1)%len(poly)]
		if (a[1] > y) != (b[1] > y) && x < (b[0]-a[0])*(y-a[1])/(b[1]-a[1])+a[0] {
			in = !in
		}
	}
	return in
}

// distance from a point to the outline.
func distance(poly [][2]float64, x, y float64) float64 {
	d := math.Inf(1)
	for i, a := range poly {
		b := poly[(i+1)%len(poly)]
		ex, ey := b[0]-a[0], b[1]-a[1]
		t := ((x-a[0])*ex + (y-a[1])*ey) / (ex*ex + ey*ey)
		t = math.Min(1, math.Max(0, t))
		d = math.Min(d, math.Hypot(x-a[0]-t*ex, y-a[1]-t*ey))
	}
	return d
}
