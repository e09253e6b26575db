package luminance

import (
	"bytes"
	"encoding/binary"
	"errors"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

func TestWeights(t *testing.T) {
	for name, c := range map[string]struct {
		primaries chromaticities
		want      [3]float64
	}{
		"Rec. 709":  {rec709, [3]float64{0.2126, 0.7152, 0.0722}},                                                                   // Recommendation ITU-R BT.709-6, item 3.2
		"Rec. 2020": {chromaticities{0.708, 0.292, 0.170, 0.797, 0.131, 0.046, 0.3127, 0.3290}, [3]float64{0.2627, 0.6780, 0.0593}}, // Recommendation ITU-R BT.2020-2, tables 3 and 4
	} {
		got, ok := c.primaries.weights()
		for i := range got {
			if !ok || math.Abs(got[i]-c.want[i]) > 5e-5 { // 4 digits are published
				t.Errorf("%s: got %v, %t, want %v", name, got, ok, c.want)
				break
			}
		}
	}
	nan := math.NaN()
	for _, c := range []chromaticities{{}, {0.1, 0.1, 0.2, 0.2, 0.3, 0.3, 0.3, 0.3}, {nan, 0, 1, 1, 0, 1, .3, .3}} {
		if w, ok := c.weights(); ok {
			t.Errorf("%v: got %v, want none", c, w)
		}
	}
}

func TestHalf(t *testing.T) {
	for h, want := range map[uint16]float64{ // IEEE 754-2019, binary16: 5 bits of exponent, bias 15, 10 of mantissa
		0x0000: 0, 0x3c00: 1, 0xc000: -2, 0x3555: 0x1.554p-2, 0x7bff: 65504, 0x0400: 0x1p-14, 0x0001: 0x1p-24, 0x83ff: -0x3ffp-24,
		0x7c00: math.Inf(1), 0xfc00: math.Inf(-1),
	} {
		if got := float64(fromHalf(h)); got != want {
			t.Errorf("%#x: got %g, want %g", h, got, want)
		}
	}
	if v := float64(fromHalf(0x7e00)); !math.IsNaN(v) {
		t.Errorf("0x7e00: got %g, want NaN", v)
	}
	if !math.Signbit(float64(fromHalf(0x8000))) {
		t.Error("0x8000: lost the sign of zero")
	}
}

// craft is a file with a header of our own making, one line of Y in each
// chunk, and what data holds behind the header.
func craft(attributes map[string]exrAttribute, version uint32, data []byte) []byte {
	box := func(x, y int) []byte {
		var b []byte
		for _, v := range [...]int{0, 0, x - 1, y - 1} {
			b = binary.LittleEndian.AppendUint32(b, uint32(v))
		}
		return b
	}
	channels := append([]byte("Y\x00"), 2, 0, 0, 0, 0, 0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0, 0)
	all := []exrAttribute{
		{"channels", "chlist", channels}, {"compression", "compression", []byte{0}},
		{"dataWindow", "box2i", box(2, 1)}, {"displayWindow", "box2i", box(2, 1)}, {"lineOrder", "lineOrder", []byte{0}},
	}
	out := binary.LittleEndian.AppendUint32([]byte(exrMagic), version)
	put := func(a exrAttribute) {
		out = append(append(out, a.name...), 0)
		out = append(append(out, a.kind...), 0)
		out = append(binary.LittleEndian.AppendUint32(out, uint32(len(a.value))), a.value...)
	}
	for _, a := range all {
		if b, ok := attributes[a.name]; ok {
			delete(attributes, a.name)
			if b.kind == "" { // left out
				continue
			}
			a = b
		}
		put(a)
	}
	for _, a := range attributes {
		put(a)
	}
	return append(append(out, 0), data...)
}

// line is an offset table of one entry and the chunk of craft's only line.
func line(y, size uint32, values ...float32) []byte {
	b := make([]byte, 8)
	b = binary.LittleEndian.AppendUint32(b, y)
	b = binary.LittleEndian.AppendUint32(b, size)
	for _, v := range values {
		b = binary.LittleEndian.AppendUint32(b, math.Float32bits(v))
	}
	return b
}

func window(name string, v ...int32) exrAttribute {
	var b []byte
	for _, c := range v {
		b = binary.LittleEndian.AppendUint32(b, uint32(c))
	}
	return exrAttribute{name, "box2i", b}
}

func TestEXRMalformed(t *testing.T) {
	good := line(0, 8, 1, 2)
	if im, err := ReadEXR(bytes.NewReader(craft(nil, 2, good))); err != nil || im.Lum[1] != 2 {
		t.Fatalf("the plain file: got %+v, %v", im, err)
	}
	big := window("dataWindow", 0, 0, 32767, 32767)
	for name, c := range map[string]struct {
		attribute exrAttribute
		version   uint32
		data      []byte
		cause     error
		want      string
	}{
		"magic":             {exrAttribute{}, 1, good, ErrUnsupported, "version: got 1, want 2"},
		"flags":             {exrAttribute{}, 2 | 1<<13, good, ErrUnsupported, "unknown flags"},
		"no channels":       {exrAttribute{name: "channels"}, 2, good, ErrMalformed, "channels: missing"},
		"no window":         {exrAttribute{name: "displayWindow"}, 2, good, ErrMalformed, "displayWindow: missing"},
		"window reversed":   {window("dataWindow", 0, 0, -1, 0), 2, good, ErrMalformed, "want an ordered box"},
		"window too large":  {window("dataWindow", 0, 0, 40000, 1), 2, good, ErrMalformed, "got 40001 x 2 pixels"},
		"window overflows":  {window("dataWindow", math.MinInt32, 0, math.MaxInt32, 1), 2, good, ErrMalformed, "want an ordered box"},
		"window lies":       {big, 2, good, ErrTruncated, "offset table: file ends early"},
		"window lies more":  {big, 2, append(make([]byte, 8<<15), 0), ErrTruncated, "chunk: file ends early"},
		"display lies":      {window("displayWindow", 0, 0, 32767, 32767), 2, good, ErrTooLarge, "displayWindow: got 32768 x 32768 pixels for data of 2 x 1"},
		"compression":       {exrAttribute{"compression", "compression", []byte{9}}, 2, good, ErrUnsupported, "got DWAB"},
		"compression ends":  {exrAttribute{"compression", "compression", []byte{77}}, 2, good, ErrUnsupported, "compression(77)"},
		"compression type":  {exrAttribute{"compression", "int", []byte{0}}, 2, good, ErrMalformed, `got type "int"`},
		"line order":        {exrAttribute{"lineOrder", "lineOrder", []byte{3}}, 2, good, ErrMalformed, "lineOrder: got 3"},
		"aspect":            {exrFloat32("pixelAspectRatio", 2), 2, good, ErrUnsupported, "want square pixels"},
		"channel list ends": {exrAttribute{"channels", "chlist", []byte("Y")}, 2, good, ErrMalformed, "does not end"},
		"channel cut":       {exrAttribute{"channels", "chlist", []byte("Y\x00\x02")}, 2, good, ErrMalformed, "cut short"},
		"no Y":              {exrAttribute{"channels", "chlist", []byte("Z\x00\x02\x00\x00\x00\x00\x00\x00\x00\x01\x00\x00\x00\x01\x00\x00\x00\x00")}, 2, good, ErrUnsupported, `got "Z", want Y or R, G and B`},
		"channel type":      {exrAttribute{"channels", "chlist", []byte("Y\x00\x03\x00\x00\x00\x00\x00\x00\x00\x01\x00\x00\x00\x01\x00\x00\x00\x00")}, 2, good, ErrMalformed, "pixel type 3"},
		"sampling 0":        {exrAttribute{"channels", "chlist", []byte("Y\x00\x02\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x01\x00\x00\x00\x00")}, 2, good, ErrMalformed, "sampling 0"},
		"no channel":        {exrAttribute{"channels", "chlist", []byte{0}}, 2, good, ErrMalformed, "got no channel"},
		"own FOV":           {exrFloat32(keyFOVDeg, 180), 2, good, ErrMalformed, "want double with 8"},
		"own direction":     {exrVector(keyDirection, [3]float64{math.Inf(1)}), 2, good, ErrMalformed, "want a finite number"},
		"own projection":    {exrAttribute{keyProjection, "int", nil}, 2, good, ErrMalformed, "want string"},
		"own discs":         {exrAttribute{keyDiscs, "stringvector", []byte{9, 0, 0, 0, '1'}}, 2, good, ErrMalformed, "past the end"},
		"own disc":          {exrAttribute{keyDiscs, "stringvector", []byte("\x0a\x00\x00\x001 0 0 -1 10")}, 2, good, ErrMalformed, "solid angle and luminance of 0 or more"},
		"own disc numbers":  {exrAttribute{keyDiscs, "stringvector", []byte("\x03\x00\x00\x001 2")}, 2, good, ErrMalformed, "want five numbers"},
		"chunk line":        {exrAttribute{}, 2, line(1, 8, 1, 2), ErrMalformed, "got line 1, want one of 0 to 0"},
		"chunk long":        {exrAttribute{}, 2, line(0, 12, 1, 2, 3), ErrMalformed, "got 12 bytes, want at most 8"},
		"chunk short":       {exrAttribute{}, 2, line(0, 4, 1), ErrMalformed, "got 4 bytes, want 8"},
		"chunk negative":    {exrAttribute{}, 2, line(0, math.MaxUint32, 1), ErrMalformed, "got -1 bytes"},
		"chunk ends":        {exrAttribute{}, 2, line(0, 8, 1), ErrTruncated, "got 4 of 8 bytes"},
	} {
		attributes := map[string]exrAttribute{}
		if c.attribute.name != "" {
			attributes[c.attribute.name] = c.attribute
		}
		data := craft(attributes, c.version, c.data)
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		_, err := ReadEXR(bytes.NewReader(data))
		runtime.ReadMemStats(&after)
		var pe *ParseError
		if !errors.As(err, &pe) || !errors.Is(err, c.cause) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %v with %q", name, err, c.cause, c.want)
		}
		// A window of 32768 x 32768 floats would be 4 GiB; a table of its
		// 32768 chunks is 1.5 MiB.
		if used := after.TotalAlloc - before.TotalAlloc; used > 4<<20 {
			t.Errorf("%s: allocated %d bytes for a file of %d", name, used, len(data))
		}
	}
}

// TestEXRUnknown leaves standard attributes that make no sense unknown.
func TestEXRUnknown(t *testing.T) {
	for _, a := range []exrAttribute{
		exrString("capDate", "yesterday"), exrFloat32("utcOffset", 1e9), exrFloat32("latitude", 100),
		exrFloat32("whiteLuminance", 0), exrFloat32("whiteLuminance", math.Inf(1)), {"preview", "preview", make([]byte, 100)}, {"nonsense", "unheard", nil},
	} {
		im, err := ReadEXR(bytes.NewReader(craft(map[string]exrAttribute{a.name: a}, 2, line(0, 8, 1, 2))))
		if err != nil || im.Attr.Moment != "" || im.Attr.HasSite || !im.Attr.Relative {
			t.Errorf("%s: got %+v, %v, want everything unknown", a.name, im, err)
		}
	}
}

// TestEXRTruncated cuts files anywhere: always an error, never a panic.
func TestEXRTruncated(t *testing.T) {
	files := map[string][]byte{"ours": writeEXR(t, described(9, 20), EXROptions{Compression: ZIP})}
	for _, name := range []string{"rgb_half_rle.exr", "y_uint_constant_piz.exr", "yc_half_piz.exr"} {
		b, err := os.ReadFile(filepath.Join("testdata", name))
		if err != nil {
			t.Fatal(err)
		}
		files[name] = b
	}
	for name, b := range files {
		for n := range b {
			if n > 700 && n%13 != 0 { // the header byte by byte, the rest in steps
				continue
			}
			_, err := ReadEXR(bytes.NewReader(b[:n]))
			if !errors.Is(err, ErrTruncated) {
				t.Fatalf("%s cut to %d of %d bytes: got %v, want %v", name, n, len(b), err, ErrTruncated)
			}
		}
	}
}

// TestEXRMutated changes bytes: no panic, and an error or an image that is
// complete.
func TestEXRMutated(t *testing.T) {
	files, err := filepath.Glob("testdata/*.exr")
	if err != nil || len(files) == 0 {
		t.Fatalf("no files: %v", err)
	}
	rounds := 200
	if testing.Short() {
		rounds = 20
	}
	rng := rand.New(rand.NewPCG(3, 4))
	for _, name := range files {
		b, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		for range rounds {
			m := bytes.Clone(b)
			for range 1 + rng.IntN(4) {
				m[rng.IntN(min(len(m), 4096))] = byte(rng.Uint32())
			}
			readable(t, m, ReadEXR)
		}
	}
}

// readable wants an error of type ParseError or a complete image.
func readable(t *testing.T, b []byte, read func(io.Reader) (*Image, error)) {
	t.Helper()
	im, err := read(bytes.NewReader(b))
	if err != nil {
		var pe *ParseError
		if !errors.As(err, &pe) {
			t.Fatalf("got %T %v, want a ParseError", err, err)
		}
		return
	}
	if err := im.Validate(); err != nil {
		t.Fatalf("an image was read that cannot be written: %v", err)
	}
}

func FuzzReadEXR(f *testing.F) {
	for _, name := range []string{"y_uint_constant_piz.exr", "yc_half_piz.exr", "rgb_half_zip.exr", "rgb_half_zips.exr", "tiled.exr"} {
		b, err := os.ReadFile(filepath.Join("testdata", name))
		if err != nil {
			f.Fatal(err)
		}
		f.Add(b)
	}
	f.Add(writeEXR(f, described(5, 18), EXROptions{Compression: ZIP}))
	f.Add(writeEXR(f, described(3, 2), EXROptions{}))
	f.Fuzz(func(t *testing.T, b []byte) { readable(t, b, ReadEXR) })
}

func BenchmarkReadEXR(b *testing.B) {
	file := writeEXR(b, synthetic(1024, 1024), EXROptions{Compression: ZIP, MantissaBits: 10})
	b.SetBytes(4 << 20)
	for b.Loop() {
		if _, err := ReadEXR(bytes.NewReader(file)); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkReadPIZ(b *testing.B) {
	file, err := os.ReadFile("testdata/y_uint_ramp_piz.exr")
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(900 * 33 * 4)
	for b.Loop() {
		if _, err := ReadEXR(bytes.NewReader(file)); err != nil {
			b.Fatal(err)
		}
	}
}
