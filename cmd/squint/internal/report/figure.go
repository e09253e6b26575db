package report

import (
	"fmt"
	"math"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/falsecolour"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/view"
)

// mostMarked is how many sources are numbered: more would hide the picture.
const mostMarked = 6

// luminanceScale is one scale for all worst hours, so that they can be laid
// side by side.
func luminanceScale(r *study.Result) falsecolour.Scale {
	var all [][]float32
	for i := range r.Views {
		if w := r.Views[i].Worst; w != nil {
			all = append(all, w.Lum)
		}
	}
	return falsecolour.FitScale("Luminance", "cd/m2", true, all...)
}

// figure draws a viewpoint's worst hour: the luminances without the sun's
// discs, which are marks, like all other sources numbered by their part in the
// glare.
func figure(r *study.Result, v *study.ViewResult, scale falsecolour.Scale) falsecolour.Figure {
	w := v.Worst
	view := w.InsideOf.View
	f := falsecolour.Figure{Width: view.Width, Height: view.Height, Values: w.Lum, Round: true, Smooth: true,
		Scale: scale, Map: falsecolour.Inferno, Title: plain(subject(v))}
	if invented(r.Project, r.Climate.Year) {
		f.Title += ", " + inventedWords
	}
	f.Marks = marks(w.Result.Sources, view)
	f.Caption = caption(r, v)
	return f
}

// marks outline the first sources and number them.
func marks(sources []glare.Source, v view.View) []falsecolour.Mark {
	var out []falsecolour.Mark
	for i, s := range sources {
		if i == mostMarked {
			break
		}
		m := falsecolour.Mark{Rank: i + 1, Pixels: s.Pixels}
		if s.Disc {
			x, y, ok := v.LocalProject(s.Dir)
			if !ok {
				continue
			}
			// A disc is as large as the sun, whatever part of it is seen.
			m.X, m.Y, m.RadiusPx = x, y, photometry.SunDiameterRad/2*float64(v.Width)/v.FOVRad
		} else if len(s.Pixels) == 0 {
			continue
		}
		out = append(out, m)
	}
	return out
}

// skyText tells the sun and the sky of a moment.
func skyText(m *scene.Moment, northDeg float64) string {
	sky := whole(m.DiffuseLx) + " lx on the level."
	if m.SunNormalLx <= 0 {
		return "No sun; sky " + sky
	}
	return fmt.Sprintf("Sun %s° high, azimuth %s°, %s lx on a plane that faces it; sky ",
		fixed(scene.AltitudeDeg(m.Sun), 0), fixed(scene.AzimuthDeg(m.Sun, northDeg), 0), whole(m.SunNormalLx)) + sky
}

// subject is the viewpoint with its bearing, as verdicts name it.
func subject(v *study.ViewResult) string {
	if len(v.Levels) > 0 && v.Levels[0].Subject != "" {
		return v.Levels[0].Subject
	}
	return v.Viewpoint.Name
}

func caption(r *study.Result, v *study.ViewResult) []string {
	w := v.Worst
	m := w.Moment
	result := fmt.Sprintf("DGP %s, %s lx at the eye%s", plusMinus(w.DGP, w.StdErr, 2), whole(w.Ev), rangeWords(glare.InRange(w.DGP, w.Ev)))
	if c := v.Cause[m.Step]; c >= 0 && int(c) < len(v.Causes) {
		result += "; mostly by " + plain(v.Causes[c].String())
	}
	lines := []string{
		"The worst hour in use: " + dateWords(clockTime(r.Calendar, m)) + ". " + result + ".",
		skyText(m, r.Project.Site.NorthDeg),
	}
	if s := sourcesText(w.Result); s != "" {
		lines = append(lines, s)
	}
	if invented(r.Project, r.Climate.Year) {
		lines = append(lines, "Invented data: not those of a real place or building.")
	}
	return lines
}

// sourcesText tells the first sources' luminance and size.
func sourcesText(g glare.Result) string {
	if len(g.Sources) == 0 {
		return ""
	}
	var parts []string
	for i, s := range g.Sources {
		if i == 3 {
			break
		}
		what := falsecolour.Number(s.MeanLuminance) + " cd/m²"
		if s.Disc {
			what = "the sun or its image, " + what
		}
		parts = append(parts, fmt.Sprintf("no. %d: %s (%s of the sum over sources)", i+1, what, part(s.Contribution/g.SourceSum)))
	}
	text := "Outlined: sources of glare above " + whole(math.Round(g.ThresholdCdM2)) + " cd/m². " + strings.Join(parts, "; ") + "."
	if n := len(g.Sources); n > mostMarked {
		text += fmt.Sprintf(" Of %d, %d are numbered.", n, mostMarked)
	}
	return text
}

// part is a share that may be too small for its digits.
func part(share float64) string {
	if share > 0 && share < 0.0005 {
		return "under 0.1 %"
	}
	return percent(share)
}
