package sampling

import (
	"math"
	"testing"
)

func TestOwenIsNested(t *testing.T) {
	// By definition: the first k digits of the result depend on the first k of x.
	s := NewStream(testSeed)
	for range 2000 {
		x, seed, k := s.Uint32(), s.Uint32(), 1+s.Intn(32)
		y := x ^ uint32(uint64(s.Uint32())>>k)
		if d := Owen(x, seed) ^ Owen(y, seed); uint64(d)>>(32-k) != 0 {
			t.Fatalf("x %08x and %08x agree in %d digits, their scrambles do not", x, y, k)
		}
	}
}

// flips counts, over seeds, the joint flips of digit k in two prefixes that
// differ in digit k-1 alone.
func flips(k int, scramble func(x, seed uint32) uint32) []int {
	counts := make([]int, 4)
	s := NewStream(testSeed, uint64(k))
	bit := uint32(1) << (31 - k)
	for range 8192 {
		seed, x := s.Uint32(), s.Uint32()
		y := x ^ bit<<1
		a := (scramble(x, seed) ^ x) & bit / bit
		b := (scramble(y, seed) ^ y) & bit / bit
		counts[2*a+b]++
	}
	return counts
}

func TestOwenFlipsAreRandom(t *testing.T) {
	level := sidak(31)
	for k := 1; k < 32; k++ {
		mustFit(t, "flips of a digit in neighbouring prefixes", level, flips(k, Owen), even(4, 8192))
	}
	shift := func(x, seed uint32) uint32 { return x ^ seed }
	mustNotFit(t, "digital shift", level, flips(5, shift), even(4, 8192))
}

func TestOwenSobolNet(t *testing.T) {
	for seed := range uint32(20) {
		for m := 0; m <= 8; m++ {
			first := seed << m // an aligned block, another for each seed
			net := isNet(m, func(i uint32) (x, y uint32) {
				u, v := OwenSobol2(first+i, seed)
				return uint32(u / to01), uint32(v / to01)
			})
			if !net {
				t.Errorf("seed %d: block of 2^%d points is no (0,m,2)-net", seed, m)
			}
		}
	}
}

func TestOwenSobolFormsAgree(t *testing.T) {
	var all [2*Dims + 3]float64
	for i := range uint32(100) {
		OwenSobolInto(all[:], i, 9)
		for d, got := range all {
			if want := OwenSobol(d, i, 9); got != want {
				t.Fatalf("index %d dim %d: got %g, want %g", i, d, got, want)
			}
			if got < 0 || got >= 1 {
				t.Fatalf("index %d dim %d: %g outside [0, 1)", i, d, got)
			}
		}
		if u, v := OwenSobol2(i, 9); u != all[0] || v != all[1] {
			t.Fatalf("index %d: OwenSobol2 differs", i)
		}
	}
}

// A single point must be uniform over seeds, and two dimensions independent.
func TestOwenSobolUniformOverSeeds(t *testing.T) {
	const n = 40000
	pairs := [][2]int{{0, 1}, {1, 2}, {6, 7}, {0, 15}, {3, Dims + 3}}
	indices := []uint32{0, 1, 255}
	level := sidak(len(pairs) * len(indices))
	for _, d := range pairs {
		for _, index := range indices {
			counts := make([]int, 256)
			for seed := range uint32(n) {
				u, v := OwenSobol(d[0], index, seed), OwenSobol(d[1], index, seed)
				counts[int(u*16)*16+int(v*16)]++
			}
			mustFit(t, "one point over seeds", level, counts, even(256, n))
		}
	}
	counts := make([]int, 256) // unscrambled: the same point whatever the seed
	for range uint32(n) {
		counts[int(float64(Sobol(0, 1))*to01*16)*16]++
	}
	mustNotFit(t, "unscrambled point", level, counts, even(256, n))
}

// spread integrates f over n points of each of many seeds and returns the mean
// of the estimates, its standard error and the variance of one estimate.
func spread(points func(seed, i uint32) (u, v float64), f func(u, v float64) float64, n, seeds uint32) (mean, stdErr, variance float64) {
	var s1, s2 float64
	for seed := range seeds {
		var sum float64
		for i := range n {
			sum += f(points(seed, i))
		}
		e := sum / float64(n)
		s1 += e
		s2 += e * e
	}
	m := float64(seeds)
	mean = s1 / m
	variance = (s2 - m*mean*mean) / (m - 1)
	return mean, math.Sqrt(variance / m), variance
}

func TestOwenSobolIntegrates(t *testing.T) {
	const n, seeds = 64, 1000
	f := func(u, v float64) float64 { return math.Exp(u) * math.Exp(v) }
	exact := (math.E - 1) * (math.E - 1) // elementary
	// Variance of f: (e^2-1)^2/4 - exact^2, elementary; of n random points 1/n of it.
	random := (math.Pow((math.E*math.E-1)/2, 2) - exact*exact) / n
	owen := func(seed, i uint32) (u, v float64) { return OwenSobol2(i, seed) }
	mean, se, variance := spread(owen, f, n, seeds)
	const z = 2.58 // two-sided 0.01
	if math.Abs(mean-exact) > z*se {
		t.Errorf("mean over seeds %.6f, want %.6f within %.6f", mean, exact, z*se)
	}
	// Owen, 1997, "Scrambled net variance for integrals of smooth functions",
	// Annals of Statistics 25: variance falls as n^-3 (log n), so far below n^-1.
	if variance > random/100 {
		t.Errorf("variance %.3g, want below a hundredth of random points' %.3g", variance, random)
	}
	biased := func(seed, i uint32) (u, v float64) { u, v = OwenSobol2(i, seed); return u * 0.999, v }
	if mean, se, _ := spread(biased, f, n, seeds); math.Abs(mean-exact) <= z*se {
		t.Errorf("coordinates 0.1 %% too small: planted defect not seen")
	}
}

func BenchmarkOwenSobol2(b *testing.B) {
	var sum float64
	i := uint32(0)
	for b.Loop() {
		u, v := OwenSobol2(i, 5)
		sum += u + v
		i++
	}
	sink = sum
}

func BenchmarkOwenSobolInto8(b *testing.B) {
	var x [8]float64
	i := uint32(0)
	for b.Loop() {
		OwenSobolInto(x[:], i, 5)
		i++
	}
	sink = x[7]
}
