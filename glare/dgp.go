package glare

import "math"

// Range in which DGP was fitted: that of the data of Wienold and
// Christoffersen, Energy and Buildings 38 (2006) 743-757 (from memory).
const (
	MinDGP   = 0.2
	MaxDGP   = 0.8
	MinEvLux = 380.0
)

// DGP returns the daylight glare probability
//
//	5.87e-5 Ev + 9.18e-2 log10(1 + sum(L^2 omega/P^2) / Ev^1.87) + 0.16
//
// of the vertical illuminance ev at the eye (lx) and sourceSum, the sum over
// the sources of L^2 omega/P^2 (cd2/m4 sr). It is not clipped: far outside
// of its range it exceeds 1; see ClipDGP. Without light (ev <= 0) it is 0.16.
// Source: J. Wienold, J. Christoffersen, Energy and Buildings 38 (2006)
// 743-757 (from memory).
func DGP(ev, sourceSum float64) float64 {
	if ev <= 0 {
		return 0.16
	}
	return 5.87e-5*ev + 9.18e-2*math.Log10(1+sourceSum/math.Pow(ev, 1.87)) + 0.16
}

// ClipDGP limits a DGP to 0..1, as a probability is reported.
func ClipDGP(dgp float64) float64 { return math.Min(math.Max(dgp, 0), 1) }

// InRange tells whether dgp and ev lie in the range of the data DGP was
// fitted to. Outside, only the formula is checked, not the sensation.
func InRange(dgp, ev float64) bool {
	return dgp >= MinDGP && dgp <= MaxDGP && ev >= MinEvLux
}

// LowLight returns the factor on DGP for little light at the eye,
// exp(0.024 Ev - 4) / (1 + exp(0.024 Ev - 4)), 0.96 at 300 lx and 1 within
// 0.4 % from 400 lx. Source: J. Wienold, Daylight glare in offices, Fraunhofer
// IRB 2010 (from memory, fairly sure).
func LowLight(ev float64) float64 { return 1 / (1 + math.Exp(4-0.024*ev)) }

// DGPs returns the simplified DGP, 6.22e-5 Ev + 0.184. It is not valid where
// the sun or its mirror image reaches the eye. Source: J. Wienold, Dynamic
// daylight glare evaluation, Building Simulation 2009 (from memory).
func DGPs(ev float64) float64 { return 6.22e-5*ev + 0.184 }

// Class names the sensation that goes with a DGP: imperceptible below 0.35,
// perceptible from 0.35, disturbing from 0.40, intolerable above 0.45; empty
// for NaN. Source: J. Wienold, Building Simulation 2009 (from memory).
func Class(dgp float64) string {
	switch {
	case math.IsNaN(dgp):
		return ""
	case dgp < 0.35:
		return "imperceptible"
	case dgp < 0.40:
		return "perceptible"
	case dgp <= 0.45:
		return "disturbing"
	}
	return "intolerable"
}
