package system

import "gonum.org/v1/gonum/spatial/r3"

// extrude makes the closed surface of a body between two places along the
// opening, fronts away from it. side is 1 where the section's out is counted
// outdoors, -1 where indoors. finishes are of top, far and near edge,
// underside and ends; parts of top, edges and ends, and underside.
func (b body) extrude(r Rect, side, lo, hi float64, finishes [4]string, parts [3]string) []Face {
	// Seen from the high-Across end with the glass on the left, which is
	// where outdoors lies to the right, the outline runs clockwise; indoors
	// it is the mirror image.
	if side < 0 {
		lo, hi = hi, lo
	}
	at := func(p [2]float64, across float64) r3.Vec { return r.Point(across, p[1], side*p[0]) }
	var faces []Face
	strip := func(p, q [2]float64, finish, part string) {
		faces = append(faces, quad(at(p, lo), at(p, hi), at(q, hi), at(q, lo), finish, part)...)
	}
	n, m := len(b.top)-1, len(b.under)-1
	for i := range n {
		strip(b.top[i], b.top[i+1], finishes[0], parts[0])
	}
	strip(b.top[n], b.under[m], finishes[1], parts[1])
	for i := m; i > 0; i-- {
		strip(b.under[i], b.under[i-1], finishes[2], parts[2])
	}
	strip(b.under[0], b.top[0], finishes[1], parts[1])
	for _, t := range b.end() {
		faces = append(faces, Face{V: [3]r3.Vec{at(t[0], lo), at(t[1], lo), at(t[2], lo)}, Finish: finishes[3], Part: parts[1]})
	}
	for _, t := range b.end() {
		faces = append(faces, Face{V: [3]r3.Vec{at(t[2], hi), at(t[1], hi), at(t[0], hi)}, Finish: finishes[3], Part: parts[1]})
	}
	return faces
}

// end are the triangles of the outline, in its own sense: those between two
// lines that run side by side, whose points need not be as many.
func (b body) end() [][3][2]float64 {
	var list [][3][2]float64
	i, k := 0, 0
	for i < len(b.top)-1 || k < len(b.under)-1 {
		// Along the line that is behind.
		onTop := k == len(b.under)-1
		if !onTop && i < len(b.top)-1 {
			onTop = b.top[i+1][0] <= b.under[k+1][0]
		}
		if onTop {
			list = append(list, [3][2]float64{b.top[i], b.top[i+1], b.under[k]})
			i++
		} else {
			list = append(list, [3][2]float64{b.top[i], b.under[k+1], b.under[k]})
			k++
		}
	}
	return list
}
