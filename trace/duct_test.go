package trace_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene/photometry"
	"squint/trace"
)

// ductTable reads a file of testdata: its first line states the source, the
// second the columns.
func ductTable(t *testing.T, name string) [][]float64 {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out [][]float64
	for _, row := range rows[1:] {
		var x []float64
		for _, s := range row {
			v := math.NaN()
			if s != "" {
				if v, err = strconv.ParseFloat(s, 64); err != nil {
					t.Fatal(err)
				}
			}
			x = append(x, v)
		}
		out = append(out, x)
	}
	return out
}

// boxDuct is four mirrors around a section of a x b, from z = 0 to l, in a scene of
// their own.
func boxDuct(t testing.TB, l, a, b, rho float64) *mirroredModel {
	m := newMirroredModel(t)
	f := m.mirror(rho)
	corner := [4]r3.Vec{{}, {X: a}, {X: a, Y: b}, {Y: b}}
	for i, c := range corner {
		d := corner[(i+1)%4]
		up := r3.Vec{Z: l}
		m.quad(f, c, d, r3.Add(d, up), r3.Add(c, up))
	}
	return m
}

// ductFill draws where and in what direction a ray enters at z = 0.
type ductFill func(s *sampling.Stream) (org, dir r3.Vec)

// boxFill fills the section evenly in one direction.
func boxFill(a, b, theta, phi float64) ductFill {
	st, ct := math.Sincos(theta)
	sp, cp := math.Sincos(phi)
	dir := r3.Vec{X: st * cp, Y: st * sp, Z: ct}
	return func(s *sampling.Stream) (r3.Vec, r3.Vec) {
		return r3.Vec{X: a * s.Float64(), Y: b * s.Float64()}, dir
	}
}

// ductPasses is the share of the light that comes out at the other end. Walls
// along z keep the direction's z, so that every exit lies there.
func ductPasses(t *testing.T, w *trace.World, fill ductFill, samples int, seed, number uint64) mirroredTally {
	t.Helper()
	var sum mirroredTally
	var found trace.Found
	for k := range samples {
		s := sampling.Stream4(seed, 811, number, uint64(k))
		org, dir := fill(&s)
		found.Reset()
		w.Walk(org, dir, 1, 0, &s, &found)
		passed := 0.0
		for _, x := range found.Exits {
			if math.Abs(x.Dir.Z-dir.Z) > 1e-9 {
				t.Fatalf("a wall along z turned %v into %v", dir, x.Dir)
			}
			passed += x.Weight
		}
		sum.add(passed)
	}
	return sum
}

func ductSamples() int {
	if testing.Short() {
		return 1000
	}
	return 4000
}

func radians(deg float64) float64 { return deg * math.Pi / 180 }

// TestBoxDuct is the transmittance of a mirrored duct of rectangular section for
// an evenly filled beam: chains of up to 20 reflections in both pairs of walls.
// Allowed: half a unit of the file's last digit, and what rays lose that start
// epsilon off each wall: the path to the next wall is shorter by the share
// eps/a, hence m_a reflections are more by m_a eps/a, each worth (1-rho)/rho.
func TestBoxDuct(t *testing.T) {
	table := ductTable(t, "10b_rect_mirror_duct.csv")
	family := func(lost float64, middle bool) (rows []mirroredRow) {
		for i, x := range table {
			l, a, b, rho := x[0], x[1], x[2], x[3]
			if x[4] == 0 {
				continue // TestBoxDuctAlongAxis
			}
			w := boxDuct(t, l, a, b, rho-lost).world()
			fill := boxFill(a, b, radians(x[4]), radians(x[5]))
			if middle {
				_, dir := fill(new(sampling.Stream))
				fill = func(*sampling.Stream) (r3.Vec, r3.Vec) { return r3.Vec{X: .45 * a, Y: .45 * b}, dir }
			}
			got := ductPasses(t, w, fill, ductSamples(), 1, uint64(i))
			rows = append(rows, mirroredRow{fmt.Sprintf("%g x %g x %g m, rho %g, %g degrees, azimuth %g", l, a, b, rho, x[4], x[5]),
				x[8], got.mean(), got.stdErr(), 5e-9 + x[8]*(1-rho)/rho*w.Epsilon()*(x[6]/a+x[7]/b), got.n - 1})
		}
		return rows
	}
	mirroredJudge(t, "10.2 rectangular duct", family(0, false), .01)
	for _, twin := range []struct {
		name   string
		lost   float64
		middle bool
	}{
		{"walls that lose 0.005 more", .005, false},
		{"all light entering at one point", 0, true},
	} {
		if n, _, _ := mirroredRejects(family(twin.lost, twin.middle), 1); n == 0 {
			t.Errorf("twin: %s was not rejected", twin.name)
		}
	}
}

// TestBoxDuctAlongAxis: a beam along the axis meets no wall and loses nothing.
func TestBoxDuctAlongAxis(t *testing.T) {
	for i, x := range ductTable(t, "10b_rect_mirror_duct.csv") {
		if x[4] != 0 {
			continue
		}
		got := ductPasses(t, boxDuct(t, x[0], x[1], x[2], x[3]).world(), boxFill(x[1], x[2], 0, 0), 100, 1, uint64(i))
		if got.mean() != x[8] || x[8] != 1 {
			t.Errorf("row %d: got %v, want exactly 1 (file: %v)", i, got.mean(), x[8])
		}
	}
}

// TestBoxDuctLambertian is the duct evenly filled by a Lambertian source.
// Source: the closed form of TestBoxDuct averaged over directions, derived
// apart from this code to a standard error of 0.0001, of which 3 are allowed.
func TestBoxDuctLambertian(t *testing.T) {
	samples := 5 * ductSamples()
	family := func(dir func(s *sampling.Stream) r3.Vec) (rows []mirroredRow) {
		for i, x := range []struct{ l, a, b, rho, want float64 }{
			{3, .5, 1, .9, .52442},
			{4, .5, 2, .85, .38769},
			{2, 1, 1, .95, .83889},
		} {
			fill := func(s *sampling.Stream) (r3.Vec, r3.Vec) {
				return r3.Vec{X: x.a * s.Float64(), Y: x.b * s.Float64()}, dir(s)
			}
			got := ductPasses(t, boxDuct(t, x.l, x.a, x.b, x.rho).world(), fill, samples, 2, uint64(i))
			rows = append(rows, mirroredRow{fmt.Sprintf("%g x %g x %g m, rho %g", x.l, x.a, x.b, x.rho), x.want, got.mean(), got.stdErr(), 3e-4, got.n - 1})
		}
		return rows
	}
	mirroredJudge(t, "10.2 rectangular duct, Lambertian", family(func(s *sampling.Stream) r3.Vec {
		return trace.CosineDirection(r3.Vec{Z: 1}, s.Float64(), s.Float64())
	}), .05)
	even := family(func(s *sampling.Stream) r3.Vec {
		return trace.ConeDirection(r3.Vec{Z: 1}, math.Pi/2*(1-1e-9), s.Float64(), s.Float64())
	})
	if n, _, _ := mirroredRejects(even, 1); n == 0 {
		t.Errorf("twin: light of even intensity in all directions was not rejected")
	}
}

// TestBoxDuctPhotons sends the sun down the duct as photons: what lands on a
// matte plate at its foot is the closed form, less what falls through without
// meeting a wall, (1-m_a)(1-m_b) where both are below 1, which photons leave
// out. The disc is 0.533 degrees wide: the closed form's mean over the disc is
// taken by 4096 points; 1e-3 of it is allowed for those and for the offsets of
// TestBoxDuct. No wall is edge-on to the middle of the sun: Aim weighs facets by
// the disc's middle and so leaves those out, 1.5 % of this light at an azimuth
// of 90 degrees.
func TestBoxDuctPhotons(t *testing.T) {
	const l, a, b, rho = 3, .5, 1, .9
	photons, shots := 2000, 16
	if testing.Short() {
		photons = 500
	}
	var rows []mirroredRow
	for i, x := range []struct{ theta, phi float64 }{{10, 30}, {10, 80}, {20, 45}, {45, 30}, {60, 45}} {
		m := boxDuct(t, l, a, b, rho)
		plate := m.level(m.matte(.5), 0, a, 0, b, 0)
		w := m.world()
		st, ct := math.Sincos(radians(x.theta))
		sp, cp := math.Sincos(radians(x.phi))
		sun := r3.Vec{X: st * cp, Y: st * sp, Z: ct}
		var want mirroredTally
		for k := range uint32(4096) {
			u, v := sampling.OwenSobol2(k, 1)
			d := trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, v)
			ma, mb := l*math.Abs(d.X)/d.Z/a, l*math.Abs(d.Y)/d.Z/b
			want.add(d.Z * a * b * (ductPart(ma, rho)*ductPart(mb, rho) - math.Max(0, 1-ma)*math.Max(0, 1-mb)))
		}
		flux := make([]float64, shots)
		mirroredShots(w, sun, 1, shots, photons, uint64(30+i), func(shot int, h *trace.Hit, f float64) {
			if h.Part == plate {
				flux[shot] += f
			}
		})
		var got mirroredTally
		for _, f := range flux {
			got.add(f)
		}
		rows = append(rows, mirroredRow{fmt.Sprintf("%g degrees, azimuth %g", x.theta, x.phi), want.mean(), got.mean(), got.stdErr(), want.mean() * 1e-3, shots - 1})
	}
	mirroredJudge(t, "10.2 rectangular duct, photons of the sun", rows, .1)
}

// ductPart is the transmittance of one pair of walls that a beam meets m times
// in the mean. Source: unfolding of plane mirrors, as in the table.
func ductPart(m, rho float64) float64 {
	whole, rest := math.Modf(m)
	return math.Pow(rho, whole) * (1 - (1-rho)*rest)
}

// pipeFacets is the number of facets around the pipe in the tests below.
const pipeFacets = 64

// facetPipe is a light pipe of some facets around a circle of radius 1, from
// z = 0 to l, in rings of half a metre: longer facets would be so slender that
// float32 puts hits on their wrong side.
//
// The mean free path in an evenly filled convex section is pi A / P (Santalo
// 1976, Integral geometry and geometric probability, chapter 3; from memory),
// and a polygon around a circle has the circle's P/A: both walls are met the
// same number of times in the mean, so that the facets leave no error of first
// order in 1-rho.
func facetPipe(t testing.TB, l, rho float64) *trace.World {
	m := newMirroredModel(t)
	f := m.mirror(rho)
	rings := int(2 * l)
	for k := range rings {
		z0, z1 := r3.Vec{Z: l * float64(k) / float64(rings)}, r3.Vec{Z: l * float64(k+1) / float64(rings)}
		for i := range pipeFacets {
			c, d := pipeCorner(pipeFacets, i), pipeCorner(pipeFacets, (i+1)%pipeFacets)
			m.quad(f, r3.Add(c, z0), r3.Add(d, z0), r3.Add(d, z1), r3.Add(c, z1))
		}
	}
	return m.world()
}

func pipeCorner(n, i int) r3.Vec {
	s, c := math.Sincos(2 * math.Pi * float64(i) / float64(n))
	r := 1 / math.Cos(math.Pi/float64(n))
	return r3.Vec{X: r * c, Y: r * s}
}

// pipeStart fills the polygon of n corners evenly, and by the same numbers the
// circle in it; phi is an even direction in the plane.
func pipeStart(n int, s *sampling.Stream) (polygon, circle r3.Vec, phi float64) {
	k := s.Intn(n)
	r, v := math.Sqrt(s.Float64()), s.Float64()
	polygon = r3.Add(r3.Scale(r*(1-v), pipeCorner(n, k)), r3.Scale(r*v, pipeCorner(n, k+1)))
	sin, cos := math.Sincos(2 * math.Pi * (float64(k) + v) / float64(n))
	return polygon, r3.Vec{X: r * cos, Y: r * sin}, 2 * math.Pi * s.Float64()
}

// planarPipe gives the lengths from p along phi to each meeting with the walls
// of a polygon around the unit circle, as far as longest.
func planarPipe(normals []r3.Vec, p r3.Vec, phi, longest float64) (at []float64) {
	sin, cos := math.Sincos(phi)
	d := r3.Vec{X: cos, Y: sin}
	length, last := 0.0, -1
	for {
		near, facet := math.Inf(1), -1
		for i, n := range normals {
			if along := n.X*d.X + n.Y*d.Y; i != last && along > 0 {
				if x := (1 - n.X*p.X - n.Y*p.Y) / along; x < near {
					near, facet = x, i
				}
			}
		}
		length += near
		if length > longest || facet < 0 {
			return at
		}
		at = append(at, length)
		p = r3.Add(p, r3.Scale(near, d))
		n := normals[facet]
		d = r3.Sub(d, r3.Scale(2*r3.Dot(d, n), n))
		last = facet
	}
}

// circleMeets is the number of reflections in the unit circle over a length.
func circleMeets(p r3.Vec, phi, length float64) float64 {
	sin, cos := math.Sincos(phi)
	b := p.X*cos + p.Y*sin
	half := math.Sqrt(math.Max(0, 1-r3.Norm2(p)+b*b))
	if length < half-b {
		return 0
	}
	return 1 + math.Floor((length-half+b)/(2*half))
}

// pipeBias is what a polygon of n facets adds to the transmittance of each row
// of the table: by rays in the plane, apart from package trace, paired with
// rays in the circle. second is the mean square of what a path of World.Walk
// brings: it is weakened by four reflections and plays roulette at later ones.
func pipeBias(n, rays int, table [][]float64) (bias []mirroredTally, second []float64) {
	normals := make([]r3.Vec, n)
	for i := range normals {
		s, c := math.Sincos(2 * math.Pi * (float64(i) + .5) / float64(n))
		normals[i] = r3.Vec{X: c, Y: s}
	}
	longest := 0.0
	for _, x := range table {
		longest = math.Max(longest, 2*x[0]*math.Tan(radians(x[2])))
	}
	bias, second = make([]mirroredTally, len(table)), make([]float64, len(table))
	for k := range rays {
		s := sampling.Stream4(3, 812, uint64(n), uint64(k))
		p, c, phi := pipeStart(n, &s)
		at := planarPipe(normals, p, phi, longest)
		for i, x := range table {
			length := 2 * x[0] * math.Tan(radians(x[2]))
			meets := float64(sort.SearchFloat64s(at, length))
			bias[i].add(math.Pow(x[1], meets) - math.Pow(x[1], circleMeets(c, phi, length)))
			second[i] += math.Pow(x[1], meets+math.Min(meets, 4)) / float64(rays)
		}
	}
	return bias, second
}

// TestPipeFacets: what facets change of the transmittance falls with their
// number, at least by half for twice as many; of the polygon used for
// TestCylinderPipe it is below facetBound of the value.
func TestPipeFacets(t *testing.T) {
	table := ductTable(t, "10c_cylinder_light_pipe.csv")
	const facetBound = .04
	before := 0.0
	for n := pipeFacets / 4; n <= pipeFacets; n *= 2 {
		var worst, stdErr float64
		var at []float64
		bias, _ := pipeBias(n, 5000, table)
		for i, b := range bias {
			if r := math.Abs(b.mean()) / table[i][3]; r > worst {
				worst, stdErr, at = r, b.stdErr()/table[i][3], table[i]
			}
		}
		t.Logf("%d facets change the transmittance by up to %.2g +- %.1g of the value (length %g diameters, rho %g, %g degrees: %g)", n, worst, stdErr, at[0], at[1], at[2], at[3])
		if before > 0 && worst > before/2+3*stdErr {
			t.Errorf("%d facets: got %.2g, want at most half of the %.2g of half as many", n, worst, before)
		}
		before = worst
	}
	if before > facetBound {
		t.Errorf("%d facets: got %.2g, want at most %g", pipeFacets, before, facetBound)
	}
}

// TestCylinderPipe is the transmittance of a cylindrical mirror pipe for an
// evenly filled beam, by a pipe of 64 facets. Allowed: half a unit of the
// file's last digit; what the facets change, as measured in the plane, and 3
// standard errors of that; and the offsets as in TestBoxDuct, the mean number
// of reflections being 4 p tan(theta) / pi. Standard errors are those known
// beforehand: where rho is near 1 roulette ends a path so seldom that the spread
// of some thousand paths does not show it.
func TestCylinderPipe(t *testing.T) {
	table := ductTable(t, "10c_cylinder_light_pipe.csv")
	bias, second := pipeBias(pipeFacets, 5000, table)
	family := func(lost float64, axis bool) (rows []mirroredRow) {
		worlds := map[[2]float64]*trace.World{}
		for i, x := range table {
			w := worlds[[2]float64{x[0], x[1]}]
			if w == nil {
				w = facetPipe(t, 2*x[0], x[1]-lost)
				worlds[[2]float64{x[0], x[1]}] = w
			}
			sin, cos := math.Sincos(radians(x[2]))
			got := ductPasses(t, w, func(s *sampling.Stream) (r3.Vec, r3.Vec) {
				p, _, phi := pipeStart(pipeFacets, s)
				if axis {
					p = r3.Vec{}
				}
				sp, cp := math.Sincos(phi)
				return p, r3.Vec{X: sin * cp, Y: sin * sp, Z: cos}
			}, ductSamples(), 4, uint64(i))
			meets := 4 * x[0] * sin / cos / math.Pi
			rows = append(rows, mirroredRow{fmt.Sprintf("length %g diameters, rho %g, %g degrees", x[0], x[1], x[2]), x[3], got.mean(), math.Sqrt((second[i] - x[3]*x[3]) / float64(got.n)),
				5e-7 + math.Abs(bias[i].mean()) + 3*bias[i].stdErr() + x[3]*(1-x[1])/x[1]*meets*w.Epsilon(), got.n - 1})
		}
		return rows
	}
	mirroredJudge(t, "10.3 cylindrical pipe", family(0, false), .02)
	if n, _, _ := mirroredRejects(family(.005, false), 1); n == 0 {
		t.Errorf("twin: walls that lose 0.005 more were not rejected")
	}
	if n, _, _ := mirroredRejects(family(0, true), 1); n == 0 {
		t.Errorf("twin: light entering on the axis only was not rejected")
	}
}
