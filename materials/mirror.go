package materials

// Mirror is an opaque finish that reflects a share in the mirror direction and
// a share diffusely, the same on both sides and at every incidence: polished
// or coated metal, whose reflectance changes little before grazing incidence.
type Mirror struct {
	Specular float64 // share thrown in the mirror direction
	Diffuse  float64 // share reflected diffusely; the sum is at most 1
}

// NewMirror checks the shares.
func NewMirror(specular, diffuse float64) (Mirror, error) {
	m := Mirror{Specular: specular, Diffuse: diffuse}
	return m, checkShares(share{"specular_reflectance", specular}, share{"diffuse_reflectance", diffuse})
}

func (m Mirror) Lambert(Side) (rho, tau float64) { return m.Diffuse, 0 }
func (m Mirror) Delta(Side, float64) (mirror, through float64) {
	return m.Specular, 0
}
func (m Mirror) Gloss(Side) *Gloss { return nil }
