package view

import "testing"

// TestInPolygon by eye: an L, and a bow tie whose crossing lies at (1, 1).
func TestInPolygon(t *testing.T) {
	ell := [][2]float64{{0, 0}, {2, 0}, {2, 1}, {1, 1}, {1, 2}, {0, 2}}
	tie := [][2]float64{{0, 0}, {2, 2}, {2, 0}, {0, 2}}
	for _, c := range []struct {
		name    string
		polygon [][2]float64
		x, y    float64
		want    bool
	}{
		{"foot", ell, 1.5, 0.5, true}, {"stem", ell, 0.5, 1.5, true}, {"notch", ell, 1.5, 1.5, false}, {"beside", ell, -0.5, 0.5, false}, {"above", ell, 0.5, 2.5, false},
		{"left half", tie, 0.2, 1, true}, {"right half", tie, 1.8, 1, true}, {"between them", tie, 1, 1.5, false},
	} {
		if got := InPolygon(c.polygon, c.x, c.y); got != c.want {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}
