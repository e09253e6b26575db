package report

import (
	"fmt"
	"io"
	"strings"
	"time"

	"charm.land/lipgloss/v2"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/verdict"
)

const (
	// verdictIndent is where a verdict's text begins, after its word.
	verdictIndent = 12
	// mostInFull is how many verdicts of one outcome are told in full; the
	// others are named.
	mostInFull = 3
	// mostNamed is how many are named; the others are counted.
	mostNamed = 8
)

// Terminal prints the summary of a study whose results were written to
// resultsDir ("" for nowhere), at most 80 columns wide save for that path.
// Colour is left out where w is not a terminal that has it.
func Terminal(w io.Writer, r *study.Result, resultsDir string, elapsed time.Duration) error {
	var p page
	f := newPaths(r.Project, r.Scene)
	headline(&p, r, f)
	glareSection(&p, r)
	provisionSection(&p, r)
	furtherSection(&p, r)
	planeSection(&p, r)
	useSection(&p, r)
	sunSection(&p, r)
	hazardSection(&p, r)
	positionSection(&p, r)
	sightSection(&p, r)
	trustSection(&p, r, f)
	whereSection(&p, r, resultsDir, elapsed)
	return p.print(w)
}

// headline is the verdict, whose, and whether the data are real.
func headline(p *page, r *study.Result, f paths) {
	word := r.Outcome.String()
	if len(r.Verdicts) == 0 {
		word = "no verdict"
	}
	text := title(r.Project, f)
	if len(r.Verdicts) == 0 {
		text += ": no criterion was asked for"
	}
	p.item(0, word, verdictStyle(r.Outcome), len(word)+2, text)
	if invented(r.Project, r.Climate.Year) {
		p.item(0, inventedWords, warm(), len(inventedWords)+2, "not those of a real place or building")
	}
}

// finding is one verdict as it is told.
type finding struct {
	v    verdict.Verdict
	name string
	more string // what the verdict's text leaves out
	rank float64
}

// glareSection tells where, when and why it glares, the worst first.
func glareSection(p *page, r *study.Result) {
	var all []finding
	criterion := ""
	for i := range r.Views {
		v := &r.Views[i]
		if v.Asked < 0 || v.Asked >= len(v.Levels) {
			continue
		}
		f := finding{v: v.Levels[v.Asked], name: v.Viewpoint.Name, rank: v.Levels[v.Asked].Estimate}
		if f.v.Outcome == verdict.Undecided && v.When != "" {
			f.more = "Those counted fall " + v.When + "."
		}
		criterion = f.v.Source + " " + f.v.Criterion
		all = append(all, f)
	}
	if len(all) == 0 {
		return
	}
	p.gap()
	p.head("Glare")
	p.para(2, criterion+".")
	findings(p, all, "viewpoint", "viewpoints", "nearest to the limit")
	if n := refined(r); n > 0 {
		p.para(verdictIndent, "Hours near the limit at "+count(n, "viewpoint", "viewpoints")+" were computed again with more samples.")
	}
	if w := worstView(r); w != nil {
		// Not a verdict, but the number people ask for first.
		p.para(verdictIndent, fmt.Sprintf("The worst hour of all: %s, %s, DGP %s, %s lx at the eye%s.", w.Viewpoint.Name,
			dateWords(clockTime(r.Calendar, w.Worst.Moment)), plusMinus(w.Worst.DGP, w.Worst.StdErr, 2), whole(w.Worst.Ev),
			rangeWords(glare.InRange(w.Worst.DGP, w.Worst.Ev))))
	}
}

// rangeWords marks a DGP beyond the data that it was fitted to.
func rangeWords(in bool) string {
	if in {
		return ""
	}
	return " (outside the range of the data behind DGP, 0.2 to 0.8 and 380 lx or more)"
}

// plusMinus is a value with its standard error, with so many more decimals, up
// to four, that the error is not 0. An error that is unknown or 0 is left out.
func plusMinus(x, se float64, n int) string {
	if !(se > 0) {
		return fixed(x, n)
	}
	for n < 4 && strings.Trim(fixed(se, n), "0.") == "" {
		n++
	}
	return fixed(x, n) + " ± " + fixed(se, n)
}

// refined counts the viewpoints that got further looks.
func refined(r *study.Result) int {
	n := 0
	for i := range r.Views {
		if r.Views[i].Refined > 0 {
			n++
		}
	}
	return n
}

func worstView(r *study.Result) *study.ViewResult {
	var worst *study.ViewResult
	for i := range r.Views {
		v := &r.Views[i]
		if v.Worst != nil && (worst == nil || v.Worst.DGP > worst.Worst.DGP) {
			worst = v
		}
	}
	return worst
}

func provisionSection(p *page, r *study.Result) {
	var all []finding
	criterion := ""
	for i := range r.Planes {
		q := &r.Planes[i]
		if q.Asked < 0 || q.Asked >= len(q.Levels) {
			continue
		}
		v := q.Levels[q.Asked]
		criterion = v.Source + " " + v.Criterion
		all = append(all, finding{v: v, name: q.Plane.Name, rank: v.Limit - v.Estimate})
	}
	if len(all) == 0 {
		return
	}
	p.gap()
	p.head("Daylight")
	p.para(2, criterion+".")
	findings(p, all, "work plane", "work planes", "nearest to its limit")
}

// findings prints what fails, what is undecided, and, in one line, what
// passes.
func findings(p *page, all []finding, one, many, nearest string) {
	for _, o := range []verdict.Outcome{verdict.NotMet, verdict.Undecided} {
		of := pick(all, o)
		rest := of[min(len(of), mostInFull):]
		if len(rest) == 1 { // naming one takes as much room
			rest = nil
		}
		for _, f := range of[:len(of)-len(rest)] {
			p.item(2, o.String(), verdictStyle(o), verdictIndent, join(f.v.Text, f.more))
		}
		if len(rest) > 0 {
			var names []string
			for _, f := range rest {
				names = append(names, f.name+" ("+f.v.Amount()+")")
			}
			if len(names) > mostNamed {
				names = append(names[:mostNamed-1:mostNamed-1], count(len(rest)-mostNamed+1, "more", "more"))
			}
			p.item(2, o.String(), verdictStyle(o), verdictIndent, "also at "+list(names)+".")
		}
	}
	passed := pick(all, verdict.Met)
	if len(passed) == 0 {
		return
	}
	if len(passed) == 1 {
		p.item(2, passed[0].v.Outcome.String(), verdictStyle(verdict.Met), verdictIndent, passed[0].v.Text)
		return
	}
	which := "all " + whole(float64(len(passed)))
	if len(passed) < len(all) {
		which = whole(float64(len(passed))) + " of " + whole(float64(len(all)))
	}
	text := fmt.Sprintf("%s %s; %s is %s", which, many, nearest, strings.TrimSuffix(passed[0].v.Text, ".")+".")
	p.item(2, verdict.Met.String(), verdictStyle(verdict.Met), verdictIndent, text)
}

// pick takes the findings of one outcome, the furthest beyond its limit first.
func pick(all []finding, o verdict.Outcome) []finding {
	var of []finding
	for _, f := range all {
		if f.v.Outcome == o {
			of = append(of, f)
		}
	}
	sortByRank(of)
	return of
}

func join(a, b string) string {
	if b == "" {
		return a
	}
	return a + " " + b
}

// positionSection tells the hours of what moves, the first of many positions.
func positionSection(p *page, r *study.Result) {
	if len(r.Positions) == 0 {
		return
	}
	const most = 8
	p.gap()
	p.head("Positions")
	for i, t := range r.Positions {
		if i == most {
			p.para(2, fmt.Sprintf("and %d more, see %s.", len(r.Positions)-most, SummaryFile))
			break
		}
		p.item(2, "", lipgloss.NewStyle(), 2, t)
	}
}

// trustSection says what limits the verdicts.
func trustSection(p *page, r *study.Result, f paths) {
	p.gap()
	for _, t := range warnings(r.Warnings, r.Climate, r.Project) {
		p.item(0, "Warning", warm(), 9, f.in(sentence(t)))
	}
	for _, t := range cautions(r.Project) {
		p.item(0, "Caution", warm(), 9, sentence(t))
	}
	p.item(0, "", lipgloss.NewStyle(), 0, verdict.Caveat)
}

// sentence begins with a capital.
func sentence(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

func whereSection(p *page, r *study.Result, dir string, elapsed time.Duration) {
	p.gap()
	if dir != "" {
		p.head("Results")
		p.path(2, dir)
		text := SheetFile + ": the page to open in a browser; summary.json: every verdict and number"
		if len(r.Views) > 0 {
			text += "; hours-views.csv"
		}
		if r.Scene.Sensors() > 0 {
			text += "; hours-sensors.csv"
		}
		if len(r.Openings) > 0 {
			text += "; hours-openings.csv"
		}
		if worstView(r) != nil {
			text += "; worst-hour/: a picture of each viewpoint's worst hour"
		}
		p.para(2, text+".")
	}
	p.item(0, "", lipgloss.NewStyle(), 0, computed(r, elapsed))
}

// computed says how long it took, and what of it had been computed before.
func computed(r *study.Result, elapsed time.Duration) string {
	s := fmt.Sprintf("Computed in %s on %s", durationWords(elapsed), count(r.Settings.Workers, "thread", "threads"))
	if r.Reused != "" {
		s += "; " + r.Reused
	}
	return s + "."
}

// durationWords is a duration to the second, below ten seconds to the tenth.
func durationWords(d time.Duration) string {
	s := d.Seconds()
	switch {
	case s < 9.95:
		return fixed(s, 1) + " s"
	case s < 59.5:
		return fixed(s, 0) + " s"
	}
	n := int(s + 0.5)
	if n < 3600 {
		return fmt.Sprintf("%d min %d s", n/60, n%60)
	}
	return fmt.Sprintf("%d h %d min", n/3600, n%3600/60)
}
