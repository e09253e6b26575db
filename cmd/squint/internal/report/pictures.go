package report

import (
	"fmt"
	"io"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/glare/luminance"
	"squint/scene/photometry"
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
// own luminance, which the comment states, with directions in the view frame.
func luminanceImage(r *study.Result, v *study.ViewResult, o Options) (*luminance.Image, error) {
	w := v.Worst
	eye := w.InsideOf.View
	if n := eye.Width * eye.Height; len(w.Lum) != n {
		return nil, fmt.Errorf("worst hour: got %d luminances, want %d x %d = %d", len(w.Lum), eye.Width, eye.Height, n)
	}
	im := &luminance.Image{Width: eye.Width, Height: eye.Height, Lum: append([]float32(nil), w.Lum...)}
	comment := fmt.Sprintf("%s; worst hour in use: DGP %s, %s lx at the eye", plain(v.Viewpoint.Name), plusMinus(w.DGP, w.StdErr, 3), fixed(w.Ev, 0))
	for _, disc := range w.Discs {
		spreadDisc(im.Lum, eye, disc)
	}
	comment += discComment(eye, w.Discs)
	if invented(r.Project, r.Climate.Year) {
		comment = inventedWords + "; " + comment
	}
	im.Attr.SetView(eye)
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

// spreadDisc adds a disc to the pixels, in shares by points over its area, its
// illuminance at the eye kept; of a disc that is not in front of the eye, as a
// panorama shows it, luminance times solid angle.
func spreadDisc(lum []float32, v view.View, disc annual.Disc) {
	local := v.Local(disc.Dir)
	if !(disc.OmegaSr > 0) {
		return
	}
	// As in glare: L omega (1 - omega/4 pi) cos for a disc in front of the eye.
	front := local.X > math.Sin(photometry.SunDiameterRad)
	flux, size := disc.Luminance*disc.OmegaSr, v.SolidAngle
	if front {
		flux, size = flux*(1-disc.OmegaSr/(4*math.Pi))*local.X, v.ProjectedSolidAngle
	}
	share := map[int]float64{}
	total := 0.0
	for _, p := range discPoints(local) {
		px, py, ok := v.LocalProject(p)
		if !ok {
			continue
		}
		i := min(int(py), v.Height-1)*v.Width + min(int(px), v.Width-1)
		share[i]++
		total++
	}
	for i, n := range share {
		if omega := size(i%v.Width, i/v.Width); omega > 0 {
			lum[i] += float32(flux * n / total / omega)
		}
	}
}

// discPoints are points evenly spread over the sun's disc around a direction.
func discPoints(dir r3.Vec) []r3.Vec {
	up := r3.Vec{Z: 1}
	if dir.Z > 0.9 || dir.Z < -0.9 {
		up = r3.Vec{X: 1}
	}
	a := r3.Unit(r3.Cross(up, dir))
	b := r3.Cross(dir, a)
	const side = 16
	radius := photometry.SunDiameterRad / 2
	var out []r3.Vec
	for i := range side {
		for j := range side {
			x, y := (float64(i)+0.5)/side*2-1, (float64(j)+0.5)/side*2-1
			if x*x+y*y > 1 {
				continue
			}
			out = append(out, r3.Unit(r3.Add(dir, r3.Add(r3.Scale(x*radius, a), r3.Scale(y*radius, b)))))
		}
	}
	return out
}
