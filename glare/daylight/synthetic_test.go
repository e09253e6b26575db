package daylight

import (
	"bytes"
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// A synthetic year, made so that the counting can be reproduced exactly: 50 points in a row from the
// window inwards, light that decays by exp(-p/12), sun that reaches the first
// N points. float32 series: the smallest relative distance of any E to a
// threshold is 8.9e-6, against a rounding of 6e-8.
const synthPoints = 50

type synthetic struct {
	e, direct [][]float32
	out       []float64 // outdoor illuminance
	altitude  []float64 // grows with the sun's altitude
}

func synthYear() synthetic {
	y := synthetic{e: make([][]float32, synthPoints), direct: make([][]float32, synthPoints)}
	for p := range synthPoints {
		y.e[p], y.direct[p] = make([]float32, HoursPerYear), make([]float32, HoursPerYear)
	}
	for h := range HoursPerYear {
		day, t := float64(h/24), float64(h%24)+0.5
		season := math.Cos(2 * math.Pi * (day + 10) / 365)
		sine := math.Sin(math.Pi * (t - 6) / 12)
		s := 0.0
		if t > 6 && t < 18 {
			s = sine
		}
		out := 60000 * s * (0.55 - 0.45*season)
		y.out, y.altitude = append(y.out, out), append(y.altitude, sine)
		reach := 0
		if t > 8 && t < 16 {
			reach = int(math.Floor(12*(0.5+0.5*season)*math.Abs(math.Sin(math.Pi*(t-8)/8)) + 1e-12))
		}
		for p := range synthPoints {
			y.e[p][h] = float32(out * 0.10 * math.Exp(-float64(p)/12))
			if p < reach {
				y.direct[p][h] = float32(8000 * s)
			}
		}
	}
	return y
}

var everyDay = Calendar{Days: [7]bool{true, true, true, true, true, true, true}, FromH: 8, ToH: 18}

// wanted reads the reference values; a row's numbers by its quantity.
func wanted(t *testing.T) map[string]string {
	t.Helper()
	data, err := os.ReadFile("testdata/07_synthetic_annual_metrics.csv")
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
		m[row[0]] = row[1]
	}
	return m
}

func TestSyntheticYear(t *testing.T) {
	want := wanted(t)
	y := synthYear()
	occupied, clock := everyDay.Occupied(), everyDay.Clock(8, 18)
	daylight := SunHighest(y.altitude, DaylightHoursPerYear)
	six := []int{0, 10, 20, 30, 40, 49}
	checked := 0

	// check compares got with the row's numbers to the digits they are given with.
	check := func(quantity string, got ...float64) {
		t.Helper()
		text, ok := want[quantity]
		if !ok {
			t.Errorf("no reference row %q", quantity)
			return
		}
		checked++
		fields := strings.Fields(text)
		if len(fields) != len(got) {
			t.Errorf("%s: %d values, want %d", quantity, len(got), len(fields))
			return
		}
		for i, f := range fields {
			w, err := strconv.ParseFloat(f, 64)
			if err != nil {
				t.Fatal(err)
			}
			_, decimals, _ := strings.Cut(f, ".")
			// Half a unit of the last digit; relative 1e-7 for float32 series.
			if tol := 0.5*math.Pow(10, -float64(len(decimals))) + 1e-7*math.Abs(w); math.Abs(got[i]-w) > tol {
				t.Errorf("%s [%d]: %.9g, want %s", quantity, i, got[i], f)
			}
		}
	}
	share := func(b Bracket) float64 {
		if b.Surely != b.Estimate || b.Possibly != b.Estimate {
			t.Errorf("a series without error has a bracket: %+v", b)
		}
		return b.Estimate
	}
	fraction := func(quantity string, b Bracket) {
		t.Helper()
		checked++
		n, _, _ := strings.Cut(want[quantity], "/")
		w, err := strconv.ParseFloat(n, 64)
		if err != nil {
			t.Fatalf("%s: %v", quantity, err)
		}
		if got := share(b) * synthPoints; math.Abs(got-w) > 1e-9 {
			t.Errorf("%s: %g of %d, want %g", quantity, got, synthPoints, w)
		}
	}
	at := func(points []int, f func(p int) float64) []float64 {
		var v []float64
		for _, p := range points {
			v = append(v, f(p))
		}
		return v
	}

	check("hours total", HoursPerYear)
	check("occupied hours (t=8.5..17.5)", float64(len(occupied)))
	lit, sum := 0, 0.0
	for h, out := range y.out {
		if out > 0 {
			lit++
		}
		sum += y.out[h]
	}
	check("daylight hours Eout>0", float64(lit))
	check("sum Eout lx.h", sum)
	for _, h := range daylight {
		if y.out[h] <= 0 {
			t.Fatalf("hour %d is among the daylight hours but dark", h)
		}
	}
	check("DA300 point 0,10,20,30,40,49 (fraction)", at(six, func(p int) float64 { return DA(y.e[p], occupied, 300) })...)
	check("cDA300 point 0,10,20,30,40,49", at(six, func(p int) float64 { return CDA(y.e[p], occupied, 300) })...)
	udi := func(p int) UsefulShares { return UDI(y.e[p], occupied, DefaultBins) }
	check("UDI <100 point 0,10,20,30,40,49", at(six, func(p int) float64 { return udi(p).FellShort })...)
	check("UDI 100-300 point 0,10,20,30,40,49", at(six, func(p int) float64 { return udi(p).Supplementary })...)
	check("UDI 300-3000 point 0,10,20,30,40,49", at(six, func(p int) float64 { return udi(p).Autonomous })...)
	check("UDI >3000 point 0,10,20,30,40,49", at(six, func(p int) float64 { return udi(p).Exceeded })...)
	mean, margin, closest := 0.0, 1.0, 1.0
	for p := range synthPoints {
		da := DA(y.e[p], occupied, 300)
		mean += da / synthPoints
		margin = math.Min(margin, math.Abs(da-0.5))
		for _, h := range occupied {
			closest = math.Min(closest, math.Abs(float64(y.e[p][h])-300)/300)
		}
	}
	check("mean DA300 over points", mean)
	check("margin check: min |DA-0.5|", margin)
	if w, _ := strconv.ParseFloat(want["margin: min rel |E-300|/300 in occ"], 64); math.Abs(closest-w) > 1e-7 {
		t.Errorf("closest to 300 lx: %g, want %g", closest, w)
	}
	checked++

	plane := Plane{E: y.e}
	sda := SDA(plane, clock, DefaultSpatial, 1)
	fraction("sDA300/50 without blinds (points with DA>=0.5)/50", sda.Share)
	if sda.Label != "sDA, unshaded" {
		t.Errorf("label %q", sda.Label)
	}

	ase := ASE(y.direct, clock, DefaultExposure, 1)
	fraction("ASE1000,250h points", ase.Share)
	check("direct>=1000 lx hours, points 0..12", at([]int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12}, func(p int) float64 { return ase.SensorHours[p] })...)
	slack := 8760.0
	for _, n := range ase.SensorHours {
		slack = min(slack, max(n-250, 250-n))
	}
	check("margin: min |hrs-250|", slack)

	closed := DefaultBlindRule.Closed(y.direct, HoursPerYear)
	closedHours := 0
	for _, h := range clock {
		if closed[h] {
			closedHours++
		}
	}
	check("blind-closed occupied hours (more than 2% of 50 points)", float64(closedHours))
	dimmed := make([][]float32, synthPoints)
	for p := range dimmed {
		dimmed[p] = make([]float32, HoursPerYear)
		for h, e := range y.e[p] {
			if closed[h] {
				e *= 0.2 // the reference's rule: closed blinds pass a fifth
			}
			dimmed[p][h] = e
		}
	}
	shaded := SDA(Plane{E: dimmed}, clock, Spatial{300, 0.5, ByBlindRule}, 1)
	fraction("sDA300/50 with blinds (closed => illuminance x0.2)", shaded.Share)
	if shaded.Label != "sDA" {
		t.Errorf("label %q", shaded.Label)
	}
	check("DA300 with blinds point 0,10,20,30,40,49", at(six, func(p int) float64 { return DA(dimmed[p], occupied, 300) })...)

	check("EN17037 illuminance reached for half of daylight hours, point 0,10,20,24,30,40,47,49",
		at([]int{0, 10, 20, 24, 30, 40, 47, 49}, func(p int) float64 { return share(plane.Reached(p, daylight, 0.5)) })...)
	for i, quantity := range []string{
		"EN17037 min: share of points >= 300 lx for >=50% daylight hours / share >= 100 lx",
		"EN17037 medium: share of points >= 500 lx for >=50% daylight hours / share >= 300 lx",
		"EN17037 high: share of points >= 750 lx for >=50% daylight hours / share >= 500 lx",
	} {
		r := Provision(plane, daylight, ProvisionLevels[i])
		want[quantity] = strings.TrimSuffix(want[quantity], " pass=False")
		check(quantity, share(r.Target), share(r.Minimum))
		if r.SurelyMet || r.EstimateMet || r.MayMet {
			t.Errorf("%s: met, want not met", quantity)
		}
		// The illuminance on half of the plane is the 25th point's: the light
		// decays with p, so exactly points 0 to 24 reach it.
		if got, w := share(r.TargetReachedLx), share(plane.Reached(24, daylight, 0.5)); got != w {
			t.Errorf("%s: %g lx on half of the plane, want %g", quantity, got, w)
		}
		if got, w := share(r.MinReachedLx), share(plane.Reached(47, daylight, 0.5)); got != w { // 48 of 50: the first count >= 95 %
			t.Errorf("%s: %g lx on 95 %% of the plane, want %g", quantity, got, w)
		}
	}
	if checked != len(want) {
		t.Errorf("%d of %d reference rows were checked", checked, len(want))
	}
}
