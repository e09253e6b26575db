package project

import (
	"errors"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/system"
)

var openingKeys = []key[Opening]{
	{spec{name: "name", about: "by which systems call it", required: true, form: itemName}, func(o *Opening) any { return &o.Name }},
	{spec{name: "group", about: "openings of one group are controlled together; else the opening is a group of its own", form: itemName}, func(o *Opening) any { return &o.Group }},
	{spec{name: "corners_m", about: "four corners in order around the rectangle, counter-clockwise seen from outdoors unless outward_deg is given", in: coordinate}, func(o *Opening) any { return &o.CornersM }},
	{spec{name: "mesh_group", about: "instead of corners_m: the mesh group that is the glass", form: itemName}, func(o *Opening) any { return &o.MeshGroup }},
	{spec{name: "outward_deg", about: "azimuth to which the opening faces", in: anyAngle}, func(o *Opening) any { return &o.OutwardDeg }},
	{spec{name: "glazing", about: "finish of the glass; with corners_m a pane is built", refers: "finish", types: []string{"glazing"}}, func(o *Opening) any { return &o.Glazing }},
	{spec{name: "inner_glazing", about: "finish of a second pane indoors of the first, with a blind between them or without; glazing is then the outer pane alone", refers: "finish", types: []string{"glazing"}}, func(o *Opening) any { return &o.InnerGlazing }},
	{spec{name: "cavity_m", about: "between the two panes, with inner_glazing", in: within{lo: 0.004, hi: 1}}, func(o *Opening) any { return &o.CavityM }},
}

func checkOpening(r *reader, n *node, o *Opening) {
	const name = "opening"
	o.Line = n.line
	o.HasCorners = n.has("corners_m")
	if o.Group == "" {
		o.Group = o.Name
	}
	r.openings = append(r.openings, n)
	switch {
	case n.has("corners_m") && n.has("mesh_group"):
		r.reject(n, name, "mesh_group", "got corners_m too; want one of the two")
	case !n.has("corners_m") && !n.has("mesh_group"):
		r.reject(n, name, "corners_m", "missing; want 4 corners of 3 numbers each, or a mesh_group")
	case n.has("inner_glazing") && !n.has("glazing"):
		r.reject(n, name, "glazing", "missing; want the outer pane's finish, as inner_glazing is given")
	}
	for _, pair := range [][2]string{{"inner_glazing", "cavity_m"}, {"cavity_m", "inner_glazing"}} {
		if n.has(pair[0]) && !n.has(pair[1]) {
			r.reject(n, name, pair[0], "got no %s; want both or neither", pair[1])
		}
	}
}

// OutwardHint is the horizontal direction, in the model, to which the opening
// faces, for system.RectFromCorners and system.RectFromTriangles; zero
// where the file does not say it. northDeg is Site.NorthDeg.
func (o Opening) OutwardHint(northDeg float64) r3.Vec {
	if o.OutwardDeg == nil {
		return r3.Vec{}
	}
	return Direction(*o.OutwardDeg, 0, northDeg)
}

// Direction is the unit vector, in the model, of a compass azimuth and a pitch
// above the horizon, in degrees. northDeg is Site.NorthDeg.
func Direction(azimuthDeg, pitchDeg, northDeg float64) r3.Vec {
	sin, cos := math.Sincos((azimuthDeg - northDeg) * math.Pi / 180)
	up, level := math.Sincos(pitchDeg * math.Pi / 180)
	return r3.Vec{X: level * sin, Y: level * cos, Z: up}
}

// Rect is the rectangle of an opening with corners.
func (o Opening) Rect(northDeg float64) (system.Rect, error) {
	if !o.HasCorners {
		return system.Rect{}, errors.New("opening: got a mesh group, want corners")
	}
	var c [4]r3.Vec
	for i, p := range o.CornersM {
		c[i] = r3.Vec{X: p[0], Y: p[1], Z: p[2]}
	}
	return system.RectFromCorners(c, o.OutwardHint(northDeg))
}

// board are the types of finish that a light shelf can have.
var board = []string{"matte", "mirror", "glossy", "perforated"}

var lightShelfKeys = slices.Concat([]key[LightShelf]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(s *LightShelf) any { return &s.Name }},
	{spec{name: "opening", about: "at which the shelf is", required: true, refers: "opening"}, func(s *LightShelf) any { return &s.Opening }},
	{spec{name: "height_m", about: "of the top at the glass, above the opening's lower edge; 0 is on the transom below it, negative on the wall further down", in: within{lo: -1, hi: 20}, def: "0", source: "on the transom between window and clerestory: " + usual}, func(s *LightShelf) any { return &s.HeightM }},
	{spec{name: "outside_depth_m", about: "from the plane of the glass along the shelf, outdoors", in: within{hi: 5}, def: "0", source: own}, func(s *LightShelf) any { return &s.OutsideDepthM }},
	{spec{name: "inside_depth_m", about: "from the plane of the glass along the shelf, indoors", in: within{hi: 5}, def: "0", source: own}, func(s *LightShelf) any { return &s.InsideDepthM }},
	{spec{name: "thickness_m", about: "of the shelf", in: within{lo: 0.001, hi: 0.5}, def: "0.05", source: usual}, func(s *LightShelf) any { return &s.ThicknessM }},
	{spec{name: "outside_tilt_deg", about: "from the horizontal; positive lifts the outer edge", in: within{lo: -60, hi: 60}, def: "0", source: own}, func(s *LightShelf) any { return &s.OutsideTiltDeg }},
	{spec{name: "inside_tilt_deg", about: "from the horizontal; positive lifts the outer edge, which is the one at the glass", in: within{lo: -60, hi: 60}, def: "0", source: own}, func(s *LightShelf) any { return &s.InsideTiltDeg }},
	{spec{name: "extend_m", about: "beyond the opening, on each side", in: within{hi: 5}, def: "0", source: own}, func(s *LightShelf) any { return &s.ExtendM }},
	{spec{name: "gap_m", about: "between glass and shelf, on either side", in: within{lo: 0.001, hi: 0.5}, def: "0.01", source: usual}, func(s *LightShelf) any { return &s.GapM }},
	{spec{name: "top", about: "finish of the upper side", required: true, refers: "finish", types: board}, func(s *LightShelf) any { return &s.Top }},
	{spec{name: "underside", about: "finish of the lower side and of the edges", required: true, refers: "finish", types: board}, func(s *LightShelf) any { return &s.Underside }},
	{spec{name: "stack", about: "number of shelves above each other, the lowest at height_m", in: within{lo: 1, hi: 50}, def: "1", source: own}, func(s *LightShelf) any { return &s.Stack }},
	{spec{name: "stack_spacing_m", about: "with a stack: from each shelf's top to the next one's", in: within{lo: 0.01, hi: 5}}, func(s *LightShelf) any { return &s.StackSpacingM }},
},
	shapeKeys("outside", func(s *LightShelf) *ShelfShape { return &s.OutsideShape }),
	shapeKeys("inside", func(s *LightShelf) *ShelfShape { return &s.InsideShape }))

func checkLightShelf(r *reader, n *node, s *LightShelf) {
	s.Line = n.line
	r.shelves = append(r.shelves, n)
	if n.good("outside_depth_m", "inside_depth_m") && s.OutsideDepthM == 0 && s.InsideDepthM == 0 {
		r.reject(n, "light_shelf", "outside_depth_m", "got no outside_depth_m and no inside_depth_m above 0; want at least one of them")
	}
	checkShape(r, n, "outside", s.OutsideDepthM, s.OutsideShape)
	checkShape(r, n, "inside", s.InsideDepthM, s.InsideShape)
	switch {
	case s.Stack > 1 && !n.has("stack_spacing_m"):
		r.reject(n, "light_shelf", "stack_spacing_m", "missing; a stack of %d shelves needs it", s.Stack)
	case n.has("stack_spacing_m") && s.Stack <= 1 && n.good("stack"):
		r.reject(n, "light_shelf", "stack_spacing_m", "got no stack of 2 shelves or more; want that, or leave it out")
	}
}

// System is the shelf in the units of package system.
func (s LightShelf) System() system.LightShelf {
	return system.LightShelf{
		HeightM: s.HeightM, OutsideDepthM: s.OutsideDepthM, InsideDepthM: s.InsideDepthM, ThicknessM: s.ThicknessM,
		OutsideTiltRad: s.OutsideTiltDeg * math.Pi / 180, InsideTiltRad: s.InsideTiltDeg * math.Pi / 180,
		ExtendM: s.ExtendM, GapM: s.GapM, Top: s.Top, Underside: s.Underside,
		OutsideProfile: s.OutsideShape.system(), InsideProfile: s.InsideShape.system(),
		Stack: s.Stack, SpacingM: s.StackSpacingM,
	}
}

// SystemAt is System at that opening, whose second pane it keeps clear of.
func (s LightShelf) SystemAt(o *Opening) system.LightShelf {
	shelf := s.System()
	shelf.CavityM = o.CavityM
	return shelf
}

// opening of that name; an empty one where there is none.
func (p *Project) opening(name string) *Opening {
	for i := range p.Openings {
		if p.Openings[i].Name == name {
			return &p.Openings[i]
		}
	}
	return &Opening{}
}

// cloths are the types of finish that a roller can be of.
var cloths = []string{"cloth", "diffuser", "perforated"}

var rollerKeys = []key[Roller]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(ro *Roller) any { return &ro.Name }},
	{spec{name: "opening", about: "at which the roller is", required: true, refers: "opening"}, func(ro *Roller) any { return &ro.Opening }},
	{spec{name: "position", about: "side of the glass", choices: []string{"inside", "outside"}, def: `"inside"`, source: usual}, func(ro *Roller) any { return &ro.Position }},
	{spec{name: "cloth", about: "finish of the cloth, its front toward outdoors; instead of the single numbers", refers: "finish", types: cloths}, func(ro *Roller) any { return &ro.Cloth }},
	{spec{name: "openness", about: "share of light that passes straight between the threads", in: share}, func(ro *Roller) any { return &ro.Openness }},
	{spec{name: "diffuse_transmittance", about: "share of light that passes scattered", in: share}, func(ro *Roller) any { return &ro.DiffuseTransmittance }},
	{spec{name: "reflectance", about: "diffuse, of the side toward outdoors; of both without back_reflectance", in: share}, func(ro *Roller) any { return &ro.Reflectance }},
	{spec{name: "back_reflectance", about: "diffuse, of the side toward indoors", in: share}, func(ro *Roller) any { return &ro.BackReflectance }},
	{spec{name: "cut_off_deg", about: "angle of incidence from which nothing passes straight; without it openness holds at every angle", in: cutOff}, func(ro *Roller) any { return &ro.CutOffDeg }},
	{spec{name: "drop", about: "share of the opening's height that is covered, from the top", in: share, def: "1", source: own}, func(ro *Roller) any { return &ro.Drop }},
	{spec{name: "gap_m", about: "between glass and cloth", in: within{lo: 0.001, hi: 1}, def: "0.05", source: usual}, func(ro *Roller) any { return &ro.GapM }},
	{spec{name: "drawn", about: "whether the cloth is down", def: "true", source: own}, func(ro *Roller) any { return &ro.Drawn }},
}

func checkRoller(r *reader, n *node, ro *Roller) {
	const name = "roller"
	ro.Line = n.line
	r.rollers = append(r.rollers, n)
	needed := []string{"openness", "diffuse_transmittance", "reflectance"}
	written := func(key string) bool { return n.has(key) }
	switch numbers := append(needed[:3:3], "back_reflectance", "cut_off_deg"); {
	case n.has("cloth") && slices.ContainsFunc(numbers, written):
		r.reject(n, name, "cloth", "got %s too; want either the cloth's finish or the single numbers", numbers[slices.IndexFunc(numbers, written)])
		return
	case n.has("cloth"):
		return
	case !slices.ContainsFunc(numbers, written):
		r.reject(n, name, "cloth", "missing; want a finish's name in quotes, or the single numbers openness, diffuse_transmittance and reflectance")
		return
	}
	for _, key := range needed {
		if !n.has(key) {
			r.reject(n, name, key, "missing; want %s", share)
		}
	}
	checkCloth(r, n, name, ro.Openness, ro.DiffuseTransmittance, ro.Reflectance, ro.BackReflectance)
}

// System is the roller in the units of package system, with the finish given.
func (ro Roller) System(cloth string) system.Roller {
	return system.Roller{Outside: ro.Position == "outside", Drop: ro.Drop, GapM: ro.GapM, Raised: !ro.Drawn, Cloth: cloth}
}
