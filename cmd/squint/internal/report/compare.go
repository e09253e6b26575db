package report

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"time"

	"charm.land/lipgloss/v2"

	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
)

// AlternativesFile compares the designs of one project, in the folder that
// holds a folder of each.
const AlternativesFile = "alternatives.json"

// Design is one alternative's study and the name of its folder.
type Design struct {
	Result *study.Result
	Folder string
}

// Folders are names for the folders of alternatives.
func Folders(names []string) []string { return slugs(names, "design") }

// row is what an alternative is compared by.
type row struct {
	Name    string `json:"name"`
	About   string `json:"about"`
	Folder  string `json:"folder"`
	Outcome string `json:"outcome"`

	Views     int      `json:"viewpoints"`
	ViewsMet  int      `json:"viewpoints_met"`
	WorstView string   `json:"worst_viewpoint"`
	WorstOver number   `json:"worst_share_over_limit"` // of the hours in use
	RearDA    number   `json:"rear_da_300_mean"`       // third of the sensors furthest from the glass
	MedianDF  number   `json:"daylight_factor_median"`
	SDA       number   `json:"sda_unshaded"`
	ASE       number   `json:"ase"`
	Provision string   `json:"provision"`
	Positions []string `json:"positions"`
}

func compared(d Design) row {
	r := d.Result
	q := row{Folder: d.Folder, Outcome: r.Outcome.String(), WorstOver: number(math.NaN()), RearDA: number(math.NaN()),
		MedianDF: number(math.NaN()), SDA: number(math.NaN()), ASE: number(math.NaN()), Positions: append([]string{}, r.Positions...)}
	if len(r.Verdicts) == 0 {
		q.Outcome = "none"
	}
	if k := alternativeOf(r.Project); k >= 0 {
		q.Name, q.About = r.Project.Alternatives[k].Name, r.Project.Alternatives[k].About
	}
	for i := range r.Views {
		v := &r.Views[i]
		if v.Asked < 0 || v.Asked >= len(v.Levels) {
			continue
		}
		l := v.Levels[v.Asked]
		q.Views++
		if l.Outcome == verdict.Met {
			q.ViewsMet++
		}
		if q.WorstView == "" || l.Estimate > float64(q.WorstOver) {
			q.WorstView, q.WorstOver = v.Viewpoint.Name, number(l.Estimate)
		}
	}
	// Several planes are summed up by the worst of each.
	least := func(to *number, x float64) {
		if !(float64(*to) <= x) {
			*to = number(x)
		}
	}
	var asked []verdict.Verdict
	for i := range r.Planes {
		p := &r.Planes[i]
		least(&q.RearDA, p.RearDA)
		least(&q.MedianDF, p.Factors.Median)
		least(&q.SDA, p.SDA.Share.Estimate)
		if !(float64(q.ASE) >= p.ASE.Share.Estimate) {
			q.ASE = number(p.ASE.Share.Estimate)
		}
		if p.Asked >= 0 && p.Asked < len(p.Levels) {
			asked = append(asked, p.Levels[p.Asked])
		}
	}
	if len(asked) > 0 {
		q.Provision = verdict.Combine(asked).String()
	}
	return q
}

// WriteComparison writes AlternativesFile into dir.
func WriteComparison(dir string, all []Design) error {
	f, err := openFolder(dir)
	if err != nil {
		return err
	}
	var rows []row
	for _, d := range all {
		rows = append(rows, compared(d))
	}
	err = f.stage(AlternativesFile, func(w io.Writer) error {
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		return e.Encode(struct {
			Schema        string `json:"schema"`
			SchemaVersion int    `json:"schema_version"`
			Title         string `json:"title"`
			Invented      bool   `json:"invented"`
			Alternatives  []row  `json:"alternatives"`
		}{"squint alternatives", SchemaVersion, all[0].Result.Project.Title, invented(all[0].Result.Project, all[0].Result.Climate.Year), rows})
	})
	if err == nil {
		err = f.commit()
	}
	if err != nil {
		return errors.Join(err, f.abandon())
	}
	return nil
}

// RemoveComparison takes an earlier comparison out of the folder of one design.
func RemoveComparison(dir string) error {
	err := os.Remove(filepath.Join(dir, AlternativesFile))
	if errors.Is(err, os.ErrNotExist) {
		return nil
	}
	return err
}

// comparedFolders reads the designs' folders, in order.
func comparedFolders(dir string) ([]string, error) {
	path := filepath.Join(dir, AlternativesFile)
	data, err := os.ReadFile(path)
	if err != nil {
		return nil, err
	}
	var c struct {
		Alternatives []struct {
			Folder string `json:"folder"`
		} `json:"alternatives"`
	}
	if err := json.Unmarshal(data, &c); err != nil {
		return nil, fmt.Errorf("%s: %w; run squint check again", path, err)
	}
	var names []string
	for _, a := range c.Alternatives {
		if !filepath.IsLocal(a.Folder) {
			return nil, fmt.Errorf("%s: got folder %q, want one below it; run squint check again", path, a.Folder)
		}
		names = append(names, a.Folder)
	}
	if len(names) == 0 {
		return nil, fmt.Errorf("%s: got no alternative, want at least one; run squint check again", path)
	}
	return names, nil
}

const (
	nameWidth   = 25 // of an alternative in the table
	tableFormat = "%8s  %-14s %7s %6s %6s"
)

// Compare prints the alternatives in one table, and under it what decides each.
func Compare(w io.Writer, all []Design, dir string, elapsed time.Duration) error {
	var p page
	first := all[0].Result
	p.head(title(first.Project, newPaths(first.Project, first.Scene)))
	if invented(first.Project, first.Climate.Year) {
		p.item(0, inventedWords, warm(), len(inventedWords)+2, "not those of a real place or building")
	}
	p.gap()
	pad := func(s string, n int) string { return s + fmt.Sprintf("%*s", max(1, n-lipgloss.Width(s)), "") }
	p.line(quiet().Render(pad("", nameWidth) + fmt.Sprintf(tableFormat, "glare", "worst", "light at", "sDA", "ASE")))
	p.line(quiet().Render(pad("alternative", nameWidth) + fmt.Sprintf(tableFormat, "met at", "viewpoint", "rear", "", "")))
	for _, d := range all {
		q := compared(d)
		name := plain(q.Name)
		if lipgloss.Width(name) >= nameWidth {
			p.line(name)
			name = ""
		}
		worst := "-"
		if q.Views > 0 {
			worst = percent(float64(q.WorstOver)) + " of use"
		}
		glare := "-"
		if q.Views > 0 {
			glare = fmt.Sprintf("%d of %d", q.ViewsMet, q.Views)
		}
		p.line(pad(name, nameWidth) + fmt.Sprintf(tableFormat, glare, worst, shareOr(q.RearDA), shareOr(q.SDA), shareOr(q.ASE)))
	}
	p.gap()
	p.para(2, "Glare: viewpoints at which the criterion is met, and the share of the hours in use over its limit at the worst. "+
		"Light at rear: hours in use with 300 lx or more at the third of the sensors furthest from the glass, mean. "+
		"sDA 300/50 % with each design's sun protection as it stands or is operated, ASE 1000/250 with open blinds; each summary names them.")
	for _, d := range all {
		q := compared(d)
		p.gap()
		p.item(0, q.Outcome, verdictStyle(d.Result.Outcome), verdictIndent, q.Name)
		for _, t := range deciding(d.Result) {
			p.item(2, "", lipgloss.NewStyle(), verdictIndent, t)
		}
		for i, t := range d.Result.Positions {
			if i == mostInFull {
				p.para(verdictIndent, fmt.Sprintf("and %s, see its %s.", count(len(d.Result.Positions)-i, "more position", "more positions"), SummaryFile))
				break
			}
			p.para(verdictIndent, t)
		}
	}
	p.gap()
	for _, t := range cautionsOf(all) {
		p.item(0, "Caution", warm(), 9, sentence(t))
	}
	p.item(0, "", lipgloss.NewStyle(), 0, verdict.Caveat)
	p.gap()
	p.head("Results")
	p.path(2, dir)
	p.para(2, SheetFile+": the page to open in a browser. "+AlternativesFile+": this table; and a folder of each alternative with its summary, hourly series and pictures.")
	p.item(0, "", lipgloss.NewStyle(), 0, fmt.Sprintf("Computed in %s on %s.", durationWords(elapsed), count(first.Settings.Workers, "thread", "threads")))
	return p.print(w)
}

// deciding are the texts of the asked criteria's worst findings: the worst
// viewpoint and the worst work plane.
func deciding(r *study.Result) (texts []string) {
	seen := map[string]bool{}
	for _, v := range r.Verdicts { // failing ones come first
		if key := v.Source + v.Criterion; !seen[key] {
			seen[key] = true
			worst := v
			for _, other := range r.Verdicts {
				if other.Source+other.Criterion == key && other.Outcome == v.Outcome && beyond(other) > beyond(worst) {
					worst = other
				}
			}
			texts = append(texts, worst.Outcome.String()+": "+worst.Text)
		}
	}
	return texts
}

// beyond ranks verdicts of one outcome, the worst highest: of those that fail
// the furthest from the limit, of the others the nearest to it.
func beyond(v verdict.Verdict) float64 {
	if v.Outcome == verdict.NotMet {
		return math.Abs(v.Estimate - v.Limit)
	}
	return -math.Abs(v.Estimate - v.Limit)
}

func cautionsOf(all []Design) (list []string) {
	seen := map[string]bool{}
	for _, d := range all {
		for _, t := range cautions(d.Result.Project) {
			if !seen[t] {
				seen[t] = true
				list = append(list, t)
			}
		}
	}
	return list
}

func shareOr(x number) string {
	if math.IsNaN(float64(x)) {
		return "-"
	}
	return percent(float64(x))
}

// Brief prints in a few lines that one of several alternatives is done.
func Brief(w io.Writer, r *study.Result, dir string, elapsed time.Duration) error {
	var p page
	word := r.Outcome.String()
	if len(r.Verdicts) == 0 {
		word = "no verdict"
	}
	for _, t := range r.Warnings {
		p.item(0, "Warning", warm(), 9, newPaths(r.Project, r.Scene).in(sentence(t)))
	}
	text := fmt.Sprintf("%s, in %s", r.Project.Alternative, durationWords(elapsed))
	if r.Reused != "" {
		text += ", " + r.Reused
	}
	p.item(0, word, verdictStyle(r.Outcome), verdictIndent, text+"; written to")
	p.path(verdictIndent, dir)
	p.gap()
	return p.print(w)
}
