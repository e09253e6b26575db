package materials

import (
	"strings"
	"testing"
)

func TestTwoSidedShowsEachSide(t *testing.T) {
	glossy, err := NewGlossy(0.8, 0.5, 0.2)
	if err != nil {
		t.Fatal(err)
	}
	s, err := NewTwoSided(Mirror{Specular: 0.8, Diffuse: 0.1}, glossy)
	if err != nil {
		t.Fatal(err)
	}
	// By definition: each side is the finish named for it.
	if rho, _ := s.Lambert(Front); rho != 0.1 {
		t.Errorf("front reflects %g diffusely, want 0.1", rho)
	}
	if rho, _ := s.Lambert(Back); rho != 0.4 {
		t.Errorf("back reflects %g diffusely, want 0.4", rho)
	}
	if m, _ := s.Delta(Front, 0.5); m != 0.8 {
		t.Errorf("front mirrors %g, want 0.8", m)
	}
	if m, _ := s.Delta(Back, 0.5); m != 0 {
		t.Errorf("back mirrors %g, want 0", m)
	}
	if s.Gloss(Front) != nil || s.Gloss(Back) != glossy.Gloss(Front) {
		t.Error("lobes are on the wrong side")
	}
	// A finish with two sides of its own, turned round: its front faces back.
	c := Cloth{Openness: 0.1, DiffuseTransmittance: 0.2, ReflectanceFront: 0.6, ReflectanceBack: 0.3}
	s, err = NewTwoSided(c, c)
	if err != nil {
		t.Fatal(err)
	}
	if rho, _ := s.Lambert(Back); rho != 0.6 {
		t.Errorf("turned cloth reflects %g, want its front's 0.6", rho)
	}
}

func TestNewTwoSidedRefuses(t *testing.T) {
	pane, err := NewGlazing(0.8, 1)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		front, back BSDF
		want        string
	}{
		{nil, Matte{}, "a finish is missing"},
		{Matte{}, nil, "a finish is missing"},
		{Diffuser{0.5, 0.3}, Diffuser{0.4, 0.3}, "diffuse_transmittance of the back: got 0.4, want 0.5 as on the front"},
		{pane, Matte{0.5}, "transmittance of the back: got 0, want"},
		{Cloth{Openness: 0.1}, Cloth{Openness: 0.1, CutOffRad: 1}, "transmittance of the back"},
	} {
		if _, err := NewTwoSided(c.front, c.back); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
}
