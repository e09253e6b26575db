package project

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// soiled adds dirt to a finish.
func soiled(text string, loss float64, months int) string {
	return fmt.Sprintf("%s\nloss_per_month = %g\ncleaning_months = %d\n", strings.TrimSuffix(text, "\n"), loss, months)
}

// TestSoilingKeys appends to the least project and wants what its last finish
// and its simulation then hold.
func TestSoilingKeys(t *testing.T) {
	type values struct {
		loss    float64
		months  int
		soiling string
	}
	for _, c := range []struct {
		text string
		want values
	}{
		{"", values{0, 12, "clean"}}, // the defaults
		{soiled(opal, 0.02, 6), values{0.02, 6, "clean"}},
		{soiled(opal, 0, 1), values{0, 1, "clean"}},
		{soiled(screen, 0.1, 10), values{0.1, 10, "clean"}}, // nothing left
		{opal + "loss_per_month = 0.03\n", values{0.03, 12, "clean"}},
		{"[simulation]\nsoiling = \"average\"\n", values{0, 12, "average"}},
		{"[simulation]\nsoiling = \"clean\"\n", values{0, 12, "clean"}},
		{soiled(anodised, 0.01, 12) + "[simulation]\nsoiling = \"neglected\"\n", values{0.01, 12, "neglected"}},
	} {
		p, err := load(t, minimal+c.text)
		if err != nil {
			t.Errorf("%s%v", c.text, err)
			continue
		}
		f := p.Finishes[len(p.Finishes)-1]
		if got := (values{f.LossPerMonth, f.CleaningMonths, p.Simulation.Soiling}); got != c.want {
			t.Errorf("%s: got %+v, want %+v", c.text, got, c.want)
		}
	}
}

// TestSoilingProblems appends from line 24 on and wants one problem, or none
// where want is "".
func TestSoilingProblems(t *testing.T) {
	named := func(text, name string) string { // text is opal or punched
		return strings.NewReplacer(`name = "opal"`, `name = "`+name+`"`, `name = "punched"`, `name = "`+name+`"`).Replace(text)
	}
	back := func(text string) string { return text + "back = \"b\"\n" }
	over := func(base string) string { return strings.Replace(punched, `"white"`, `"`+base+`"`, 1) }
	for _, c := range []struct {
		name, text, want string
	}{
		{"in per cent", soiled(opal, 2, 6), ":29: finish.loss_per_month: got 2, want 0 to 0.1"},
		{"a gain", soiled(opal, -0.01, 6), ":29: finish.loss_per_month: got -0.01, want 0 to 0.1"},
		{"never cleaned", soiled(opal, 0.02, 0), ":30: finish.cleaning_months: got 0, want a whole number, 1 to 12"},
		{"cleaned every other year", soiled(opal, 0.02, 24), ":30: finish.cleaning_months: got 24, want a whole number, 1 to 12"},
		{"cleaned each fortnight", opal + "cleaning_months = 0.5\n", ":29: finish.cleaning_months: got 0.5, want a whole number, 1 to 12"},
		{"more than all light", soiled(opal, 0.1, 11), ":29: finish.loss_per_month: got 0.1 with cleaning_months 11, together 1.1, want at most 1; dirt cannot take more than all light"},
		{"more than all light by default", opal + "loss_per_month = 0.1\n", ":29: finish.loss_per_month: got 0.1 with cleaning_months 12, together 1.2, want at most 1; dirt cannot take more than all light"},
		{"misspelt", opal + "lost_per_month = 0.1\n", ":29: finish.lost_per_month: unknown key; did you mean \"loss_per_month\"?"},
		{"soiling", "[simulation]\nsoiling = \"dirty\"\n", ":25: simulation.soiling: got \"dirty\", want \"clean\", \"average\" or \"neglected\""},

		{"opaque sides need not agree", strings.Replace(soiled(anodised, 0.02, 6), "spread_deg", "back = \"white\"\nspread_deg", 1), ""},
		{"sides alike", back(soiled(opal, 0.02, 6)) + soiled(named(opal, "b"), 0.02, 6), ""},
		{"clean on one side", back(soiled(opal, 0.02, 6)) + named(opal, "b"),
			`:31: finish.back: got "b", which lets other light through: loss_per_month 0, here 0.02; want both sides to let the same through`},
		{"cleaned more often on one side", back(soiled(opal, 0.02, 6)) + soiled(named(opal, "b"), 0.02, 3),
			`:31: finish.back: got "b", which lets other light through: cleaning_months 3, here 6; want both sides to let the same through`},
		{"clean both, other intervals", back(soiled(opal, 0, 6)) + soiled(named(opal, "b"), 0, 3), ""},
		{"opaque bases need not agree", back(punched) + named(over("dirty"), "b") + soiled(strings.Replace(anodised, `"anodised"`, `"dirty"`, 1), 0.02, 6), ""},
		{"bases let other light through", back(over("opal")) + named(over("dirty"), "b") + opal + soiled(strings.Replace(opal, `"opal"`, `"dirty"`, 1), 0.02, 6),
			`:31: finish.back: got "b", which lets other light through: loss_per_month of the base 0.02, here 0; want both sides to let the same through`},

		{"dirt on the base", over("anodised") + soiled(anodised, 0.02, 6), ""},
		{"dirt on the sheet", soiled(over("anodised"), 0.02, 6) + anodised, ""},
		{"dirt on both", soiled(over("anodised"), 0.01, 6) + soiled(anodised, 0.02, 6),
			`:31: finish.loss_per_month: got 0.01, but the base's finish "anodised" has a loss_per_month too, and both would count; leave one of the two out`},
		{"dirt on the sheet and the base's back", soiled(over("anodised"), 0.01, 6) + anodised + "back = \"dirty\"\n" + soiled(finish("dirty", "matte", "reflectance = 0.5"), 0.02, 6),
			`:31: finish.loss_per_month: got 0.01, but the base's finish "dirty" has a loss_per_month too, and both would count; leave one of the two out`},
	} {
		t.Run(c.name, func(t *testing.T) {
			if c.want != "" {
				wantProblem(t, "", c.text, c.want)
			} else if _, err := load(t, minimal+c.text); err != nil {
				t.Error(err)
			}
		})
	}
}

// TestQuietDefaults: the defaults of dirt and of criteria that are judged only
// where asked for change nothing, so that no run has to state them; the others
// stay.
func TestQuietDefaults(t *testing.T) {
	stated := map[string]bool{}
	for _, k := range Defaults() {
		stated[k.Table+"."+k.Name] = true
	}
	quiet := 0
	for _, k := range Keys() {
		if k.Default == "" || stated[k.Table+"."+k.Name] {
			continue
		}
		quiet++
		wanted := slices.ContainsFunc(wantedKeys, func(w key[Criteria]) bool { return w.name == k.Name })
		if k.Name != "loss_per_month" && k.Name != "cleaning_months" && !(wanted && k.Table == "criteria") {
			t.Errorf("default of %s.%s is not stated", k.Table, k.Name)
		}
	}
	if quiet != 12 || !stated["simulation.soiling"] || !stated["finish.panes"] {
		t.Errorf("%d quiet defaults, want 12: %v", quiet, stated)
	}
}
