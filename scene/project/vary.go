package project

import (
	"fmt"
	"math"
	"slices"

	"squint/materials"
)

// What a stated finish is usually off by, absolute: samples, dirt and batches
// differ, and catalogues round. Common practice, no published source.
const (
	diffuseTolerance  = 0.05 // diffuse reflectances, the ground's too
	mirrorTolerance   = 0.03 // what mirrors and glossy surfaces throw on
	glazingTolerance  = 0.03 // transmittances of panes and diffusers
	clothTolerance    = 0.02 // what cloths scatter through
	opennessTolerance = 0.01 // what cloths pass straight
)

// Variation changes one group of a project's finishes within the tolerances,
// all of the group alike.
type Variation struct {
	Group  string // "diffuse reflectances" or another, for reading
	Change string // "low" or "high"; of soiling its word
	By     string // the change in words: "-0.05"
	apply  func(*Project)
}

// shifted is x moved by a tolerance, at most by half of itself, so that nothing
// vanishes and nothing appears, and not beyond the most that is physical. Half is
// our own choice.
func shifted(x, by, most float64) float64 {
	return max(0, min(x+math.Copysign(min(math.Abs(by), x/2), by), max(most, x)))
}

// Variations lists those that change something of the project; each holds for
// it alone.
func Variations(p *Project) []Variation {
	var list []Variation
	for _, g := range []struct {
		group string
		by    string // %s stands for the sign
		vary  func(p *Project, sign float64)
	}{
		{"diffuse reflectances", "%s" + decimal(diffuseTolerance), varyDiffuse},
		{"mirrors", "%s" + decimal(mirrorTolerance), varyMirrors},
		{"glazing", "%s" + decimal(glazingTolerance), varyGlazing},
		{"cloths", "%s" + decimal(clothTolerance) + ", openness %[1]s" + decimal(opennessTolerance), varyCloths},
	} {
		for _, c := range []struct {
			change, mark string
			sign         float64
		}{{"low", "-", -1}, {"high", "+", 1}} {
			v := Variation{g.group, c.change, fmt.Sprintf(g.by, c.mark), func(p *Project) { g.vary(p, c.sign) }}
			if v.changes(p) {
				list = append(list, v)
			}
		}
	}
	if !slices.ContainsFunc(p.Finishes, func(f Finish) bool { return f.LossPerMonth > 0 }) {
		return list
	}
	now := p.Simulation.Soiling
	if now == "" {
		now = "clean"
	}
	for _, s := range []string{"clean", "average", "neglected"} {
		if s != now {
			list = append(list, Variation{"soiling", s, "instead of " + now, func(p *Project) { p.Simulation.Soiling = s }})
		}
	}
	return list
}

// changes is whether any value comes out other than it was.
func (v Variation) changes(p *Project) bool {
	return !slices.Equal(varied(p), varied(v.Of(p)))
}

// varied are the values that variations touch.
func varied(p *Project) (list []float64) {
	add := func(back *float64, all ...float64) {
		if list = append(list, all...); back != nil {
			list = append(list, *back)
		}
	}
	list = append(list, p.Ground.Reflectance[:]...)
	for _, f := range p.Finishes {
		add(f.BackReflectance, f.Reflectance, f.SpecularReflectance, f.DiffuseReflectance, f.TotalReflectance, f.SpecularShare, f.Transmittance, f.Openness, f.DiffuseTransmittance)
		for _, row := range f.Table {
			list = append(list, row[:]...)
		}
	}
	for _, c := range p.Rollers {
		add(c.BackReflectance, c.Openness, c.DiffuseTransmittance, c.Reflectance)
	}
	return list
}

// Of is the project with the variation; p itself is not touched.
func (v Variation) Of(p *Project) *Project {
	q := *p
	own := func(back *float64) *float64 {
		if back == nil {
			return nil
		}
		x := *back
		return &x
	}
	q.Finishes, q.Rollers = slices.Clone(p.Finishes), slices.Clone(p.Rollers)
	for i := range q.Finishes {
		f := &q.Finishes[i]
		f.Table, f.BackReflectance = slices.Clone(f.Table), own(f.BackReflectance)
	}
	for i := range q.Rollers {
		q.Rollers[i].BackReflectance = own(q.Rollers[i].BackReflectance)
	}
	v.apply(&q)
	return &q
}

func varyDiffuse(p *Project, sign float64) {
	by := sign * diffuseTolerance
	for i := range p.Ground.Reflectance {
		p.Ground.Reflectance[i] = shifted(p.Ground.Reflectance[i], by, 1)
	}
	for i := range p.Finishes {
		switch f := &p.Finishes[i]; f.Type {
		case "matte", "diffuser":
			f.Reflectance = shifted(f.Reflectance, by, 1-f.DiffuseTransmittance)
		case "mirror":
			f.DiffuseReflectance = shifted(f.DiffuseReflectance, by, 1-f.SpecularReflectance)
		case "glossy":
			lobe := f.TotalReflectance * f.SpecularShare
			f.parts(shifted(f.TotalReflectance-lobe, by, 1-lobe), lobe)
		}
	}
	for _, c := range clothsOf(p) {
		passes := *c.openness + *c.scattered
		*c.front = shifted(*c.front, by, 1-passes)
		if c.back != nil {
			*c.back = shifted(*c.back, by, 1-passes)
		}
	}
}

func varyMirrors(p *Project, sign float64) {
	by := sign * mirrorTolerance
	for i := range p.Finishes {
		switch f := &p.Finishes[i]; f.Type {
		case "mirror":
			f.SpecularReflectance = shifted(f.SpecularReflectance, by, 1-f.DiffuseReflectance)
		case "glossy":
			lobe := f.TotalReflectance * f.SpecularShare
			rest := f.TotalReflectance - lobe
			f.parts(rest, shifted(lobe, by, 1-rest))
		}
	}
}

// parts makes a glossy finish of its two parts.
func (f *Finish) parts(diffuse, lobe float64) {
	if f.TotalReflectance = min(diffuse+lobe, 1); f.TotalReflectance > 0 {
		f.SpecularShare = min(lobe/f.TotalReflectance, 1)
	}
}

// varyGlazing changes what panes and diffusers let through; where that leaves
// too little, reflectance gives way. So two sides of one pane go on letting the
// same through.
func varyGlazing(p *Project, sign float64) {
	by := sign * glazingTolerance
	for i := range p.Finishes {
		f := &p.Finishes[i]
		switch {
		case f.Type == "diffuser":
			f.DiffuseTransmittance = shifted(f.DiffuseTransmittance, by, 1)
			f.Reflectance = min(f.Reflectance, 1-f.DiffuseTransmittance)
		case f.Type != "glazing":
		case len(f.Table) == 0:
			f.Transmittance = shifted(f.Transmittance, by, materials.ClearTransmittance(f.Panes))
		case f.Table[0][1] > 0:
			// All angles in the ratio of the first row, none above 1.
			times := shifted(f.Table[0][1], by, 1) / f.Table[0][1]
			for _, row := range f.Table {
				if row[1] > 0 {
					times = min(times, 1/row[1])
				}
			}
			for k := range f.Table {
				row := &f.Table[k]
				row[1] *= times
				row[2] = min(row[2], 1-row[1])
			}
		}
	}
}

func varyCloths(p *Project, sign float64) {
	for _, c := range clothsOf(p) {
		most := *c.front
		if c.back != nil {
			most = max(most, *c.back)
		}
		*c.openness = shifted(*c.openness, sign*opennessTolerance, 1-*c.scattered-most)
		*c.scattered = shifted(*c.scattered, sign*clothTolerance, 1-*c.openness-most)
	}
}

// cloth points to the values of a cloth, of a finish or of a roller.
type cloth struct{ openness, scattered, front, back *float64 }

func clothsOf(p *Project) (list []cloth) {
	for i := range p.Finishes {
		if f := &p.Finishes[i]; f.Type == "cloth" {
			list = append(list, cloth{&f.Openness, &f.DiffuseTransmittance, &f.Reflectance, f.BackReflectance})
		}
	}
	for i := range p.Rollers {
		if r := &p.Rollers[i]; r.Cloth == "" {
			list = append(list, cloth{&r.Openness, &r.DiffuseTransmittance, &r.Reflectance, r.BackReflectance})
		}
	}
	return list
}
