package project

import "slices"

// section is one table of the file, or one list of tables.
type section struct {
	name  string
	about string
	list  bool // written [[name]]
	// keys are the specs with a zero field each, for want and the schema.
	keys []described
	// variants are the further keys of a table whose type decides on them.
	variants []variant
	read     func(r *reader, n *node, p *Project)
}

type described struct {
	*spec
	field any
}

type variant struct {
	name, about string
	keys        []described
}

func describe[T any](keys []key[T]) []described {
	list := make([]described, len(keys))
	for i := range keys {
		list[i] = described{&keys[i].spec, keys[i].field(new(T))}
	}
	return list
}

// one is a table that is there once at most. Where it is missing its
// defaults hold, and what it requires is missing.
func one[T any](name, about string, keys []key[T], field func(*Project) *T, check func(*reader, *node, *T)) section {
	return section{name: name, about: about, keys: describe(keys), read: func(r *reader, n *node, p *Project) {
		dst := field(p)
		decode(r, n, name, keys, dst)
		r.unknown(n, name, names(keys))
		if check != nil {
			check(r, n, dst)
		}
	}}
}

// many is a list of tables. named returns the name that must be unique, and is
// nil for tables without one.
func many[T any](name, about string, keys []key[T], field func(*Project) *[]T, named func(*T) string, check func(*reader, *node, *T)) section {
	return section{name: name, about: about, list: true, keys: describe(keys), read: func(r *reader, n *node, p *Project) {
		var item T
		decode(r, n, name, keys, &item)
		r.unknown(n, name, names(keys))
		check(r, n, &item)
		keep(r, n, name, field(p), item, named)
	}}
}

// keep appends an item, whole or not, so that references to it are no further
// problem, and reports a name that was there before.
func keep[T any](r *reader, n *node, section string, list *[]T, item T, named func(*T) string) {
	if named != nil && named(&item) != "" {
		for i := range *list {
			if named(&(*list)[i]) == named(&item) {
				r.reject(n, section, "name", "got %s again, want a name that no other %s has", quote(named(&item)), section)
				break
			}
		}
	}
	*list = append(*list, item)
}

var (
	share      = within{lo: 0, hi: 1}
	coordinate = within{lo: -1e5, hi: 1e5} // metres; beyond, single precision loses centimetres
	anyAngle   = within{lo: -360, hi: 360}
	levels     = []string{"minimum", "medium", "high", "none"}
)

const (
	usual   = "common practice, no published source"
	own     = "own choice"
	en17037 = "EN 17037:2018 (from memory)"
)

// sections is the whole schema, in the order in which a file is best written.
func sections() []section {
	return []section{
		many(alternativeTable, "a design to compare with the others", alternativeKeys, func(p *Project) *[]Alternative { return &p.Alternatives },
			func(a *Alternative) string { return a.Name }, checkAlternative),
		one("site", "how the model lies; overrides of the weather file's header", siteKeys, func(p *Project) *Site { return &p.Site }, nil),
		one("weather", "the weather file", weatherKeys, func(p *Project) *Weather { return &p.Weather }, nil),
		one("ground", "the ground around the building", groundKeys, func(p *Project) *Ground { return &p.Ground }, checkGround),
		one("horizon", "the skyline", horizonKeys, func(p *Project) *[]HorizonPoint { return &p.Horizon }, checkHorizon),
		one("occupancy", "when the rooms are used, in clock time", occupancyKeys, func(p *Project) *Occupancy { return &p.Occupancy }, checkOccupancy),
		many(roomTable, "a room with hours of use of its own", roomKeys, func(p *Project) *[]Room { return &p.Rooms },
			func(o *Room) string { return o.Name }, checkRoom),
		many("mesh", "a geometry file", meshKeys, func(p *Project) *[]Mesh { return &p.Meshes }, nil, checkMesh),
		finishSection(),
		many("opening", "a rectangular window", openingKeys, func(p *Project) *[]Opening { return &p.Openings },
			func(o *Opening) string { return o.Name }, checkOpening),
		many("light_shelf", "a light shelf at an opening", lightShelfKeys, func(p *Project) *[]LightShelf { return &p.LightShelves },
			func(s *LightShelf) string { return s.Name }, checkLightShelf),
		many("sill", "a reflective sill outdoors below an opening", sillKeys, func(p *Project) *[]Sill { return &p.Sills },
			func(s *Sill) string { return s.Name }, checkSill),
		many("roller", "a roller blind at an opening", rollerKeys, func(p *Project) *[]Roller { return &p.Rollers },
			func(ro *Roller) string { return ro.Name }, checkRoller),
		many("blind", "a slatted blind at an opening", blindKeys, func(p *Project) *[]Blind { return &p.Blinds },
			func(b *Blind) string { return b.Name }, checkBlind),
		many("louvres", "slats in a strip of an opening", louvresKeys, func(p *Project) *[]Louvres { return &p.Louvres },
			func(l *Louvres) string { return l.Name }, checkLouvres),
		many(anidolicTable, "an anidolic ceiling behind an opening", anidolicCeilingKeys, func(p *Project) *[]AnidolicCeiling { return &p.AnidolicCeilings },
			func(c *AnidolicCeiling) string { return c.Name }, checkAnidolicCeiling),
		many(controlTable, "a rule by which systems are operated", controlKeys, func(p *Project) *[]Control { return &p.Controls },
			func(c *Control) string { return c.Name }, checkControl),
		many("viewpoint", "an eye that is checked for glare", viewpointKeys, func(p *Project) *[]Viewpoint { return &p.Viewpoints },
			func(v *Viewpoint) string { return v.Name }, checkViewpoint),
		many("view_grid", "eyes all over an area, each looking in several directions", viewGridKeys, func(p *Project) *[]ViewGrid { return &p.ViewGrids },
			func(g *ViewGrid) string { return g.Name }, checkViewGrid),
		many("work_plane", "a plane that is checked for daylight", workPlaneKeys, func(p *Project) *[]WorkPlane { return &p.WorkPlanes },
			func(w *WorkPlane) string { return w.Name }, checkWorkPlane),
		one("criteria", "the levels asked for", slices.Concat(criteriaKeys, wantedKeys), func(p *Project) *Criteria { return &p.Criteria }, checkCriteria),
		many("limit", "a limit of your own on a series of results", limitKeys, func(p *Project) *[]Limit { return &p.Limits }, nil, checkLimit),
		one("simulation", "how finely is computed", simulationKeys, func(p *Project) *Simulation { return &p.Simulation }, checkSimulation),
	}
}

var projectKeys = []key[Project]{
	{spec{name: "title", about: "shown on every result"}, func(p *Project) any { return &p.Title }},
	{spec{name: "invented", about: "the data are invented; marked on every result", def: "false", source: "a project is real unless it says otherwise"}, func(p *Project) any { return &p.Invented }},
}
