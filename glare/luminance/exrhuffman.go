package luminance

import (
	"encoding/binary"
	"errors"
)

// Constants of PIZ's Huffman tables: code lengths are 6 bits each, of which
// 59 to 62 stand for 2 to 5 zeros, and 63 for 6 zeros and as many more as the
// next 8 bits say.
const (
	huffmanMaxLength = 58
	huffmanShortRun  = 59
	huffmanLongRun   = 63
	huffmanSymbols   = 1<<16 + 1 // the last one says: repeat
	huffmanFastBits  = 12
)

var (
	errHuffmanTable = errors.New("PIZ: the code table is wrong")
	errHuffmanCode  = errors.New("PIZ: the codes are wrong")
)

// huffman is a canonical code: codes of one length are consecutive numbers.
type huffman struct {
	longest int     // code length
	symbols []int32 // by length, then by symbol
	first   [huffmanMaxLength + 1]uint64
	count   [huffmanMaxLength + 1]int
	start   [huffmanMaxLength + 1]int // in symbols

	// fast holds, by the next bits, symbol<<8 | length of short codes.
	fast [1 << huffmanFastBits]int32
}

// bitReader reads bits, the highest of a byte first.
type bitReader struct {
	data []byte
	at   int // next byte
	hold uint64
	n    uint // bits in hold, its lowest
}

// fill makes at least 57 bits available where there are as many.
func (b *bitReader) fill() {
	for b.n <= 56 && b.at < len(b.data) {
		b.hold = b.hold<<8 | uint64(b.data[b.at])
		b.at++
		b.n += 8
	}
}

// bits returns the next n, at most 32.
func (b *bitReader) bits(n uint) (v uint64, ok bool) {
	if b.n < n {
		if b.fill(); b.n < n {
			return 0, false
		}
	}
	b.n -= n
	return b.hold >> b.n & (1<<n - 1), true
}

// unhuffman appends the words of a block to dst, at most limit.
func unhuffman(dst []uint16, packed []byte, limit int) ([]uint16, error) {
	if len(packed) == 0 {
		return dst, nil
	}
	if len(packed) < 20 {
		return nil, errPIZShort
	}
	le := binary.LittleEndian
	first, last, nbits := le.Uint32(packed), le.Uint32(packed[4:]), le.Uint32(packed[12:])
	if first >= huffmanSymbols || last >= huffmanSymbols || first > last {
		return nil, errHuffmanTable
	}
	code, used, err := readHuffman(packed[20:], int(first), int(last))
	if err != nil {
		return nil, err
	}
	data := packed[20+used:]
	if int64(nbits) > 8*int64(len(data)) {
		return nil, errPIZShort
	}
	return code.decode(dst, data, int(nbits), int32(last), limit)
}

// readHuffman reads the table of code lengths of the symbols first to last
// and says how many bytes it takes.
func readHuffman(packed []byte, first, last int) (h *huffman, used int, err error) {
	b := bitReader{data: packed}
	lengths := make([]byte, last+1)
	for i := first; i <= last; {
		v, ok := b.bits(6)
		if !ok {
			return nil, 0, errPIZShort
		}
		zeros := 0
		switch {
		case v == huffmanLongRun:
			more, ok := b.bits(8)
			if !ok {
				return nil, 0, errPIZShort
			}
			zeros = int(more) + 2 + huffmanLongRun - huffmanShortRun
		case v >= huffmanShortRun:
			zeros = int(v) - huffmanShortRun + 2
		default:
			lengths[i] = byte(v)
			i++
		}
		if i += zeros; i > last+1 {
			return nil, 0, errHuffmanTable
		}
	}
	h = new(huffman)
	for _, l := range lengths {
		if l > 0 {
			h.count[l]++
			h.longest = max(h.longest, int(l))
		}
	}
	n, c := 0, uint64(0)
	for l := 1; l <= huffmanMaxLength; l++ {
		h.start[l] = n
		n += h.count[l]
	}
	for l := huffmanMaxLength; l > 0; l-- { // longer codes are smaller numbers
		h.first[l] = c
		c = (c + uint64(h.count[l])) >> 1
	}
	h.symbols = make([]int32, n)
	next := h.start
	for s, l := range lengths {
		if l == 0 {
			continue
		}
		code := h.first[l] + uint64(next[l]-h.start[l])
		if code>>l != 0 {
			return nil, 0, errHuffmanTable // more codes than bits can tell
		}
		h.symbols[next[l]] = int32(s)
		next[l]++
		if l <= huffmanFastBits {
			from := code << (huffmanFastBits - l)
			for i := range uint64(1) << (huffmanFastBits - l) {
				h.fast[from+i] = int32(s)<<8 | int32(l)
			}
		}
	}
	return h, b.at - int(b.n/8), nil
}

// decode appends nbits of words to dst, at most limit. The symbol repeat is
// followed by 8 bits: how often the word before it stands again.
func (h *huffman) decode(dst []uint16, data []byte, nbits int, repeat int32, limit int) ([]uint16, error) {
	b := bitReader{data: data[:(nbits+7)/8]}
	spare := uint(len(b.data)*8 - nbits)
	start := len(dst)
	for {
		b.fill()
		if b.at == len(b.data) && b.n <= spare {
			return dst, nil
		}
		s, ok := h.next(&b)
		if !ok {
			return nil, errHuffmanCode
		}
		if s != repeat {
			if len(dst)-start >= limit {
				return nil, errPIZLength
			}
			dst = append(dst, uint16(s))
			continue
		}
		n, ok := b.bits(8)
		if !ok || len(dst) == start {
			return nil, errHuffmanCode
		}
		if len(dst)-start+int(n) > limit {
			return nil, errPIZLength
		}
		before := dst[len(dst)-1]
		for range n {
			dst = append(dst, before)
		}
	}
}

// next returns the next symbol; b must have been filled.
func (h *huffman) next(b *bitReader) (symbol int32, ok bool) {
	if b.n >= huffmanFastBits {
		if f := h.fast[b.hold>>(b.n-huffmanFastBits)&(1<<huffmanFastBits-1)]; f != 0 {
			b.n -= uint(f & 0xff)
			return f >> 8, true
		}
	}
	for l := 1; l <= h.longest; l++ {
		if b.n < uint(l) {
			// A code of 58 bits may need one more byte than fill had room for.
			if b.fill(); b.n < uint(l) {
				return 0, false
			}
		}
		code := b.hold >> (b.n - uint(l)) & (1<<l - 1)
		if i := code - h.first[l]; code >= h.first[l] && i < uint64(h.count[l]) {
			b.n -= uint(l)
			return h.symbols[h.start[l]+int(i)], true
		}
	}
	return 0, false
}
