package falsecolour

import (
	"math"
	"testing"
)

func TestTrace(t *testing.T) {
	const n = 41
	field := func(f func(x, y float64) float64) []float64 {
		out := make([]float64, n*n)
		for i := range out {
			out[i] = f(float64(i%n)+0.5, float64(i/n)+0.5) // values at pixel centres
		}
		return out
	}

	// A plane: the line is straight and exact.
	lines := trace(field(func(x, y float64) float64 { return x + y }), n, n, 30.25)
	if len(lines) != 1 || lines[0].closed {
		t.Fatalf("plane: got %d lines", len(lines))
	}
	for _, p := range lines[0].points {
		if math.Abs(p.x+p.y-30.25) > 1e-9 {
			t.Errorf("plane: (%g, %g) is not on x + y = 30.25", p.x, p.y)
		}
	}

	// A cone: one closed circle. Linear interpolation of a distance r along a
	// side of length 1 is off by at most 1/(8 r).
	const r = 12.3
	lines = trace(field(func(x, y float64) float64 { return math.Hypot(x-20.5, y-20.5) }), n, n, r)
	if len(lines) != 1 || !lines[0].closed {
		t.Fatalf("cone: got %d lines", len(lines))
	}
	for _, p := range lines[0].points {
		if d := math.Hypot(p.x-20.5, p.y-20.5); math.Abs(d-r) > 1/(8*(r-1)) {
			t.Errorf("cone: (%g, %g) has radius %g, want %g", p.x, p.y, d, r)
		}
	}
	// The polygon of some 80 chords is shorter than the circle by less than
	// the sagitta of a chord of 1.5: (1.5/2r)^2/6 of its length.
	if l := lines[0].length(); math.Abs(l/(2*math.Pi*r)-1) > 1/(8*r*(r-1))+1.5*1.5/(24*r*r) {
		t.Errorf("cone: length %g, want %g", l, 2*math.Pi*r)
	}

	// Two hills beside each other: two lines.
	lines = trace(field(func(x, y float64) float64 {
		return math.Exp(-((x-10)*(x-10)+(y-20)*(y-20))/20) + math.Exp(-((x-30)*(x-30)+(y-20)*(y-20))/20)
	}), n, n, 0.5)
	if len(lines) != 2 || !lines[0].closed || !lines[1].closed {
		t.Errorf("hills: got %d lines, want 2 closed", len(lines))
	}

	// A hole of NaN cuts the line.
	f := field(func(x, y float64) float64 { return y })
	f[20*n+20] = math.NaN()
	if lines = trace(f, n, n, 20.25); len(lines) != 2 {
		t.Errorf("hole: got %d lines, want 2", len(lines))
	}
}

func TestSaddle(t *testing.T) {
	// Corners 1 0 / 0 1: with the mean above the level the ones are joined,
	// so that the lines cut off the zeros; else the other way round.
	corners := []float64{1, 0, 0, 1}
	for level, joined := range map[float64]bool{0.4: true, 0.6: false} {
		lines := trace(corners, 2, 2, level)
		if len(lines) != 2 {
			t.Fatalf("level %g: got %d lines", level, len(lines))
		}
		for _, l := range lines {
			mid := point{(l.points[0].x + l.points[1].x) / 2, (l.points[0].y + l.points[1].y) / 2}
			// The zeros are at (1.5, 0.5) and (0.5, 1.5), on x + y = 2; lines
			// around them have their middle on it, lines around the ones not.
			if onDiagonal := math.Abs(mid.x+mid.y-2) < 1e-9; onDiagonal != joined {
				t.Errorf("level %g: line through (%g, %g), ones joined: %t", level, mid.x, mid.y, joined)
			}
		}
	}
}

func TestEdges(t *testing.T) {
	p := &picture{Figure: &Figure{Width: 5, Height: 4}}
	for name, c := range map[string]struct {
		pixels []int32
		want   int // sides of the outline, by hand
	}{
		"one":            {[]int32{7}, 4},
		"two":            {[]int32{7, 8}, 6},
		"row end":        {[]int32{4, 5}, 8}, // neighbours in the slice, not in the image
		"ring":           {[]int32{0, 1, 2, 5, 7, 10, 11, 12}, 12 + 4},
		"bottom corners": {[]int32{15, 19}, 8},
	} {
		if got := len(p.edges(c.pixels)); got != c.want {
			t.Errorf("%s: got %d sides, want %d", name, got, c.want)
		}
	}
}
