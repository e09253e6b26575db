package materials

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"squint/materials/sampling"
)

// readTable returns a CSV of testdata as header and numbers; lines that begin
// with # name the source. A missing file fails the test.
func readTable(t *testing.T, name string) (header []string, rows [][]float64) {
	t.Helper()
	f, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, line := range all[1:] {
		row := make([]float64, len(line))
		for i, s := range line {
			if row[i], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		rows = append(rows, row)
	}
	return all[0], rows
}

const (
	rounded7 = 0.5e-7 * 1.001 // half a unit of seven decimals
	rounded6 = 0.5e-6 * 1.001
	// tableError bounds the interpolation of the stored table over the cosine:
	// TestGlazingTableError measures it.
	tableError = 2e-6
)

// glazingColumns are the columns of glazing_angular.csv and what they hold.
var glazingColumns = map[string]struct {
	panes int
	kl    float64
	value func(v throughAndMirror) float64
}{
	"T1_KL0": {1, 0, transmitted}, "T1_KL0.0125": {1, .0125, transmitted}, "T1_KL0.0370": {1, .0370, transmitted},
	"T1_KL0.0524": {1, .0524, transmitted}, "T1_KL0.0736": {1, .0736, transmitted},
	"T2_KL0": {2, 0, transmitted}, "T2_KL0.0125_each": {2, .0125, transmitted}, "T2_KL0.0370_each": {2, .0370, transmitted},
	"T2_KL0.0370_series_sum_check": {2, .0370, transmitted}, "R2_KL0": {2, 0, reflected},
}

func transmitted(v throughAndMirror) float64 { return v.t }
func reflected(v throughAndMirror) float64   { return v.r }

// mismatches counts the values of the table that got misses by more than
// tolerance, and all that were compared.
func mismatches(t *testing.T, tolerance float64, got func(cos float64, panes int, kl float64) throughAndMirror) (wrong, all int) {
	t.Helper()
	header, rows := readTable(t, "glazing_angular.csv")
	for _, row := range rows {
		cos := math.Cos(row[0] * math.Pi / 180)
		for i, name := range header {
			c, ok := glazingColumns[name]
			if !ok {
				continue
			}
			all++
			if v := c.value(got(cos, c.panes, c.kl)); !(math.Abs(v-row[i]) <= tolerance) {
				wrong++
				if wrong <= 3 {
					t.Logf("%s at %g degrees: got %.8f, table %.7f", name, row[0], v, row[i])
				}
			}
		}
	}
	return wrong, all
}

func TestGlazingAngularTable(t *testing.T) {
	if wrong, all := mismatches(t, rounded7, stack); wrong > 0 || all != 200 {
		t.Errorf("%d of %d values differ, want 0 of 200", wrong, all)
	}
	// The same through the stored table of a unit made from its normal
	// transmittance alone.
	units := map[[2]float64]*Glazing{}
	unit := func(cos float64, panes int, kl float64) throughAndMirror {
		key := [2]float64{float64(panes), kl}
		g := units[key]
		if g == nil {
			var err error
			if g, err = NewGlazing(stack(1, panes, kl).t, panes); err != nil {
				t.Fatal(err)
			}
			if math.Abs(g.Extinction-kl) > 1e-12 { // exact: the inverse of stack
				t.Errorf("%d panes: extinction %g, want %g", panes, g.Extinction, kl)
			}
			units[key] = g
		}
		r, tr := g.Delta(Back, cos)
		return throughAndMirror{t: tr, r: r}
	}
	if wrong, all := mismatches(t, rounded7+tableError, unit); wrong > 0 {
		t.Errorf("units: %d of %d values differ, want none", wrong, all)
	}
	// The twin: polarisations averaged before the panes are joined, a common
	// mistake.
	mixed := func(cos float64, panes int, kl float64) throughAndMirror {
		one := stack(cos, 1, kl)
		if panes == 1 {
			return one
		}
		d := 1 - one.r*one.r
		return throughAndMirror{t: one.t * one.t / d, r: one.r + one.t*one.t*one.r/d}
	}
	if wrong, _ := mismatches(t, rounded7+tableError, mixed); wrong == 0 {
		t.Error("mixed polarisations: planted defect not seen")
	}
}

func TestFresnel(t *testing.T) {
	header, rows := readTable(t, "glazing_angular.csv")
	if header[1] != "r_perp_interface" || header[2] != "r_par_interface" || header[3] != "r_mean_interface" {
		t.Fatalf("columns %v", header)
	}
	for _, row := range rows {
		p, q, _ := fresnel(math.Cos(row[0] * math.Pi / 180))
		for i, got := range []float64{p, q, (p + q) / 2} {
			if math.Abs(got-row[1+i]) > rounded7 {
				t.Errorf("%s at %g degrees: got %.8f, want %.7f", header[1+i], row[0], got, row[1+i])
			}
		}
	}
}

// Textbook values, Duffie, Beckman, 2013, chapter 5, examples and figures 5.1.1
// and 5.3.1 (from memory), rounded as printed.
func TestGlazingTextbook(t *testing.T) {
	const deg = math.Pi / 180
	perpendicular, parallel, inside := fresnel(math.Cos(60 * deg))
	a := math.Exp(-0.0736 / inside)
	p0, q0, _ := fresnel(1)
	for _, c := range []struct {
		name            string
		got, want, half float64
	}{
		{"reflectance of a face at 0", (p0 + q0) / 2, 0.0434, 0.5e-4},
		{"reflectance of a face at 60", (perpendicular + parallel) / 2, 0.093, 0.5e-3},
		{"single pane at 0, no absorption", stack(1, 1, 0).t, 0.917, 0.5e-3},
		{"single pane at 60, no absorption", stack(math.Cos(60*deg), 1, 0).t, 0.842, 0.5e-3},
		{"double pane at 0, no absorption", stack(1, 2, 0).t, 0.85, 0.5e-2},
		{"double pane at 60, no absorption", stack(math.Cos(60*deg), 2, 0).t, 0.76, 0.5e-2},
		{"KL .0736 at 60, perpendicular", pane(perpendicular, a).t, 0.624687, rounded6}, // derived from the same equations
		{"KL .0736 at 60, parallel", pane(parallel, a).t, 0.911845, rounded6},           // as above
		{"relative, single KL .0370 at 60", stack(math.Cos(60*deg), 1, .037).t / stack(1, 1, .037).t, 0.910, 0.5e-3},
		{"relative, single KL .0370 at 70", stack(math.Cos(70*deg), 1, .037).t / stack(1, 1, .037).t, 0.779, 0.5e-3},
		{"relative, single KL .0370 at 80", stack(math.Cos(80*deg), 1, .037).t / stack(1, 1, .037).t, 0.483, 0.5e-3},
		{"relative, double KL .0370 at 60", stack(math.Cos(60*deg), 2, .037).t / stack(1, 2, .037).t, 0.879, 0.5e-3},
		{"relative, double KL .0370 at 70", stack(math.Cos(70*deg), 2, .037).t / stack(1, 2, .037).t, 0.693, 0.5e-3},
		{"relative, double KL .0370 at 80", stack(math.Cos(80*deg), 2, .037).t / stack(1, 2, .037).t, 0.339, 0.5e-3},
	} {
		if math.Abs(c.got-c.want) > c.half*1.001 {
			t.Errorf("%s: got %.6f, want %g", c.name, c.got, c.want)
		}
	}
}

// Hemispherical transmittances: integral of T sin(2 theta), derived from the
// same equations outside this project, six decimals.
func TestGlazingHemispherical(t *testing.T) {
	for _, c := range []struct {
		panes    int
		kl, want float64
	}{
		{1, 0, 0.845077}, {1, .0125, 0.832842}, {1, .0370, 0.809435}, {1, .0524, 0.795096},
		{2, 0, 0.762651}, {2, .0125, 0.740403}, {2, .0370, 0.698884},
	} {
		g, err := NewGlazing(stack(1, c.panes, c.kl).t, c.panes)
		if err != nil {
			t.Fatal(err)
		}
		// The midpoint rule with 4,096 intervals adds some (1/4096)^2 = 6e-8.
		if math.Abs(g.HemisphericalTransmittance-c.want) > rounded6+1e-7 {
			t.Errorf("%d panes, KL %g: got %.7f, want %.6f", c.panes, c.kl, g.HemisphericalTransmittance, c.want)
		}
		if sum := g.HemisphericalTransmittance + g.HemisphericalReflectance; sum > 1+1e-12 || c.kl == 0 && sum < 1-1e-12 {
			t.Errorf("%d panes, KL %g: transmittance and reflectance sum to %.9f", c.panes, c.kl, sum)
		}
	}
}

func TestGlazingTableError(t *testing.T) {
	var worst float64
	for panes := 1; panes <= MaxPanes; panes++ {
		for _, share := range []float64{1, 0.9, 0.5, 0.1} {
			g, err := NewGlazing(share*ClearTransmittance(panes), panes)
			if err != nil {
				t.Fatal(err)
			}
			if got := g.Transmittance(1); math.Abs(got-share*ClearTransmittance(panes)) > 1e-12 {
				t.Errorf("%d panes: normal transmittance %.12f, want %.12f", panes, got, share*ClearTransmittance(panes))
			}
			for i := range 20000 {
				cos := (float64(i) + 0.5) / 20000
				r, tr := g.Delta(Front, cos)
				want := stack(cos, panes, g.Extinction)
				worst = max(worst, math.Abs(r-want.r), math.Abs(tr-want.t))
				if tr < 0 || r < 0 || r+tr > 1+1e-12 {
					t.Fatalf("%d panes, cosine %g: reflectance %g, transmittance %g", panes, cos, r, tr)
				}
			}
		}
	}
	t.Logf("largest interpolation error %.2g", worst)
	if worst > tableError {
		t.Errorf("largest interpolation error %.2g, want at most %g", worst, tableError)
	}
}

func TestGlazingFromRows(t *testing.T) {
	const deg = math.Pi / 180
	rows := []GlazingRow{{0, 0.62, 0.15}, {30 * deg, 0.61, 0.15}, {60 * deg, 0.52, 0.25}, {75 * deg, 0.30, 0.50}}
	g, err := NewGlazingTable(rows)
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows { // exact: interpolation passes through its rows
		r, tr := g.Delta(Front, math.Cos(row.AngleRad))
		if math.Abs(tr-row.Transmittance) > tableError || math.Abs(r-row.Reflectance) > tableError {
			t.Errorf("at %g: got %g, %g, want %g, %g", row.AngleRad, tr, r, row.Transmittance, row.Reflectance)
		}
	}
	lastT, lastR := 2.0, -1.0
	for i := 0; i <= 2000; i++ { // falling and rising rows: no overshoot between them
		r, tr := g.Delta(Front, math.Cos(math.Pi/2*float64(i)/2000))
		if tr > lastT+1e-12 || r < lastR-1e-12 || tr < 0 || r+tr > 1+1e-12 {
			t.Fatalf("step %d: transmittance %g after %g, reflectance %g after %g", i, tr, lastT, r, lastR)
		}
		lastT, lastR = tr, r
	}
	if r, tr := g.Delta(Front, 0); tr != 0 || r != 1 {
		t.Errorf("grazing: got %g, %g, want 0 through, 1 mirrored", tr, r)
	}
}

func TestGlazingRefuses(t *testing.T) {
	const deg = math.Pi / 180
	of := func(_ *Glazing, err error) error { return err }
	for _, c := range []struct {
		name string
		err  error
		want string
	}{
		{"beyond clear glass", of(NewGlazing(0.95, 1)), "transmittance: got 0.95, want above 0 to 0.9169, the limit for 1 uncoated pane without absorption; lower it, or give coated glass as a table of angles"},
		{"beyond clear double glass", of(NewGlazing(0.86, 2)), "transmittance: got 0.86, want above 0 to 0.8465, the limit for 2 uncoated panes without absorption; lower it, use fewer panes, or give coated glass as a table of angles"},
		{"per cent", of(NewGlazing(70, 2)), "give a share, not per cent"},
		{"opaque", of(NewGlazing(0, 2)), "use a matte finish for what is opaque"},
		{"not a number", of(NewGlazing(math.NaN(), 2)), "transmittance: got NaN"},
		{"no panes", of(NewGlazing(0.7, 0)), "panes: got 0, want 1 to 4"},
		{"five panes", of(NewGlazing(0.7, 5)), "panes: got 5, want 1 to 4"},
		{"one row", of(NewGlazingTable([]GlazingRow{{0, 0.5, 0.1}})), "table: got 1, want 2 or more rows"},
		{"first angle", of(NewGlazingTable([]GlazingRow{{10 * deg, 0.5, 0.1}, {20 * deg, 0.5, 0.1}})), "table row 1: angle: got 10, want 0 in the first row"},
		{"falling angle", of(NewGlazingTable([]GlazingRow{{0, 0.5, 0.1}, {20 * deg, 0.5, 0.1}, {15 * deg, 0.5, 0.1}})), "table row 3: angle: got 15, want above 20 to 90; angles must rise"},
		{"angle beyond grazing", of(NewGlazingTable([]GlazingRow{{0, 0.5, 0.1}, {91 * deg, 0.5, 0.1}})), "table row 2: angle: got 91, want above 0 to 90"},
		{"too much light", of(NewGlazingTable([]GlazingRow{{0, 0.7, 0.4}, {1, 0.5, 0.1}})), "table row 1: transmittance + reflectance: got 1.1, want at most 1"},
	} {
		var e *RangeError
		if c.err == nil || !strings.Contains(c.err.Error(), c.want) || !errors.As(c.err, &e) {
			t.Errorf("%s: got %v, want %s", c.name, c.err, c.want)
		}
	}
}

func FuzzNewGlazingTable(f *testing.F) {
	f.Add(0.62, 0.15, 0.8, 0.5, 0.2, 1.2, 0.3, 0.4)
	f.Add(1.0, 0.0, 1e-300, 0.0, 1.0, math.Pi/2, 1.0, 0.0)
	f.Fuzz(func(t *testing.T, t0, r0, a1, t1, r1, a2, t2, r2 float64) {
		g, err := NewGlazingTable([]GlazingRow{{0, t0, r0}, {a1, t1, r1}, {a2, t2, r2}})
		if err != nil {
			return
		}
		s := sampling.NewStream(1)
		for range 50 {
			r, tr := g.Delta(Front, s.Float64())
			if !(r >= 0 && tr >= 0 && r+tr <= 1+1e-9) {
				t.Fatalf("reflectance %g, transmittance %g", r, tr)
			}
		}
	})
}

// TestJoined: two units of equal panes are the unit of all of them, by the table
// that glazing_angular.csv holds for two panes; units that differ, that are known
// from a table, or that have too many panes together do not join.
func TestJoined(t *testing.T) {
	unit := func(panes int, kl float64) *Glazing {
		g, err := NewGlazing(stack(1, panes, kl).t, panes)
		if err != nil {
			t.Fatal(err)
		}
		g.Extinction = kl // free of the rounding of solving for it
		return g
	}
	joined := map[float64]*Glazing{}
	got := func(cos float64, panes int, kl float64) throughAndMirror {
		if panes == 1 {
			return stack(cos, 1, kl)
		}
		if joined[kl] == nil {
			g, ok := Joined(unit(1, kl), unit(1, kl))
			if !ok || g.Panes != 2 {
				t.Fatalf("equal panes: got %+v, %v, want two joined", g, ok)
			}
			joined[kl] = g
		}
		r, through := joined[kl].Delta(Front, cos)
		return throughAndMirror{t: through, r: r}
	}
	if wrong, all := mismatches(t, rounded7+tableError, got); wrong > 0 || all != 200 {
		t.Errorf("%d of %d values differ, want 0 of 200", wrong, all)
	}
	if g, ok := Joined(unit(2, .02), unit(2, .02)); !ok || g.Panes != MaxPanes {
		t.Errorf("two and two panes: got %+v, %v, want %d panes", g, ok, MaxPanes)
	}
	measured, err := NewGlazingTable([]GlazingRow{{0, .8, .1}, {1, .7, .2}})
	if err != nil {
		t.Fatal(err)
	}
	for name, pair := range map[string][2]*Glazing{
		"unequal extinction":  {unit(1, .02), unit(1, .03)},
		"too many panes":      {unit(2, .02), unit(3, .02)},
		"a table and a pane":  {measured, unit(1, .02)},
		"a pane and a table":  {unit(1, .02), measured},
		"two tables the same": {measured, measured},
	} {
		if g, ok := Joined(pair[0], pair[1]); ok || g != nil {
			t.Errorf("%s: got %+v, want them not to join", name, g)
		}
	}
}
