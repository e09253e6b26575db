package verdict

import "fmt"

// Autonomy is the limit of spatial glare autonomy: views whose DGP stays below
// DGP for at least TimeShare of the usage time count.
type Autonomy struct{ DGP, TimeShare float64 }

// DefaultAutonomy is sGA(0.40, 5 %). Source: Jones 2019, Fast climate-based
// glare analysis and spatial mapping, Building Simulation, from memory.
var DefaultAutonomy = Autonomy{DGP: 0.40, TimeShare: 0.95}

// SpatialAutonomy is the share of views that keep the limit; each view's hours
// are counted over a.DGP. NaN without views.
func (a Autonomy) SpatialAutonomy(views []GlareHours) Bracket {
	var b Bracket
	for _, g := range views {
		switch AtMost(g.Share, 1-a.TimeShare+1e-12) { // 1 - 0.95 is not 0.05 to the last digit
		case Met:
			b.Surely++
			b.Possibly++
		case Undecided:
			b.Possibly++
		}
		if g.Share.Estimate <= 1-a.TimeShare+1e-12 {
			b.Estimate++
		}
	}
	n := float64(len(views))
	return Bracket{Surely: b.Surely / n, Estimate: b.Estimate / n, Possibly: b.Possibly / n}
}

// GlareAutonomy judges the share of a project's views that keep the limit.
func GlareAutonomy(subject string, a Autonomy, share Bracket, limit float64) Verdict {
	v := Verdict{
		Criterion: fmt.Sprintf("spatial glare autonomy: at least %s of the views with DGP up to %.2f in %s of the usage time", percent(limit), a.DGP, percent(a.TimeShare)),
		Source:    "Jones 2019",
		Subject:   subject,
		Text:      fmt.Sprintf("%s: DGP up to %.2f in %s of the usage time at %s of the views (at least %s asked)", subject, a.DGP, percent(a.TimeShare), spreadIn(share), percent(limit)),
	}
	return v.judged(share, limit, AtLeast(share, limit), "the limit lies within the error of the views")
}
