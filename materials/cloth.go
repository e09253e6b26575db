package materials

import "math"

// Cloth is a screen or blind fabric too fine to be resolved: a share of light
// passes between the yarns undisturbed, the yarns scatter some through and
// some back, as Lambertian surfaces.
//
// Terms after EN 14500: Openness stands for the normal-normal transmittance,
// DiffuseTransmittance for the normal-diffuse one (from memory).
type Cloth struct {
	Openness             float64 // share passing straight through at normal incidence
	DiffuseTransmittance float64 // share scattered through
	ReflectanceFront     float64
	ReflectanceBack      float64
	// CutOffRad is the incidence beyond which nothing passes straight through,
	// above 0 to pi/2. Zero means none: Openness holds at every incidence.
	CutOffRad float64
}

// NewCloth checks the shares, for each side a sum of at most 1, and the angle.
func NewCloth(c Cloth) (Cloth, error) {
	for _, r := range []share{{"reflectance", c.ReflectanceFront}, {"reflectance_back", c.ReflectanceBack}} {
		err := checkShares(share{"openness", c.Openness},
			share{"diffuse_transmittance", c.DiffuseTransmittance}, r)
		if err != nil {
			return c, err
		}
	}
	if !(c.CutOffRad >= 0 && c.CutOffRad <= math.Pi/2) {
		return c, &RangeError{Key: "cut_off_deg", Got: c.CutOffRad * 180 / math.Pi, Want: "0 to 90",
			Advice: "0 means no cut-off"}
	}
	return c, nil
}

func (c Cloth) Lambert(side Side) (rho, tau float64) {
	if side == Back {
		return c.ReflectanceBack, c.DiffuseTransmittance
	}
	return c.ReflectanceFront, c.DiffuseTransmittance
}

// Delta returns the angular openness. With a cut-off it is
// Openness cos^b(pi/2 theta/CutOffRad), b = max(0.6 cos^0.3(pi/2 Openness), 0.35).
// Source: Kotey, Wright, Collins, 2009, "Determining off-normal solar optical
// properties of roller blinds", ASHRAE Transactions 115(1); form and
// coefficients from memory, for solar radiation: check before relying on them.
// What the yarns then hold back beyond the share at normal incidence is
// absorbed.
func (c Cloth) Delta(_ Side, cosTheta float64) (mirror, through float64) {
	if c.CutOffRad == 0 || c.Openness == 0 {
		return 0, c.Openness
	}
	x := math.Acos(min(max(cosTheta, 0), 1)) / c.CutOffRad
	if x >= 1 {
		return 0, 0
	}
	b := max(0.6*math.Pow(math.Cos(math.Pi/2*c.Openness), 0.3), 0.35)
	return 0, c.Openness * math.Pow(math.Cos(math.Pi/2*x), b)
}

func (c Cloth) Gloss(Side) *Gloss { return nil }
