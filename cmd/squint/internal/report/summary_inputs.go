package report

import (
	"math"

	"squint/cmd/squint/internal/study"
)

type inputsJSON struct {
	Project fileJSON    `json:"project"`
	Meshes  []meshJSON  `json:"meshes"`
	Weather weatherJSON `json:"weather"`
}

// fileJSON names a file as seen from the project file's folder.
type fileJSON struct {
	File   string  `json:"file"`
	SHA256 *string `json:"sha256"` // null: unknown
}

type meshJSON struct {
	fileJSON
	Role       string `json:"role"`
	Triangles  int    `json:"triangles"`
	Degenerate int    `json:"without_area"`
	MinM       vector `json:"min_m"`
	MaxM       vector `json:"max_m"`
}

type weatherJSON struct {
	fileJSON
	Format         string `json:"format"`
	Place          string `json:"place"`
	LatitudeDeg    number `json:"latitude_deg"`
	LongitudeDeg   number `json:"longitude_deg"`
	UTCOffsetH     number `json:"utc_offset_h"`
	ElevationM     number `json:"elevation_m"`
	MomentOffsetH  number `json:"moment_offset_h"` // used, from the end of the labelled hour
	FittedOffsetH  number `json:"fitted_moment_offset_h"`
	ClaimedOffsetH number `json:"claimed_moment_offset_h"`
	ClosureWm2     number `json:"fitted_closure_w_m2"` // root mean square
	Text           string `json:"moment_text"`
	Daylight       number `json:"records_with_daylight"`
	Clamped        int    `json:"skies_moved_into_range"`
}

// settingsJSON leaves the number of threads out: results do not depend on it.
type settingsJSON struct {
	StepMin         int    `json:"step_min,omitempty"` // 0: steps are the weather file's hours
	Seed            uint64 `json:"seed"`
	Batches         int    `json:"batches"`
	FisheyePixels   int    `json:"fisheye_pixels"`
	SamplesPerPixel int    `json:"samples_per_pixel"`
	SensorSamples   int    `json:"sensor_samples"`
	TexelM          number `json:"texel_m"`
	TexelSamples    int    `json:"texel_samples"`
	Photons         int    `json:"photons"`
	MemoryMiB       int    `json:"memory_mib"`
	TexelSides      int    `json:"texel_sides"`
	Coarsened       number `json:"texels_coarsened"` // 1: as asked
	Confidence      number `json:"confidence"`
	ErrorsViews     number `json:"standard_errors_views"` // by which brackets are wide
	ErrorsSensors   number `json:"standard_errors_sensors"`
	Kernel          string `json:"kernel"`
	NorthDeg        number `json:"north_deg"`

	Use               useJSON    `json:"use"`
	GroundReflectance [12]number `json:"ground_reflectance"`
	Glare             string     `json:"criterion_glare"`
	Provision         string     `json:"criterion_provision"`
}

type useJSON struct {
	Days     string `json:"days"`
	FromH    number `json:"from_h"`
	ToH      number `json:"to_h"`
	Holidays int    `json:"holidays"`
	Saving   bool   `json:"daylight_saving"`
}

func sha(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}

func inputs(r *study.Result, o Options, f paths) inputsJSON {
	y, c := r.Climate.Year, r.Climate
	text, _ := momentText(c, r.Project)
	j := inputsJSON{Project: fileJSON{f.of(r.Project.File), sha(r.Project.Hash)}, Meshes: []meshJSON{}}
	for _, m := range r.Scene.Meshes {
		j.Meshes = append(j.Meshes, meshJSON{fileJSON{f.of(m.File), sha(m.SHA256)}, m.Role, m.Triangles, m.Degenerate, toVector(m.Bounds.Min), toVector(m.Bounds.Max)})
	}
	fitted := math.NaN()
	closure := math.NaN()
	if c.Fit.Decided {
		fitted, closure = c.Fit.OffsetH, c.Fit.RMSWm2
	}
	j.Weather = weatherJSON{fileJSON: fileJSON{f.of(y.File), sha(o.WeatherSHA256)}, Format: y.Format, Place: y.Site.Name,
		LatitudeDeg: number(y.Site.LatitudeDeg), LongitudeDeg: number(y.Site.LongitudeDeg), UTCOffsetH: number(y.Site.UTCOffsetH), ElevationM: number(y.Site.ElevationM),
		MomentOffsetH: number(c.OffsetH), FittedOffsetH: number(fitted), ClaimedOffsetH: number(c.Fit.ClaimedOffsetH), ClosureWm2: number(closure),
		Text: f.in(text), Daylight: number(r.Calendar.InHours(len(c.Moments))), Clamped: c.Clamped}
	return j
}

func settings(r *study.Result) settingsJSON {
	s, p := r.Project.Simulation, r.Project
	j := settingsJSON{Seed: s.Seed, Batches: s.Batches, FisheyePixels: s.FisheyePixels, SamplesPerPixel: s.SamplesPerPixel,
		SensorSamples: s.SensorSamples, TexelM: number(s.TexelM), TexelSamples: s.TexelSamples, Photons: s.Photons, MemoryMiB: s.MemoryMiB,
		TexelSides: r.Settings.TexelSides, Coarsened: number(r.Settings.Coarsen), Confidence: number(r.Settings.Confidence),
		ErrorsViews: number(r.Settings.ZViews), ErrorsSensors: number(r.Settings.ZSensors), Kernel: r.Settings.Kernel, NorthDeg: number(p.Site.NorthDeg),
		Use:   use(p.Occupancy),
		Glare: p.Criteria.Glare, Provision: p.Criteria.Provision}
	if s.StepMin > 0 && s.StepMin < 60 {
		j.StepMin = s.StepMin
	}
	for i, g := range p.Ground.Reflectance {
		j.GroundReflectance[i] = number(g)
	}
	return j
}

// at is a value of a series, NaN beyond its end.
func at(v []float64, i int) number {
	if i >= len(v) {
		return number(math.NaN())
	}
	return number(v[i])
}
