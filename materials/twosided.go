package materials

import (
	"errors"
	"fmt"
	"math"
)

var (
	errNoBase  = errors.New("base: no finish given; name the finish of the sheet between the holes")
	errNoSides = errors.New("two sides: a finish is missing; name one for the front and one for the back")
)

// TwoSided joins two finishes back to back. Each is seen from its own front:
// Back's front side is turned to the back of the surface.
type TwoSided struct {
	Front, Back BSDF
}

// NewTwoSided checks that both finishes let the same light through, as light
// may travel either way; usually both are opaque.
func NewTwoSided(front, back BSDF) (*TwoSided, error) {
	if front == nil || back == nil {
		return nil, errNoSides
	}
	// Decimal inputs that agree do so exactly; the slack is for computed ones.
	const slack = 1e-9
	_, a := front.Lambert(Front)
	_, b := back.Lambert(Front)
	if math.Abs(a-b) > slack {
		return nil, fmt.Errorf("two sides: %w", &RangeError{Key: "diffuse_transmittance of the back", Got: b,
			Want: fmt.Sprintf("%g as on the front", a), Advice: "both sides must let the same light through"})
	}
	for i := 0; i <= 16; i++ {
		c := float64(i) / 16
		_, a := front.Delta(Front, c)
		_, b := back.Delta(Front, c)
		if math.Abs(a-b) > slack {
			return nil, fmt.Errorf("two sides: %w", &RangeError{Key: "transmittance of the back", Got: b,
				Want: fmt.Sprintf("%g as on the front", a), Advice: "both sides must let the same light through"})
		}
	}
	return &TwoSided{Front: front, Back: back}, nil
}

func (t *TwoSided) of(side Side) BSDF {
	if side == Back {
		return t.Back
	}
	return t.Front
}

func (t *TwoSided) Lambert(side Side) (rho, tau float64) { return t.of(side).Lambert(Front) }

func (t *TwoSided) Delta(side Side, cosTheta float64) (mirror, through float64) {
	return t.of(side).Delta(Front, cosTheta)
}

func (t *TwoSided) Gloss(side Side) *Gloss { return t.of(side).Gloss(Front) }
