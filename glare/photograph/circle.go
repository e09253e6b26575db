package photograph

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"squint/glare/luminance"
)

// ErrNoCircle is wrapped by the errors of FindCircle.
var ErrNoCircle = errors.New("no image circle found")

// Circle is the image circle of a fisheye, in pixels.
type Circle struct{ X, Y, RadiusPx float64 }

// Fit is an image circle as found.
type Fit struct {
	Circle
	// Agree is the share of the directions from the centre, of those in which
	// the circle lies in the picture, at which an edge was found on it. Dark
	// parts of the scene show none.
	Agree float64
	RMSPx float64 // of these edges about the circle, its stretch allowed for
	// Stretch is the circle's width over its height, minus 1: other than 0
	// where a picture was resized unequally.
	Stretch float64
}

// FindCircle finds the edge between the picture and its dark surround. It needs
// corners at least 5 times darker than the middle and a third of the edge; of a
// circle with sharp edges it is good to 0.1 pixels (TestFindCircle). These
// thresholds and those below are own choices.
func FindCircle(im *luminance.Image) (Fit, error) {
	s := sampler{im}
	dark, bright := s.levels()
	if !(bright > 0) || bright < 5*dark {
		return Fit{}, fmt.Errorf("%w: the corners are not much darker than the middle (%.3g and %.3g)", ErrNoCircle, dark, bright)
	}
	// Between the two on a log scale; 1e-4 of the middle is dark enough.
	points := s.outline(math.Sqrt(math.Max(dark, 1e-4*bright) * bright))
	c, ok := consensus(points, float64(min(im.Width, im.Height)))
	if !ok {
		return Fit{}, fmt.Errorf("%w: its edge is not round, or too little of it lies in the picture", ErrNoCircle)
	}
	var f Fit
	// How far off edges may be, rms. Own choice: a lens that is out of focus
	// there; squares and windows are further off.
	blur := math.Max(0.4, 0.003*c.RadiusPx)
	// First within 6 % of the radius, then close by, where the scene inside
	// hardly changes.
	for _, reach := range []float64{math.Max(4, 0.06*c.RadiusPx), 4, 4} {
		if f, ok = s.refine(c, 0, reach); !ok {
			return Fit{}, fmt.Errorf("%w: its edge is too faint", ErrNoCircle)
		}
		c = f.Circle
		if math.Abs(f.Stretch)*c.RadiusPx > 4 {
			blur = math.Max(1, 0.01*c.RadiusPx)
			break // close by there would be only part of it
		}
	}
	if math.Abs(f.Stretch)*c.RadiusPx > 4 { // and what was near shows less than all of it
		for range 3 {
			if f, ok = s.refine(f.Circle, f.Stretch, 4); !ok {
				return Fit{}, fmt.Errorf("%w: its edge is too faint", ErrNoCircle)
			}
		}
	}
	if f.RMSPx > blur {
		return Fit{}, fmt.Errorf("%w: its edge is not round but %.1f pixels off (rms)", ErrNoCircle, f.RMSPx)
	}
	if f.Agree < 1.0/3 {
		return Fit{}, fmt.Errorf("%w: only %.0f %% of its edge can be seen", ErrNoCircle, 100*f.Agree)
	}
	return f, nil
}

// sampler reads luminances; what is unknown is dark.
type sampler struct{ *luminance.Image }

func (s sampler) pixel(x, y int) float64 {
	v, ok := s.At(min(max(x, 0), s.Width-1), min(max(y, 0), s.Height-1))
	if !ok || !(v > 0) {
		return 0
	}
	return math.Min(float64(v), math.MaxFloat32)
}

// at interpolates between pixel centres.
func (s sampler) at(x, y float64) float64 {
	x0, y0 := math.Floor(x-0.5), math.Floor(y-0.5)
	fx, fy := x-0.5-x0, y-0.5-y0
	ix, iy := int(x0), int(y0)
	return (1-fy)*((1-fx)*s.pixel(ix, iy)+fx*s.pixel(ix+1, iy)) + fy*((1-fx)*s.pixel(ix, iy+1)+fx*s.pixel(ix+1, iy+1))
}

// levels returns the luminance of the two darkest corners and that of the
// middle, medians.
func (s sampler) levels() (dark, bright float64) {
	median := func(x0, y0, x1, y1 int) float64 {
		var all []float64
		step := max(1, (x1-x0)/64)
		for y := y0; y < y1; y += step {
			for x := x0; x < x1; x += step {
				all = append(all, s.pixel(x, y))
			}
		}
		slices.Sort(all)
		return all[len(all)/2]
	}
	w, h := s.Width, s.Height
	n := max(1, min(w, h)/20)
	corners := []float64{median(0, 0, n, n), median(w-n, 0, w, n), median(0, h-n, n, h), median(w-n, h-n, w, h)}
	slices.Sort(corners)
	return corners[1], median(w/4, h/4, w-w/4, h-h/4)
}

type point struct{ x, y float64 }

// outline returns where rows and columns first and last exceed the threshold
// for three pixels, unless that is where the picture ends.
func (s sampler) outline(threshold float64) []point {
	var out []point
	lines := func(count, length int, at func(line, i int) (x, y int)) {
		for line := 0; line < count; line += max(1, count/400) {
			for _, back := range []bool{false, true} {
				run := 0
				for i := range length {
					j := i
					if back {
						j = length - 1 - i
					}
					if x, y := at(line, j); s.pixel(x, y) <= threshold {
						run = 0
						continue
					}
					if run++; run < 3 {
						continue
					}
					if i > 2 {
						if j -= 2; back {
							j += 4
						}
						x, y := at(line, j)
						out = append(out, point{float64(x) + 0.5, float64(y) + 0.5})
					}
					break
				}
			}
		}
	}
	lines(s.Height, s.Width, func(line, i int) (int, int) { return i, line })
	lines(s.Width, s.Height, func(line, i int) (int, int) { return line, i })
	return out
}

// consensus returns the circle through three of the points that most others
// agree with, a quarter of them at least. Source: M. A. Fischler, R. C. Bolles,
// Random sample consensus, Commun. ACM 24 (1981) 381-395.
func consensus(points []point, side float64) (best Circle, ok bool) {
	if len(points) < 12 {
		return best, false
	}
	rng := rand.New(rand.NewPCG(1, 1981))
	most := len(points) / 4
	for range 600 {
		var three [3]point
		for i := range three {
			three[i] = points[rng.IntN(len(points))]
		}
		c, through := fitCircle(three[:])
		if !through || c.RadiusPx < side/5 || c.RadiusPx > 5*side {
			continue
		}
		tolerance, n := math.Max(1.5, 0.02*c.RadiusPx), 0
		for _, p := range points {
			if math.Abs(math.Hypot(p.x-c.X, p.y-c.Y)-c.RadiusPx) <= tolerance {
				n++
			}
		}
		if n > most {
			most, best, ok = n, c, true
		}
	}
	return best, ok
}

// refine looks for the edge along rays from the circle's centre, as far as
// reach (pixels) inside and outside of it, where the luminance is halfway
// between both sides, and fits a circle to what is found, in the picture as it
// was before a stretch.
func (s sampler) refine(c Circle, stretch, reach float64) (f Fit, ok bool) {
	const rays, step = 720, 0.25
	wide := math.Sqrt(1 + stretch)
	high := 1 / wide
	var found []point
	looked := 0
	for k := range rays {
		sin, cos := math.Sincos(2 * math.Pi * float64(k) / rays)
		x, y := c.X+c.RadiusPx*cos*wide, c.Y+c.RadiusPx*sin*high
		if x < 0 || y < 0 || x > float64(s.Width) || y > float64(s.Height) {
			continue // cut off
		}
		looked++
		at := func(r float64) float64 { return s.at(c.X+r*cos*wide, c.Y+r*sin*high) }
		inside, outside, n := 0.0, 0.0, 0.0
		for d := 1.5; d <= reach; d += step {
			inside += at(c.RadiusPx - d)
			outside += at(c.RadiusPx + d)
			n++
		}
		if inside < 4*outside || inside == 0 {
			continue
		}
		half := (inside + outside) / n / 2
		before := at(c.RadiusPx + reach)
		for r := c.RadiusPx + reach - step; r >= c.RadiusPx-reach; r -= step {
			now := at(r)
			if before <= half && now > half {
				r += step * (now - half) / (now - before)
				found = append(found, point{c.X + r*cos, c.Y + r*sin})
				break
			}
			before = now
		}
	}
	var kept []point
	for range 4 {
		kept = nearest(found, c)
		if c, ok = fitCircle(kept); !ok {
			return f, false
		}
	}
	f.Circle, f.Agree = c, float64(len(kept))/float64(max(looked, 1))
	// An ellipse with level axes: r = R (1 + stretch/2 cos 2 phi).
	var square, along, weight float64
	for _, p := range kept {
		r := math.Hypot(p.x-c.X, p.y-c.Y) - c.RadiusPx
		cos2 := math.Cos(2 * math.Atan2(p.y-c.Y, p.x-c.X))
		square += r * r
		along += r * cos2
		weight += cos2 * cos2
	}
	f.Stretch = (1+stretch)*(1+2*along/(weight*c.RadiusPx)) - 1
	f.RMSPx = math.Sqrt(math.Max(0, square-along*along/weight) / float64(len(kept)))
	return f, true
}

// nearest leaves out points further from the circle than a pixel and three
// times the median distance.
func nearest(points []point, c Circle) []point {
	off := make([]float64, len(points))
	for i, p := range points {
		off[i] = math.Abs(math.Hypot(p.x-c.X, p.y-c.Y) - c.RadiusPx)
	}
	if len(off) == 0 {
		return nil
	}
	sorted := slices.Sorted(slices.Values(off))
	limit := math.Max(1, 3*sorted[len(sorted)/2])
	var out []point
	for i, p := range points {
		if off[i] <= limit {
			out = append(out, p)
		}
	}
	return out
}

// fitCircle returns the circle that minimises the sum of (r^2-R^2)^2 over the
// points. Source: I. Kasa, A circle fitting procedure and its error analysis,
// IEEE Trans. Instrum. Meas. 25 (1976) 8-14 (from memory).
func fitCircle(points []point) (c Circle, ok bool) {
	if len(points) < 3 {
		return c, false
	}
	var mx, my float64
	for _, p := range points {
		mx += p.x / float64(len(points))
		my += p.y / float64(len(points))
	}
	// About the mean, the linear terms of r^2 = 2 a x + 2 b y + k decouple.
	var xx, xy, yy, xr, yr, rr float64
	for _, p := range points {
		x, y := p.x-mx, p.y-my
		r := x*x + y*y
		xx, xy, yy = xx+x*x, xy+x*y, yy+y*y
		xr, yr, rr = xr+x*r, yr+y*r, rr+r
	}
	det := xx*yy - xy*xy
	if !(det > 1e-9*(xx+yy)*(xx+yy)) { // on a line, or one point
		return c, false
	}
	a, b := (xr*yy-yr*xy)/det/2, (yr*xx-xr*xy)/det/2
	return Circle{mx + a, my + b, math.Sqrt(a*a + b*b + rr/float64(len(points)))}, true
}
