package system

import (
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// minFacetErrorRad keeps the number of facets of a mirror below 100,000.
const minFacetErrorRad = 1e-5

func facetError(rad float64) (float64, error) {
	if rad == 0 {
		return MirrorFacetRad, nil
	}
	if !(rad >= minFacetErrorRad && rad <= 0.1) {
		return 0, dimension("facet error", "got %g rad, want %g to 0.1", rad, minFacetErrorRad)
	}
	return rad, nil
}

// tube extrudes sections along Across, from lo to hi, in a rectangle's frame.
// Lines run so that the inside is on their left, out to the right and up
// upwards.
type tube struct {
	r      Rect
	lo, hi float64
}

func (t tube) point(across float64, p plane) r3.Vec { return t.r.Point(across, p[1], p[0]) }

// strip extrudes a line, its front to the left.
func (t tube) strip(line []plane, finish, part string) []Face {
	var faces []Face
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		faces = append(faces, quad(t.point(t.lo, a), t.point(t.hi, a), t.point(t.hi, b), t.point(t.lo, b), finish, part)...)
	}
	return faces
}

// ends closes the tube on both sides by fans from hub over a line, fronts
// inside.
func (t tube) ends(hub plane, line []plane, finish, part string) []Face {
	var faces []Face
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		faces = append(faces,
			Face{V: [3]r3.Vec{t.point(t.lo, hub), t.point(t.lo, a), t.point(t.lo, b)}, Finish: finish, Part: part},
			Face{V: [3]r3.Vec{t.point(t.hi, hub), t.point(t.hi, b), t.point(t.hi, a)}, Finish: finish, Part: part})
	}
	return faces
}

const partCollector = "anidolic/collector"

// collector is the outdoor part: mirrors and ends.
func (t tube) collector(below, above []plane, finish string) []Face {
	inward := slices.Clone(above)
	slices.Reverse(inward)
	faces := t.strip(below, finish, partCollector)
	faces = append(faces, t.strip(inward, finish, partCollector)...)
	// The section is convex: the fan over the mirror below starts at the
	// exit's upper edge, that over the mirror above at the lower one's end.
	faces = append(faces, t.ends(above[0], below, finish, partCollector)...)
	return append(faces, t.ends(below[len(below)-1], inward, finish, partCollector)...)
}
