package mesh

import (
	"errors"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// sized returns a mesh in the unit whose bounding box is x, y, z metres.
func sized(unit Unit, x, y, z float64) *Mesh {
	return &Mesh{File: "room.obj", Unit: unit, Triangles: []Triangle{
		{V: [3]r3.Vec{{X: 5}, {X: 5 + x}, {X: 5, Y: y}}},
		{V: [3]r3.Vec{{X: 5}, {X: 5 + x}, {X: 5, Z: z}}},
	}}
}

func TestSizeProblem(t *testing.T) {
	tests := []struct {
		name    string
		mesh    *Mesh
		suggest Unit
		want    string // in the message; "" for no problem
	}{
		{"office in m", sized(Metre, 3.6, 8.2, 2.8), 0, ""},
		{"at the bound", sized(Metre, 500, 20, 100), 0, ""},
		{"mm read as m", sized(Metre, 3000, 2400, 2800), Millimetre,
			`room.obj: size: got 3000 x 2400 x 2800 m with unit = "m", want at most 500 m in any direction; it looks like the wrong unit: unit = "mm" would make it 3 x 2.4 x 2.8 m`},
		{"cm read as m, wide", sized(Metre, 905, 850, 320), Centimetre, `unit = "cm" would make it 9.05 x 8.5 x 3.2 m`},
		{"cm read as m, small", sized(Metre, 400, 300, 280), Centimetre, "at most 100 m in height"},
		{"inches read as m", sized(Metre, 394, 315, 106), Inch, `unit = "in" would make it 10 x 8 x 2.69 m`},
		{"m read as mm", sized(Millimetre, 0.0082, 0.0036, 0.0028), Metre, `got 0.0082 x 0.0036 x 0.0028 m with unit = "mm", want at least 0.1 m in its largest direction`},
		{"nothing helps", sized(Metre, 3e7, 1, 1), NoUnit, "stray faces"},
		{"a screw in m", sized(Metre, 0.008, 0.003, 0.004), NoUnit, "only a part of the room"},
		{"unit unknown", sized(NoUnit, 3000, 1, 1), NoUnit, "3000"},
		{"empty", &Mesh{}, 0, ""},
	}
	for _, tt := range tests {
		err := tt.mesh.SizeProblem()
		if tt.want == "" {
			if err != nil {
				t.Errorf("%s: got %v, want none", tt.name, err)
			}
			continue
		}
		var e *SizeError
		if !errors.As(err, &e) || e.Suggest != tt.suggest || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("%s: got %v, want %q suggesting %q", tt.name, err, tt.want, tt.suggest)
		}
	}
	if err := sized(Metre, 4000, 4000, 300).SizeProblemWithin(0.1, 20000, 1000); err != nil {
		t.Errorf("a quarter of a town: got %v, want none", err)
	}
}

func TestLengthText(t *testing.T) {
	tests := []struct {
		m    float64
		want string // by hand: three digits or more, no exponent
	}{
		{0, "0"}, {3, "3"}, {2.8, "2.8"}, {1.005, "1"}, {12345.6, "12346"}, {99.99, "100"},
		{0.00123456, "0.00123"}, {-2.5, "-2.5"}, {3e7, "30000000"}, {1e-30, "0"},
	}
	for _, tt := range tests {
		if got := lengthText(tt.m); got != tt.want {
			t.Errorf("lengthText(%g) = %q, want %q", tt.m, got, tt.want)
		}
	}
}
