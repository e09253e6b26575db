package mesh

import "testing"

func TestUnit(t *testing.T) {
	tests := []struct {
		name string
		want float64 // metres; exact: NIST SP 811 (2008), appendix B.8, and the SI prefixes
	}{
		{"m", 1}, {"cm", 1e-2}, {"mm", 1e-3}, {"ft", 0.3048}, {"in", 0.0254},
	}
	for _, tt := range tests {
		u, err := ParseUnit(tt.name)
		if err != nil || u.Metres() != tt.want || u.String() != tt.name {
			t.Errorf("ParseUnit(%q) = %v of %g m, %v; want %g m", tt.name, u, u.Metres(), err, tt.want)
		}
	}
	for _, s := range []string{"", "M", "metre", "inch", "km"} {
		if u, err := ParseUnit(s); err == nil || u != NoUnit {
			t.Errorf("ParseUnit(%q) = %v, %v, want an error", s, u, err)
		}
	}
	for _, u := range []Unit{NoUnit, -1, 99} {
		if u.Metres() != 0 || u.String() != "" {
			t.Errorf("unit %d: got %q of %g m, want nothing", int(u), u, u.Metres())
		}
	}
}
