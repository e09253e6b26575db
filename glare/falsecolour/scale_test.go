package falsecolour

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

func TestNumber(t *testing.T) {
	for v, want := range map[float64]string{ // by hand
		0: "0", 1: "1", 0.5: "0.5", 0.25: "0.25", 0.1234: "0.123", 0.001: "0.001", 0.00012: "1.2×10⁻⁴",
		12.34: "12.3", 99.96: "100", 999.6: "1\u2009000", 1234: "1\u2009230", 2000: "2\u2009000", 50000: "50\u2009000",
		999600: "10⁶", 500000: "500\u2009000", 1.6e9: "1.6×10⁹", 2e12: "2×10¹²", -0.2: "\u22120.2", -1500: "\u22121\u2009500",
		math.Inf(1): "infinite", math.Inf(-1): "\u2212infinite",
	} {
		if got := Number(v); got != want {
			t.Errorf("%g: got %q, want %q", v, got, want)
		}
	}
	if got := Number(math.NaN()); got != "no value" {
		t.Errorf("NaN: got %q", got)
	}
}

func TestFraction(t *testing.T) {
	log := Scale{Min: 1, Max: 1000, Log: true}
	linear := Scale{Min: -10, Max: 10}
	for _, c := range []struct {
		s       Scale
		v, want float64 // exact
	}{
		{log, 1, 0}, {log, 10, 1.0 / 3}, {log, 1000, 1}, {log, 0.1, -1.0 / 3}, {log, 0, math.Inf(-1)}, {log, -5, math.Inf(-1)},
		{linear, -10, 0}, {linear, 5, 0.75}, {linear, 30, 2},
	} {
		if got := c.s.Fraction(c.v); got != c.want && math.Abs(got-c.want) > 1e-15 {
			t.Errorf("%+v at %g: got %g, want %g", c.s, c.v, got, c.want)
		}
	}
	if got := log.Fraction(math.NaN()); !math.IsNaN(got) {
		t.Errorf("NaN: got %g", got)
	}
}

func TestFitScale(t *testing.T) {
	many := func(low, high float32) []float32 { // 1000 values, evenly by logarithm
		out := make([]float32, 1000)
		for i := range out {
			out[i] = low * float32(math.Pow(float64(high/low), float64(i)/999))
		}
		return out
	}
	nan, inf := float32(math.NaN()), float32(math.Inf(1))
	for name, c := range map[string]struct {
		log    bool
		values [][]float32
		min    float64
		max    float64
	}{
		"room":                    {true, [][]float32{many(12, 7000)}, 10, 10000},
		"sun in one pixel":        {true, [][]float32{append(many(12, 7000), 1.6e9)}, 10, 10000},
		"over four decades":       {true, [][]float32{many(0.01, 9000)}, 1, 10000},
		"one value":               {true, [][]float32{{300}}, 50, 500},
		"a power of ten":          {true, [][]float32{many(100, 1000)}, 100, 1000},
		"below one":               {true, [][]float32{many(0.021, 0.49)}, 0.02, 0.5},
		"two images":              {true, [][]float32{many(20, 100), many(90, 1900)}, 20, 2000},
		"nothing positive":        {true, [][]float32{{0, -1, nan, inf}}, 1, 1000},
		"nothing":                 {false, nil, 0, 1},
		"zero":                    {false, [][]float32{{0, 0}}, 0, 1},
		"plane":                   {false, [][]float32{many(100, 2050)}, 0, 2500},
		"fraction":                {false, [][]float32{many(0.01, 0.58)}, 0, 0.6},
		"differences":             {false, [][]float32{{-0.3, 0.1, 0.4}}, -0.3, 0.4},
		"below zero only":         {false, [][]float32{{-30, -20}}, -30, 0},
		"not a number among them": {false, [][]float32{{nan, 3, inf, 8}}, 0, 8},
	} {
		s := FitScale("Luminance", "cd/m2", c.log, c.values...)
		if math.Abs(s.Min-c.min) > 1e-9*math.Abs(c.min) || math.Abs(s.Max-c.max) > 1e-9*c.max || s.Log != c.log || s.validate() != nil {
			t.Errorf("%s: got %g to %g, want %g to %g", name, s.Min, s.Max, c.min, c.max)
		}
	}
}

// round tells whether v is a small whole multiple of 1, 2 or 5 times a power
// of ten: at most two significant digits, or three ending in 5.
func round(v float64) bool {
	if v == 0 {
		return true
	}
	e := math.Floor(math.Log10(math.Abs(v)) + 1e-12)
	m := math.Abs(v) / math.Pow(10, e) * 20
	return math.Abs(m-math.Round(m)) < 1e-6
}

// TestTicks: labels on round numbers, in order, within the bar and apart.
func TestTicks(t *testing.T) {
	faces, err := newTypefaces(1)
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(7, 8))
	for range 400 {
		values := make([]float32, 50)
		level, spread := 12*rng.Float64()-4, 4*rng.Float64()
		for i := range values {
			values[i] = float32(math.Pow(10, level+spread*rng.Float64()))
		}
		for _, log := range []bool{false, true} {
			s := FitScale("", "", log, values)
			for _, length := range []float64{200, 600, 1600} {
				end, last, labels := math.Inf(-1), math.Inf(-1), 0
				r := ruler{length, 12, 9, faces.small.width}
				for _, tk := range s.ticks(r, true, true) {
					if tk.fraction < -1e-9 || tk.fraction > 1+1e-9 || math.Abs(tk.fraction-s.Fraction(tk.value)) > 1e-9 {
						t.Fatalf("%+v: tick %+v is not on the bar", s, tk)
					}
					if tk.label == "" {
						continue
					}
					labels++
					if !round(tk.value) || tk.value <= last {
						t.Fatalf("%+v, %g px: %g is not a round number above %g", s, length, tk.value, last)
					}
					last = tk.value
					from, to := r.span(tk.fraction, tk.label)
					if from < end+9 || from < -12 || to > length+12 {
						t.Fatalf("%+v, %g px: label %q spans %g to %g, the one before ends at %g", s, length, tk.label, from, to, end)
					}
					end = to
				}
				if labels < 2 || length >= 600 && labels < 3 {
					t.Fatalf("%+v, %g px: got %d labels", s, length, labels)
				}
			}
		}
	}
}

func TestTicksText(t *testing.T) {
	faces, err := newTypefaces(1)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		s      Scale
		length float64
		beyond bool
		want   string // by hand
	}{
		{Scale{Min: 10, Max: 10000, Log: true}, 600, false, "10 20 50 100 200 500 1_000 2_000 5_000 10_000"},
		{Scale{Min: 10, Max: 10000, Log: true}, 600, true, "≤ 10 30 100 300 1_000 3_000 ≥ 10_000"},
		{Scale{Min: 1, Max: 1e6, Log: true}, 600, false, "1 10 100 1_000 10_000 100_000 10⁶"},
		{Scale{Min: 0, Max: 2500}, 600, false, "0 500 1_000 1_500 2_000 2_500"},
		{Scale{Min: 0, Max: 1}, 300, false, "0 0.1 0.2 0.3 0.4 0.5 0.6 0.7 0.8 0.9 1"},
		{Scale{Min: -0.3, Max: 0.4}, 300, false, "−0.3 −0.2 −0.1 0 0.1 0.2 0.3 0.4"},
		{Scale{Min: 80, Max: 10000, Log: true}, 600, true, "≤ 80 200 500 1_000 2_000 5_000 ≥ 10_000"},
		{Scale{Min: 100, Max: 3000, Log: true}, 60, false, "100 3_000"},
	} {
		var labels []string
		for _, tk := range c.s.ticks(ruler{c.length, 12, 9, faces.small.width}, c.beyond, c.beyond) {
			if tk.label != "" {
				labels = append(labels, strings.ReplaceAll(tk.label, string(thinSpace), "_"))
			}
		}
		if got := strings.Join(labels, " "); got != c.want {
			t.Errorf("%+v on %g px: got %q, want %q", c.s, c.length, got, c.want)
		}
	}
}
