package scene

import (
	"fmt"
	"math"

	"squint/materials"
	"squint/scene/project"
)

// buildFinish turns one finish of the project into its optical model, with
// that of its back where it has one. An error names file, line, finish and
// what is wrong.
func buildFinish(p *project.Project, f *project.Finish) (materials.BSDF, error) {
	return finishes{p}.build(f, false)
}

// finishes builds the optical models of a project's finishes.
type finishes struct{ p *project.Project }

func (fs finishes) fail(f *project.Finish, err error) (materials.BSDF, error) {
	return nil, fmt.Errorf("%s:%d: finish %q: %w", fs.p.File, f.Line, f.Name, err)
}

func (fs finishes) find(name string) *project.Finish {
	for i := range fs.p.Finishes {
		if fs.p.Finishes[i].Name == name {
			return &fs.p.Finishes[i]
		}
	}
	return nil
}

// build makes both sides. A base is built with perforated sheets refused,
// which keeps bases from running in a circle.
func (fs finishes) build(f *project.Finish, isBase bool) (materials.BSDF, error) {
	front, err := fs.side(f, isBase)
	if err != nil || f.Back == "" {
		return front, err
	}
	other := fs.find(f.Back)
	if other == nil {
		return fs.fail(f, fmt.Errorf("back: got %q, want the name of a finish", f.Back))
	}
	back, err := fs.side(other, isBase)
	if err != nil {
		return nil, err
	}
	both, err := materials.NewTwoSided(front, back)
	if err != nil {
		return fs.fail(f, fmt.Errorf("back: %w", err))
	}
	return both, nil
}

func (fs finishes) side(f *project.Finish, isBase bool) (materials.BSDF, error) {
	b, err := fs.model(f, isBase)
	if err != nil {
		return fs.fail(f, err)
	}
	factor, err := soilFactor(fs.p.Simulation.Soiling, f)
	if err != nil {
		return fs.fail(f, err)
	}
	return materials.Soiled(b, factor), nil
}

func (fs finishes) model(f *project.Finish, isBase bool) (materials.BSDF, error) {
	switch f.Type {
	case "matte":
		return materials.NewMatte(f.Reflectance)
	case "mirror":
		return materials.NewMirror(f.SpecularReflectance, f.DiffuseReflectance)
	case "glossy":
		return materials.NewGlossy(f.TotalReflectance, f.SpecularShare, f.SpreadDeg*math.Pi/180)
	case "glazing":
		if len(f.Table) == 0 {
			return materials.NewGlazing(f.Transmittance, f.Panes)
		}
		var rows []materials.GlazingRow
		for _, r := range f.Table {
			rows = append(rows, materials.GlazingRow{AngleRad: r[0] * math.Pi / 180, Transmittance: r[1], Reflectance: r[2]})
		}
		return materials.NewGlazingTable(rows)
	case "diffuser":
		return materials.NewDiffuser(f.DiffuseTransmittance, f.Reflectance)
	case "cloth":
		return newCloth(f.Openness, f.DiffuseTransmittance, f.Reflectance, f.BackReflectance, f.CutOffDeg)
	case "perforated":
		base := fs.find(f.Base)
		switch {
		case base == nil:
			return nil, fmt.Errorf("base: got %q, want the name of a finish", f.Base)
		case isBase || base.Type == "perforated" || base.Type == "glazing":
			return nil, fmt.Errorf("base: got %q, want a sheet that is neither perforated nor glazing", f.Base)
		}
		sheet, err := fs.build(base, true)
		if err != nil {
			return nil, err
		}
		return materials.NewPerforated(materials.Perforated{OpenShare: f.OpenShare,
			HoleDiameterM: f.HoleDiameterMM / 1000, ThicknessM: f.ThicknessMM / 1000, Base: sheet})
	}
	return nil, fmt.Errorf("type: got %q, want a type of finish that this version knows", f.Type)
}

// newCloth takes the front's reflectance for the back where back is nil.
func newCloth(openness, scattered, front float64, back *float64, cutOffDeg float64) (materials.Cloth, error) {
	c := materials.Cloth{Openness: openness, DiffuseTransmittance: scattered, ReflectanceFront: front, ReflectanceBack: front,
		CutOffRad: cutOffDeg * math.Pi / 180}
	if back != nil {
		c.ReflectanceBack = *back
	}
	return materials.NewCloth(c)
}

// groundFinish carries the ground's reflectance of no particular month; the
// engine multiplies by the month's. It must scatter, so it is not zero.
func groundFinish() materials.BSDF {
	b, err := materials.NewMatte(1)
	if err != nil {
		panic(err) // 1 is in range
	}
	return b
}
