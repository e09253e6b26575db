package materials

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Side names one of the two sides of a thin surface.
type Side int

const (
	// Front is the side the geometric normal points to (local z > 0).
	Front Side = iota
	// Back is the other side.
	Back
)

// SideOf returns the side a local direction lies on; directions in the plane
// of the surface count as Front.
func SideOf(w r3.Vec) Side {
	if w.Z < 0 {
		return Back
	}
	return Front
}

// Opposite returns the other side.
func (s Side) Opposite() Side { return 1 - s }

// BSDF is the scattering of a finish. What passes must not depend on the
// direction of travel: Lambert and Delta return the same tau and through for
// both sides (reciprocity), and no more leaves than arrives.
type BSDF interface {
	// Lambert returns, of light arriving on side from any direction, the share
	// that is diffusely reflected and the share that is diffusely transmitted.
	Lambert(side Side) (rho, tau float64)
	// Delta returns, of light arriving on side at an incidence of cosine
	// cosTheta (0 to 1), the share thrown in the mirror direction and the share
	// that goes straight through.
	Delta(side Side, cosTheta float64) (mirror, through float64)
	// Gloss returns the glossy lobe of side, nil where there is none. Its
	// directions are in a frame whose z points to the viewer's side.
	Gloss(side Side) *Gloss
}

// Eval returns the BSDF per steradian without the delta parts, the cosine
// omitted.
func Eval(b BSDF, wo, wi r3.Vec) float64 {
	if wo.Z == 0 || wi.Z == 0 {
		return 0
	}
	from := SideOf(wi)
	rho, tau := b.Lambert(from)
	if SideOf(wo) != from {
		return tau / math.Pi
	}
	f := rho / math.Pi
	if g := b.Gloss(from); g != nil {
		f += g.Eval(toSide(wo, from), toSide(wi, from))
	}
	return f
}

// toSide turns a local direction into the frame whose z points to side.
func toSide(w r3.Vec, side Side) r3.Vec {
	if side == Back {
		w.Z = -w.Z
	}
	return w
}
