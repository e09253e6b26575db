package scene

import (
	"fmt"
	"math"

	"squint/materials"
	"squint/scene/project"
)

// buildFinish turns one finish of the project into its optical model, with
// that of its back where it has one.
func buildFinish(p *project.Project, f *project.Finish) (materials.BSDF, error) {
	front, err := buildSide(p, f)
	if err != nil || f.Back == "" {
		return front, err
	}
	for i := range p.Finishes {
		if p.Finishes[i].Name != f.Back {
			continue
		}
		back, err := buildSide(p, &p.Finishes[i])
		if err != nil {
			return nil, err
		}
		both, err := materials.NewTwoSided(front, back)
		if err != nil {
			return nil, fmt.Errorf("%s:%d: finish %q: back: %w", p.File, f.Line, f.Name, err)
		}
		return both, nil
	}
	return nil, fmt.Errorf("%s:%d: finish %q: back: got %q, want the name of a finish", p.File, f.Line, f.Name, f.Back)
}

func buildSide(p *project.Project, f *project.Finish) (materials.BSDF, error) {
	fail := func(err error) (materials.BSDF, error) {
		return nil, fmt.Errorf("%s:%d: finish %q: %w", p.File, f.Line, f.Name, err)
	}
	switch f.Type {
	case "matte":
		b, err := materials.NewMatte(f.Reflectance)
		if err != nil {
			return fail(err)
		}
		return b, nil
	case "mirror":
		b, err := materials.NewMirror(f.SpecularReflectance, f.DiffuseReflectance)
		if err != nil {
			return fail(err)
		}
		return b, nil
	case "glazing":
		if len(f.Table) > 0 {
			var rows []materials.GlazingRow
			for _, r := range f.Table {
				rows = append(rows, materials.GlazingRow{AngleRad: r[0] * math.Pi / 180, Transmittance: r[1], Reflectance: r[2]})
			}
			b, err := materials.NewGlazingTable(rows)
			if err != nil {
				return fail(err)
			}
			return b, nil
		}
		b, err := materials.NewGlazing(f.Transmittance, f.Panes)
		if err != nil {
			return fail(err)
		}
		return b, nil
	}
	return fail(fmt.Errorf("type: got %q, want matte, mirror or glazing", f.Type))
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
