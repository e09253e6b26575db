package report

import (
	"squint/scene"
	"squint/scene/project"
	"squint/scene/weather"
)

// inventedWords mark results of invented data.
const inventedWords = "invented data"

func invented(p *project.Project, y *weather.Year) bool { return p.Invented || y.Invented }

// mirrorCaution is common practice, no published source.
const mirrorCaution = "mirrors throw the sun where it is not expected, and curved or tilted ones can " +
	"concentrate it: burns, fire and injured eyes are possible, and neighbours, drivers or people at machines " +
	"can be dazzled. The greatest concentration is computed for the surfaces as they are drawn and judged by no " +
	"limit; have it looked into before anything is built."

// cautions are dangers that no metric here covers.
func cautions(p *project.Project) []string {
	for _, f := range p.Finishes {
		if f.Type == "mirror" || f.Type == "glossy" {
			return []string{mirrorCaution}
		}
	}
	return nil
}

// momentText says which moment the records stand for, and whether that is a
// warning.
func momentText(c *scene.Climate, p *project.Project) (text string, warns bool) {
	if p.Weather.MomentOffsetH == nil {
		return c.Fit.Text, c.Fit.Contradicts
	}
	text = "The sun is taken " + offsetWords(c.OffsetH) + ", as the project states"
	if c.Fit.Decided {
		text += "; the irradiances of " + c.Year.File + " fit together best with it " + offsetWords(c.Fit.OffsetH)
	}
	// A tenth of an hour is the bound from which scene/weather warns.
	far := c.Fit.OffsetH - c.OffsetH
	return text + ".", c.Fit.Decided && (far > 0.1 || far < -0.1)
}

func offsetWords(h float64) string {
	switch {
	case h < -0.0005:
		return fixed(-h, 3) + " h before the labelled hour"
	case h > 0.0005:
		return fixed(h, 3) + " h after the labelled hour"
	}
	return "at the labelled hour"
}

// warnings are the study's and the weather's.
func warnings(study []string, c *scene.Climate, p *project.Project) []string {
	var all []string
	if text, warns := momentText(c, p); warns {
		all = append(all, text)
	}
	return append(all, study...)
}
