package sunpath

import (
	"math"
	"strconv"
	"time"

	"squint/glare/falsecolour"
)

// Marks, in units of the sheet. Shape tells them apart where colour cannot.
const (
	sunDot     = 1.9
	veilRing   = 2.0
	mirrorRing = 3.4
	ringLine   = 0.8
	crossArm   = 3.2
	hourDot    = 0.75

	veilColour = 0xB0651A // LowSun, darker: a thin line looks lighter than a disc
)

func hourName(h int) string { return strconv.Itoa(h) }

// dots marks the suns that the point sees; the paths are drawn over them.
func (d *drawing) dots() {
	const steps = 4 // sizes of a disc that is free in part
	var dots [steps + 1][]falsecolour.Place
	var veiled []falsecolour.Place
	for i := range d.year.Samples {
		s := &d.year.Samples[i]
		at, ok := d.on(s.Sun)
		switch {
		case !ok || !s.Direct():
		case s.Veiled():
			veiled = append(veiled, at)
		default:
			k := int(math.Ceil(s.Free * steps))
			dots[k] = append(dots[k], at)
		}
	}
	for k := 1; k <= steps; k++ {
		d.Dots(dotRadius(float64(k)/steps), falsecolour.LowSun, dots[k]...)
	}
	d.Rings(veilRing, 0.8, veilColour, veiled...)
}

// marks draws the whole hours of standard time through the year, and the suns
// that mirrors throw.
func (d *drawing) marks() {
	in := d.year.Input
	var hour []falsecolour.Place
	for day := dayStep / 2; day < yearDays; day += dayStep {
		for h := range 24 {
			sun, err := in.Sun(time.Date(in.Year, 1, 1+day, h, 0, 0, 0, in.Zone))
			if err != nil {
				continue // an error of the sun has ended Compute
			}
			if at, ok := d.on(sun); ok && sun.Z > 0 {
				hour = append(hour, at)
			}
		}
	}
	d.Dots(hourDot, falsecolour.Ink, hour...)
	var mirrored, images []falsecolour.Place
	for i := range d.year.Samples {
		s := &d.year.Samples[i]
		if s.Mirrored == 0 {
			continue
		}
		if at, ok := d.on(s.Sun); ok {
			mirrored = append(mirrored, at)
		}
		if at, ok := d.on(s.Image); ok {
			images = append(images, at)
		}
	}
	d.Rings(mirrorRing, ringLine, falsecolour.Ink, apart(mirrored, 1.8*mirrorRing)...)
	d.crosses(apart(images, 1.8*crossArm)...)
}

// apart leaves out places nearer than some distance to an earlier one, so that
// dense marks stay marks.
func apart(all []falsecolour.Place, least float64) (kept []falsecolour.Place) {
next:
	for _, p := range all {
		for _, q := range kept {
			if math.Hypot(p.X-q.X, p.Y-q.Y) < least {
				continue next
			}
		}
		kept = append(kept, p)
	}
	return kept
}

// dotRadius makes a dot's area the share of the disc.
func dotRadius(share float64) float64 { return sunDot * math.Sqrt(share) }

// crosses marks where the sun is seen in mirrors.
func (d *drawing) crosses(at ...falsecolour.Place) {
	var lines [][]falsecolour.Place
	for _, p := range at {
		lines = append(lines, []falsecolour.Place{{X: p.X - crossArm, Y: p.Y}, {X: p.X + crossArm, Y: p.Y}},
			[]falsecolour.Place{{X: p.X, Y: p.Y - crossArm}, {X: p.X, Y: p.Y + crossArm}})
	}
	d.Lines(2.4, falsecolour.Paper, lines...)
	d.Lines(0.9, falsecolour.Ink, lines...)
}
