package sampling

import "math/bits"

// Constants of SplitMix64. goldenGamma is the odd integer nearest 2^64 divided
// by the golden ratio.
// Source: Steele, Lea, Flood, 2014, "Fast splittable pseudorandom number
// generators", OOPSLA, figures 16 and 17 (figure numbers from memory); the
// multipliers of mix64 are variant 13 of Stafford, 2011, "Better bit mixing",
// those of mixKey are Appleby's 64 bit finaliser of MurmurHash3, 2011. All
// constants are from memory; stream_test.go compares mix64 with the published
// first outputs.
const (
	goldenGamma = 0x9e3779b97f4a7c15
	mixA        = 0xbf58476d1ce4e5b9
	mixB        = 0x94d049bb133111eb
	keyA        = 0xff51afd7ed558ccd
	keyB        = 0xc4ceb9fe1a85ec53

	// minTransitions is the least number of 01 and 10 pairs of bits that an
	// increment must have; source as above, section 5.
	minTransitions = 24
)

// Stream is a stream of random numbers, a value without allocations. Two
// streams made from different keys start at different hashed counters and step
// by different hashed odd increments (63 bits of them), so they do not run
// into one another even when the keys form arithmetic progressions.
//
// The zero Stream is not useful. A Stream must not be shared by goroutines.
type Stream struct {
	state, gamma uint64
}

// NewStream returns the stream of a seed and any number of keys. The order of
// keys matters, and so does their number.
func NewStream(seed uint64, keys ...uint64) Stream {
	s, g := start(seed)
	for _, k := range keys {
		s, g = absorb(s, g, k)
	}
	return finish(s, g)
}

// Stream2 is NewStream(seed, a).
func Stream2(seed, a uint64) Stream {
	s, g := start(seed)
	return finish(absorb(s, g, a))
}

// Stream3 is NewStream(seed, a, b).
func Stream3(seed, a, b uint64) Stream {
	s, g := start(seed)
	s, g = absorb(s, g, a)
	return finish(absorb(s, g, b))
}

// Stream4 is NewStream(seed, a, b, c).
func Stream4(seed, a, b, c uint64) Stream {
	s, g := start(seed)
	s, g = absorb(s, g, a)
	s, g = absorb(s, g, b)
	return finish(absorb(s, g, c))
}

// Uint64 returns the next 64 random bits.
func (s *Stream) Uint64() uint64 {
	s.state += s.gamma
	return mix64(s.state)
}

// Uint32 returns the next 32 random bits, for instance a seed for Owen.
func (s *Stream) Uint32() uint32 { return uint32(s.Uint64() >> 32) }

// Float64 returns the next number, uniform on the multiples of 2^-53 in [0, 1).
func (s *Stream) Float64() float64 {
	s.state += s.gamma
	return float64(mix64(s.state)>>11) * 0x1p-53
}

// Intn returns the next integer in [0, n), or 0 where n < 1. The largest bias
// of one value is n/2^64, far below what any run can show.
func (s *Stream) Intn(n int) int {
	if n < 1 {
		return 0
	}
	hi, _ := bits.Mul64(s.Uint64(), uint64(n))
	return int(hi)
}

// Hash returns 64 well mixed bits of a seed and keys, the hash behind NewStream.
func Hash(seed uint64, keys ...uint64) uint64 {
	s := NewStream(seed, keys...)
	return s.Uint64()
}

func start(seed uint64) (s, g uint64) {
	return mix64(seed + goldenGamma), mixKey(seed ^ keyB)
}

// absorb runs two chains with different mixers: the keys of two streams would
// have to collide in both for the streams to be one.
func absorb(s, g, key uint64) (uint64, uint64) {
	return mix64((s ^ key) + goldenGamma), mixKey(bits.RotateLeft64(g, 23) + key*goldenGamma)
}

func finish(s, g uint64) Stream {
	g = mixKey(g) | 1
	if bits.OnesCount64(g^(g>>1)) < minTransitions {
		g ^= 0xaaaaaaaaaaaaaaaa
	}
	return Stream{state: s, gamma: g}
}

func mix64(z uint64) uint64 {
	z = (z ^ (z >> 30)) * mixA
	z = (z ^ (z >> 27)) * mixB
	return z ^ (z >> 31)
}

func mixKey(z uint64) uint64 {
	z = (z ^ (z >> 33)) * keyA
	z = (z ^ (z >> 33)) * keyB
	return z ^ (z >> 33)
}
