package sampling

import "testing"

func TestSobolPublishedPoints(t *testing.T) {
	// First points in Gray code order, three dimensions. Source: Joe, Kuo, 2008,
	// "Notes on generating Sobol' sequences" (from memory).
	want := [][3]float64{{0, 0, 0}, {.5, .5, .5}, {.75, .25, .25}, {.25, .75, .75},
		{.375, .375, .625}, {.875, .875, .125}, {.625, .125, .875}, {.125, .625, .375}}
	for n, w := range want {
		for d := range 3 {
			if got := float64(Sobol(d, uint32(n^n>>1))) * to01; got != w[d] {
				t.Errorf("point %d dim %d: got %g, want %g", n, d, got, w[d])
			}
		}
	}
}

func TestSobolTableEqualsDirections(t *testing.T) {
	s := NewStream(testSeed)
	for d := range Dims {
		v := directions(d)
		for range 200 {
			index := s.Uint32()
			var want uint32 // by definition: exclusive or of the selected numbers
			for i := range 32 {
				if index>>i&1 == 1 {
					want ^= v[i]
				}
			}
			if got := Sobol(d, index); got != want {
				t.Fatalf("dim %d index %d: got %08x, want %08x", d, index, got, want)
			}
		}
	}
	if Sobol(Dims+3, 77) != Sobol(3, 77) {
		t.Error("dimensions do not wrap around")
	}
}

// propertyA reports whether the first 2^d points put one point in each of the
// 2^d halves-of-every-axis boxes of the dimensions 0 to d-1.
func propertyA(d int, coordinate func(dim int, index uint32) uint32) bool {
	seen := make([]bool, 1<<d)
	for i := range uint32(1 << d) {
		box := 0
		for k := range d {
			box = box<<1 | int(coordinate(k, i)>>31)
		}
		if seen[box] {
			return false
		}
		seen[box] = true
	}
	return true
}

// Source: Joe, Kuo, 2008: their numbers keep Sobol's property A in up to 1111
// dimensions.
func TestSobolPropertyA(t *testing.T) {
	for d := 1; d <= Dims; d++ {
		if !propertyA(d, Sobol) {
			t.Errorf("%d dimensions: property A does not hold", d)
		}
	}
	repeated := func(dim int, index uint32) uint32 { return Sobol(min(dim, 2), index) }
	if propertyA(4, repeated) {
		t.Error("a repeated dimension: planted defect not seen")
	}
}

// isNet reports whether 2^m points put one point in every dyadic box of area
// 2^-m. Source of the notion: Niederreiter, 1987, "Point sets and sequences with
// small discrepancy", Monatshefte Math. 104.
func isNet(m int, point func(i uint32) (x, y uint32)) bool {
	for a := 0; a <= m; a++ {
		seen := make([]bool, 1<<m)
		for i := range uint32(1 << m) {
			x, y := point(i)
			box := uint64(x)>>(32-a)<<(m-a) | uint64(y)>>(32-(m-a))
			if seen[box] {
				return false
			}
			seen[box] = true
		}
	}
	return true
}

func TestSobolNet(t *testing.T) {
	for m := 0; m <= 10; m++ {
		for _, block := range []uint32{0, 1, 5} {
			first := block << m
			if !isNet(m, func(i uint32) (x, y uint32) { return Sobol(0, first+i), Sobol(1, first+i) }) {
				t.Errorf("block %d of 2^%d points is no (0,m,2)-net", block, m)
			}
		}
	}
	s := NewStream(testSeed)
	if isNet(6, func(uint32) (x, y uint32) { return s.Uint32(), s.Uint32() }) {
		t.Error("random points: planted defect not seen")
	}
}
