package project

import (
	"fmt"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
)

// fill reads exactly as many numbers as dst holds.
func fill(n *node, s *spec, field any, dst []float64) string {
	if n.list == nil || len(n.list) != len(dst) {
		got := n.got()
		if n.list != nil {
			got = count(len(n.list), "number")
		}
		return fmt.Sprintf("got %s, want %s", got, count(len(dst), "number"))
	}
	for i, item := range n.list {
		v, ok := number(item, s.in)
		if !ok {
			return fmt.Sprintf("number %d: got %s, want %s", i+1, item.got(), s.in)
		}
		dst[i] = v
	}
	return ""
}

// rowsOf reads a list of rows of width numbers.
func rowsOf(n *node, s *spec, field any, width int) ([][]float64, string) {
	if n.list == nil {
		return nil, "got " + n.got() + ", want " + s.want(field)
	}
	rows := make([][]float64, 0, len(n.list))
	for i, item := range n.list {
		row := make([]float64, width)
		if why := fill(item, s, field, row); why != "" {
			return nil, fmt.Sprintf("row %d: %s", i+1, why)
		}
		rows = append(rows, row)
	}
	return rows, ""
}

// clockTime is a time of day in hours, from a string or a TOML local time;
// "24:00" is the end of the day.
func clockTime(n *node) (float64, bool) {
	switch v := n.value.(type) {
	case toml.LocalTime:
		return float64(v.Hour) + float64(v.Minute)/60 + float64(v.Second)/3600, true
	case string:
		h, minute, ok := twoNumbers(v, ":")
		if !ok || minute > 59 || h > 24 || h == 24 && minute > 0 {
			return 0, false
		}
		return float64(h) + float64(minute)/60, true
	}
	return 0, false
}

// monthDay reads "02-29", which is a day of leap years only, like any other.
func monthDay(n *node) (MonthDay, bool) {
	text, _ := n.value.(string)
	month, day, ok := twoNumbers(text, "-")
	d := MonthDay{Month: month, Day: day}
	longest := [12]int{31, 29, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}
	ok = ok && d.Month >= 1 && d.Month <= 12 && d.Day >= 1 && d.Day <= longest[d.Month-1]
	return d, ok
}

// twoNumbers reads two numbers of two digits each.
func twoNumbers(text, between string) (a, b int, ok bool) {
	first, second, ok := strings.Cut(text, between)
	if !ok || len(first) != 2 || len(second) != 2 {
		return 0, 0, false
	}
	x, err1 := strconv.ParseUint(first, 10, 8)
	y, err2 := strconv.ParseUint(second, 10, 8)
	return int(x), int(y), err1 == nil && err2 == nil
}

func weekdays(n *node, wrong func() string, dst *[7]bool) string {
	if n.list == nil {
		return wrong()
	}
	if len(n.list) == 0 {
		return "got no days, want at least one"
	}
	for i, item := range n.list {
		text, ok := item.value.(string)
		found := -1
		for k, d := range dayNames {
			if ok && d == text {
				found = k
			}
		}
		if found < 0 {
			return fmt.Sprintf("item %d: got %s, want %s", i+1, item.got(), oneOf(dayNames))
		}
		if dst[found] {
			return fmt.Sprintf("item %d: got %q twice", i+1, text)
		}
		dst[found] = true
	}
	return ""
}
