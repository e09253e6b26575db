package sampling

import "math/bits"

const to01 = 0x1p-32

// Owen scrambles x, a number in units of 2^-32, by nested uniform scrambling:
// each binary digit is flipped or not depending on the digits before it and on
// the seed. Seeds should be hashes; those of neighbouring numbers are not
// independent.
// Source: Burley, 2020, "Practical hash-based Owen scrambling", JCGT 9(4),
// listing 3 (number from memory), after Laine, Karras, 2011, "Stratified
// sampling for stochastic transparency", EGSR; the multipliers are from memory.
// The construction is exact for any even multipliers, their values only decide
// how well the flips look random: owen_test.go measures it.
func Owen(x, seed uint32) uint32 {
	x = bits.Reverse32(x) + seed
	x ^= x * 0x6c50b47c
	x ^= x * 0xb82f1e52
	x ^= x * 0xc7afe638
	x ^= x * 0x8d22f6e6
	return bits.Reverse32(x)
}

// OwenSobol returns coordinate dim of point index of the shuffled, scrambled
// Sobol sequence of a seed, in [0, 1). Every seed gives its own order of
// points and its own scrambles, so that sequences of different seeds may be
// padded together to more dimensions. Any aligned block of 2^m indices is
// stratified like the Sobol block it stands for. From dim = Dims on the
// sequence starts again with another shuffle: stratified within each group of
// Dims coordinates, independent between groups. Domain: dim >= 0.
// Source: Burley, 2020, as for Owen, section 3 (shuffling and padding).
func OwenSobol(dim int, index, seed uint32) float64 {
	k := groupKey(seed, dim/Dims)
	d := dim % Dims
	return float64(Owen(Sobol(d, Owen(index, uint32(k))), dimSeed(k, d))) * to01
}

// OwenSobol2 returns the coordinates 0 and 1 of OwenSobol.
func OwenSobol2(index, seed uint32) (u, v float64) {
	k := groupKey(seed, 0)
	i := Owen(index, uint32(k))
	u = float64(Owen(bits.Reverse32(i), dimSeed(k, 0))) * to01
	v = float64(Owen(Sobol(1, i), dimSeed(k, 1))) * to01
	return u, v
}

// OwenSobolInto fills dst with the coordinates 0 to len(dst)-1 of OwenSobol.
func OwenSobolInto(dst []float64, index, seed uint32) {
	for first := 0; first < len(dst); first += Dims {
		k := groupKey(seed, first/Dims)
		i := Owen(index, uint32(k))
		for d := range min(len(dst)-first, Dims) {
			dst[first+d] = float64(Owen(Sobol(d, i), dimSeed(k, d))) * to01
		}
	}
}

func groupKey(seed uint32, group int) uint64 {
	return mix64(uint64(seed) + uint64(group+1)*goldenGamma)
}

// dimSeed hashes the seeds of the dimensions apart. The key's low half seeds
// the shuffle.
func dimSeed(k uint64, dim int) uint32 {
	return uint32(mix64(k+uint64(dim+1)*goldenGamma) >> 32)
}
