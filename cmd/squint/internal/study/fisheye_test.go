package study

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/view"
)

// fisheye is the view that coeff traces, made again from its definition.
func fisheye(t testing.TB, v scene.Viewpoint, pixels int) (view.View, []int32) {
	t.Helper()
	vw, err := view.New(v.Position, v.Direction, r3.Vec{Z: 1}, view.Equidistant, math.Pi, pixels, pixels)
	if err != nil {
		t.Fatal(err)
	}
	var inside []int32
	for i := range pixels * pixels {
		if vw.SolidAngle(i%pixels, i/pixels) > 0 {
			inside = append(inside, int32(i))
		}
	}
	return vw, inside
}
