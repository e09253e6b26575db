package report

import (
	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
)

type planeJSON struct {
	Name     string `json:"name"`
	Room     string `json:"room,omitempty"` // whose hours of use count
	Sensors  int    `json:"sensors"`
	Refined  int    `json:"further_looks"` // that sensors near a limit got
	SpacingM number `json:"spacing_m"`
	HeightM  number `json:"height_m"`

	DaylightFactor factorJSON      `json:"daylight_factor"`
	DA             number          `json:"da_300_mean"`
	CDA            number          `json:"cda_300_mean"`
	UDI            udiJSON         `json:"udi_mean"`
	SDA            spatialJSON     `json:"sda"`
	ASE            spatialJSON     `json:"ase"`
	Asked          string          `json:"asked"`
	Provision      []provisionJSON `json:"provision"`
	ByFactor       *byFactorJSON   `json:"provision_by_daylight_factor"` // null: not asked for, as the next two
	ViewOut        *viewOutJSON    `json:"view_out"`
	ClearSky       []clearJSON     `json:"clear_equinox"`
	Points         []pointJSON     `json:"points"`
}

type factorJSON struct {
	Mean       number `json:"mean"`
	Median     number `json:"median"`
	Min        number `json:"min"`
	Max        number `json:"max"`
	Uniformity number `json:"uniformity"` // min over mean
}

type udiJSON struct {
	FellShort     number `json:"below_100_lx"`
	Supplementary number `json:"100_to_300_lx"`
	Autonomous    number `json:"300_to_3000_lx"`
	Exceeded      number `json:"above_3000_lx"`
}

type spatialJSON struct {
	Label string  `json:"label"`
	Share bracket `json:"share"`
	Hours number  `json:"hours"`
}

// provisionJSON is one level of EN 17037 daylight provision.
type provisionJSON struct {
	Level           string  `json:"level"`
	Outcome         string  `json:"outcome"`
	TargetLx        number  `json:"target_lx"`
	TargetAsked     number  `json:"target_share_asked"`
	Target          bracket `json:"target_share"`
	MinimumLx       number  `json:"minimum_lx"`
	MinimumAsked    number  `json:"minimum_share_asked"`
	Minimum         bracket `json:"minimum_share"`
	TargetReachedLx bracket `json:"reached_on_target_share_lx"`
	MinReachedLx    bracket `json:"reached_on_minimum_share_lx"`
}

// pointJSON is one sensor.
type pointJSON struct {
	PositionM   vector  `json:"position_m"`
	Factor      number  `json:"daylight_factor"`
	FactorError number  `json:"daylight_factor_standard_error"`
	DA          number  `json:"da_300"`
	CDA         number  `json:"cda_300"`
	UDI         number  `json:"udi_100_to_3000"`
	SunHours    *number `json:"hours_above_1000_lx_sun"`
}

func planesJSON(r *study.Result) []planeJSON {
	out := []planeJSON{}
	for i := range r.Planes {
		p := &r.Planes[i]
		j := planeJSON{Name: p.Plane.Name, Room: p.Plane.Room, Sensors: len(p.Plane.Sensors), Refined: p.Refined, SpacingM: number(p.Plane.SpacingM), HeightM: number(p.Plane.HeightM),
			DaylightFactor: factorJSON{number(p.Factors.Mean), number(p.Factors.Median), number(p.Factors.Min), number(p.Factors.Max), number(p.Factors.Uniformity)},
			DA:             number(p.MeanDA), CDA: number(p.MeanCDA),
			UDI:   udiJSON{number(p.MeanUDI.FellShort), number(p.MeanUDI.Supplementary), number(p.MeanUDI.Autonomous), number(p.MeanUDI.Exceeded)},
			SDA:   spatialJSON{p.SDA.Label, toBracket(p.SDA.Share), number(p.SDA.Hours)},
			ASE:   spatialJSON{p.ASE.Label, toBracket(p.ASE.Share), number(p.ASE.Hours)},
			Asked: "none", Provision: []provisionJSON{}, Points: points(p),
			ByFactor: byFactor(p), ViewOut: viewOut(p), ClearSky: clearSky(r, p)}
		if p.Asked >= 0 && p.Asked < len(daylight.ProvisionLevels) {
			j.Asked = daylight.ProvisionLevels[p.Asked].Name
		}
		for k, q := range p.Provision {
			if k >= len(p.Levels) {
				break
			}
			j.Provision = append(j.Provision, provisionJSON{q.Level.Name, p.Levels[k].Outcome.String(),
				number(q.Level.TargetLx), number(q.Level.TargetShare), toBracket(q.Target),
				number(q.Level.MinimumLx), number(q.Level.MinimumShare), toBracket(q.Minimum),
				toBracket(q.TargetReachedLx), toBracket(q.MinReachedLx)})
		}
		out = append(out, j)
	}
	return out
}

func points(p *study.PlaneResult) []pointJSON {
	out := []pointJSON{}
	for i, s := range p.Plane.Sensors {
		j := pointJSON{PositionM: toVector(s.Position), Factor: at(p.Factor, i), FactorError: at(p.FactorError, i), DA: at(p.DA, i), CDA: at(p.CDA, i)}
		if i < len(p.UDI) {
			j.UDI = number(p.UDI[i].Useful())
		}
		if i < len(p.ASE.SensorHours) {
			h := number(p.ASE.SensorHours[i])
			j.SunHours = &h
		}
		out = append(out, j)
	}
	return out
}
