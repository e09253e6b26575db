package daylight

import "slices"

// HoursPerYear is the number of hours of a year without 29 February.
const HoursPerYear = 8760

// DaylightHoursPerYear is the number of daylight hours EN 17037 reckons with:
// half of the year. Source: EN 17037:2018, from memory.
const DaylightHoursPerYear = 4380

// Hours lists steps of the year in increasing order, from 0. A step is an hour
// or an equal part of one; Calendar.PerHour says which.
type Hours []int

// Mask tells for each of the year's n steps whether it is listed.
func (h Hours) Mask(n int) []bool {
	mask := make([]bool, n)
	for _, i := range h {
		mask[i] = true
	}
	return mask
}

// MonthDay is a day of a year without 29 February; Month 1 to 12, Day 1 to 31.
type MonthDay struct{ Month, Day int }

// monthStart is the index of the first day of each month.
var monthStart = [13]int{0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334, 365}

// YearDay is the index of the day, 0 (1 January) to 364, and whether the day
// exists in a year without 29 February.
func (m MonthDay) YearDay() (int, bool) {
	if m.Month < 1 || m.Month > 12 || m.Day < 1 {
		return 0, false
	}
	day := monthStart[m.Month-1] + m.Day - 1
	return day, day < monthStart[m.Month]
}

// Calendar says when a room is in use and what its clocks show.
type Calendar struct {
	PerHour      int        // steps in an hour, 1 or more; 0 counts as 1
	FirstWeekday int        // weekday of 1 January: 0 Monday to 6 Sunday
	Days         [7]bool    // days of use, Monday first
	FromH, ToH   float64    // clock time of use, 0 to 24; FromH < ToH
	Holidays     []MonthDay // days without use; unknown days are ignored

	// Clocks stand one hour ahead of the file's standard time from the day
	// SavingFrom up to, not including, the day SavingTo (south of the equator
	// the period runs over the turn of the year). Nil: never.
	SavingFrom, SavingTo *MonthDay
}

// ClockShiftH is how far clocks stand ahead of the weather file's standard
// time on the day (0 to 364): 0 or 1 h.
func (c Calendar) ClockShiftH(day int) float64 {
	if c.SavingFrom == nil || c.SavingTo == nil {
		return 0
	}
	from, okFrom := c.SavingFrom.YearDay()
	to, okTo := c.SavingTo.YearDay()
	if !okFrom || !okTo {
		return 0
	}
	ahead := day >= from && day < to
	if from > to {
		ahead = day >= from || day < to
	}
	if ahead {
		return 1
	}
	return 0
}

func (c Calendar) perHour() int { return max(1, c.PerHour) }

// Steps is the number of steps in the year.
func (c Calendar) Steps() int { return HoursPerYear * c.perHour() }

// InHours is how many hours that many steps are.
func (c Calendar) InHours(steps int) float64 { return float64(steps) / float64(c.perHour()) }

// Day is the day, 0 to 364, of a step in the standard time of the weather file.
func (c Calendar) Day(step int) int { return step / (24 * c.perHour()) }

// ClockAt is the day, 0 to 364, and the time, 0 to 24 h, that clocks show in the
// middle of a step.
func (c Calendar) ClockAt(step int) (day int, clockH float64) {
	day = c.Day(step)
	clockH = (float64(step%(24*c.perHour()))+0.5)/float64(c.perHour()) + c.ClockShiftH(day)
	if clockH >= 24 {
		return (day + 1) % 365, clockH - 24
	}
	return day, clockH
}

// OnDay is the weekday, 0 Monday to 6 Sunday, of a day, 0 to 364, and whether it
// is a holiday.
func (c Calendar) OnDay(day int) (weekday int, holiday bool) {
	for _, h := range c.Holidays {
		if d, ok := h.YearDay(); ok && d == day {
			holiday = true
		}
	}
	return ((c.FirstWeekday+day)%7 + 7) % 7, holiday
}

// Occupied lists the steps in which the room is in use: dark ones too,
// since the usage time of EN 17037 does not stop at dusk.
func (c Calendar) Occupied() Hours {
	return c.pick(c.FromH, c.ToH, func(day int) bool {
		weekday, holiday := c.OnDay(day)
		return c.Days[weekday] && !holiday
	})
}

// Clock lists the steps between two clock times on every day of the year:
// Clock(8, 18) is the 3,650 analysis hours of IES LM-83-12.
func (c Calendar) Clock(fromH, toH float64) Hours {
	return c.pick(fromH, toH, func(int) bool { return true })
}

func (c Calendar) pick(fromH, toH float64, use func(day int) bool) Hours {
	var hours Hours
	for i := range c.Steps() {
		// The clock may already show the next day; the day of use is the clock's.
		day, clock := c.ClockAt(i)
		if clock >= fromH && clock < toH && use(day) {
			hours = append(hours, i)
		}
	}
	return hours
}

// SunHighest lists the n steps in which the sun stands highest, from the
// sine of its altitude (or any other measure that grows with the altitude) in
// each step; the earlier of two equal ones comes first. With n = as many steps as
// [DaylightHoursPerYear] holds these are the daylight hours of EN 17037: the
// standard gives their number but weather files disagree by hundreds of hours
// on which have light, while the sun's altitude is the same for all.
func SunHighest(sinAltitude []float64, n int) Hours {
	order := make(Hours, len(sinAltitude))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case sinAltitude[a] > sinAltitude[b]:
			return -1
		case sinAltitude[a] < sinAltitude[b]:
			return 1
		}
		return 0
	})
	order = order[:max(0, min(n, len(order)))]
	slices.Sort(order)
	return order
}

// Base names a choice of hours.
type Base int

// The choices of hours.
const (
	BaseOccupied Base = iota // Calendar.Occupied
	BaseClock                // Calendar.Clock(8, 18)
	BaseDaylight             // SunHighest(..., DaylightHoursPerYear)
)

// String names the hours as the report does.
func (b Base) String() string {
	switch b {
	case BaseOccupied:
		return "occupied hours"
	case BaseClock:
		return "8 to 18 h clock time, all days (3650 h)"
	case BaseDaylight:
		return "the 4380 hours with the sun highest"
	}
	return "unknown hours"
}

// HourRule says which hours a metric counts and why.
type HourRule struct {
	Metric string
	Base   Base
	Source string
}

// HourRules is the one table of which hours count. The sources are
// quoted from memory.
var HourRules = []HourRule{
	{"DA", BaseOccupied, "Reinhart and Walkenhorst 2001, Validation of dynamic simulations for a test office with external blinds: occupied hours"},
	{"cDA", BaseOccupied, "Rogers 2006, Daylighting metric development using daylight autonomy calculations: as DA"},
	{"UDI", BaseOccupied, "Nabil and Mardaljevic 2005, Useful daylight illuminance, Lighting Res. Technol. 37(1): occupied hours"},
	{"sDA", BaseClock, "IES LM-83-12: 8 to 18 h local clock time, all days; blinds operated"},
	{"ASE", BaseClock, "IES LM-83-12: the hours of sDA; blinds open"},
	{"EN 17037 provision", BaseDaylight, "EN 17037:2018: 4380 daylight hours; here those with the sun highest"},
	{"EN 17037 glare", BaseOccupied, "EN 17037:2018: the usage time"},
	{"sGA", BaseOccupied, "Jones 2019, Fast climate-based glare analysis and spatial mapping, Building Simulation: the usage time"},
}

// RuleOf finds the metric in HourRules.
func RuleOf(metric string) (HourRule, bool) {
	for _, r := range HourRules {
		if r.Metric == metric {
			return r, true
		}
	}
	return HourRule{}, false
}
