package sunpath

import (
	"fmt"
	"math"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
)

// y2022 is a moment where the moment does not matter.
var y2022 = time.Date(2022, 3, 21, 12, 0, 0, 0, time.UTC)

const mirrorShare = .85

// mirrorYear is a year before a mirror of 4 x 4 m, 1 m below the eye, that rises by
// tilt towards north.
func mirrorYear(t *testing.T, tilt float64) *Year {
	m := newModel(t)
	b, err := materials.NewMirror(mirrorShare, 0)
	if err != nil {
		t.Fatal(err)
	}
	s, c := math.Sincos(tilt)
	m.rect(b, scene.System, r3.Vec{X: -2, Y: -2 * c, Z: -2 * s}, r3.Vec{X: 4}, r3.Vec{Y: 4 * c, Z: 4 * s})
	return compute(t, m.input(r3.Vec{Z: 1}))
}

// checkMirror holds a year against the law of reflection in a level mirror: the
// image of the sun stands as far below the horizon as the sun above, in the
// same azimuth, and is seen where the line to it runs through the mirror.
func checkMirror(y *Year) error {
	seen := 0
	for i := range y.Samples {
		s := &y.Samples[i]
		if s.Sun.Z < .05 {
			continue
		}
		x, far := s.Sun.X/s.Sun.Z, s.Sun.Y/s.Sun.Z // where the line meets the mirror
		edge := math.Max(math.Abs(x), math.Abs(far))
		// The disc's radius covers this much of the mirror, and rounding.
		rim := 1.01 * sunRadius / (s.Sun.Z * s.Sun.Z)
		switch {
		case edge < 2-rim:
			seen++
			want := r3.Vec{X: s.Sun.X, Y: s.Sun.Y, Z: -s.Sun.Z}
			if d := r3.Norm(r3.Sub(s.Image, want)); d > 1e-6 {
				return fmt.Errorf("%s: image is off by %.2g rad", s.Time, d)
			}
			if math.Abs(s.Mirrored-mirrorShare) > 1e-6 {
				return fmt.Errorf("%s: got %g of the sun, want %g", s.Time, s.Mirrored, mirrorShare)
			}
		case edge > 2+rim && s.Mirrored != 0:
			return fmt.Errorf("%s: got %g of the sun beside the mirror, want none", s.Time, s.Mirrored)
		}
	}
	if seen < 100 {
		return fmt.Errorf("got %d samples with an image, want enough to tell", seen)
	}
	return nil
}

func TestMirror(t *testing.T) {
	y := mirrorYear(t, 0)
	if err := checkMirror(y); err != nil {
		t.Error(err)
	}
	if math.Abs(y.Both-y.Mirrored.All) > 1e-6 { // rounding of sums
		t.Errorf("got %g of %g h with both, want all: nothing hides the sun", y.Both, y.Mirrored.All)
	}
	if checkMirror(mirrorYear(t, degrees(1))) == nil {
		t.Error("a mirror a degree off level passes as well")
	}
}
