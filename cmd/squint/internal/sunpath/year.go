package sunpath

import (
	"context"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/scene/photometry"
	"squint/trace"
	"squint/trace/parallel"
)

// Input is what a year of suns needs.
type Input struct {
	Point Point
	// World is the scene as it stands under a sun.
	World func(sun r3.Vec) *trace.World
	// Sun is the unit direction of the sun at a moment in the model frame, as it
	// is seen through the air.
	Sun  func(t time.Time) (r3.Vec, error)
	Year int            // without 29 February
	Zone *time.Location // standard time

	Calendar daylight.Calendar
	// Bright tells the records of the weather file with sunshine; nil: unknown.
	Bright func(record int) bool

	Workers int // threads; results do not depend on it
}

const (
	// dayStep days share one path, that of their middle, and stepMin is the
	// time between suns on it, each in the middle of its step. Own choice.
	dayStep  = 5
	stepMin  = 10
	yearDays = 365
)

// Hours are sums over the year, in hours.
type Hours struct {
	All, InUse, Bright, BrightInUse float64
	// InView are those in which the light comes from before the line of sight.
	InView float64
	// Minutes are means a day, by clock hour and month, January first.
	Minutes [24][12]float64
}

// Month is the mean of a month's days, in minutes.
func (h *Hours) Month(m int) float64 {
	sum := 0.0
	for clock := range h.Minutes {
		sum += h.Minutes[clock][m]
	}
	return sum
}

// Year is the sun over a year: every sample with a part of the disc above the
// level horizon, in order, and the hours that they stand for.
type Year struct {
	Input            *Input
	Samples          []Sample
	Direct, Mirrored Hours
	// Both are hours with sun straight and mirrored at once.
	Both float64
}

// Compute looks for the sun at every step of the year.
func Compute(ctx context.Context, in *Input) (*Year, error) {
	days := make([][]Sample, yearDays/dayStep)
	if err := parallel.Try(ctx, in.Workers, len(days), func(i int) (err error) {
		days[i], err = in.day(i*dayStep+dayStep/2, stepMin)
		return err
	}); err != nil {
		return nil, err
	}
	y := &Year{Input: in}
	used := in.Calendar.Occupied().Mask(in.Calendar.Steps())
	for i := range days {
		for k := range days[i] {
			y.count(&days[i][k], i*dayStep, used)
		}
		y.Samples = append(y.Samples, days[i]...)
	}
	return y, nil
}

// day samples one day (0 is 1 January).
func (in *Input) day(day, everyMin int) ([]Sample, error) {
	var out []Sample
	watch := newWatcher(in.Point)
	for minute := 0; minute < 24*60; minute += everyMin {
		t := time.Date(in.Year, 1, 1+day, 0, minute, everyMin*30, 0, in.Zone)
		sun, err := in.Sun(t)
		if err != nil {
			return nil, err
		}
		if sun.Z <= -math.Sin(photometry.SunDiameterRad/2) {
			continue
		}
		out = append(out, watch.sample(in.World(sun), t, sun))
	}
	return out, nil
}

// count adds a sample for each of the days from first on that it stands for:
// each has its own weekday, month and weather.
func (y *Year) count(s *Sample, first int, used []bool) {
	if !s.Direct() && s.Mirrored == 0 {
		return
	}
	const h = stepMin / 60.0
	if s.Direct() && s.Mirrored > 0 {
		y.Both += dayStep * h
	}
	for day := first; day < first+dayStep; day++ {
		record := day*24 + s.Time.Hour()
		inUse := used[len(used)/yearDays*day+len(used)/yearDays*(60*s.Time.Hour()+s.Time.Minute())/(24*60)]
		clock := (s.Time.Hour() + int(y.Input.Calendar.ClockShiftH(day))) % 24
		month := int(time.Date(y.Input.Year, 1, 1+day, 0, 0, 0, 0, time.UTC).Month()) - 1
		bright := y.Input.Bright != nil && y.Input.Bright(record)
		add := func(to *Hours, from r3.Vec) {
			to.All += h
			to.Minutes[clock][month] += stepMin / monthDays[month]
			if inUse {
				to.InUse += h
			}
			if bright {
				to.Bright += h
			}
			if bright && inUse {
				to.BrightInUse += h
			}
			if r3.Dot(from, y.Input.Point.Ahead) > 0 {
				to.InView += h
			}
		}
		if s.Direct() {
			add(&y.Direct, s.Sun)
		}
		if s.Mirrored > 0 {
			add(&y.Mirrored, s.Image)
		}
	}
}

// monthDays of a year without 29 February.
var monthDays = [12]float64{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}
