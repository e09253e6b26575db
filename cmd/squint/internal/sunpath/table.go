package sunpath

import (
	"fmt"
	"io"
	"math"
	"strings"
)

// WriteTable writes the minutes a day with sun, by clock hour and month, for a
// terminal of 80 columns: direct, and mirrored where there is any.
func (y *Year) WriteTable(w io.Writer) error {
	var b strings.Builder
	writeMinutes(&b, "Direct sun, minutes a day", &y.Direct)
	if y.Mirrored.All > 0 {
		b.WriteString("\n")
		writeMinutes(&b, "Mirrored sun, minutes a day", &y.Mirrored)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

func writeMinutes(b *strings.Builder, title string, h *Hours) {
	fmt.Fprintf(b, "%s\n", title)
	first, last := h.clocks()
	if first > last {
		b.WriteString("none all year\n")
		return
	}
	row := func(head string, value func(m int) string) {
		line := fmt.Sprintf("%-8s", head)
		for m := range monthNames {
			line += fmt.Sprintf("%5s", value(m))
		}
		b.WriteString(strings.TrimRight(line, " ") + "\n")
	}
	row("clock", func(m int) string { return monthNames[m][:3] })
	for c := first; c <= last; c++ {
		row(fmt.Sprintf("%2d-%2d h", c, c+1), func(m int) string { return minutes(h.Minutes[c][m]) })
	}
	row("day", func(m int) string { return minutes(h.Month(m)) })
}

// minutes writes whole minutes; a dot for none.
func minutes(x float64) string {
	switch {
	case x == 0:
		return "."
	case x < 0.5:
		return "<1"
	}
	return fmt.Sprintf("%.0f", math.Round(x))
}

// clocks are the first and the last clock hour with sun; first > last for none.
func (h *Hours) clocks() (first, last int) {
	first, last = 24, -1
	for c := range h.Minutes {
		for _, x := range h.Minutes[c] {
			if x > 0 {
				first, last = min(first, c), c
			}
		}
	}
	return first, last
}
