package report

import (
	"fmt"
	"image"
	"math"
	"strings"

	"squint/glare/falsecolour"
	"squint/scene/photometry"
)

// ImagesScale is one scale for the pictures of all images.
func ImagesScale(images []*Image) falsecolour.Scale {
	var all [][]float32
	for _, im := range images {
		all = append(all, im.Photo.Lum)
	}
	return falsecolour.FitScale("Luminance", "cd/m2", true, all...)
}

// ImageFigure draws an image with its sources outlined and numbered, cut to the
// image circle and made smaller, by a whole number, to at most maxPx pixels
// each way.
func ImageFigure(im *Image, scale falsecolour.Scale, o Overlay, maxPx int) falsecolour.Figure {
	s := newShrunk(im, maxPx)
	f := falsecolour.Figure{Width: s.size.X, Height: s.size.Y, Values: s.lum, Inside: s.inside, Smooth: true,
		Scale: scale, Map: falsecolour.Inferno, Title: plain(im.File)}
	o.on(&f, float64(s.at.X), float64(s.at.Y), float64(s.by))
	v := im.Photo.View
	if _, _, r := v.Circle(); v.Placement.RadiusPx == 0 && v.Projection.Fisheye() && s.by == 1 {
		f.Round = 2*r == float64(s.size.X) && s.size.X == s.size.Y
	}
	_, text := im.finding()
	f.Caption = []string{strings.ReplaceAll(sentence(text), "cd/m2", "cd/m²")}
	if !im.Indices {
		return f
	}
	if t := sourcesText(im.Result); t != "" {
		f.Caption = append(f.Caption, t)
	}
	for i, src := range im.Result.Sources {
		if i == mostMarked {
			break
		}
		m := falsecolour.Mark{Rank: i + 1, Pixels: s.pixels(src.Pixels)}
		if src.Disc {
			x, y, ok := v.LocalProject(src.Dir)
			if !ok {
				continue
			}
			_, _, radius := v.Circle()
			m.X, m.Y = (x-float64(s.at.X))/float64(s.by), (y-float64(s.at.Y))/float64(s.by)
			m.RadiusPx = photometry.SunDiameterRad / v.FOVRad * radius / float64(s.by)
		} else if len(m.Pixels) == 0 {
			continue
		}
		f.Marks = append(f.Marks, m)
	}
	return f
}

// ImagesSheet lays the pictures of several images side by side, with one scale.
func ImagesSheet(images []*Image, scale falsecolour.Scale, o Overlay) (*image.RGBA, error) {
	var figures []falsecolour.Figure
	for _, im := range images {
		f := ImageFigure(im, scale, o, 380)
		f.Caption = f.Caption[:1]
		figures = append(figures, f)
	}
	columns := min(4, int(math.Ceil(math.Sqrt(float64(len(images))))))
	return falsecolour.Sheet(fmt.Sprintf("Luminances of %s", count(len(images), "image", "images")),
		[]string{"Outlined: sources of glare, numbered by their part in it. One scale for all."}, columns, figures...)
}

// shrunk is the part of an image that the field covers, each pixel the mean of
// by x by.
type shrunk struct {
	im     *Image
	at     image.Point // its top left pixel in the image
	size   image.Point
	by     int
	lum    []float32
	inside []bool
}

func newShrunk(im *Image, maxPx int) *shrunk {
	v := im.Photo.View
	box := image.Rect(0, 0, v.Width, v.Height)
	if v.Projection.Fisheye() {
		x, y, r := v.Circle()
		circle := image.Rect(int(math.Floor(x-r)), int(math.Floor(y-r)), int(math.Ceil(x+r)), int(math.Ceil(y+r)))
		if c := box.Intersect(circle); !c.Empty() {
			box = c
		}
	}
	by := max(1, (max(box.Dx(), box.Dy())+maxPx-1)/maxPx)
	s := &shrunk{im: im, at: box.Min, size: image.Pt((box.Dx()+by-1)/by, (box.Dy()+by-1)/by), by: by}
	n := s.size.X * s.size.Y
	s.lum, s.inside = make([]float32, n), make([]bool, n)
	sum, weight := make([]float64, n), make([]int, n)
	for y := box.Min.Y; y < box.Max.Y; y++ {
		for x := box.Min.X; x < box.Max.X; x++ {
			if i := y*v.Width + x; im.Inside[i] {
				k := s.index(x, y)
				sum[k] += float64(im.Photo.Lum[i])
				weight[k]++
			}
		}
	}
	for k, w := range weight {
		if s.inside[k] = w > 0; w > 0 {
			s.lum[k] = float32(sum[k] / float64(w))
		}
	}
	return s
}

func (s *shrunk) index(x, y int) int { return (y-s.at.Y)/s.by*s.size.X + (x-s.at.X)/s.by }

// pixels are those of the smaller picture that hold one of the given.
func (s *shrunk) pixels(of []int32) []int32 {
	seen := map[int]bool{}
	var out []int32
	w := s.im.Photo.View.Width
	for _, i := range of {
		k := s.index(int(i)%w, int(i)/w)
		if !seen[k] {
			seen[k] = true
			out = append(out, int32(k))
		}
	}
	return out
}
