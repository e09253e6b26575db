package project

import (
	"math"
	"reflect"
	"testing"
)

func finishes(list ...Finish) *Project { return &Project{Finishes: list} }

func find(t *testing.T, p *Project, group, change string) *Project {
	t.Helper()
	for _, v := range Variations(p) {
		if v.Group == group && v.Change == change {
			return v.Of(p)
		}
	}
	t.Fatalf("no variation of %s, %s", group, change)
	return nil
}

// TestVariations: each group moves by its tolerance where there is room, by half
// of itself where it is small, and only as far as sums of 1 let it. The wanted
// numbers follow from the tolerances by hand.
func TestVariations(t *testing.T) {
	back := 0.3
	for _, c := range []struct {
		name          string
		from          Finish
		group, change string
		want          Finish
	}{
		{"matte low", Finish{Type: "matte", Reflectance: 0.5}, "diffuse reflectances", "low", Finish{Type: "matte", Reflectance: 0.45}},
		{"matte dark", Finish{Type: "matte", Reflectance: 0.04}, "diffuse reflectances", "low", Finish{Type: "matte", Reflectance: 0.02}},
		{"matte near 1", Finish{Type: "matte", Reflectance: 0.98}, "diffuse reflectances", "high", Finish{Type: "matte", Reflectance: 1}},
		{"diffuser full", Finish{Type: "diffuser", Reflectance: 0.4, DiffuseTransmittance: 0.58}, "diffuse reflectances", "high", Finish{Type: "diffuser", Reflectance: 0.42, DiffuseTransmittance: 0.58}},
		{"diffuser as glazing", Finish{Type: "diffuser", Reflectance: 0.4, DiffuseTransmittance: 0.58}, "glazing", "high", Finish{Type: "diffuser", Reflectance: 0.39, DiffuseTransmittance: 0.61}},
		{"mirror low", Finish{Type: "mirror", SpecularReflectance: 0.9}, "mirrors", "low", Finish{Type: "mirror", SpecularReflectance: 0.87}},
		{"mirror full", Finish{Type: "mirror", SpecularReflectance: 0.9, DiffuseReflectance: 0.08}, "mirrors", "high", Finish{Type: "mirror", SpecularReflectance: 0.92, DiffuseReflectance: 0.08}},
		{"glossy, diffuse part", Finish{Type: "glossy", TotalReflectance: 0.5, SpecularShare: 0.2}, "diffuse reflectances", "high", Finish{Type: "glossy", TotalReflectance: 0.55, SpecularShare: 0.1 / 0.55}},
		{"glossy, lobe", Finish{Type: "glossy", TotalReflectance: 0.5, SpecularShare: 0.2}, "mirrors", "low", Finish{Type: "glossy", TotalReflectance: 0.47, SpecularShare: 0.07 / 0.47}},
		{"pane", Finish{Type: "glazing", Transmittance: 0.6, Panes: 2}, "glazing", "high", Finish{Type: "glazing", Transmittance: 0.63, Panes: 2}},
		{"table", Finish{Type: "glazing", Table: [][3]float64{{0, 0.6, 0.1}, {60, 0.5, 0.499}, {90, 0, 1}}}, "glazing", "high",
			Finish{Type: "glazing", Table: [][3]float64{{0, 0.63, 0.1}, {60, 0.525, 0.475}, {90, 0, 1}}}},
		{"cloth", Finish{Type: "cloth", Openness: 0.03, DiffuseTransmittance: 0.05, Reflectance: 0.5, BackReflectance: &back}, "cloths", "high",
			Finish{Type: "cloth", Openness: 0.04, DiffuseTransmittance: 0.07, Reflectance: 0.5, BackReflectance: &back}},
		{"cloth tight", Finish{Type: "cloth", Openness: 0.01, DiffuseTransmittance: 0.02, Reflectance: 0.5, BackReflectance: &back}, "cloths", "low",
			Finish{Type: "cloth", Openness: 0.005, DiffuseTransmittance: 0.01, Reflectance: 0.5, BackReflectance: &back}},
	} {
		p := finishes(c.from)
		before := varied(p)
		got, want := varied(find(t, p, c.group, c.change)), varied(finishes(c.want))
		for k := range want {
			if math.Abs(got[k]-want[k]) > 1e-12 {
				t.Errorf("%s: got %v, want %v", c.name, got, want)
				break
			}
		}
		if !reflect.DeepEqual(before, varied(p)) {
			t.Errorf("%s: the project itself was changed", c.name)
		}
	}
}

// TestVariationsLeftOut: what would change nothing is not listed, and soiling
// only where a finish soils, in its two other words.
func TestVariationsLeftOut(t *testing.T) {
	named := func(p *Project) (list []string) {
		for _, v := range Variations(p) {
			list = append(list, v.Group+" "+v.Change)
		}
		return list
	}
	if got := named(finishes(Finish{Type: "matte"})); got != nil {
		t.Errorf("black: got %v, want none", got)
	}
	// A mirror that throws all on cannot throw more.
	if got, want := named(finishes(Finish{Type: "mirror", SpecularReflectance: 1})), []string{"mirrors low"}; !reflect.DeepEqual(got, want) {
		t.Errorf("perfect mirror: got %v, want %v", got, want)
	}
	p := finishes(Finish{Type: "matte", LossPerMonth: 0.01, CleaningMonths: 12})
	if got, want := named(p), []string{"soiling average", "soiling neglected"}; !reflect.DeepEqual(got, want) {
		t.Errorf("clean: got %v, want %v", got, want)
	}
	p.Simulation.Soiling = "average"
	if got, want := named(p), []string{"soiling clean", "soiling neglected"}; !reflect.DeepEqual(got, want) {
		t.Errorf("average: got %v, want %v", got, want)
	}
	r := &Project{Rollers: []Roller{{Openness: 0.03, Reflectance: 0.4}}}
	if got := find(t, r, "cloths", "low").Rollers[0].Openness; math.Abs(got-0.02) > 1e-12 || r.Rollers[0].Openness != 0.03 {
		t.Errorf("roller: got %g beside %g, want 0.02 beside 0.03", got, r.Rollers[0].Openness)
	}
	for _, v := range Variations(r) {
		if want := map[string]string{"low": "-0.02, openness -0.01", "high": "+0.02, openness +0.01"}[v.Change]; v.Group == "cloths" && v.By != want {
			t.Errorf("cloths %s: by %q, want %q", v.Change, v.By, want)
		}
	}
	if l := (&Project{Rollers: []Roller{{Cloth: "screen", Openness: 0.03}}}); named(l) != nil {
		t.Errorf("a roller with a named cloth: got %v, want none", named(l))
	}
}
