package main

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/pflag"

	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/scene/view"
	"squint/trace/picture"
)

// skyChoice is a named sky; the zero value is the weather file's.
type skyChoice struct {
	Kind skyKind
	CIE  int // for cieSky
	// Light: lx of CIE skies and their sun, W/m2 of clearSky.
	DiffuseLx, SunLx      float64
	DiffuseWM2, DirectWM2 float64
}

type skyKind int

const (
	weatherSky skyKind = iota
	overcastSky
	cieSky
	clearSky
)

// usualSkyLx is the level illuminance of a named sky where none is given: that
// of a daylight factor's sky, 10,000 lx; common practice, no published source.
const usualSkyLx = 10000

// usualAt is the moment where none is given: noon of an equinox. Own choice.
var usualAt = study.ClockTime{Month: 3, Day: 21, Hour: 12}

// maxLookPixels bounds a picture's longer side, and so the memory to 1.3 GB.
const maxLookPixels = 2048

// lookFlags are look's flags as text, before they are read into options.
type lookFlags struct {
	projection, sky, colours, scale string
	ats                             []string
	diffuse, direct, skyLx, sunLx   float64
	cut                             float64
	over                            overlayFlags
}

func (f *lookFlags) bind(s *pflag.FlagSet, o *lookOptions) {
	o.pick.flags(s, "by default the first")
	s.StringArrayVar(&o.Beside, "beside", nil, "`states`, NAME=STATE with semicolons between: further\npictures with them; repeat it for further sets")
	s.StringVar(&o.Out, "out", "", "`folder` of the pictures; else look/NAME beside the\nproject file, look/demo here for the demo")
	s.StringArrayVar(&o.Views, "view", nil, "`name` of a viewpoint, by default the first; repeat it\nfor several")
	s.BoolVar(&o.AllViews, "all-views", false, "all viewpoints")
	s.StringArrayVar(&f.ats, "at", nil, "`moment` as clocks show it, \"MM-DD HH:MM\", by default\n\"03-21 12:00\"; repeat it for several")
	s.StringVar(&f.sky, "sky", "weather", "`name`: \"weather\", the file's nearest hour; \"overcast\",\nthe CIE traditional one; \"cie 1\" to \"cie 15\";\n\"clear\"")
	s.Float64Var(&f.skyLx, "sky-lx", usualSkyLx, "with an overcast or CIE sky: `lx` of it on a level\nplane")
	s.Float64Var(&f.sunLx, "sun-lx", 0, "with a CIE sky: `lx` of sun on a plane that faces it")
	s.Float64Var(&f.diffuse, "diffuse", 0, "of the clear sky: `W/m2` from the sky on the level")
	s.Float64Var(&f.direct, "direct", 0, "of the clear sky: `W/m2` of sun on a plane facing it")
	s.StringVar(&f.projection, "projection", "equidistant", "`name`: equidistant, equisolid, orthographic,\nstereographic, perspective, cylindrical,\nequirectangular")
	s.Float64Var(&o.FOVDeg, "fov", 0, "`degrees` across; by default 180 for a fisheye, 60 for\na perspective, 360 for the others")
	s.IntVar(&o.Pixels, "pixels", 512, "`number` of pixels along the longer side")
	s.StringVar(&o.Plan, "plan", "", "instead of views a plan, the ceiling cut away, of a\n`quantity`: illuminance or luminance")
	s.Float64Var(&f.cut, "cut", 0, "of a plan: `metres` at which it is cut, as z of the\nmodel; by default 0.5 m above viewpoints and planes")
	s.BoolVar(&o.SunPath, "sun-path", false, "instead of pictures: when the sun gets to a viewpoint")
	s.StringVar(&o.Opening, "opening", "", "of the sun path: `name` of an opening, instead of a\nviewpoint")
	s.StringVar(&o.Form, "form", "", "of the sun path: `form`, ahead along the line of sight\nor up to the zenith")
	s.Float64Var(&o.Error, "error", 0.05, "median relative standard `error` of the pixels to\nreach; 0 for none")
	s.IntVar(&o.Samples, "samples", 0, "`number` of samples a pixel at most, rounded up to\neights; 0 for no limit")
	s.DurationVar(&o.Limit, "limit", 2*time.Minute, "`time` for each picture at most, such as 60s, to the\nend of samples begun; 0 for no limit")
	s.StringSliceVar(&o.Formats, "format", []string{"exr", "png"}, "`formats` of exr, png, tiff and pfm, with commas\nbetween")
	s.BoolVar(&o.StandardError, "standard-error", false, "also a picture of the standard errors")
	s.StringVar(&f.colours, "map", "", "`colours`: inferno, cividis or viridis")
	f.over.bind(s)
	s.StringVar(&f.scale, "scale", "", "`range` of the colours, such as 10:10000 (logarithmic)\nor linear:0:500; by default it fits all pictures")
}

// read checks the flags and puts them into the options.
func (f *lookFlags) read(changed func(name string) bool, o *lookOptions) (err error) {
	switch {
	case o.Workers < 1:
		return fmt.Errorf("--workers: got %d, want 1 or more", o.Workers)
	case changed("out") && o.Out == "":
		return errors.New("--out: got an empty path, want a folder")
	case !o.SunPath && (o.Pixels < 8 || o.Pixels > maxLookPixels):
		return fmt.Errorf("--pixels: got %d, want 8 to %d", o.Pixels, maxLookPixels)
	case !(o.Error >= 0 && o.Error < 1):
		return fmt.Errorf("--error: got %g, want 0 to below 1, such as 0.05", o.Error)
	case o.Samples < 0:
		return fmt.Errorf("--samples: got %d, want 0 or more", o.Samples)
	case o.Limit < 0:
		return fmt.Errorf("--limit: got %v, want 0 or more", o.Limit)
	case o.AllViews && len(o.Views) > 0:
		return errors.New("--all-views: got --view too, want one of them")
	case o.Plan != "" && (o.AllViews || len(o.Views) > 0):
		return errors.New("--plan: got viewpoints too, want one of them")
	case o.Plan != "" && o.Plan != "illuminance" && o.Plan != "luminance":
		return fmt.Errorf("--plan: got %q, want illuminance or luminance", o.Plan)
	case changed("cut") && o.Plan == "":
		return errors.New("--cut: got it without --plan, want both")
	case o.Error == 0 && o.Samples == 0 && o.Limit == 0:
		return errors.New("--error, --samples, --limit: got none, want at least one, or a picture has no end")
	case !o.SunPath && (o.Opening != "" || o.Form != ""):
		return errors.New("--opening, --form: got them without --sun-path, want both")
	case o.SunPath && (o.AllViews || len(o.Views) > 1 || o.Plan != ""):
		return errors.New("--sun-path: want one --view or one --opening")
	case o.SunPath && len(f.ats) > 0:
		return errors.New("--sun-path: got a moment too; it shows the whole year")
	case o.SunPath && stray(changed) != "":
		return fmt.Errorf("--%s: it has no place with --sun-path", stray(changed))
	case o.Plan != "" && (changed("projection") || changed("fov")):
		return errors.New("--projection, --fov: they have no place with --plan")
	case len(o.Formats) == 0:
		return fmt.Errorf("--format: got none, want one or more of %s", strings.Join(report.LookFormats, ", "))
	}
	for _, name := range o.Formats {
		if !slices.Contains(report.LookFormats, name) {
			return fmt.Errorf("--format: got %q, want one or more of %s", name, strings.Join(report.LookFormats, ", "))
		}
	}
	o.PixelsGiven = changed("pixels")
	// A twin of a format would be written over itself.
	slices.Sort(o.Formats)
	o.Formats = slices.Compact(o.Formats)
	if changed("cut") {
		o.CutM = &f.cut
	}
	for _, text := range f.ats {
		at, err := parseClockTime(text)
		if err != nil {
			return err
		}
		o.At = append(o.At, at)
	}
	if len(o.At) == 0 {
		o.At = []study.ClockTime{usualAt}
	}
	if o.Overlay, err = f.over.read(); err != nil {
		return err
	}
	if o.Projection, err = view.ParseProjection(f.projection); err != nil {
		return fmt.Errorf("--projection: %w", err)
	}
	if o.Sky, err = f.readSky(changed); err != nil {
		return err
	}
	if f.colours != "" {
		m, err := falsecolour.ParseMap(f.colours)
		if err != nil {
			return fmt.Errorf("--map: %w", err)
		}
		o.Map = &m
	}
	o.Scale, err = parseScale(f.scale)
	return err
}

// stray is a flag that was given and that a sun path does not know; "" for none.
func stray(changed func(string) bool) string {
	for _, name := range []string{"beside", "sky", "sky-lx", "sun-lx", "diffuse", "direct", "projection", "fov", "error", "samples", "limit",
		"format", "standard-error", "map", "scale", "contours", "point", "seed"} {
		if changed(name) {
			return name
		}
	}
	return ""
}

// parseClockTime reads "03-21 09:00".
func parseClockTime(text string) (study.ClockTime, error) {
	t, err := time.Parse("01-02 15:04", text)
	if err != nil {
		return study.ClockTime{}, fmt.Errorf("--at: got %q, want a month, day and time such as \"03-21 09:00\"", text)
	}
	if t.Month() == time.February && t.Day() == 29 {
		return study.ClockTime{}, errors.New("--at: got 29 February, want a day of a year of 365")
	}
	return study.ClockTime{Month: int(t.Month()), Day: t.Day(), Hour: t.Hour(), Minute: t.Minute()}, nil
}

func (f *lookFlags) readSky(changed func(string) bool) (skyChoice, error) {
	c := skyChoice{DiffuseLx: f.skyLx, SunLx: f.sunLx, DiffuseWM2: f.diffuse, DirectWM2: f.direct}
	for _, x := range []struct {
		name  string
		value float64
	}{{"sky-lx", f.skyLx}, {"sun-lx", f.sunLx}, {"diffuse", f.diffuse}, {"direct", f.direct}} {
		if !(x.value >= 0) || math.IsInf(x.value, 0) {
			return c, fmt.Errorf("--%s: got %g, want 0 or more", x.name, x.value)
		}
	}
	number, isCIE := strings.CutPrefix(f.sky, "cie ")
	switch {
	case f.sky == "weather":
	case f.sky == "overcast":
		c.Kind = overcastSky
	case f.sky == "clear":
		c.Kind = clearSky
		if !changed("diffuse") || !changed("direct") || f.diffuse == 0 {
			return c, errors.New("--sky clear: want --diffuse and --direct, the irradiances in W/m2")
		}
	case isCIE:
		n, err := strconv.Atoi(number)
		if err != nil || n < 1 || n > 15 {
			return c, fmt.Errorf("--sky: got %q, want \"cie 1\" to \"cie 15\"", f.sky)
		}
		c.Kind, c.CIE = cieSky, n
	default:
		return c, fmt.Errorf("--sky: got %q, want weather, overcast, \"cie 1\" to \"cie 15\" or clear", f.sky)
	}
	named := c.Kind == overcastSky || c.Kind == cieSky
	for _, x := range []struct {
		name string
		fits bool
	}{{"sky-lx", named}, {"sun-lx", c.Kind == cieSky}, {"diffuse", c.Kind == clearSky}, {"direct", c.Kind == clearSky}} {
		if changed(x.name) && !x.fits {
			return c, fmt.Errorf("--%s: it has no place with --sky %q", x.name, f.sky)
		}
	}
	return c, nil
}

// parseScale reads "10:10000" or "linear:0:500"; nil for nothing.
func parseScale(text string) (*falsecolour.Scale, error) {
	if text == "" {
		return nil, nil
	}
	rest, linear := strings.CutPrefix(text, "linear:")
	low, high, ok := strings.Cut(rest, ":")
	s := falsecolour.Scale{Log: !linear}
	var err1, err2 error
	s.Min, err1 = strconv.ParseFloat(low, 64)
	s.Max, err2 = strconv.ParseFloat(high, 64)
	if !ok || err1 != nil || err2 != nil || !(s.Min < s.Max) || math.IsInf(s.Max-s.Min, 0) || s.Log && !(s.Min > 0) {
		return nil, fmt.Errorf("--scale: got %q, want two rising numbers such as 10:10000, or linear:0:500", text)
	}
	return &s, nil
}

// sunPath are the options of a sun path.
func (o lookOptions) sunPath() sunPathOptions {
	p := sunPathOptions{pick: o.pick, Opening: o.Opening, Form: o.Form, Out: o.Out, Workers: o.Workers}
	if len(o.Views) > 0 {
		p.View = o.Views[0]
	}
	if o.PixelsGiven {
		p.WidthPx = o.Pixels
	}
	return p
}

// study are the options of the pictures to prepare.
func (o lookOptions) study() study.LookOptions {
	s := study.LookOptions{Views: o.Views, AllViews: o.AllViews, Projection: o.Projection, FOVDeg: o.FOVDeg,
		Width: o.Pixels, Height: o.Pixels, Workers: o.Workers, Seed: o.Seed}
	usual := 360.0
	switch {
	case o.Projection.Fisheye():
		usual = 180
	case o.Projection == view.Perspective:
		usual = 60
		s.Height = o.Pixels * 3 / 4
	default:
		s.Height = o.Pixels / 2
	}
	if s.FOVDeg == 0 {
		s.FOVDeg = usual
	}
	if o.Plan != "" {
		s.Plan = &study.PlanOptions{CutM: o.CutM, Quantity: picture.Illuminance, Pixels: o.Pixels}
		if o.Plan == "luminance" {
			s.Plan.Quantity = picture.Luminance
		}
	}
	for _, at := range o.At {
		switch c := o.Sky; c.Kind {
		case weatherSky:
			s.When = append(s.When, study.AtHour(at))
		case overcastSky:
			s.When = append(s.When, study.UnderOvercast(at, c.DiffuseLx))
		case cieSky:
			s.When = append(s.When, study.UnderCIE(at, c.CIE, c.DiffuseLx, c.SunLx))
		case clearSky:
			s.When = append(s.When, study.UnderIrradiance(at, c.DiffuseWM2, c.DirectWM2))
		}
	}
	return s
}
