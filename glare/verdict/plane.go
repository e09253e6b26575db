package verdict

import (
	"fmt"
	"strings"

	"squint/glare/daylight"
)

// Provision judges a work plane against a level of EN 17037 daylight
// provision by illuminance: all its shares of the plane must be reached.
func Provision(subject string, r daylight.ProvisionResult) Verdict {
	l := r.Level
	asked := fmt.Sprintf("%.0f lx on %s", l.TargetLx, percent(l.TargetShare))
	found := fmt.Sprintf("%.0f lx for %s of the daylight hours on %s of the plane (at least %s asked)",
		l.TargetLx, percent(l.TimeShare), spreadIn(r.Target), percent(l.TargetShare))
	if l.MinimumShare > 0 {
		asked += fmt.Sprintf(" and %.0f lx on %s", l.MinimumLx, percent(l.MinimumShare))
		found += fmt.Sprintf(", %.0f lx on %s of it (at least %s)", l.MinimumLx, spreadIn(r.Minimum), percent(l.MinimumShare))
	}
	v := Verdict{
		Criterion: fmt.Sprintf("daylight provision, %s: %s of the plane for %s of the daylight hours", l.Name, asked, percent(l.TimeShare)),
		Source:    "EN 17037:2018",
		Subject:   subject,
		Text:      subject + ": " + found,
	}
	return v.bothShares(l, r.Target, r.Minimum)
}

// ProvisionByFactor judges a work plane against a level of EN 17037 daylight
// provision by daylight factors.
func ProvisionByFactor(subject string, r daylight.FactorProvision) Verdict {
	l := r.Level
	asked := fmt.Sprintf("%s on %s", percent(r.TargetDF), percent(l.TargetShare))
	found := fmt.Sprintf("%s on %s of the plane (at least %s asked)", percent(r.TargetDF), spreadIn(r.Target), percent(l.TargetShare))
	if l.MinimumShare > 0 {
		asked += fmt.Sprintf(" and %s on %s", percent(r.MinimumDF), percent(l.MinimumShare))
		found += fmt.Sprintf(", %s on %s of it (at least %s)", percent(r.MinimumDF), spreadIn(r.Minimum), percent(l.MinimumShare))
	}
	v := Verdict{
		Criterion: fmt.Sprintf("daylight provision by daylight factor, %s: %s of the plane, under a median sky of %s lx", l.Name, asked, whole(r.MedianDiffuseLx)),
		Source:    "EN 17037:2018",
		Subject:   subject,
		Text:      subject + ": a daylight factor of " + found,
	}
	return v.bothShares(l, r.Target, r.Minimum)
}

// bothShares judges the two shares of a level of daylight provision.
func (v Verdict) bothShares(l daylight.ProvisionLevel, target, minimum Bracket) Verdict {
	ofTarget, ofMinimum := AtLeast(target, l.TargetShare), AtLeast(minimum, l.MinimumShare)
	// The number that decides: the condition that fails, else the one that is
	// open, else the one with less to spare.
	share, limit := target, l.TargetShare
	if rank(ofMinimum) > rank(ofTarget) || (rank(ofMinimum) == rank(ofTarget) && minimum.Estimate-l.MinimumShare < target.Estimate-l.TargetShare) {
		share, limit = minimum, l.MinimumShare
	}
	return v.judged(share, limit, Both(ofTarget, ofMinimum), ofSensors)
}

func rank(o Outcome) int {
	switch o {
	case NotMet:
		return 2
	case Undecided:
		return 1
	}
	return 0
}

// Spatial judges spatial daylight autonomy against a share of the plane.
func Spatial(subject string, r daylight.SpatialResult, s daylight.Spatial, limit float64) Verdict {
	v := Verdict{
		Criterion: fmt.Sprintf("%s: %.0f lx in %s of %s hours on at least %s of the plane", r.Label, s.ThresholdLx, percent(s.TimeShare), hours(r.Hours), percent(limit)),
		Source:    "IES LM-83-12",
		Subject:   subject,
		Text:      fmt.Sprintf("%s: %.0f lx in %s of the hours on %s of the plane (at least %s asked)", subject, s.ThresholdLx, percent(s.TimeShare), spreadIn(r.Share), percent(limit)),
	}
	return v.judged(r.Share, limit, AtLeast(r.Share, limit), ofSensors)
}

// SunExposure judges annual sunlight exposure against a share of the plane.
func SunExposure(subject string, r daylight.ExposureResult, x daylight.Exposure, limit float64) Verdict {
	return Verdict{
		Criterion: fmt.Sprintf("%s: direct sun above %s lx for more than %d h on at most %s of the plane", r.Label, whole(x.ThresholdLx), x.HoursLimit, percent(limit)),
		Source:    "IES LM-83-12",
		Subject:   subject,
		Outcome:   AtMost(r.Share, limit),
		Estimate:  r.Share.Estimate, Surely: r.Share.Surely, Possibly: r.Share.Possibly, Limit: limit,
		Text: fmt.Sprintf("%s: direct sun above %s lx for more than %d h on %s of the plane (limit %s).",
			subject, whole(x.ThresholdLx), x.HoursLimit, spreadIn(r.Share), percent(limit)),
	}
}

// ClearSky judges the share of a work plane between two illuminances at
// moments under a clear sky, each of which must reach the limit; shares and
// names of the moments go together, one at least.
func ClearSky(subject string, moments []string, shares []Bracket, lowLx, highLx, limit float64) Verdict {
	v := Verdict{
		Criterion: fmt.Sprintf("clear sky at the equinox: %s to %s lx on at least %s of the plane at %s", whole(lowLx), whole(highLx), percent(limit), strings.Join(moments, " and ")),
		Source:    "as in rating schemes, from memory; sky CIE S 011/E:2003 type 12",
		Subject:   subject,
	}
	var all []Outcome
	var found []string
	least := 0
	for i, b := range shares {
		all = append(all, AtLeast(b, limit))
		found = append(found, fmt.Sprintf("on %s at %s", spreadIn(b), moments[i]))
		if rank(all[i]) > rank(all[least]) || rank(all[i]) == rank(all[least]) && b.Estimate < shares[least].Estimate {
			least = i
		}
	}
	v.Text = fmt.Sprintf("%s: %s to %s lx %s (at least %s of the plane asked)", subject, whole(lowLx), whole(highLx), strings.Join(found, ", "), percent(limit))
	return v.judged(shares[least], limit, Both(all...), ofSensors)
}
