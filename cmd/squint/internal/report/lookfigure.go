package report

import (
	"fmt"
	"image"
	"math"
	"slices"

	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	render "squint/trace/picture"
)

// errorFigure draws the relative standard error in percent.
func errorFigure(s *study.Shot) falsecolour.Figure {
	f := lookFigure(s)
	f.Values = make([]float32, len(s.Picture.Mean))
	for i, m := range s.Picture.Mean {
		f.Values[i] = float32(math.NaN())
		if m > 0 {
			f.Values[i] = 100 * s.Picture.StdErr[i] / m
		}
	}
	f.Map, f.Scale = falsecolour.Viridis, falsecolour.FitScale("Relative standard error", "%", true, f.Values)
	f.Title, f.Caption, f.Marks = f.Title+": standard error", []string{errorText(s.Picture)}, nil
	return f
}

// lookFigures draws all with one scale for each quantity.
func lookFigures(shots []*study.Shot, o LookOptions) []falsecolour.Figure {
	figures := make([]falsecolour.Figure, len(shots))
	values := map[render.Quantity][][]float32{}
	for _, s := range shots {
		values[s.Seen] = append(values[s.Seen], s.Picture.Mean)
	}
	for i, s := range shots {
		f := lookFigure(s)
		f.Map = falsecolour.Inferno
		if s.Seen == render.Illuminance {
			f.Map = falsecolour.Cividis
			f.Scale = falsecolour.FitScale("Illuminance", "lx", true, values[s.Seen]...)
		} else {
			f.Scale = falsecolour.FitScale("Luminance", "cd/m2", true, values[s.Seen]...)
		}
		if o.Map != nil {
			f.Map = *o.Map
		}
		if o.Scale != nil {
			f.Scale.Min, f.Scale.Max, f.Scale.Log = o.Scale.Min, o.Scale.Max, o.Scale.Log
		}
		o.Overlay.on(&f, 0, 0, 1)
		figures[i] = f
	}
	return figures
}

// lookFigure is a picture with its words, without scale.
func lookFigure(s *study.Shot) falsecolour.Figure {
	p := s.Picture
	f := falsecolour.Figure{Width: p.Width, Height: p.Height, Values: p.Mean, Smooth: true,
		Title: lookTitle(s), Caption: lookCaption(s)}
	if s.Plan != nil {
		return f
	}
	f.Round = s.View.Projection.Fisheye()
	if len(s.Discs) > 0 {
		f.Values = slices.Clone(p.Mean)
		for _, d := range s.Discs {
			imageDisc(s.View, d).Spread(f.Values, s.View)
		}
	}
	if s.Glare != nil {
		f.Marks = marks(s.Glare.Sources, s.View)
	}
	return f
}

func lookTitle(s *study.Shot) string {
	t := plain(s.Name) + ", " + dateWords(s.Clock)
	if s.Design != "" {
		t += ", " + plain(s.Design)
	}
	if invented(s.Project, s.Climate.Year) {
		t += ", " + inventedWords
	}
	return t
}

func lookCaption(s *study.Shot) []string {
	var lines []string
	if s.Plan != nil {
		lines = append(lines, planText(s)+".")
	} else {
		v := s.View
		lines = append(lines, fmt.Sprintf("From (%s, %s, %s) m, %s projection, %s° across.",
			fixed(v.Position.X, 2), fixed(v.Position.Y, 2), fixed(v.Position.Z, 2), v.Projection, decimals(v.FOVRad*180/math.Pi, 1)))
	}
	if s.Glare != nil {
		lines = append(lines, "DGP "+glareText(s)+fmt.Sprintf("; DGI %s, UGR %s, CGI %s.", fixed(s.Glare.DGI, 1), fixed(s.Glare.UGR, 1), fixed(s.Glare.CGI, 1)))
	}
	sky := "Sky: " + s.Sky + ". " + skyText(s.Moment, s.Project.Site.NorthDeg)
	if s.Stands != "" {
		sky += " " + plain(s.Stands) + "."
	}
	lines = append(lines, sky)
	if s.Glare != nil {
		if t := sourcesText(*s.Glare); t != "" {
			lines = append(lines, t)
		}
	}
	lines = append(lines, "Noise: "+errorText(s.Picture)+".")
	if len(s.Discs) > 0 {
		lines = append(lines, "The sun's disc and its images in mirrors are spread over the pixels they cover.")
	}
	if invented(s.Project, s.Climate.Year) {
		lines = append(lines, "Invented data: not those of a real place or building.")
	}
	return lines
}

// glareText is DGP and the illuminance at the eye.
func glareText(s *study.Shot) string {
	return fmt.Sprintf("%s, %s lx at the eye%s", plusMinus(s.Glare.DGP, s.DGPError, 2), whole(s.Glare.Ev), rangeWords(s.Glare.InRange))
}

// planText says what a plan shows.
func planText(s *study.Shot) string {
	what := "illuminance on"
	if s.Seen == render.Luminance {
		what = "luminance of"
	}
	return fmt.Sprintf("Plan cut at %s m, +y up: %s the first surface below the cut, from x %s to %s m, y %s to %s m", decimals(s.Plan.CutM, 2), what,
		decimals(s.Plan.MinX, 2), decimals(s.Plan.MaxX, 2), decimals(s.Plan.MinY, 2), decimals(s.Plan.MaxY, 2))
}

// errorText is a picture's noise.
func errorText(p *render.Picture) string {
	return fmt.Sprintf("median relative standard error of the pixels %s, %s samples a pixel", percent(p.MedianError), whole(float64(p.Samples)))
}

// lookSheet lays pictures of one quantity side by side.
func lookSheet(shots []*study.Shot, figures []falsecolour.Figure) (*image.RGBA, error) {
	cells := slices.Clone(figures)
	for i, s := range shots {
		// Outlines would hide what is to be compared; each picture has its own.
		cells[i].Caption, cells[i].Marks = nil, nil
		if s.Glare != nil {
			cells[i].Caption = []string{"DGP " + glareText(s) + "."}
		}
		cells[i].Caption = append(cells[i].Caption, "Sky: "+s.Sky+".")
		if s.Stands != "" {
			cells[i].Caption = append(cells[i].Caption, plain(s.Stands)+".")
		}
	}
	worst := 0.0
	for _, s := range shots {
		worst = math.Max(worst, s.Picture.MedianError)
	}
	return falsecolour.Sheet(title(shots[0].Project, newPaths(shots[0].Project, shots[0].Scene)),
		[]string{"Median relative standard error of the pixels: at most " + percent(worst) + "."}, sheetWidth(shots), cells...)
}

// sheetWidth is the number of pictures side by side: those of one design, where
// there are several of each and they fit.
func sheetWidth(shots []*study.Shot) int {
	of := 0
	for _, s := range shots {
		if s.Design == shots[0].Design {
			of++
		}
	}
	if of > 1 && of <= sheetColumns && of < len(shots) {
		return of
	}
	return min(sheetColumns, len(shots))
}
