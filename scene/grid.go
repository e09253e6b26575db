package scene

import (
	"fmt"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
)

// maxCells keeps a slip in spacing_m from asking for millions of sensors: a
// floor of 50 m by 50 m in cells of 0.1 m is a quarter of it.
const maxCells = 1_000_000

// sensorGrid puts a sensor in the middle of each of the plane's cells. It fails
// where no sensor fits, and where cells are more than maxCells.
func sensorGrid(def *project.WorkPlane) (WorkPlane, error) {
	w := WorkPlane{Name: def.Name, HeightM: def.HeightM, PolygonM: def.PolygonM, SpacingM: def.Cell(), Room: def.Room, Line: def.Line}
	middles, area, across := project.Cells(def.PolygonM, w.SpacingM, def.PerimeterM, maxCells)
	if float64(across[0])*float64(across[1]) > maxCells {
		return w, fmt.Errorf("spacing_m: got %g, which makes %d by %d cells, want at most %d in all; give a larger spacing_m or split the plane", w.SpacingM, across[0], across[1], maxCells)
	}
	for _, at := range middles {
		w.Sensors = append(w.Sensors, Sensor{Position: r3.Vec{X: at[0], Y: at[1], Z: def.HeightM}, Normal: r3.Vec{Z: 1}, AreaM2: area})
	}
	if len(w.Sensors) == 0 {
		return w, fmt.Errorf("polygon_m: no sensor fits between the perimeter band of %g m and the outline with %.2g m spacing; want a larger outline, or smaller perimeter_m or spacing_m", def.PerimeterM, w.SpacingM)
	}
	return w, nil
}
