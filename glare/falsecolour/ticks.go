package falsecolour

import "math"

// tick is a mark of the legend. Without a label it is a minor one.
type tick struct {
	value    float64
	fraction float64 // of the bar
	label    string
}

// ruler is the bar on which ticks stand.
type ruler struct {
	length   float64              // pixels
	overhang float64              // how far labels may reach beyond its ends
	gap      float64              // least distance of labels
	width    func(string) float64 // of a label
}

// span is where a label stands: centred below its value where it can.
func (r ruler) span(fraction float64, label string) (from, to float64) {
	w := r.width(label)
	from = math.Min(math.Max(fraction*r.length-w/2, -r.overhang), r.length-w+r.overhang)
	return from, from + w
}

// ticks returns the marks of a bar: as many round numbers as have room for
// their labels. below and above say that values lie outside of the scale; the
// labels of the ends then tell.
func (s Scale) ticks(r ruler, below, above bool) []tick {
	label := func(v float64) string {
		switch text := Number(v); {
		case v == s.Min && below:
			return "\u2264 " + text
		case v == s.Max && above:
			return "\u2265 " + text
		default:
			return text
		}
	}
	fit := func(values ...float64) bool {
		end := math.Inf(-1)
		for _, v := range values {
			from, to := r.span(s.Fraction(v), label(v))
			if from < end+r.gap {
				return false
			}
			end = to
		}
		return true
	}
	chosen := s.choose(fit)
	labelled := map[float64]bool{}
	var out []tick
	for _, v := range chosen {
		labelled[v] = true
		out = append(out, tick{v, s.Fraction(v), label(v)})
	}
	for _, v := range s.minor() {
		if !labelled[v] {
			out = append(out, tick{value: v, fraction: s.Fraction(v)})
		}
	}
	return out
}

// choose returns the densest set of round numbers whose labels fit: one that
// begins and ends with the scale or, failing that, one in which the ends of
// the scale take the place of their neighbours.
func (s Scale) choose(fit func(...float64) bool) []float64 {
	sets := s.sets()
	for _, set := range sets {
		if n := len(set); n > 1 && set[0] == s.Min && set[n-1] == s.Max && fit(set...) {
			return set
		}
	}
	for _, set := range sets {
		values := []float64{s.Min}
		for _, v := range set {
			if v > s.Min && v < s.Max && fit(s.Min, v) && fit(v, s.Max) {
				values = append(values, v)
			}
		}
		if values = append(values, s.Max); fit(values...) {
			return values
		}
	}
	return nil
}

// sets returns round numbers to label, the densest set first, an empty one
// last.
func (s Scale) sets() [][]float64 {
	var out [][]float64
	if s.Log {
		for _, m := range [...][]float64{{1, 2, 5}, {1, 3}, {1}} {
			out = append(out, s.decades(m, 1))
		}
		for every := 2; every <= 16; every *= 2 {
			out = append(out, s.decades([]float64{1}, every))
		}
		return append(out, nil)
	}
	for step := roundUp((s.Max - s.Min) / 20); step < s.Max-s.Min; step = roundUp(step * 1.5) {
		out = append(out, s.multiples(step))
	}
	return append(out, nil)
}

// decades returns the mantissas times every n-th power of ten within the
// scale, ascending.
func (s Scale) decades(mantissas []float64, every int) []float64 {
	var out []float64
	for e := int(math.Floor(math.Log10(s.Min))); ; e++ {
		if math.Pow10(e) > s.Max {
			return out
		}
		if e%every != 0 {
			continue
		}
		for _, m := range mantissas {
			// Dividing by whole powers keeps 0.2 as the 0.2 of a literal.
			v := m * math.Pow10(e)
			if e < 0 {
				v = m / math.Pow10(-e)
			}
			if v >= s.Min && v <= s.Max {
				out = append(out, v)
			}
		}
	}
}

// multiples returns those of step within the scale.
func (s Scale) multiples(step float64) []float64 {
	var out []float64
	for i := math.Ceil(s.Min/step - 1e-9); i <= s.Max/step+1e-9; i++ {
		v := multiple(i, step)
		// The ends are kept as they are, whatever rounding made of them.
		for _, end := range [...]float64{s.Min, s.Max} {
			if math.Abs(v-end) < 1e-6*step {
				v = end
			}
		}
		out = append(out, v)
	}
	return out
}

// minor returns values for marks without a label: 1 to 9 in each decade of a
// log scale that has no more than six of them, and none on a linear scale.
func (s Scale) minor() []float64 {
	if !s.Log || s.Max/s.Min > 1e6*(1+1e-9) {
		return nil
	}
	return s.decades([]float64{1, 2, 3, 4, 5, 6, 7, 8, 9}, 1)
}
