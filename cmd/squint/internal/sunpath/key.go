package sunpath

import (
	"math"
	"strconv"

	"squint/glare/falsecolour"
)

const (
	keyLine  = 17.0 // between the lines of the key
	keyRight = 384.0
	// chartHead is above the rows of the small table, chartFoot below, cellLeast
	// their least height.
	chartHead = 34.0
	chartFoot = 22.0
	cellLeast = 9.0
	cellW     = 19.0
)

// kindNames are the words for what is seen, in the order of the key.
var kindNames = [kinds]string{"sky, seen straight", "sky through glass", "sky through cloth or holes", "surroundings, skyline", "ground", "room", "shading, light shelf"}

// entry is a line of the key.
type entry struct {
	text string
	mark func(at falsecolour.Place)
}

// entries are the marks that the picture has.
func (d *drawing) entries() []entry {
	year := d.year
	all := []entry{{"sun seen, by the share of its disc", func(at falsecolour.Place) {
		for i, share := range []float64{.25, .5, 1} {
			d.Dots(dotRadius(share), falsecolour.LowSun, falsecolour.Place{X: at.X + float64(i-1)*6, Y: at.Y})
		}
	}}}
	veiled := false
	for i := range year.Samples {
		veiled = veiled || year.Samples[i].Direct() && year.Samples[i].Veiled()
	}
	if veiled {
		all = append(all, entry{"sun through cloth or holes", func(at falsecolour.Place) { d.Rings(veilRing, 0.8, veilColour, at) }})
	}
	if year.Mirrored.All > 0 {
		all = append(all, entry{"sun here is thrown by a mirror", func(at falsecolour.Place) { d.Rings(mirrorRing, ringLine, falsecolour.Ink, at) }},
			entry{"and seen in it here", func(at falsecolour.Place) { d.crosses(at) }})
	}
	return append(all,
		entry{"path on the 21st: firm where seen", func(at falsecolour.Place) {
			d.Lines(firmLine, falsecolour.Ink, []falsecolour.Place{{X: at.X - 10, Y: at.Y}, at})
			d.Lines(0.7, falsecolour.Quiet, []falsecolour.Place{at, {X: at.X + 10, Y: at.Y}})
		}},
		entry{"whole hours through the year", func(at falsecolour.Place) {
			for i := -1; i <= 1; i++ {
				d.Dots(hourDot, falsecolour.Ink, falsecolour.Place{X: at.X + 5*float64(i), Y: at.Y})
			}
		}})
}

// chart is the span of clock hours of the small table.
func (d *drawing) chart() (first, last int) {
	first, last = d.year.Direct.clocks()
	if f, l := d.year.Mirrored.clocks(); f <= l {
		first, last = min(first, f), max(last, l)
	}
	return min(first, int(d.FromH)), max(last, int(math.Ceil(d.ToH))-1)
}

func (d *drawing) keyHeight() float64 {
	first, last := d.chart()
	lines := float64(len(d.entries())) + 0.6
	for _, has := range d.around.has {
		if has {
			lines++
		}
	}
	return math.Max(lines*keyLine, chartHead+chartFoot+float64(last-first+1)*cellLeast)
}

// key draws the legend and, beside it, the minutes a day by hour and month.
func (d *drawing) key(top float64) {
	y := top
	line := func(text string, mark func(at falsecolour.Place)) {
		mark(falsecolour.Place{X: margin + 11, Y: y + keyLine/2})
		d.Text(falsecolour.SmallFace, falsecolour.Place{X: margin + 32, Y: y + keyLine/2 + d.Capital(falsecolour.SmallFace)/2}, text, falsecolour.Ink, false)
		y += keyLine
	}
	for _, e := range d.entries() {
		line(e.text, e.mark)
	}
	y += 0.6 * keyLine
	for k, has := range d.around.has {
		if !has {
			continue
		}
		line(kindNames[k], func(at falsecolour.Place) {
			d.Box(falsecolour.Place{X: at.X - 11, Y: at.Y - 5.5}, falsecolour.Place{X: at.X + 11, Y: at.Y + 5.5}, edgeTone)
			d.Box(falsecolour.Place{X: at.X - 10.2, Y: at.Y - 4.7}, falsecolour.Place{X: at.X + 10.2, Y: at.Y + 4.7}, tones[k])
		})
	}
	d.minutesChart(top)
}

// minutesChart draws the minutes of direct sun a day as tones from paper to the
// low sun's colour, mirrored sun as rings.
func (d *drawing) minutesChart(top float64) {
	first, last := d.chart()
	small := falsecolour.SmallFace
	title := "direct sun by the clock; line: in use"
	if d.year.Mirrored.All > 0 {
		title = "direct sun; ring: mirrored; line: in use"
	}
	d.Text(small, falsecolour.Place{X: keyRight, Y: top + 12}, title, falsecolour.Ink, false)
	y0 := top + chartHead
	cellH := math.Min(14, (d.keyHeight()-chartHead-chartFoot)/float64(last-first+1))
	for m, name := range monthNames {
		x := keyRight + (float64(m)+.5)*cellW
		d.Text(small, falsecolour.Place{X: x - d.TextWidth(small, name[:1])/2, Y: y0 - 4}, name[:1], falsecolour.Quiet, false)
	}
	var rings []falsecolour.Place
	for c := first; c <= last; c++ {
		y := y0 + float64(c-first)*cellH
		for m := range monthNames {
			x := keyRight + float64(m)*cellW
			d.Box(falsecolour.Place{X: x + .4, Y: y + .4}, falsecolour.Place{X: x + cellW - .4, Y: y + cellH - .4}, tint(d.year.Direct.Minutes[c][m]/60))
			if d.year.Mirrored.Minutes[c][m] >= 1 {
				rings = append(rings, falsecolour.Place{X: x + cellW/2, Y: y + cellH/2})
			}
		}
		if (c-first)%2 == 0 {
			text := hourName(c)
			d.Text(small, falsecolour.Place{X: keyRight - 12 - d.TextWidth(small, text), Y: y + d.Capital(small)/2}, text, falsecolour.Quiet, false)
		}
	}
	d.Rings(2.6, 0.9, falsecolour.Ink, rings...)
	d.tints(y0 + float64(last-first+1)*cellH + 7)
	// The hours of use as a line beside the rows.
	from, to := y0+(d.FromH-float64(first))*cellH, y0+(d.ToH-float64(first))*cellH
	d.Lines(1.6, falsecolour.Ink, []falsecolour.Place{{X: keyRight - 6, Y: from}, {X: keyRight - 6, Y: to}})
}

// tints draws what the tones of the small table mean.
func (d *drawing) tints(y float64) {
	const w, h = 10.0, 8.0
	small := falsecolour.SmallFace
	x := keyRight
	for _, minutes := range []int{0, 20, 40, 60} {
		d.Box(falsecolour.Place{X: x, Y: y}, falsecolour.Place{X: x + w, Y: y + h}, tint(float64(minutes)/60))
		text := strconv.Itoa(minutes)
		d.Text(small, falsecolour.Place{X: x + w + 3, Y: y + h/2 + d.Capital(small)/2}, text, falsecolour.Quiet, false)
		x += w + 9 + d.TextWidth(small, text)
	}
	d.Text(small, falsecolour.Place{X: x, Y: y + h/2 + d.Capital(small)/2}, "min/day", falsecolour.Quiet, false)
}

// tint mixes paper and the low sun's colour; none is a shade darker than the
// paper.
func tint(share float64) uint32 {
	const none, full uint32 = 0xF1EEE6, falsecolour.LowSun
	var out uint32
	for shift := 0; shift <= 16; shift += 8 {
		a, b := float64(none>>shift&255), float64(full>>shift&255)
		out |= uint32(a+(b-a)*math.Min(1, share)+.5) << shift
	}
	return out
}
