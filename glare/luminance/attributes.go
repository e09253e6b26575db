package luminance

import (
	"fmt"
	"math"
	"strings"
	"time"
)

// Attributes is what is known about an image. Zero values mean unknown, but
// for Relative.
type Attributes struct {
	Projection string  // a name of scene/view; "" unknown
	FOVDeg     float64 // full angle of the projection, degrees; 0 unknown

	Position, Direction, Up [3]float64 // eye point (m) and axes, world; Direction zero: unknown

	// Moment is local time as RFC 3339 ("2026-03-21T09:00:00+01:00"), or
	// without the offset where a file does not tell it. "" unknown. Files
	// keep whole seconds.
	Moment string

	HasSite                   bool    // the next two are known
	LatitudeDeg, LongitudeDeg float64 // north and east positive

	// Discs are sources kept beside the pixels: the sun and its mirror
	// images, whose luminance would be lost if spread over a pixel.
	Discs []Disc
	// DiscsInPixels means that the pixels hold the discs' light as well, as
	// SpreadDiscs leaves it; else they do not.
	DiscsInPixels bool

	// Relative means that the file does not say how many cd/m2 the value 1
	// is; Lum is in units of its own until scaled by a measurement.
	Relative bool

	Comment  string // free text
	Software string // program and version that made the image
}

// Disc is a source kept beside the pixels.
type Disc struct {
	Direction [3]float64 // unit, in the view frame: forward, left, up
	OmegaSr   float64    // visible solid angle, sr
	Luminance float64    // mean over it, cd/m2
}

// localTime is RFC 3339 without the offset.
const localTime = "2006-01-02T15:04:05"

// parseMoment returns the moment's wall clock and, where known, its offset.
func parseMoment(s string) (t time.Time, hasOffset bool, err error) {
	if t, err = time.Parse(time.RFC3339, s); err == nil {
		return t, true, nil
	}
	if t, err = time.Parse(localTime, s); err == nil {
		return t, false, nil
	}
	return t, false, fmt.Errorf("%w: moment: got %q, want a time like 2026-03-21T09:00:00+01:00", ErrInvalid, s)
}

func (a *Attributes) validate() error {
	if a.Moment != "" {
		if _, _, err := parseMoment(a.Moment); err != nil {
			return err
		}
	}
	if a.HasSite && !(math.Abs(a.LatitudeDeg) <= 90 && math.Abs(a.LongitudeDeg) <= 180) {
		return fmt.Errorf("%w: site: got latitude %g, longitude %g, want -90 to 90 and -180 to 180 degrees", ErrInvalid, a.LatitudeDeg, a.LongitudeDeg)
	}
	for _, s := range [...]struct{ name, text string }{
		{"projection", a.Projection}, {"comment", a.Comment}, {"software", a.Software},
	} {
		if len(s.text) > maxText {
			return fmt.Errorf("%w: %s: got %d bytes, want at most %d", ErrInvalid, s.name, len(s.text), maxText)
		}
	}
	if !finite(a.FOVDeg) {
		return fmt.Errorf("%w: field of view: got %g degrees, want a finite number", ErrInvalid, a.FOVDeg)
	}
	for _, v := range [...]struct {
		name string
		vec  [3]float64
	}{{"position", a.Position}, {"direction", a.Direction}, {"up", a.Up}} {
		if !finite(v.vec[:]...) {
			return fmt.Errorf("%w: %s: got %v, want finite numbers", ErrInvalid, v.name, v.vec)
		}
	}
	for i, d := range a.Discs {
		if !finite(d.Direction[:]...) || !finite(d.OmegaSr, d.Luminance) || d.OmegaSr < 0 || d.Luminance < 0 {
			return fmt.Errorf("%w: disc %d: got %+v, want finite numbers, solid angle and luminance of 0 or more", ErrInvalid, i+1, d)
		}
	}
	if len(a.Discs) > maxDiscs {
		return fmt.Errorf("%w: discs: got %d, want at most %d", ErrInvalid, len(a.Discs), maxDiscs)
	}
	return nil
}

// maxText (bytes of one text) and maxDiscs keep a file's header readable by
// our own reader, which limits it to maxHeader. Own choice.
const (
	maxText  = 1 << 16
	maxDiscs = 1 << 10
)

func finite(values ...float64) bool {
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// text writes a disc as five numbers; they read back exactly.
func (d Disc) text() string {
	return fmt.Sprintf("%v %v %v %v %v", d.Direction[0], d.Direction[1], d.Direction[2], d.OmegaSr, d.Luminance)
}

// parseDisc is the inverse of text. It does not accept numbers that are not
// finite, nor a solid angle or luminance below 0.
func parseDisc(s string) (Disc, error) {
	var d Disc
	fields := strings.Fields(s)
	want := []*float64{&d.Direction[0], &d.Direction[1], &d.Direction[2], &d.OmegaSr, &d.Luminance}
	if len(fields) != len(want) {
		return d, fmt.Errorf("got %q, want five numbers: direction forward, left, up, solid angle, luminance", s)
	}
	for i, f := range fields {
		v, err := parseFinite(f)
		if err != nil {
			return d, fmt.Errorf("got %q: %w", s, err)
		}
		*want[i] = v
	}
	if d.OmegaSr < 0 || d.Luminance < 0 {
		return d, fmt.Errorf("got %q, want a solid angle and luminance of 0 or more", s)
	}
	return d, nil
}
