package project

import (
	"fmt"
	"math"
	"strconv"
)

// ViewGrid is a grid of eyes at one height, each looking level in several
// directions. Load makes Viewpoints of it.
type ViewGrid struct {
	Name          string
	PolygonM      [][2]float64 // outline in x and y, not closed, either way round
	HeightM       float64      // z of the eyes in the model
	SpacingM      float64      // between eyes, at most
	PerimeterM    float64      // band along the outline without eyes
	Directions    int          // that many, evenly around from north; of no effect with DirectionsDeg
	DirectionsDeg []float64    // azimuths, clockwise from north
	Room          string       // whose hours of use count; "": the project's own
	Line          int
}

// maxGridViews keeps a slip in spacing_m from asking for weeks of work.
const maxGridViews = 1000

var viewGridKeys = []key[ViewGrid]{
	{spec{name: "name", about: "shown in results, before position and direction", required: true, form: itemName}, func(g *ViewGrid) any { return &g.Name }},
	{spec{name: "polygon_m", about: "outline in x and y", required: true, in: coordinate}, func(g *ViewGrid) any { return &g.PolygonM }},
	{spec{name: "height_m", about: "z of the eyes in the model, above the floor at z = 0", in: coordinate, def: "1.2", source: "of seated people, " + en17037}, func(g *ViewGrid) any { return &g.HeightM }},
	{spec{name: "spacing_m", about: "between eyes, at most", required: true, in: within{lo: 0.1, hi: 100}}, func(g *ViewGrid) any { return &g.SpacingM }},
	{spec{name: "perimeter_m", about: "band along the outline without eyes", in: within{hi: 5}, def: "0.5", source: own}, func(g *ViewGrid) any { return &g.PerimeterM }},
	{spec{name: "directions", about: "how many directions each eye looks in, evenly around from north", in: within{lo: 1, hi: 16}, def: "4", source: own}, func(g *ViewGrid) any { return &g.Directions }},
	{spec{name: "directions_deg", about: "instead of directions: their azimuths, clockwise from north", in: anyAngle}, func(g *ViewGrid) any { return &g.DirectionsDeg }},
	inRoom(func(g *ViewGrid) *string { return &g.Room }),
}

func checkViewGrid(r *reader, n *node, g *ViewGrid) {
	const name = "view_grid"
	g.Line = n.line
	r.viewGrids = append(r.viewGrids, n)
	if n.has("directions") && n.has("directions_deg") {
		r.reject(n, name, "directions_deg", "got directions too; want one of the two")
	}
	seen := map[float64]bool{}
	for _, az := range g.azimuthsDeg() {
		if seen[az] {
			r.reject(n, name, "directions_deg", "got %g degrees twice", az)
			break
		}
		seen[az] = true
	}
	if n.has("polygon_m") && n.good("polygon_m") {
		if why := polygonProblem(g.PolygonM); why != "" {
			r.reject(n, name, "polygon_m", "%s", why)
		}
	}
}

// azimuthsDeg are the directions, from 0 to below 360.
func (g *ViewGrid) azimuthsDeg() []float64 {
	var list []float64
	for _, az := range g.DirectionsDeg {
		list = append(list, math.Mod(az+360, 360))
	}
	for i := range g.Directions {
		if g.DirectionsDeg == nil {
			list = append(list, 360*float64(i)/float64(g.Directions))
		}
	}
	return list
}

// expandViewGrids makes viewpoints of the grids, after those of the file.
func (r *reader) expandViewGrids(p *Project) {
	const name = "view_grid"
	taken := map[string]bool{}
	for _, v := range p.Viewpoints {
		taken[v.Name] = true
	}
	for i := range p.ViewGrids {
		g, n := &p.ViewGrids[i], r.viewGrids[i]
		if n.bad {
			continue
		}
		azimuths := g.azimuthsDeg()
		middles, _, across := Cells(g.PolygonM, g.SpacingM, g.PerimeterM, maxGridViews/len(azimuths))
		switch cells := float64(across[0]) * float64(across[1]) * float64(len(azimuths)); {
		case cells > maxGridViews:
			r.reject(n, name, "spacing_m", "got %g, which makes %d by %d positions in %s, want at most %d viewpoints; give a larger spacing_m or split the area", g.SpacingM, across[0], across[1], count(len(azimuths), "direction"), maxGridViews)
			continue
		case len(middles) == 0:
			r.reject(n, name, "polygon_m", "no viewpoint fits between the perimeter band of %g m and the outline with %g m spacing; want a larger outline, or smaller perimeter_m or spacing_m", g.PerimeterM, g.SpacingM)
			continue
		}
		decimals := decimalsOf(middles)
		for _, at := range middles {
			for _, az := range azimuths {
				v := Viewpoint{
					Name:      fmt.Sprintf("%s (%.*f, %.*f) %s", g.Name, decimals, at[0], decimals, at[1], directionWords(az)),
					PositionM: [3]float64{at[0], at[1], g.HeightM}, AzimuthDeg: &az, Grid: g.Name, Room: g.Room, Line: g.Line,
				}
				if taken[v.Name] && !n.bad { // told once
					r.reject(n, name, "name", "makes a viewpoint %s, which there is already; want another name", quote(v.Name))
				}
				taken[v.Name] = true
				p.Viewpoints = append(p.Viewpoints, v)
			}
		}
	}
}

// decimalsOf are the places with which the positions are written: one where
// that is exact to a millimetre, else two, which tell cells apart: those of the
// least spacing, 0.1 m, are half as wide at least.
func decimalsOf(positions [][2]float64) int {
	for _, p := range positions {
		for _, x := range p {
			if math.Abs(10*x-math.Round(10*x)) > 0.01 {
				return 2
			}
		}
	}
	return 1
}

// Winds are the names of eight directions, clockwise from north.
var Winds = [8]string{"north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"}

// directionWords names an azimuth from 0 to below 360 degrees.
func directionWords(azimuthDeg float64) string {
	if k := azimuthDeg / 45; k == math.Trunc(k) {
		return Winds[int(k)]
	}
	return strconv.FormatFloat(math.Round(10*azimuthDeg)/10, 'f', -1, 64) + " deg"
}
