package materials

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r3"
	"gonum.org/v1/gonum/stat/distuv"

	"squint/materials/sampling"
)

const (
	testSeed             = 20261201
	thetaCells, phiCells = 16, 24
	// draws lets a density 5 % off add 0.05^2 x draws = 250 to a statistic whose
	// standard deviation is at most sqrt(2 x 384) = 28.
	draws = 100000
	// Nodes of the Gauss-Legendre rule along each edge of a cell of 11 x 15
	// degrees: for Lambertian parts, products of sines and cosines, and for the
	// narrowest lobe tested, half width 5 degrees.
	lambertNodes, lobeNodes = 6, 20
)

// model is a finish as the harness sees it; twins replace a function.
type model struct {
	name   string
	b      BSDF
	eval   func(wo, wi r3.Vec) float64
	pdf    func(wo, wi r3.Vec) float64
	sample func(wo r3.Vec, u1, u2, u3 float64) (Scattered, bool)
}

func newModel(name string, b BSDF) model {
	return model{
		name:   name,
		b:      b,
		eval:   func(wo, wi r3.Vec) float64 { return Eval(b, wo, wi) },
		pdf:    func(wo, wi r3.Vec) float64 { return PDF(b, wo, wi) },
		sample: func(wo r3.Vec, u1, u2, u3 float64) (Scattered, bool) { return Sample(b, wo, u1, u2, u3) },
	}
}

func direction(thetaDeg, phiDeg float64) r3.Vec {
	st, ct := math.Sincos(thetaDeg * math.Pi / 180)
	sp, cp := math.Sincos(phiDeg * math.Pi / 180)
	return r3.Vec{X: st * cp, Y: st * sp, Z: ct}
}

func viewers() []r3.Vec {
	return []r3.Vec{{Z: 1}, direction(35, 200), direction(60, 17), direction(82, 90), direction(130, 300)}
}

// models holds every finish, with and without absorption.
func models(t testing.TB) []model {
	t.Helper()
	const deg = math.Pi / 180
	grey, err1 := NewMatte(0.5)
	aluminium, err2 := NewMirror(0.8, 0.05)
	pane, err3 := NewGlazing(0.88, 1)
	double, err4 := NewGlazing(ClearTransmittance(2), 2)
	coated, err5 := NewGlazingTable([]GlazingRow{{0, 0.62, 0.15}, {60 * deg, 0.52, 0.25}, {85 * deg, 0.1, 0.7}})
	screen, err6 := NewCloth(Cloth{Openness: 0.05, DiffuseTransmittance: 0.12, ReflectanceFront: 0.6, ReflectanceBack: 0.3, CutOffRad: 65 * deg})
	opal, err7 := NewDiffuser(0.6, 0.4)
	satin, err8 := NewGlossy(0.85, 0.7, 5*deg)
	white, err9 := NewGlossy(1, 1, 20*deg)
	rough, err10 := NewGlossy(0.6, 0.9, 50*deg)
	sheet, err11 := NewPerforated(Perforated{OpenShare: 0.3, HoleDiameterM: 0.002, ThicknessM: 0.001, Base: satin})
	sides, err12 := NewTwoSided(satin, grey)
	for _, err := range []error{err1, err2, err3, err4, err5, err6, err7, err8, err9, err10, err11, err12} {
		if err != nil {
			t.Fatal(err)
		}
	}
	return []model{
		newModel("matte", grey), newModel("white matte", Matte{1}), newModel("mirror", aluminium),
		newModel("single glazing", pane), newModel("clear double glazing", double), newModel("coated glazing", coated),
		newModel("cloth", screen), newModel("diffuser", opal),
		newModel("glossy 5 degrees", satin), newModel("glossy 20 degrees white", white), newModel("glossy 50 degrees", rough),
		newModel("perforated glossy", sheet), newModel("two-sided", sides),
	}
}

// sidak returns the level of each of n tests of joint significance 0.01.
// Source: Šidák, 1967, "Rectangular confidence regions for the means of
// multivariate normal distributions", JASA 62.
func sidak(n int) float64 { return 1 - math.Pow(1-0.01, 1/float64(n)) }

// zOf returns the two-sided normal quantile of the same level.
func zOf(n int) float64 { return distuv.UnitNormal.Quantile(1 - sidak(n)/2) }

// integrate returns the integral of f over each cell of polar angle and
// azimuth of the whole sphere.
func integrate(nodes int, f func(wi r3.Vec) float64) []float64 {
	x, w := make([]float64, nodes), make([]float64, nodes)
	quad.Legendre{}.FixedLocations(x, w, 0, 1)
	out := make([]float64, thetaCells*phiCells)
	for i := range thetaCells {
		for a := range nodes {
			theta := math.Pi * (float64(i) + x[a]) / thetaCells
			st, ct := math.Sincos(theta)
			for k := range phiCells {
				for b := range nodes {
					phi := 2*math.Pi*(float64(k)+x[b])/phiCells - math.Pi
					sp, cp := math.Sincos(phi)
					v := f(r3.Vec{X: st * cp, Y: st * sp, Z: ct})
					out[i*phiCells+k] += v * st * w[a] * w[b] * math.Pi / thetaCells * 2 * math.Pi / phiCells
				}
			}
		}
	}
	return out
}

// nodes returns the rule that a finish needs.
func nodes(b BSDF, wo r3.Vec) int {
	if b.Gloss(SideOf(wo)) != nil {
		return lobeNodes
	}
	return lambertNodes
}

// densities returns the integral of the density over each cell.
func (m model) densities(wo r3.Vec) []float64 {
	return integrate(nodes(m.b, wo), func(wi r3.Vec) float64 { return m.pdf(wo, wi) })
}

func total(cells []float64) float64 {
	var s float64
	for _, c := range cells {
		s += c
	}
	return s
}

func cellOf(w r3.Vec) int {
	theta := math.Atan2(math.Hypot(w.X, w.Y), w.Z)
	phi := (math.Atan2(w.Y, w.X) + math.Pi) / (2 * math.Pi)
	return min(int(theta/math.Pi*thetaCells), thetaCells-1)*phiCells + min(int(phi*phiCells), phiCells-1)
}

// deltaShares returns what the delta parts send to a viewer.
func deltaShares(b BSDF, wo r3.Vec) (mirror, through float64) {
	mirror, _ = b.Delta(SideOf(wo), math.Abs(wo.Z))
	_, through = b.Delta(SideOf(wo).Opposite(), math.Abs(wo.Z))
	return mirror, through
}

// tally is a run of draws for one viewer.
type tally struct {
	cells        []int // by direction, then mirror, through, lost
	mean, stdErr float64
	exact        bool // directions of the delta kinds are what they must be
}

func (m model) draw(wo r3.Vec) tally {
	t := tally{cells: make([]int, thetaCells*phiCells+3), exact: true}
	n := thetaCells * phiCells
	s := sampling.NewStream(testSeed)
	var s1, s2 float64
	for range draws {
		x, ok := m.sample(wo, s.Float64(), s.Float64(), s.Float64())
		switch {
		case !ok:
			t.cells[n+2]++
			continue
		case x.Kind == KindMirror:
			t.cells[n]++
			t.exact = t.exact && x.Wi == r3.Vec{X: -wo.X, Y: -wo.Y, Z: wo.Z} && x.PDF == 0
		case x.Kind == KindThrough:
			t.cells[n+1]++
			t.exact = t.exact && x.Wi == r3.Scale(-1, wo) && x.PDF == 0
		default:
			t.cells[cellOf(x.Wi)]++
		}
		s1 += x.Weight
		s2 += x.Weight * x.Weight
	}
	t.mean = s1 / draws
	t.stdErr = math.Sqrt(max(0, s2/draws-t.mean*t.mean) / draws)
	return t
}

// expected returns the counts that densities over the cells and the delta
// shares promise.
func (m model) expected(wo r3.Vec, densities []float64) []float64 {
	rho, _ := m.b.Lambert(SideOf(wo))
	_, tau := m.b.Lambert(SideOf(wo).Opposite())
	mirror, through := deltaShares(m.b, wo)
	sum := rho + tau + mirror + through
	if g := m.b.Gloss(SideOf(wo)); g != nil {
		sum += g.Reflectance
	}
	e := append([]float64(nil), densities...)
	e = append(e, mirror/sum, through/sum)
	e = append(e, max(0, 1-total(e))) // lost below the horizon
	for i := range e {
		e[i] *= draws
	}
	return e
}

// chiSquare returns Pearson's p; cells expecting fewer than 5 are pooled
// (Cochran's rule).
func chiSquare(observed []int, expected []float64) (p, statistic float64, degrees int) {
	var poolO, poolE float64
	cells := 0
	for i, e := range expected {
		if e < 5 {
			poolO += float64(observed[i])
			poolE += e
			continue
		}
		d := float64(observed[i]) - e
		statistic += d * d / e
		cells++
	}
	if poolE >= 5 {
		statistic += (poolO - poolE) * (poolO - poolE) / poolE
		cells++
	} else if poolO > poolE+10*math.Sqrt(poolE+1) {
		return 0, math.Inf(1), cells // counts where hardly any can be
	}
	degrees = cells - 1
	if degrees == 0 {
		if statistic < 1e-9 {
			return 1, statistic, 0
		}
		return 0, statistic, 0
	}
	return distuv.ChiSquared{K: float64(degrees)}.Survival(statistic), statistic, degrees
}

// albedo returns the share that reaches a viewer under an even sky of unit
// luminance on both sides.
func (m model) albedo(wo r3.Vec) float64 {
	mirror, through := deltaShares(m.b, wo)
	return mirror + through + total(integrate(nodes(m.b, wo), func(wi r3.Vec) float64 { return m.eval(wo, wi) * math.Abs(wi.Z) }))
}
