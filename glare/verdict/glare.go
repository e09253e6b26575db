package verdict

import (
	"fmt"
	"math"
)

// ProtectionLevel is a level of protection from glare: the daylight glare
// probability that may be exceeded for at most TimeShare of the usage time.
type ProtectionLevel struct {
	Name      string
	DGP       float64
	TimeShare float64
}

// ProtectionLevels are those of EN 17037:2018 annex E, from memory.
var ProtectionLevels = []ProtectionLevel{
	{"minimum", 0.45, 0.05},
	{"medium", 0.40, 0.05},
	{"high", 0.35, 0.05},
}

// ProtectionByName finds a level in ProtectionLevels.
func ProtectionByName(name string) (ProtectionLevel, bool) {
	return byName(ProtectionLevels, name, func(l ProtectionLevel) string { return l.Name })
}

// GlareHours is how often a view exceeds a daylight glare probability.
type GlareHours struct {
	Hours        Bracket // hours over the limit
	Share        Bracket // of all hours given; NaN where there are none
	Total        float64 // hours given: the usage time, dark hours too
	NotEvaluated float64 // of these, hours whose value or error is unknown
}

// OfSteps are the hours where steps were counted, perHour of them in each.
func (g GlareHours) OfSteps(perHour int) GlareHours {
	n := float64(perHour)
	g.Hours = Bracket{Surely: g.Hours.Surely / n, Estimate: g.Hours.Estimate / n, Possibly: g.Hours.Possibly / n}
	g.Total, g.NotEvaluated = g.Total/n, g.NotEvaluated/n
	return g
}

// CountGlare counts the hours whose DGP is above the limit; dgp and se hold one
// value for each hour of the usage time (0 in the dark). An hour whose value
// is NaN was not evaluated: it counts as possibly over the limit, so that
// nothing passes by not being looked at. The same holds for a NaN error, save
// that the estimate still counts the value. A nil se means no error; hours
// beyond the end of a shorter se have an unknown one.
func CountGlare(dgp, se []float32, limit, z float64) GlareHours {
	g := GlareHours{Total: float64(len(dgp))}
	for i, v := range dgp {
		value, half := float64(v), 0.0
		switch {
		case se == nil || z == 0:
		case i < len(se) && se[i] == 0: // exact, however large z
		case i < len(se):
			half = z * float64(se[i])
		default:
			half = math.NaN()
		}
		if value != value || half != half {
			g.NotEvaluated++
		}
		if value-half > limit {
			g.Hours.Surely++
		}
		if value > limit {
			g.Hours.Estimate++
		}
		if !(value+half <= limit) {
			g.Hours.Possibly++
		}
	}
	n := g.Total
	g.Share = Bracket{Surely: g.Hours.Surely / n, Estimate: g.Hours.Estimate / n, Possibly: g.Hours.Possibly / n}
	return g
}

// Glare judges one view against a level of protection; when says, if known,
// when the hours over the limit fall ("mostly 8 to 10 h from February to
// April, the low sun through the strip above the shelf"), or those that leave
// it open, and may be empty.
func Glare(subject string, l ProtectionLevel, g GlareHours, when string) Verdict {
	v := Verdict{
		Criterion: fmt.Sprintf("glare protection, %s: DGP over %.2f in at most %s of the usage time", l.Name, l.DGP, percent(l.TimeShare)),
		Source:    "EN 17037:2018",
		Subject:   subject,
		Outcome:   AtMost(g.Share, l.TimeShare),
		Estimate:  g.Share.Estimate, Surely: g.Share.Surely, Possibly: g.Share.Possibly,
		Limit: l.TimeShare,
	}
	if g.Total == 0 {
		v.Text = subject + ": undecided, no hour of use was evaluated."
		return v
	}
	v.Text = fmt.Sprintf("%s: glare on %s of %s hours (%s, limit %s)", subject,
		hours(g.Hours.Estimate), hours(g.Total), spread(g.Share), percent(l.TimeShare))
	switch {
	case v.Outcome == Undecided:
		v.Text += fmt.Sprintf(", undecided: %s hours are surely and %s possibly over", hours(g.Hours.Surely), hours(g.Hours.Possibly))
		if g.NotEvaluated > 0 {
			v.Text += fmt.Sprintf(", %s of them not evaluated", hours(g.NotEvaluated))
		}
		if when != "" {
			v.Text += "; " + when
		}
	case when != "" && g.Hours.Estimate > 0:
		v.Text += ", " + when
	}
	v.Text += "."
	return v
}
