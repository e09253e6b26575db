package view

import (
	"errors"
	"math"
	"testing"
)

func TestPlan(t *testing.T) {
	p, err := NewPlan(0, 12, -1, 5, 1.7, 120)
	if err != nil {
		t.Fatal(err)
	}
	if p.Width != 120 || p.Height != 60 || math.Abs(p.pixelM()-0.1) > 1e-12 {
		t.Errorf("got %d x %d pixels of %g m, want 120 x 60 of 0.1", p.Width, p.Height, p.pixelM())
	}
	org, dir, ok := p.Through(0, 0)
	if !ok || org.X != 0 || org.Y != 5 || org.Z != 1.7 || dir.Z != -1 {
		t.Errorf("top left corner: got %v, %v, %v, want (0, 5, 1.7) downwards", org, dir, ok)
	}
	org, _, ok = p.Pixel(119, 59)
	if !ok || math.Abs(org.X-11.95) > 1e-9 || math.Abs(org.Y+0.95) > 1e-9 {
		t.Errorf("last pixel: got %v, %v, want (11.95, -0.95)", org, ok)
	}
	if _, _, ok := p.Through(120.5, 3); ok {
		t.Error("beyond the right edge: got a line of sight, want none")
	}
	// Widened to whole pixels about the middle.
	p, err = NewPlan(0, 10, 0, 3.33, 1, 20)
	if err != nil || p.Height != 7 || math.Abs((p.MinY+p.MaxY)/2-1.665) > 1e-12 || p.MaxY-p.MinY < 3.33 {
		t.Errorf("got %+v, %v, want 7 rows about the middle", p, err)
	}
}

func TestPlanRefuses(t *testing.T) {
	for _, c := range []struct {
		minX, maxX, minY, maxY, cut float64
		pixels                      int
	}{
		{0, 0, 0, 1, 1, 10}, {1, 0, 0, 1, 1, 10}, {0, 1, 0, math.Inf(1), 1, 10},
		{0, 1, 0, 1, math.NaN(), 10}, {0, 1, 0, 1, 1, 0}, {0, 1, 0, 1, 1, MaxPixels + 1},
	} {
		if _, err := NewPlan(c.minX, c.maxX, c.minY, c.maxY, c.cut, c.pixels); !errors.Is(err, ErrInvalid) {
			t.Errorf("%+v: got %v, want ErrInvalid", c, err)
		}
	}
}
