package materials

import (
	"errors"
	"testing"
)

func TestSimpleFinishesRefuse(t *testing.T) {
	matte := func(r float64) error { _, err := NewMatte(r); return err }
	mirror := func(s, d float64) error { _, err := NewMirror(s, d); return err }
	diffuser := func(tr, r float64) error { _, err := NewDiffuser(tr, r); return err }
	const more = "; more light would leave than arrives: lower one of them"
	for _, c := range []struct {
		err  error
		want string // empty: accepted
	}{
		{matte(0), ""}, {matte(1), ""},
		{matte(80), "reflectance: got 80, want 0 to 1; give a share, not per cent"},
		{matte(-0.1), "reflectance: got -0.1, want 0 to 1; give a share, not per cent"},
		{mirror(0.85, 0.15), ""},
		{mirror(0.9, 0.2), "specular_reflectance + diffuse_reflectance: got 1.1, want at most 1" + more},
		{mirror(1.1, 0), "specular_reflectance: got 1.1, want 0 to 1; give a share, not per cent"},
		{diffuser(0.6, 0.4), ""},
		{diffuser(0.6, 0.5), "diffuse_transmittance + reflectance: got 1.1, want at most 1" + more},
	} {
		var e *RangeError
		switch {
		case c.want == "" && c.err != nil:
			t.Errorf("got %v, want it accepted", c.err)
		case c.want != "" && (c.err == nil || c.err.Error() != c.want || !errors.As(c.err, &e)):
			t.Errorf("got %v, want %s", c.err, c.want)
		}
	}
}
