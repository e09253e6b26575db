package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Image is the sun as mirrored by the facets of one orientation, seen from a
// point: the direction in which it appears, the share of the disc seen, and
// the share of its luminance that mirror and glass leave (mean over what is
// seen).
type Image struct {
	Dir             r3.Vec
	Share, Luminous float64
	Part            int32 // the mirror's
	Via             int32 // part of the first pane looked through, -1 for none
}

// ImageFinder finds the sun's images from one point. It holds, by
// orientation, the cone of directions in which its facets lie.
type ImageFinder struct {
	world *World
	point r3.Vec
	cones []cone
}

type cone struct {
	axis r3.Vec
	cos  float64 // of the half angle, widened by the sun's radius
}

// NewImageFinder prepares a point.
func (w *World) NewImageFinder(p r3.Vec) *ImageFinder {
	f := &ImageFinder{world: w, point: p}
	for i := range w.specular.groups {
		f.cones = append(f.cones, w.coneOf(&w.specular.groups[i], p))
	}
	return f
}

// widen is more than the sun's radius, in radians.
const widen = 0.01

func (w *World) coneOf(g *orientation, p r3.Vec) cone {
	var axis r3.Vec
	var dirs []r3.Vec
	for _, k := range g.facets {
		for _, v := range w.Scene.Triangles[w.specular.facets[k].prim].V {
			d := r3.Sub(v, p)
			if r3.Norm2(d) == 0 {
				return cone{axis: r3.Vec{Z: 1}, cos: -2} // at a corner: look always
			}
			d = r3.Unit(d)
			dirs = append(dirs, d)
			axis = r3.Add(axis, d)
		}
	}
	if r3.Norm(axis) < 1e-9 {
		return cone{axis: r3.Vec{Z: 1}, cos: -2}
	}
	axis = r3.Unit(axis)
	half := 0.0
	for _, d := range dirs {
		half = math.Max(half, math.Acos(math.Min(1, math.Max(-1, r3.Dot(axis, d)))))
	}
	if half > 1.4 { // vertices no longer bound what lies between them
		return cone{axis: axis, cos: -2}
	}
	return cone{axis: axis, cos: math.Cos(math.Min(math.Pi, half+widen))}
}

// Find appends the images of a sun whose disc is spread over dirs; visible
// tells which of these stand above the horizon. One mirror, straight passage
// through any number of panes.
func (f *ImageFinder) Find(sun r3.Vec, dirs []r3.Vec, visible func(i int) bool, out []Image) []Image {
	w := f.world
	for g := range w.specular.groups {
		n := w.specular.groups[g].normal
		centre := reflect(sun, n)
		if r3.Dot(centre, f.cones[g].axis) < f.cones[g].cos {
			continue
		}
		// By part, since two mirrors of one orientation may be two sources.
		first := len(out)
		for i, d := range dirs {
			if visible(i) {
				out = f.look(int32(g), d, reflect(d, n), centre, 1/float64(len(dirs)), first, out)
			}
		}
		for k := first; k < len(out); k++ {
			if out[k].Share > 0 {
				out[k].Luminous /= out[k].Share
			}
		}
	}
	return out
}

// look follows a line of sight to the mirrors of group g and adds what it
// sees of the sun's point in direction sun to the images from index first on.
func (f *ImageFinder) look(g int32, sun, dir, centre r3.Vec, share float64, first int, out []Image) []Image {
	w := f.world
	org, tau := f.point, 1.0
	via := int32(-1)
	for range maxSpecular {
		h, ok := w.Closest(org, dir)
		if !ok {
			return out
		}
		mirror, through := h.BSDF.Delta(h.Side, h.Cos)
		facing := h.Facing()
		if w.specular.group[h.Prim] == g && mirror > 0 {
			p := w.Offset(h.Point, facing)
			if tr := w.Transmittance(p, sun, math.Inf(1)); tr > 0 {
				out = addImage(out, first, Image{Dir: centre, Share: share, Luminous: share * tau * mirror * tr, Part: h.Part, Via: via})
			}
		}
		if through <= 0 {
			return out
		}
		if via < 0 {
			via = h.Part
		}
		tau *= through
		org = w.Offset(h.Point, r3.Scale(-1, facing))
	}
	return out
}

func addImage(out []Image, first int, im Image) []Image {
	for k := first; k < len(out); k++ {
		if out[k].Part == im.Part {
			out[k].Share += im.Share
			out[k].Luminous += im.Luminous
			return out
		}
	}
	return append(out, im)
}

// reflect mirrors a direction to the sun in a plane with unit normal n: the
// direction in which its image is seen.
func reflect(d, n r3.Vec) r3.Vec { return r3.Sub(d, r3.Scale(2*r3.Dot(d, n), n)) }
