package report

import (
	"math"
	"strconv"
	"strings"
	"unicode"

	"charm.land/lipgloss/v2"
)

// plain makes text from files safe for a terminal and for one line: names may
// hold escape sequences or turn the direction of writing.
func plain(s string) string {
	s = strings.ToValidUTF8(s, "\uFFFD")
	return strings.Map(func(r rune) rune {
		switch {
		case unicode.IsSpace(r):
			return ' '
		case unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r):
			return '\uFFFD'
		}
		return r
	}, s)
}

// units stay on the line of their number.
var units = map[string]bool{"lx": true, "m": true, "h": true, "px": true, "MiB": true, "W/m2": true, "kW/m2": true, "±": true}

// words splits a text into pieces that may stand at a line's start.
func words(s string) []string {
	var out []string
	join := false
	for _, f := range strings.Fields(s) {
		bare := strings.TrimRight(f, ".,;:)")
		if n := len(out); n > 0 && (join || units[bare] || strings.HasPrefix(f, "%")) {
			out[n-1] += " " + f
		} else {
			out = append(out, f)
		}
		join = f == "±"
	}
	return out
}

// wrap breaks a text into lines of at most width columns. A word that is wider
// is cut.
func wrap(s string, width int) []string {
	var lines []string
	line := ""
	for _, w := range words(s) {
		if line != "" && lipgloss.Width(line)+1+lipgloss.Width(w) <= width {
			line += " " + w
			continue
		}
		if line != "" {
			lines = append(lines, line)
		}
		var whole []string
		whole, line = cut(w, width)
		lines = append(lines, whole...)
	}
	if line != "" || len(lines) == 0 {
		lines = append(lines, line)
	}
	return lines
}

// cut takes full lines from a word until the rest fits.
func cut(w string, width int) (whole []string, rest string) {
	for lipgloss.Width(w) > width {
		end := 0
		for i, r := range w {
			if i > 0 && lipgloss.Width(w[:i]+string(r)) > width {
				break
			}
			end = i + len(string(r))
		}
		whole, w = append(whole, w[:end]), w[end:]
	}
	return whole, w
}

// fit shortens a text to width columns, with an ellipsis.
func fit(s string, width int) string {
	if lipgloss.Width(s) <= width {
		return s
	}
	if width < 2 {
		return ""
	}
	head := s
	for lipgloss.Width(head) > width-1 {
		r := []rune(head)
		head = string(r[:len(r)-1])
	}
	return strings.TrimRight(head, " ") + "…"
}

// left and right pad to width columns.
func left(s string, width int) string {
	return s + strings.Repeat(" ", max(0, width-lipgloss.Width(s)))
}

func right(s string, width int) string {
	return strings.Repeat(" ", max(0, width-lipgloss.Width(s))) + s
}

// whole writes a number without decimals, thousands grouped: 2,610.
func whole(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "unknown"
	}
	s := strconv.FormatFloat(x, 'f', 0, 64)
	if s == "-0" {
		s = "0"
	}
	for i := len(s) - 3; i > 0 && s[i-1] != '-'; i -= 3 {
		s = s[:i] + "," + s[i:]
	}
	return s
}

// decimals writes a number with at most n decimals, without trailing zeros.
func decimals(x float64, n int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "unknown"
	}
	s := strconv.FormatFloat(x, 'f', n, 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	if s == "-0" {
		s = "0"
	}
	return s
}

// hours counts them: 2,610, or parts of one with up to two decimals.
func hours(x float64) string {
	if full, part := math.Modf(math.Round(100*x) / 100); part > 0 {
		return whole(full) + strings.TrimPrefix(decimals(part, 2), "0")
	}
	return whole(x)
}

// hoursText is hours with their noun.
func hoursText(x float64) string {
	if x == 1 {
		return "1 hour"
	}
	return hours(x) + " hours"
}

// fixed writes a number with n decimals.
func fixed(x float64, n int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "unknown"
	}
	return strconv.FormatFloat(x, 'f', n, 64)
}

// percent writes a share: 5.5 %.
func percent(share float64) string {
	if math.IsNaN(share) || math.IsInf(share, 0) {
		return "unknown"
	}
	return decimals(100*share, 1) + " %"
}

// count writes a number with its noun.
func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return whole(float64(n)) + " " + many
}

// list joins names: a, b and c.
func list(names []string) string {
	switch len(names) {
	case 0:
		return ""
	case 1:
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1]
}
