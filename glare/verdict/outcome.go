package verdict

import "squint/glare/daylight"

// Outcome is what a verdict says. The zero value is Undecided.
type Outcome int

// The outcomes.
const (
	Undecided Outcome = iota
	Met
	NotMet
)

// String is "met", "not met" or "undecided".
func (o Outcome) String() string {
	switch o {
	case Met:
		return "met"
	case NotMet:
		return "not met"
	}
	return "undecided"
}

// Bracket is a count or share counted surely, as computed, and possibly;
// Surely <= Estimate <= Possibly.
type Bracket = daylight.Bracket

// AtMost judges a share that may not exceed the limit; a share equal to it is
// met. NaN is undecided.
func AtMost(b Bracket, limit float64) Outcome {
	switch {
	case b.Possibly <= limit:
		return Met
	case b.Surely > limit:
		return NotMet
	}
	return Undecided
}

// AtLeast judges a share that must reach the limit; a share equal to it is
// met. NaN is undecided.
func AtLeast(b Bracket, limit float64) Outcome {
	switch {
	case b.Surely >= limit:
		return Met
	case b.Possibly < limit:
		return NotMet
	}
	return Undecided
}

// Both is the outcome of conditions that must all hold: not met when any is
// not met, met when all are, otherwise undecided. Of nothing: undecided.
func Both(all ...Outcome) Outcome {
	met := 0
	for _, o := range all {
		switch o {
		case NotMet:
			return NotMet
		case Met:
			met++
		}
	}
	if met > 0 && met == len(all) {
		return Met
	}
	return Undecided
}
