package daylight

import "slices"

// HoursPerYear is the number of records of a year without 29 February.
const HoursPerYear = 8760

// DaylightHoursPerYear is the number of daylight hours EN 17037 reckons with:
// half of the year. Source: EN 17037:2018, from memory.
const DaylightHoursPerYear = 4380

// Hours lists record indices in increasing order, 0 to HoursPerYear-1.
type Hours []int

// Mask tells for each record of the year whether it is listed.
func (h Hours) Mask() []bool {
	mask := make([]bool, HoursPerYear)
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

// Occupied lists the records in which the room is in use: dark ones too,
// since the usage time of EN 17037 does not stop at dusk.
func (c Calendar) Occupied() Hours {
	closed := make(map[int]bool, len(c.Holidays))
	for _, h := range c.Holidays {
		if day, ok := h.YearDay(); ok {
			closed[day] = true
		}
	}
	return c.pick(c.FromH, c.ToH, func(day int) bool {
		return c.Days[((c.FirstWeekday+day)%7+7)%7] && !closed[day]
	})
}

// Clock lists the records between two clock times on every day of the year:
// Clock(8, 18) is the 3,650 analysis hours of IES LM-83-12.
func (c Calendar) Clock(fromH, toH float64) Hours {
	return c.pick(fromH, toH, func(int) bool { return true })
}

func (c Calendar) pick(fromH, toH float64, use func(day int) bool) Hours {
	var hours Hours
	for i := range HoursPerYear {
		day, middle := i/24, float64(i%24)+0.5
		// The clock may already show the next day; the day of use is the clock's.
		clock := middle + c.ClockShiftH(day)
		if clock >= 24 {
			clock, day = clock-24, (day+1)%365
		}
		if clock >= fromH && clock < toH && use(day) {
			hours = append(hours, i)
		}
	}
	return hours
}

// SunHighest lists the n records in which the sun stands highest, from the
// sine of its altitude (or any other measure that grows with the altitude) in
// each record; the earlier of two equal ones comes first. With n =
// [DaylightHoursPerYear] these are the daylight hours of EN 17037: the
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
