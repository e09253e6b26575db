package report

import (
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"

	sheet "squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene/project"
)

// Names of the interactive report and of what it is made of.
const (
	SheetFile     = "report.html"
	SheetDataFile = "report-data.zip"
)

// WriteSheet makes report.html in dir from the page data there, or in the
// folders below it that a comparison has. pictures names the alternative whose
// views can be seen at any hour, "" for the one that does best.
func WriteSheet(dir, pictures string) (err error) {
	var all []*sheet.Archive
	names, err := sheetFolders(dir)
	if err != nil {
		return err
	}
	for _, name := range names {
		a, err := readSheetData(filepath.Join(dir, name, SheetDataFile))
		if err != nil {
			return err
		}
		all = append(all, a)
	}
	f, err := openFolder(dir)
	if err != nil {
		return err
	}
	err = f.stage(SheetFile, func(w io.Writer) error { return sheet.Write(w, all, sheet.Options{Pictures: pictures}) })
	if err == nil {
		err = f.commit()
	}
	if err != nil {
		return errors.Join(err, f.abandon())
	}
	return nil
}

func readSheetData(path string) (a *sheet.Archive, err error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer func() { err = errors.Join(err, file.Close()) }()
	info, err := file.Stat()
	if err != nil {
		return nil, err
	}
	return sheet.Read(path, file, info.Size())
}

// sheetFolders are the folders of the designs below dir, in the order of the
// comparison; dir itself where it holds one design.
func sheetFolders(dir string) ([]string, error) {
	if _, err := os.Stat(filepath.Join(dir, AlternativesFile)); err == nil {
		return comparedFolders(dir)
	}
	if _, err := os.Stat(filepath.Join(dir, SheetDataFile)); err != nil {
		return nil, fmt.Errorf("%s: got no %s or %s in it, want a folder of results; run squint check first", dir, SheetDataFile, AlternativesFile)
	}
	return []string{""}, nil
}

// sheetWords are the texts of the interactive report.
func sheetWords(r *study.Result, o Options) sheet.Words {
	f := newPaths(r.Project, r.Scene)
	q := compared(Design{Result: r})
	w := sheet.Words{
		Title: title(r.Project, f), Alternative: q.Name, About: strings.TrimSuffix(q.About, "."), Version: o.Version,
		Invented: invented(r.Project, r.Climate.Year), Outcome: q.Outcome, Sentence: remembered(r, q), Caveat: verdict.Caveat,
		Cautions: sentences(cautions(r.Project), f), Warnings: sentences(warnings(r.Warnings, r.Climate, r.Project), f),
		Notes: sentences(r.Notes, f), Positions: texts(r.Positions, f), Verdicts: []sheet.Verdict{}, Worst: [][]string{},
		Row: sheet.Row{Views: q.Views, ViewsMet: q.ViewsMet, WorstView: q.WorstView, WorstOver: orNone(q.WorstOver), RearDA: orNone(q.RearDA),
			MedianDF: orNone(q.MedianDF), SDA: orNone(q.SDA), ASE: orNone(q.ASE), Provision: q.Provision},
	}
	for _, v := range r.Verdicts {
		w.Verdicts = append(w.Verdicts, sheet.Verdict{Criterion: v.Criterion, Source: v.Source, Subject: v.Subject, Outcome: v.Outcome.String(), Text: v.Text})
	}
	for i := range r.Views {
		var lines []string
		if v := &r.Views[i]; v.Worst != nil {
			lines = caption(r, v)
		}
		w.Worst = append(w.Worst, lines)
	}
	w.Tables = sheetTables(r, o, f)
	return w
}

// sentences begin with a capital.
func sentences(all []string, f paths) []string {
	out := texts(all, f)
	for i := range out {
		out[i] = sentence(out[i])
	}
	return out
}

// orNone is a share, negative where it does not exist.
func orNone(x number) float64 {
	if math.IsNaN(float64(x)) {
		return -1
	}
	return float64(x)
}

// remembered is the one sentence that a client keeps.
func remembered(r *study.Result, q row) string {
	var parts []string
	if q.Views > 0 {
		limit := 0.0
		for _, l := range verdict.ProtectionLevels {
			if l.Name == r.Project.Criteria.Glare {
				limit = l.TimeShare
			}
		}
		switch fails := q.Views - q.ViewsMet; {
		case fails == 0:
			parts = append(parts, fmt.Sprintf("All %s are protected from glare; %s comes nearest to the limit, with %s of the hours in use over it where %s are allowed",
				count(q.Views, "viewpoint", "viewpoints"), plain(q.WorstView), percent(float64(q.WorstOver)), percent(limit)))
		default:
			verb := "have"
			if fails == 1 {
				verb = "has"
			}
			parts = append(parts, fmt.Sprintf("%d of %s %s glare or may have it; the worst is %s, in %s of the hours in use where %s are allowed",
				fails, count(q.Views, "viewpoint", "viewpoints"), verb, plain(q.WorstView), percent(float64(q.WorstOver)), percent(limit)))
		}
	}
	if !math.IsNaN(float64(q.RearDA)) {
		parts = append(parts, fmt.Sprintf("the back of the room has 300 lx of daylight in %s of them", percent(float64(q.RearDA))))
	}
	if len(parts) == 0 {
		return "Nothing was asked."
	}
	return strings.Join(parts, "; ") + "."
}

// sheetTables are the tables of method and inputs.
func sheetTables(r *study.Result, o Options, f paths) []sheet.Table {
	return slices.DeleteFunc([]sheet.Table{glareTable(r), planeTable(r), hazardTable(r), finishTable(r.Project), weatherTable(r, o, f), fileTable(r, o, f), settingsTable(r), hoursTable(r)},
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
	t := sheet.Table{Title: "Daylight on the work planes", Head: []string{"Work plane", "Daylight factor, median", "DA 300 lx", "DA at the rear", "UDI 100 to 3,000 lx", "sDA, unshaded", "ASE"},
		Numbers: []bool{false, true, true, true, true, true, true}}
	for i := range r.Planes {
		p := &r.Planes[i]
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
		{"File", f.in(weatherText(r.Climate.Year))}, {"Moment", f.in(text)}, {"Hours with daylight", whole(float64(len(r.Climate.Moments)))},
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
		{"Criteria", criteriaText(r.Project.Criteria)}, {"Project", settingsText(r.Project)},
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
