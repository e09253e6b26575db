package bvh

import "math"

// span is an axis-aligned box. The high corner is negated, so that growing is
// a minimum in all lanes; the fourth lanes are unused.
type span struct{ lo, nhi [4]float32 }

// emptySpan is the box of nothing.
var emptySpan = span{
	[4]float32{inf32, inf32, inf32, inf32},
	[4]float32{inf32, inf32, inf32, inf32},
}

var inf32 = float32(math.Inf(1))

func (s *span) add(o *span) {
	for k := range 3 {
		if o.lo[k] < s.lo[k] {
			s.lo[k] = o.lo[k]
		}
		if o.nhi[k] < s.nhi[k] {
			s.nhi[k] = o.nhi[k]
		}
	}
}

func (s *span) grow(p *prim) {
	for k := range 3 {
		if p.lo[k] < s.lo[k] {
			s.lo[k] = p.lo[k]
		}
		if p.nhi[k] < s.nhi[k] {
			s.nhi[k] = p.nhi[k]
		}
	}
}

// growMid adds the doubled middle of p.
func (s *span) growMid(p *prim) {
	for k := range 3 {
		c := p.lo[k] - p.nhi[k]
		if c < s.lo[k] {
			s.lo[k] = c
		}
		if -c < s.nhi[k] {
			s.nhi[k] = -c
		}
	}
}

// area is half the surface of the box.
func (s *span) area() float32 {
	x, y, z := s.lo[0]+s.nhi[0], s.lo[1]+s.nhi[1], s.lo[2]+s.nhi[2]
	return x*(y+z) + y*z // both factors are negative
}
