package falsecolour

import (
	"image"
	"math"
)

// picture draws the data of one figure into a rectangle of the sheet.
type picture struct {
	*Figure
	dst   *image.RGBA
	rect  image.Rectangle // Width*k by Height*k
	k     int
	scale float64 // of text and lines
	faces *typefaces

	// t is the scale's fraction of each pixel, cut to 0..1; NaN: not drawn.
	t []float64
	// labels are the places already taken.
	labels []image.Rectangle
}

func newPicture(f *Figure, dst *image.RGBA, at image.Point, k int, scale float64, faces *typefaces) *picture {
	p := &picture{
		Figure: f, dst: dst, k: k, scale: scale, faces: faces,
		rect: image.Rectangle{Min: at, Max: at.Add(image.Pt(f.Width*k, f.Height*k))},
		t:    make([]float64, len(f.Values)),
	}
	for i, v := range f.Values {
		p.t[i] = math.NaN()
		if f.drawn(i) {
			p.t[i] = min(max(f.Scale.Fraction(float64(v)), 0), 1)
		}
	}
	return p
}

// draw draws everything: first the data, then lines, then numbers.
func (p *picture) draw() {
	p.pixels()
	lines := p.contours()
	p.outlines()
	p.ranks()
	p.points()
	p.contourLabels(lines)
}

// pixels paints the data; outside of them the sheet stays paper.
func (p *picture) pixels() {
	c, radius := circleIn(p.rect)
	for y := p.rect.Min.Y; y < p.rect.Max.Y; y++ {
		for x := p.rect.Min.X; x < p.rect.Max.X; x++ {
			cover := 1.0
			if p.Round {
				if cover = min(max(radius-math.Hypot(float64(x)+0.5-c.x, float64(y)+0.5-c.y)+0.5, 0), 1); cover == 0 {
					continue
				}
			}
			t := p.fractionAt((float64(x-p.rect.Min.X)+0.5)/float64(p.k), (float64(y-p.rect.Min.Y)+0.5)/float64(p.k))
			if math.IsNaN(t) {
				continue
			}
			colour := p.Map.At(t)
			i := p.dst.PixOffset(x, y)
			for ch, v := range [...]uint8{colour.R, colour.G, colour.B} {
				under := float64(p.dst.Pix[i+ch])
				p.dst.Pix[i+ch] = uint8(under + cover*(float64(v)-under) + 0.5)
			}
		}
	}
	if p.Round { // an edge where the picture is as light as the paper
		l := newLayer(p.rect.Inset(-2))
		l.ring(c, radius, p.scale)
		l.paint(p.dst, rgb(hairline))
	}
}

// fractionAt is the scale's fraction at a place of the data; NaN where
// nothing is drawn.
func (p *picture) fractionAt(x, y float64) float64 {
	nearest := p.t[min(int(y), p.Height-1)*p.Width+min(int(x), p.Width-1)]
	if !p.Smooth || math.IsNaN(nearest) {
		return nearest
	}
	x0, y0 := math.Floor(x-0.5), math.Floor(y-0.5)
	fx, fy := x-0.5-x0, y-0.5-y0
	sum, weights := 0.0, 0.0
	for _, n := range [...]struct{ dx, dy, w float64 }{
		{0, 0, (1 - fx) * (1 - fy)}, {1, 0, fx * (1 - fy)}, {0, 1, (1 - fx) * fy}, {1, 1, fx * fy},
	} {
		ix, iy := int(x0+n.dx), int(y0+n.dy)
		if ix < 0 || iy < 0 || ix >= p.Width || iy >= p.Height {
			continue
		}
		if t := p.t[iy*p.Width+ix]; !math.IsNaN(t) {
			sum += n.w * t
			weights += n.w
		}
	}
	return sum / weights // the nearest pixel has weight
}

// onSheet is where a place of the data is on the sheet.
func (p *picture) onSheet(x, y float64) point {
	return point{float64(p.rect.Min.X) + x*float64(p.k), float64(p.rect.Min.Y) + y*float64(p.k)}
}

// place returns the first of the boxes that lies in the picture and touches
// no label, and remembers it. If none does, ok is false.
func (p *picture) place(boxes []image.Rectangle) (box image.Rectangle, ok bool) {
next:
	for _, b := range boxes {
		if !b.In(p.rect) {
			continue
		}
		for _, l := range p.labels {
			if b.Overlaps(l) {
				continue next
			}
		}
		p.labels = append(p.labels, b)
		return b, true
	}
	return image.Rectangle{}, false
}

// around returns boxes of the given size beside another: right and left of it
// and its corners, above and below, then the same farther away.
func around(b image.Rectangle, w, h, gap int) []image.Rectangle {
	var out []image.Rectangle
	for range 6 {
		midX, midY := (b.Min.X+b.Max.X-w)/2, (b.Min.Y+b.Max.Y-h)/2
		left, right, top, bottom := b.Min.X-gap-w, b.Max.X+gap, b.Min.Y-gap-h, b.Max.Y+gap
		for _, at := range [...]image.Point{
			{right, midY}, {left, midY}, {midX, top}, {midX, bottom},
			{right, top}, {left, top}, {right, bottom}, {left, bottom},
			{right, b.Min.Y}, {left, b.Min.Y}, {right, b.Max.Y - h}, {left, b.Max.Y - h},
		} {
			out = append(out, image.Rectangle{Min: at, Max: at.Add(image.Pt(w, h))})
		}
		b = b.Inset(-h / 2)
	}
	return out
}
