package study

import (
	"context"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/trace/outlook"
)

const (
	// sunlitPoints stand for an opening's area; the share of it that is sunlit
	// is known to within the reciprocal; own choice.
	sunlitPoints = 128
	// sunlightPerHour are the looks at the sun on the day of the exposure to
	// sunlight; own choice: a minute.
	sunlightPerHour = 60
	// aboveSillM is how far above its opening's lower edge the reference point
	// lies at least. Source: EN 17037:2018 annex D, from memory.
	aboveSillM = 0.3
)

// Seasons are quarters of the year by month, the first from December on.
var Seasons = [4]string{"Dec to Feb", "Mar to May", "Jun to Aug", "Sep to Nov"}

func seasonOf(month int) int { return (month + 1) % 12 / 3 } // month: 0 is January

// OpeningResult is where the sun gets to at one opening.
type OpeningResult struct {
	Opening scene.Opening
	// Sunlit is the share of the area in the sun by step; NaN where the sun is
	// down or stands behind the opening.
	Sunlit  []float32
	Seasons [4]SunSeason
	// SunH is the exposure to sunlight in hours of the day asked for, NaN where
	// none is asked for or the opening does not reach up to the reference point.
	SunH float64
	// Class is the class of glare control of its best roller; NaN without one.
	Class float64
}

// SunSeason is the sun on one opening over a season.
type SunSeason struct {
	Hours float64 // with the sun before the opening
	Lit   float64 // mean sunlit share over these hours; NaN without any
	// Light of the sun's beam that would fall on the bare opening, and that does,
	// lm h.
	BareLmH, LitLmH float64
}

// Kept is the share of the bare opening's sun that reaches it; NaN without any.
func (s SunSeason) Kept() float64 { return s.LitLmH / s.BareLmH }

// findSun computes the sunlit shares of every opening over the year.
func (r *Result) findSun(ctx context.Context, in *Input, opt Options) error {
	opt.Progress = func(Stage, int, int) {}
	r.Openings = make([]OpeningResult, len(in.Scene.Openings))
	return each(ctx, opt, StageYear, len(r.Openings), func(k int) error {
		o := &r.Openings[k]
		o.Opening, o.SunH, o.Class = in.Scene.Openings[k], math.NaN(), clothClass(in.Project, in.Scene.Openings[k].Name)
		o.Sunlit = make([]float32, len(in.Climate.SinAltitude))
		for h := range o.Sunlit {
			o.Sunlit[h] = nan32()
		}
		rect := o.Opening.Rect
		for _, st := range in.Standings {
			for _, m := range st.Moments {
				if m.SunNormalLx > 0 && ctx.Err() == nil {
					o.add(m, outlook.Sunlit(st.World, rect, m.Sun, sunlitPoints))
				}
			}
		}
		for i := range o.Seasons {
			o.Seasons[i].Lit /= o.Seasons[i].Hours
		}
		return nil
	})
}

// add counts the sunlit share of a moment, which may be NaN; Lit is a sum until
// all are in.
func (o *OpeningResult) add(m *scene.Moment, share float64) {
	o.Sunlit[m.Step] = float32(share)
	if share != share {
		return
	}
	s := &o.Seasons[seasonOf(m.Month)]
	s.Hours += m.Share
	s.Lit += m.Share * share
	beam := m.Share * m.SunNormalLx * r3.Dot(m.Sun, o.Opening.Rect.Outward) * o.Opening.Rect.WidthM * o.Opening.Rect.HeightM
	s.BareLmH += beam
	s.LitLmH += beam * share
}

// clothClass is the class of glare control of the best roller of an opening.
func clothClass(p *project.Project, opening string) float64 {
	best := math.NaN()
	for _, ro := range p.Rollers {
		if ro.Opening != opening {
			continue
		}
		straight, scattered := ro.Openness, ro.DiffuseTransmittance
		for _, f := range p.Finishes {
			if ro.Cloth != "" && f.Name == ro.Cloth {
				straight, scattered = f.Openness, f.DiffuseTransmittance
			}
		}
		if c := float64(verdict.ClothClass(straight, scattered)); !(c <= best) {
			best = c
		}
	}
	return best
}

// judgeOpenings holds the openings against what is asked of them.
func (r *Result) judgeOpenings(in *Input) error {
	c := &r.Project.Criteria
	if c.ClothClass > 0 {
		for i := range r.Openings {
			o := &r.Openings[i]
			r.further(verdict.ClothProtection(o.Opening.Name, o.Class, c.ClothClass))
		}
	}
	l, ok := verdict.SunByName(c.Sunlight)
	if !ok || c.SunlightDay == nil || c.SunlightAltitudeDeg == nil {
		return nil
	}
	suns, err := r.Climate.Day(*c.SunlightDay, r.Project.Site.NorthDeg, sunlightPerHour)
	if err != nil {
		return err
	}
	best := -1
	for i := range r.Openings {
		o := &r.Openings[i]
		p, ok := referencePoint(o.Opening, c.SunlightHeightM, in.World.Epsilon())
		if !ok {
			continue
		}
		var before []r3.Vec
		for _, s := range suns {
			if r3.Dot(s, o.Opening.Rect.Outward) > 0 {
				before = append(before, s)
			}
		}
		o.SunH = float64(outlook.SunReaches(in.World, p, before, *c.SunlightAltitudeDeg*math.Pi/180)) / sunlightPerHour
		if best < 0 || o.SunH > r.Openings[best].SunH {
			best = i
		}
	}
	subject, hours := "all openings", math.NaN()
	if best >= 0 {
		subject, hours = r.Openings[best].Opening.Name, r.Openings[best].SunH
	}
	day := dayWords(*c.SunlightDay)
	// Half a step where the sun comes and where it goes.
	r.further(verdict.Sunlight(subject, l, day, *c.SunlightAltitudeDeg, hours, 1.0/sunlightPerHour))
	return nil
}

// referencePoint is the point of an opening at which sunlight is counted: in
// the middle of its width, at least 1.2 m above the floor (minZ) and 0.3 m above
// its lower edge, just outdoors of the glass; false where the opening does not
// reach that far up. Source: EN 17037:2018 annex D, from memory.
func referencePoint(o scene.Opening, minZ, outM float64) (r3.Vec, bool) {
	up := aboveSillM
	if o.Rect.Up.Z > 1e-6 {
		up = math.Max(up, (minZ-o.Rect.Origin.Z)/o.Rect.Up.Z)
	} else if o.Rect.Origin.Z < minZ {
		return r3.Vec{}, false
	}
	return o.Rect.Point(o.Rect.WidthM/2, up, outM), up <= o.Rect.HeightM
}

func dayWords(d project.MonthDay) string { return fmt.Sprintf("%d %s", d.Day, months[d.Month-1]) }
