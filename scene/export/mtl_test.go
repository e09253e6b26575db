package export

import (
	"math"
	"strconv"
	"strings"
	"testing"
)

// readMTL is a reader of its own: values by material.
func readMTL(t *testing.T, text string) map[string]map[string][]float64 {
	t.Helper()
	out := map[string]map[string][]float64{}
	var now map[string][]float64
	for _, line := range strings.Split(text, "\n") {
		f := strings.Fields(line)
		if len(f) == 0 || strings.HasPrefix(f[0], "#") {
			continue
		}
		if f[0] == "newmtl" {
			now = map[string][]float64{}
			out[f[1]] = now
			continue
		}
		for _, w := range f[1:] {
			x, err := strconv.ParseFloat(w, 64)
			if err != nil || !(x >= 0 && x <= 1) {
				t.Errorf("%q: %v", line, err)
			}
			now[f[0]] = append(now[f[0]], x)
		}
	}
	return out
}

func TestMTL(t *testing.T) {
	got := readMTL(t, string(written(t, model(t, built(t), Options{Ground: true}).WriteMTL)))
	for _, c := range []struct {
		name     string
		grey, tr float64 // from the office's finishes
	}{
		{"white_wall", 0.8, 0}, {"grey", 0.3, 0}, {"metal", 0.85, 0}, {"bright", 0.95, 0},
		{"clear", -1, 0.78}, {"roller_screen", 0.4, 0.15}, {"ground", 0.2, 0},
	} {
		m := got[c.name]
		const digits = 1e-6 // as many as are written
		if len(m["Kd"]) != 3 || len(m["d"]) != 1 || len(m["Tr"]) != 1 {
			t.Errorf("%s: got %v", c.name, m)
			continue
		}
		if c.grey >= 0 && math.Abs(m["Kd"][0]-c.grey) > digits || m["Kd"][1] != m["Kd"][0] || m["Kd"][2] != m["Kd"][0] {
			t.Errorf("%s: Kd %v, want %g", c.name, m["Kd"], c.grey)
		}
		if math.Abs(m["Tr"][0]-c.tr) > digits || math.Abs(m["d"][0]-1+c.tr) > digits {
			t.Errorf("%s: Tr %v and d %v, want %g and %g", c.name, m["Tr"], m["d"], c.tr, 1-c.tr)
		}
	}
	if len(got) != 7 {
		t.Errorf("%d materials, want 7", len(got))
	}
}
