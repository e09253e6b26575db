package materials

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"
)

const (
	albedoSteps = 128 // intervals of the table, in the square root of the cosine
	albedoRings = 48  // strata of the visible normals: radius
	albedoSpoke = 32  // and angle over half the disc
)

// albedoTable holds the share of light that a perfectly reflecting lobe sends
// on after one reflection, by the cosine of incidence.
type albedoTable struct {
	share [albedoSteps + 1]float64
	mean  float64 // over light arriving evenly from the hemisphere

	// The rest, 1-share times the cosine, as a distribution of directions: in
	// each interval the density is a constant, rest, times cosine/pi; sum is the
	// chance of the intervals before it.
	rest [albedoSteps]float64
	sum  [albedoSteps + 1]float64
}

// newAlbedoTable integrates masking over the visible normals.
func newAlbedoTable(alpha float64) *albedoTable {
	g := Gloss{Alpha: alpha}
	var points [albedoRings * albedoSpoke]struct{ x, y, weight float64 }
	var sum float64
	for j := range albedoRings {
		// The steep facets crowd at the rim of the disc: strata grow finer there.
		x := 1 - (float64(j)+0.5)/albedoRings
		r, weight := math.Sqrt(1-x*x*x), x*x
		for k := range albedoSpoke {
			// The lobe is symmetric about the plane of incidence: half the disc.
			s, c := math.Sincos(math.Pi * ((float64(k)+0.5)/albedoSpoke - 0.5))
			p := &points[j*albedoSpoke+k]
			p.x, p.y, p.weight = r*c, r*s, weight
			sum += weight
		}
	}
	t := &albedoTable{}
	for i := range t.share {
		c := float64(i) / albedoSteps
		c = max(c*c, 1e-6) // at grazing incidence itself the lobe is not defined
		wo := r3.Vec{X: math.Sqrt(1 - c*c), Z: c}
		mo := g.masked(wo)
		var s float64
		for _, p := range points {
			if wi := g.reflect(wo, p.x, p.y); wi.Z > 0 {
				s += p.weight * (wo.Z + mo) * wi.Z / (wo.Z*wi.Z + wi.Z*mo + wo.Z*g.masked(wi))
			}
		}
		t.share[i] = s / sum
	}
	t.mean = t.hemispherical()
	t.distribute()
	return t
}

// distribute prepares rest and sum.
func (t *albedoTable) distribute() {
	for i := range t.rest {
		t.rest[i] = max(0, 1-(t.share[i]+t.share[i+1])/2)
		t.sum[i+1] = t.sum[i] + t.rest[i]*(squaredCosine(i+1)-squaredCosine(i))
	}
	if all := t.sum[albedoSteps]; all > 0 {
		for i := range t.rest {
			t.rest[i] /= all
			t.sum[i+1] /= all
		}
	}
}

// squaredCosine belongs to node i of the table.
func squaredCosine(i int) float64 {
	c := float64(i) / albedoSteps
	return c * c * c * c
}

// sampleRest draws a direction with density restPDF.
func (t *albedoTable) sampleRest(u, v float64) r3.Vec {
	i := min(max(sort.Search(albedoSteps, func(k int) bool { return t.sum[k+1] > u }), 0), albedoSteps-1)
	lo, hi := squaredCosine(i), squaredCosine(i+1)
	c2 := lo
	if w := t.sum[i+1] - t.sum[i]; w > 0 {
		c2 += min(max((u-t.sum[i])/w, 0), 1) * (hi - lo)
	}
	r := math.Sqrt(max(0, 1-c2))
	s, c := math.Sincos(2 * math.Pi * v)
	return r3.Vec{X: r * c, Y: r * s, Z: math.Sqrt(c2)}
}

// restPDF is per steradian; domain of cosTheta: 0 to 1.
func (t *albedoTable) restPDF(cosTheta float64) float64 {
	i := min(int(math.Sqrt(cosTheta)*albedoSteps), albedoSteps-1)
	return t.rest[i] * cosTheta / math.Pi
}

// hemispherical is the integral of at(c) 2c dc, by the midpoint rule in
// s = sqrt(c), c = s^2: 4 s^3 ds.
func (t *albedoTable) hemispherical() float64 {
	const n = 16 * albedoSteps
	var sum, norm float64
	for i := range n {
		s := (float64(i) + 0.5) / n
		sum += t.at(s*s) * s * s * s
		norm += s * s * s
	}
	return sum / norm
}

func (t *albedoTable) at(cosTheta float64) float64 {
	x := math.Sqrt(min(max(cosTheta, 0), 1)) * albedoSteps
	i := min(int(x), albedoSteps-1)
	f := x - float64(i)
	return t.share[i]*(1-f) + t.share[i+1]*f
}
