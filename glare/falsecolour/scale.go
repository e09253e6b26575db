package falsecolour

import (
	"fmt"
	"math"
	"slices"
)

// Scale maps a quantity to 0..1, linear or by its logarithm. What lies
// outside of Min to Max is drawn in the colour of the end, and the legend
// says so.
type Scale struct {
	Min, Max float64 // Min < Max, in Unit; Log: Min > 0
	Log      bool
	Quantity string // "Luminance"
	Unit     string // "cd/m2"; a final 2 after m is drawn raised
}

func (s Scale) validate() error {
	if math.IsInf(s.Min, 0) || math.IsInf(s.Max, 0) || !(s.Min < s.Max) || math.IsInf(s.Max-s.Min, 0) {
		return fmt.Errorf("%w: scale: got %g to %g, want finite and rising", ErrInvalid, s.Min, s.Max)
	}
	if s.Log && !(s.Min > 0) {
		return fmt.Errorf("%w: scale: got %g to %g, want a log scale to begin above 0", ErrInvalid, s.Min, s.Max)
	}
	return nil
}

// Fraction is where v stands between Min (0) and Max (1); it is below 0 or
// above 1 outside of them. NaN stays NaN, and 0 or less on a log scale is
// -Inf.
func (s Scale) Fraction(v float64) float64 {
	if !s.Log {
		return (v - s.Min) / (s.Max - s.Min)
	}
	if v <= 0 {
		return math.Inf(-1)
	}
	return math.Log(v/s.Min) / math.Log(s.Max/s.Min)
}

// How FitScale chooses. Own choice: four decades are what a picture of a room
// fills, and the few pixels of a sun or of a pitch-dark corner shall not
// flatten all others.
const (
	fitLow, fitHigh = 0.01, 0.999 // quantiles within the scale
	fitDecades      = 1e4         // largest Max/Min of a log scale
	fitLeast        = 10          // smallest
)

// FitScale returns a scale between round numbers that holds all but the
// lowest 1 % and the highest 0.1 % of the finite values of all given images.
//
// A log scale, of the positive values, begins and ends at 1, 2 or 5 times a
// power of ten; it spans one to four decades and gives up the lower values
// where that is not enough. A linear scale ends at a multiple of a step that
// is 1, 2 or 5 times a power of ten, and begins at 0 unless there are values
// below. Without values it is 1 to 1000, or 0 to 1.
func FitScale(quantity, unit string, log bool, images ...[]float32) Scale {
	s := Scale{Log: log, Quantity: quantity, Unit: unit}
	var all []float32
	for _, im := range images {
		for _, v := range im {
			if math.IsNaN(float64(v)) || math.IsInf(float64(v), 0) || log && v <= 0 {
				continue
			}
			all = append(all, v)
		}
	}
	slices.Sort(all)
	if len(all) == 0 {
		if s.Max = 1; log {
			s.Min, s.Max = 1, 1000
		}
		return s
	}
	quantile := func(q float64) float64 { return float64(all[int(q*float64(len(all)-1)+0.5)]) }
	low, high := quantile(fitLow), quantile(fitHigh)
	if !log {
		low, high = min(low, 0), max(high, 0)
		if low == high {
			s.Max = 1
			return s
		}
		// From some four to ten steps over the scale.
		step := roundUp((high - low) / 9)
		s.Min, s.Max = multiple(math.Floor(low/step+1e-6), step), multiple(math.Ceil(high/step-1e-6), step)
		return s
	}
	s.Max = roundUp(high)
	s.Min = max(roundDown(low), s.Max/fitDecades)
	if s.Max/s.Min < fitLeast {
		s.Min = s.Max / fitLeast
	}
	return s
}

// multiple is i times a step that is 1, 2 or 5 times a power of ten. Dividing
// by a whole number keeps 0.6 the 0.6 of a literal.
func multiple(i, step float64) float64 {
	if step < 1 {
		return i / math.Round(1/step)
	}
	return i * step
}

// roundUp is the smallest 1, 2 or 5 times a power of ten not below v; 0 for
// v <= 0. A relative 1e-6 is taken for the
// rounding of a float32.
func roundUp(v float64) float64 {
	if v <= 0 {
		return 0
	}
	decade := math.Pow(10, math.Floor(math.Log10(v)))
	for _, m := range [...]float64{1, 2, 5} {
		if m*decade >= v*(1-1e-6) {
			return m * decade
		}
	}
	return 10 * decade
}

// roundDown is the largest 1, 2 or 5 times a power of ten not above v > 0.
func roundDown(v float64) float64 {
	decade := math.Pow(10, math.Floor(math.Log10(v)))
	for _, m := range [...]float64{5, 2, 1} {
		if m*decade <= v*(1+1e-6) {
			return m * decade
		}
	}
	return decade / 2 // Log10 rounded up
}
