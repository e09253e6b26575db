package outlook

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/system"
	"squint/trace"
)

// Lines of sight stand in columns this wide in azimuth and, within a column,
// this far apart in altitude, at most. Own choice.
const (
	columnRad = 0.5 * math.Pi / 180
	rowRad    = 1.0 * math.Pi / 180
)

// minLayerSr is the solid angle from which a layer counts as seen, own choice:
// ten square degrees, a fist at arm's length being a hundred.
const minLayerSr = 10 * math.Pi / 180 * math.Pi / 180

// flattest is the least level part of the outward normal of an opening that
// counts for the view out: a roof light shows the sky only. Own choice.
const flattest = 0.1

// View is what is seen of outdoors from one place, all around.
type View struct {
	columns []column
	// Solid angles of the three layers, sr, each direction counted once.
	SkySr, LandscapeSr, GroundSr float64
}

// column is one strip of azimuth of one opening, from edge to edge.
type column struct {
	from, to float64 // clockwise in the model's plan
	distance float64 // from the opening to what blocks the view, m; -1: unseen
	opening  int
}

// Look is the view from eye through the openings of the scene that stand
// upright or lean. Openings' own edges are exact; edges of what stands before
// or behind them are found to within half a column of 0.5 degrees. The distance
// of a column is that along the visible line nearest to the horizontal, from
// the plane of the glass on; ground does not end it, sky does not either.
func Look(w *trace.World, eye r3.Vec) View {
	var v View
	for k := range w.Scene.Openings {
		v.through(w, eye, k)
	}
	return v
}

// Layers is the number of layers seen of landscape, ground and sky, and
// whether the landscape is one of them. A layer below 0.003 sr is not counted.
func (v *View) Layers() (n int, withLandscape bool) {
	for _, sr := range []float64{v.SkySr, v.LandscapeSr, v.GroundSr} {
		if sr >= minLayerSr {
			n++
		}
	}
	return n, v.LandscapeSr >= minLayerSr
}

// AngleRad is the horizontal sight angle: the sum of the azimuths in which
// outdoors is seen at least distanceM far, each counted once, with the bound
// within which the columns know it. 0 to 2 pi.
func (v *View) AngleRad(distanceM float64) (angle, bound float64) {
	var spans [][2]float64
	for i, c := range v.columns {
		open := c.distance >= distanceM
		if i > 0 && v.columns[i-1].opening == c.opening && open != (v.columns[i-1].distance >= distanceM) {
			bound += (c.to - c.from) / 2
		}
		if !open {
			continue
		}
		from := math.Mod(c.from+4*math.Pi, 2*math.Pi)
		to := from + c.to - c.from
		spans = append(spans, [2]float64{from, math.Min(to, 2*math.Pi)})
		if to > 2*math.Pi {
			spans = append(spans, [2]float64{0, to - 2*math.Pi})
		}
	}
	slices.SortFunc(spans, func(a, b [2]float64) int { return cmp.Compare(a[0], b[0]) })
	reached := 0.0
	for _, s := range spans {
		angle += math.Max(0, s[1]-math.Max(s[0], reached))
		reached = math.Max(reached, s[1])
	}
	return angle, bound
}

// through adds what is seen through one opening.
func (v *View) through(w *trace.World, eye r3.Vec, opening int) {
	r := w.Scene.Openings[opening].Rect
	if !counts(&r, eye) {
		return
	}
	level := math.Hypot(r.Outward.X, r.Outward.Y)
	out := r3.Vec{X: r.Outward.X / level, Y: r.Outward.Y / level}
	right := r3.Vec{X: out.Y, Y: -out.X}
	facing := math.Atan2(out.X, out.Y)
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, c := range r.Corners() {
		d := r3.Sub(c, eye)
		a := math.Atan2(r3.Dot(d, right), math.Max(r3.Dot(d, out), 1e-9))
		lo, hi = math.Min(lo, a), math.Max(hi, a)
	}
	n := int(math.Ceil((hi - lo) / columnRad))
	step := (hi - lo) / float64(n)
	for i := range n {
		from := lo + float64(i)*step
		c := column{from: facing + from, to: facing + from + step, distance: -1, opening: opening}
		sin, cos := math.Sincos(from + step/2)
		plan := r3.Add(r3.Scale(cos, out), r3.Scale(sin, right))
		if e0, e1, ok := altitudes(r, eye, plan); ok {
			c.distance = v.scan(w, eye, plan, opening, step, e0, e1)
		}
		v.columns = append(v.columns, c)
	}
}

// counts is whether the view out of an opening is looked at from eye.
func counts(r *system.Rect, eye r3.Vec) bool {
	return math.Hypot(r.Outward.X, r.Outward.Y) >= flattest && r3.Dot(r3.Sub(r.Origin, eye), r.Outward) > 0
}

// behind is whether the line of sight passes another opening that counts before
// it comes to this one, as through a glazed partition.
func behind(w *trace.World, eye, dir r3.Vec, opening int) bool {
	own := &w.Scene.Openings[opening].Rect
	t := r3.Dot(r3.Sub(own.Origin, eye), own.Outward) / r3.Dot(dir, own.Outward)
	for k := range w.Scene.Openings {
		r := &w.Scene.Openings[k].Rect
		if k == opening || !counts(r, eye) {
			continue
		}
		cos := r3.Dot(dir, r.Outward)
		if cos <= 0 {
			continue
		}
		s := r3.Dot(r3.Sub(r.Origin, eye), r.Outward) / cos
		if s > t || s == t && k > opening {
			continue
		}
		q := r3.Sub(r3.Add(eye, r3.Scale(s, dir)), r.Origin)
		if a, b := r3.Dot(q, r.Across), r3.Dot(q, r.Up); a >= 0 && a <= r.WidthM && b >= 0 && b <= r.HeightM {
			return true
		}
	}
	return false
}

// scan looks along one column and returns its distance.
func (v *View) scan(w *trace.World, eye, plan r3.Vec, opening int, width, e0, e1 float64) float64 {
	r := &w.Scene.Openings[opening].Rect
	distance, nearest := -1.0, math.Inf(1)
	m := int(math.Max(1, math.Ceil((e1-e0)/rowRad)))
	height := (e1 - e0) / float64(m)
	for j := range m {
		e := e0 + (float64(j)+0.5)*height
		sin, cos := math.Sincos(e)
		dir := r3.Vec{X: cos * plan.X, Y: cos * plan.Y, Z: sin}
		seen, d, tau := look(w, eye, dir)
		if seen == building || tau < minTau {
			continue
		}
		sr := width * (math.Sin(e+height/2) - math.Sin(e-height/2))
		if behind(w, eye, dir, opening) {
			sr = 0
		}
		switch seen {
		case sky:
			v.SkySr += sr
		case ground:
			v.GroundSr += sr
		case landscape:
			v.LandscapeSr += sr
		}
		if math.Abs(e) >= nearest {
			continue
		}
		nearest = math.Abs(e)
		distance = d - r3.Dot(r3.Sub(r.Origin, eye), r.Outward)/r3.Dot(dir, r.Outward)
	}
	return distance
}

// altitudes are those between which the opening shows in the direction plan, a
// unit vector in the horizontal, from the eye; false where it does not.
func altitudes(r system.Rect, eye, plan r3.Vec) (low, high float64, ok bool) {
	aside := r3.Vec{X: plan.Y, Y: -plan.X}
	from := r3.Sub(r.Origin, eye)
	across, up := r3.Dot(r.Across, aside), r3.Dot(r.Up, aside)
	if math.Abs(across) < 1e-9 {
		return 0, 0, false
	}
	// The points at (a, b) along Across and Up lie in the direction where
	// from.aside + a across + b up = 0: a straight line, clipped to the opening.
	a := func(b float64) float64 { return -(r3.Dot(from, aside) + b*up) / across }
	b0, b1 := 0.0, r.HeightM
	for _, edge := range []float64{0, r.WidthM} {
		// inward is how far within this edge the line runs, at both ends.
		in0, in1 := a(b0)-edge, a(b1)-edge
		if edge > 0 {
			in0, in1 = -in0, -in1
		}
		switch {
		case in0 < 0 && in1 < 0:
			return 0, 0, false
		case in0 < 0:
			b0 += (b1 - b0) * in0 / (in0 - in1)
		case in1 < 0:
			b1 -= (b1 - b0) * in1 / (in1 - in0)
		}
	}
	altitude := func(b float64) float64 {
		d := r3.Sub(r.Point(a(b), b, 0), eye)
		return math.Atan2(d.Z, r3.Dot(d, plan))
	}
	low, high = altitude(b0), altitude(b1)
	return low, high, low < high
}
