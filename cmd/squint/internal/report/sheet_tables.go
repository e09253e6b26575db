package report

import (
	"fmt"
	"slices"
	"strings"

	sheet "squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene/project"
)

// sheetTables are the tables of method and inputs.
func sheetTables(r *study.Result, o Options, f paths) []sheet.Table {
	return slices.DeleteFunc([]sheet.Table{glareTable(r), planeTable(r), useTable(r), hazardTable(r), finishTable(r.Project), weatherTable(r, o, f), fileTable(r, o, f), settingsTable(r), hoursTable(r)},
		func(t sheet.Table) bool { return len(t.Rows) == 0 })
}

func glareTable(r *study.Result) sheet.Table {
	t := sheet.Table{Title: "Glare at every level of EN 17037:2018", Head: []string{"Viewpoint"}, Numbers: []bool{false},
		Note: "Share of the hours in use over each level's daylight glare probability, with what it surely and possibly is; at most 5 % are allowed."}
	for _, l := range verdict.ProtectionLevels {
		t.Head, t.Numbers = append(t.Head, fmt.Sprintf("%s (DGP %.2f)", l.Name, l.DGP)), append(t.Numbers, true)
	}
	for i := range r.Views {
		v := &r.Views[i]
		cells := []string{plain(subject(v))}
		for k, h := range v.Hours {
			cells = append(cells, fmt.Sprintf("%s (%s to %s), %s", percent(h.Share.Estimate), percent(h.Share.Surely), percent(h.Share.Possibly), v.Levels[k].Outcome))
		}
		t.Rows = append(t.Rows, cells)
	}
	return t
}

func planeTable(r *study.Result) sheet.Table {
	t := sheet.Table{Title: "Daylight on the work planes", Head: []string{"Work plane", "Daylight factor, median", "DA 300 lx", "DA at the rear", "UDI 100 to 3,000 lx", "sDA", "ASE"},
		Numbers: []bool{false, true, true, true, true, true, true}}
	for i := range r.Planes {
		p := &r.Planes[i]
		t.Head[5], t.Head[6] = p.SDA.Label, p.ASE.Label // the same for all
		t.Rows = append(t.Rows, []string{plain(p.Plane.Name), percent(p.Factors.Median), percent(p.MeanDA), percent(p.RearDA), percent(p.MeanUDI.Useful()), percent(p.SDA.Share.Estimate), percent(p.ASE.Share.Estimate)})
	}
	return t
}

func hazardTable(r *study.Result) sheet.Table {
	t := sheet.Table{Title: "Sun that mirrors concentrate", Head: []string{"Where", "Greatest concentration", "When and by what"},
		Note: "A concentration is judged by no limit here; have it looked into before anything is built."}
	if r.Hazard == nil {
		return t
	}
	for _, x := range hazardPlaces(r.Hazard) {
		if x.peak != nil {
			t.Rows = append(t.Rows, []string{x.words, timesWords(x.peak), peakWords(r.Calendar, x.peak, x.peak == r.Hazard.Chain)})
		}
	}
	return t
}

func finishTable(p *project.Project) sheet.Table {
	t := sheet.Table{Title: "Finishes", Head: []string{"Finish", "Type", "Values"}}
	for i := range p.Finishes {
		x := &p.Finishes[i]
		t.Rows = append(t.Rows, []string{plain(x.Name), x.Type, finishValues(x)})
	}
	return t
}

func finishValues(x *project.Finish) string {
	var parts []string
	say := func(what string, v float64) { parts = append(parts, what+" "+decimals(v, 3)) }
	switch x.Type {
	case "matte":
		say("reflectance", x.Reflectance)
	case "mirror":
		say("specular reflectance", x.SpecularReflectance)
		say("diffuse", x.DiffuseReflectance)
	case "glossy":
		say("total reflectance", x.TotalReflectance)
		say("specular share", x.SpecularShare)
		say("spread in degrees", x.SpreadDeg)
	case "glazing":
		if len(x.Table) > 0 {
			parts = append(parts, fmt.Sprintf("a table of %d angles", len(x.Table)))
		} else {
			say("transmittance", x.Transmittance)
			parts = append(parts, count(x.Panes, "pane", "panes"))
		}
	case "diffuser":
		say("diffuse transmittance", x.DiffuseTransmittance)
		say("reflectance", x.Reflectance)
	case "cloth":
		say("openness", x.Openness)
		say("diffuse transmittance", x.DiffuseTransmittance)
		say("reflectance", x.Reflectance)
	case "perforated":
		say("open share", x.OpenShare)
		parts = append(parts, "base "+plain(x.Base))
	}
	return strings.Join(parts, ", ")
}

func weatherTable(r *study.Result, o Options, f paths) sheet.Table {
	text, _ := momentText(r.Climate, r.Project)
	return sheet.Table{Title: "Weather", Rows: [][]string{
		{"File", f.in(weatherText(r.Climate.Year))}, {"Moment", f.in(text)}, {"Hours with daylight", hours(r.Calendar.InHours(len(r.Climate.Moments)))},
		{"Skies moved into the model's range", whole(float64(r.Climate.Clamped))}}}
}

func fileTable(r *study.Result, o Options, f paths) sheet.Table {
	t := sheet.Table{Title: "Inputs", Head: []string{"File", "SHA-256", "Content"}}
	t.Rows = append(t.Rows, []string{f.of(r.Project.File), r.Project.Hash, "project"}, []string{f.of(r.Climate.Year.File), o.WeatherSHA256, "weather"})
	for _, m := range r.Scene.Meshes {
		t.Rows = append(t.Rows, []string{f.of(m.File), m.SHA256, fmt.Sprintf("%s, %s", m.Role, count(m.Triangles, "triangle", "triangles"))})
	}
	return t
}

func settingsTable(r *study.Result) sheet.Table {
	return sheet.Table{Title: "Settings", Rows: [][]string{
		{"Criteria", criteriaText(r.Project)}, {"Project", settingsText(r.Project)},
		{"Texels", fmt.Sprintf("%s sides, cut %s times as coarsely as asked", whole(float64(r.Settings.TexelSides)), decimals(r.Settings.Coarsen, 2))},
		{"Confidence", fmt.Sprintf("%s over all viewpoints together; hours are bracketed by %s standard errors, sensors by %s", percent(r.Settings.Confidence), fixed(r.Settings.ZViews, 2), fixed(r.Settings.ZSensors, 2))}}}
}

func hoursTable(r *study.Result) sheet.Table {
	t := sheet.Table{Title: "Which hours count", Head: []string{"Metric", "Hours", "Source"}}
	for _, h := range daylight.HourRules {
		t.Rows = append(t.Rows, []string{h.Metric, h.Base.String(), h.Source})
	}
	return t
}
