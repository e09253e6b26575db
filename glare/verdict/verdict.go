package verdict

import (
	"fmt"
	"math"
	"strings"
)

// Caveat goes with every list of verdicts.
const Caveat = "Criteria quote published thresholds only; local codes and licensed practice decide."

// Verdict is one criterion held against one room, work plane or view.
type Verdict struct {
	Criterion string // what is asked, with its thresholds
	Source    string // the standard that states them
	Subject   string // the view or work plane
	Outcome   Outcome

	Estimate, Surely, Possibly, Limit float64 // shares, 0 to 1, unless Unit says otherwise
	Unit                              string  // "" for shares, else such as "h"

	Text string // the finding, the number, the reason
}

// Amount is the estimate in words: 5.5 %, 2.3 h, or none.
func (v *Verdict) Amount() string {
	switch {
	case math.IsNaN(v.Estimate):
		return "none"
	case v.Unit == "":
		return percent(v.Estimate)
	}
	return number(v.Estimate) + " " + v.Unit
}

// judged fills in the numbers and, where it is open, says so in the text.
func (v Verdict) judged(b Bracket, limit float64, o Outcome, why string) Verdict {
	v.Estimate, v.Surely, v.Possibly, v.Limit, v.Outcome = b.Estimate, b.Surely, b.Possibly, limit, o
	if o == Undecided {
		v.Text += ", undecided: " + why
	}
	v.Text += "."
	return v
}

// ofSensors is why a verdict on a work plane stays open.
const ofSensors = "the limit lies within the error of the sensors"

// Combine is the outcome of a room: not met when any verdict is not met, met
// when all are met, otherwise undecided. Of no verdicts: undecided.
func Combine(all []Verdict) Outcome {
	o := make([]Outcome, len(all))
	for i, v := range all {
		o[i] = v.Outcome
	}
	return Both(o...)
}

// percent writes a share: 5 %, 5.5 %.
func percent(share float64) string { return number(100*share) + " %" }

// spread writes a share with its bounds where they differ at the digit shown:
// 5.5 %, 5.2 to 5.9.
func spread(b Bracket) string { return between(b, ", ", "") }

// spreadIn is spread within a sentence: 5.5 % (5.2 to 5.9).
func spreadIn(b Bracket) string { return between(b, " (", ")") }

func between(b Bracket, before, after string) string {
	lo, mid, hi := number(100*b.Surely), number(100*b.Estimate), number(100*b.Possibly)
	if lo == mid && mid == hi {
		return mid + " %"
	}
	return fmt.Sprintf("%s %%%s%s to %s%s", mid, before, lo, hi, after)
}

// number has one decimal, and none where it would be zero.
func number(x float64) string {
	return strings.TrimSuffix(fmt.Sprintf("%.1f", x), ".0")
}

// hours counts them, parts with up to two decimals: 2,610 or 12.25.
func hours(x float64) string {
	full, part := math.Modf(x)
	if s := strings.TrimRight(fmt.Sprintf("%.2f", part), "0"); len(s) > 2 && s[0] == '0' {
		return whole(full) + s[1:]
	}
	return whole(x)
}

// whole groups thousands: 2,610.
func whole(x float64) string {
	s := fmt.Sprintf("%.0f", x)
	for i := len(s) - 3; i > 0 && s[i-1] != '-'; i -= 3 {
		s = s[:i] + "," + s[i:]
	}
	return s
}
