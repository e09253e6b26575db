package report

import (
	"errors"
	"fmt"
	"image"
	"image/png"
	"io"
	"math"
	"slices"
	"time"

	"golang.org/x/image/tiff"

	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/glare/luminance"
	render "squint/trace/picture"
)

// LookOptions say what is written of pictures.
type LookOptions struct {
	Version string
	// Formats are those of LookFormats.
	Formats []string
	// StandardError adds a picture of the standard errors to each.
	StandardError bool
	// Map and Scale are those of all pictures; nil for those that fit.
	Map   *falsecolour.Map
	Scale *falsecolour.Scale
}

// LookFormats are the formats of pictures: OpenEXR, PNG and TIFF in false
// colours, and PFM.
var LookFormats = []string{"exr", "png", "tiff", "pfm"}

// SheetName is the sheet of several pictures, without its ending.
const SheetName = "sheet"

// sheetColumns is the largest number of pictures side by side.
const sheetColumns = 3

// WriteLook writes pictures that were taken into a folder, and where there are
// several of a kind a sheet of them with one scale. On an error nothing has
// changed there, save for one in the final renaming. It returns the files.
func WriteLook(dir string, shots []*study.Shot, o LookOptions) (files []string, err error) {
	f, err := openFolder(dir)
	if err != nil {
		return nil, err
	}
	if files, err = stageLook(f, shots, o); err != nil {
		return nil, errors.Join(err, f.abandon())
	}
	if err := f.commit(); err != nil {
		return nil, errors.Join(err, f.abandon())
	}
	return files, nil
}

func stageLook(f *folder, shots []*study.Shot, o LookOptions) (files []string, err error) {
	shots = slices.Clone(shots)
	slices.SortStableFunc(shots, func(a, b *study.Shot) int { return a.Order - b.Order })
	add := func(name string, write func(io.Writer) error) {
		if err == nil {
			files = append(files, name)
			err = f.stage(name, write)
		}
	}
	figures := lookFigures(shots, o)
	names := lookNames(shots)
	for i, s := range shots {
		for _, format := range o.Formats {
			write := figureWriter(format, func() (*image.RGBA, error) { return falsecolour.Render(figures[i]) })
			if format == "exr" || format == "pfm" {
				write = imageWriter(format, shotImage(s, s.Picture.Mean, format == "pfm", o))
				if o.StandardError {
					add(names[i]+"-error."+format, imageWriter(format, errorImage(s, o)))
				}
			} else if o.StandardError {
				add(names[i]+"-error."+format, figureWriter(format, func() (*image.RGBA, error) { return falsecolour.Render(errorFigure(s)) }))
			}
			add(names[i]+"."+format, write)
		}
	}
	if len(shots) > 1 {
		for _, format := range o.Formats {
			if format == "png" || format == "tiff" {
				add(SheetName+"."+format, figureWriter(format, func() (*image.RGBA, error) { return lookSheet(shots, figures) }))
			}
		}
	}
	return files, err
}

// lookNames are the pictures' file names without ending.
func lookNames(shots []*study.Shot) []string {
	var names []string
	for _, s := range shots {
		names = append(names, s.Name+" "+s.Clock.Format("0102 1504")+" "+s.Design)
	}
	return slugs(names, "picture")
}

func figureWriter(format string, draw func() (*image.RGBA, error)) func(io.Writer) error {
	return func(w io.Writer) error {
		im, err := draw()
		if err != nil {
			return err
		}
		if format == "tiff" {
			return tiff.Encode(w, im, &tiff.Options{Compression: tiff.Deflate, Predictor: true})
		}
		return png.Encode(w, im)
	}
}

func imageWriter(format string, im *luminance.Image) func(io.Writer) error {
	return func(w io.Writer) error {
		if format == "pfm" {
			return luminance.WritePFM(w, im)
		}
		return luminance.WriteEXR(w, im, luminance.EXROptions{Compression: luminance.ZIP})
	}
}

// shotImage is a picture as data. OpenEXR keeps the sun's discs as attributes
// beside the pixels; where spread is asked, as for PFM, they are in the pixels.
func shotImage(s *study.Shot, values []float32, spread bool, o LookOptions) *luminance.Image {
	p := s.Picture
	im := &luminance.Image{Width: p.Width, Height: p.Height, Lum: make([]float32, len(values))}
	for i, v := range values {
		if v == v { // outside it is NaN and stays 0
			im.Lum[i] = v
		}
	}
	a := &im.Attr
	a.Comment = plain(s.Name) + "; " + s.Sky + "; " + errorText(p)
	switch {
	case s.Plan != nil:
		im.Valid = make([]bool, len(values))
		for i, v := range values {
			im.Valid[i] = v == v
		}
		a.Comment = planText(s) + "; " + a.Comment
	case spread:
		for _, d := range s.Discs {
			spreadDisc(im.Lum, s.View, d)
		}
		a.Comment += discComment(s.View, s.Discs)
	default:
		for _, d := range s.Discs {
			l := s.View.Local(d.Dir)
			a.Discs = append(a.Discs, luminance.Disc{Direction: [3]float64{l.X, l.Y, l.Z}, OmegaSr: d.OmegaSr, Luminance: d.Luminance})
		}
	}
	if s.Plan == nil {
		a.SetView(s.View)
	}
	if invented(s.Project, s.Climate.Year) {
		a.Comment = inventedWords + "; " + a.Comment
	}
	a.Moment = s.Moment.Time.Format(time.RFC3339)
	site := s.Climate.Year.Site
	a.HasSite, a.LatitudeDeg, a.LongitudeDeg = true, site.LatitudeDeg, site.LongitudeDeg
	a.Software = "squint " + o.Version
	return im
}

// errorImage is the standard error as data, without discs.
func errorImage(s *study.Shot, o LookOptions) *luminance.Image {
	im := shotImage(s, s.Picture.StdErr, false, o)
	im.Attr.Comment = "standard errors of the picture, in its unit; " + im.Attr.Comment
	im.Attr.Discs = nil
	return im
}

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
			spreadDisc(f.Values, s.View, d)
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
		[]string{"Median relative standard error of the pixels: at most " + percent(worst) + "."}, min(sheetColumns, len(cells)), cells...)
}

// LookLine prints what became of one picture.
func LookLine(w io.Writer, s *study.Shot, elapsed time.Duration) error {
	var p page
	p.head(lookTitle(s))
	if s.Glare != nil {
		p.para(2, "DGP "+glareText(s)+".")
	}
	noise := errorText(s.Picture)
	switch s.Picture.Ended {
	case render.Stopped:
		noise += ": stopped there"
	case render.HadTime:
		noise += ": as far as the time limit let it come"
	}
	p.para(2, noise+fmt.Sprintf(", %s s.", fixed(elapsed.Seconds(), 0)))
	return p.print(w)
}

// LookNotes prints what was noticed about the inputs.
func LookNotes(w io.Writer, notes []string) error {
	var p page
	for _, n := range notes {
		p.item(0, "Note", bold(), 6, n)
	}
	return p.print(w)
}
