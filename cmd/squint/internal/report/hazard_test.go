package report

import (
	"bytes"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
)

// sampleHazard is made by hand: numbers are chosen, not computed.
func sampleHazard(r *study.Result) *study.Hazard {
	m := r.Climate.Moments[700]
	m.Time = time.Date(2022, 3, 12, 11, 0, 0, 0, time.UTC)
	at := m.Time.Add(30 * time.Minute)
	air := &study.Peak{Times: 6.234, DirectTimes: 1, Moment: m, Time: at, Sun: r3.Vec{Z: 1}, Point: r3.Vec{X: 1, Y: 2, Z: 1.9},
		Mirror: "shelf 2/top", FromM: 1.41, AboveM: 1.9, Below: "ground", Ground: true}
	inside := &study.Peak{Times: 2.06, Moment: m, Time: at, Indoors: true, Mirror: "shelf 2/top", FromM: 2.2, AboveM: 1.3, Below: "floor"}
	surface := &study.Peak{Times: 1.9, Moment: m, Time: at, On: "wall", Mirror: "shelf 2/top", FromM: 3, AboveM: 1, Below: "ground", Ground: true, Via: "slats at 45 degrees"}
	chain := &study.Peak{Times: 31.4, DirectTimes: 1, CellM: 0.15, Moment: m, Time: at, Mirror: "", AboveM: 0.4}
	return &study.Hazard{Outdoors: air, Indoors: inside, Surface: surface, Chain: chain, Suns: 287, EveryMoments: 1}
}

func TestHazardWords(t *testing.T) {
	r := sample("desk 1")
	if text := printed(t, r); strings.Contains(text, "Sun in mirrors") {
		t.Error("got a section without mirrors")
	}
	r.Hazard = sampleHazard(r)
	golden(t, "hazard.txt", section(t, printed(t, r)))
	one := &study.Hazard{Outdoors: r.Hazard.Outdoors, EveryMoments: 1}
	r.Hazard = one
	text := strings.Join(strings.Fields(section(t, printed(t, r))), " ")
	want := "Greatest concentration by mirrors: 6.2 times the sun, 12 March, 11:30 h, in the air outdoors 1.4 m from shelf 2/top, 1.9 m above the ground. Of a clear sun's 0.9 kW/m2 that makes about 5.6 kW/m2."
	if !strings.Contains(text, want) {
		t.Errorf("got %q, want %q in it", text, want)
	}
	// Daylight saving time moves what the clocks show.
	r.Calendar.SavingFrom, r.Calendar.SavingTo = &daylight.MonthDay{Month: 1, Day: 2}, &daylight.MonthDay{Month: 12, Day: 30}
	if text := printed(t, r); !strings.Contains(text, "12:30 h") {
		t.Errorf("daylight saving time: got %s", section(t, text))
	}
	r.Hazard = &study.Hazard{EveryMoments: 1}
	if text := printed(t, r); !strings.Contains(text, "throw no sun") {
		t.Error("nothing found: no words for it")
	}
}

// section is what is printed about mirrors.
func section(t *testing.T, text string) string {
	t.Helper()
	_, after, ok := strings.Cut(text, "Sun in mirrors\n")
	if !ok {
		t.Fatalf("got no section:\n%s", text)
	}
	before, _, _ := strings.Cut(after, "\n\n")
	return before + "\n"
}

func TestHazardSummary(t *testing.T) {
	r := sample("desk 1")
	get := func() map[string]any {
		var b bytes.Buffer
		if err := writeSummary(&b, r, Options{}, nil); err != nil {
			t.Fatal(err)
		}
		var s map[string]any
		if err := json.Unmarshal(b.Bytes(), &s); err != nil {
			t.Fatal(err)
		}
		h, _ := s["sun_in_mirrors"].(map[string]any)
		return h
	}
	if h := get(); h != nil {
		t.Errorf("without mirrors: got %v, want null", h)
	}
	r.Hazard = sampleHazard(r)
	r.Hazard.Surface.FromM = math.NaN()
	h := get()
	if out, _ := h["outdoors"].(map[string]any); out["times_direct_normal"] != 6.234 || out["clock"] != "03-12 11:30" || out["estimate"] != false {
		t.Errorf("outdoors: got %v", out)
	}
	if s, _ := h["surface"].(map[string]any); s["from_mirror_m"] != nil || s["on"] != "wall" {
		t.Errorf("surface: got %v", s)
	}
	if c, _ := h["several_mirrors_or_glossy"].(map[string]any); c["estimate"] != true {
		t.Errorf("chain: got %v", c)
	}
	if h["viewpoint"] != nil {
		t.Errorf("viewpoint: got %v, want null", h["viewpoint"])
	}
}
