package materials

import "fmt"

// Soiling is the dirt on a finish: it takes a share more with each month since
// the last cleaning, evenly (common practice, no published source). The finish
// is clean on 1 January and on the first of every CleaningMonths-th month after
// it, the year after as well: where the interval does not divide 12, the last
// one of the year is cut short.
type Soiling struct {
	LossPerMonth   float64 // share of light taken more with each month, 0 to 1
	CleaningMonths int     // from cleaning to cleaning, 1 to 12
}

// NewSoiling checks the numbers; dirt cannot take more than all light.
func NewSoiling(lossPerMonth float64, cleaningMonths int) (Soiling, error) {
	s := Soiling{LossPerMonth: lossPerMonth, CleaningMonths: cleaningMonths}
	if cleaningMonths < 1 || cleaningMonths > 12 {
		return s, &RangeError{Key: "cleaning_months", Got: float64(cleaningMonths), Want: "1 to 12"}
	}
	if err := checkShare("loss_per_month", lossPerMonth); err != nil {
		return s, err
	}
	if all := lossPerMonth * float64(cleaningMonths); all > 1+sumSlack {
		return s, &RangeError{Key: "loss_per_month x cleaning_months", Got: all, Want: "at most 1",
			Advice: "dirt cannot take more than all light: lower one of them"}
	}
	return s, nil
}

// NewSoilingOfMean returns the soiling whose Mean is mean, such as a published
// maintenance factor, taken as the mean over the time between cleanings (our
// reading; the sources do not say). Domain: a mean of 0.5 to 1 where the
// interval divides 12, since 2 mean - 1 is left at its end; a little less or
// more elsewhere.
func NewSoilingOfMean(mean float64, cleaningMonths int) (Soiling, error) {
	if err := checkShare("maintenance_factor", mean); err != nil {
		return Soiling{}, err
	}
	// The most: nothing is left at the end of an interval.
	full, err := NewSoiling(1/float64(max(cleaningMonths, 1)), cleaningMonths)
	if err != nil {
		return Soiling{}, err
	}
	least := full.Mean()
	if mean < least {
		return Soiling{}, &RangeError{Key: "maintenance_factor", Got: mean,
			Want:   fmt.Sprintf("%.4g to 1 with cleaning_months = %d", least, cleaningMonths),
			Advice: "less would leave nothing before the next cleaning"}
	}
	// The loss is proportional to LossPerMonth.
	return NewSoiling(full.LossPerMonth*(1-mean)/(1-least), cleaningMonths)
}

// Factors returns what is left of a finish's reflectance and transmittance,
// the mean over each month, January first.
func (s Soiling) Factors() [12]float64 {
	var f [12]float64
	for month := range f {
		age := float64(month) + 0.5
		if s.CleaningMonths > 0 {
			age = float64(month%s.CleaningMonths) + 0.5
		}
		f[month] = min(max(1-s.LossPerMonth*age, 0), 1)
	}
	return f
}

// Mean returns the mean of Factors over the year.
func (s Soiling) Mean() float64 {
	var sum float64
	for _, f := range s.Factors() {
		sum += f
	}
	return sum / 12
}

// Slope is how a pane lies, which decides how much dirt stays on it.
type Slope int

// The slopes that MaintenanceFactors tells apart.
const (
	Vertical Slope = iota
	Sloping
	Horizontal
)

// MaintenanceFactors hold what dirt leaves of a glazing's transmittance, by
// Slope, first where the air is clean, second in industry.
// Source: BS 8206-2:2008, "Lighting for buildings, part 2: code of practice for
// daylighting", and CIBSE, Lighting Guide 10 (both from memory).
var MaintenanceFactors = [3][2]float64{
	Vertical:   {0.9, 0.8},
	Sloping:    {0.8, 0.7},
	Horizontal: {0.7, 0.6},
}

// soiled is a finish of which a share is left.
type soiled struct {
	base   BSDF
	factor float64
	gloss  [2]*Gloss
}

// Soiled returns b with all that it reflects and lets through multiplied by
// factor; the rest is absorbed by the dirt, which scatters nothing of its own.
// factor is 0 to 1, as Soiling gives it; it panics on others, as on a finish
// that is nil.
func Soiled(b BSDF, factor float64) BSDF {
	if b == nil || !(factor >= 0 && factor <= 1) {
		panic(fmt.Sprintf("materials.Soiled: got finish %v and factor %g, want a finish and 0 to 1", b, factor))
	}
	if factor == 1 {
		return b
	}
	s := &soiled{base: b, factor: factor}
	for side := Front; side <= Back; side++ {
		s.gloss[side] = b.Gloss(side).scaled(factor)
	}
	return s
}

func (s *soiled) Lambert(side Side) (rho, tau float64) {
	rho, tau = s.base.Lambert(side)
	return rho * s.factor, tau * s.factor
}

func (s *soiled) Delta(side Side, cosTheta float64) (mirror, through float64) {
	mirror, through = s.base.Delta(side, cosTheta)
	return mirror * s.factor, through * s.factor
}

func (s *soiled) Gloss(side Side) *Gloss { return s.gloss[side] }
