package study

import (
	"math"
	"slices"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

// rear are the indices of the third of the sensors that is furthest, on
// the plan, from the middle of the nearest opening, in rising order; all
// without openings. Own choice, no published source.
func rear(sensors []scene.Sensor, openings []scene.Opening) []int {
	order := make([]int, len(sensors))
	far := make([]float64, len(sensors))
	for i, s := range sensors {
		order[i], far[i] = i, math.Inf(1)
		for _, o := range openings {
			d := r3.Sub(o.Rect.Point(o.Rect.WidthM/2, o.Rect.HeightM/2, 0), s.Position)
			far[i] = min(far[i], math.Hypot(d.X, d.Y))
		}
	}
	sort.SliceStable(order, func(a, b int) bool { return far[order[a]] > far[order[b]] })
	third := order[:(len(order)+2)/3]
	if len(openings) == 0 {
		third = order
	}
	slices.Sort(third)
	return third
}
