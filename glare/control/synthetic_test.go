package control

import (
	"bytes"
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"squint/glare/daylight"
)

// The synthetic year of package daylight's tests, which says where it comes
// from: 50 points, light that decays by exp(-p/12), sun that reaches the first
// points of the row. Hours are cut into equal parts here.
const points = 50

type synthetic struct {
	steps     []Step
	e, direct [][]float32 // [point][step]
}

func synthYear(parts int) synthetic {
	y := synthetic{e: make([][]float32, points), direct: make([][]float32, points)}
	clock := daylight.Calendar{}.Clock(8, 18)
	occupied := clock.Mask(daylight.HoursPerYear)
	for h := range daylight.HoursPerYear {
		day, t := float64(h/24), float64(h%24)+0.5
		season := math.Cos(2 * math.Pi * (day + 10) / 365)
		s := 0.0
		if t > 6 && t < 18 {
			s = math.Sin(math.Pi * (t - 6) / 12)
		}
		reach := 0
		if t > 8 && t < 16 {
			reach = int(math.Floor(12*(0.5+0.5*season)*math.Abs(math.Sin(math.Pi*(t-8)/8)) + 1e-12))
		}
		for part := range parts {
			share := 1 / float64(parts)
			y.steps = append(y.steps, Step{At: h, Day: h / 24, ClockH: float64(h%24) + (float64(part)+0.5)*share, Share: share, Occupied: occupied[h]})
			for p := range points {
				direct := float32(0)
				if p < reach {
					direct = float32(8000 * s)
				}
				y.e[p] = append(y.e[p], float32(60000*s*(0.55-0.45*season)*0.10*math.Exp(-float64(p)/12)))
				y.direct[p] = append(y.direct[p], direct)
			}
		}
	}
	return y
}

// at is the sun on all points at a step.
func (y synthetic) at(step int) []float32 {
	list := make([]float32, points)
	for p := range list {
		list[p] = y.direct[p][step]
	}
	return list
}

// closedPasses is the reference's rule: closed blinds pass a fifth.
const closedPasses = 0.2

// wanted are the reference values of the rows that blinds bear on.
func wanted(t *testing.T) map[string]string {
	t.Helper()
	data, err := os.ReadFile("../daylight/testdata/07_synthetic_annual_metrics.csv")
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(data))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	m := map[string]string{}
	for _, row := range rows[1:] {
		if strings.Contains(strings.ReplaceAll(row[0], "without blinds", ""), "blind") {
			m[row[0]] = row[1]
		}
	}
	return m
}

// TestSyntheticYearWithBlinds wants, from a plan with the blind rule, each
// count of the reference in which blinds are operated.
func TestSyntheticYearWithBlinds(t *testing.T) {
	want := wanted(t)
	if len(want) != 3 {
		t.Fatalf("got %d rows with blinds, want 3: %v", len(want), want)
	}
	for _, parts := range []int{1, 2} {
		y := synthYear(parts)
		u := roller
		u.Law = WorkPlaneSun{Rule: daylight.DefaultBlindRule, Closed: 1}
		p, err := New([]Unit{u}, y.steps, func(int) Facts { return Facts{DirectLx: y.at} })
		if err != nil {
			t.Fatal(err)
		}
		if needs := p.Needs(); needs != nil {
			t.Fatalf("got %d needs, want none: no law looks at glare", len(needs))
		}
		chosen := p.Chosen()
		dimmed := make([][]float32, points)
		for q := range dimmed {
			dimmed[q] = make([]float32, daylight.HoursPerYear)
			for i, s := range y.steps {
				if chosen[i].State(0) == 1 {
					dimmed[q][s.At] = y.e[q][i] * closedPasses
				} else {
					dimmed[q][s.At] = y.e[q][i]
				}
			}
		}
		light := func(i int, c Combination) float64 {
			sum := 0.0
			for q := range points {
				sum += float64(y.e[q][i])
			}
			if c.State(0) == 1 {
				sum *= closedPasses
			}
			return sum
		}
		r := p.Report(Losses{Light: light, View: func(_, state int) float64 { return 1 - 0.75*float64(state) }})

		clock := daylight.Calendar{}.Clock(8, 18)
		get := map[string]string{}
		closed := r.Groups[0].States[1]
		get["blind-closed occupied hours (more than 2% of 50 points)"] = strconv.FormatFloat(closed.InUseH, 'f', -1, 64)
		sda := daylight.SDA(daylight.Plane{E: dimmed}, clock, daylight.Spatial{ThresholdLx: 300, TimeShare: 0.5, Shading: daylight.ByBlindRule}, 1)
		get["sDA300/50 with blinds (closed => illuminance x0.2)"] = strconv.Itoa(int(math.Round(sda.Share.Estimate*points))) + "/50"
		var das []string
		for _, q := range []int{0, 10, 20, 30, 40, 49} {
			das = append(das, strconv.FormatFloat(daylight.DA(dimmed[q], clock, 300), 'f', 6, 64))
		}
		get["DA300 with blinds point 0,10,20,30,40,49"] = strings.Join(das, " ")
		for quantity, w := range want {
			if get[quantity] != w {
				t.Errorf("%d steps an hour: %s: got %q, want %s", parts, quantity, get[quantity], w)
			}
		}

		// By definition, from the reference's 1692 of 3650 hours.
		g := r.Groups[0]
		if got, want := g.ShadedShare, 1692.0/3650; math.Abs(got-want) > 1e-12 {
			t.Errorf("shaded: got %g, want %g", got, want)
		}
		if got, want := g.ViewLost, 0.75*1692/3650; math.Abs(got-want) > 1e-12 {
			t.Errorf("view lost: got %g, want %g", got, want)
		}
		if open := g.States[0]; open.State != "roller: raised" || closed.State != "roller: drawn" || open.InUseH+closed.InUseH != 3650 || open.DaylightH+closed.DaylightH != 8760 {
			t.Errorf("states: got %+v, want 3650 hours in use of 8760", g.States)
		}
		// Light lost: four fifths of the light of the closed hours, counted by
		// the blind rule on the series itself.
		var all, lost float64
		for i := range y.steps {
			if !y.steps[i].Occupied {
				continue
			}
			e := light(i, p.Open())
			all += e
			if struck := y.at(i); struck[0] >= 1000 && struck[1] >= 1000 { // 2 of 50 points, in a row from the first one
				lost += e * (1 - closedPasses)
			}
		}
		if want := lost / all; math.Abs(r.LightLost-want) > 1e-12 {
			t.Errorf("light lost: got %g, want %g", r.LightLost, want)
		}
	}
}

// TestSyntheticYearSeesADefect: a rule that takes 2 % itself for too much, or
// forgets the share, must not give the reference's hours.
func TestSyntheticYearSeesADefect(t *testing.T) {
	y := synthYear(1)
	for _, rule := range []daylight.BlindRule{{ThresholdLx: 1000, SensorShare: 0.0199}, {ThresholdLx: 1000}, {ThresholdLx: 6000, SensorShare: 0.02}} {
		_, states := chosen(t, roller, WorkPlaneSun{Rule: rule, Closed: 1}, y.steps, Facts{DirectLx: y.at})
		hours := 0
		for i, s := range states {
			if s == 1 && y.steps[i].Occupied {
				hours++
			}
		}
		if hours == 1692 {
			t.Errorf("%+v: got the reference's 1692 hours, want others", rule)
		}
	}
}
