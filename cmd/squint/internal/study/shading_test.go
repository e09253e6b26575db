package study

import (
	"fmt"
	"strings"
	"testing"
	"testing/fstest"

	"squint/glare/daylight"
	"squint/scene/project"
)

// TestShading: sDA is called what it is: by its own rule, operated otherwise,
// closed all the year, or unshaded. ASE is without what is operated.
func TestShading(t *testing.T) {
	const two = operatedRoller + "\n[[roller]]\nname = \"second\"\nopening = \"window\"\nposition = \"outside\"\nopenness = 0.03\ndiffuse_transmittance = 0.05\nreflectance = 0.5\ndrawn = false\n"
	const rule = "[[control]]\nname = \"c\"\nsystems = [\"roller\"]\nrule = \"work plane sun\"\n"
	for _, c := range []struct {
		name, text string
		want       daylight.Shading
		sda, ase   string
	}{
		{"nothing moves", "", daylight.Unshaded, "sDA, unshaded", "ASE"},
		{"raised all the year", operatedRoller, daylight.Unshaded, "sDA, unshaded", "ASE"},
		{"drawn all the year", strings.Replace(operatedRoller, "drawn = false", "drawn = true", 1), daylight.AsStanding, "sDA, shading as it stands", "ASE, shading as it stands"},
		{"by the rule of LM-83", operatedRoller + rule, daylight.ByBlindRule, "sDA", "ASE"},
		{"by its rule with another limit", operatedRoller + rule + "direct_lx = 2000\n", daylight.AsOperated, "sDA, as operated", "ASE"},
		{"by its rule and glare", operatedRoller + rule + "dgp_limit = 0.4\n", daylight.AsOperated, "sDA, as operated", "ASE"},
		{"one of two by its rule", two + rule, daylight.ByBlindRule, "sDA", "ASE"},
		{"one by its rule, one drawn", two + "[[control]]\nname = \"d\"\nsystems = [\"second\"]\nrule = \"manual\"\nuser = \"passive\"\n" + rule, daylight.AsOperated, "sDA, as operated", "ASE"},
		{"by glare", operatedRoller + strings.Replace(rule, "work plane sun", "glare", 1), daylight.AsOperated, "sDA, as operated", "ASE"},
	} {
		text := fmt.Sprintf(tinyProject, 0.8) + c.text
		p, err := project.Load(fstest.MapFS{"project.toml": {Data: []byte(text)}}, "project.toml")
		if err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		got := shading(p)
		s, x := daylight.DefaultSpatial, daylight.DefaultExposure
		in := &Input{Project: p}
		if len(p.Controls) > 0 {
			in.operation = &operation{}
		}
		s.Shading, x.Shading = got, in.exposureShading()
		sda, ase := daylight.SDA(daylight.Plane{}, nil, s, 1), daylight.ASE(nil, nil, x, 1)
		if got != c.want || sda.Label != c.sda || ase.Label != c.ase {
			t.Errorf("%s: got %q and %q, want %q and %q", c.name, sda.Label, ase.Label, c.sda, c.ase)
		}
	}
}
