package project

import (
	"fmt"
	"strings"
	"testing"
)

// finish writes a finish of three head lines and these keys.
func finish(name, kind string, lines ...string) string {
	return fmt.Sprintf("[[finish]]\nname = %q\ntype = %q\n%s\n", name, kind, strings.Join(lines, "\n"))
}

// The finishes that the tests below change; each is 4 lines and more.
var (
	anodised = finish("anodised", "glossy", "total_reflectance = 0.85", "specular_share = 0.9", "spread_deg = 2")
	opal     = finish("opal", "diffuser", "diffuse_transmittance = 0.5", "reflectance = 0.4")
	screen   = finish("screen", "cloth", "openness = 0.05", "diffuse_transmittance = 0.15", "reflectance = 0.5", "back_reflectance = 0.3", "cut_off_deg = 65")
	punched  = finish("punched", "perforated", "open_share = 0.3", "hole_diameter_mm = 2", "thickness_mm = 1", `base = "white"`)
)

// TestFinishProblems changes one line of a finish that stands from line 24 on
// and wants one problem, word for word.
func TestFinishProblems(t *testing.T) {
	for _, c := range []struct {
		name, text, old, new, want string
	}{
		{"total reflectance", anodised, "0.85", "85", ":27: finish.total_reflectance: got 85, want 0 to 1"},
		{"specular share", anodised, "0.9", "-0.1", ":28: finish.specular_share: got -0.1, want 0 to 1"},
		{"too sharp", anodised, "spread_deg = 2", "spread_deg = 0.4", ":29: finish.spread_deg: got 0.4, want 0.5 to 60"},
		{"too soft", anodised, "spread_deg = 2", "spread_deg = 61", ":29: finish.spread_deg: got 61, want 0.5 to 60"},
		{"no spread", anodised, "spread_deg = 2\n", "", ":24: finish.spread_deg: missing; want 0.5 to 60"},
		{"misspelt", anodised, "specular_share = 0.9", "specular_share = 0.9\nspred_deg = 2", ":29: finish.spred_deg: unknown key; did you mean \"spread_deg\"?"},
		{"glossy as a mirror is", anodised, "spread_deg = 2", "spread_deg = 2\nspecular_reflectance = 0.8", ":30: finish.specular_reflectance: no key of type \"glossy\" but of \"mirror\"; want name, type, loss_per_month, cleaning_months, total_reflectance, specular_share, spread_deg, back"},
		{"diffuser's sum", opal, "0.4", "0.6", ":27: finish.diffuse_transmittance: got 0.5 and reflectance 0.6, together 1.1, want at most 1"},
		{"diffuser's transmittance", opal, "diffuse_transmittance = 0.5\n", "", ":24: finish.diffuse_transmittance: missing; want 0 to 1"},
		{"diffuser with openness", opal, "reflectance = 0.4", "reflectance = 0.4\nopenness = 0.1", ":29: finish.openness: no key of type \"diffuser\" but of \"cloth\"; want name, type, loss_per_month, cleaning_months, diffuse_transmittance, reflectance, back"},
		{"cloth's sum", screen, "0.5\n", "0.85\n", ":27: finish.openness: got 0.05, diffuse_transmittance 0.15 and reflectance 0.85, together 1.05, want at most 1"},
		{"cloth's sum at the back", screen, "0.3", "0.9", ":27: finish.openness: got 0.05, diffuse_transmittance 0.15 and back_reflectance 0.9, together 1.1, want at most 1"},
		{"cloth's cut-off", screen, "65", "0.5", ":31: finish.cut_off_deg: got 0.5, want 1 to 90"},
		{"cloth's cut-off", screen, "65", "91", ":31: finish.cut_off_deg: got 91, want 1 to 90"},
		{"cloth with a back", screen, "cut_off_deg = 65", `back = "opal"`, ":31: finish.back: no key of type \"cloth\" but of \"matte\", \"mirror\", \"glossy\", \"glazing\", \"diffuser\" or \"perforated\"; want name, type, loss_per_month, cleaning_months, openness, diffuse_transmittance, reflectance, back_reflectance, cut_off_deg"},
		{"holes that overlap", punched, "open_share = 0.3", "open_share = 0.95", ":27: finish.open_share: got 0.95, want 0 to 0.9"},
		{"no holes", punched, "hole_diameter_mm = 2", "hole_diameter_mm = 0", ":28: finish.hole_diameter_mm: got 0, want 0.01 to 50"},
		{"holes to be modelled", punched, "hole_diameter_mm = 2", "hole_diameter_mm = 60", ":28: finish.hole_diameter_mm: got 60, want 0.01 to 50"},
		{"thickness", punched, "thickness_mm = 1", "thickness_mm = -1", ":29: finish.thickness_mm: got -1, want 0 to 50"},
		{"thickness in metres", punched, "thickness_mm = 1", "thickness_m = 0.001", ":24: finish.thickness_mm: missing; want 0 to 50\n:29: finish.thickness_m: unknown key; did you mean \"thickness_mm\"?"},
		{"no base", punched, "base = \"white\"\n", "", ":24: finish.base: missing; want a finish's name in quotes"},
		{"unknown base", punched, `"white"`, `"wite"`, ":30: finish.base: got \"wite\", want the name of a finish; did you mean \"white\"?"},
		{"base of glass", punched, `"white"`, `"clear"`, ":30: finish.base: got \"clear\", which is of type \"glazing\", want a finish of type \"matte\", \"mirror\", \"glossy\", \"diffuser\" or \"cloth\""},
	} {
		t.Run(c.name, func(t *testing.T) {
			if strings.Count(c.text, c.old) != 1 {
				t.Fatalf("the finish holds %q not once", c.old)
			}
			wantProblem(t, "", strings.Replace(c.text, c.old, c.new, 1), c.want)
		})
	}
}

// TestFinishesLoad wants no problem at the ends of every range, and of shares
// whose binary sum passes 1 by rounding.
func TestFinishesLoad(t *testing.T) {
	for _, text := range []string{
		anodised, opal, screen, punched,
		finish("g", "glossy", "total_reflectance = 1", "specular_share = 1", "spread_deg = 0.5", `back = "h"`) +
			finish("h", "glossy", "total_reflectance = 0", "specular_share = 0", "spread_deg = 60"),
		finish("d", "diffuser", "diffuse_transmittance = 0.7", "reflectance = 0.3"),
		finish("c", "cloth", "openness = 0.7", "diffuse_transmittance = 0.1", "reflectance = 0.2"), // sums to 1 + 2^-52 or less
		finish("c", "cloth", "openness = 1", "diffuse_transmittance = 0", "reflectance = 0", "back_reflectance = 0", "cut_off_deg = 1"),
		finish("p", "perforated", "open_share = 0.9", "hole_diameter_mm = 0.01", "thickness_mm = 50", `base = "white"`),
		finish("p", "perforated", "open_share = 0", "hole_diameter_mm = 50", "thickness_mm = 0", `base = "white"`),
	} {
		if _, err := load(t, minimal+text); err != nil {
			t.Errorf("%s%v", text, err)
		}
	}
}

// TestPhotons wants the default, and none where none are asked for.
func TestPhotons(t *testing.T) {
	for _, c := range []struct {
		text string
		want int
	}{{"", 4000}, {"[simulation]\nphotons = 0\n", 0}, {"[simulation]\nphotons = 8\n", 8}, {"[simulation]\nphotons = 64000\n", 64000}} {
		p, err := load(t, minimal+c.text)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
		} else if p.Simulation.Photons != c.want {
			t.Errorf("%q: got %d photons, want %d", c.text, p.Simulation.Photons, c.want)
		}
	}
}
