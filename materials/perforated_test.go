package materials

import (
	"math"
	"testing"
)

func TestPerforatedDirectTable(t *testing.T) {
	_, rows := readTable(t, "perforated_direct.csv")
	if len(rows) != 15 {
		t.Fatalf("%d rows, want 15", len(rows))
	}
	const open = 0.4
	wrong := func(thicknessFactor float64) (n int) {
		for _, row := range rows {
			p, err := NewPerforated(Perforated{OpenShare: open, HoleDiameterM: 0.002,
				ThicknessM: 0.002 * row[0] * thicknessFactor, Base: Matte{0}})
			if err != nil {
				t.Fatal(err)
			}
			mirror, through := p.Delta(Back, math.Cos(row[1]*math.Pi/180))
			if math.Abs(through/open-row[2]) > rounded6 || mirror != 0 {
				n++
				if thicknessFactor == 1 {
					t.Errorf("t/d %g at %g degrees: got %.7f, want %.6f", row[0], row[1], through/open, row[2])
				}
			}
		}
		return n
	}
	wrong(1)
	if wrong(1.05) == 0 {
		t.Error("thickness x 1.05: planted defect not seen")
	}
}

func TestPerforatedKeepsTheRestOfTheBase(t *testing.T) {
	base, err := NewGlossy(0.8, 0.5, 0.2)
	if err != nil {
		t.Fatal(err)
	}
	p, err := NewPerforated(Perforated{OpenShare: 0.25, HoleDiameterM: 0.001, Base: base})
	if err != nil {
		t.Fatal(err)
	}
	// Exact: three quarters of the base, a quarter open; without thickness at
	// every incidence.
	if rho, tau := p.Lambert(Front); math.Abs(rho-0.3) > 1e-15 || tau != 0 {
		t.Errorf("Lambert: %g, %g, want 0.3, 0", rho, tau)
	}
	if g := p.Gloss(Back); g == nil || math.Abs(g.Reflectance-0.3) > 1e-15 {
		t.Errorf("lobe %+v, want reflectance 0.3", g)
	}
	if base.Gloss(Back).Reflectance != 0.4 {
		t.Error("the base itself was changed")
	}
	for _, cos := range []float64{0, 0.01, 0.5, 1} {
		if _, through := p.Delta(Front, cos); through != 0.25 {
			t.Errorf("thin sheet, cosine %g: %g passes, want 0.25", cos, through)
		}
	}
}

func TestNewPerforatedRefuses(t *testing.T) {
	for _, c := range []struct {
		p    Perforated
		want string
	}{
		{Perforated{OpenShare: 1.5, HoleDiameterM: 1, Base: Matte{}}, "open_share: got 1.5, want 0 to 1; give a share, not per cent"},
		{Perforated{OpenShare: 0.5, Base: Matte{}}, "hole_diameter_m: got 0, want above 0"},
		{Perforated{OpenShare: 0.5, HoleDiameterM: 1, ThicknessM: -1, Base: Matte{}}, "thickness_m: got -1, want 0 or more"},
		{Perforated{OpenShare: 0.5, HoleDiameterM: 1}, "base: no finish given; name the finish of the sheet between the holes"},
	} {
		if _, err := NewPerforated(c.p); err == nil || err.Error() != c.want {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
}
