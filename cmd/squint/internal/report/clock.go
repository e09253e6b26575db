package report

import (
	"fmt"
	"math"
	"time"

	"squint/glare/daylight"
	"squint/scene"
)

// clockStart is what clocks show at the start of a step, 0 to 24 h and minutes;
// 24 h is the hour after midnight of a day in daylight saving time, counted to
// the record's own date.
func clockStart(c daylight.Calendar, step int) (hour, minute int) {
	day := c.Day(step)
	first := step - day*(c.Steps()/365)
	minutes := first*24*60/(c.Steps()/365) + 60*int(c.ClockShiftH(day))
	return minutes / 60, minutes % 60
}

// clockTime is a moment as the clocks show it.
func clockTime(c daylight.Calendar, m *scene.Moment) time.Time {
	return m.Time.Add(time.Duration(c.ClockShiftH(c.Day(m.Step)) * float64(time.Hour)))
}

// dateWords is such a moment in words: 21 December, 11:30 h.
func dateWords(t time.Time) string { return t.Format("2 January, 15:04 h") }

// degreesOfSine is the angle above the horizon by its sine.
func degreesOfSine(s float64) float64 {
	return math.Asin(math.Max(-1, math.Min(1, s))) * 180 / math.Pi
}

// coordinate writes a latitude or longitude: 56.12 N.
func coordinate(deg float64, positive, negative string) string {
	if deg < 0 {
		return fmt.Sprintf("%.2f %s", -deg, negative)
	}
	return fmt.Sprintf("%.2f %s", deg, positive)
}
