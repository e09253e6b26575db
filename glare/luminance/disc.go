package luminance

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/scene/view"
)

// SpreadDiscs adds the light of discs that are kept beside the pixels to the
// pixels that they cover, so that the illuminance at the eye follows from the
// pixels alone, and sets Attr.DiscsInPixels. DGP does not follow: it needs each
// disc's own luminance. The image must know its view.
func (im *Image) SpreadDiscs() error {
	if im.Attr.DiscsInPixels {
		return nil
	}
	if err := im.moveDiscs(1); err != nil {
		return err
	}
	im.Attr.DiscsInPixels = len(im.Attr.Discs) > 0
	return nil
}

// GatherDiscs undoes SpreadDiscs, to the rounding of float32 where a pixel holds
// a disc (some cd/m2).
func (im *Image) GatherDiscs() error {
	if !im.Attr.DiscsInPixels {
		return nil
	}
	if err := im.moveDiscs(-1); err != nil {
		return err
	}
	im.Attr.DiscsInPixels = false
	return nil
}

func (im *Image) moveDiscs(sign float64) error {
	v, err := im.View()
	if err != nil {
		return err
	}
	for _, d := range im.Attr.Discs {
		for _, s := range d.shares(v) {
			im.Lum[s.pixel] = float32(math.Max(0, float64(im.Lum[s.pixel])+sign*s.lum))
		}
	}
	return nil
}

// Spread adds a disc to the pixels of a view that it covers.
func (d Disc) Spread(lum []float32, v view.View) {
	for _, s := range d.shares(v) {
		lum[s.pixel] += float32(s.lum)
	}
}

// share is what a disc adds to a pixel, cd/m2.
type share struct {
	pixel int
	lum   float64
}

// shares spreads a disc by points over its area, its illuminance at the eye
// kept: L omega (1 - omega/4 pi) cos, exact for a whole disc in front of it. Of
// a disc that is not in front, as a panorama shows it, luminance times solid
// angle is kept. The order is that of the points.
func (d Disc) shares(v view.View) []share {
	dir := r3.Vec{X: d.Direction[0], Y: d.Direction[1], Z: d.Direction[2]}
	if !(d.OmegaSr > 0) {
		return nil
	}
	flux, size := d.Luminance*d.OmegaSr, v.SolidAngle
	front := dir.X > math.Sin(photometry.SunDiameterRad)
	if front {
		flux, size = flux*(1-d.OmegaSr/(4*math.Pi))*dir.X, v.ProjectedSolidAngle
	}
	var out []share
	var omega []float64 // by share
	at := map[int]int{} // index into out, by pixel
	total := 0.0
	for _, p := range sunPoints(dir) {
		px, py, ok := v.LocalProject(p)
		if !ok || front && p.X <= 0 {
			continue
		}
		i := min(int(py), v.Height-1)*v.Width + min(int(px), v.Width-1)
		k, seen := at[i]
		if !seen {
			k = len(out)
			at[i], out = k, append(out, share{pixel: i})
			omega = append(omega, size(i%v.Width, i/v.Width))
		}
		if !(omega[k] > 0) {
			continue // at the picture's edge: the disc's other pixels have its light
		}
		out[k].lum++
		total++
	}
	for k := range out {
		if omega[k] > 0 {
			out[k].lum *= flux / total / omega[k]
		}
	}
	return out
}

// sunPoints are points evenly spread over the sun's disc around a direction.
func sunPoints(dir r3.Vec) []r3.Vec {
	up := r3.Vec{Z: 1}
	if dir.Z > 0.9 || dir.Z < -0.9 {
		up = r3.Vec{X: 1}
	}
	a := r3.Unit(r3.Cross(up, dir))
	b := r3.Cross(dir, a)
	const side = 16
	radius := photometry.SunDiameterRad / 2
	var out []r3.Vec
	for i := range side {
		for j := range side {
			x, y := (float64(i)+0.5)/side*2-1, (float64(j)+0.5)/side*2-1
			if x*x+y*y > 1 {
				continue
			}
			out = append(out, r3.Unit(r3.Add(dir, r3.Add(r3.Scale(x*radius, a), r3.Scale(y*radius, b)))))
		}
	}
	return out
}
