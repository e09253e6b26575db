package daylight

import (
	"math"
	"slices"
)

// DefaultThresholdLx is the illuminance asked for by DA and sDA, 300 lx.
// Source: IES LM-83-12 (sDA300).
const DefaultThresholdLx = 300

// DA is daylight autonomy: the share of the hours in which one sensor's series
// reaches the threshold, 0 to 1.
// Source: Reinhart and Walkenhorst 2001, Energy and Buildings 33(7).
func DA(e []float32, hours Hours, thresholdLx float64) float64 {
	n := 0
	for _, h := range hours {
		if float64(e[h]) >= thresholdLx {
			n++
		}
	}
	return float64(n) / float64(len(hours))
}

// CDA is continuous daylight autonomy: an hour below the threshold earns the
// part of it that it reaches. 0 to 1; NaN where a value is.
// Source: Rogers 2006, Daylighting metric development.
func CDA(e []float32, hours Hours, thresholdLx float64) float64 {
	sum := 0.0
	for _, h := range hours {
		sum += math.Min(1, float64(e[h])/thresholdLx)
	}
	return sum / float64(len(hours))
}

// Bins bounds the classes of useful daylight illuminance, in lx.
type Bins struct{ FellShortLx, SupplementaryLx, ExceededLx float64 }

// DefaultBins are 100, 300 and 3000 lx. Source: Nabil and Mardaljevic 2005,
// Lighting Res. Technol. 37(1), with the authors' later bound of 3000 lx
// (note on the repository copy of the paper).
var DefaultBins = Bins{100, 300, 3000}

// UsefulShares are the shares of the hours in each class; they add up to 1.
type UsefulShares struct {
	FellShort     float64 // E < 100 lx; NaN counts here
	Supplementary float64 // 100 <= E < 300
	Autonomous    float64 // 300 <= E <= 3000
	Exceeded      float64 // E > 3000
}

// Useful is the share of useful hours: supplementary and autonomous.
func (u UsefulShares) Useful() float64 { return u.Supplementary + u.Autonomous }

// UDI sorts one sensor's hours into the classes of useful daylight
// illuminance. Source: see [DefaultBins].
func UDI(e []float32, hours Hours, b Bins) UsefulShares {
	var n [4]float64
	for _, h := range hours {
		switch v := float64(e[h]); {
		case v > b.ExceededLx:
			n[3]++
		case v >= b.SupplementaryLx:
			n[2]++
		case v >= b.FellShortLx:
			n[1]++
		default:
			n[0]++
		}
	}
	t := float64(len(hours))
	return UsefulShares{n[0] / t, n[1] / t, n[2] / t, n[3] / t}
}

// reached is the largest value that at least share of v reach; it sorts v. The
// k-th largest of n, k = ceil(share n), is reached by k of them.
func reached(v []float64, share float64) float64 {
	if len(v) == 0 {
		return math.NaN()
	}
	slices.Sort(v) // NaN first, so never among the largest unless nothing else is left
	// The tolerance undoes the rounding of products such as 0.95*20.
	k := int(math.Ceil(share*float64(len(v)) - 1e-9))
	return v[len(v)-max(1, min(k, len(v)))]
}
