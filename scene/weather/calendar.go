package weather

import "fmt"

// daysBefore[m] is the number of days of a non-leap year before month m+1.
var daysBefore = [13]int{0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334, 365}

// slot returns the place of a labelled hour in a year of 8,760 hours, or false
// if there is no such hour (29 February included).
func slot(month, day, hour int) (int, bool) {
	if month < 1 || month > 12 || day < 1 || hour < 1 || hour > 24 {
		return 0, false
	}
	if day > daysBefore[month]-daysBefore[month-1] {
		return 0, false
	}
	return (daysBefore[month-1]+day-1)*24 + hour - 1, true
}

// label is the inverse of slot.
func label(slot int) (month, day, hour int) {
	d := slot / 24
	month = 1
	for d >= daysBefore[month] {
		month++
	}
	return month, d - daysBefore[month-1] + 1, slot%24 + 1
}

func isLeap(year int) bool {
	return year%4 == 0 && (year%100 != 0 || year%400 == 0)
}

var monthNames = [12]string{"January", "February", "March", "April", "May", "June",
	"July", "August", "September", "October", "November", "December"}

// hourName names the labelled hour of a slot for messages.
func hourName(slot int) string {
	m, d, h := label(slot)
	return fmt.Sprintf("%d %s hour %d", d, monthNames[m-1], h)
}

// calendar takes the records of a file one by one, drops 29 February and
// refuses gaps, repetitions and hours out of order.
type calendar struct {
	file     string
	records  []Record
	leapRows int
	years    map[int]bool // of the records that were kept
}

func newCalendar(file string) *calendar {
	return &calendar{file: file, records: make([]Record, 0, HoursPerYear), years: make(map[int]bool)}
}

func (c *calendar) add(year int, r Record) error {
	hour := int(r.EndH)
	if r.Month == 2 && r.Day == 29 && hour >= 1 && hour <= 24 {
		if next := len(c.records); next != 59*24 {
			return c.refuse(r, next)
		}
		c.leapRows++
		return nil
	}
	next := len(c.records)
	got, ok := slot(r.Month, r.Day, hour)
	if !ok {
		return &ParseError{File: c.file, Line: r.Line, Key: "date and hour",
			Got:  fmt.Sprintf("month %d day %d hour %d", r.Month, r.Day, hour),
			Want: "a date of the calendar and an hour from 1 to 24",
			Do:   "correct the row; hour 1 is 00:00 to 01:00", Err: ErrCalendar}
	}
	if got != next {
		return c.refuse(r, next)
	}
	c.records = append(c.records, r)
	c.years[year] = true
	return nil
}

// refuse explains a record that does not follow the previous one.
func (c *calendar) refuse(r Record, next int) error {
	e := &ParseError{File: c.file, Line: r.Line, Key: "date and hour", Err: ErrCalendar,
		Got: fmt.Sprintf("%d %s hour %d", r.Day, monthNames[r.Month-1], int(r.EndH))}
	if next == HoursPerYear {
		e.Want = fmt.Sprintf("the end of the file after %d hours", HoursPerYear)
		e.Do = "give one year of hourly rows, January to December"
		return e
	}
	e.Want = hourName(next)
	got, ok := slot(r.Month, r.Day, int(r.EndH))
	if !ok { // 29 February out of place
		got = 59 * 24
	}
	switch {
	case got > next && next == 0:
		e.Do = "give one year of hourly rows, January to December"
	case got == next+1:
		e.Do = hourName(next) + " is missing: insert it, for instance by repeating a neighbour"
	case got > next:
		e.Do = fmt.Sprintf("%d hours are missing, %s to %s: insert them", got-next, hourName(next), hourName(got-1))
	default:
		e.Do = "the hours do not increase: remove the repeated rows or sort them"
	}
	return e
}

// finish returns the year that the file's rows make up, with notes.
func (c *calendar) finish(lastLine int) (records []Record, referenceYear int, notes []string, err error) {
	if n := len(c.records); n != HoursPerYear {
		do := fmt.Sprintf("%d hours are missing, from %s on: give the whole year", HoursPerYear-n, hourName(n))
		if n == HoursPerYear-1 {
			do = hourName(n) + " is missing: append it"
		}
		got := fmt.Sprintf("%d hours", n)
		if c.leapRows > 0 {
			got += " without 29 February"
		}
		return nil, 0, nil, &ParseError{File: c.file, Line: lastLine, Key: "rows", Got: got,
			Want: fmt.Sprintf("%d", HoursPerYear), Do: do, Err: ErrCalendar}
	}
	if c.leapRows > 0 {
		notes = append(notes, fmt.Sprintf("The %d rows of 29 February were left out: a year has %d hours here.", c.leapRows, HoursPerYear))
	}
	referenceYear = DefaultReferenceYear
	if len(c.years) == 1 {
		for year := range c.years {
			if !isLeap(year) && year >= 1900 && year <= 2100 {
				referenceYear = year
			}
		}
	} else {
		notes = append(notes, fmt.Sprintf("The months come from %d different years; the sun is taken as in %d throughout.", len(c.years), referenceYear))
	}
	return c.records, referenceYear, notes, nil
}
