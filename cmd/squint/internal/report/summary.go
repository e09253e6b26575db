package report

import (
	"encoding/json"
	"io"
	"slices"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
)

// SchemaVersion counts changes of summary.json that a reader must know of.
const SchemaVersion = 1

// summary is summary.json. Shares are 0 to 1; a bracket's bounds are the
// estimate moved by the standard errors named in settings.
type summary struct {
	Schema        string `json:"schema"`
	SchemaVersion int    `json:"schema_version"`
	Version       string `json:"version"`

	Title    string `json:"title"`
	Invented bool   `json:"invented"`

	Outcome   string        `json:"outcome"` // of all verdicts asked for; "none" if none was
	Verdicts  []verdictJSON `json:"verdicts"`
	Caveat    string        `json:"caveat"`
	Warnings  []string      `json:"warnings"`
	Cautions  []string      `json:"cautions"`
	Notes     []string      `json:"notes"`
	Positions []string      `json:"positions"`
	Reused    string        `json:"reused"` // in words, what was not computed again

	Sights []sightJSON `json:"view_taken"`

	Views      []viewJSON    `json:"views"`
	WorkPlanes []planeJSON   `json:"work_planes"`
	Openings   []openingJSON `json:"openings"`

	// GlareAutonomy is the share of viewpoints with DGP up to 0.40 in 95 % of the
	// usage time.
	GlareAutonomy bracket `json:"spatial_glare_autonomy_040_95"`

	Hazard *hazardJSON `json:"sun_in_mirrors"` // null where nothing but panes mirrors

	Hours    hoursJSON    `json:"hours"`
	Inputs   inputsJSON   `json:"inputs"`
	Settings settingsJSON `json:"settings"`
	Files    []string     `json:"files"` // of this study, in the folder
}

type verdictJSON struct {
	Criterion string `json:"criterion"`
	Source    string `json:"source"`
	Subject   string `json:"subject"`
	Outcome   string `json:"outcome"`
	Estimate  number `json:"estimate"`
	Surely    number `json:"surely"`
	Possibly  number `json:"possibly"`
	Limit     number `json:"limit"`
	Unit      string `json:"unit"` // of the four; "": shares
	Text      string `json:"text"`
}

type hoursJSON struct {
	// Occupied are those in which any room is in use.
	Occupied number     `json:"occupied"`
	Clock    number     `json:"clock_8_to_18"`
	Daylight number     `json:"daylight"`
	Rooms    []roomJSON `json:"rooms,omitempty"` // whose hours of use are not those of the settings
	Rules    []ruleJSON `json:"rules"`
}

type ruleJSON struct {
	Metric string `json:"metric"`
	Hours  string `json:"hours"`
	Source string `json:"source"`
}

func writeSummary(w io.Writer, r *study.Result, o Options, files []string) error {
	f := newPaths(r.Project, r.Scene)
	s := summary{
		Schema: "squint summary", SchemaVersion: SchemaVersion, Version: o.Version,
		Title: title(r.Project, f), Invented: invented(r.Project, r.Climate.Year),
		Outcome: r.Outcome.String(), Verdicts: toVerdicts(r.Verdicts), Caveat: verdict.Caveat,
		Warnings: texts(warnings(r.Warnings, r.Climate, r.Project), f),
		Cautions: texts(cautions(r.Project), f), Notes: texts(r.Notes, f), Positions: texts(r.Positions, f), Reused: r.Reused,
		Sights: sightsJSON(r), Views: viewsJSON(r, files), WorkPlanes: planesJSON(r), Openings: openingsJSON(r), GlareAutonomy: toBracket(r.GlareAutonomy), Hazard: hazards(r),
		Hours:  hoursJSON{Occupied: inHours(r, r.Occupied), Clock: inHours(r, r.Clock), Daylight: inHours(r, r.Daylight), Rooms: rooms(r)},
		Inputs: inputs(r, o, f), Settings: settings(r), Files: append([]string{}, files...),
	}
	if len(r.Verdicts) == 0 {
		s.Outcome = "none"
	}
	for _, h := range daylight.HourRules {
		s.Hours.Rules = append(s.Hours.Rules, ruleJSON{h.Metric, h.Base.String(), h.Source})
	}
	slices.Sort(s.Files)
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(s)
}

func inHours(r *study.Result, h daylight.Hours) number { return number(r.Calendar.InHours(len(h))) }

func toVerdicts(all []verdict.Verdict) []verdictJSON {
	out := []verdictJSON{}
	for _, v := range all {
		out = append(out, toVerdict(v))
	}
	return out
}

func toVerdict(v verdict.Verdict) verdictJSON {
	return verdictJSON{v.Criterion, v.Source, v.Subject, v.Outcome.String(),
		number(v.Estimate), number(v.Surely), number(v.Possibly), number(v.Limit), v.Unit, v.Text}
}

// texts is never null in JSON.
func texts(s []string, f paths) []string {
	out := []string{}
	for _, t := range s {
		out = append(out, f.in(t))
	}
	return out
}
