package report

import (
	"bytes"
	"encoding/json"
	"math"
	"strings"
	"testing"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
)

// furtherSample asks for more than glare and provision. Numbers are chosen.
func furtherSample() *study.Result {
	r := sample("desk 1")
	share := func(x float64) verdict.Bracket { return verdict.Bracket{Surely: x, Estimate: x, Possibly: x} }
	spatial := daylight.DefaultSpatial
	sda := daylight.SpatialResult{Share: share(0.6), Label: "sDA, unshaded", Hours: 3650}
	sun, _ := verdict.SunByName("minimum")
	further := []verdict.Verdict{
		verdict.Spatial("open plan", sda, spatial, 0.55),
		verdict.ViewOut("open plan", verdict.ViewLevels[0], verdict.Bracket{Surely: 0.7, Estimate: 0.7, Possibly: 0.8}),
		verdict.Sunlight("window 2", sun, "21 March", 11, 2.25, 0.02),
	}
	for _, name := range []string{"window 1", "window 2", "window 3", "window 4", "window 5"} {
		further = append(further, verdict.ClothProtection(name, math.NaN(), 2))
	}
	r.Further = further
	r.Verdicts = append(r.Verdicts, further...)
	r.Outcome = verdict.Combine(r.Verdicts)
	for i, kept := range []float64{0.4, 0.6} {
		o := study.OpeningResult{Opening: scene.Opening{Name: []string{"window 1", "window 2"}[i], Group: "south"}, SunH: 2.25, Class: math.NaN(), Sunlit: make([]float32, daylight.HoursPerYear)}
		o.Opening.Rect.WidthM, o.Opening.Rect.HeightM = 2, 1
		for h := range o.Sunlit {
			o.Sunlit[h] = float32(math.NaN())
		}
		o.Sunlit[12] = 0.25
		o.Seasons[0] = study.SunSeason{Hours: 500, Lit: kept, BareLmH: 1000, LitLmH: 1000 * kept}
		o.Seasons[3].Lit = math.NaN()
		r.Openings = append(r.Openings, o)
	}
	return r
}

func TestFurther(t *testing.T) {
	r := furtherSample()
	golden(t, "further.txt", printed(t, r))

	// The season's share of the group is of the group's light: (400 + 600) / 2000.
	groups := sunGroups(r)
	if len(groups) != 1 || groups[0].seasons[0].Kept() != 0.5 {
		t.Errorf("groups: %+v, want one that keeps half", groups)
	}
	// Nothing shaded, nothing told.
	bare := sample("desk 1")
	bare.Openings = []study.OpeningResult{{Seasons: [4]study.SunSeason{{Hours: 1, Lit: 1, BareLmH: 5, LitLmH: 5}}}}
	if text := printed(t, bare); strings.Contains(text, "Sun on the glass") {
		t.Errorf("a table of unshaded glass:\n%s", text)
	}
}

func TestFurtherFiles(t *testing.T) {
	r := furtherSample()
	var b bytes.Buffer
	if err := writeOpeningHours(&b, r); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	for _, want := range []string{"record,month,day,clock,sunlit: window 1,sunlit: window 2\n", "\n11,1,1,11:00,,\n12,1,1,12:00,0.25,0.25\n"} {
		if !strings.Contains(text, want) {
			t.Errorf("the file lacks %q", want)
		}
	}
	b.Reset()
	if err := writeSummary(&b, r, Options{Version: "test"}, nil); err != nil {
		t.Fatal(err)
	}
	var s struct {
		Verdicts []struct {
			Subject, Unit string
			Estimate      *float64
		}
		Openings []struct {
			Cloth   *float64 `json:"cloth_class"`
			Hours   *float64 `json:"sunlight_hours"`
			Seasons []struct {
				Kept *float64 `json:"share_of_bare_sunlight"`
			} `json:"sun_by_season"`
		}
	}
	if err := json.Unmarshal(b.Bytes(), &s); err != nil {
		t.Fatal(err)
	}
	if len(s.Openings) != 2 || s.Openings[0].Cloth != nil || *s.Openings[0].Hours != 2.25 || *s.Openings[1].Seasons[0].Kept != 0.6 || s.Openings[1].Seasons[3].Kept != nil {
		t.Errorf("openings: %+v", s.Openings)
	}
	n := 0
	for _, v := range s.Verdicts {
		if v.Unit == "h" && *v.Estimate == 2.25 {
			n++
		}
	}
	if n != 1 {
		t.Errorf("%d verdicts in hours, want 1", n)
	}
}

func TestCriteriaText(t *testing.T) {
	share := 0.55
	p := &project.Project{Criteria: project.Criteria{Glare: "high", Provision: "none", ViewOut: "medium", ClothClass: 3, SDAAtLeast: &share}, Limits: make([]project.Limit, 2)}
	want := "EN 17037:2018: protection from glare, high; daylight provision, none; view out, medium; a cloth of class 3; sDA at least 55 %; 2 own limits"
	if got := criteriaText(p); got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
