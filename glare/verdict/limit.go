package verdict

import (
	"fmt"
	"math"

	"squint/glare/daylight"
)

// Limit is a limit of the user's own: values from Low to High (either may be
// infinite) in at least TimeShare of the hours at PlaceShare of the places.
type Limit struct {
	Name                  string // what it is called; "" for no name
	Metric, Unit          string // unit with its leading blank, "" for none
	Places                string // "sensors", "viewpoints" or "openings"
	Hours                 string // "the hours in use"; "" for a value without hours
	Low, High             float64
	TimeShare, PlaceShare float64
}

// Judge holds the series of several places against the limit.
func (l Limit) Judge(subject string, p daylight.Plane, hours daylight.Hours) Verdict {
	return l.judge(subject, p.SensorsWithin(hours, l.Low, l.High, l.TimeShare))
}

// JudgeEach is Judge with hours of its own for each place.
func (l Limit) JudgeEach(subject string, p daylight.Plane, hours []daylight.Hours) Verdict {
	return l.judge(subject, p.EachWithin(hours, l.Low, l.High, l.TimeShare))
}

func (l Limit) judge(subject string, share daylight.Bracket) Verdict {
	value := func(x float64) string {
		if x >= 1000 {
			return whole(x)
		}
		return fmt.Sprintf("%g", x)
	}
	span := value(l.Low) + " to " + value(l.High) + l.Unit
	switch {
	case math.IsInf(l.Low, -1):
		span = "at most " + value(l.High) + l.Unit
	case math.IsInf(l.High, 1):
		span = "at least " + value(l.Low) + l.Unit
	}
	what := l.Metric + " of " + span
	if l.Hours != "" {
		what += fmt.Sprintf(" in %s of %s", percent(l.TimeShare), l.Hours)
	}
	name := "own limit"
	if l.Name != "" {
		name += ", " + l.Name
	}
	v := Verdict{
		Criterion: fmt.Sprintf("%s: %s at %s or more of the %s", name, what, percent(l.PlaceShare), l.Places),
		Source:    "the project",
		Subject:   subject,
		Text:      fmt.Sprintf("%s: %s at %s of the %s (at least %s asked)", subject, what, spreadIn(share), l.Places, percent(l.PlaceShare)),
	}
	return v.judged(share, l.PlaceShare, AtLeast(share, l.PlaceShare), "the limit lies within the errors")
}
