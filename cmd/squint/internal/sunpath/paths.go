package sunpath

import (
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/falsecolour"
)

// arcMonths are the days, each the 21st, whose paths are drawn, and their
// names: the sun of the second half of the year runs within a degree of those
// of the first.
var arcMonths = []struct {
	month time.Month
	name  string
}{
	{time.December, "Dec"}, {time.January, "Jan/Nov"}, {time.February, "Feb/Oct"}, {time.March, "Mar/Sep"},
	{time.April, "Apr/Aug"}, {time.May, "May/Jul"}, {time.June, "Jun"},
}

// arc is the drawn path of one day, in pieces.
type arc struct {
	name  string
	lines [][]falsecolour.Place
}

// firmLine is the width of a path where the sun is seen.
const firmLine = 1

// arcs draws the paths: firm where the point would see the middle of the sun,
// thin where it is hidden.
func (d *drawing) arcs() ([]arc, error) {
	in := d.year.Input
	var all []arc
	var firm, thin [][]falsecolour.Place
	for _, m := range arcMonths {
		a := arc{name: m.name}
		var run []falsecolour.Place
		wasFree := false
		end := func() {
			if len(run) > 1 {
				a.lines = append(a.lines, run)
			}
			run = nil
		}
		for minute := 0; minute <= 24*60; minute += 4 {
			sun, err := in.Sun(time.Date(in.Year, m.month, 21, 0, minute, 0, 0, in.Zone))
			if err != nil {
				return nil, err
			}
			at, ok := d.on(sun)
			if !ok || sun.Z <= 0 {
				end()
				continue
			}
			free := in.Point.sees(sun) && look(in.World(sun), in.Point.Position, sun).kind.free()
			if n := len(run); n > 0 {
				piece := []falsecolour.Place{run[n-1], at}
				if free && wasFree {
					firm = append(firm, piece)
				} else {
					thin = append(thin, piece)
				}
			}
			wasFree = free
			run = append(run, at)
		}
		end()
		all = append(all, a)
	}
	d.Lines(0.7, falsecolour.Quiet, thin...)
	d.Lines(firmLine, falsecolour.Ink, firm...)
	return all, nil
}

// arcNames writes the months: beyond the rim where a path ends there, else
// beside its ends.
func (d *drawing) arcNames(all []arc) {
	for i := range all {
		for _, at := range d.nameChoices(&all[i]) {
			if d.name(falsecolour.SmallFace, at, all[i].name, falsecolour.Ink) {
				break
			}
		}
	}
}

func (d *drawing) nameChoices(a *arc) (out []falsecolour.Place) {
	half := d.TextWidth(falsecolour.SmallFace, a.name) / 2
	var inside []falsecolour.Place
	for _, line := range a.lines {
		for _, end := range []falsecolour.Place{line[len(line)-1], line[0]} {
			dx, dy := end.X-d.centre.X, end.Y-d.centre.Y
			r := math.Hypot(dx, dy)
			if r > 0.97*discRadius {
				// The text's middle: its nearer end clears the names of the rim.
				far := discRadius + 20
				out = append(out, falsecolour.Place{X: d.centre.X + dx/r*far + math.Copysign(half*math.Abs(dx/r), dx), Y: d.centre.Y + dy/r*far})
			} else {
				inside = append(inside, falsecolour.Place{X: end.X, Y: end.Y + 9}, falsecolour.Place{X: end.X - half - 5, Y: end.Y + 3}, falsecolour.Place{X: end.X + half + 5, Y: end.Y + 3}, falsecolour.Place{X: end.X, Y: end.Y + 22})
			}
		}
	}
	return append(out, inside...)
}

// hourNames writes the whole hours beyond the ends of the figures of eight.
func (d *drawing) hourNames() error {
	in := d.year.Input
	at := func(month time.Month, hour int) (r3.Vec, error) {
		return in.Sun(time.Date(in.Year, month, 21, hour, 0, 0, 0, in.Zone))
	}
	for hour := range 24 {
		middle, err := at(time.March, hour)
		if err != nil {
			return err
		}
		for _, month := range []time.Month{time.June, time.December} {
			sun, err := at(month, hour)
			if err != nil {
				return err
			}
			p, ok := d.on(sun)
			if !ok || sun.Z <= 0.01 {
				continue
			}
			// Away from the middle of the year.
			dx, dy := 0.0, -1.0
			if q, ok := d.on(middle); ok {
				if n := math.Hypot(p.X-q.X, p.Y-q.Y); n > 1 {
					dx, dy = (p.X-q.X)/n, (p.Y-q.Y)/n
				}
			}
			d.name(falsecolour.SmallFace, falsecolour.Place{X: p.X + 11*dx, Y: p.Y + 11*dy}, hourName(hour), falsecolour.Ink)
		}
	}
	return nil
}
