package falsecolour

import (
	"math"
	"strconv"
	"strings"
)

const (
	thinSpace = '\u2009'
	minus     = "\u2212"
)

var superscripts = [...]rune{'\u2070', '\u00b9', '\u00b2', '\u00b3', '\u2074', '\u2075', '\u2076', '\u2077', '\u2078', '\u2079'}

// Number writes v with up to three significant digits, thin spaces between
// thousands, and powers of ten from a million and below a thousandth:
// 0.25, 2 000, 1.6×10⁹.
func Number(v float64) string {
	switch {
	case math.IsNaN(v):
		return "no value"
	case v < 0:
		return minus + Number(-v)
	case math.IsInf(v, 1):
		return "infinite"
	case v == 0:
		return "0"
	}
	mantissa, exponent, _ := strings.Cut(strconv.FormatFloat(v, 'e', 2, 64), "e")
	e, err := strconv.Atoi(exponent)
	if err != nil { // FormatFloat always writes one
		return mantissa
	}
	if e >= 6 || e < -3 {
		mantissa = trim(mantissa)
		if mantissa == "1" {
			return "10" + raised(e)
		}
		return mantissa + "\u00d7" + "10" + raised(e)
	}
	rounded, err := strconv.ParseFloat(mantissa+"e"+exponent, 64)
	if err != nil {
		return mantissa
	}
	text := trim(strconv.FormatFloat(rounded, 'f', max(0, 2-e), 64))
	if len(text) > 3 && !strings.Contains(text, ".") {
		text = text[:len(text)-3] + string(thinSpace) + text[len(text)-3:]
	}
	return text
}

// trim drops zeros behind the decimal point.
func trim(s string) string {
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

func raised(e int) string {
	var b strings.Builder
	if e < 0 {
		b.WriteRune('\u207b')
		e = -e
	}
	for _, d := range strconv.Itoa(e) {
		b.WriteRune(superscripts[d-'0'])
	}
	return b.String()
}

// prettyUnit raises a final square: cd/m2 becomes cd/m².
func prettyUnit(unit string) string {
	if strings.HasSuffix(unit, "m2") {
		return strings.TrimSuffix(unit, "2") + "\u00b2"
	}
	return unit
}
