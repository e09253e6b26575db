package report

import (
	"bytes"
	"encoding/json"
	"strings"
	"testing"

	"charm.land/lipgloss/v2"

	"squint/glare/verdict"
	"squint/scene/project"
)

// A verdict is found again by its question, wherever it now stands in the list;
// from met to not met it turns, from or to undecided it is open.
func TestTurns(t *testing.T) {
	of := func(subject string, o verdict.Outcome) verdict.Verdict {
		return verdict.Verdict{Source: "s", Criterion: "glare protection, medium: DGP", Subject: subject, Outcome: o, Limit: 0.05}
	}
	base := []verdict.Verdict{of("a", verdict.NotMet), of("b", verdict.Undecided), of("c", verdict.Met), of("d", verdict.Met)}
	v := Variant{Variation: project.Variation{Group: "mirrors", Change: "high"},
		verdicts: []verdict.Verdict{of("c", verdict.NotMet), of("a", verdict.NotMet), of("d", verdict.Met), of("b", verdict.Met)}}
	got := turns(base, &v)
	if len(got) != 2 || got[0].Subject != "b" || got[0].To != "met" || !got[0].open || got[1].Subject != "c" || got[1].From != "met" || got[1].To != "not met" || got[1].open {
		t.Errorf("got %+v, want b open and c turned", got)
	}
	v.verdicts = base
	if got := turns(base, &v); len(got) != 0 {
		t.Errorf("the same verdicts: got %+v, want none", got)
	}
}

// The file and the terminal tell the same of a study by hand, in 80 columns.
func TestSensitivityTold(t *testing.T) {
	base, varied := sample("desk with a name that is rather long for a table", "second", "third", "fourth"), sample("desk with a name that is rather long for a table", "second", "third", "fourth")
	for i := range varied.Verdicts {
		varied.Verdicts[i].Outcome = verdict.Met
	}
	varied.Planes[0].RearDA = base.Planes[0].RearDA - 0.125
	all := []Variant{NewVariant(project.Variation{Group: "diffuse reflectances", Change: "high", By: "+0.05"}, base),
		NewVariant(project.Variation{Group: "diffuse reflectances", Change: "low", By: "-0.05"}, varied)}
	var file, term bytes.Buffer
	if err := writeSensitivity(&file, base, all); err != nil {
		t.Fatal(err)
	}
	var f struct {
		Variants []struct {
			Change     string
			RearChange float64 `json:"rear_da_change"`
			Turned     []struct{ To string }
		}
	}
	if err := json.Unmarshal(file.Bytes(), &f); err != nil {
		t.Fatal(err)
	}
	if len(f.Variants) != 2 || len(f.Variants[0].Turned) != 0 || len(f.Variants[1].Turned) < 2 || f.Variants[1].RearChange != -0.125 {
		t.Errorf("got %+v, want nothing turned, then some, with 12.5 points less at the rear", f.Variants)
	}
	if err := Sensitivity(&term, base, all); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"diffuse reflectances ±0.05", "-12.5", "as stated; met with diffuse reflectances low"} {
		if !strings.Contains(strings.Join(strings.Fields(term.String()), " "), want) {
			t.Errorf("the terminal lacks %q:\n%s", want, term.String())
		}
	}
	for _, l := range strings.Split(term.String(), "\n") {
		if lipgloss.Width(l) > columns {
			t.Errorf("%d columns, want at most %d: %q", lipgloss.Width(l), columns, l)
		}
	}
	term.Reset()
	if err := Sensitivity(&term, base, nil); err != nil || !strings.Contains(term.String(), "No finish has a value to vary.") {
		t.Errorf("nothing to vary: got %v and\n%s", err, term.String())
	}
}
