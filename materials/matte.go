package materials

// Matte is an opaque Lambertian finish, the same on both sides.
type Matte struct {
	Reflectance float64 // total reflectance, 0 to 1
}

// NewMatte checks the reflectance.
func NewMatte(reflectance float64) (Matte, error) {
	return Matte{Reflectance: reflectance}, checkShare("reflectance", reflectance)
}

func (m Matte) Lambert(Side) (rho, tau float64)               { return m.Reflectance, 0 }
func (m Matte) Delta(Side, float64) (mirror, through float64) { return 0, 0 }
func (m Matte) Gloss(Side) *Gloss                             { return nil }
