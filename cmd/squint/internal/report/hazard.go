package report

import (
	"fmt"
	"strings"
	"time"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
)

// clearSunKWm2 is the sun's normal irradiance under a clear sky, for a sense of
// scale. Source: ASTM G173-03, direct normal, air mass 1.5: 900 W/m2 (from
// memory).
const clearSunKWm2 = 0.9

// worthSaying is the share of the greatest concentration from which the estimate
// is told in the terminal as well; the summary always has it.
const worthSaying = 0.8

// hazardSection tells where mirrors concentrate the sun most.
func hazardSection(p *page, r *study.Result) {
	h := r.Hazard
	if h == nil {
		return
	}
	p.gap()
	p.head("Sun in mirrors")
	top := h.Greatest()
	if top == nil {
		p.para(2, "Mirrors and glossy surfaces throw no sun anywhere while it stands 5 degrees high or more.")
		return
	}
	p.para(2, fmt.Sprintf("Greatest concentration by mirrors: %s, %s. Of a clear sun's %s kW/m2 that makes about %s kW/m2.", timesWords(top), peakWords(r.Calendar, top, true),
		fixed(clearSunKWm2, 1), significant(top.Times*clearSunKWm2)))
	for _, x := range hazardPlaces(h) {
		if x.peak == h.Chain && top != h.Chain && x.peak != nil && x.peak.Times < worthSaying*top.Times {
			continue // an estimate of what is no danger beside the rest
		}
		if x.peak != nil && x.peak != top {
			p.para(2, fmt.Sprintf("%s: %s, %s.", sentence(x.words), timesWords(x.peak), peakWords(r.Calendar, x.peak, x.peak == h.Chain)))
		}
	}
	p.para(2, "The sun's own light is counted where it arrives as well. Suns below 5 degrees are left out, clouds are not asked for.")
}

// hazardPlace is one of the places that are searched.
type hazardPlace struct {
	words string
	peak  *study.Peak
}

func hazardPlaces(h *study.Hazard) []hazardPlace {
	return []hazardPlace{{"outdoors", h.Outdoors}, {"indoors", h.Indoors}, {"on surfaces", h.Surface}, {"at viewpoints", h.Eye},
		{"with light mirrored twice or more and by glossy surfaces", h.Chain}}
}

// timesWords is a concentration: 6.2 times the sun.
func timesWords(p *study.Peak) string {
	if p.CellM > 0 {
		return fmt.Sprintf("about %s times the sun (an estimate: the mean over a cell of %s m, in which there may be more)", significant(p.Times), fixed(p.CellM, 2))
	}
	return significant(p.Times) + " times the sun"
}

// significant keeps one decimal below 20, as the search does not hold more.
func significant(x float64) string {
	if x < 20 {
		return fixed(x, 1)
	}
	return whole(x)
}

// peakWords is when and where: 12 March, 11:30 h, in the air 1.4 m from shelf
// 2/top, 1.9 m above the ground. full tells indoors from outdoors.
func peakWords(c daylight.Calendar, p *study.Peak, full bool) string {
	text := dateWords(peakTime(c, p))
	switch {
	case p.Eye:
		text += ", at " + p.On + ","
	case p.On != "":
		text += ", on " + p.On + ","
	case !full:
		text += ", in the air"
	case p.Indoors:
		text += ", in the air indoors"
	default:
		text += ", in the air outdoors"
	}
	if p.Mirror != "" {
		text += fmt.Sprintf(" %s m from %s", fixed(p.FromM, 1), p.Mirror)
	}
	below := p.Below
	if p.Ground || below == "" {
		below = "the ground"
	}
	text = fmt.Sprintf("%s, %s m above %s", strings.TrimSuffix(text, ","), fixed(p.AboveM, 1), below)
	if p.Via != "" {
		text += " (" + p.Via + ")"
	}
	return text
}

// peakTime is a peak's time as the clocks show it.
func peakTime(c daylight.Calendar, p *study.Peak) time.Time {
	return p.Time.Add(time.Duration(c.ClockShiftH(c.Day(p.Moment.Step)) * float64(time.Hour)))
}

// hazardJSON is the summary's part; a place that mirrors do not reach is null.
type hazardJSON struct {
	Outdoors     *peakJSON `json:"outdoors"`
	Indoors      *peakJSON `json:"indoors"`
	Surface      *peakJSON `json:"surface"`
	Viewpoint    *peakJSON `json:"viewpoint"`
	Chain        *peakJSON `json:"several_mirrors_or_glossy"`
	SunCells     int       `json:"sun_directions"`
	EveryMoments int       `json:"viewpoints_every_moments"`
}

type peakJSON struct {
	Times       number `json:"times_direct_normal"` // multiples of the sun's normal irradiance
	DirectTimes number `json:"of_it_direct"`
	Estimate    bool   `json:"estimate"`
	CellM       number `json:"cell_m"` // that an estimate is a mean over
	Clock       string `json:"clock"`
	Sun         vector `json:"sun"` // unit vector, model frame
	Point       vector `json:"point_m"`
	Indoors     bool   `json:"indoors"`
	On          string `json:"on"`
	Mirror      string `json:"mirror"`
	FromM       number `json:"from_mirror_m"`
	AboveM      number `json:"above_m"`
	Below       string `json:"below"`
	Standing    string `json:"standing"`
}

// hazards is null where nothing mirrors.
func hazards(r *study.Result) *hazardJSON {
	h := r.Hazard
	if h == nil {
		return nil
	}
	peak := func(p *study.Peak) *peakJSON {
		if p == nil {
			return nil
		}
		return &peakJSON{Times: number(p.Times), DirectTimes: number(p.DirectTimes), Estimate: p.CellM > 0, CellM: number(p.CellM),
			Clock: peakTime(r.Calendar, p).Format("01-02 15:04"), Sun: toVector(p.Sun), Point: toVector(p.Point), Indoors: p.Indoors, On: p.On,
			Mirror: p.Mirror, FromM: number(p.FromM), AboveM: number(p.AboveM), Below: p.Below, Standing: p.Via}
	}
	return &hazardJSON{Outdoors: peak(h.Outdoors), Indoors: peak(h.Indoors), Surface: peak(h.Surface), Viewpoint: peak(h.Eye), Chain: peak(h.Chain),
		SunCells: h.Suns, EveryMoments: h.EveryMoments}
}
