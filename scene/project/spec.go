package project

import (
	"fmt"
	"strconv"
	"strings"
)

// spec describes one key of a table of the file.
type spec struct {
	name     string
	about    string // one line, for guide and editors
	required bool
	def      string // the default as TOML; "" for none
	source   string // of the default
	quiet    bool   // the default changes nothing: it is no news
	in       within // range of each number
	choices  []string
	refers   string   // "finish", "opening" and so on: the value is the name of one
	types    []string // of the finish referred to; nil for any
	form     form
}

// key binds a spec to the field that it fills: field returns a pointer whose
// type says what the file must hold, see reader.set.
type key[T any] struct {
	spec
	field func(*T) any
}

// form is how a value is written where the type of its field leaves that open.
type form int

const (
	plain      form = iota
	clock           // "08:30" for 8.5
	everyMonth      // one number for all twelve
	filePath        // relative to the project file's folder
	itemName        // a name that other tables and the results use
)

// within is a closed range. The zero value is any finite number.
type within struct{ lo, hi float64 }

func (w within) any() bool { return w == within{} }

func (w within) holds(x float64) bool {
	if w.any() {
		return true
	}
	return x >= w.lo && x <= w.hi
}

func (w within) String() string {
	if w.any() {
		return "a number"
	}
	return decimal(w.lo) + " to " + decimal(w.hi)
}

func decimal(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

// want says what a key's value must be.
func (s *spec) want(field any) string {
	numbers := func(n string) string {
		if s.in.any() {
			return n + " numbers"
		}
		return n + " numbers, each " + s.in.String()
	}
	switch field.(type) {
	case *string:
		switch {
		case s.choices != nil:
			return oneOf(s.choices)
		case s.refers != "":
			return article(s.refers) + "'s name in quotes"
		case s.form == filePath:
			return "a path in quotes"
		}
		return "text in quotes"
	case *bool:
		return "true or false"
	case *float64, **float64:
		if s.form == clock {
			return `a time of day such as "08:30"`
		}
		return s.in.String()
	case *uint64:
		return "a whole number, 0 or more"
	case *int:
		return "a whole number, " + s.in.String()
	case *[3]float64, **[3]float64:
		return numbers("3")
	case *[12]float64:
		if s.form == everyMonth {
			return s.in.String()
		}
		return numbers("12")
	case *[4][3]float64:
		return "4 corners of 3 numbers each"
	case *[]float64:
		return "a list of" + numbers("")
	case *[][2]float64:
		return "a list of points of 2 numbers each"
	case *[][3]float64:
		return "a list of rows of 3 numbers each"
	case *[]HorizonPoint:
		return "a list of points [azimuth, altitude] in degrees"
	case *[7]bool:
		return "a list of days, each " + oneOf(dayNames)
	case *[]MonthDay:
		return `a list of days such as "12-25", month first`
	case **MonthDay:
		return `a day such as "03-29", month first`
	case *[]SlatState:
		return "a list of tables such as { name = \"open\", tilt_deg = 0 }"
	case *[]string:
		return "a list of names in quotes"
	case *[]ControlPeriod:
		return periodWords
	case *[]Assignment:
		return "a table of group or material names and finishes"
	}
	return "another value"
}

var dayNames = []string{"mon", "tue", "wed", "thu", "fri", "sat", "sun"}

func oneOf(choices []string) string {
	quoted := make([]string, len(choices))
	for i, c := range choices {
		quoted[i] = strconv.Quote(c)
	}
	if len(quoted) == 1 {
		return quoted[0]
	}
	last := len(quoted) - 1
	return strings.Join(quoted[:last], ", ") + " or " + quoted[last]
}

func article(noun string) string {
	if strings.ContainsRune("aeiou", rune(noun[0])) {
		return "an " + noun
	}
	return fmt.Sprintf("a %s", noun)
}
