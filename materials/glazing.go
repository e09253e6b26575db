package materials

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"
)

// GlassIndex is the refractive index of clear glass.
// Source: Duffie, Beckman, 2013, "Solar engineering of thermal processes",
// fourth edition, section 5.1 (average for glass over the solar spectrum).
const GlassIndex = 1.526

// MaxPanes is the largest number of panes that NewGlazing takes.
const MaxPanes = 4

// glazingSteps is the number of intervals of the stored table, even in the
// square root of the cosine, as the curves bend near grazing incidence;
// glazing_test.go measures what the interpolation costs.
const glazingSteps = 1024

// Glazing is a glazing unit taken as one thin clear surface, alike from both
// sides: light goes straight through or in the mirror direction.
type Glazing struct {
	Panes      int     // 0 where made from a table
	Extinction float64 // extinction coefficient times thickness of each pane; 0 where made from a table

	// HemisphericalTransmittance and HemisphericalReflectance hold for light
	// arriving evenly from the hemisphere: the integral of T sin(2 theta).
	HemisphericalTransmittance, HemisphericalReflectance float64

	table []throughAndMirror // by square root of the cosine, glazingSteps+1 entries
}

type throughAndMirror struct{ t, r float64 }

// GlazingRow is a measured pair at one incidence.
type GlazingRow struct {
	AngleRad      float64
	Transmittance float64
	Reflectance   float64
}

// ClearTransmittance returns the normal transmittance of panes that absorb
// nothing, the most that uncoated glass reaches. Domain: 1 or more panes.
func ClearTransmittance(panes int) float64 {
	return stack(1, panes, 0).t
}

// NewGlazing returns a unit of 1 to 4 equal uncoated panes whose absorption is
// chosen so that transmittance is met at normal incidence. A transmittance
// that even glass without absorption does not reach is an error naming the
// limit.
func NewGlazing(transmittance float64, panes int) (*Glazing, error) {
	if panes < 1 || panes > MaxPanes {
		return nil, &RangeError{Key: "panes", Got: float64(panes), Want: fmt.Sprintf("1 to %d", MaxPanes)}
	}
	limit := ClearTransmittance(panes)
	if !(transmittance > 0 && transmittance <= limit) {
		e := &RangeError{Key: "transmittance", Got: transmittance,
			Want: fmt.Sprintf("above 0 to %.4f, the limit for %s without absorption", limit, uncoated(panes))}
		switch {
		case transmittance > limit && transmittance <= 1:
			e.Advice = "lower it, or give coated glass as a table of angles"
			if panes > 1 {
				e.Advice = "lower it, use fewer panes, or give coated glass as a table of angles"
			}
		case transmittance == 0:
			e.Advice = "use a matte finish for what is opaque"
		default:
			e.Advice = "give a share, not per cent"
		}
		return nil, e
	}
	kl := solveExtinction(transmittance, panes)
	g := &Glazing{Panes: panes, Extinction: kl}
	g.fill(func(cos float64) throughAndMirror { return stack(cos, panes, kl) })
	return g, nil
}

// Joined is the unit of two units of equal uncoated panes, one behind the
// other, with the polarisation that light keeps from pane to pane; false where
// the panes differ, are known from a table only, or are more than MaxPanes.
func Joined(a, b *Glazing) (*Glazing, bool) {
	panes := a.Panes + b.Panes
	if a.Panes == 0 || b.Panes == 0 || a.Extinction != b.Extinction || panes > MaxPanes {
		return nil, false
	}
	g := &Glazing{Panes: panes, Extinction: a.Extinction}
	g.fill(func(cos float64) throughAndMirror { return stack(cos, panes, g.Extinction) })
	return g, true
}

func uncoated(panes int) string {
	if panes == 1 {
		return "1 uncoated pane"
	}
	return fmt.Sprintf("%d uncoated panes", panes)
}

// NewGlazingTable returns a unit from measured transmittances and reflectances
// at 2 or more rising angles, the first 0, the last at most pi/2. Between them
// it interpolates without overshoot. Where the last row lies before pi/2,
// grazing light is taken as wholly reflected.
// Source of the interpolation: Fritsch, Butland, 1984, "A method for
// constructing local monotone piecewise cubic interpolants", SIAM J. Sci. Stat.
// Comput. 5(2).
func NewGlazingTable(rows []GlazingRow) (*Glazing, error) {
	if len(rows) < 2 {
		return nil, &RangeError{Key: "table", Got: float64(len(rows)), Want: "2 or more rows"}
	}
	var xs, ts, rs []float64
	for i, row := range rows {
		key := fmt.Sprintf("table row %d", i+1)
		switch {
		case i == 0 && row.AngleRad != 0:
			return nil, &RangeError{Key: key + ": angle", Got: row.AngleRad * 180 / math.Pi, Want: "0 in the first row"}
		case i > 0 && !(row.AngleRad > rows[i-1].AngleRad && row.AngleRad <= math.Pi/2):
			return nil, &RangeError{Key: key + ": angle", Got: row.AngleRad * 180 / math.Pi,
				Want: fmt.Sprintf("above %g to 90", rows[i-1].AngleRad*180/math.Pi), Advice: "angles must rise"}
		}
		err := checkShares(share{key + ": transmittance", row.Transmittance}, share{"reflectance", row.Reflectance})
		if err != nil {
			return nil, err
		}
		xs, ts, rs = append(xs, row.AngleRad), append(ts, row.Transmittance), append(rs, row.Reflectance)
	}
	if xs[len(xs)-1] < math.Pi/2 {
		xs, ts, rs = append(xs, math.Pi/2), append(ts, 0), append(rs, 1)
	}
	var t, r interp.FritschButland
	if err := t.Fit(xs, ts); err != nil {
		return nil, fmt.Errorf("table: transmittance: %w", err)
	}
	if err := r.Fit(xs, rs); err != nil {
		return nil, fmt.Errorf("table: reflectance: %w", err)
	}
	g := &Glazing{}
	g.fill(func(cos float64) throughAndMirror {
		x := math.Acos(cos)
		v := throughAndMirror{t: min(max(t.Predict(x), 0), 1)}
		// The two curves are monotone each for itself: their sum may pass 1.
		v.r = min(max(r.Predict(x), 0), 1-v.t)
		return v
	})
	return g, nil
}

// fill tabulates f over the cosine and integrates it over the hemisphere, by
// the midpoint rule in s, cosine = s^2: 2 c dc = 4 s^3 ds.
func (g *Glazing) fill(f func(cos float64) throughAndMirror) {
	g.table = make([]throughAndMirror, glazingSteps+1)
	for i := range g.table {
		s := float64(i) / glazingSteps
		g.table[i] = f(s * s)
	}
	const n = 4 * glazingSteps
	var t, r, norm float64
	for i := range n {
		s := (float64(i) + 0.5) / n
		v, w := f(s*s), s*s*s
		t += w * v.t
		r += w * v.r
		norm += w
	}
	g.HemisphericalTransmittance, g.HemisphericalReflectance = t/norm, r/norm
}

func (g *Glazing) Lambert(Side) (rho, tau float64) { return 0, 0 }

// Delta interpolates in the stored table.
func (g *Glazing) Delta(_ Side, cosTheta float64) (mirror, through float64) {
	x := math.Sqrt(min(max(cosTheta, 0), 1)) * glazingSteps
	i := min(int(x), glazingSteps-1)
	f := x - float64(i)
	a, b := g.table[i], g.table[i+1]
	return a.r + f*(b.r-a.r), a.t + f*(b.t-a.t)
}

func (g *Glazing) Gloss(Side) *Gloss { return nil }

// Transmittance returns the share that passes at incidence cosTheta.
func (g *Glazing) Transmittance(cosTheta float64) float64 {
	_, t := g.Delta(Front, cosTheta)
	return t
}
