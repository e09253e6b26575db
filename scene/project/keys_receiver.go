package project

import "slices"

var viewpointKeys = []key[Viewpoint]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(v *Viewpoint) any { return &v.Name }},
	{spec{name: "position_m", about: "of the eye", required: true, in: coordinate}, func(v *Viewpoint) any { return &v.PositionM }},
	{spec{name: "azimuth_deg", about: "direction of view, clockwise from north", in: anyAngle}, func(v *Viewpoint) any { return &v.AzimuthDeg }},
	{spec{name: "toward_m", about: "instead of azimuth_deg: the point of the model that is looked at", in: coordinate}, func(v *Viewpoint) any { return &v.TowardM }},
	{spec{name: "pitch_deg", about: "with azimuth_deg: above the horizon", in: within{lo: -90, hi: 90}, def: "0", source: own}, func(v *Viewpoint) any { return &v.PitchDeg }},
	inRoom(func(v *Viewpoint) *string { return &v.Room }),
}

func checkViewpoint(r *reader, n *node, v *Viewpoint) {
	const name = "viewpoint"
	v.Line = n.line
	switch {
	case n.has("azimuth_deg") && n.has("toward_m"):
		r.reject(n, name, "toward_m", "got azimuth_deg too; want one of the two")
	case !n.has("azimuth_deg") && !n.has("toward_m"):
		r.reject(n, name, "azimuth_deg", "missing; want an azimuth in degrees, or toward_m")
	case n.has("toward_m") && n.has("pitch_deg"):
		r.reject(n, name, "pitch_deg", "got toward_m too, which holds the pitch; leave pitch_deg out")
	}
	if v.TowardM != nil && n.good("position_m") && *v.TowardM == v.PositionM {
		r.reject(n, name, "toward_m", "got the eye's own position; want a point to look at")
	}
}

var workPlaneKeys = []key[WorkPlane]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(w *WorkPlane) any { return &w.Name }},
	{spec{name: "polygon_m", about: "outline in x and y", required: true, in: coordinate}, func(w *WorkPlane) any { return &w.PolygonM }},
	{spec{name: "height_m", about: "z of the plane in the model, above the floor at z = 0", in: coordinate, def: "0.85", source: en17037}, func(w *WorkPlane) any { return &w.HeightM }},
	{spec{name: "spacing_m", about: "between sensors; 0 for the cell rule of EN 17037", in: within{hi: 10}, def: "0", source: en17037}, func(w *WorkPlane) any { return &w.SpacingM }},
	{spec{name: "perimeter_m", about: "band along the outline without sensors", in: within{hi: 5}, def: "0.5", source: en17037}, func(w *WorkPlane) any { return &w.PerimeterM }},
	inRoom(func(w *WorkPlane) *string { return &w.Room }),
}

// minSpacingM keeps a slip from asking for millions of sensors.
const minSpacingM = 0.02

func checkWorkPlane(r *reader, n *node, w *WorkPlane) {
	const name = "work_plane"
	w.Line = n.line
	if n.good("spacing_m") && w.SpacingM > 0 && w.SpacingM < minSpacingM {
		r.reject(n, name, "spacing_m", "got %g, want 0 or at least %g", w.SpacingM, minSpacingM)
	}
	if n.has("polygon_m") && n.good("polygon_m") {
		if why := polygonProblem(w.PolygonM); why != "" {
			r.reject(n, name, "polygon_m", "%s", why)
		}
	}
}

var criteriaKeys = []key[Criteria]{
	{spec{name: "glare", about: "level of protection from glare, EN 17037", choices: levels, def: `"minimum"`, source: "lowest level recommended, " + en17037}, func(c *Criteria) any { return &c.Glare }},
	{spec{name: "provision", about: "level of daylight provision, EN 17037", choices: levels, def: `"minimum"`, source: "lowest level recommended, " + en17037}, func(c *Criteria) any { return &c.Provision }},
	{spec{name: "source_rule", about: "what counts as a source of glare: brighter than a fixed luminance, than a multiple of the whole field's mean, or of the mean about the line of sight", choices: sourceRules, def: `"luminance"`, source: pierson}, func(c *Criteria) any { return &c.SourceRule }},
	{spec{name: "source_luminance", about: "with source_rule luminance, cd/m2", in: within{lo: 100, hi: 100000}, def: "2000", source: pierson}, func(c *Criteria) any { return &c.SourceLuminance }},
	{spec{name: "source_multiple", about: "with the other two rules", in: within{lo: 1, hi: 20}, def: "4", source: "Wienold & Christoffersen 2006, lower end of the range they give, from memory"}, func(c *Criteria) any { return &c.SourceMultiple }},
}

// sourceRules are the three published ways of finding sources of glare.
var sourceRules = []string{"luminance", "field mean", "sight mean"}

const pierson = "Pierson, Wienold & Bodart 2018, LEUKOS, from memory"

// soilings are what Simulation.Soiling may be.
var soilings = []string{"clean", "average", "neglected"}

var simulationKeys = []key[Simulation]{
	{spec{name: "seed", about: "of all random numbers", def: "1", source: own}, func(s *Simulation) any { return &s.Seed }},
	{spec{name: "batches", about: "independent repetitions that give the confidence", in: within{lo: 8, hi: 64}, def: "8", source: own}, func(s *Simulation) any { return &s.Batches }},
	{spec{name: "fisheye_pixels", about: "across a view, an even number", in: within{lo: 16, hi: 1024}, def: "96", source: own}, func(s *Simulation) any { return &s.FisheyePixels }},
	{spec{name: "samples_per_pixel", about: "a multiple of batches", in: within{lo: 8, hi: 65536}, def: "8", source: own}, func(s *Simulation) any { return &s.SamplesPerPixel }},
	{spec{name: "sensor_samples", about: "directions per sensor, a multiple of batches", in: within{lo: 8, hi: 1 << 24}, def: "4096", source: own}, func(s *Simulation) any { return &s.SensorSamples }},
	{spec{name: "texel_m", about: "size of the pieces into which surfaces are cut", in: within{lo: 0.01, hi: 2}, def: "0.2", source: own}, func(s *Simulation) any { return &s.TexelM }},
	{spec{name: "texel_samples", about: "paths per piece, a multiple of batches", in: within{lo: 8, hi: 1 << 20}, def: "256", source: own}, func(s *Simulation) any { return &s.TexelSamples }},
	{spec{name: "photons", about: "light particles shot from the sun at what mirrors, each hour, over all batches; 0 leaves mirrored sunlight out", in: within{lo: 0, hi: 1 << 24}, def: "4000", source: own}, func(s *Simulation) any { return &s.Photons }},
	{spec{name: "memory_mib", about: "upper bound of the working memory", in: within{lo: 64, hi: 1 << 20}, def: "1024", source: own}, func(s *Simulation) any { return &s.MemoryMiB }},
	{spec{name: "step_min", about: "length of the steps of the year, minutes: 60, or 30, 20, 15, 10 or 5 between the records of the weather file", in: within{lo: 5, hi: 60}, def: "60", source: "weather files are hourly"}, func(s *Simulation) any { return &s.StepMin }},
	{spec{name: "soiling", about: "how dirty finishes with a loss_per_month are, the same all the year: not at all, as their mean over the year, or as just before cleaning", choices: soilings, def: `"clean"`, source: own}, func(s *Simulation) any { return &s.Soiling }},
}

// stepsMin are what Simulation.StepMin may be.
var stepsMin = []int{60, 30, 20, 15, 10, 5}

func checkSimulation(r *reader, n *node, s *Simulation) {
	if n.good("fisheye_pixels") && s.FisheyePixels%2 != 0 {
		r.reject(n, "simulation", "fisheye_pixels", "got %d, want an even number: pixels are joined two by two to see what their width does", s.FisheyePixels)
	}
	if n.good("step_min") && !slices.Contains(stepsMin, s.StepMin) {
		r.reject(n, "simulation", "step_min", "got %d, want 60, 30, 20, 15, 10 or 5", s.StepMin)
	}
	if !n.good("batches") {
		return
	}
	for _, c := range []struct {
		key   string
		value int
	}{{"samples_per_pixel", s.SamplesPerPixel}, {"sensor_samples", s.SensorSamples}, {"texel_samples", s.TexelSamples}} {
		if n.good(c.key) && c.value%s.Batches != 0 {
			key := c.key
			if !n.has(key) {
				key = "batches"
			}
			r.reject(n, "simulation", key, "got %s %d with %d batches, want a multiple, such as %d", c.key, c.value, s.Batches, (c.value/s.Batches+1)*s.Batches)
		}
	}
	if n.good("photons") && s.Photons > 0 && s.Photons < s.Batches {
		r.reject(n, "simulation", "photons", "got %d with %d batches, want at least one a batch, usually thousands, or 0 to leave mirrored sunlight out", s.Photons, s.Batches)
	}
}
