package sampling

import "math/bits"

// Dims is the number of dimensions that Sobol and OwenSobol know.
const Dims = 16

// joeKuo holds the primitive polynomials and initial direction numbers of the
// dimensions 2 to 16 (our 1 to 15): degree s, inner coefficients a, m_1..m_s.
// Source: Joe, Kuo, 2008, "Constructing Sobol sequences with better
// two-dimensional projections", SIAM J. Sci. Comput. 30(5), table
// new-joe-kuo-6; written from memory, then found equal to the copy of that
// table in SciPy 1.10.1, a general numerical library.
var joeKuo = [Dims - 1]struct {
	s int
	a uint32
	m [6]uint32
}{
	{1, 0, [6]uint32{1}},
	{2, 1, [6]uint32{1, 3}},
	{3, 1, [6]uint32{1, 3, 1}},
	{3, 2, [6]uint32{1, 1, 1}},
	{4, 1, [6]uint32{1, 1, 3, 3}},
	{4, 4, [6]uint32{1, 3, 5, 13}},
	{5, 2, [6]uint32{1, 1, 5, 5, 17}},
	{5, 4, [6]uint32{1, 1, 5, 5, 5}},
	{5, 7, [6]uint32{1, 1, 7, 11, 19}},
	{5, 11, [6]uint32{1, 1, 5, 1, 1}},
	{5, 13, [6]uint32{1, 1, 1, 3, 11}},
	{5, 14, [6]uint32{1, 3, 5, 5, 31}},
	{6, 1, [6]uint32{1, 3, 3, 9, 7, 49}},
	{6, 13, [6]uint32{1, 1, 1, 15, 21, 21}},
	{6, 16, [6]uint32{1, 3, 1, 13, 27, 49}},
}

// sobolBytes[d][k][b] is the exclusive or of the direction numbers that byte k
// of the index, with value b, selects in dimension d.
var sobolBytes = sobolTable()

// directions returns the 32 direction numbers of a dimension as fractions of
// 2^32, by the recurrence of the source above, equation 2 (number from memory).
func directions(dim int) [32]uint32 {
	var v [32]uint32
	if dim == 0 {
		for i := range v {
			v[i] = 1 << (31 - i)
		}
		return v
	}
	p := joeKuo[dim-1]
	for i := 0; i < p.s; i++ {
		v[i] = p.m[i] << (31 - i)
	}
	for i := p.s; i < 32; i++ {
		v[i] = v[i-p.s] ^ v[i-p.s]>>p.s
		for k := 1; k < p.s; k++ {
			if p.a>>(p.s-1-k)&1 == 1 {
				v[i] ^= v[i-k]
			}
		}
	}
	return v
}

func sobolTable() (t [Dims][4][256]uint32) {
	for d := range t {
		v := directions(d)
		for k := range t[d] {
			for b := range t[d][k] {
				var x uint32
				for i := 0; i < 8; i++ {
					if b>>i&1 == 1 {
						x ^= v[8*k+i]
					}
				}
				t[d][k][b] = x
			}
		}
	}
	return t
}

// Sobol returns coordinate dim of point index of the Sobol sequence, in units
// of 2^-32, counted in binary order (not Gray code). Dimension 0 is the van der
// Corput sequence. Dimensions wrap around at Dims: a dim outside 0 to Dims-1
// repeats an earlier one.
func Sobol(dim int, index uint32) uint32 {
	if dim == 0 {
		return bits.Reverse32(index)
	}
	t := &sobolBytes[uint(dim)%Dims]
	return t[0][index&255] ^ t[1][index>>8&255] ^ t[2][index>>16&255] ^ t[3][index>>24]
}
