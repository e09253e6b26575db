package sampling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

const (
	thetaCells, phiCells = 12, 24
	// draws lets a density 5 % off add 0.05^2 x draws = 500 to a statistic whose
	// standard deviation is sqrt(2 x 287) = 24.
	draws = 200000
)

// expectedCells integrates a density that depends on the polar angle over
// cells of equal polar angle up to maxRad and equal azimuth, by Simpson's rule.
func expectedCells(maxRad float64, pdf func(theta float64) float64) []float64 {
	const sub = 64
	e := make([]float64, thetaCells*phiCells)
	for i := range thetaCells {
		lo, h := maxRad*float64(i)/thetaCells, maxRad/thetaCells/sub
		var sum float64
		for j := 0; j <= sub; j++ {
			w := float64(2 + 2*(j%2))
			if j == 0 || j == sub {
				w = 1
			}
			theta := lo + float64(j)*h
			if j == sub { // stay inside: the density may end at maxRad
				theta -= 1e-12 * maxRad
			}
			sum += w * pdf(theta) * math.Sin(theta)
		}
		share := sum * h / 3 * 2 * math.Pi / phiCells
		for k := range phiCells {
			e[i*phiCells+k] = share * draws
		}
	}
	return e
}

func countCells(t *testing.T, maxRad float64, warp func(u, v float64) r3.Vec) []int {
	t.Helper()
	counts := make([]int, thetaCells*phiCells)
	s := NewStream(testSeed)
	for range draws {
		w := warp(s.Float64(), s.Float64())
		if n := r3.Norm(w); math.Abs(n-1) > 1e-12 {
			t.Fatalf("direction %v has length %g", w, n)
		}
		theta := math.Atan2(math.Hypot(w.X, w.Y), w.Z)
		phi := math.Atan2(w.Y, w.X) + math.Pi
		i := min(int(theta/maxRad*thetaCells), thetaCells-1)
		counts[i*phiCells+min(int(phi/(2*math.Pi)*phiCells), phiCells-1)]++
		if theta > maxRad*(1+1e-9) {
			t.Fatalf("direction %v lies %g rad from the axis, want at most %g", w, theta, maxRad)
		}
	}
	return counts
}

func TestDirectionWarps(t *testing.T) {
	const sunRad = 0.533 / 2 * math.Pi / 180 // mean angular radius of the sun
	inside := func(r float64) func(float64) float64 {
		return func(float64) float64 { return ConePDF(r) }
	}
	tests := []struct {
		name   string
		maxRad float64
		warp   func(u, v float64) r3.Vec
		pdf    func(theta float64) float64
	}{
		{"cosine hemisphere", math.Pi / 2, CosineHemisphere, func(x float64) float64 { return CosineHemispherePDF(math.Cos(x)) }},
		{"uniform hemisphere", math.Pi / 2, UniformHemisphere, func(x float64) float64 { return UniformHemispherePDF(math.Cos(x)) }},
		{"sphere", math.Pi, UniformSphere, func(float64) float64 { return 1 / (4 * math.Pi) }},
		{"sun's disc", sunRad, func(u, v float64) r3.Vec { return Cone(u, v, sunRad) }, inside(sunRad)},
		{"wide cone", 2, func(u, v float64) r3.Vec { return Cone(u, v, 2) }, inside(2)},
	}
	level := sidak(len(tests))
	for _, c := range tests {
		expected := expectedCells(c.maxRad, c.pdf)
		counts := countCells(t, c.maxRad, c.warp)
		var sum float64
		for _, e := range expected {
			sum += e / draws
		}
		if math.Abs(sum-1) > 1e-7 { // exact: a density; Simpson's rule with 64 steps
			t.Errorf("%s: density integrates to %.9f, want 1", c.name, sum)
		}
		mustFit(t, c.name, level, counts, expected)
		for i := range expected { // the planted defect
			expected[i] *= 1.05
		}
		mustNotFit(t, c.name+", density x 1.05", level, counts, expected)
	}
	cosine := expectedCells(math.Pi/2, tests[0].pdf)
	mustNotFit(t, "cosine dropped", level, countCells(t, math.Pi/2, UniformHemisphere), cosine)
}

func TestDisc(t *testing.T) {
	count := func(disc func(u, v float64) (x, y float64)) []int {
		counts := make([]int, 144)
		s := NewStream(testSeed, 1)
		for range draws {
			x, y := disc(s.Float64(), s.Float64())
			r2 := min(x*x+y*y, 1-1e-12)
			phi := (math.Atan2(y, x) + math.Pi) / (2 * math.Pi)
			counts[int(r2*12)*12+min(int(phi*12), 11)]++ // rings of equal area
		}
		return counts
	}
	mustFit(t, "disc", sidak(1), count(Disc), even(144, draws))
	polar := func(u, v float64) (x, y float64) { // radius without the square root
		s, c := math.Sincos(2 * math.Pi * v)
		return u * c, u * s
	}
	mustNotFit(t, "disc, radius uniform", sidak(1), count(polar), even(144, draws))
	// Exact: Shirley, Chiu, 1997: centre to centre, edges to the rim.
	for _, c := range []struct{ u, v, x, y float64 }{
		{0.5, 0.5, 0, 0}, {1, 0.5, 1, 0}, {0, 0.5, -1, 0}, {0.5, 1, 0, 1}, {0.5, 0, 0, -1},
		{1, 1, math.Sqrt2 / 2, math.Sqrt2 / 2}, {0, 0, -math.Sqrt2 / 2, -math.Sqrt2 / 2}, {0.75, 0.5, 0.5, 0},
	} {
		if x, y := Disc(c.u, c.v); math.Hypot(x-c.x, y-c.y) > 1e-15 {
			t.Errorf("Disc(%g, %g) = %g, %g, want %g, %g", c.u, c.v, x, y, c.x, c.y)
		}
	}
}

func TestTriangle(t *testing.T) {
	const n = 8 // n^2 equal small triangles
	count := func(f func(u, v float64) (b0, b1, b2 float64)) []int {
		counts := make([]int, 2*n*n)
		s := NewStream(testSeed, 2)
		for range draws {
			b0, b1, b2 := f(s.Float64(), s.Float64())
			if b0 < 0 || b1 < 0 || b2 < 0 || math.Abs(b0+b1+b2-1) > 1e-15 {
				t.Fatalf("weights %g %g %g", b0, b1, b2)
			}
			i, j := int(b1*n), int(b2*n)
			half := 0
			if b1*n-float64(i)+b2*n-float64(j) > 1 {
				half = 1
			}
			counts[(i*n+j)*2+half]++
		}
		return counts
	}
	cells := func(counts []int) (observed []int) { // those inside the triangle
		for i := range n {
			for j := range n - i {
				observed = append(observed, counts[(i*n+j)*2])
				if i+j < n-1 {
					observed = append(observed, counts[(i*n+j)*2+1])
				}
			}
		}
		return observed
	}
	mustFit(t, "triangle", sidak(1), cells(count(Barycentric)), even(n*n, draws))
	crowded := func(u, v float64) (b0, b1, b2 float64) { return 1 - u, u * (1 - v), u * v }
	mustNotFit(t, "triangle, square root left out", sidak(1), cells(count(crowded)), even(n*n, draws))

	a, b, c := r3.Vec{X: 1}, r3.Vec{X: 4}, r3.Vec{X: 1, Y: 4, Z: 3}
	if got := TrianglePDF(a, b, c); math.Abs(got-1/7.5) > 1e-15 { // exact: base 3, height 5
		t.Errorf("TrianglePDF = %g, want %g", got, 1/7.5)
	}
	if p := Triangle(0, 0.3, a, b, c); p != a { // exact: u = 0 is the first corner
		t.Errorf("Triangle(0, .3) = %v, want %v", p, a)
	}
}

func BenchmarkCosineHemisphere(b *testing.B) {
	s := NewStream(1)
	var sum float64
	for b.Loop() {
		sum += CosineHemisphere(s.Float64(), s.Float64()).Z
	}
	sink = sum
}
