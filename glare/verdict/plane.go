package verdict

import (
	"fmt"

	"squint/glare/daylight"
)

// Provision judges a work plane against a level of EN 17037 daylight
// provision: both its shares of the plane must be reached.
func Provision(subject string, r daylight.ProvisionResult) Verdict {
	l := r.Level
	target, minimum := AtLeast(r.Target, l.TargetShare), AtLeast(r.Minimum, l.MinimumShare)
	v := Verdict{
		Criterion: fmt.Sprintf("daylight provision, %s: %.0f lx on %s and %.0f lx on %s of the plane for %s of the daylight hours",
			l.Name, l.TargetLx, percent(l.TargetShare), l.MinimumLx, percent(l.MinimumShare), percent(l.TimeShare)),
		Source:  "EN 17037:2018",
		Subject: subject,
		Outcome: Both(target, minimum),
	}
	// The number that decides: the condition that fails, else the one that is
	// open, else the one with less to spare.
	share, limit := r.Target, l.TargetShare
	if rank(minimum) > rank(target) || (rank(minimum) == rank(target) && r.Minimum.Estimate-l.MinimumShare < r.Target.Estimate-l.TargetShare) {
		share, limit = r.Minimum, l.MinimumShare
	}
	v.Estimate, v.Surely, v.Possibly, v.Limit = share.Estimate, share.Surely, share.Possibly, limit
	v.Text = fmt.Sprintf("%s: %.0f lx for %s of the daylight hours on %s of the plane (at least %s asked), %.0f lx on %s of it (at least %s)",
		subject, l.TargetLx, percent(l.TimeShare), spreadIn(r.Target), percent(l.TargetShare), l.MinimumLx, spreadIn(r.Minimum), percent(l.MinimumShare))
	if v.Outcome == Undecided {
		v.Text += ", undecided: the limit lies within the error of the sensors"
	}
	v.Text += "."
	return v
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
		Criterion: fmt.Sprintf("%s: %.0f lx in %s of %s hours on at least %s of the plane", r.Label, s.ThresholdLx, percent(s.TimeShare), whole(float64(r.Hours)), percent(limit)),
		Source:    "IES LM-83-12",
		Subject:   subject,
		Outcome:   AtLeast(r.Share, limit),
		Estimate:  r.Share.Estimate, Surely: r.Share.Surely, Possibly: r.Share.Possibly, Limit: limit,
	}
	v.Text = fmt.Sprintf("%s: %.0f lx in %s of the hours on %s of the plane (at least %s asked)", subject, s.ThresholdLx, percent(s.TimeShare), spreadIn(r.Share), percent(limit))
	if v.Outcome == Undecided {
		v.Text += ", undecided: the limit lies within the error of the sensors"
	}
	v.Text += "."
	return v
}

// SunExposure judges annual sunlight exposure against a share of the plane.
func SunExposure(subject string, r daylight.ExposureResult, x daylight.Exposure, limit float64) Verdict {
	return Verdict{
		Criterion: fmt.Sprintf("ASE: direct sun above %s lx for more than %d h on at most %s of the plane", whole(x.ThresholdLx), x.HoursLimit, percent(limit)),
		Source:    "IES LM-83-12",
		Subject:   subject,
		Outcome:   AtMost(r.Share, limit),
		Estimate:  r.Share.Estimate, Surely: r.Share.Surely, Possibly: r.Share.Possibly, Limit: limit,
		Text: fmt.Sprintf("%s: direct sun above %s lx for more than %d h on %s of the plane (limit %s).",
			subject, whole(x.ThresholdLx), x.HoursLimit, spreadIn(r.Share), percent(limit)),
	}
}
