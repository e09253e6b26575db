package scene

import (
	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/project"
	"squint/scene/sky"
	"squint/scene/system"
)

// Kind says what a part is, since ground, surroundings and rooms are cut into
// texels of different size and only the ground changes by month.
type Kind int

// The kinds of part.
const (
	Room Kind = iota
	Surroundings
	System
	Pane
	GroundPlane
)

// Part is a named portion of the geometry: a mesh group, a face of a system, a
// pane or the ground. Verdicts name parts as the reason for glare.
type Part struct {
	Name string
	Kind Kind
	// Opening is the index of the opening that a pane or system belongs to,
	// -1 where none.
	Opening int
	// Grid, where not nil, cuts the part into cells that are not cubes along the
	// axes, such as long ones along slats; TexelM is then not used.
	Grid *Grid
	// TexelM is the edge of the cells, in metres, into which the part is cut
	// for surface coefficients.
	TexelM float64
}

// Grid is a frame of unit vectors at right angles with the cells' edges along
// them, in metres.
type Grid struct {
	Axes  [3]r3.Vec
	EdgeM [3]float64
}

// Finish is a named optical surface.
type Finish struct {
	Name string
	BSDF materials.BSDF
}

// Triangle is one flat facet; its front is the side from which the vertices
// run counter-clockwise.
type Triangle struct {
	V            [3]r3.Vec
	Finish, Part int32
}

// Opening is a rectangle through which daylight enters. It serves as a portal
// for sampling, as the place systems attach to, and as a name in findings.
type Opening struct {
	Name, Group string
	Rect        system.Rect
}

// Viewpoint is one pair of eyes: a position in metres and a unit line of sight.
type Viewpoint struct {
	Name                string
	Position, Direction r3.Vec
	Grid                string // name of the project's view grid that it is of; "" for none
	Room                string // whose hours of use count; "" for the project's own
	Line                int
}

// Sensor is a point with the unit normal of the plane it measures on.
type Sensor struct {
	Position, Normal r3.Vec
	// AreaM2 is the part of the work plane the sensor stands for.
	AreaM2 float64
}

// WorkPlane is a grid of sensors under one name.
type WorkPlane struct {
	Name     string
	Sensors  []Sensor
	SpacingM float64
	HeightM  float64
	PolygonM [][2]float64
	Room     string // whose hours of use count; "" for the project's own
	Line     int
}

// Scene is the built project: immutable, shared by all workers.
type Scene struct {
	Project   *project.Project
	Triangles []Triangle
	Finishes  []Finish
	Parts     []Part
	Openings  []Opening

	Viewpoints []Viewpoint
	WorkPlanes []WorkPlane

	// GroundLevelM is the height of the endless ground.
	GroundLevelM float64
	// GroundReflectance by month, January first.
	GroundReflectance [12]float64
	Horizon           sky.Horizon
	HasHorizon        bool

	// Bounds of the project's own meshes without the ground, metres.
	Bounds r3.Box
	// Meshes describes each mesh file for the run's printout.
	Meshes []MeshSummary
	// Notes are sentences for the user: dropped triangles, missing libraries.
	Notes []string
}

// MeshSummary is what the run prints about one mesh file.
type MeshSummary struct {
	File, Role string
	Triangles  int
	Degenerate int
	Bounds     r3.Box
	SHA256     string
}

// Sensors is the number of sensors over all work planes.
func (s *Scene) Sensors() int {
	n := 0
	for _, w := range s.WorkPlanes {
		n += len(w.Sensors)
	}
	return n
}
