package report

import (
	"fmt"
	"math"

	"charm.land/lipgloss/v2"

	"squint/cmd/squint/internal/study"
)

// Heights of eyes above the floor. Source: EN 17037:2018, view out, from
// memory.
const (
	seatedEyeM   = 1.2
	standingEyeM = 1.7
)

// sightSection tells what shelves and what moves take of the view out.
func sightSection(p *page, r *study.Result) {
	if len(r.Sights) == 0 {
		return
	}
	p.gap()
	p.head("View taken")
	for _, s := range r.Sights {
		p.item(2, "", lipgloss.NewStyle(), 2, sentence(sightText(s, r)))
	}
}

func sightText(s study.Sight, r *study.Result) string {
	text := s.Name
	if s.State != "" {
		text += ", " + s.State
	}
	if !math.IsNaN(s.LowM) {
		text += ", tops " + metresText(s.LowM, s.HighM) + " above the floor, " + eyesText(s.LowM, s.HighM) + ","
	}
	least, most, at := math.Inf(1), math.Inf(-1), ""
	for i, t := range s.Taken {
		if math.IsNaN(t) {
			continue
		}
		least = math.Min(least, t)
		if t > most {
			most, at = t, r.Views[i].Viewpoint.Name
		}
	}
	switch {
	case at == "":
		text += ": no viewpoint has a view out"
	case percent(least) == percent(most):
		text += " take " + percent(most) + " of the view out at every viewpoint that has one"
	default:
		text += " take " + percent(least) + " to " + percent(most) + " of the view out, most at " + at
	}
	if !math.IsNaN(s.Factor) {
		text += "; so closed, the mean daylight factor is " + percent(s.Factor)
	}
	return text + "."
}

func metresText(low, high float64) string {
	if fixed(low, 2) == fixed(high, 2) {
		return fixed(low, 2) + " m"
	}
	return fixed(low, 2) + " to " + fixed(high, 2) + " m"
}

// eyesText places shelves among the eyes of people.
func eyesText(low, high float64) string {
	of := func(eye float64, who string) string {
		switch {
		case low > eye:
			return "above the eyes of people who " + who + fmt.Sprintf(" (%g m)", eye)
		case high < eye:
			return "below the eyes of people who " + who + fmt.Sprintf(" (%g m)", eye)
		}
		return "at the eyes of people who " + who + fmt.Sprintf(" (%g m)", eye)
	}
	return of(standingEyeM, "stand") + " and " + of(seatedEyeM, "sit")
}

type sightJSON struct {
	Systems string   `json:"systems"`
	State   string   `json:"state"` // "" for what does not move
	LowM    number   `json:"lowest_top_above_floor_m"`
	HighM   number   `json:"highest_top_above_floor_m"`
	Taken   []number `json:"view_taken"` // by viewpoint; null: it sees no opening
	Factor  number   `json:"closed_daylight_factor_mean"`
}

func sightsJSON(r *study.Result) []sightJSON {
	out := []sightJSON{}
	for _, s := range r.Sights {
		j := sightJSON{Systems: s.Name, State: s.State, LowM: number(s.LowM), HighM: number(s.HighM), Factor: number(s.Factor)}
		for _, t := range s.Taken {
			j.Taken = append(j.Taken, number(t))
		}
		out = append(out, j)
	}
	return out
}
