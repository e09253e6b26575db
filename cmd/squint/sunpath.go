package main

import (
	"context"
	"fmt"
	"io"
	"math"
	"path/filepath"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/cmd/squint/internal/sunpath"
	"squint/scene"
	"squint/scene/project"
)

// sunPathOptions are the command line of a sun path.
type sunPathOptions struct {
	pick
	View    string // a viewpoint's name; "" for the first
	Opening string // an opening's name, instead
	// Form is "ahead" or "up"; "" for ahead from a viewpoint and up from an
	// opening.
	Form    string
	WidthPx int    // 0 for the default
	Out     string // "" for the default
	Workers int
}

// sunPathForms as a command line names them.
var sunPathForms = map[string]sunpath.Form{"ahead": sunpath.Ahead, "up": sunpath.Up}

// runSunPath draws when the sun gets to a point, writes the hours, and prints
// the minutes a day.
func runSunPath(ctx context.Context, h host, o sunPathOptions) error {
	form, known := sunPathForms[o.Form]
	if o.Form != "" && !known {
		return usageError{fmt.Errorf("--form: got %q, want \"ahead\" or \"up\"", o.Form)}
	}
	if w := o.WidthPx; w != 0 && (w < sunpath.LeastWidthPx || w > sunpath.MostWidthPx) {
		return usageError{fmt.Errorf("--pixels: got %d, want %d to %d", w, sunpath.LeastWidthPx, sunpath.MostWidthPx)}
	}
	d, err := o.open()
	if err != nil {
		return err
	}
	if len(d.all) > 1 && o.Alternatives == nil {
		d.all = d.all[:1]
	}
	if len(d.all) > 1 {
		return usageError{fmt.Errorf("--alternative: got %d, want one, as a picture shows one scene", len(d.all))}
	}
	in, err := study.Prepare(d.fsys, d.all[0], o.Workers)
	if err != nil {
		return inputError{d.explain(err)}
	}
	point, room, err := sunPathPoint(in.Scene, o)
	if err != nil {
		return err
	}
	if o.Form == "" && point.Opening {
		form = sunpath.Up
	}
	out := o.Out
	if out == "" {
		results := defaultOut(o.Project)
		out = filepath.Join(filepath.Dir(filepath.Dir(results)), "sun-path", filepath.Base(results))
	}
	if err := canHold(out); err != nil {
		return inputError{err}
	}
	input := sunPathInput(in, point, room, o.Workers)
	y, err := sunpath.Compute(ctx, input)
	if err != nil {
		return err
	}
	sheet, err := sunPathSheet(in, input, form, o.WidthPx)
	if err != nil {
		return err
	}
	base := report.Slug(point.Name)
	files := []exportFile{
		{base + ".png", "the picture", func(w io.Writer) error { return y.WritePNG(ctx, w, sheet) }},
		{base + ".csv", "the moments", func(w io.Writer) error { return y.WriteCSV(w, sheet.NorthRad) }},
		{base + ".json", "the moments and their sums", func(w io.Writer) error { return y.WriteJSON(w, sheet.NorthRad, report.Invented(in)) }},
	}
	if err := writeTogether(ctx, out, files); err != nil {
		return err
	}
	var about [][2]string
	for _, f := range files {
		about = append(about, [2]string{f.name, f.about})
	}
	return report.SunPath(h.out, in, y, sheet.Notes, about, out)
}

// sunPathPoint finds the viewpoint or opening that was asked for, and its room.
func sunPathPoint(s *scene.Scene, o sunPathOptions) (p sunpath.Point, room string, err error) {
	var none sunpath.Point
	if o.View != "" && o.Opening != "" {
		return none, "", usageError{fmt.Errorf("--opening: got %q beside --view %q, want one of them", o.Opening, o.View)}
	}
	var names []string
	if o.Opening != "" {
		for _, p := range s.Openings {
			if p.Name == o.Opening {
				return sunpath.AtOpening(p), "", nil
			}
			names = append(names, p.Name)
		}
		return none, "", usageError{fmt.Errorf("--opening: got %q, want an opening of the project; %s", o.Opening, project.DidYouMean(o.Opening, names))}
	}
	for _, v := range s.Viewpoints {
		if v.Name == o.View || o.View == "" {
			return sunpath.AtViewpoint(v), v.Room, nil
		}
		names = append(names, v.Name)
	}
	if o.View == "" {
		return none, "", inputError{fmt.Errorf("%s: got no viewpoint, want one; add one or name an opening with --opening", s.Project.File)}
	}
	return none, "", usageError{fmt.Errorf("--view: got %q, want a viewpoint of the project; %s", o.View, project.DidYouMean(o.View, names))}
}

// sunPathInput is what the year of suns needs of a study.
func sunPathInput(in *study.Input, p sunpath.Point, room string, workers int) *sunpath.Input {
	c := in.Climate
	first := c.Year.Moment(0, -0.5)
	return &sunpath.Input{
		Point: p, World: in.WorldUnder, Year: first.Year(), Zone: first.Location(),
		Sun:      func(t time.Time) (r3.Vec, error) { return scene.SunAt(c.Site, in.Project.Site.NorthDeg, t) },
		Calendar: in.UseOf(room).Calendar, Workers: workers,
		Bright: func(record int) bool { return sunpath.Bright(c.Year.Records[record].DNI) },
	}
}

// sunPathSheet is the picture: the scene as it stands at noon of an equinox
// where systems follow the sun.
func sunPathSheet(in *study.Input, input *sunpath.Input, form sunpath.Form, widthPx int) (sunpath.Sheet, error) {
	sheet := sunpath.Sheet{Form: form, WidthPx: widthPx, NorthRad: in.Project.Site.NorthDeg * math.Pi / 180, World: in.World, Place: report.SunPathPlace(in),
		FromH: input.Calendar.FromH, ToH: input.Calendar.ToH}
	if len(in.Standings) > 1 {
		noon := time.Date(input.Year, time.March, 21, 12, 0, 0, 0, input.Zone)
		sun, err := input.Sun(noon)
		if err != nil {
			return sheet, err
		}
		sheet.World = input.World(sun)
		sheet.Notes = append(sheet.Notes, "What follows the sun is drawn as it stands on 21 March at 12 h; the marks are for where it stands at each moment.")
	}
	return sheet, nil
}
