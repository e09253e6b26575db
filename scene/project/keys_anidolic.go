package project

import (
	"cmp"
	"errors"
	"math"

	"squint/scene/system"
)

const anidolicTable = "anidolic_ceiling"

// reflectors are the types of finish that the inside of an anidolic ceiling
// can have; its outside too.
var reflectors = []string{"mirror", "glossy", "matte"}

var anidolicCeilingKeys = []key[AnidolicCeiling]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(c *AnidolicCeiling) any { return &c.Name }},
	{spec{name: "opening", about: "in the facade under the ceiling, in which the duct's mouth is", required: true, refers: "opening"}, func(c *AnidolicCeiling) any { return &c.Opening }},
	{spec{name: "axis_tilt_deg", about: "of the collector's axis above the horizontal", required: true, in: within{lo: -90, hi: 90}}, func(c *AnidolicCeiling) any { return &c.AxisTiltDeg }},
	{spec{name: "acceptance_deg", about: "half-angle of acceptance, from the axis; with acceptance_below_deg the one above it", required: true, in: within{hi: 90}}, func(c *AnidolicCeiling) any { return &c.AcceptanceDeg }},
	{spec{name: "acceptance_below_deg", about: "half-angle of acceptance below the axis; else the same as above it", in: within{hi: 90}}, func(c *AnidolicCeiling) any { return &c.AcceptanceBelowDeg }},
	{spec{name: "collector_share", about: "share that is kept of how far the collector's mirrors reach in full", in: within{lo: 0.05, hi: 1}, def: "1", source: "the whole concentrator, Winston 1974 (from memory)"}, func(c *AnidolicCeiling) any { return &c.CollectorShare }},
	{spec{name: "collector_space_m", about: "room for the collector before the facade; a longer one is refused", in: within{lo: 0.05, hi: 20}}, func(c *AnidolicCeiling) any { return &c.CollectorSpaceM }},
	{spec{name: "duct_length_m", about: "from the glass to the far end of the outlet", required: true, in: within{lo: 0.1, hi: 30}}, func(c *AnidolicCeiling) any { return &c.DuctLengthM }},
	{spec{name: "duct_height_m", about: "at the mouth, along the glass; else the opening's height less the gaps", in: within{lo: 0.05, hi: 5}}, func(c *AnidolicCeiling) any { return &c.DuctHeightM }},
	{spec{name: "outlet_length_m", about: "of the opening in the duct's floor; else as long as fits the duct, which is twice its height without a cut-off", in: within{lo: 0.02, hi: 20}}, func(c *AnidolicCeiling) any { return &c.OutletLengthM }},
	{spec{name: "outlet_cut_off_deg", about: "least angle below the horizontal at which light leaves the outlet", in: within{hi: 60}, def: "0", source: own}, func(c *AnidolicCeiling) any { return &c.OutletCutOffDeg }},
	{spec{name: "gap_m", about: "between the opening's edges and the duct, closed by a frame", in: within{lo: 0.0005, hi: 0.5}, def: "0.01", source: own}, func(c *AnidolicCeiling) any { return &c.GapM }},
	{spec{name: "reflector", about: "finish of the inside of collector, duct and outlet", required: true, refers: "finish", types: reflectors}, func(c *AnidolicCeiling) any { return &c.Reflector }},
	{spec{name: "casing", about: "finish of their outside and of the frame", required: true, refers: "finish", types: reflectors}, func(c *AnidolicCeiling) any { return &c.Casing }},
	{spec{name: "entrance_glazing", about: "finish of the pane over the collector's entrance", refers: "finish", types: []string{"glazing"}}, func(c *AnidolicCeiling) any { return &c.EntranceGlazing }},
	{spec{name: "outlet_glazing", about: "finish of the pane over the outlet", refers: "finish", types: []string{"glazing", "diffuser"}}, func(c *AnidolicCeiling) any { return &c.OutletGlazing }},
	{spec{name: "roller", about: "finish of a cloth over the collector's entrance", refers: "finish", types: cloths}, func(c *AnidolicCeiling) any { return &c.Roller }},
	{spec{name: "roller_drawn", about: "whether the cloth covers the entrance; with roller_follow whether it moves at all, which it does unless this is false", def: "false", source: own}, func(c *AnidolicCeiling) any { return &c.RollerDrawn }},
	{spec{name: "roller_follow", about: "the cloth is drawn in the hours in which the sun stands where the collector takes it in", choices: []string{"acceptance"}}, func(c *AnidolicCeiling) any { return &c.RollerFollow }},
}

func checkAnidolicCeiling(r *reader, n *node, c *AnidolicCeiling) {
	c.Line = n.line
	r.anidolic = append(r.anidolic, n)
	if !n.has("acceptance_below_deg") {
		c.AcceptanceBelowDeg = c.AcceptanceDeg
	}
	for _, key := range []string{"roller_drawn", "roller_follow"} {
		if n.has(key) && !n.has("roller") {
			r.reject(n, anidolicTable, "roller", "missing, but %s is given; want the finish of the cloth", key)
			break
		}
	}
	if n.has("roller_follow") && !n.has("roller_drawn") {
		c.RollerDrawn = true
	}
}

// System is the ceiling in the units of package system. mouthGlazing is the
// finish of the pane in the mouth, the opening's glazing.
func (c AnidolicCeiling) System(mouthGlazing string) system.AnidolicCeiling {
	const rad = math.Pi / 180
	return system.AnidolicCeiling{
		AxisTiltRad: c.AxisTiltDeg * rad, UpperRad: c.AcceptanceDeg * rad, LowerRad: c.AcceptanceBelowDeg * rad,
		KeepShare: c.CollectorShare, SpaceM: c.CollectorSpaceM,
		DuctLengthM: c.DuctLengthM, DuctHeightM: c.DuctHeightM,
		OutletLengthM: c.OutletLengthM, OutletCutOffRad: c.OutletCutOffDeg * rad, GapM: c.GapM,
		Reflector: c.Reflector, Casing: c.Casing,
		EntranceGlazing: c.EntranceGlazing, MouthGlazing: mouthGlazing, OutletGlazing: c.OutletGlazing,
		Roller: c.Roller, Drawn: c.RollerDrawn,
	}
}

// anidolicKeys are our keys of the dimensions that package system names.
var anidolicKeys = map[string]string{
	"axis tilt": "axis_tilt_deg", "acceptance": "acceptance_deg", "collector share": "collector_share",
	"collector space": "collector_space_m", "duct height": "duct_height_m", "duct length": "duct_length_m",
	"outlet length": "outlet_length_m", "outlet cut-off": "outlet_cut_off_deg", "gap": "gap_m", "opening": "opening",
}

// checkAnidolic builds the anidolic ceilings whose opening the file gives, and
// reports mouths that lead into the open and openings with another system.
func (r *reader) checkAnidolic(p *Project, rects map[string]system.Rect) {
	const name = anidolicTable
	for i, c := range p.AnidolicCeilings {
		n := r.anidolic[i]
		for k := range p.Openings {
			o := &p.Openings[k]
			if o.Name != c.Opening || !n.good("opening", "entrance_glazing", "outlet_glazing") {
				continue
			}
			switch {
			case o.MeshGroup != "" && o.Glazing == "":
				r.reject(n, name, "opening", "got %s, whose glass is the mesh's own; want one with corners_m, or with glazing besides mesh_group, so that the pane fits the mouth", quote(o.Name))
			case o.InnerGlazing != "":
				r.reject(n, name, "opening", "got %s, which has an inner_glazing; want one pane at most in the mouth", quote(o.Name))
			case o.Glazing == "" && c.EntranceGlazing == "" && c.OutletGlazing == "":
				r.reject(n, name, "entrance_glazing", "missing, and the opening has no glazing nor the outlet; want a pane in one of the three places, else the room is open to the weather")
			}
		}
		for _, m := range Movables(p) {
			if m.Name == c.Name && m.Kind != name && n.good("name", "roller") && c.Roller != "" {
				r.reject(n, name, "name", "got %s, which is a %s already; want a name that nothing else that moves has", quote(c.Name), m.Kind)
			}
		}
		if other := r.besideAnidolic(p, i); other != "" && n.good("opening") {
			r.reject(n, name, "opening", "got %s, where there is %s too; want an opening of its own for the duct's mouth", quote(c.Opening), other)
		}
		rect, ok := rects[c.Opening]
		if !ok || n.bad {
			continue
		}
		var d *system.DimensionError
		if _, err := c.System("").Build(rect); errors.As(err, &d) {
			r.reject(n, name, anidolicKeys[d.Dimension], "%s", d.Message)
		} else if err != nil {
			r.reject(n, name, "", "%v", err)
		}
	}
}

// besideAnidolic names another system at the opening of anidolic ceiling i;
// "" for none.
func (r *reader) besideAnidolic(p *Project, i int) string {
	opening := p.AnidolicCeilings[i].Opening
	at := func(table, name, where string) string {
		if where != opening {
			return ""
		}
		return table + " " + quote(name)
	}
	other := ""
	for _, x := range p.AnidolicCeilings[:i] {
		other = cmp.Or(other, at(anidolicTable, x.Name, x.Opening))
	}
	for _, x := range p.LightShelves {
		other = cmp.Or(other, at("light_shelf", x.Name, x.Opening))
	}
	for _, x := range p.Sills {
		other = cmp.Or(other, at("sill", x.Name, x.Opening))
	}
	for _, x := range p.HungAt(p.opening(opening), 1) {
		other = cmp.Or(other, x.Table+" "+quote(x.Name))
	}
	return other
}

// mouths are the openings that may do without glazing, since an anidolic
// ceiling starts there.
func (r *reader) mouths(p *Project) map[string]bool {
	m := map[string]bool{}
	for _, c := range p.AnidolicCeilings {
		m[c.Opening] = true
	}
	return m
}

// moves is the roller over the entrance of the ceiling; false for none.
func (c AnidolicCeiling) moves() (Movable, bool) {
	if c.Roller == "" {
		return Movable{}, false
	}
	m := Movable{Name: c.Name, Opening: c.Opening, Kind: anidolicTable, States: []string{RaisedState, DrawnState}, Standing: RaisedState}
	if c.RollerDrawn {
		m.Standing = DrawnState
	}
	if c.RollerFollow != "" {
		m.Follow = c.System("")
	}
	return m, true
}
