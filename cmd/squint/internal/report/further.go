package report

import (
	"math"
	"slices"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
	"squint/scene/project"
)

// furtherSection tells the criteria beside glare and daylight provision, each
// with its verdicts.
func furtherSection(p *page, r *study.Result) {
	if len(r.Further) == 0 {
		return
	}
	p.gap()
	p.head("Further criteria")
	var order []string
	of := map[string][]finding{}
	for _, v := range r.Further {
		criterion := v.Criterion + " (" + v.Source + ")."
		if of[criterion] == nil {
			order = append(order, criterion)
		}
		rank := math.Abs(v.Estimate - v.Limit)
		if v.Outcome == verdict.Met { // the nearest first
			rank = -rank
		}
		of[criterion] = append(of[criterion], finding{v: v, name: v.Subject, rank: rank})
	}
	worst := func(c string) int { // not met before undecided before met
		rank := map[verdict.Outcome]int{verdict.NotMet: 2, verdict.Undecided: 1}
		most := 0
		for _, f := range of[c] {
			most = max(most, rank[f.v.Outcome])
		}
		return most
	}
	slices.SortStableFunc(order, func(a, b string) int { return worst(b) - worst(a) })
	for _, c := range order {
		text := c
		if !strings.HasPrefix(c, "sDA") {
			text = sentence(c)
		}
		p.para(2, text)
		findings(p, of[c], "place", "places", "nearest to the limit")
	}
}

// criteriaText states what is asked for.
func criteriaText(p *project.Project) string {
	c := &p.Criteria
	all := []string{"EN 17037:2018: protection from glare, " + c.Glare, "daylight provision, " + c.Provision}
	add := func(asked bool, text string) {
		if asked {
			all = append(all, text)
		}
	}
	level := func(l string) bool { return l != "" && l != "none" }
	add(level(c.ProvisionFactor), "by daylight factor, "+c.ProvisionFactor)
	add(c.ProvisionOpenings == "horizontal", "shares of roof lights")
	add(level(c.ViewOut), "view out, "+c.ViewOut)
	add(level(c.Sunlight), "sunlight, "+c.Sunlight)
	add(c.ClothClass > 0, "a cloth of class "+decimals(float64(c.ClothClass), 0))
	for _, s := range []struct {
		share *float64
		text  string
	}{
		{c.SDAAtLeast, "sDA at least "}, {c.ASEAtMost, "ASE at most "},
		{c.GlareAutonomyAtLeast, "glare autonomy at least "}, {c.EquinoxAtLeast, "clear sky at the equinox, at least "},
	} {
		if s.share != nil {
			all = append(all, s.text+percent(*s.share))
		}
	}
	if n := len(p.Limits); n > 0 {
		all = append(all, count(n, "own limit", "own limits"))
	}
	return strings.Join(all, "; ")
}

// mostGroups is how many groups of openings the terminal shows.
const mostGroups = 6

// sunGroup is the sun on the openings of a group.
type sunGroup struct {
	name    string
	seasons [4]study.SunSeason
}

func sunGroups(r *study.Result) []sunGroup {
	var groups []sunGroup
	for i := range r.Openings {
		o := &r.Openings[i]
		k := slices.IndexFunc(groups, func(g sunGroup) bool { return g.name == o.Opening.Group })
		if k < 0 {
			k = len(groups)
			groups = append(groups, sunGroup{name: o.Opening.Group})
		}
		for s := range o.Seasons {
			groups[k].seasons[s].BareLmH += o.Seasons[s].BareLmH
			groups[k].seasons[s].LitLmH += o.Seasons[s].LitLmH
		}
	}
	return groups
}

// sunSection is how much sun the glass gets, where anything shades it.
func sunSection(p *page, r *study.Result) {
	groups := sunGroups(r)
	shaded := func(g sunGroup) bool {
		return slices.ContainsFunc(g.seasons[:], func(s study.SunSeason) bool { return s.Kept() < 0.995 })
	}
	if !slices.ContainsFunc(groups, shaded) {
		return
	}
	const nameWidth, width = 24, 13
	p.gap()
	p.head("Sun on the glass, in per cent of the sun on bare glass")
	line := strings.Repeat(" ", 2+nameWidth)
	for _, s := range study.Seasons {
		line += right(s, width)
	}
	p.line(quiet().Render(line))
	for i, g := range groups {
		if i == mostGroups {
			p.para(2, "The other groups of openings stand in summary.json.")
			break
		}
		line := "  " + left(fit(plain(g.name), nameWidth), nameWidth)
		for _, s := range g.seasons {
			line += right(cell(100*s.Kept(), 0), width)
		}
		p.line(line)
	}
	p.para(2, "Past systems outdoors, the facade, neighbours and the skyline; the sun's light only. - : no sun.")
}
