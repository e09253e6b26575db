package report

import "squint/glare/falsecolour"

// Overlay is what a false-colour picture shows on top of its values.
type Overlay struct {
	Contours []float64    // values of labelled lines, in the picture's unit
	Points   [][2]float64 // pixels whose values are written
}

// on draws the overlay on a figure of which a pixel is by by by of the image's,
// the first one at (x, y). Points outside are left out.
func (o Overlay) on(f *falsecolour.Figure, x, y, by float64) {
	f.Contours = o.Contours
	for _, p := range o.Points {
		q := falsecolour.Point{X: (p[0] - x) / by, Y: (p[1] - y) / by}
		if q.X >= 0 && q.Y >= 0 && q.X < float64(f.Width) && q.Y < float64(f.Height) {
			f.Points = append(f.Points, q)
		}
	}
}
