package report

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/weather"
)

// headerIndent is where the texts of the header begin.
const headerIndent = 11

// Headers prints what is about to be computed; of further alternatives only
// what it has not said yet.
type Headers struct{ said map[string]bool }

// Print tells the weather and the moment its records stand for, the geometry,
// what was noticed, and every setting and default.
func (hs *Headers) Print(w io.Writer, in *study.Input) error {
	var p page
	pr, f := in.Project, newPaths(in.Project, in.Scene)
	if hs.said == nil {
		hs.said = map[string]bool{}
		p.head(title(pr, f))
		if invented(pr, in.Climate.Year) {
			p.item(0, inventedWords, warm(), len(inventedWords)+1, "- not those of a real place or building")
		}
		p.gap()
	}
	if k := alternativeOf(pr); k >= 0 {
		p.item(0, "Design", bold(), headerIndent, designText(pr, k))
	}
	say := func(word, text string) {
		if text = f.in(text); !hs.said[text] {
			hs.said[text] = true
			p.item(0, word, bold(), headerIndent, text)
		}
	}
	list := func(word string, texts []string) {
		for _, t := range texts {
			if !hs.said[f.in(t)] {
				say(word, t)
				word = ""
			}
		}
	}
	text, warns := momentText(in.Climate, pr)
	say("Weather", weatherText(in.Climate.Year))
	if !warns {
		say("", text)
	} else if !hs.said[f.in(text)] {
		hs.said[f.in(text)] = true
		p.item(0, "Warning", warm(), headerIndent, f.in(text))
	}
	var meshes []string
	for _, m := range in.Scene.Meshes {
		meshes = append(meshes, meshText(m))
	}
	list("Geometry", meshes)
	say("Checked", checkedText(in))
	say("Criteria", criteriaText(pr))
	say("Settings", settingsText(pr))
	list("Defaults", defaultTexts(pr))
	list("Notes", in.Notes)
	p.gap()
	return p.print(w)
}

// alternativeOf is the place of the project's alternative among those of its
// file, -1 for a project of one design.
func alternativeOf(p *project.Project) int {
	return slices.IndexFunc(p.Alternatives, func(a project.Alternative) bool { return a.Name == p.Alternative })
}

func designText(p *project.Project, k int) string {
	a := p.Alternatives[k]
	s := fmt.Sprintf("%s, %d of %d", a.Name, k+1, len(p.Alternatives))
	if a.About != "" {
		s += ": " + a.About
	}
	return s
}

func title(p *project.Project, f paths) string {
	if strings.TrimSpace(p.Title) != "" {
		return p.Title
	}
	return f.of(p.File)
}

func weatherText(y *weather.Year) string {
	s := fmt.Sprintf("%s (%s)", y.File, y.Format)
	if y.Site.Name != "" {
		s += ": " + y.Site.Name
	}
	return s + fmt.Sprintf(", %s, %s, UTC%+g h, %s m above the sea",
		coordinate(y.Site.LatitudeDeg, "N", "S"), coordinate(y.Site.LongitudeDeg, "E", "W"), y.Site.UTCOffsetH, decimals(y.Site.ElevationM, 0))
}

func meshText(m scene.MeshSummary) string {
	size := m.Bounds.Max
	size.X, size.Y, size.Z = size.X-m.Bounds.Min.X, size.Y-m.Bounds.Min.Y, size.Z-m.Bounds.Min.Z
	s := fmt.Sprintf("%s (%s): %s, %s x %s x %s m from (%s, %s, %s)", m.File, m.Role, count(m.Triangles, "triangle", "triangles"),
		fixed(size.X, 2), fixed(size.Y, 2), fixed(size.Z, 2), decimals(m.Bounds.Min.X, 2), decimals(m.Bounds.Min.Y, 2), decimals(m.Bounds.Min.Z, 2))
	if m.Degenerate > 0 {
		s += ", " + whole(float64(m.Degenerate)) + " without area left out"
	}
	return s
}

func checkedText(in *study.Input) string {
	s := count(len(in.Scene.Viewpoints), "viewpoint", "viewpoints")
	if n := len(in.Scene.WorkPlanes); n > 0 {
		s += fmt.Sprintf(", %s on %s", count(in.Scene.Sensors(), "sensor", "sensors"), count(n, "work plane", "work planes"))
	}
	return s + fmt.Sprintf("; %s in use, %s with daylight", hoursText(in.Calendar.InHours(len(in.Occupied))), hours(in.Calendar.InHours(len(in.Climate.Moments))))
}

// settingsText states every value that does not belong to one of many parts.
func settingsText(p *project.Project) string {
	s := p.Simulation
	step := ""
	if s.StepMin > 0 && s.StepMin < 60 {
		step = fmt.Sprintf("; step_min %d", s.StepMin)
	}
	rooms := ""
	for _, o := range p.Rooms {
		rooms += "; room " + o.Name + ": " + occupancyText(o.Occupancy)
	}
	return fmt.Sprintf("use %s, %s to %s h%s%s; north_deg %s; ground reflectance %s; seed %d, batches %d, fisheye_pixels %d, samples_per_pixel %d, sensor_samples %d, texel_m %s, texel_samples %d, photons %d, memory_mib %d",
		daysText(p.Occupancy.Days), decimals(p.Occupancy.FromH, 2), decimals(p.Occupancy.ToH, 2), savingText(p.Occupancy), rooms,
		decimals(p.Site.NorthDeg, 3), groundText(p.Ground), s.Seed, s.Batches, s.FisheyePixels, s.SamplesPerPixel, s.SensorSamples,
		decimals(s.TexelM, 3), s.TexelSamples, s.Photons, s.MemoryMiB) + step
}

func daysText(days [7]bool) string {
	names := [7]string{"mon", "tue", "wed", "thu", "fri", "sat", "sun"}
	var on []string
	for i, d := range days {
		if d {
			on = append(on, names[i])
		}
	}
	return strings.Join(on, " ")
}

func savingText(o project.Occupancy) string {
	s := ""
	if n := len(o.Holidays); n > 0 {
		s = ", " + count(n, "holiday", "holidays")
	}
	if o.DaylightSavingFrom == nil || o.DaylightSavingTo == nil {
		return s + ", no daylight saving time"
	}
	return s + fmt.Sprintf(", daylight saving time %02d-%02d to %02d-%02d", o.DaylightSavingFrom.Month, o.DaylightSavingFrom.Day, o.DaylightSavingTo.Month, o.DaylightSavingTo.Day)
}

func groundText(g project.Ground) string {
	lo, hi := g.Reflectance[0], g.Reflectance[0]
	for _, r := range g.Reflectance {
		lo, hi = min(lo, r), max(hi, r)
	}
	if lo == hi {
		return decimals(lo, 3)
	}
	return decimals(lo, 3) + " to " + decimals(hi, 3) + " by month"
}

// defaultTexts are the defaults of the tables that may stand many times: what
// holds for each item whose table leaves the key out. The single tables' values
// are in settingsText.
func defaultTexts(p *project.Project) []string {
	types := map[string]bool{"": true}
	for _, f := range p.Finishes {
		types[f.Type] = true
	}
	has := map[string]bool{"mesh": len(p.Meshes) > 0, "finish": len(p.Finishes) > 0, "opening": len(p.Openings) > 0,
		"light_shelf": len(p.LightShelves) > 0, "roller": len(p.Rollers) > 0, "blind": len(p.Blinds) > 0,
		"louvres": len(p.Louvres) > 0, "sill": len(p.Sills) > 0, "anidolic_ceiling": len(p.AnidolicCeilings) > 0, "control": len(p.Controls) > 0, "viewpoint": len(p.Viewpoints) > 0, "view_grid": len(p.ViewGrids) > 0, "limit": len(p.Limits) > 0, "work_plane": len(p.WorkPlanes) > 0}
	keys := map[string][]string{}
	var order []string
	for _, k := range project.Defaults() {
		if !k.List || !has[k.Table] || !types[k.Type] {
			continue
		}
		name := k.Table
		if k.Type != "" {
			name += " " + k.Type
		}
		if keys[name] == nil {
			order = append(order, name)
		}
		keys[name] = append(keys[name], k.Name+" "+strings.Trim(k.Default, `"`))
	}
	if len(order) == 0 {
		return nil
	}
	all := []string{"what holds where the project leaves a key out:"}
	for _, name := range order {
		all = append(all, name+": "+strings.Join(keys[name], ", "))
	}
	return all
}
