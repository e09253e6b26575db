package report

import (
	"cmp"
	"slices"
	"time"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/verdict"
	"squint/scene"
)

type viewJSON struct {
	Name       string      `json:"name"`
	Room       string      `json:"room,omitempty"` // whose hours of use count
	PositionM  vector      `json:"position_m"`
	Direction  vector      `json:"direction"` // unit, in the model's axes
	AzimuthDeg number      `json:"azimuth_deg"`
	PitchDeg   number      `json:"pitch_deg"`
	Asked      string      `json:"asked"` // level, "none"
	Levels     []levelJSON `json:"levels"`
	When       string      `json:"when"`          // and why it glares at the level asked for
	Causes     []causeJSON `json:"causes"`        // of the hours in use with a DGP above that of the strictest level
	Refined    int         `json:"further_looks"` // that hours near the limit got
	WorstHour  *worstJSON  `json:"worst_hour"`
}

// levelJSON is one level of EN 17037 protection from glare.
type levelJSON struct {
	Level        string  `json:"level"`
	DGP          number  `json:"dgp"`
	TimeShare    number  `json:"time_share"`
	Outcome      string  `json:"outcome"`
	HoursOver    bracket `json:"hours_over"`
	Share        bracket `json:"share"`
	Hours        number  `json:"hours"`
	NotEvaluated number  `json:"not_evaluated"`
}

type causeJSON struct {
	Cause string `json:"cause"`
	Hours number `json:"hours"`
}

type worstJSON struct {
	Record         int          `json:"record"`
	Moment         string       `json:"moment"` // standard time
	Clock          string       `json:"clock"`  // what clocks show
	DGP            number       `json:"dgp"`
	StandardError  number       `json:"standard_error"`
	InRange        bool         `json:"in_range"` // DGP 0.2 to 0.8 and at least 380 lx
	EvLx           number       `json:"ev_lx"`
	SunAzimuthDeg  number       `json:"sun_azimuth_deg"`
	SunAltitudeDeg number       `json:"sun_altitude_deg"` // with refraction
	SunNormalLx    number       `json:"sun_normal_lx"`
	DiffuseLx      number       `json:"sky_horizontal_lx"`
	Sources        []sourceJSON `json:"sources"`
	Pictures       []string     `json:"pictures"`
}

type sourceJSON struct {
	Disc          bool   `json:"disc"` // of the sun or its image in a mirror
	LuminanceCdM2 number `json:"luminance_cd_m2"`
	SolidAngleSr  number `json:"solid_angle_sr"`
	PositionIndex number `json:"position_index"`
	Share         number `json:"share"` // of the sum over sources
}

func viewsJSON(r *study.Result, files []string) []viewJSON {
	out := []viewJSON{}
	names := viewSlugs(r)
	for i := range r.Views {
		v := &r.Views[i]
		d := v.Viewpoint.Direction
		j := viewJSON{Name: v.Viewpoint.Name, Room: v.Viewpoint.Room, PositionM: toVector(v.Viewpoint.Position), Direction: toVector(d),
			AzimuthDeg: number(scene.AzimuthDeg(d, r.Project.Site.NorthDeg)), PitchDeg: number(scene.AltitudeDeg(d)),
			Asked: "none", Refined: v.Refined, Levels: []levelJSON{}, When: v.When, Causes: causes(r, v)}
		if v.Asked >= 0 && v.Asked < len(verdict.ProtectionLevels) {
			j.Asked = verdict.ProtectionLevels[v.Asked].Name
		}
		for k, l := range verdict.ProtectionLevels {
			if k >= len(v.Levels) || k >= len(v.Hours) {
				break
			}
			h := v.Hours[k]
			j.Levels = append(j.Levels, levelJSON{l.Name, number(l.DGP), number(l.TimeShare), v.Levels[k].Outcome.String(),
				toBracket(h.Hours), toBracket(h.Share), number(h.Total), number(h.NotEvaluated)})
		}
		j.WorstHour = worst(r, v, names[i], files)
		out = append(out, j)
	}
	return out
}

// causes counts hours by cause.
func causes(r *study.Result, v *study.ViewResult) []causeJSON {
	n := make([]int, len(v.Causes))
	for _, h := range r.UseOf(v.Viewpoint.Room).Hours {
		if c := v.Cause[h]; c >= 0 && int(c) < len(n) {
			n[c]++
		}
	}
	out := []causeJSON{}
	for i, c := range v.Causes {
		out = append(out, causeJSON{c.String(), number(r.Calendar.InHours(n[i]))})
	}
	slices.SortStableFunc(out, func(a, b causeJSON) int { return cmp.Compare(b.Hours, a.Hours) })
	return out
}

func worst(r *study.Result, v *study.ViewResult, name string, files []string) *worstJSON {
	w := v.Worst
	if w == nil {
		return nil
	}
	m := w.Moment
	j := &worstJSON{Record: m.Step / r.Climate.PerHour(), Moment: m.Time.Format(time.RFC3339), Clock: clockTime(r.Calendar, m).Format("01-02 15:04"),
		DGP: number(w.DGP), StandardError: number(w.StdErr), InRange: glare.InRange(w.DGP, w.Ev), EvLx: number(w.Ev),
		SunAzimuthDeg: number(scene.AzimuthDeg(m.Sun, r.Project.Site.NorthDeg)), SunAltitudeDeg: number(scene.AltitudeDeg(m.Sun)),
		SunNormalLx: number(m.SunNormalLx), DiffuseLx: number(m.DiffuseLx), Sources: []sourceJSON{}, Pictures: []string{}}
	for _, s := range w.Result.Sources {
		j.Sources = append(j.Sources, sourceJSON{s.Disc, number(s.MeanLuminance), number(s.OmegaSr),
			number(s.PositionIndex), number(s.Contribution / w.Result.SourceSum)})
	}
	for _, ending := range []string{".exr", ".png"} {
		if file := PictureDir + "/" + name + ending; slices.Contains(files, file) {
			j.Pictures = append(j.Pictures, file)
		}
	}
	return j
}
