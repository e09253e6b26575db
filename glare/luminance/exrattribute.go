package luminance

import (
	"encoding/binary"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"
)

// Names of our own attributes, all of at most 31 characters, so that no long
// names are needed.
const (
	keyProjection = "squintProjection" // string
	keyFOVDeg     = "squintFovDeg"     // double
	keyPosition   = "squintPosition"   // v3d, m
	keyDirection  = "squintDirection"  // v3d
	keyUp         = "squintUp"         // v3d
	keyDiscs      = "squintDiscs"      // stringvector of Disc.text

	keyDiscsInPixels = "squintDiscsInPixels" // the same, where pixels hold them too
)

// exrDate is the form of the standard attribute capDate, local time.
const exrDate = "2006:01:02 15:04:05"

// exrAttribute is an attribute as it stands in the file.
type exrAttribute struct {
	name, kind string
	value      []byte
}

func exrString(name, text string) exrAttribute {
	return exrAttribute{name, "string", []byte(text)}
}

func exrFloat32(name string, v float64) exrAttribute {
	return exrAttribute{name, "float", binary.LittleEndian.AppendUint32(nil, math.Float32bits(float32(v)))}
}

func exrVector(name string, v [3]float64) exrAttribute {
	var b []byte
	for _, c := range v {
		b = binary.LittleEndian.AppendUint64(b, math.Float64bits(c))
	}
	return exrAttribute{name, "v3d", b}
}

// exr returns the file's attributes for what is known, after the attributes
// have passed validate. Standard ones keep their standard types and units.
func (a *Attributes) exr() []exrAttribute {
	var out []exrAttribute
	if !a.Relative {
		out = append(out, exrFloat32("whiteLuminance", 1))
	}
	if a.Moment != "" {
		if t, hasOffset, err := parseMoment(a.Moment); err == nil {
			out = append(out, exrString("capDate", t.Format(exrDate)))
			if hasOffset {
				// The standard's sign: UTC = local time + utcOffset.
				_, east := t.Zone()
				out = append(out, exrFloat32("utcOffset", float64(-east)))
			}
		}
	}
	if a.HasSite {
		out = append(out, exrFloat32("latitude", a.LatitudeDeg), exrFloat32("longitude", a.LongitudeDeg))
	}
	if a.Comment != "" {
		out = append(out, exrString("comments", a.Comment))
	}
	if a.Software != "" {
		out = append(out, exrString("software", a.Software))
	}
	if a.Projection != "" {
		out = append(out, exrString(keyProjection, a.Projection))
	}
	if a.FOVDeg != 0 {
		out = append(out, exrAttribute{keyFOVDeg, "double", binary.LittleEndian.AppendUint64(nil, math.Float64bits(a.FOVDeg))})
	}
	if a.Direction != [3]float64{} {
		out = append(out, exrVector(keyPosition, a.Position), exrVector(keyDirection, a.Direction), exrVector(keyUp, a.Up))
	}
	if len(a.Discs) > 0 {
		var b []byte
		for _, d := range a.Discs {
			text := d.text()
			b = binary.LittleEndian.AppendUint32(b, uint32(len(text)))
			b = append(b, text...)
		}
		key := keyDiscs
		if a.DiscsInPixels {
			key = keyDiscsInPixels
		}
		out = append(out, exrAttribute{key, "stringvector", b})
	}
	return out
}

// exrNotes collects, while a header is read, what only makes sense together.
type exrNotes struct {
	capDate             string
	utcOffset           float64
	hasOffset           bool
	latitude, longitude float64
	hasLat, hasLon      bool
}

// set takes an attribute over. Standard attributes that make no sense are
// left unknown, because cameras write many; our own must be right, because
// without them an image would silently be judged in another view or without
// its sun.
func (a *Attributes) set(n *exrNotes, at exrAttribute) error {
	text := strings.ToValidUTF8(string(at.value), "\uFFFD")
	if at.kind == "float" && len(at.value) == 4 {
		v := float64(math.Float32frombits(binary.LittleEndian.Uint32(at.value)))
		switch at.name {
		case "utcOffset":
			n.utcOffset, n.hasOffset = v, math.Abs(v) <= 24*3600
		case "latitude":
			n.latitude, n.hasLat = shortest(v), math.Abs(v) <= 90
		case "longitude":
			n.longitude, n.hasLon = shortest(v), math.Abs(v) <= 180
		}
	}
	if at.kind == "string" {
		switch at.name {
		case "capDate":
			n.capDate = text
		case "comments":
			a.Comment = text
		case "software":
			a.Software = text
		case keyProjection:
			a.Projection = text
			return nil
		}
	}
	var vector *[3]float64
	switch at.name {
	case keyProjection:
		return fmt.Errorf("got type %q, want string", at.kind)
	case keyFOVDeg:
		v, err := at.doubles(1, "double")
		if err != nil {
			return err
		}
		a.FOVDeg = v[0]
	case keyPosition:
		vector = &a.Position
	case keyDirection:
		vector = &a.Direction
	case keyUp:
		vector = &a.Up
	case keyDiscs, keyDiscsInPixels:
		a.DiscsInPixels = at.name == keyDiscsInPixels
		return a.setDiscs(at)
	}
	if vector != nil {
		v, err := at.doubles(3, "v3d")
		if err != nil {
			return err
		}
		*vector = [3]float64(v)
	}
	return nil
}

// shortest turns a number that went through a 32 bit float back into the
// shortest decimal that has the same float: 52.3676, not 52.36759948730469.
func shortest(v float64) float64 {
	s, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', -1, 32), 64)
	if err != nil {
		return v
	}
	return s
}

// doubles returns the finite values of an attribute of the given kind.
func (at exrAttribute) doubles(n int, kind string) ([]float64, error) {
	if at.kind != kind || len(at.value) != 8*n {
		return nil, fmt.Errorf("got type %q with %d bytes, want %s with %d", at.kind, len(at.value), kind, 8*n)
	}
	out := make([]float64, n)
	for i := range out {
		out[i] = math.Float64frombits(binary.LittleEndian.Uint64(at.value[8*i:]))
		if math.IsNaN(out[i]) || math.IsInf(out[i], 0) {
			return nil, fmt.Errorf("got %g, want a finite number", out[i])
		}
	}
	return out, nil
}

func (a *Attributes) setDiscs(at exrAttribute) error {
	if at.kind != "stringvector" {
		return fmt.Errorf("got type %q, want stringvector", at.kind)
	}
	a.Discs = nil
	for b := at.value; len(b) > 0; {
		if len(b) < 4 || uint64(binary.LittleEndian.Uint32(b)) > uint64(len(b)-4) {
			return fmt.Errorf("text %d reaches past the end of the attribute", len(a.Discs)+1)
		}
		end := 4 + int(binary.LittleEndian.Uint32(b))
		d, err := parseDisc(string(b[4:end]))
		if err != nil {
			return err
		}
		if len(a.Discs) == maxDiscs {
			return fmt.Errorf("got more than %d discs", maxDiscs)
		}
		a.Discs = append(a.Discs, d)
		b = b[end:]
	}
	return nil
}

// finish turns the notes into attributes.
func (a *Attributes) finish(n exrNotes) {
	if t, err := time.Parse(exrDate, n.capDate); err == nil {
		a.Moment = t.Format(localTime)
		if n.hasOffset {
			zone := time.FixedZone("", -int(math.Round(n.utcOffset)))
			year, month, day := t.Date()
			a.Moment = time.Date(year, month, day, t.Hour(), t.Minute(), t.Second(), 0, zone).Format(time.RFC3339)
		}
	}
	if n.hasLat && n.hasLon {
		a.HasSite, a.LatitudeDeg, a.LongitudeDeg = true, n.latitude, n.longitude
	}
}
