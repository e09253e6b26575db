package luminance

import (
	"bytes"
	"compress/zlib"
	"fmt"
	"io"
)

// mix prepares bytes for ZIP and RLE: bytes at even places first, then those
// at odd ones, then differences from the byte before, with 128 added. dst is
// used if large enough.
func mix(dst, raw []byte) []byte {
	dst = resize(dst, len(raw))
	even, odd := 0, (len(raw)+1)/2
	for i, b := range raw {
		if i&1 == 0 {
			dst[even] = b
			even++
		} else {
			dst[odd] = b
			odd++
		}
	}
	before := byte(0)
	for i, b := range dst {
		if i > 0 {
			dst[i] = b - before + 128
		}
		before = b
	}
	return dst
}

// unmix is the inverse of mix. It spoils mixed.
func unmix(dst, mixed []byte) []byte {
	dst = resize(dst, len(mixed))
	for i := 1; i < len(mixed); i++ {
		mixed[i] += mixed[i-1] - 128
	}
	half := (len(mixed) + 1) / 2
	for i, b := range mixed[:half] {
		dst[2*i] = b
	}
	for i, b := range mixed[half:] {
		dst[2*i+1] = b
	}
	return dst
}

func resize(b []byte, n int) []byte {
	if cap(b) < n {
		return make([]byte, n)
	}
	return b[:n]
}

// unpacker undoes the compression of chunks; it keeps its buffers.
type unpacker struct {
	inflated bytes.Buffer
	zip      io.ReadCloser
	mixed    []byte
	raw      []byte
	piz      pizState
}

// unzip returns the want bytes of a ZIP or ZIPS chunk. Memory grows as data
// comes out, not by what is wanted.
func (u *unpacker) unzip(packed []byte, want int) ([]byte, error) {
	in := bytes.NewReader(packed)
	var err error
	if u.zip == nil {
		u.zip, err = zlib.NewReader(in)
	} else {
		err = u.zip.(zlib.Resetter).Reset(in, nil)
	}
	if err != nil {
		u.zip = nil
		return nil, err
	}
	u.inflated.Reset()
	// One byte more than wanted, so that a longer chunk is noticed and the
	// checksum read.
	if _, err := io.Copy(&u.inflated, io.LimitReader(u.zip, int64(want)+1)); err != nil {
		return nil, err
	}
	if u.inflated.Len() != want {
		return nil, fmt.Errorf("got %d bytes or more, want %d", u.inflated.Len(), want)
	}
	u.raw = unmix(u.raw, u.inflated.Bytes())
	return u.raw, nil
}

// unrle returns the want bytes of an RLE chunk: a count n below 0 precedes -n
// bytes as they are, one of 0 or more a byte that stands n+1 times.
func (u *unpacker) unrle(packed []byte, want int) ([]byte, error) {
	u.mixed = u.mixed[:0]
	for i := 0; i < len(packed); {
		n := int(int8(packed[i]))
		i++
		if n < 0 {
			if i-n > len(packed) {
				return nil, fmt.Errorf("a run of %d bytes reaches past the end", -n)
			}
			u.mixed = append(u.mixed, packed[i:i-n]...)
			i -= n
		} else {
			if i == len(packed) {
				return nil, fmt.Errorf("a run of %d bytes has no value", n+1)
			}
			for range n + 1 {
				u.mixed = append(u.mixed, packed[i])
			}
			i++
		}
		if len(u.mixed) > want {
			break
		}
	}
	if len(u.mixed) != want {
		return nil, fmt.Errorf("got %d bytes or more, want %d", len(u.mixed), want)
	}
	u.raw = unmix(u.raw, u.mixed)
	return u.raw, nil
}
