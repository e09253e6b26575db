package scene

import (
	"fmt"
	"strings"

	"squint/materials"
	"squint/scene/project"
)

// soilFactor is the share of a finish's light that its dirt leaves, all the
// year: the project's soiling decides which one of those that the year goes
// through. Months are not told apart.
func soilFactor(soiling string, f *project.Finish) (float64, error) {
	if f.LossPerMonth == 0 {
		return 1, nil
	}
	s, err := materials.NewSoiling(f.LossPerMonth, f.CleaningMonths)
	if err != nil {
		return 0, err
	}
	switch soiling {
	case "", "clean":
		return 1, nil
	case "average":
		return s.Mean(), nil
	case "neglected":
		// The end of an interval; one of 12 months or less is never cut short
		// before the first cleaning.
		return min(max(1-s.LossPerMonth*float64(s.CleaningMonths), 0), 1), nil
	}
	return 0, fmt.Errorf("simulation.soiling: got %q, want clean, average or neglected", soiling)
}

// noteSoiling says how dirty the finishes are, where the project speaks of
// dirt.
func (b *builder) noteSoiling() {
	soiling := b.p.Simulation.Soiling
	if soiling == "" {
		soiling = "clean"
	}
	var left []string
	for i := range b.p.Finishes {
		f := &b.p.Finishes[i]
		factor, err := soilFactor(soiling, f)
		if f.LossPerMonth == 0 || err != nil {
			continue
		}
		name := fmt.Sprintf("%q", f.Name)
		if soiling != "clean" {
			name += fmt.Sprintf(" %.4g", factor)
		}
		left = append(left, name)
	}
	list := strings.Join(left, ", ")
	switch {
	case list == "" && soiling == "clean":
	case list == "":
		b.notef("soiling = %q, but no finish has a loss_per_month: all are clean.", soiling)
	case soiling == "clean":
		b.notef("soiling = %q: the loss_per_month of finishes is left out: %s.", soiling, list)
	case soiling == "average":
		b.notef("soiling = %q: what dirt leaves of the light of finishes, the mean over the year taken for every month: %s.", soiling, list)
	default:
		b.notef("soiling = %q: what dirt leaves of the light of finishes just before cleaning, taken for every month: %s.", soiling, list)
	}
}
