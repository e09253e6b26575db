package luminance

// unwavelet undoes the wavelet transform of nx by ny words in place, from
// a[offset], with ox from one to the next in a row and oy from row to row.
// largest is the largest number that occurs: below 2^14 sums fit in 16 bits
// with a sign, above they wrap.
func unwavelet(a []uint16, offset, nx, ox, ny, oy, largest int) {
	pair := unpair16
	if largest < 1<<14 {
		pair = unpair14
	}
	p := 1
	for p <= min(nx, ny) {
		p <<= 1
	}
	p >>= 1
	for p2, p := p, p>>1; p >= 1; p2, p = p, p>>1 {
		ox1, oy1 := ox*p, oy*p
		y := 0
		for ; y <= ny-p2; y += p2 {
			x := 0
			for ; x <= nx-p2; x += p2 {
				i := offset + y*oy + x*ox
				l0, h0 := pair(a[i], a[i+oy1])
				l1, h1 := pair(a[i+ox1], a[i+oy1+ox1])
				a[i], a[i+ox1] = pair(l0, l1)
				a[i+oy1], a[i+oy1+ox1] = pair(h0, h1)
			}
			if nx&p != 0 { // odd column
				i := offset + y*oy + x*ox
				a[i], a[i+oy1] = pair(a[i], a[i+oy1])
			}
		}
		if ny&p != 0 { // odd row
			for x := 0; x <= nx-p2; x += p2 {
				i := offset + y*oy + x*ox
				a[i], a[i+ox1] = pair(a[i], a[i+ox1])
			}
		}
	}
}

// unpair14 returns two numbers from their mean and difference.
func unpair14(mean, difference uint16) (a, b uint16) {
	d := int(int16(difference))
	s := int(int16(mean)) + d&1 + d>>1
	return uint16(s), uint16(s - d)
}

// unpair16 is unpair14 modulo 2^16, with the difference offset by 2^15.
func unpair16(mean, difference uint16) (a, b uint16) {
	b = mean - difference>>1
	return difference + b - 1<<15, b
}
