package sampling

import (
	"math"
	"testing"
)

const testSeed = 20261201

func TestMix64Published(t *testing.T) {
	// First outputs of SplitMix64 from seed 1234567, as widely published with
	// Vigna's splitmix64.c, 2015 (from memory).
	want := []uint64{6457827717110365317, 3203168211198807973, 9817491932198370423,
		4593380528125082431, 16408922859458223821}
	s := Stream{state: 1234567, gamma: goldenGamma}
	for i, w := range want {
		if got := s.Uint64(); got != w {
			t.Errorf("output %d: got %d, want %d", i, got, w)
		}
	}
}

func TestStreamFormsAgree(t *testing.T) {
	for a := range uint64(50) {
		b, c := a*a, a+7
		if Stream2(3, a) != NewStream(3, a) || Stream3(3, a, b) != NewStream(3, a, b) ||
			Stream4(3, a, b, c) != NewStream(3, a, b, c) {
			t.Fatalf("keys %d %d %d: short form differs from NewStream", a, b, c)
		}
	}
	if NewStream(1, 2, 3) == NewStream(1, 3, 2) || NewStream(1, 0) == NewStream(1) || NewStream(1, 0) == NewStream(0, 1) {
		t.Error("order, number or place of keys does not matter, want it to")
	}
}

func TestStreamRange(t *testing.T) {
	s := Stream{gamma: 0}
	if got := s.Float64(); got != 0 {
		t.Errorf("Float64 of zero bits = %g, want 0", got)
	}
	if top := float64(uint64(math.MaxUint64)>>11) * 0x1p-53; top >= 1 {
		t.Errorf("largest Float64 = %g, want below 1", top)
	}
	s = NewStream(1)
	for range 1000 {
		if k := s.Intn(7); k < 0 || k > 6 {
			t.Fatalf("Intn(7) = %d", k)
		}
	}
	if got := s.Intn(0); got != 0 {
		t.Errorf("Intn(0) = %d, want 0", got)
	}
}

// source gives number j of the stream of key k, for tests of key patterns.
type source func(k, j int) float64

// hashed are our streams with keys in arithmetic progression.
func hashed(step uint64) source {
	return func(k, j int) float64 {
		s := Stream3(testSeed, 5, uint64(k)*step)
		for range j {
			s.Uint64()
		}
		return s.Float64()
	}
}

// congruential is the planted defect: a linear congruential generator seeded
// with the key itself. Its constants are Knuth's MMIX ones, 1999.
func congruential(k, j int) float64 {
	x := uint64(k)
	for range j + 1 {
		x = x*6364136223846793005 + 1442695040888963407
	}
	return float64(x>>11) * 0x1p-53
}

// pairCounts counts over a 16 x 16 grid the pairs of number j of neighbouring
// streams.
func pairCounts(f source, j, n int) []int {
	counts := make([]int, 256)
	for k := range n {
		counts[int(f(2*k, j)*16)*16+int(f(2*k+1, j)*16)]++
	}
	return counts
}

// withinCounts counts pairs of consecutive numbers of one stream.
func withinCounts(f source, n int) []int {
	counts := make([]int, 256)
	for k := range n {
		counts[int(f(k, 0)*16)*16+int(f(k, 1)*16)]++
	}
	return counts
}

func TestStreamsAreIndependent(t *testing.T) {
	const n = 40000
	steps := []uint64{1, 2, 64, 8760, 1 << 32, goldenGamma}
	level := sidak(3 * len(steps))
	for _, step := range steps {
		f := hashed(step)
		mustFit(t, "first numbers of neighbours", level, pairCounts(f, 0, n), even(256, n))
		mustFit(t, "third numbers of neighbours", level, pairCounts(f, 2, n), even(256, n))
		mustFit(t, "first two of one stream", level, withinCounts(f, n), even(256, n))
	}
	mustNotFit(t, "arithmetic seeds of a congruential generator", level, pairCounts(congruential, 0, n), even(256, n))
}

// correlation returns z of the correlation between whole neighbouring streams.
func correlation(f source, streams, length int) float64 {
	var sum float64
	for k := range streams {
		for j := range length {
			sum += (f(k, j) - 0.5) * (f(k+1, j) - 0.5) * 12
		}
	}
	// Each product of two independent standardised uniforms has variance 1, and
	// products of overlapping pairs are uncorrelated.
	return sum / math.Sqrt(float64(streams*length))
}

func TestStreamCorrelation(t *testing.T) {
	const z = 2.81 // two-sided 0.01 for two tests, Šidák: 1-(1-0.01)^(1/2)
	for _, step := range []uint64{1, 4096} {
		if got := correlation(hashed(step), 4000, 8); math.Abs(got) > z {
			t.Errorf("keys in steps of %d: z = %.2f, want within %.2f", step, got, z)
		}
	}
	if got := correlation(congruential, 4000, 8); math.Abs(got) < z {
		t.Errorf("congruential generator: planted defect not seen, z = %.2f", got)
	}
}

// collisions counts repeated outputs among the first numbers of many streams.
func collisions(start func(k uint64) Stream, streams, length int) int {
	seen := make(map[uint64]bool, streams*length)
	n := 0
	for k := range uint64(streams) {
		s := start(k)
		for range length {
			x := s.Uint64()
			if seen[x] {
				n++
			}
			seen[x] = true
		}
	}
	return n
}

func TestStreamsDoNotOverlap(t *testing.T) {
	// Chance of any repetition among 160,000 random 64 bit numbers: 7e-10.
	ours := func(k uint64) Stream { return Stream2(testSeed, k*goldenGamma) }
	if n := collisions(ours, 10000, 16); n != 0 {
		t.Errorf("keys in steps of the increment: %d numbers repeat, want none", n)
	}
	bits := func(k uint64) Stream { return Stream3(testSeed, 1<<(k%64), k/64) }
	if n := collisions(bits, 10000, 16); n != 0 {
		t.Errorf("single-bit keys: %d numbers repeat, want none", n)
	}
	// The planted defect: the key is the counter, without a hash.
	plain := func(k uint64) Stream { return Stream{state: k * goldenGamma, gamma: goldenGamma} }
	if n := collisions(plain, 100, 16); n == 0 {
		t.Error("unhashed keys: planted defect not seen")
	}
}

func BenchmarkStreamFloat64(b *testing.B) {
	s := NewStream(1)
	var sum float64
	for b.Loop() {
		sum += s.Float64()
	}
	sink = sum
}

func BenchmarkStream3(b *testing.B) {
	b.ReportAllocs()
	var sum float64
	k := uint64(0)
	for b.Loop() {
		s := Stream3(1, 2, k)
		sum += s.Float64()
		k++
	}
	sink = sum
}

var sink float64
