package report

import (
	"squint/cmd/squint/internal/study"
)

type openingJSON struct {
	Name      string       `json:"name"`
	Group     string       `json:"group"`
	AreaM2    number       `json:"area_m2"`
	SunHours  number       `json:"sunlight_hours"` // on the day asked for; null: not asked, or no reference point
	Cloth     number       `json:"cloth_class"`    // EN 14501, glare control; null: no roller
	Seasons   []seasonJSON `json:"sun_by_season"`
	SharesCSV string       `json:"hourly_shares"`
}

// seasonJSON is the sun on an opening over a quarter of the year.
type seasonJSON struct {
	Months string `json:"months"`
	Hours  number `json:"hours_with_sun_before_it"`
	Lit    number `json:"mean_sunlit_share"`
	Kept   number `json:"share_of_bare_sunlight"`
}

func openingsJSON(r *study.Result) []openingJSON {
	out := []openingJSON{}
	for i := range r.Openings {
		o := &r.Openings[i]
		j := openingJSON{Name: o.Opening.Name, Group: o.Opening.Group, AreaM2: number(o.Opening.Rect.WidthM * o.Opening.Rect.HeightM),
			SunHours: number(o.SunH), Cloth: number(o.Class), SharesCSV: openingsFile}
		for k, s := range o.Seasons {
			j.Seasons = append(j.Seasons, seasonJSON{study.Seasons[k], number(s.Hours), number(s.Lit), number(s.Kept())})
		}
		out = append(out, j)
	}
	return out
}

type viewOutJSON struct {
	Level     string   `json:"level"`
	AngleDeg  number   `json:"sight_angle_asked_deg"`
	DistanceM number   `json:"distance_asked_m"`
	Layers    int      `json:"layers_asked"`
	Share     bracket  `json:"share_of_area"`
	Angles    []number `json:"sight_angle_deg"` // by point, beyond the distance
	Seen      []int    `json:"layers"`
}

func viewOut(p *study.PlaneResult) *viewOutJSON {
	v := p.ViewOut
	if v == nil {
		return nil
	}
	j := &viewOutJSON{Level: v.Level.Name, AngleDeg: number(v.Level.AngleDeg), DistanceM: number(v.Level.DistanceM), Layers: v.Level.Layers, Share: toBracket(v.Share), Seen: v.Layers}
	for _, a := range v.AngleDeg {
		j.Angles = append(j.Angles, number(a))
	}
	return j
}

type byFactorJSON struct {
	Level           string  `json:"level"`
	MedianDiffuseLx number  `json:"median_sky_lx"`
	TargetDF        number  `json:"target_daylight_factor"`
	Target          bracket `json:"target_share"`
	MinimumDF       number  `json:"minimum_daylight_factor"`
	Minimum         bracket `json:"minimum_share"`
}

func byFactor(p *study.PlaneResult) *byFactorJSON {
	f := p.ByFactor
	if f == nil {
		return nil
	}
	return &byFactorJSON{f.Level.Name, number(f.MedianDiffuseLx), number(f.TargetDF), toBracket(f.Target), number(f.MinimumDF), toBracket(f.Minimum)}
}

type clearJSON struct {
	Clock string   `json:"clock"`
	Share bracket  `json:"share_between"`
	Lx    []number `json:"lx"` // by point
}

func clearSky(r *study.Result, p *study.PlaneResult) []clearJSON {
	var out []clearJSON
	for k, b := range p.ClearShares {
		j := clearJSON{Clock: r.ClearNames[k], Share: toBracket(b)}
		for s := range p.Clear.E {
			j.Lx = append(j.Lx, number(p.Clear.E[s][k]))
		}
		out = append(out, j)
	}
	return out
}
