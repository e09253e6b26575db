package sunpath

import (
	"math"
	"strconv"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/falsecolour"
	"squint/scene"
)

var points = [8]string{"N", "NE", "E", "SE", "S", "SW", "W", "NW"}

// directions draws the compass and the altitudes.
func (d *drawing) directions() {
	var lines, ticks [][]falsecolour.Place
	circle := func(altDeg float64) {
		var run []falsecolour.Place
		for az := 0.0; az <= 360; az += 2 {
			at, ok := d.on(d.compass(az, altDeg))
			if ok {
				run = append(run, at)
			}
			if !ok || az == 360 {
				lines = append(lines, run)
				run = nil
			}
		}
	}
	for _, alt := range []float64{30, 60} {
		circle(alt)
	}
	if d.Form == Ahead {
		circle(0)
	}
	d.Lines(0.5, edgeTone, lines...)
	for az := 0; az < 360; az += 10 {
		long := 3.0
		if az%45 == 0 || az%30 == 0 {
			long = 5
		}
		at, ok := d.on(d.compass(float64(az), 0))
		if !ok {
			continue
		}
		to := falsecolour.Place{X: at.X, Y: at.Y + long}
		if d.Form == Up {
			k := (discRadius + long) / discRadius
			to = falsecolour.Place{X: d.centre.X + (at.X-d.centre.X)*k, Y: d.centre.Y + (at.Y-d.centre.Y)*k}
		}
		ticks = append(ticks, []falsecolour.Place{at, to})
	}
	d.Lines(0.8, falsecolour.Ink, ticks...)
	for i, name := range points {
		at, ok := d.on(d.compass(float64(45*i), 0))
		if !ok || d.Form == Ahead && math.Hypot(at.X-d.centre.X, at.Y-d.centre.Y) > 0.96*discRadius {
			continue
		}
		if d.Form == Up {
			k := (discRadius + 12) / discRadius
			at = falsecolour.Place{X: d.centre.X + (at.X-d.centre.X)*k, Y: d.centre.Y + (at.Y-d.centre.Y)*k}
		} else {
			at.Y += 13
		}
		d.name(falsecolour.BoldFace, at, name, falsecolour.Ink)
	}
}

// altitudes names the altitude lines, in the direction that faces away from
// the sun's noon or ahead.
func (d *drawing) altitudes() {
	for _, alt := range []float64{30, 60} {
		for _, az := range []float64{scene.AzimuthDeg(level(d.year.Input.Point.Ahead), d.NorthRad*180/math.Pi) - 60, 0, 180, 90, 270} {
			if at, ok := d.on(d.compass(az, alt)); ok {
				if d.name(falsecolour.SmallFace, at, strconv.Itoa(int(alt))+"\u00b0", falsecolour.Quiet) {
					break
				}
			}
		}
	}
}

// rose is a plan with north up, and how the point looks.
func (d *drawing) rose(c falsecolour.Place) {
	const r = 17.0
	d.Rings(r, 0.8, falsecolour.Quiet, c)
	d.Lines(1.4, falsecolour.Ink, []falsecolour.Place{{X: c.X, Y: c.Y - r - 6}, {X: c.X, Y: c.Y - r + 7}},
		[]falsecolour.Place{{X: c.X - 3, Y: c.Y - r}, {X: c.X, Y: c.Y - r - 6}, {X: c.X + 3, Y: c.Y - r}})
	d.name(falsecolour.BoldFace, falsecolour.Place{X: c.X, Y: c.Y - r - 14}, "N", falsecolour.Ink)
	d.Dots(2, falsecolour.Ink, c)
	a := d.year.Input.Point.Ahead
	if r3.Norm(r3.Vec{X: a.X, Y: a.Y}) < 0.1 {
		return // it looks up
	}
	az := scene.AzimuthDeg(level(a), d.NorthRad*180/math.Pi)
	ray := func(az, r float64) falsecolour.Place {
		s, c0 := math.Sincos(az * math.Pi / 180)
		return falsecolour.Place{X: c.X + r*s, Y: c.Y - r*c0}
	}
	if d.year.Input.Point.Opening { // the wall, and outwards
		d.Lines(1.8, falsecolour.Ink, []falsecolour.Place{ray(az-90, 9), ray(az+90, 9)})
		d.Lines(1, falsecolour.Ink, []falsecolour.Place{c, ray(az, 13)})
		return
	}
	d.Lines(1, falsecolour.Ink, []falsecolour.Place{ray(az-25, 14), c, ray(az+25, 14)})
}
