package luminance

import (
	"encoding/binary"
	"fmt"
	"math"
)

// Limits of a header. Own choice: real ones hold a few kB, a preview picture
// some 100 kB.
const (
	maxHeader    = 8 << 20 // bytes of all attributes
	maxChannels  = 1024
	maxLineBytes = 32 << 20 // bytes of one scan line, all channels
)

// exrHeader is what a file's header says.
type exrHeader struct {
	channels      []exrChannel
	compression   Compression
	data, display exrBox
	white         float64 // cd/m2 of Y = 1; 0 unknown
	primaries     chromaticities
	attr          Attributes
}

// readHeader reads magic number, version and header, and checks that the file
// is of a kind that is read.
func readHeader(s *source) (*exrHeader, error) {
	magic, err := s.bytes(4, "magic number")
	if err != nil {
		return nil, err
	}
	if string(magic) != exrMagic {
		return nil, s.fail(ErrFormat, "magic number", "got % x, want % x; the file is not OpenEXR", magic, exrMagic)
	}
	version, err := s.int32("version")
	if err != nil {
		return nil, err
	}
	if version&0xff != exrVersion {
		return nil, s.fail(ErrUnsupported, "version", "got %d, want %d", version&0xff, exrVersion)
	}
	for _, kind := range [...]struct {
		flag int32
		name string
	}{{exrTiled, "tiled"}, {exrDeep, "deep"}, {exrMultipart, "multi-part"}} {
		if version&kind.flag != 0 {
			return nil, s.fail(ErrUnsupported, "version", "got a %s image, want scan lines in one part; save it as a plain scan line file", kind.name)
		}
	}
	if rest := version &^ (0xff | exrLongNames); rest != 0 {
		return nil, s.fail(ErrUnsupported, "version", "got unknown flags %#x", rest)
	}
	nameLimit := 31
	if version&exrLongNames != 0 {
		nameLimit = 255
	}

	h := &exrHeader{primaries: rec709}
	var notes exrNotes
	seen := map[string]bool{}
	for left := maxHeader; ; {
		a, err := readAttribute(s, nameLimit, &left)
		if err != nil {
			return nil, err
		}
		if a.name == "" {
			break
		}
		if seen[a.name] {
			return nil, s.fail(ErrMalformed, a.name, "stands twice in the header")
		}
		seen[a.name] = true
		if err := h.set(s, &notes, a); err != nil {
			return nil, err
		}
	}
	for _, name := range [...]string{"channels", "compression", "dataWindow", "displayWindow", "lineOrder"} {
		if !seen[name] {
			return nil, s.fail(ErrMalformed, name, "missing in the header, where the standard requires it")
		}
	}
	h.attr.finish(notes)
	h.attr.Relative = h.white == 0
	return h, nil
}

// readAttribute reads the next attribute; its name is "" at the end of the
// header. left is what the header may still hold.
func readAttribute(s *source, nameLimit int, left *int) (a exrAttribute, err error) {
	if a.name, err = s.text(nameLimit, "attribute name"); err != nil || a.name == "" {
		return a, err
	}
	if a.kind, err = s.text(nameLimit, a.name); err != nil {
		return a, err
	}
	size, err := s.int32(a.name)
	if err != nil {
		return a, err
	}
	*left -= 2 * (nameLimit + 1) // so that empty attributes end, too
	if size < 0 || int(size) > *left {
		return a, s.fail(ErrTooLarge, a.name, "got %d bytes, want a header of at most %d", size, maxHeader)
	}
	*left -= int(size)
	b, err := s.bytes(int(size), a.name)
	a.value = append([]byte(nil), b...)
	return a, err
}

// set takes over what an attribute says.
func (h *exrHeader) set(s *source, notes *exrNotes, a exrAttribute) error {
	var err error
	switch a.name {
	case "channels":
		h.channels, err = parseChannels(a)
	case "compression":
		var c byte
		if c, err = a.byte("compression"); err == nil {
			h.compression = Compression(c)
			if int(c) >= len(exrCompressions) || exrCompressions[c].lines == 0 {
				return s.fail(ErrUnsupported, a.name, "got %s, want none, RLE, ZIPS, ZIP or PIZ; save it with one of these", h.compression)
			}
		}
	case "lineOrder":
		var order byte
		if order, err = a.byte("lineOrder"); err == nil && order > 2 {
			err = fmt.Errorf("got %d, want 0 to 2", order)
		}
	case "dataWindow":
		h.data, err = a.box()
	case "displayWindow":
		h.display, err = a.box()
	case "pixelAspectRatio":
		var v []float64
		// 1e-3: over a view of 180 degrees that is below a fifth of a degree.
		if v, err = a.floats("float", 1); err == nil && !(math.Abs(v[0]-1) <= 1e-3) {
			return s.fail(ErrUnsupported, a.name, "got %g, want square pixels (1); resample the image", v[0])
		}
	case "whiteLuminance":
		var v []float64
		// A camera may write 0 for unknown.
		if v, err = a.floats("float", 1); err == nil && v[0] > 0 && !math.IsInf(v[0], 0) {
			h.white = v[0]
		}
	case "chromaticities":
		var v []float64
		if v, err = a.floats("chromaticities", 8); err == nil {
			h.primaries = chromaticities(v)
		}
	default:
		err = h.attr.set(notes, a)
	}
	if err != nil {
		return s.fail(ErrMalformed, a.name, "%v", err)
	}
	return nil
}

func (at exrAttribute) byte(kind string) (byte, error) {
	if at.kind != kind || len(at.value) != 1 {
		return 0, fmt.Errorf("got type %q with %d bytes, want %s with 1", at.kind, len(at.value), kind)
	}
	return at.value[0], nil
}

func (at exrAttribute) floats(kind string, n int) ([]float64, error) {
	if at.kind != kind || len(at.value) != 4*n {
		return nil, fmt.Errorf("got type %q with %d bytes, want %s with %d", at.kind, len(at.value), kind, 4*n)
	}
	out := make([]float64, n)
	for i := range out {
		out[i] = float64(math.Float32frombits(binary.LittleEndian.Uint32(at.value[4*i:])))
	}
	return out, nil
}

func (at exrAttribute) box() (b exrBox, err error) {
	if at.kind != "box2i" || len(at.value) != 16 {
		return b, fmt.Errorf("got type %q with %d bytes, want box2i with 16", at.kind, len(at.value))
	}
	for i, to := range [...]*int{&b.xMin, &b.yMin, &b.xMax, &b.yMax} {
		*to = int(int32(binary.LittleEndian.Uint32(at.value[4*i:])))
	}
	return b, b.check()
}

// parseChannels reads the channel list: name, pixel type, a byte and three
// reserved ones, and two sampling rates for each, then a zero byte.
func parseChannels(a exrAttribute) ([]exrChannel, error) {
	if a.kind != "chlist" {
		return nil, fmt.Errorf("got type %q, want chlist", a.kind)
	}
	var out []exrChannel
	seen := map[string]bool{}
	for b := a.value; ; {
		end := 0
		for end < len(b) && b[end] != 0 {
			end++
		}
		if end == len(b) {
			return nil, fmt.Errorf("the list does not end")
		}
		if end == 0 {
			if len(out) == 0 {
				return nil, fmt.Errorf("got no channel")
			}
			return out, nil
		}
		c := exrChannel{name: string(b[:end])}
		b = b[end+1:]
		if len(b) < 16 {
			return nil, fmt.Errorf("%q: the entry is cut short", c.name)
		}
		le := binary.LittleEndian
		c.pixel = exrPixel(le.Uint32(b))
		xs, ys := le.Uint32(b[8:]), le.Uint32(b[12:])
		b = b[16:]
		if c.pixel < exrUint || c.pixel > exrFloat {
			return nil, fmt.Errorf("%q: got pixel type %d, want 0 to 2", c.name, c.pixel)
		}
		if xs < 1 || xs > MaxSide || ys < 1 || ys > MaxSide {
			return nil, fmt.Errorf("%q: got sampling %d, %d, want 1 to %d", c.name, xs, ys, MaxSide)
		}
		c.xSampling, c.ySampling = int(xs), int(ys)
		if seen[c.name] {
			return nil, fmt.Errorf("%q stands twice in the list", c.name)
		}
		seen[c.name] = true
		if len(out) == maxChannels {
			return nil, fmt.Errorf("got more than %d channels", maxChannels)
		}
		out = append(out, c)
	}
}
