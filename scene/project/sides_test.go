package project

import (
	"strings"
	"testing"
)

// TestSides appends finishes from line 24 on and wants one problem, or none
// where want is "".
func TestSides(t *testing.T) {
	with := func(text, line string) string { return strings.TrimSuffix(text, "\n") + "\n" + line + "\n" }
	named := func(text, old, new string) string {
		return strings.Replace(text, `name = "`+old+`"`, `name = "`+new+`"`, 1)
	}
	coated := func(name, rows string) string { return finish(name, "glazing", "table = "+rows) }
	const rows = "[[0, 0.6, 0.1], [60, 0.5, 0.2], [90, 0, 1]]"
	for _, c := range []struct {
		name, text, want string
	}{
		{"glossy on matte", with(anodised, `back = "white"`), ""},
		{"opal both sides", with(opal, `back = "b"`) + named(opal, "opal", "b"), ""},
		{"opal, another reflectance", with(opal, `back = "b"`) + strings.Replace(named(opal, "opal", "b"), "0.4", "0.1", 1), ""},
		{"opal, another transmittance", with(opal, `back = "b"`) + strings.Replace(named(opal, "opal", "b"), "0.5", "0.1", 1),
			`:29: finish.back: got "b", which lets other light through: diffuse_transmittance 0.1, here 0.5; want both sides to let the same through`},
		{"opal on matte", with(opal, `back = "white"`),
			`:29: finish.back: got "white", which is of type "matte", want a finish of type "diffuser"`},
		{"matte on opal", with(anodised, `back = "opal"`) + opal,
			`:30: finish.back: got "opal", which is of type "diffuser", want a finish of type "matte", "mirror" or "glossy"`},
		{"coated on one side", with(coated("a", rows), `back = "b"`) + coated("b", "[[0, 0.6, 0.3], [60, 0.5, 0.3], [90, 0, 1]]"), ""},
		{"coated, other transmittances", with(coated("a", rows), `back = "b"`) + coated("b", "[[0, 0.6, 0.3], [60, 0.4, 0.3], [90, 0, 1]]"),
			`:28: finish.back: got "b", which lets other light through: transmittance in row 2 0.4, here 0.5; want both sides to let the same through`},
		{"coated, other rows", with(coated("a", rows), `back = "b"`) + coated("b", "[[0, 0.6, 0.3], [90, 0, 1]]"),
			`:28: finish.back: got "b", which lets other light through: number of rows 2, here 3; want both sides to let the same through`},
		{"coated on clear", with(coated("a", rows), `back = "clear"`),
			`:28: finish.back: got "clear", which lets other light through: transmittance 0.8, here 0; want both sides to let the same through`},
		{"painted on one side", with(punched, `back = "b"`) + strings.Replace(named(punched, "punched", "b"), `"white"`, `"anodised"`, 1) + anodised, ""},
		{"other holes", with(punched, `back = "b"`) + strings.Replace(named(punched, "punched", "b"), "hole_diameter_mm = 2", "hole_diameter_mm = 3", 1),
			`:31: finish.back: got "b", which lets other light through: hole_diameter_mm 3, here 2; want both sides to let the same through`},
		{"a base that lets light through", with(punched, `back = "b"`) + strings.Replace(named(punched, "punched", "b"), `"white"`, `"opal"`, 1) + opal,
			`:31: finish.back: got "b", which lets other light through: diffuse_transmittance of the base 0.5, here 0; want both sides to let the same through`},
		{"base with a back", strings.Replace(punched, `"white"`, `"anodised"`, 1) + with(anodised, `back = "white"`), ""},
		{"base with a back, and a back", with(strings.Replace(punched, `"white"`, `"anodised"`, 1), `back = "b"`) + with(anodised, `back = "white"`) + named(punched, "punched", "b"),
			`:31: finish.back: got "b", but the base "anodised" has a back too; leave one of the two out`},
		{"back whose base has a back", with(punched, `back = "b"`) + strings.Replace(named(punched, "punched", "b"), `"white"`, `"anodised"`, 1) + with(anodised, `back = "white"`),
			`:31: finish.back: got "b", whose base "anodised" has a back of its own; want a base without`},
		{"two backs of each other", with(named(anodised, "anodised", "a"), `back = "b"`) + with(named(anodised, "anodised", "b"), `back = "a"`),
			":30: finish.back: got \"b\", which has a back of its own; want a finish without\n:37: finish.back: got \"a\", which has a back of its own; want a finish without"},
		{"base of itself", strings.Replace(punched, `"white"`, `"punched"`, 1),
			`:30: finish.base: got the finish itself; want the finish of the sheet between the holes`},
		{"bases in a circle", strings.Replace(punched, `"white"`, `"b"`, 1) + strings.Replace(named(punched, "punched", "b"), `"white"`, `"punched"`, 1),
			":30: finish.base: got \"b\", which is of type \"perforated\", want a finish of type \"matte\", \"mirror\", \"glossy\", \"diffuser\" or \"cloth\"\n" +
				":37: finish.base: got \"punched\", which is of type \"perforated\", want a finish of type \"matte\", \"mirror\", \"glossy\", \"diffuser\" or \"cloth\""},
		// A circle of base and back is closed by the type of the back.
		{"base whose back is the sheet", strings.Replace(punched, `"white"`, `"anodised"`, 1) + with(anodised, `back = "punched"`),
			`:37: finish.back: got "punched", which is of type "perforated", want a finish of type "matte", "mirror" or "glossy"`},
		// One message for one slip.
		{"back with a slip of its own", with(opal, `back = "b"`) + strings.Replace(named(opal, "opal", "b"), "0.5", "5", 1),
			`:33: finish.diffuse_transmittance: got 5, want 0 to 1`},
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
