package falsecolour

import (
	"cmp"
	"image"
	"math"
	"slices"
)

// contour is a line of equal value in the data.
type contour struct {
	value  float64
	points []point
	closed bool
}

// smoothed returns the fractions averaged with their neighbours by weights
// 1 2 1 across and down: contours of noisy pixels would be crumbs.
func (p *picture) smoothed() []float64 {
	pass := func(in []float64, step int, edge func(i int) (first, last bool)) []float64 {
		out := make([]float64, len(in))
		for i, t := range in {
			if math.IsNaN(t) {
				out[i] = t
				continue
			}
			sum, w := 2*t, 2.0
			first, last := edge(i)
			if !first && !math.IsNaN(in[i-step]) {
				sum, w = sum+in[i-step], w+1
			}
			if !last && !math.IsNaN(in[i+step]) {
				sum, w = sum+in[i+step], w+1
			}
			out[i] = sum / w
		}
		return out
	}
	across := pass(p.t, 1, func(i int) (bool, bool) { return i%p.Width == 0, i%p.Width == p.Width-1 })
	return pass(across, p.Width, func(i int) (bool, bool) { return i < p.Width, i >= len(p.t)-p.Width })
}

// contours draws the lines and returns those worth a label, the longest
// first. Lines shorter than 48 pixels on the sheet are left out: noise.
func (p *picture) contours() []contour {
	if len(p.Contours) == 0 {
		return nil
	}
	t := p.smoothed()
	var all []contour
	for _, v := range p.Contours {
		f := p.Scale.Fraction(v)
		if !(f > 0 && f < 1) { // beyond the ends all is cut to one value
			continue
		}
		for _, c := range trace(t, p.Width, p.Height, f) {
			if c.length()*float64(p.k) >= 48*p.scale {
				c.value = v
				all = append(all, c)
			}
		}
	}
	core, casing := newLayer(p.rect), newLayer(p.rect)
	for _, c := range all {
		for i := 1; i < len(c.points); i++ {
			a, b := p.onSheet(c.points[i-1].x, c.points[i-1].y), p.onSheet(c.points[i].x, c.points[i].y)
			core.line(a, b, 1.1*p.scale)
			casing.line(a, b, 2.6*p.scale)
		}
	}
	dark := rgb(ink)
	// Half-covering: the casing only has to hold the line on light colours.
	casing.paint(p.dst, premultiplied(dark.R, dark.G, dark.B, 120))
	core.paint(p.dst, rgb(paper))
	slices.SortStableFunc(all, func(a, b contour) int { return cmp.Compare(b.length(), a.length()) })
	return all
}

// contourLabels writes the values on the lines, at most twice each, where
// there is room.
func (p *picture) contourLabels(lines []contour) {
	s := p.faces.small
	written := map[float64]int{}
	for _, c := range lines {
		text := Number(c.value)
		w, h := int(s.width(text))+6, s.ascent+6
		if written[c.value] == 2 || c.length()*float64(p.k) < 3*float64(w) {
			continue
		}
		var boxes []image.Rectangle
		for _, share := range [...]float64{0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8} {
			at := c.along(share)
			on := p.onSheet(at.x, at.y)
			min := image.Pt(int(on.x)-w/2, int(on.y)-h/2)
			boxes = append(boxes, image.Rectangle{Min: min, Max: min.Add(image.Pt(w, h))})
		}
		if box, ok := p.place(boxes); ok {
			written[c.value]++
			s.cased(p.dst, float64(box.Min.X)+3, box.Max.Y-3, text, rgb(paper), rgb(ink), 2*p.scale)
		}
	}
}

func (c contour) length() float64 {
	sum := 0.0
	for i := 1; i < len(c.points); i++ {
		sum += math.Hypot(c.points[i].x-c.points[i-1].x, c.points[i].y-c.points[i-1].y)
	}
	return sum
}

// along is the place after a share of the length.
func (c contour) along(share float64) point {
	left := share * c.length()
	for i := 1; i < len(c.points); i++ {
		a, b := c.points[i-1], c.points[i]
		d := math.Hypot(b.x-a.x, b.y-a.y)
		if d >= left && d > 0 {
			return point{a.x + (b.x-a.x)*left/d, a.y + (b.y-a.y)*left/d}
		}
		left -= d
	}
	return c.points[len(c.points)-1]
}

// trace returns the lines at level through w by h samples at pixel centres,
// by marching squares: in each square of four samples, lines join the sides
// whose ends are on different sides of the level; where all four are, the
// mean of the corners decides. Squares with a NaN corner have none. Source:
// W. Lorensen, H. Cline, Marching cubes, Computer Graphics 21 (1987) 163-169
// (from memory), in two dimensions.
func trace(t []float64, w, h int, level float64) []contour {
	// A crossing is named by the lower sample of its side, twice its index,
	// plus one for sides that go down.
	places := map[int]point{}
	links := map[int][]int{} // crossing to its neighbours, at most two
	var order []int
	cross := func(x, y, down int) int {
		i, j := y*w+x, y*w+x+1
		if down == 1 {
			j = i + w
		}
		name := 2*i + down
		if _, ok := places[name]; !ok {
			f := (level - t[i]) / (t[j] - t[i])
			at := point{float64(x) + 0.5, float64(y) + 0.5}
			if down == 1 {
				at.y += f
			} else {
				at.x += f
			}
			places[name] = at
			order = append(order, name)
		}
		return name
	}
	join := func(a, b int) {
		links[a] = append(links[a], b)
		links[b] = append(links[b], a)
	}
	for y := range h - 1 {
		for x := range w - 1 {
			i := y*w + x
			a, b, c, d := t[i], t[i+1], t[i+w+1], t[i+w] // clockwise
			if math.IsNaN(a + b + c + d) {
				continue
			}
			above := [4]bool{a >= level, b >= level, c >= level, d >= level}
			var sides []int
			for s, at := range [...][3]int{{x, y, 0}, {x + 1, y, 1}, {x, y + 1, 0}, {x, y, 1}} {
				if above[s] != above[(s+1)%4] {
					sides = append(sides, cross(at[0], at[1], at[2]))
				}
			}
			switch len(sides) {
			case 2:
				join(sides[0], sides[1])
			case 4: // top, right, bottom, left
				if ((a+b+c+d)/4 >= level) == above[0] { // a and c are one region
					join(sides[0], sides[1])
					join(sides[2], sides[3])
				} else {
					join(sides[3], sides[0])
					join(sides[1], sides[2])
				}
			}
		}
	}
	return chain(order, places, links)
}

// chain joins crossings to lines: first those with ends, then closed ones.
func chain(order []int, places map[int]point, links map[int][]int) []contour {
	used := map[int]bool{}
	var out []contour
	for _, closed := range [...]bool{false, true} {
		for _, start := range order {
			if used[start] || !closed && len(links[start]) != 1 {
				continue
			}
			c := contour{closed: closed}
			for at, more := start, true; more; {
				used[at] = true
				c.points = append(c.points, places[at])
				more = false
				for _, next := range links[at] {
					if !used[next] {
						at, more = next, true
						break
					}
				}
			}
			if closed {
				c.points = append(c.points, c.points[0])
			}
			out = append(out, c)
		}
	}
	return out
}
