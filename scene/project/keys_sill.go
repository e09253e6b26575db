package project

import (
	"math"

	"squint/scene/system"
)

// Sill is a sloping board outdoors below an opening, whose top reflects.
type Sill struct {
	Name, Opening string
	HeightM       float64 // of the top, at the glass, above the opening's lower edge; 0 or less
	DepthM        float64 // from the plane of the glass, along the sill
	TiltDeg       float64 // from the horizontal, positive lifts the outer edge
	ThicknessM    float64
	ExtendM       float64 // beyond the opening, on each side
	GapM          float64 // between glass and sill
	Finish        string
	Underside     string // finish; "" for Finish
	Line          int
}

var sillKeys = []key[Sill]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(s *Sill) any { return &s.Name }},
	{spec{name: "opening", about: "below which the sill is", required: true, refers: "opening"}, func(s *Sill) any { return &s.Opening }},
	{spec{name: "depth_m", about: "from the plane of the glass along the sill, outdoors", required: true, in: within{lo: 0.01, hi: 5}}, func(s *Sill) any { return &s.DepthM }},
	{spec{name: "tilt_deg", about: "from the horizontal; positive lifts the outer edge, negative drains outward", in: within{lo: -60, hi: 60}, def: "-5", source: usual}, func(s *Sill) any { return &s.TiltDeg }},
	{spec{name: "height_m", about: "of the top at the glass, above the opening's lower edge; negative below it", in: within{lo: -1, hi: 0}, def: "0", source: usual}, func(s *Sill) any { return &s.HeightM }},
	{spec{name: "thickness_m", about: "of the sill", in: within{lo: 0.001, hi: 0.5}, def: "0.03", source: usual}, func(s *Sill) any { return &s.ThicknessM }},
	{spec{name: "extend_m", about: "beyond the opening, on each side", in: within{hi: 5}, def: "0", source: own}, func(s *Sill) any { return &s.ExtendM }},
	{spec{name: "gap_m", about: "between glass and sill", in: within{lo: 0.001, hi: 0.5}, def: "0.01", source: usual}, func(s *Sill) any { return &s.GapM }},
	{spec{name: "finish", about: "of the upper side", required: true, refers: "finish", types: board}, func(s *Sill) any { return &s.Finish }},
	{spec{name: "underside", about: "finish of the lower side and of the edges; else finish", refers: "finish", types: board}, func(s *Sill) any { return &s.Underside }},
}

func checkSill(r *reader, n *node, s *Sill) {
	s.Line = n.line
	r.sills = append(r.sills, n)
}

// System is the sill as a shelf outdoors in the units of package system.
func (s Sill) System() system.LightShelf {
	under := s.Underside
	if under == "" {
		under = s.Finish
	}
	return system.LightShelf{
		HeightM: s.HeightM, OutsideDepthM: s.DepthM, ThicknessM: s.ThicknessM, OutsideTiltRad: s.TiltDeg * math.Pi / 180,
		ExtendM: s.ExtendM, GapM: s.GapM, Top: s.Finish, Underside: under,
	}
}
