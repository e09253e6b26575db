package system

import (
	"cmp"
	"math"
	"slices"
)

// The shapes of a light shelf's top.
const (
	Flat     = "flat"
	Arc      = "arc"
	Parabola = "parabola"
	Polyline = "polyline"
)

// Profile is the shape of a shelf's top seen along the opening: flat, or
// hollow, its middle below the straight line between the plane of the glass
// and the far edge.
type Profile struct {
	Shape    string  // Flat, Arc, Parabola or Polyline; "" is Flat
	SagittaM float64 // depth of the hollow: Arc; Parabola without FocusM
	FocusM   float64 // Parabola: focal length, its axis square to the line; 0: by SagittaM
	// Points of Polyline: distance from the plane of the glass along the
	// line and height above it, negative in a hollow; distances rise from 0 to
	// the depth, slopes rise.
	Points [][2]float64
}

// line is the top over the line from the glass to the far edge at depthM, as
// points (distance, height) whose facets are off the curve by at most
// facetRad.
func (p Profile) line(what string, depthM, facetRad float64) ([][2]float64, error) {
	sagitta := p.SagittaM
	switch p.Shape {
	case "", Flat:
		return [][2]float64{{0, 0}, {depthM, 0}}, nil
	case Arc, Parabola:
		key := what + " sagitta"
		if p.Shape == Parabola && p.FocusM != 0 {
			if !(p.FocusM > 0) {
				return nil, dimension(what+" focus", "got %g m, want above 0 m", p.FocusM)
			}
			key, sagitta = what+" focus", depthM*depthM/16/p.FocusM
			if least := depthM * depthM / 16 / maxSagitta(depthM); sagitta > maxSagitta(depthM) {
				return nil, dimension(key, "got %g m, want at least %.4g m with a depth of %g m", p.FocusM, least, depthM)
			}
		}
		if !(sagitta > 0 && sagitta <= maxSagitta(depthM)) {
			return nil, dimension(key, "got %g m, want above 0 m and at most %.4g m, with a depth of %g m", sagitta, maxSagitta(depthM), depthM)
		}
		if p.Shape == Arc {
			return arc(depthM, -sagitta, facetRad), nil
		}
		return parabola(depthM, -sagitta, facetRad), nil
	case Polyline:
		return p.polyline(what+" polyline", depthM)
	}
	return nil, dimension(what+" profile", "got %q, want %q, %q, %q or %q", p.Shape, Flat, Arc, Parabola, Polyline)
}

func (p Profile) polyline(what string, depthM float64) ([][2]float64, error) {
	n := len(p.Points)
	if n < 2 || n > maxFacets {
		return nil, dimension(what, "got %d points, want 2 to %d", n, maxFacets)
	}
	slope := math.Inf(-1)
	for i, q := range p.Points {
		if !(math.Abs(q[1]) <= depthM) {
			return nil, dimension(what, "point %d: got height %g m, want at most the depth, %g m, above or below", i+1, q[1], depthM)
		}
		if i == 0 {
			if q[0] != 0 {
				return nil, dimension(what, "point 1: got distance %g m, want 0 m, the plane of the glass", q[0])
			}
			continue
		}
		last := p.Points[i-1]
		if !(q[0] > last[0]) {
			return nil, dimension(what, "point %d: got distance %g m after %g m, want rising distances", i+1, q[0], last[0])
		}
		next := (q[1] - last[1]) / (q[0] - last[0])
		if !(math.Abs(next) <= math.Tan(maxHalfTurnRad)+1e-9) {
			return nil, dimension(what, "point %d: the slope to it is %.4g degrees, want %.0f to %.0f", i+1, deg(math.Atan(next)), -deg(maxHalfTurnRad), deg(maxHalfTurnRad))
		}
		// Rounded coordinates of a straight piece count as straight.
		if next < slope-1e-6 {
			return nil, dimension(what, "point %d: the slope falls there, want a hollow, whose slopes rise", i)
		}
		slope = next
	}
	if far := p.Points[n-1][0]; math.Abs(far-depthM) > touchM {
		return nil, dimension(what, "point %d: got distance %g m, want the depth, %g m", n, far, depthM)
	}
	return slices.Clone(p.Points), nil
}

// body is the section of one board: its top and its underside, from the end
// at the glass to the far end, as out and up in metres, out counted away from
// the glass on the board's own side.
type body struct{ top, under [][2]float64 }

// ring is the outline of the body.
func (b body) ring() [][2]float64 {
	ring := slices.Clone(b.top)
	for i := range b.under {
		ring = append(ring, b.under[len(b.under)-1-i])
	}
	return ring
}

// span is the lowest and the highest point of the body at a distance from the
// glass; false where it has none.
func (b body) span(out float64) (low, high float64, ok bool) {
	low, high = math.Inf(1), math.Inf(-1)
	ring := b.ring()
	for i, a := range ring {
		c := ring[(i+1)%len(ring)]
		if lo, hi := min(a[0], c[0]), max(a[0], c[0]); out < lo || out > hi {
			continue
		}
		ok = true
		if a[0] == c[0] {
			low, high = min(low, a[1], c[1]), max(high, a[1], c[1])
			continue
		}
		up := a[1] + (c[1]-a[1])*(out-a[0])/(c[0]-a[0])
		low, high = min(low, up), max(high, up)
	}
	return low, high, ok
}

// zone is a rectangle of the section: where a blind hangs on one side of the
// glass.
type zone struct{ nearM, farM, lowM, highM float64 }

// meets returns the highest point of the body that lies in the zone.
func (b body) meets(z zone) (high float64, ok bool) {
	outs := []float64{z.nearM, z.farM}
	for _, p := range b.ring() {
		if p[0] > z.nearM && p[0] < z.farM {
			outs = append(outs, p[0])
		}
	}
	slices.SortFunc(outs, cmp.Compare)
	high = math.Inf(-1)
	for _, out := range outs {
		lo, hi, in := b.span(out)
		// What ends on the body's top touches it and no more.
		if in && lo < z.highM-touchM && hi > z.lowM+touchM {
			high, ok = max(high, hi), true
		}
	}
	return high, ok
}

// cut moves a line (distance along the shelf, height above it) into the
// section and ends it where it is gapM away from the glass: sin and cos are
// of the shelf's slope, upM is where it starts. False where the line does not
// stay beyond the gap.
func cut(line [][2]float64, sin, cos, upM, gapM float64) ([][2]float64, bool) {
	section := make([][2]float64, len(line))
	for i, p := range line {
		section[i] = [2]float64{p[0]*cos - p[1]*sin, upM + p[0]*sin + p[1]*cos}
	}
	first := 1
	for first < len(section)-1 && section[first][0] <= gapM {
		if section[first][0] <= section[first-1][0] {
			return nil, false
		}
		first++
	}
	a, b := section[first-1], section[first]
	if b[0] <= gapM+touchM || b[0] <= a[0] {
		return nil, false
	}
	t := (gapM - a[0]) / (b[0] - a[0])
	kept := append([][2]float64{{gapM, a[1] + t*(b[1]-a[1])}}, section[first:]...)
	for _, p := range kept[1:] {
		if p[0] < gapM {
			return nil, false
		}
	}
	return kept, true
}
