package report

import (
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"

	sheet "squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
)

// Names of the interactive report and of what it is made of.
const (
	SheetFile     = "report.html"
	SheetDataFile = "report-data.zip"
)

// RemakeSheet is WriteSheet of what a folder of results holds: the designs of
// its comparison, or the one design in it.
func RemakeSheet(dir, pictures string) error {
	names, err := sheetFolders(dir)
	if err != nil {
		return err
	}
	return WriteSheet(dir, names, pictures)
}

// WriteSheet makes report.html in dir from the page data of designs, whose
// folders stand below it; "" is dir itself. pictures names the alternative
// whose views can be seen at any hour, "" for the one that does best.
func WriteSheet(dir string, designs []string, pictures string) error {
	var all []*sheet.Archive
	for _, name := range designs {
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
			MedianDF: orNone(q.MedianDF), SDA: orNone(q.SDA), ASE: orNone(q.ASE)},
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
			which := "All " + count(q.Views, "viewpoint", "viewpoints") + " are"
			if q.Views == 1 {
				which = "The viewpoint is"
			}
			parts = append(parts, fmt.Sprintf("%s protected from glare; %s comes nearest to the limit, with %s of the hours in use over it where %s are allowed",
				which, plain(q.WorstView), percent(float64(q.WorstOver)), percent(limit)))
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
		parts = append(parts, fmt.Sprintf("the back of the room has 300 lx of daylight in %s of the hours in use", percent(float64(q.RearDA))))
	}
	if len(parts) == 0 {
		return "Nothing was asked."
	}
	return strings.Join(parts, "; ") + "."
}
