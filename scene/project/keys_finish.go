package project

import "strings"

// finishCommon are the keys of every finish.
var finishCommon = []key[Finish]{
	{spec{name: "name", about: "by which meshes, openings and systems call it", required: true, form: itemName}, func(f *Finish) any { return &f.Name }},
	{spec{name: "type", about: "decides which further keys there are", required: true, choices: finishTypeNames()}, func(f *Finish) any { return &f.Type }},
	{spec{name: "loss_per_month", about: "dirt: share of its light that the finish loses more with each month since the last cleaning; counts as simulation.soiling says", in: monthlyLoss, def: "0", source: own, quiet: true}, func(f *Finish) any { return &f.LossPerMonth }},
	{spec{name: "cleaning_months", about: "months from cleaning to cleaning; with loss_per_month", in: within{lo: 1, hi: 12}, def: "12", source: usual, quiet: true}, func(f *Finish) any { return &f.CleaningMonths }},
}

// finishType is one type of finish and the keys that it has beside the
// common ones.
type finishType struct {
	name, about string
	keys        []key[Finish]
	check       func(*reader, *node, *Finish)
}

// backOf is the key of the other side, whose finish may be of these types.
func backOf(types ...string) key[Finish] {
	return key[Finish]{spec{name: "back", about: "finish of the side that the normal points away from; else both sides are alike", refers: "finish", types: types}, func(f *Finish) any { return &f.Back }}
}

// opaque are the types that let no light through.
var opaque = []string{"matte", "mirror", "glossy"}

var (
	// cutOff: below 1 degree nothing would pass at all.
	cutOff = within{lo: 1, hi: 90}
	// spread is the range of materials.NewGlossy.
	spread = within{lo: 0.5, hi: 60}
	// holes of equal size cover 0.907 of the area where they touch.
	// Source: densest packing of equal circles, pi/sqrt(12), Thue 1910.
	holes = within{lo: 0, hi: 0.9}
	// sheetMM keeps holes too small to be resolved; larger ones are for the mesh.
	sheetMM = within{lo: 0, hi: 50}
	holeMM  = within{lo: 0.01, hi: 50}
	// monthlyLoss: more would leave nothing after ten months; own choice.
	monthlyLoss = within{lo: 0, hi: 0.1}
)

var finishTypes = []finishType{
	{"matte", "reflects diffusely", []key[Finish]{
		{spec{name: "reflectance", about: "diffuse", required: true, in: share}, func(f *Finish) any { return &f.Reflectance }},
		backOf(opaque...),
	}, nil},
	{"mirror", "reflects as a mirror, and diffusely", []key[Finish]{
		{spec{name: "specular_reflectance", about: "as a mirror", required: true, in: share}, func(f *Finish) any { return &f.SpecularReflectance }},
		{spec{name: "diffuse_reflectance", about: "besides", in: share, def: "0", source: own}, func(f *Finish) any { return &f.DiffuseReflectance }},
		backOf(opaque...),
	}, checkMirror},
	{"glossy", "reflects in part about the mirror direction, else diffusely", []key[Finish]{
		{spec{name: "total_reflectance", about: "glossy and diffuse together", required: true, in: share}, func(f *Finish) any { return &f.TotalReflectance }},
		{spec{name: "specular_share", about: "share of total_reflectance that goes about the mirror direction", required: true, in: share}, func(f *Finish) any { return &f.SpecularShare }},
		{spec{name: "spread_deg", about: "angle from the mirror direction at which a thin beam from straight ahead has fallen to half its peak", required: true, in: spread}, func(f *Finish) any { return &f.SpreadDeg }},
		backOf(opaque...),
	}, nil},
	{"glazing", "clear panes", []key[Finish]{
		{spec{name: "transmittance", about: "visible, at normal incidence", in: share}, func(f *Finish) any { return &f.Transmittance }},
		{spec{name: "panes", about: "number of panes that share the transmittance", in: within{lo: 1, hi: 4}, def: "2", source: usual}, func(f *Finish) any { return &f.Panes }},
		{spec{name: "table", about: "instead of transmittance: rows of angle of incidence (degrees), transmittance, reflectance"}, func(f *Finish) any { return &f.Table }},
		backOf("glazing"),
	}, checkGlazing},
	{"diffuser", "scatters what it reflects and what it lets through", []key[Finish]{
		{spec{name: "diffuse_transmittance", about: "share of light that passes scattered", required: true, in: share}, func(f *Finish) any { return &f.DiffuseTransmittance }},
		{spec{name: "reflectance", about: "diffuse", required: true, in: share}, func(f *Finish) any { return &f.Reflectance }},
		backOf("diffuser"),
	}, checkDiffuser},
	{"cloth", "fabric too fine to be resolved", []key[Finish]{
		{spec{name: "openness", about: "share of light that passes straight between the threads", required: true, in: share}, func(f *Finish) any { return &f.Openness }},
		{spec{name: "diffuse_transmittance", about: "share of light that passes scattered", required: true, in: share}, func(f *Finish) any { return &f.DiffuseTransmittance }},
		{spec{name: "reflectance", about: "diffuse; of both sides without back_reflectance", required: true, in: share}, func(f *Finish) any { return &f.Reflectance }},
		{spec{name: "back_reflectance", about: "diffuse, of the side that the normal points away from", in: share}, func(f *Finish) any { return &f.BackReflectance }},
		{spec{name: "cut_off_deg", about: "angle of incidence from which nothing passes straight; without it openness holds at every angle", in: cutOff}, func(f *Finish) any { return &f.CutOffDeg }},
	}, func(r *reader, n *node, f *Finish) {
		checkCloth(r, n, "finish", f.Openness, f.DiffuseTransmittance, f.Reflectance, f.BackReflectance)
	}},
	{"perforated", "sheet with round holes too small to be resolved", []key[Finish]{
		{spec{name: "open_share", about: "share of the area that is holes", required: true, in: holes}, func(f *Finish) any { return &f.OpenShare }},
		{spec{name: "hole_diameter_mm", about: "in millimetres", required: true, in: holeMM}, func(f *Finish) any { return &f.HoleDiameterMM }},
		{spec{name: "thickness_mm", about: "of the sheet, in millimetres; 0 passes open_share at every angle", required: true, in: sheetMM}, func(f *Finish) any { return &f.ThicknessMM }},
		{spec{name: "base", about: "finish of the sheet between the holes", required: true, refers: "finish", types: []string{"matte", "mirror", "glossy", "diffuser", "cloth"}}, func(f *Finish) any { return &f.Base }},
		backOf("perforated"),
	}, checkPerforated},
}

func finishTypeNames() []string {
	list := make([]string, len(finishTypes))
	for i, t := range finishTypes {
		list[i] = t.name
	}
	return list
}

func finishSection() section {
	const name = "finish"
	s := section{name: name, about: "a surface", list: true, keys: describe(finishCommon)}
	for _, t := range finishTypes {
		s.variants = append(s.variants, variant{t.name, t.about, describe(t.keys)})
	}
	s.read = func(r *reader, n *node, p *Project) {
		f := Finish{Line: n.line}
		decode(r, n, name, finishCommon, &f)
		checkSoiling(r, n, &f)
		known := names(finishCommon)
		for _, t := range finishTypes {
			if t.name == f.Type {
				decode(r, n, name, t.keys, &f)
				known = append(known, names(t.keys)...)
				if t.check != nil {
					t.check(r, n, &f)
				}
			}
		}
		unknownFinishKeys(r, n, &f, known)
		if f.Back != "" && f.Back == f.Name {
			r.reject(n, name, "back", "got the finish itself; leave it out where both sides are alike")
		}
		r.finishes = append(r.finishes, n)
		keep(r, n, name, &p.Finishes, f, func(f *Finish) string { return f.Name })
	}
	return s
}

// unknownFinishKeys tells keys of other types from keys of none. Without a
// type, keys of any type may be right.
func unknownFinishKeys(r *reader, n *node, f *Finish, known []string) {
	owners := map[string][]string{}
	for _, t := range finishTypes {
		for _, k := range names(t.keys) {
			owners[k] = append(owners[k], t.name)
		}
	}
	isKnown := map[string]bool{}
	for _, k := range known {
		isKnown[k] = true
	}
	candidates := known
	if f.Type == "" {
		for _, t := range finishTypes {
			candidates = append(candidates, names(t.keys)...)
		}
	}
	for _, k := range n.keys {
		switch of := owners[k]; {
		case isKnown[k], of != nil && f.Type == "":
		case of != nil:
			r.reject(n, "finish", k, "no key of type %q but of %s; want %s", f.Type, oneOf(of), strings.Join(known, ", "))
		default:
			r.reject(n, "finish", k, "unknown key; %s", DidYouMean(k, candidates))
		}
	}
}

// roundOff lets shares that are written with two or three decimals add up to
// 1 although their binary sum exceeds it; package materials allows as much.
const roundOff = 1e-12

// checkSoiling: dirt cannot take more than all light, as materials.NewSoiling
// has it.
func checkSoiling(r *reader, n *node, f *Finish) {
	if all := f.LossPerMonth * float64(f.CleaningMonths); n.good("loss_per_month", "cleaning_months") && all > 1+roundOff {
		r.reject(n, "finish", "loss_per_month", "got %g with cleaning_months %d, together %.4g, want at most 1; dirt cannot take more than all light", f.LossPerMonth, f.CleaningMonths, all)
	}
}

func checkMirror(r *reader, n *node, f *Finish) {
	if sum := f.SpecularReflectance + f.DiffuseReflectance; n.good("specular_reflectance", "diffuse_reflectance") && sum > 1+roundOff {
		r.reject(n, "finish", "specular_reflectance", "got %g and diffuse_reflectance %g, together %.4g, want at most 1", f.SpecularReflectance, f.DiffuseReflectance, sum)
	}
}

func checkDiffuser(r *reader, n *node, f *Finish) {
	if sum := f.DiffuseTransmittance + f.Reflectance; n.good("diffuse_transmittance", "reflectance") && sum > 1+roundOff {
		r.reject(n, "finish", "diffuse_transmittance", "got %g and reflectance %g, together %.4g, want at most 1", f.DiffuseTransmittance, f.Reflectance, sum)
	}
}

// checkCloth is for cloths and rollers.
func checkCloth(r *reader, n *node, section string, openness, scattered, front float64, back *float64) {
	if !n.good("openness", "diffuse_transmittance") {
		return
	}
	check := func(key string, reflectance float64) bool {
		sum := openness + scattered + reflectance
		if !n.good(key) || sum <= 1+roundOff {
			return true
		}
		r.reject(n, section, "openness", "got %g, diffuse_transmittance %g and %s %g, together %.4g, want at most 1", openness, scattered, key, reflectance, sum)
		return false
	}
	if check("reflectance", front) && back != nil {
		check("back_reflectance", *back)
	}
}

func checkPerforated(r *reader, n *node, f *Finish) {
	if f.Base != "" && f.Base == f.Name {
		r.reject(n, "finish", "base", "got the finish itself; want the finish of the sheet between the holes")
	}
}

func checkGlazing(r *reader, n *node, f *Finish) {
	const name = "finish"
	switch {
	case n.has("table") && n.has("transmittance"):
		r.reject(n, name, "table", "got transmittance too; want one of the two")
		return
	case n.has("table") && n.has("panes"):
		r.reject(n, name, "panes", "got a table too, which holds for all panes together; leave panes out")
		return
	case !n.has("table") && !n.has("transmittance"):
		r.reject(n, name, "transmittance", "missing; want 0 to 1, or a table")
		return
	case !n.has("table") || !n.good("table"):
		return
	}
	f.Panes = 0
	t := f.Table
	if len(t) < 2 || t[0][0] != 0 || t[len(t)-1][0] != 90 {
		r.reject(n, name, "table", "got %s, want at least two, the first at 0 degrees and the last at 90 (all light reflected: [90, 0, 1])", count(len(t), "row"))
		return
	}
	for i, row := range t {
		switch {
		case i > 0 && row[0] <= t[i-1][0]:
			r.reject(n, name, "table", "row %d: got angle %g after %g, want rising angles", i+1, row[0], t[i-1][0])
		case !share.holds(row[1]) || !share.holds(row[2]):
			r.reject(n, name, "table", "row %d: got transmittance %g and reflectance %g, want 0 to 1", i+1, row[1], row[2])
		case row[1]+row[2] > 1+roundOff:
			r.reject(n, name, "table", "row %d: got transmittance %g and reflectance %g, together %.4g, want at most 1", i+1, row[1], row[2], row[1]+row[2])
		}
	}
}
