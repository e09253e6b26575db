package luminance

import "math"

// fromHalf widens an IEEE 754 binary16 number; every one has an exact float.
func fromHalf(h uint16) float32 {
	sign := uint32(h&0x8000) << 16
	exponent, mantissa := uint32(h>>10&0x1f), uint32(h&0x3ff)
	switch exponent {
	case 0: // zero and denormal
		v := float32(mantissa) * (1.0 / (1 << 24))
		return math.Float32frombits(sign | math.Float32bits(v))
	case 0x1f: // infinity and NaN
		return math.Float32frombits(sign | 0x7f800000 | mantissa<<13)
	}
	return math.Float32frombits(sign | (exponent+127-15)<<23 | mantissa<<13)
}
