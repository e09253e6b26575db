package sunpath

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"squint/glare/daylight"
)

// brightWm2 is the direct normal irradiance above which the sun counts as
// shining. Source: WMO, Guide to Instruments and Methods of Observation,
// WMO-No. 8, chapter 8 (sunshine duration), from memory.
const brightWm2 = 120

// Bright reports whether a record's direct normal irradiance, W/m2, is
// sunshine.
func Bright(dniWm2 float64) bool { return dniWm2 > brightWm2 }

var monthNames = [12]string{"January", "February", "March", "April", "May", "June",
	"July", "August", "September", "October", "November", "December"}

// Finding is the year in a sentence or two, the number first.
func (y *Year) Finding() string {
	text := "No direct sun all year."
	if d := &y.Direct; d.All > 0 {
		best := 0
		for m := range monthNames {
			if d.Month(m) > d.Month(best) {
				best = m
			}
		}
		text = fmt.Sprintf("Direct sun on %s a year, %s of them in use; most in %s, %s minutes a day.",
			hours(d.All), whole(d.InUse), monthNames[best], whole(d.Month(best)))
	}
	if m := &y.Mirrored; m.All > 0 {
		text += fmt.Sprintf(" Mirrored sun on %s, %s of them in use", hours(m.All), whole(m.InUse))
		if y.Both > 0 {
			text += fmt.Sprintf("; on %s with direct sun as well", hours(y.Both))
		}
		text += "."
	}
	return text
}

// View says how much of it comes from before a viewpoint; "" where nothing is
// to say.
func (y *Year) View() string {
	if y.Input.Point.Opening || y.Direct.All+y.Mirrored.All == 0 {
		return ""
	}
	if y.Direct.InView == y.Direct.All && y.Mirrored.InView == y.Mirrored.All {
		return "All of it comes from ahead."
	}
	text := fmt.Sprintf("From ahead: direct sun on %s", hours(y.Direct.InView))
	if y.Mirrored.All > 0 {
		text += fmt.Sprintf(", mirrored sun on %s", hours(y.Mirrored.InView))
	}
	return text + "; the rest from behind."
}

// Weather says how much of it the weather file leaves; "" where nothing is
// known or nothing is to say.
func (y *Year) Weather() string {
	if y.Input.Bright == nil || y.Direct.All == 0 {
		return ""
	}
	return fmt.Sprintf("These are hours under a cloudless sky. By the weather file the sun shines on %s of those with direct sun, %s of them in use (direct normal irradiance above %d W/m2).",
		whole(y.Direct.Bright), whole(y.Direct.BrightInUse), brightWm2)
}

// Sampling says what the numbers rest on.
func Sampling() string {
	return fmt.Sprintf("One day in %d, every %d minutes; direct sun counts where any part of the disc is seen, mirrored sun from %g %% of the sun's own light on, by one mirror or pane.",
		dayStep, stepMin, 100*leastMirrored)
}

// Caution is what mirrored sun asks for; "" where there is none. Common practice,
// no published source.
func (y *Year) Caution() string {
	if y.Mirrored.All == 0 {
		return ""
	}
	return "Sun that mirrors throw can dazzle neighbours, drivers and people at machines, and burn where it is concentrated: have it looked into before anything is built."
}

// Clock says what the hours are.
func (y *Year) Clock() string {
	_, east := time.Date(y.Input.Year, 1, 1, 0, 0, 0, 0, y.Input.Zone).Zone()
	text := fmt.Sprintf("Hours on the paths are standard time, %s.", zoneName(float64(east)/3600))
	if from, to, ok := saving(y.Input.Calendar); ok {
		text += fmt.Sprintf(" Clocks stand an hour ahead from %s to %s; the table goes by the clock.", from, to)
	}
	return text
}

// saving are the days between which clocks are ahead.
func saving(c daylight.Calendar) (from, to string, ok bool) {
	if c.SavingFrom == nil || c.SavingTo == nil {
		return "", "", false
	}
	word := func(d *daylight.MonthDay) string { return fmt.Sprintf("%d %s", d.Day, time.Month(d.Month)) }
	return word(c.SavingFrom), word(c.SavingTo), true
}

func zoneName(h float64) string {
	whole := int(math.Round(math.Abs(h) * 60))
	sign := "+"
	if h < 0 {
		sign = "-"
	}
	if whole%60 == 0 {
		return fmt.Sprintf("UTC%s%d", sign, whole/60)
	}
	return fmt.Sprintf("UTC%s%d:%02d", sign, whole/60, whole%60)
}

// hours writes a sum of hours.
func hours(h float64) string { return whole(h) + " h" }

// whole writes a number with a comma between thousands, below ten with a decimal.
func whole(x float64) string {
	if x > 0 && x < 9.95 {
		return strings.TrimSuffix(strconv.FormatFloat(x, 'f', 1, 64), ".0")
	}
	s := strconv.FormatFloat(x, 'f', 0, 64)
	if len(s) > 3 {
		s = s[:len(s)-3] + "," + s[len(s)-3:]
	}
	return s
}
