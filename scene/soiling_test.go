package scene

import (
	"math"
	"strings"
	"testing"

	"squint/materials"
	"squint/scene/project"
)

// dirty are finishes that lose 0.02 a month for 6 months: by hand, a mean of
// 0.94 over the year and 0.88 before cleaning; and a perforated sheet whose
// base alone is dirty, 0.05 a month for 5: means of 1 - 0.05 x (0.5, 1.5, 2.5,
// 3.5, 4.5, 0.5, 1.5, 2.5, 3.5, 4.5, 0.5, 1.5), 1 - 0.05 x 27/12 = 0.8875, and
// 0.75 before cleaning.
const dirty = `
[[finish]]
name = "mirror"
type = "mirror"
specular_reflectance = 0.8
diffuse_reflectance = 0.05
loss_per_month = 0.02
cleaning_months = 6
back = "white"

[[finish]]
name = "opal"
type = "diffuser"
diffuse_transmittance = 0.5
reflectance = 0.4
loss_per_month = 0.02
cleaning_months = 6
back = "opal indoors"

[[finish]]
name = "opal indoors"
type = "diffuser"
diffuse_transmittance = 0.5
reflectance = 0.2
loss_per_month = 0.02
cleaning_months = 6

[[finish]]
name = "screen"
type = "cloth"
openness = 0.05
diffuse_transmittance = 0.15
reflectance = 0.5
loss_per_month = 0.02
cleaning_months = 6

[[finish]]
name = "coated"
type = "glazing"
table = [[0, 0.6, 0.1], [90, 0, 1]]
loss_per_month = 0.02
cleaning_months = 6

[[finish]]
name = "glossy"
type = "glossy"
total_reflectance = 0.8
specular_share = 0.5
spread_deg = 2
loss_per_month = 0.05
cleaning_months = 5

[[finish]]
name = "punched"
type = "perforated"
open_share = 0.25
hole_diameter_mm = 2
thickness_mm = 0
base = "glossy"

`

func soiling(which string) string { return "\n[simulation]\nsoiling = \"" + which + "\"\n" }

// TestSoiling wants what each finish reflects and lets through at normal
// incidence, multiplied by what its dirt leaves.
func TestSoiling(t *testing.T) {
	const front, back = materials.Front, materials.Back
	for _, s := range []struct {
		name, text string
		six, five  float64 // by hand, see dirty
	}{
		{"default", "", 1, 1},
		{"clean", soiling("clean"), 1, 1},
		{"average", soiling("average"), .94, .8875},
		{"neglected", soiling("neglected"), .88, .75},
	} {
		built := finishesOf(t, dirty+s.text)
		for _, c := range []struct {
			name                              string
			side                              materials.Side
			rho, tau, mirror, through, glossy float64 // clean: the project's text
			factor                            float64
			hole                              float64 // passes whatever the dirt
		}{
			{"white", front, .8, 0, 0, 0, 0, 1, 0}, // without a loss
			{"mirror", front, .05, 0, .8, 0, 0, s.six, 0},
			{"mirror", back, .8, 0, 0, 0, 0, 1, 0}, // each side has its own dirt
			{"opal", front, .4, .5, 0, 0, 0, s.six, 0},
			{"opal", back, .2, .5, 0, 0, 0, s.six, 0},
			{"screen", back, .5, .15, 0, .05, 0, s.six, 0},
			{"coated", front, 0, 0, .1, .6, 0, s.six, 0},
			{"glossy", back, .4, 0, 0, 0, .4, s.five, 0},
			{"punched", front, .3, 0, 0, 0, .3, s.five, .25}, // 0.75 x glossy
		} {
			b := built[c.name]
			rho, tau := b.Lambert(c.side)
			mirror, through := b.Delta(c.side, 1)
			glossy := 0.0
			if g := b.Gloss(c.side); g != nil {
				glossy = g.Reflectance
			}
			got := []float64{rho, tau, mirror, through, glossy}
			for i, clean := range []float64{c.rho, c.tau, c.mirror, c.through, c.glossy} {
				want := c.factor * clean
				if i == 3 {
					want += c.hole
				}
				if math.Abs(got[i]-want) > 1e-12 { // a few float64 operations
					t.Errorf("%s: %s, side %d: value %d of rho, tau, mirror, through, gloss: got %g, want %g", s.name, c.name, c.side, i, got[i], want)
				}
			}
		}
	}
}

// TestSoilingOfHoles: dirt on the perforated sheet itself dims the holes
// too.
func TestSoilingOfHoles(t *testing.T) {
	text := strings.Replace(dirty, "loss_per_month = 0.05\ncleaning_months = 5\n", "", 1)
	text = strings.Replace(text, "base = \"glossy\"\n", "base = \"glossy\"\nloss_per_month = 0.02\ncleaning_months = 6\n", 1)
	b := finishesOf(t, text+soiling("neglected"))["punched"]
	rho, _ := b.Lambert(materials.Front)
	if _, through := b.Delta(materials.Front, 1); math.Abs(through-.22) > 1e-12 || math.Abs(rho-.264) > 1e-12 { // 0.25 x 0.88, 0.3 x 0.88
		t.Errorf("got %g through and %g scattered, want 0.22 and 0.264", through, rho)
	}
}

// TestSoilingNotes: the scene says which dirt it has, and nothing where the
// project knows of none.
func TestSoilingNotes(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"no dirt", "", ""},
		{"no dirt, clean", soiling("clean"), ""},
		{"no dirt, average", soiling("average"), `soiling = "average", but no finish has a loss_per_month: all are clean.`},
		{"left out", dirty, `soiling = "clean": the loss_per_month of finishes is left out: "mirror", "opal", "opal indoors", "screen", "coated", "glossy".`},
		{"average", dirty + soiling("average"), `soiling = "average": what dirt leaves of the light of finishes, the mean over the year taken for every month: "mirror" 0.94, "opal" 0.94, "opal indoors" 0.94, "screen" 0.94, "coated" 0.94, "glossy" 0.8875.`},
		{"neglected", dirty + soiling("neglected"), `soiling = "neglected": what dirt leaves of the light of finishes just before cleaning, taken for every month: "mirror" 0.88, "opal" 0.88, "opal indoors" 0.88, "screen" 0.88, "coated" 0.88, "glossy" 0.75.`},
	} {
		s := mustBuild(t, c.text+roomMesh, room().files())
		if got := strings.Join(s.Notes, "\n"); got != c.want {
			t.Errorf("%s: got %q\nwant %q", c.name, got, c.want)
		}
	}
}

// TestSoilFactorErrors: projects that no file made.
func TestSoilFactorErrors(t *testing.T) {
	for _, c := range []struct {
		soiling      string
		loss         float64
		months       int
		factor       float64
		wantsMessage string
	}{
		{"", 0, 0, 1, ""},
		{"average", 0, 0, 1, ""},
		{"neglected", .1, 10, 0, ""}, // nothing left
		{"average", .01, 0, 0, `p.toml:3: finish "a": cleaning_months: got 0, want 1 to 12`},
		{"average", .1, 12, 0, `p.toml:3: finish "a": loss_per_month x cleaning_months: got 1.2`},
		{"filthy", .01, 6, 0, `p.toml:3: finish "a": simulation.soiling: got "filthy", want clean, average or neglected`},
	} {
		p := &project.Project{File: "p.toml", Simulation: project.Simulation{Soiling: c.soiling},
			Finishes: []project.Finish{{Name: "a", Type: "matte", Reflectance: .5, LossPerMonth: c.loss, CleaningMonths: c.months, Line: 3}}}
		b, err := buildFinish(p, &p.Finishes[0])
		if c.wantsMessage != "" {
			if err == nil || b != nil || !strings.Contains(err.Error(), c.wantsMessage) {
				t.Errorf("%+v: got %v, %v", c, b, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		if rho, _ := b.Lambert(materials.Front); rho != .5*c.factor {
			t.Errorf("%+v: reflects %g", c, rho)
		}
	}
}
