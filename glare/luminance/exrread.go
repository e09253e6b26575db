package luminance

import (
	"encoding/binary"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"
)

// ReadEXR reads an OpenEXR file of scan lines: luminance from the channel Y
// or, where there is none, from R, G and B by the file's chromaticities
// (Rec. 709 where it has none), times its whiteLuminance; without one,
// Attr.Relative is set. The image is the display window. Where the file has a
// channel A that is 1 somewhere, pixels with less are not valid; nor are
// those outside of the data window. Luminances are not checked: see Check.
// Errors are of type *ParseError. r may be read past the end of the image.
func ReadEXR(r io.Reader) (*Image, error) {
	s := newSource(r)
	h, err := readHeader(s)
	if err != nil {
		return nil, err
	}
	p, err := newPicker(h)
	if err != nil {
		return nil, s.fail(ErrUnsupported, "channels", "%v", err)
	}
	if n := 4 * len(h.channels) * h.data.width(); n > maxLineBytes {
		return nil, s.fail(ErrTooLarge, "channels", "got up to %d bytes a line, want at most %d", n, maxLineBytes)
	}
	// A window much larger than its data is a mistake or an attack.
	if area := h.display.width() * h.display.height(); area > 1<<22 && area/16 > h.data.width()*h.data.height() {
		return nil, s.fail(ErrTooLarge, "displayWindow", "got %d x %d pixels for data of %d x %d",
			h.display.width(), h.display.height(), h.data.width(), h.data.height())
	}
	lines := exrCompressions[h.compression].lines
	count := (h.data.height() + lines - 1) / lines
	// The table of offsets serves random access; chunks follow it in any
	// order, each with its own line number.
	if err := s.skip(8*int64(count), "offset table"); err != nil {
		return nil, err
	}
	chunks := make([]pickedChunk, count)
	var u unpacker
	for range count {
		i, c, err := readChunk(s, h, p, &u)
		if err != nil {
			return nil, err
		}
		if chunks[i].lum != nil {
			return nil, s.fail(ErrMalformed, "chunk", "lines from %d stand twice in the file", h.data.yMin+i*lines)
		}
		chunks[i] = c
	}
	return assemble(h, chunks), nil
}

// readChunk reads the next chunk and says which one it is, from the top.
func readChunk(s *source, h *exrHeader, p *picker, u *unpacker) (index int, c pickedChunk, err error) {
	y32, err := s.int32("chunk")
	if err != nil {
		return 0, c, err
	}
	size, err := s.int32("chunk")
	if err != nil {
		return 0, c, err
	}
	lines := exrCompressions[h.compression].lines
	y := int(y32)
	if y < h.data.yMin || y > h.data.yMax || (y-h.data.yMin)%lines != 0 {
		return 0, c, s.fail(ErrMalformed, "chunk", "got line %d, want one of %d to %d in steps of %d; the file may be cut short or never finished", y, h.data.yMin, h.data.yMax, lines)
	}
	end := min(y+lines-1, h.data.yMax)
	want := 0
	for line := y; line <= end; line++ {
		want += p.lineBytes(h, line)
	}
	if size < 0 || int(size) > want {
		return 0, c, s.fail(ErrMalformed, "chunk", "line %d: got %d bytes, want at most %d", y, size, want)
	}
	raw, err := s.bytes(int(size), "chunk")
	if err != nil {
		return 0, c, err
	}
	if len(raw) < want { // else stored as it is
		switch h.compression {
		case exrRLE:
			raw, err = u.unrle(raw, want)
		case ZIP, exrZIPS:
			raw, err = u.unzip(raw, want)
		case exrPIZ:
			raw, err = u.unpiz(raw, h, y, end, want)
		default:
			err = fmt.Errorf("got %d bytes, want %d", len(raw), want)
		}
		if err != nil {
			return 0, c, s.fail(ErrMalformed, "chunk", "line %d: %v", y, err)
		}
	}
	return (y - h.data.yMin) / lines, p.pick(h, raw, y, end), nil
}

// picker takes luminance and mask out of unpacked scan lines.
type picker struct {
	source [3]int     // channels that make luminance; [0] alone is Y
	weight [3]float64 // cd/m2 of each at 1
	n      int        // 1 or 3
	alpha  int        // channel of the mask, -1 without
}

// pickedChunk holds some lines of the data window.
type pickedChunk struct{ lum, alpha []float32 }

func newPicker(h *exrHeader) (*picker, error) {
	find := func(name string) int {
		return slices.IndexFunc(h.channels, func(c exrChannel) bool {
			return c.name == name && c.xSampling == 1 && c.ySampling == 1
		})
	}
	p := &picker{alpha: find("A")}
	white := h.white
	if white == 0 {
		white = 1
	}
	if y := find("Y"); y >= 0 {
		p.source[0], p.weight[0], p.n = y, white, 1
		return p, nil
	}
	p.source, p.n = [3]int{find("R"), find("G"), find("B")}, 3
	if slices.Min(p.source[:]) < 0 {
		names := make([]string, 0, 16)
		for _, c := range h.channels {
			if len(names) == cap(names) {
				names[len(names)-1] = "..."
				break
			}
			names = append(names, fmt.Sprintf("%q", c.name))
		}
		return nil, fmt.Errorf("got %s, want Y or R, G and B at full resolution", strings.Join(names, " "))
	}
	w, ok := h.primaries.weights()
	if !ok {
		return nil, fmt.Errorf("got chromaticities %v, want those of three colours that differ", h.primaries)
	}
	for i := range w {
		p.weight[i] = w[i] * white
	}
	return p, nil
}

// lineBytes is the length of scan line y, all channels.
func (p *picker) lineBytes(h *exrHeader, y int) int {
	n := 0
	for _, c := range h.channels {
		if y%c.ySampling == 0 {
			n += samples(c.xSampling, h.data.xMin, h.data.xMax) * c.pixel.size()
		}
	}
	return n
}

// pick returns what the unpacked lines y to end hold.
func (p *picker) pick(h *exrHeader, raw []byte, y, end int) pickedChunk {
	width := h.data.width()
	c := pickedChunk{lum: make([]float32, 0, width*(end-y+1))}
	if p.alpha >= 0 {
		c.alpha = make([]float32, 0, cap(c.lum))
	}
	starts := make([]int, len(h.channels))
	for ; y <= end; y++ {
		at := 0
		for i, ch := range h.channels {
			starts[i] = at
			if y%ch.ySampling == 0 {
				at += samples(ch.xSampling, h.data.xMin, h.data.xMax) * ch.pixel.size()
			}
		}
		value := func(i, x int) float32 { return sample(h.channels[i].pixel, raw[starts[i]:], x) }
		for x := range width {
			switch {
			case p.n == 3:
				sum := 0.0
				for k, i := range p.source {
					sum += p.weight[k] * float64(value(i, x))
				}
				c.lum = append(c.lum, float32(sum))
			case p.weight[0] == 1: // not even NaNs change
				c.lum = append(c.lum, value(p.source[0], x))
			default:
				c.lum = append(c.lum, float32(p.weight[0]*float64(value(p.source[0], x))))
			}
			if p.alpha >= 0 {
				c.alpha = append(c.alpha, value(p.alpha, x))
			}
		}
		raw = raw[at:]
	}
	return c
}

// sample is the value of the x-th sample of a line.
func sample(p exrPixel, line []byte, x int) float32 {
	switch p {
	case exrHalf:
		return fromHalf(binary.LittleEndian.Uint16(line[2*x:]))
	case exrUint:
		return float32(binary.LittleEndian.Uint32(line[4*x:]))
	}
	return math.Float32frombits(binary.LittleEndian.Uint32(line[4*x:]))
}

// assemble lays the chunks into the display window.
func assemble(h *exrHeader, chunks []pickedChunk) *Image {
	im := &Image{Width: h.display.width(), Height: h.display.height(), Attr: h.attr}
	masked := false
	for _, c := range chunks {
		for _, a := range c.alpha {
			masked = masked || a >= 1
		}
	}
	im.Lum = make([]float32, im.Width*im.Height)
	inside := h.data.xMin <= h.display.xMin && h.data.xMax >= h.display.xMax &&
		h.data.yMin <= h.display.yMin && h.data.yMax >= h.display.yMax
	if masked || !inside {
		im.Valid = make([]bool, len(im.Lum))
	}
	x0, x1 := max(h.data.xMin, h.display.xMin), min(h.data.xMax, h.display.xMax)
	width, lines := h.data.width(), exrCompressions[h.compression].lines
	if x1 < x0 {
		return im
	}
	all := true
	for y := max(h.data.yMin, h.display.yMin); y <= min(h.data.yMax, h.display.yMax); y++ {
		c := chunks[(y-h.data.yMin)/lines]
		from := (y-h.data.yMin)%lines*width + x0 - h.data.xMin
		to := (y-h.display.yMin)*im.Width + x0 - h.display.xMin
		copy(im.Lum[to:to+x1-x0+1], c.lum[from:])
		if im.Valid == nil {
			continue
		}
		for i := range x1 - x0 + 1 {
			ok := !masked || c.alpha[from+i] >= 1
			im.Valid[to+i] = ok
			all = all && ok
		}
	}
	if all && inside {
		im.Valid = nil
	}
	return im
}
