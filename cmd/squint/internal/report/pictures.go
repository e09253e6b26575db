package report

import (
	"fmt"
	"io"
	"time"

	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/glare/luminance"
	"squint/scene/view"
	"squint/trace/annual"
)

// picture is a file of a worst hour.
type picture struct {
	file  string
	write func(io.Writer) error
}

// viewSlugs are the viewpoints' names as file names.
func viewSlugs(r *study.Result) []string {
	names := make([]string, len(r.Views))
	for i := range r.Views {
		names[i] = r.Views[i].Viewpoint.Name
	}
	return slugs(names, "viewpoint")
}

// pictures lists the pictures of the worst hours.
func pictures(r *study.Result, o Options) ([]picture, error) {
	var all []picture
	scale := luminanceScale(r)
	for i, name := range viewSlugs(r) {
		v := &r.Views[i]
		if v.Worst == nil || v.Worst.InsideOf == nil {
			continue
		}
		im, err := luminanceImage(r, v, o)
		if err != nil {
			return nil, fmt.Errorf("viewpoint %q: %w", v.Viewpoint.Name, err)
		}
		all = append(all, picture{PictureDir + "/" + name + ".exr", func(w io.Writer) error {
			return luminance.WriteEXR(w, im, luminance.EXROptions{Compression: luminance.ZIP})
		}}, picture{PictureDir + "/" + name + ".png", func(w io.Writer) error {
			return falsecolour.WritePNG(w, figure(r, v, scale))
		}})
	}
	return all, nil
}

// luminanceImage is a worst hour with the sun's disc and its images spread over
// the pixels that they cover, as mean luminance there, so that the illuminance
// at the eye follows from the pixels alone. DGP does not: it needs each disc's
// own luminance, which an attribute and the comment state, with directions in the
// view frame.
func luminanceImage(r *study.Result, v *study.ViewResult, o Options) (*luminance.Image, error) {
	w := v.Worst
	eye := w.InsideOf.View
	if n := eye.Width * eye.Height; len(w.Lum) != n {
		return nil, fmt.Errorf("worst hour: got %d luminances, want %d x %d = %d", len(w.Lum), eye.Width, eye.Height, n)
	}
	im := &luminance.Image{Width: eye.Width, Height: eye.Height, Lum: append([]float32(nil), w.Lum...)}
	comment := fmt.Sprintf("%s; worst hour in use: DGP %s, %s lx at the eye", plain(v.Viewpoint.Name), plusMinus(w.DGP, w.StdErr, 3), fixed(w.Ev, 0))
	comment += discComment(eye, w.Discs)
	if invented(r.Project, r.Climate.Year) {
		comment = inventedWords + "; " + comment
	}
	im.Attr.SetView(eye)
	for _, disc := range w.Discs {
		im.Attr.Discs = append(im.Attr.Discs, imageDisc(eye, disc))
	}
	if err := im.SpreadDiscs(); err != nil {
		return nil, err
	}
	im.Attr.Moment = w.Moment.Time.Format(time.RFC3339)
	s := r.Climate.Year.Site
	im.Attr.HasSite, im.Attr.LatitudeDeg, im.Attr.LongitudeDeg = true, s.LatitudeDeg, s.LongitudeDeg
	im.Attr.Comment = comment
	im.Attr.Software = "squint " + o.Version
	return im, nil
}

// discComment states the discs that are spread over pixels.
func discComment(v view.View, discs []annual.Disc) string {
	if len(discs) == 0 {
		return ""
	}
	s := "; the sun's disc and its images are spread over the pixels they cover: illuminance at the eye holds, DGP needs them apart:"
	for i, disc := range discs {
		d := v.Local(disc.Dir)
		if i > 0 {
			s += ";"
		}
		s += fmt.Sprintf(" %.4g sr of %.4g cd/m2 at forward %.5f, left %.5f, up %.5f", disc.OmegaSr, disc.Luminance, d.X, d.Y, d.Z)
	}
	return s
}

// imageDisc is a disc as an image's attributes have it: in the view's frame.
func imageDisc(v view.View, disc annual.Disc) luminance.Disc {
	d := v.Local(disc.Dir)
	return luminance.Disc{Direction: [3]float64{d.X, d.Y, d.Z}, OmegaSr: disc.OmegaSr, Luminance: disc.Luminance}
}
