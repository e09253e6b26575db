package page

import "squint/glare/verdict"

// Design is what a page says and draws of one study, save for the packed
// numbers. Lengths in metres, angles in radians, directions in the model's axes.
type Design struct {
	Schema        string `json:"schema"`
	SchemaVersion int    `json:"schema_version"`
	Words

	NorthRad float64 `json:"north"` // azimuth of the model's +y
	FromH    float64 `json:"from_h"`
	ToH      float64 `json:"to_h"`
	PerHour  int     `json:"per_hour"` // records in an hour
	Levels   []Level `json:"levels"`
	Asked    int     `json:"asked"` // of Levels, -1 for none
	Sources  Sources `json:"sources"`

	Records   Blob     `json:"records"` // by record: used, standing
	Days      Blob     `json:"days"`    // by day: shift of the clock, sunrise, sunset
	Moments   Blob     `json:"moments"` // by moment with daylight
	Standings []string `json:"standings"`

	Views  []View  `json:"views"`
	Planes []Plane `json:"planes"`
	Room   Room    `json:"room"`
}

// Words are the texts, as the rest of the report has them.
type Words struct {
	Title       string `json:"title"`
	Alternative string `json:"alternative"`
	About       string `json:"about"`
	Version     string `json:"version"`
	Invented    bool   `json:"invented"`

	Outcome  string    `json:"outcome"`
	Sentence string    `json:"sentence"` // the one to remember
	Verdicts []Verdict `json:"verdicts"`
	Caveat   string    `json:"caveat"`

	Cautions  []string `json:"cautions"`
	Warnings  []string `json:"warnings"`
	Notes     []string `json:"notes"`
	Positions []string `json:"positions"`

	Worst  [][]string `json:"worst"` // by viewpoint: caption of its worst hour
	Tables []Table    `json:"tables"`
	Row    Row        `json:"row"`
}

// Verdict is one criterion's, in words.
type Verdict struct {
	Criterion string `json:"criterion"`
	Source    string `json:"source"`
	Subject   string `json:"subject"`
	Outcome   string `json:"outcome"`
	Text      string `json:"text"`
}

// Table is any table of texts. Numbers marks the columns set to the right.
type Table struct {
	Title   string     `json:"title"`
	Note    string     `json:"note"`
	Head    []string   `json:"head"`
	Numbers []bool     `json:"numbers"`
	Rows    [][]string `json:"rows"`
}

// Row is what alternatives are compared by; a share that does not exist is
// negative.
type Row struct {
	Views     int     `json:"views"`
	ViewsMet  int     `json:"views_met"`
	WorstView string  `json:"worst_view"`
	WorstOver float64 `json:"worst_over"`
	RearDA    float64 `json:"rear_da"`
	MedianDF  float64 `json:"median_df"`
	SDA       float64 `json:"sda"`
	ASE       float64 `json:"ase"`
}

// Sources says which pixels count as sources of glare: those above CdM2, or
// where Of is not "" above so many times the mean of the field or of the sight.
type Sources struct {
	Of       string  `json:"of"` // "", "field" or "sight"
	CdM2     float64 `json:"cd_m2"`
	Multiple float64 `json:"multiple"`
	SightRad float64 `json:"sight"` // half angle of the sight's cone
}

// Level is a level of protection from glare.
type Level struct {
	Name  string  `json:"name"`
	DGP   float64 `json:"dgp"`
	Share float64 `json:"share"`
}

// View is one viewpoint.
type View struct {
	Name     string        `json:"name"`
	Subject  string        `json:"subject"`
	Position [3]float64    `json:"position"`
	Axes     [3][3]float64 `json:"axes"` // forward, left, up
	Grid     bool          `json:"grid"` // one of a view grid, with neighbours at its own place
	Outcome  string        `json:"outcome"`
	Text     string        `json:"text"`
	When     string        `json:"when"`
	Over     float64       `json:"over"` // share over the asked level, -1 for none
	Causes   []string      `json:"causes"`
	Series   Blob          `json:"series"` // by record: DGP, its error, Ev, cause

	Worst     int     `json:"worst"` // record, -1 for none
	WorstPx   int     `json:"worst_px"`
	WorstShot Blob    `json:"worst_shot"`      // luminance of the hour at full size, discs
	Threshold float64 `json:"worst_threshold"` // that sources of it exceed, cd/m2
	HasShots  bool    `json:"has_shots"`

	Shots Shots  `json:"shots"`
	Small Shots  `json:"small"` // of the hours in use, with fewer pixels
	Seen  []Blob `json:"seen"`  // by standing: what stands in each pixel, WorstPx across; "" where not kept
}

// Shots are the pictures of any hour; see package film for the numbers. A page
// may hold the first of the steps only, and of a view the small ones alone.
type Shots struct {
	Pixels  int     `json:"pixels"`
	Grain   int     `json:"grain"`
	Least   float64 `json:"least"`
	StepLn  float64 `json:"step"`
	Frames  int     `json:"frames"`
	Points  int     `json:"points"`
	Numbers Blob    `json:"numbers"` // all but the patterns
	Steps   []Step  `json:"steps"`
}

// Step is a few patterns more, and what is then left: the median and the 95th
// percentile of relative differences.
type Step struct {
	Rank    int     `json:"rank"` // of all patterns up to here
	Median  float64 `json:"median_error"`
	Wide    float64 `json:"wide_error"`
	Numbers Blob    `json:"numbers"`
}

// Plane is one work plane.
type Plane struct {
	Name     string       `json:"name"`
	HeightM  float64      `json:"height"`
	SpacingM float64      `json:"spacing"`
	Polygon  [][2]float64 `json:"polygon"`
	Metrics  []Metric     `json:"metrics"`
	Points   Blob         `json:"points"` // x, y in millimetres from Origin; metrics
	Origin   [2]float64   `json:"origin"`
	Mean     Blob         `json:"mean"` // by moment: mean illuminance, lx
	Shots    Shots        `json:"shots"`
}

// Metric is a value that each sensor has over the year.
type Metric struct {
	Key   string  `json:"key"`
	Title string  `json:"title"`
	Unit  string  `json:"unit"` // "%" or "h"
	Most  float64 `json:"most"` // end of its scale
	Scale float64 `json:"scale"`
	Digit int     `json:"digits"`
}

// Room is the geometry. What moves is a mesh for each opening and state; what
// stands at a record are the meshes of its standing.
type Room struct {
	Min      [3]float64 `json:"min"`
	Max      [3]float64 `json:"max"`
	GroundM  float64    `json:"ground"`
	Parts    []PartName `json:"parts"` // of all standings
	Finishes []Finish   `json:"finishes"`
	Openings []Opening  `json:"openings"`
	Fabric   Mesh       `json:"fabric"`
	Systems  []Mesh     `json:"systems"`
	Stands   [][]int    `json:"stands"`   // by standing: of Systems
	Left     []int      `json:"left_out"` // by standing: triangles that are not drawn
}

// PartName names a part of the geometry.
type PartName struct {
	Name string `json:"name"`
	Kind int    `json:"kind"` // scene.Kind
}

// Finish says how a surface is drawn and what it does to the sun.
type Finish struct {
	Name    string  `json:"name"`
	Diffuse float64 `json:"diffuse"` // reflectance, larger side
	Matte   float64 `json:"matte"`   // the same where that is all that it does, on both sides alike; else 0
	Mirror  float64 `json:"mirror"`  // at normal incidence
	Through float64 `json:"through"` // straight, at normal incidence
	Veil    float64 `json:"veil"`    // scattered transmittance
}

// Opening is a rectangle: its corners in order.
type Opening struct {
	Name    string        `json:"name"`
	Corners [4][3]float64 `json:"corners"`
	Outward [3]float64    `json:"outward"`
}

// Mesh is triangles: corners as 16-bit steps between Min and Max.
type Mesh struct {
	Min     [3]float64 `json:"min"`
	Max     [3]float64 `json:"max"`
	Numbers Blob       `json:"numbers"`
}

// levels are those of the standard.
func levels() (out []Level) {
	for _, l := range verdict.ProtectionLevels {
		out = append(out, Level{l.Name, l.DGP, l.TimeShare})
	}
	return out
}
