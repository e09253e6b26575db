package luminance

import (
	"bufio"
	"encoding/binary"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
)

// PFM is a text header ("Pf" or "PF", width and height, scale) and then 32
// bit floats, the bottom row first; a scale below 0 means little-endian, and
// its size the units of the values. Source: the "PFM" manual page of Netpbm
// (from memory). It has no place for attributes.

// WritePFM writes the luminances in cd/m2, little-endian with scale 1. Pixels
// that are not valid are written as 0.
func WritePFM(w io.Writer, im *Image) error {
	if err := im.Validate(); err != nil {
		return err
	}
	bw := bufio.NewWriter(w)
	fmt.Fprintf(bw, "Pf\n%d %d\n-1\n", im.Width, im.Height)
	var row []byte
	for y := im.Height - 1; y >= 0; y-- {
		row = row[:0]
		for x := range im.Width {
			v, ok := im.At(x, y)
			if !ok {
				v = 0
			}
			row = binary.LittleEndian.AppendUint32(row, math.Float32bits(v))
		}
		if _, err := bw.Write(row); err != nil {
			return err
		}
	}
	return bw.Flush()
}

// ReadPFM reads a grey or colour PFM file; colour is taken as linear Rec. 709,
// which the file does not say. Values are multiplied by the size of the scale.
// Nor does it say units: Attr.Relative is set. Luminances are not checked: see
// Check. Errors are of type *ParseError.
func ReadPFM(r io.Reader) (*Image, error) {
	s := newSource(r)
	h, err := readPFMHeader(s)
	if err != nil {
		return nil, err
	}
	im := &Image{Width: h.width, Height: h.height, Attr: Attributes{Relative: true}}
	weights := [3]float64{1}
	if h.channels == 3 {
		weights, _ = rec709.weights() // the constant table is sound: TestWeights
	}
	for y := range h.height {
		row, err := s.bytes(4*h.width*h.channels, "")
		if err != nil {
			return nil, err
		}
		if y == 0 { // the file holds a row, so room for 64 is no risk
			im.Lum = make([]float32, 0, h.width*min(h.height, 64))
		}
		for x := range h.width {
			sum := 0.0
			for c := range h.channels {
				v := math.Float32frombits(h.order.Uint32(row[4*(x*h.channels+c):]))
				if h.channels == 1 && h.scale == 1 { // not even NaNs change
					im.Lum = append(im.Lum, v)
					break
				}
				sum += weights[c] * float64(v) * h.scale
			}
			if len(im.Lum) == y*h.width+x {
				im.Lum = append(im.Lum, float32(sum))
			}
		}
	}
	for top, bottom := 0, h.height-1; top < bottom; top, bottom = top+1, bottom-1 {
		a, b := im.Lum[top*h.width:(top+1)*h.width], im.Lum[bottom*h.width:(bottom+1)*h.width]
		for x := range a {
			a[x], b[x] = b[x], a[x]
		}
	}
	return im, nil
}

// pfmHeader is what the text header says.
type pfmHeader struct {
	channels, width, height int
	scale                   float64
	order                   binary.ByteOrder
}

func readPFMHeader(s *source) (h pfmHeader, err error) {
	// Usual writers put type, size and scale on a line each.
	line := 1
	fail := func(cause error, key, format string, args ...any) (pfmHeader, error) {
		return h, &ParseError{Line: line, Key: key, Problem: fmt.Sprintf(format, args...), Err: cause}
	}
	words := [4]string{}
	for i, key := range [...]string{"type", "width", "height", "scale"} {
		if words[i], err = s.word(); err != nil {
			return h, s.cut(err, key, "%q", words[i])
		}
		if i == 0 && !slices.Contains([]string{"Pf", "PF"}, words[0]) {
			return fail(ErrFormat, key, "got %q, want Pf or PF; the file is not PFM", words[0])
		}
	}
	h.channels = 1
	if words[0] == "PF" {
		h.channels = 3
	}
	line = 2
	for i, size := range [...]*int{&h.width, &h.height} {
		v, err := strconv.Atoi(words[1+i])
		if err != nil || v < 1 {
			return fail(ErrMalformed, "size", "got %q, want a whole number of pixels from 1", words[1+i])
		}
		if v > MaxSide {
			return fail(ErrTooLarge, "size", "got %d pixels, want at most %d", v, MaxSide)
		}
		*size = v
	}
	line = 3
	scale, err := parseFinite(words[3])
	if err != nil || scale == 0 {
		return fail(ErrMalformed, "scale", "got %q, want a number other than 0", words[3])
	}
	h.scale, h.order = math.Abs(scale), binary.BigEndian
	if scale < 0 {
		h.order = binary.LittleEndian
	}
	return h, nil
}

// word reads up to a single white space, after any other ones, at most 32
// characters.
func (s *source) word() (string, error) {
	var b []byte
	for len(b) < 32 {
		c, err := s.r.ReadByte()
		if err != nil {
			return string(b), err
		}
		s.at++
		switch c {
		case ' ', '\t', '\n', '\r':
			if len(b) > 0 {
				return string(b), nil
			}
		default:
			b = append(b, c)
		}
	}
	return string(b), nil
}
