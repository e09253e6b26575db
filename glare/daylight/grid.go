package daylight

import "math"

// PerimeterM is the band along the walls that the work plane leaves out, and
// PlaneHeightM the plane's height above the floor.
// Source: EN 17037:2018, from memory.
const (
	PerimeterM   = 0.5
	PlaneHeightM = 0.85
)

// MaxCellM is the largest cell size of a grid on a plane aM by bM:
// p = 0.5 * 5^log10(d), at most 10 m, with d the longer side, or the shorter
// one where the sides differ by a factor of two or more.
// Source: EN 17037:2018, from memory; the rule for the
// shorter side as in EN 12464-1, from memory.
func MaxCellM(aM, bM float64) float64 {
	longer, shorter := math.Max(aM, bM), math.Min(aM, bM)
	d := longer
	if longer >= 2*shorter {
		d = shorter
	}
	return math.Min(10, 0.5*math.Pow(5, math.Log10(d)))
}

// Cells is the number of cells along a side of lengthM when none may be
// longer than cellM: at least one.
func Cells(lengthM, cellM float64) int {
	return max(1, int(math.Ceil(lengthM/cellM-1e-9)))
}
