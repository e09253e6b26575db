package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"strings"

	"charm.land/lipgloss/v2"

	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
	"squint/scene/project"
)

// sensitivityFile holds what finishes that are off by a usual amount would
// change.
const sensitivityFile = "sensitivity.json"

// Variant is what counts of a study whose finishes were varied.
type Variant struct {
	Variation project.Variation
	outcome   string
	verdicts  []verdict.Verdict
	row       row
	warnings  []string
}

// NewVariant keeps what counts of r and lets go of the rest.
func NewVariant(v project.Variation, r *study.Result) Variant {
	q := compared(Design{Result: r})
	return Variant{Variation: v, outcome: q.Outcome, verdicts: r.Verdicts, row: q, warnings: r.Warnings}
}

// turned is a verdict that comes out otherwise with some variation.
type turned struct {
	Criterion string  `json:"criterion"`
	Source    string  `json:"source"`
	Subject   string  `json:"subject"`
	Group     string  `json:"group"`
	Change    string  `json:"change"`
	From      string  `json:"from"`
	To        string  `json:"to"`
	Before    bracket `json:"before"`
	After     bracket `json:"after"`
	Limit     number  `json:"limit"`
	Unit      string  `json:"unit"` // "" for shares

	question string
	open     bool // one of the two is undecided
}

func question(v *verdict.Verdict) string {
	return v.Source + "\n" + v.Criterion + "\n" + v.Subject
}

// turns are the verdicts of base that v changes, in base's order. Verdicts on
// one question are taken in their order.
func turns(base []verdict.Verdict, v *Variant) []turned {
	list := []turned{}
	after := map[string][]*verdict.Verdict{}
	for i := range v.verdicts {
		q := question(&v.verdicts[i])
		after[q] = append(after[q], &v.verdicts[i])
	}
	for i := range base {
		b := &base[i]
		left := after[question(b)]
		if len(left) == 0 {
			continue
		}
		a := left[0]
		after[question(b)] = left[1:]
		if a.Outcome != b.Outcome {
			list = append(list, turned{Criterion: b.Criterion, Source: b.Source, Subject: b.Subject, Group: v.Variation.Group, Change: v.Variation.Change,
				From: b.Outcome.String(), To: a.Outcome.String(), Before: bracketOf(b), After: bracketOf(a), Limit: number(b.Limit), Unit: b.Unit,
				question: question(b), open: a.Outcome == verdict.Undecided || b.Outcome == verdict.Undecided})
		}
	}
	return list
}

func bracketOf(v *verdict.Verdict) bracket {
	return toBracket(verdict.Bracket{Surely: v.Surely, Estimate: v.Estimate, Possibly: v.Possibly})
}

// sensitivityNote says how the variations are meant, for file and terminal.
const sensitivityNote = "One group at a time, all of it alike, by what stated values are usually off by (common practice, no published source), never by more than half of a value; the same random numbers throughout."

func writeSensitivity(w io.Writer, r *study.Result, all []Variant) error {
	type figures struct {
		Outcome   string `json:"outcome"`
		WorstView string `json:"worst_viewpoint"`
		WorstOver number `json:"worst_share_over_limit"`
		RearDA    number `json:"rear_da_300_mean"`
	}
	type variant struct {
		Group  string `json:"group"`
		Change string `json:"change"`
		By     string `json:"by"`
		figures
		WorstChange number   `json:"worst_share_change"`
		RearChange  number   `json:"rear_da_change"`
		Turned      []turned `json:"turned"`
		Warnings    []string `json:"warnings"`
	}
	of := func(q row) figures { return figures{q.Outcome, q.WorstView, q.WorstOver, q.RearDA} }
	base := compared(Design{Result: r})
	variants := []variant{}
	for i := range all {
		v := &all[i]
		variants = append(variants, variant{Group: v.Variation.Group, Change: v.Variation.Change, By: v.Variation.By, figures: of(v.row),
			WorstChange: v.row.WorstOver - base.WorstOver, RearChange: v.row.RearDA - base.RearDA,
			Turned: turns(r.Verdicts, v), Warnings: append([]string{}, v.warnings...)})
	}
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(struct {
		Schema        string    `json:"schema"`
		SchemaVersion int       `json:"schema_version"`
		Title         string    `json:"title"`
		Alternative   string    `json:"alternative"`
		Invented      bool      `json:"invented"`
		Seed          uint64    `json:"seed"`
		Note          string    `json:"note"`
		Verdicts      int       `json:"verdicts"`
		AsStated      figures   `json:"as_stated"`
		Variants      []variant `json:"variants"`
	}{"squint sensitivity", SchemaVersion, r.Project.Title, r.Project.Alternative, invented(r.Project, r.Climate.Year), r.Project.Simulation.Seed,
		sensitivityNote, len(r.Verdicts), of(base), variants})
}

// Sensitivity prints which verdicts of r the variations turn, and a table of
// what they change.
func Sensitivity(w io.Writer, r *study.Result, all []Variant) error {
	var p page
	p.gap()
	head := "Sensitivity to the finishes"
	if r.Project.Alternative != "" {
		head += ", " + r.Project.Alternative
	}
	p.head(head)
	if len(all) == 0 {
		p.para(2, "No finish has a value to vary.")
		p.gap()
		return p.print(w)
	}
	base := compared(Design{Result: r})
	p.para(2, turnedText(r, all))
	for k, t := range turnedSubjects(r, all) {
		if k == mostNamed {
			p.para(4, "Further ones stand in "+sensitivityFile+".")
			break
		}
		p.item(2, "-", lipgloss.NewStyle(), 4, t)
	}
	p.gap()
	const format = "  %-21s%-10s%9s %6s %10s %6s %6s %5s"
	p.line(quiet().Render(strings.TrimRight(fmt.Sprintf(format, "", "", "worst", "", "light at", "", "", ""), " ")))
	p.line(quiet().Render(fmt.Sprintf(format, "varied", "", "viewpoint", "", "rear", "", "turn", "open")))
	p.line(fmt.Sprintf(format, "as stated", "", shareOr(base.WorstOver), "", shareOr(base.RearDA), "", "", ""))
	for i := range all {
		v := &all[i]
		turn, open := 0, 0
		for _, t := range turns(r.Verdicts, v) {
			if t.open {
				open++
			} else {
				turn++
			}
		}
		p.line(fmt.Sprintf(format, v.Variation.Group, v.Variation.Change, shareOr(v.row.WorstOver), changeOr(v.row.WorstOver-base.WorstOver),
			shareOr(v.row.RearDA), changeOr(v.row.RearDA-base.RearDA), fmt.Sprint(turn), fmt.Sprint(open)))
	}
	p.gap()
	p.para(2, "Worst viewpoint: share of the hours in use over its limit. Light at rear: hours in use with 300 lx or more at the third of the sensors furthest from the glass, mean. "+
		"Changes in percentage points. Turn: verdicts from met to not met or back. Open: verdicts that become or were undecided.")
	p.para(2, byText(all)+". "+sensitivityNote)
	p.gap()
	return p.print(w)
}

// byText lists what each group is varied by.
func byText(all []Variant) string {
	var groups []string
	last := ""
	for i := range all {
		if v := all[i].Variation; v.Group != last {
			last = v.Group
			groups = append(groups, v.Group+" "+strings.NewReplacer("+", "±", "-", "±").Replace(v.By))
		}
	}
	return "Varied: " + strings.Join(groups, "; ")
}

// turnedText is the finding.
func turnedText(r *study.Result, all []Variant) string {
	if len(r.Verdicts) == 0 {
		return "No criterion is asked for, so no verdict can turn."
	}
	turn, open := map[string]bool{}, map[string]bool{}
	for i := range all {
		for _, t := range turns(r.Verdicts, &all[i]) {
			if t.open {
				open[t.question] = true
			} else {
				turn[t.question] = true
			}
		}
	}
	for q := range turn {
		delete(open, q)
	}
	of := " of " + count(len(r.Verdicts), "verdict", "verdicts")
	switch {
	case len(turn)+len(open) == 0:
		return "None" + of + " changes where finishes are off by what is usual."
	case len(open) == 0:
		return fmt.Sprintf("%d%s can turn where finishes are off by what is usual.", len(turn), of)
	}
	return fmt.Sprintf("%d%s can turn where finishes are off by what is usual, and %d can become decided or undecided.", len(turn), of, len(open))
}

// turnedSubjects tells, verdict by verdict, with what it turns.
func turnedSubjects(r *study.Result, all []Variant) []string {
	found := map[string][]turned{}
	for i := range all {
		for _, t := range turns(r.Verdicts, &all[i]) {
			found[t.question] = append(found[t.question], t)
		}
	}
	var texts []string
	for i := range r.Verdicts {
		q := question(&r.Verdicts[i])
		if found[q] == nil {
			continue
		}
		first := found[q][0]
		short, _, _ := strings.Cut(first.Criterion, ":")
		text := fmt.Sprintf("%s (%s): %s as stated", first.Subject, short, first.From)
		for _, to := range []string{"not met", "undecided", "met"} {
			var with []string
			for _, t := range found[q] {
				if t.To == to && t.From == first.From {
					with = append(with, fmt.Sprintf("%s %s (%s)", t.Group, t.Change, amount(t.After.Estimate, t.Unit)))
				}
			}
			if with != nil {
				text += "; " + to + " with " + list(with)
			}
		}
		texts = append(texts, text+"; limit "+amount(first.Limit, first.Unit)+".")
		found[q] = nil
	}
	return texts
}

func amount(x number, unit string) string {
	if unit == "" {
		return percent(float64(x))
	}
	return decimals(float64(x), 1) + " " + unit
}

// changeOr is a change of a share in percentage points.
func changeOr(x number) string {
	if math.IsNaN(float64(x)) {
		return ""
	}
	s := fmt.Sprintf("%+.1f", 100*float64(x))
	if s == "-0.0" || s == "+0.0" {
		return "0.0"
	}
	return s
}
