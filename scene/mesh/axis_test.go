package mesh

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func TestAxisTurn(t *testing.T) {
	tests := []struct {
		up       Axis
		in, want r3.Vec
	}{
		{Z, r3.Vec{X: 1, Y: 2, Z: 3}, r3.Vec{X: 1, Y: 2, Z: 3}},  // exact: z up stays
		{Y, r3.Vec{X: 1, Y: 2, Z: 3}, r3.Vec{X: 1, Y: -3, Z: 2}}, // exact: quarter turn about x, y to z
		{Y, r3.Vec{}, r3.Vec{}},
	}
	for _, tt := range tests {
		got := tt.up.turn(tt.in)
		if got != tt.want {
			t.Errorf("up %v: %v becomes %v, want %v", tt.up, tt.in, got, tt.want)
		}
		if math.Signbit(got.Y) != math.Signbit(tt.want.Y) {
			t.Errorf("up %v: %v has a minus zero", tt.up, got)
		}
	}
	// A turn keeps handedness: x cross y is z before and after.
	x, y, z := Y.turn(r3.Vec{X: 1}), Y.turn(r3.Vec{Y: 1}), Y.turn(r3.Vec{Z: 1})
	if r3.Cross(x, y) != z {
		t.Errorf("x cross y is %v after the turn, want %v", r3.Cross(x, y), z)
	}
}

func TestParseAxis(t *testing.T) {
	for _, a := range []Axis{Y, Z} {
		if got, err := ParseAxis(a.String()); got != a || err != nil {
			t.Errorf("ParseAxis(%q) = %v, %v", a.String(), got, err)
		}
	}
	for _, s := range []string{"", "x", "Z", "-y"} {
		if got, err := ParseAxis(s); err == nil || got != NoAxis {
			t.Errorf("ParseAxis(%q) = %v, %v, want an error", s, got, err)
		}
	}
}
