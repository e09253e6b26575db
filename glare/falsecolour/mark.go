package falsecolour

import (
	"image"
	"math"
	"strconv"
)

// outlines draws the marks: a hairline of ink cased in paper, which stands
// out on any colour and in grey print.
func (p *picture) outlines() {
	if len(p.Marks) == 0 {
		return
	}
	clip := p.rect.Inset(-int(3 * p.scale))
	core, casing := newLayer(clip), newLayer(clip)
	for _, m := range p.Marks {
		if len(m.Pixels) == 0 {
			c, r := p.circle(m)
			core.ring(c, r, 1.4*p.scale)
			casing.ring(c, r, 4*p.scale)
			continue
		}
		for _, e := range p.edges(m.Pixels) {
			a, b := p.onSheet(e.a.x, e.a.y), p.onSheet(e.b.x, e.b.y)
			core.line(a, b, 1.4*p.scale)
			casing.line(a, b, 4*p.scale)
		}
	}
	casing.paint(p.dst, rgb(paper))
	core.paint(p.dst, rgb(ink))
}

// circle is that of a mark without pixels, on the sheet.
func (p *picture) circle(m Mark) (c point, r float64) {
	return p.onSheet(m.X, m.Y), math.Max(m.RadiusPx*float64(p.k), 4*p.scale)
}

// edge is a line in the data.
type edge struct{ a, b point }

// edges returns the border of a set of pixels: the sides that only one of two
// neighbours has, in reading order.
func (p *picture) edges(pixels []int32) []edge {
	in := make(map[int32]bool, len(pixels))
	for _, i := range pixels {
		in[i] = true
	}
	w := int32(p.Width)
	var out []edge
	for _, i := range pixels {
		x, y := i%w, i/w
		fx, fy := float64(x), float64(y)
		if x == 0 || !in[i-1] {
			out = append(out, edge{point{fx, fy}, point{fx, fy + 1}})
		}
		if x == w-1 || !in[i+1] {
			out = append(out, edge{point{fx + 1, fy}, point{fx + 1, fy + 1}})
		}
		if !in[i-w] {
			out = append(out, edge{point{fx, fy}, point{fx + 1, fy}})
		}
		if !in[i+w] {
			out = append(out, edge{point{fx, fy + 1}, point{fx + 1, fy + 1}})
		}
	}
	return out
}

// ranks writes the marks' numbers beside them, on small discs of paper.
func (p *picture) ranks() {
	s := p.faces.bold
	for _, m := range p.Marks {
		text := m.Label
		if text == "" && m.Rank > 0 {
			text = strconv.Itoa(m.Rank)
		}
		if text == "" {
			continue
		}
		h := int(1.5 * s.em)
		w := max(h, int(s.width(text)+0.9*s.em))
		box, ok := p.place(around(p.bounds(m), w, h, int(4*p.scale)))
		if !ok { // better on its source than nowhere
			b := p.bounds(m)
			at := image.Pt((b.Min.X+b.Max.X-w)/2, (b.Min.Y+b.Max.Y-h)/2)
			box = nudge(image.Rectangle{Min: at, Max: at.Add(image.Pt(w, h))}, p.rect)
			p.labels = append(p.labels, box)
		}
		l := newLayer(box.Inset(-2))
		r := float64(h) / 2
		y := float64(box.Min.Y) + r
		l.line(point{float64(box.Min.X) + r, y}, point{float64(box.Max.X) - r, y}, 2*r)
		l.paint(p.dst, rgb(paper))
		s.draw(p.dst, float64(box.Min.X)+(float64(w)-s.width(text))/2, box.Min.Y+(h+s.ascent)/2, text, rgb(ink))
	}
}

// nudge moves b as little as needed to lie in r.
func nudge(b, r image.Rectangle) image.Rectangle {
	b = b.Add(image.Pt(max(0, r.Min.X-b.Min.X), max(0, r.Min.Y-b.Min.Y)))
	return b.Sub(image.Pt(max(0, b.Max.X-r.Max.X), max(0, b.Max.Y-r.Max.Y)))
}

// bounds is the box around a mark on the sheet.
func (p *picture) bounds(m Mark) image.Rectangle {
	if len(m.Pixels) == 0 {
		c, r := p.circle(m)
		return image.Rect(int(c.x-r), int(c.y-r), int(math.Ceil(c.x+r)), int(math.Ceil(c.y+r)))
	}
	var b image.Rectangle
	for _, i := range m.Pixels {
		x, y := int(i)%p.Width*p.k, int(i)/p.Width*p.k
		b = b.Union(image.Rect(x, y, x+p.k, y+p.k))
	}
	return b.Add(p.rect.Min)
}

// points writes the numbers of chosen places.
func (p *picture) points() {
	s := p.faces.small
	arm := 4 * p.scale
	for _, pt := range p.Points {
		text := pt.Label
		if text == "" {
			v, ok := p.at(pt.X, pt.Y)
			if !ok {
				v = math.NaN()
			}
			text = Number(v)
		}
		c := p.onSheet(pt.X, pt.Y)
		cross := image.Rect(int(c.x-arm), int(c.y-arm), int(c.x+arm)+1, int(c.y+arm)+1)
		core, casing := newLayer(cross.Inset(-int(4*p.scale))), newLayer(cross.Inset(-int(4*p.scale)))
		for _, d := range [...]point{{arm, 0}, {0, arm}} {
			a, b := point{c.x - d.x, c.y - d.y}, point{c.x + d.x, c.y + d.y}
			core.line(a, b, 1.2*p.scale)
			casing.line(a, b, 3.4*p.scale)
		}
		casing.paint(p.dst, rgb(ink))
		core.paint(p.dst, rgb(paper))
		p.labels = append(p.labels, cross)
		if box, ok := p.place(around(cross, int(s.width(text))+2, s.ascent+4, int(3*p.scale))); ok {
			s.cased(p.dst, float64(box.Min.X)+1, box.Max.Y-2, text, rgb(paper), rgb(ink), 2*p.scale)
		}
	}
}
