package scene

import (
	"fmt"
	"math/rand/v2"
	"testing"

	"squint/materials"
	"squint/scene/project"
)

// TestVariedFinishesBuild: whatever the finishes, at and near the ends of what
// may be stated, their variations can be built, two sides of one pane included.
func TestVariedFinishesBuild(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 1))
	// Shares with a taste for the ends.
	part := func(most float64) float64 {
		switch r.IntN(4) {
		case 0:
			return 0
		case 1:
			return most
		}
		return most * r.Float64()
	}
	built := 0
	for range 25 {
		tau, mirrors, clothReflects := part(1), part(1), part(1)
		open := part(1 - clothReflects)
		panes := 1 + r.IntN(4)
		back := part(clothReflects)
		row := 0.01 + part(0.98)
		p := &project.Project{File: "p.toml", Finishes: []project.Finish{
			{Name: "a", Type: "matte", Reflectance: part(1), LossPerMonth: 0.02, CleaningMonths: 6},
			{Name: "b", Type: "mirror", SpecularReflectance: mirrors, DiffuseReflectance: part(1 - mirrors)},
			{Name: "c", Type: "glossy", TotalReflectance: part(1), SpecularShare: part(1), SpreadDeg: 10},
			{Name: "d", Type: "glazing", Transmittance: materials.ClearTransmittance(panes) * (0.01 + 0.99*part(1)), Panes: panes},
			{Name: "e", Type: "diffuser", DiffuseTransmittance: tau, Reflectance: part(1 - tau), Back: "f"},
			{Name: "f", Type: "diffuser", DiffuseTransmittance: tau, Reflectance: part(1 - tau)},
			{Name: "g", Type: "cloth", Openness: open, DiffuseTransmittance: part(1 - clothReflects - open), Reflectance: clothReflects, BackReflectance: &back},
			{Name: "h", Type: "glazing", Table: [][3]float64{{0, row, part(1 - row)}, {60, row, part(1 - row)}, {90, 0, 1}}, Back: "i"},
			{Name: "i", Type: "glazing", Table: [][3]float64{{0, row, part(1 - row)}, {60, row, part(1 - row)}, {90, 0, 1}}},
			{Name: "j", Type: "perforated", OpenShare: 0.2, HoleDiameterMM: 2, ThicknessMM: 1, Base: "e"},
		}}
		for _, v := range append(project.Variations(p), project.Variation{}) {
			q := p
			if v.Group != "" {
				q = v.Of(p)
			}
			for i := range q.Finishes {
				if _, err := buildFinish(q, &q.Finishes[i]); err != nil {
					t.Fatalf("%s %s: %v\n%s", v.Group, v.Change, err, fmt.Sprintf("%+v", q.Finishes[i]))
				}
				built++
			}
		}
	}
	if built < 2000 {
		t.Errorf("got %d finishes built, want some ten variations of 250", built)
	}
}
