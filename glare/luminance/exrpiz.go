package luminance

import (
	"encoding/binary"
	"errors"
)

// PIZ: the 16 bit words of a block are renumbered without gaps, transformed
// by a Haar wavelet in integers, and Huffman coded. Source: "Technical
// Introduction to OpenEXR" and the Foundation's library (from memory); files
// written by that library are in testdata.

var (
	errPIZShort  = errors.New("PIZ: the block ends early")
	errPIZBitmap = errors.New("PIZ: the table of values is wrong")
	errPIZLength = errors.New("PIZ: got a wrong number of words")
)

// pizState keeps the buffers of unpiz.
type pizState struct {
	lut   []uint16
	words []uint16
}

// unpiz returns the want bytes of the lines y to end.
func (u *unpacker) unpiz(packed []byte, h *exrHeader, y, end, want int) ([]byte, error) {
	le := binary.LittleEndian
	if len(packed) < 4 {
		return nil, errPIZShort
	}
	first, last := int(le.Uint16(packed)), int(le.Uint16(packed[2:]))
	packed = packed[4:]
	const bitmapBytes = 1 << 13
	var bitmap [bitmapBytes]byte
	if last >= bitmapBytes {
		return nil, errPIZBitmap
	}
	if first <= last {
		if len(packed) < last-first+1 {
			return nil, errPIZShort
		}
		copy(bitmap[first:], packed[:last-first+1])
		packed = packed[last-first+1:]
	}
	lut, largest := u.piz.values(&bitmap)

	if len(packed) < 4 {
		return nil, errPIZShort
	}
	length := int64(le.Uint32(packed))
	packed = packed[4:]
	if length > int64(len(packed)) {
		return nil, errPIZShort
	}
	words, err := unhuffman(u.piz.words[:0], packed[:length], want/2)
	if err != nil {
		return nil, err
	}
	u.piz.words = words
	if len(words) != want/2 {
		return nil, errPIZLength
	}

	// One plane after the other, each with the words of a sample side by side.
	starts := make([]int, len(h.channels))
	at := 0
	for i, c := range h.channels {
		starts[i] = at
		nx, ny := samples(c.xSampling, h.data.xMin, h.data.xMax), samples(c.ySampling, y, end)
		step := c.pixel.size() / 2
		for j := range step {
			unwavelet(words[at:], j, nx, step, ny, nx*step, largest)
		}
		at += nx * ny * step
	}
	for i, w := range words {
		words[i] = lut[w]
	}
	u.raw = resize(u.raw, want)[:0]
	for ; y <= end; y++ {
		for i, c := range h.channels {
			if y%c.ySampling != 0 {
				continue
			}
			n := samples(c.xSampling, h.data.xMin, h.data.xMax) * c.pixel.size() / 2
			for _, w := range words[starts[i] : starts[i]+n] {
				u.raw = le.AppendUint16(u.raw, w)
			}
			starts[i] += n
		}
	}
	return u.raw, nil
}

// values returns the words that occur, in ascending order, then zeros, and
// the number of the largest. 0 counts as occurring always.
func (p *pizState) values(bitmap *[1 << 13]byte) (lut []uint16, largest int) {
	if p.lut == nil {
		p.lut = make([]uint16, 1<<16)
	}
	n := 0
	for i := range 1 << 16 {
		if i == 0 || bitmap[i>>3]&(1<<(i&7)) != 0 {
			p.lut[n] = uint16(i)
			n++
		}
	}
	clear(p.lut[n:])
	return p.lut, n - 1
}
