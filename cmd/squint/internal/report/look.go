package report

import (
	"errors"
	"fmt"
	"image"
	"image/png"
	"io"
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
	Map     *falsecolour.Map
	Scale   *falsecolour.Scale
	Overlay Overlay
}

// LookFormats are the formats of pictures: OpenEXR, PNG and TIFF in false
// colours, and PFM.
var LookFormats = []string{"exr", "png", "tiff", "pfm"}

// sheetName is the sheet of several pictures, without its ending.
const sheetName = "sheet"

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
				add(sheetName+"."+format, figureWriter(format, func() (*image.RGBA, error) { return lookSheet(shots, figures) }))
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
			imageDisc(s.View, d).Spread(im.Lum, s.View)
		}
		a.Comment += discComment(s.View, s.Discs)
	default:
		for _, d := range s.Discs {
			a.Discs = append(a.Discs, imageDisc(s.View, d))
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
