package project

// Project is one project file, read, checked and completed with defaults.
// Lengths are in metres unless named MM, angles in degrees as in the file; every
// azimuth is a compass azimuth, clockwise from north. The fields named Line
// hold the line on which the item's table starts.
type Project struct {
	File     string // as given to Load
	Hash     string // SHA-256 of the file's bytes, hexadecimal
	Title    string
	Invented bool // the data are invented; marked wherever results are shown

	Site      Site
	Weather   Weather
	Ground    Ground
	Horizon   []HorizonPoint // by rising azimuth; none: a flat horizon
	Occupancy Occupancy
	Rooms     []Room // that have hours of use of their own

	Meshes           []Mesh
	Finishes         []Finish
	Openings         []Opening
	LightShelves     []LightShelf
	Sills            []Sill
	Rollers          []Roller
	Blinds           []Blind
	Louvres          []Louvres
	AnidolicCeilings []AnidolicCeiling
	Controls         []Control
	Viewpoints       []Viewpoint // then those of ViewGrids, in order
	ViewGrids        []ViewGrid
	WorkPlanes       []WorkPlane

	Criteria   Criteria
	Limits     []Limit
	Simulation Simulation

	Alternatives []Alternative // of the file; none: it has one design
	Alternative  string        // the name of this one; "" without alternatives
}

// Site says how the model lies and, where the weather file's header is wrong
// or not meant, where on earth. A nil pointer leaves the header's value.
type Site struct {
	NorthDeg     float64  // azimuth of the model's +y axis, clockwise from north
	LatitudeDeg  *float64 // north positive
	LongitudeDeg *float64 // east positive
	UTCOffsetH   *float64 // east of Greenwich positive
	ElevationM   *float64 // above sea level
}

// Weather names the weather file, as a path from the root of the file system
// given to Load.
type Weather struct {
	File string
	// MomentOffsetH, where not nil, replaces the fitted offset between a
	// record's time stamp and the moment it stands for.
	MomentOffsetH *float64
}

// Ground is the endless matte plane around the building.
type Ground struct {
	LevelM      float64     // z of the ground in the model
	Reflectance [12]float64 // January first
}

// HorizonPoint is one point of the skyline; between two points the altitude
// is interpolated along the azimuth, and from the last one on to the first.
type HorizonPoint struct{ AzimuthDeg, AltitudeDeg float64 }

// MonthDay is a day of any year.
type MonthDay struct{ Month, Day int }

// Occupancy is when the rooms are used, in clock time.
type Occupancy struct {
	Days     [7]bool // Monday first
	FromH    float64 // hours after midnight, clock time
	ToH      float64 // larger than FromH
	Holidays []MonthDay
	// From the start of the first day to the start of the second the clock
	// shows one hour more than standard time; both are nil without daylight
	// saving. The first may be the later one of the year (southern summers).
	DaylightSavingFrom, DaylightSavingTo *MonthDay
}

// Room is a room with hours of use of its own. What its table leaves out, and
// daylight saving, are those of the project's Occupancy.
type Room struct {
	Name      string
	Occupancy Occupancy
	Line      int
}

// Mesh is one geometry file and how it is put into the model: scaled to
// metres, turned so that z is up, rotated about the z axis, then moved.
type Mesh struct {
	File       string  // path from the root of the file system given to Load
	Unit       string  // "m", "cm", "mm", "ft" or "in"
	Up         string  // the file's upward axis: "y" or "z"
	Role       string  // "room" or "surroundings"
	RotateDeg  float64 // about z, positive clockwise seen from above, as azimuths are
	TranslateM [3]float64
	Finish     string       // of every group that Finishes does not name; "" for none
	Finishes   []Assignment // in the file's order
	Line       int
}

// Assignment gives a mesh's group or material a finish.
type Assignment struct {
	Name   string // group or material of the mesh
	Finish string
	Line   int
}

// Finish is a surface. Which fields count depends on Type, see the finish
// tables in keys_finish.go; the others are zero.
type Finish struct {
	Name string
	Type string // "matte", "mirror", "glossy", "glazing", "diffuser", "cloth" or "perforated"

	Reflectance         float64 // matte, diffuser; cloth: front, and back without BackReflectance
	SpecularReflectance float64 // mirror
	DiffuseReflectance  float64 // mirror

	TotalReflectance float64 // glossy
	SpecularShare    float64 // glossy: share of TotalReflectance in the lobe
	SpreadDeg        float64 // glossy: from the mirror direction to half the lobe's peak

	Transmittance float64 // glazing: visible, at normal incidence
	Panes         int     // glazing, with Transmittance
	// Table, instead of Transmittance, holds rows of angle of incidence
	// (degrees, rising from 0 to 90), transmittance and reflectance.
	Table [][3]float64

	Openness             float64  // cloth: share of straight passage
	DiffuseTransmittance float64  // diffuser, cloth
	BackReflectance      *float64 // cloth; nil: Reflectance
	CutOffDeg            float64  // cloth: incidence from which nothing passes straight; 0: none

	OpenShare      float64 // perforated: share of the area that is holes
	HoleDiameterMM float64 // perforated
	ThicknessMM    float64 // perforated
	Base           string  // perforated: finish of the sheet between the holes

	Back string // finish of the side the normal points away from; "": alike

	// Dirt, of which Simulation.Soiling says how much counts; materials.Soiling
	// says what the two mean. A back has its own, and so has a base.
	LossPerMonth   float64
	CleaningMonths int
	Line           int
}

// Opening is a rectangular window, given by its corners or found in a mesh.
type Opening struct {
	Name  string
	Group string // openings of one group are controlled together; default: its own name
	// CornersM, with HasCorners, are the corners in order around the
	// rectangle. Without OutwardDeg they run counter-clockwise seen from
	// outdoors; with it, either way round. Any corner may be the first.
	CornersM   [4][3]float64
	HasCorners bool
	MeshGroup  string // instead of corners: the mesh group that is the glass
	// OutwardDeg is the azimuth to which the opening faces; of no effect for
	// one that lies flat, which faces up.
	OutwardDeg *float64
	Glazing    string // finish; with a mesh group "" keeps the mesh's own
	// InnerGlazing is the finish of a second pane, CavityM indoors of the
	// first; "" for none.
	InnerGlazing string
	CavityM      float64
	Line         int
}

// LightShelf is a shelf at an opening; system.LightShelf says what each
// dimension means.
type LightShelf struct {
	Name, Opening                 string
	HeightM                       float64 // of the top, at the glass, above the opening's lower edge; from -1
	OutsideDepthM, InsideDepthM   float64 // from the plane of the glass, along the shelf
	ThicknessM                    float64
	OutsideTiltDeg, InsideTiltDeg float64 // from the horizontal, positive lifts the outer edge
	ExtendM                       float64 // beyond the opening, on each side
	GapM                          float64 // between glass and shelf
	OutsideShape, InsideShape     ShelfShape
	Stack                         int     // shelves above each other, the lowest at HeightM
	StackSpacingM                 float64 // from top to top
	Top, Underside                string  // finishes
	Line                          int
}

// ShelfShape is the shape of a shelf's top; system.Profile says what each
// dimension means.
type ShelfShape struct {
	Profile   string // "flat", "arc", "parabola" or "polyline"
	SagittaM  float64
	FocusM    float64
	PolylineM [][2]float64
}

// Roller is a blind of cloth at an opening. Its front is toward outdoors. Cloth
// names a finish; where it is "" the single numbers hold.
type Roller struct {
	Name, Opening        string
	Position             string   // "inside" or "outside"
	Cloth                string   // finish
	Openness             float64  // share of straight passage
	DiffuseTransmittance float64  // share that passes scattered
	Reflectance          float64  // front, and back without BackReflectance
	BackReflectance      *float64 // nil: Reflectance
	CutOffDeg            float64  // incidence from which nothing passes straight; 0: none
	Drop                 float64  // share of the opening's height that is covered, from the top
	GapM                 float64  // between glass and cloth
	Drawn                bool
	Line                 int
}

// AnidolicCeiling is an anidolic ceiling whose duct starts at an opening;
// system.AnidolicCeiling says what each dimension means.
type AnidolicCeiling struct {
	Name, Opening      string
	AxisTiltDeg        float64 // altitude of the collector's axis
	AcceptanceDeg      float64 // half-angle above the axis
	AcceptanceBelowDeg float64 // half-angle below it
	CollectorShare     float64 // of its full reach
	CollectorSpaceM    float64 // before the facade; 0: not limited
	DuctLengthM        float64 // from the glass to the outlet's far end
	DuctHeightM        float64 // 0: the opening's less the gaps
	OutletLengthM      float64 // 0: that which fits the duct
	OutletCutOffDeg    float64 // below the horizontal
	GapM               float64 // between the opening's edges and the duct
	Reflector, Casing  string  // finishes
	// Finishes of panes and of the cloth over the entrance; "" for none.
	EntranceGlazing, OutletGlazing, Roller string
	RollerDrawn                            bool
	RollerFollow                           string // "acceptance"; "": the cloth stays as it is
	Line                                   int
}

// Viewpoint is an eye. Exactly one of AzimuthDeg and TowardM is set.
type Viewpoint struct {
	Name       string
	PositionM  [3]float64
	AzimuthDeg *float64
	TowardM    *[3]float64 // a point of the model that is looked at
	PitchDeg   float64     // with AzimuthDeg; up positive
	Grid       string      // name of the ViewGrid that it is of; "" for none
	Room       string      // whose hours of use count; "": the project's own
	Line       int
}

// WorkPlane is a horizontal plane of sensors.
type WorkPlane struct {
	Name       string
	PolygonM   [][2]float64 // outline in x and y, not closed, either way round
	HeightM    float64      // z of the plane in the model
	SpacingM   float64      // between sensors; 0: the rule of Cell
	PerimeterM float64      // band along the outline without sensors
	Room       string       // whose hours of use count; "": the project's own
	Line       int
}

// Criteria are the levels asked for: "minimum", "medium", "high" or "none".
type Criteria struct {
	Glare     string // EN 17037:2018, protection from glare
	Provision string // EN 17037:2018, daylight provision
	// SourceRule, "luminance", "field mean" or "sight mean", says what counts as
	// a source of glare; the numbers belong to the first and to the other two.
	SourceRule      string
	SourceLuminance float64 // cd/m2
	SourceMultiple  float64

	// What follows is judged only where asked for: a level other than "none", a
	// class above 0, a share that is not nil.
	ProvisionOpenings   string // "vertical" or "horizontal": whose shares of the plane hold
	ProvisionFactor     string // level of EN 17037:2018, provision by daylight factor
	MedianDiffuseLx     *float64
	ViewOut             string  // level of EN 17037:2018
	ViewAbovePlaneM     float64 // of the eyes over the work plane
	Sunlight            string  // level of EN 17037:2018
	SunlightDay         *MonthDay
	SunlightAltitudeDeg *float64
	SunlightHeightM     float64 // least z of the reference point
	ClothClass          int     // EN 14501, 0 to 4

	SDAAtLeast, ASEAtMost       *float64 // shares of the plane
	GlareAutonomyAtLeast        *float64 // share of the viewpoints
	EquinoxAtLeast              *float64 // share of the plane
	EquinoxLowLx, EquinoxHighLx float64
}

// Limit is a limit of the user's own. AtLeast or AtMost or both are set.
type Limit struct {
	Name, Metric, Hours   string
	AtLeast, AtMost       *float64
	TimeShare, PlaceShare float64
	Line                  int
}

// Simulation sets how finely is computed.
type Simulation struct {
	Seed            uint64
	Batches         int // independent repetitions, for confidence
	FisheyePixels   int // across a view
	SamplesPerPixel int // a multiple of Batches
	SensorSamples   int // a multiple of Batches
	TexelM          float64
	TexelSamples    int // a multiple of Batches
	// Photons is the number of light particles that each hour's sun shoots at
	// what mirrors, over all batches: 0, which leaves mirrored sunlight out, or
	// at least Batches.
	Photons   int
	MemoryMiB int
	StepMin   int    // length of a step, minutes: 60, 30, 20, 15, 10 or 5; 0 is 60
	Soiling   string // "clean", "average" or "neglected"; the same in every month
}
