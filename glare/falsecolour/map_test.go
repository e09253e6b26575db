package falsecolour

import (
	"errors"
	"image/color"
	"math"
	"testing"
)

// linear is the sRGB transfer function. Source: IEC 61966-2-1:1999, 4.2.
func linear(v uint8) float64 {
	c := float64(v) / 255
	if c <= 0.04045 {
		return c / 12.92
	}
	return math.Pow((c+0.055)/1.055, 2.4)
}

// relative is the luminance of a colour, white being 1. Source:
// Recommendation ITU-R BT.709-6, item 3.2, for the primaries of sRGB.
func relative(c color.RGBA) float64 {
	return 0.2126*linear(c.R) + 0.7152*linear(c.G) + 0.0722*linear(c.B)
}

// lightness is CIE 1976 L*. Source: CIE 15:2004, eq. 8.3 and 8.6.
func lightness(c color.RGBA) float64 {
	y := relative(c)
	if y <= 216.0/24389 {
		return 24389.0 / 27 * y
	}
	return 116*math.Cbrt(y) - 16
}

// rises reports the largest step backwards in lightness over neighbours, and
// whether it rises over every eight entries.
func rises(m func(t float64) color.RGBA) (back float64, overall bool) {
	overall = true
	l := make([]float64, 256)
	for i := range l {
		l[i] = lightness(m(float64(i) / 255))
		if i > 0 {
			back = math.Max(back, l[i-1]-l[i])
		}
		if i >= 8 && l[i] <= l[i-8] {
			overall = false
		}
	}
	return back, overall
}

func TestMapsRise(t *testing.T) {
	for m := range Map(len(maps)) {
		back, overall := rises(m.At)
		// Rounding to 8 bits moves a channel by half a step: all three
		// together at most 0.5/255 in sRGB, a lightness of 0.2; two
		// neighbours twice that.
		if back > 0.4 || !overall {
			t.Errorf("%s: lightness falls by %.2f, rises overall: %t", m, back, overall)
		}
		if span := lightness(m.At(1)) - lightness(m.At(0)); span < 70 {
			t.Errorf("%s: lightness spans %.0f, want 70 or more for grey print", m, span)
		}
	}
	// The twin: a map that turns back must be noticed.
	if back, overall := rises(func(t float64) color.RGBA { return Inferno.At(math.Sin(2 * t)) }); back < 0.4 && overall {
		t.Error("a map that turns back was not noticed")
	}
}

func TestMapEnds(t *testing.T) {
	for _, c := range []struct {
		m         Map
		low, high [3]float64 // the authors' tables: see tables.go
	}{
		{Inferno, [3]float64{0.001462, 0.000466, 0.013866}, [3]float64{0.988362, 0.998364, 0.644924}},
		{Viridis, [3]float64{0.267004, 0.004874, 0.329415}, [3]float64{0.993248, 0.906157, 0.143936}},
		{Cividis, [3]float64{0.000000, 0.135112, 0.304751}, [3]float64{0.995737, 0.909344, 0.217772}},
	} {
		for _, end := range []struct {
			t    float64
			want [3]float64
		}{{0, c.low}, {-3, c.low}, {math.NaN(), c.low}, {math.Inf(-1), c.low}, {1, c.high}, {7, c.high}, {math.Inf(1), c.high}} {
			got := c.m.At(end.t)
			for i, v := range [...]uint8{got.R, got.G, got.B} {
				if want := uint8(math.Round(end.want[i] * 255)); v != want {
					t.Errorf("%s at %g: got %v, want %v", c.m, end.t, got, end.want)
				}
			}
		}
	}
}

func TestParseMap(t *testing.T) {
	for m := range Map(len(maps)) {
		if got, err := ParseMap(m.String()); got != m || err != nil {
			t.Errorf("%s: got %s, %v", m, got, err)
		}
	}
	if _, err := ParseMap("rainbow"); !errors.Is(err, ErrInvalid) {
		t.Errorf("rainbow: got %v", err)
	}
}

// TestContrast: text on paper, by the contrast ratio of WCAG 2.1 (W3C 2018),
// which asks for 4.5 and, at its higher level, 7.
func TestContrast(t *testing.T) {
	for _, c := range []struct {
		colour uint32
		least  float64
	}{{ink, 7}, {quiet, 4.5}} {
		if got := (relative(rgb(paper)) + 0.05) / (relative(rgb(c.colour)) + 0.05); got < c.least {
			t.Errorf("%06x on paper: got contrast %.1f, want %g", c.colour, got, c.least)
		}
	}
}
