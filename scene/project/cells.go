package project

import (
	"math"

	"squint/scene/view"
)

// Cells divides the bounding box of an outline, less the band along it, into
// equal cells of at most the spacing and returns the middles, by rising y and
// then x, of those inside the outline and clear of the band, with the area of
// each in m2. across counts the cells of the box along x and y; where they are
// more than most, or the band leaves nothing of the box, there are no middles.
func Cells(outline [][2]float64, spacingM, bandM float64, most int) (middles [][2]float64, areaM2 float64, across [2]int) {
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, p := range outline {
		for k := range 2 {
			lo[k], hi[k] = math.Min(lo[k], p[k]), math.Max(hi[k], p[k])
		}
	}
	var step [2]float64
	for k := range 2 {
		lo[k] += bandM
		hi[k] -= bandM
		if hi[k]-lo[k] <= 0 {
			return nil, 0, [2]int{}
		}
		across[k] = int(math.Max(1, math.Ceil((hi[k]-lo[k])/spacingM-1e-9)))
		step[k] = (hi[k] - lo[k]) / float64(across[k])
	}
	if float64(across[0])*float64(across[1]) > float64(most) {
		return nil, 0, across
	}
	for j := range across[1] {
		for i := range across[0] {
			x, y := lo[0]+(float64(i)+0.5)*step[0], lo[1]+(float64(j)+0.5)*step[1]
			if view.InPolygon(outline, x, y) && distance(outline, x, y) >= bandM-1e-9 {
				middles = append(middles, [2]float64{x, y})
			}
		}
	}
	return middles, step[0] * step[1], across
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
