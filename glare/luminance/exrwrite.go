package luminance

import (
	"bufio"
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"fmt"
	"io"
	"math"
)

// EXROptions says how WriteEXR stores an image. The zero value is exact and
// not compressed.
type EXROptions struct {
	Compression Compression // None or ZIP

	// MantissaBits rounds luminances to that many bits of mantissa, so that
	// they compress better; 0 keeps all 23. With 10 the error is at most
	// 2^-11 = 0.05 %, as in half floats but over the whole range of floats.
	MantissaBits int
}

// zipLevel is zlib's; higher levels gain nothing on noisy floats and take
// several times as long.
const zipLevel = 4

// WriteEXR writes the image as an OpenEXR file with the channel Y (32 bit
// floats, cd/m2) and, where the image has a mask, A (1 or 0). What does not
// pass im.Validate is an error; NaN and infinite luminances are written as
// they are.
func WriteEXR(w io.Writer, im *Image, opt EXROptions) error {
	if err := im.Validate(); err != nil {
		return err
	}
	if opt.Compression != None && opt.Compression != ZIP {
		return fmt.Errorf("%w: compression: got %s, want none or ZIP", ErrUnsupported, opt.Compression)
	}
	if opt.MantissaBits < 0 || opt.MantissaBits > 23 {
		return fmt.Errorf("%w: mantissa: got %d bits, want 0 (all) to 23", ErrInvalid, opt.MantissaBits)
	}
	planes := []exrPlane{{
		name: "Y", pixel: exrFloat,
		line: func(y int, dst []byte) []byte {
			for x := range im.Width {
				i := y*im.Width + x
				v := im.Lum[i]
				if im.Valid != nil && !im.Valid[i] {
					v = 0
				}
				dst = binary.LittleEndian.AppendUint32(dst, math.Float32bits(roundMantissa(v, opt.MantissaBits)))
			}
			return dst
		},
	}}
	if im.Valid != nil {
		planes = append([]exrPlane{{ // alphabetical order is the standard's
			name: "A", pixel: exrHalf,
			line: func(y int, dst []byte) []byte {
				for _, v := range im.Valid[y*im.Width : (y+1)*im.Width] {
					half := uint16(0)
					if v {
						half = 0x3c00 // 1
					}
					dst = binary.LittleEndian.AppendUint16(dst, half)
				}
				return dst
			},
		}}, planes...)
	}
	return writePlanes(w, im.Width, im.Height, planes, im.Attr.exr(), opt.Compression)
}

// roundMantissa rounds to nearest, ties to even, keeping the given bits of
// the mantissa; 0 keeps all. NaN and infinity stay, and what would round up
// to infinity becomes the largest number below it.
func roundMantissa(v float32, bits int) float32 {
	if bits == 0 || bits >= 23 || math.IsNaN(float64(v)) || math.IsInf(float64(v), 0) {
		return v
	}
	drop := uint(23 - bits)
	u := math.Float32bits(v)
	u += 1<<(drop-1) - 1 + u>>drop&1
	u &^= 1<<drop - 1
	if u&0x7f800000 == 0x7f800000 {
		u -= 1 << drop
	}
	return math.Float32frombits(u)
}

// exrPlane is a channel to be written; line appends the samples of row y.
type exrPlane struct {
	name  string
	pixel exrPixel
	line  func(y int, dst []byte) []byte
}

// writePlanes writes a scan line file; planes must be in alphabetical order.
func writePlanes(w io.Writer, width, height int, planes []exrPlane, attributes []exrAttribute, c Compression) error {
	out := exrHead(width, height, planes, attributes, c)
	chunks, err := exrChunks(height, planes, c)
	if err != nil {
		return err
	}
	at := uint64(len(out) + 8*len(chunks))
	for _, chunk := range chunks {
		out = binary.LittleEndian.AppendUint64(out, at)
		at += uint64(len(chunk))
	}
	bw := bufio.NewWriter(w)
	if _, err := bw.Write(out); err != nil {
		return err
	}
	for _, chunk := range chunks {
		if _, err := bw.Write(chunk); err != nil {
			return err
		}
	}
	return bw.Flush()
}

// exrHead is the magic number, the version and the header.
func exrHead(width, height int, planes []exrPlane, attributes []exrAttribute, c Compression) []byte {
	le := binary.LittleEndian
	var channels []byte
	for _, p := range planes {
		channels = append(append(channels, p.name...), 0)
		channels = le.AppendUint32(channels, uint32(p.pixel))
		channels = append(channels, 0, 0, 0, 0) // pLinear, reserved
		channels = le.AppendUint32(channels, 1)
		channels = le.AppendUint32(channels, 1)
	}
	channels = append(channels, 0)
	var box []byte
	for _, v := range [...]int{0, 0, width - 1, height - 1} {
		box = le.AppendUint32(box, uint32(v))
	}
	all := append([]exrAttribute{
		{"channels", "chlist", channels},
		{"compression", "compression", []byte{byte(c)}},
		{"dataWindow", "box2i", box},
		{"displayWindow", "box2i", box},
		{"lineOrder", "lineOrder", []byte{0}}, // increasing y
		exrFloat32("pixelAspectRatio", 1),
		{"screenWindowCenter", "v2f", make([]byte, 8)},
		exrFloat32("screenWindowWidth", 1),
	}, attributes...)

	out := le.AppendUint32([]byte(exrMagic), exrVersion)
	for _, a := range all {
		out = append(append(out, a.name...), 0)
		out = append(append(out, a.kind...), 0)
		out = le.AppendUint32(out, uint32(len(a.value)))
		out = append(out, a.value...)
	}
	return append(out, 0)
}

// exrChunks returns the chunks of all lines, each with its line and size.
func exrChunks(height int, planes []exrPlane, c Compression) ([][]byte, error) {
	lines := exrCompressions[c].lines
	var chunks [][]byte
	var raw, mixed []byte
	var packed bytes.Buffer
	z, err := zlib.NewWriterLevel(&packed, zipLevel)
	if err != nil {
		return nil, err
	}
	for y0 := 0; y0 < height; y0 += lines {
		raw = raw[:0]
		for y := y0; y < min(y0+lines, height); y++ {
			for _, p := range planes {
				raw = p.line(y, raw)
			}
		}
		data := raw
		if c == ZIP {
			packed.Reset()
			z.Reset(&packed)
			mixed = mix(mixed, raw)
			if _, err := z.Write(mixed); err != nil {
				return nil, err
			}
			if err := z.Close(); err != nil {
				return nil, err
			}
			// A chunk as long as its raw data is raw data by definition.
			if packed.Len() < len(raw) {
				data = packed.Bytes()
			}
		}
		chunk := make([]byte, 0, 8+len(data))
		chunk = binary.LittleEndian.AppendUint32(chunk, uint32(y0))
		chunk = binary.LittleEndian.AppendUint32(chunk, uint32(len(data)))
		chunks = append(chunks, append(chunk, data...))
	}
	return chunks, nil
}
