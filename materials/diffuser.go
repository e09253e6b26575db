package materials

// Diffuser is an opal or milky panel: Lambertian back and through, the same
// for both sides.
type Diffuser struct {
	DiffuseTransmittance float64
	Reflectance          float64
}

// NewDiffuser checks the shares; their sum is at most 1.
func NewDiffuser(diffuseTransmittance, reflectance float64) (Diffuser, error) {
	d := Diffuser{DiffuseTransmittance: diffuseTransmittance, Reflectance: reflectance}
	return d, checkShares(share{"diffuse_transmittance", diffuseTransmittance}, share{"reflectance", reflectance})
}

func (d Diffuser) Lambert(Side) (rho, tau float64) {
	return d.Reflectance, d.DiffuseTransmittance
}
func (d Diffuser) Delta(Side, float64) (mirror, through float64) { return 0, 0 }
func (d Diffuser) Gloss(Side) *Gloss                             { return nil }
