package system

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func area(faces []Face) float64 {
	a := 0.0
	for _, f := range faces {
		a += r3.Norm(r3.Cross(r3.Sub(f.V[1], f.V[0]), r3.Sub(f.V[2], f.V[0]))) / 2
	}
	return a
}

func TestPaneFacesOut(t *testing.T) {
	for _, lean := range []float64{0, 30, 90, -20} {
		r := facing(1, lean*rad, 0, 2, 1.5)
		pane := Pane(r, "glass")
		if a := area(pane); math.Abs(a-3) > near { // 2 m x 1.5 m
			t.Errorf("area: got %g m2, want 3", a)
		}
		for _, f := range pane {
			if apart(f.Normal(), r.Outward) > near || f.Finish != "glass" || f.Part != "pane" {
				t.Errorf("got %+v facing %v, want glass facing %v", f, f.Normal(), r.Outward)
			}
		}
	}
}

func TestRoller(t *testing.T) {
	r := Rect{Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: 1}, WidthM: 2, HeightM: 1.5}
	for _, c := range []struct {
		name     string
		ro       Roller
		y, low   float64
		wantArea float64
	}{
		{"inside, whole", Roller{Drop: 1, GapM: 0.05}, -0.05, 0, 3},
		{"outside, a third", Roller{Outside: true, Drop: 1. / 3, GapM: 0.1}, 0.1, 1, 1},
		{"raised", Roller{Drop: 1, GapM: 0.05, Raised: true}, 0, 0, 0},
		{"no drop", Roller{GapM: 0.05}, 0, 0, 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			faces, err := c.ro.Build(r)
			if err != nil {
				t.Fatal(err)
			}
			if a := area(faces); math.Abs(a-c.wantArea) > near || (a == 0) != (faces == nil) {
				t.Errorf("area: got %g m2 of %d faces, want %g", a, len(faces), c.wantArea)
			}
			for _, f := range faces {
				if apart(f.Normal(), r.Outward) > near {
					t.Errorf("faces %v, want outdoors", f.Normal())
				}
				for _, v := range f.V {
					if math.Abs(v.Y-c.y) > near || v.Z < c.low-near || v.Z > 1.5+near {
						t.Errorf("corner %v, want y = %g and z from %g to 1.5", v, c.y, c.low)
					}
				}
			}
		})
	}
	for _, c := range []struct {
		ro   Roller
		want string
	}{
		{Roller{Drop: 1.1, GapM: 0.1}, "drop"}, {Roller{Drop: -0.1, GapM: 0.1}, "drop"}, {Roller{Drop: math.NaN(), GapM: 0.1}, "drop"},
		{Roller{Drop: 1}, "gap"}, {Roller{Drop: 1, GapM: math.Inf(1)}, "gap"},
	} {
		var d *DimensionError
		if _, err := c.ro.Build(r); !errors.As(err, &d) || d.Dimension != c.want {
			t.Errorf("%+v: got %v, want an error about %q", c.ro, err, c.want)
		}
	}
}

func TestRollerMeetsShelf(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	s := LightShelf{HeightM: 1, InsideDepthM: 0.4, ThicknessM: 0.04, GapM: 0.01}
	rising := s
	rising.InsideTiltRad = -45 * rad // indoors it rises: 0.05 m up at 0.05 m from the glass
	onTransom, below, risingTransom := s, s, rising
	onTransom.HeightM, below.HeightM, risingTransom.HeightM = 0, -0.1, 0
	for _, c := range []struct {
		name  string
		ro    Roller
		s     LightShelf
		meets bool
	}{
		{"through", Roller{Drop: 1, GapM: 0.05}, s, true},
		{"just above", Roller{Drop: 0.333, GapM: 0.05}, s, false}, // 1 - 0.333*1.5 = 1.0005 m
		{"just not", Roller{Drop: 0.334, GapM: 0.05}, s, true},
		{"other side", Roller{Outside: true, Drop: 1, GapM: 0.05}, s, false},
		{"beyond its edge", Roller{Drop: 1, GapM: 0.41}, s, false},
		{"between glass and shelf", Roller{Drop: 1, GapM: 0.005}, s, false},
		{"raised", Roller{Drop: 1, GapM: 0.05, Raised: true}, s, false},
		{"above a rising one", Roller{Drop: 0.299, GapM: 0.05}, rising, false}, // 1.0515 m
		{"on a rising one", Roller{Drop: 0.301, GapM: 0.05}, rising, true},     // 1.0485 m
		// on the transom below the opening: a drawn cloth ends on the shelf
		{"ends on the top", Roller{Drop: 1, GapM: 0.05}, onTransom, false},
		{"ends above the wall", Roller{Drop: 1, GapM: 0.05}, below, false},
		{"ends in one that rises", Roller{Drop: 1, GapM: 0.05}, risingTransom, true},
	} {
		if err := c.ro.Meets(c.s, r); (err != nil) != c.meets {
			t.Errorf("%s: got %v, want an error: %v", c.name, err, c.meets)
		}
	}
}

func BenchmarkShelf(b *testing.B) {
	r, s := facing(1, 0, 0, 2, 1.5), plain()
	for b.Loop() {
		if _, err := s.Build(r); err != nil {
			b.Fatal(err)
		}
	}
}
