package system

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// checkRows reads the numbers of a table of check values below its title.
func checkRows(t *testing.T, name string) [][]float64 {
	t.Helper()
	f, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	records, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out [][]float64
	for _, rec := range records[1:] {
		row := make([]float64, len(rec))
		for i, s := range rec {
			if row[i], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		out = append(out, row)
	}
	return out
}

// symmetric has an exit 2 m high, half-width 1 as in the tables.
func symmetric(halfDeg, keep float64) Concentrator {
	return Concentrator{ExitHeightM: 2, LowRad: -halfDeg * rad, HighRad: halfDeg * rad, KeepShare: keep}
}

// lineLength sums the chords.
func lineLength(line []plane) float64 {
	sum := 0.0
	for i := 1; i < len(line); i++ {
		sum += line[i].minus(line[i-1]).length()
	}
	return sum
}

// tableDigits is half a unit of the tables' last digit, relative to values of 1
// and more.
const tableDigits = 0.5e-6

// TestConcentratorGeometry against the closed forms of the symmetric case.
// Sources: testdata.
func TestConcentratorGeometry(t *testing.T) {
	for _, row := range checkRows(t, "10a_cpc_geometry.csv") {
		c := symmetric(row[0], 1)
		below, above := c.Entrance()
		b, _ := c.arcs()
		// Chords of step d fall short of an arc by d^2/24 of it: 0.1 degree of
		// error is a step of 0.2 degree, so 5e-7.
		line, _ := c.mirrors(MirrorFacetRad)
		length := lineLength(line)
		for _, v := range []struct {
			what      string
			got, want float64
		}{
			{"concentration", c.Concentration(), row[1]},
			{"entrance half-width, below", 1 - below[1], row[2]},
			{"entrance half-width, above", above[1] - 1, row[2]},
			{"height", c.ReachM(), row[3]},
			{"focal length", b.twiceFocalM / 2, row[4]},
			{"reflector length", length, row[5]},
			{"reflector over aperture", 2 * length / (above[1] - below[1]), row[7]},
		} {
			if !(math.Abs(v.got-v.want) <= tableDigits+1.1e-6*v.want) {
				t.Errorf("half-angle %g: %s: got %.7f, want %.6f", row[0], v.what, v.got, v.want)
			}
		}
	}
}

// TestConcentratorTruncated against the closed forms of the shortened case.
// The share 2/3 stands as 0.6667 in the table, whose heights are those of
// 2/3 to 5e-5.
func TestConcentratorTruncated(t *testing.T) {
	for _, row := range checkRows(t, "10a2_cpc_truncation.csv") {
		c := symmetric(row[0], row[1])
		below, above := c.Entrance()
		b, _ := c.arcs()
		line, _ := c.mirrors(MirrorFacetRad)
		// phi_T is counted from the mirror's own axis.
		phi := (b.axisRad - b.toRad) / rad
		for _, v := range []struct {
			what      string
			got, want float64
		}{
			{"phi", phi, row[2]},
			{"height", c.ReachM(), row[3]},
			{"entrance half-width", (above[1] - below[1]) / 2, row[4]},
			{"concentration", c.Concentration(), row[5]},
			{"reflector length", lineLength(line), row[6]},
		} {
			if !(math.Abs(v.got-v.want) <= 5e-6+1.1e-6*v.want) {
				t.Errorf("half-angle %g, share %g: %s: got %.7f, want %.6f", row[0], row[1], v.what, v.got, v.want)
			}
		}
		low, high := c.Admitted()
		// From beyond the acceptance only what passes both ends' edges: seen
		// from the far edge of the exit, tan = (a_T + a')/H_T.
		want := math.Atan((row[4] + 1) / row[3])
		if math.Abs(high-want) > 1e-5 || math.Abs(low+want) > 1e-5 {
			t.Errorf("half-angle %g, share %g: admits %g to %g degrees, want +-%g", row[0], row[1], low/rad, high/rad, want/rad)
		}
	}
}

// TestConcentratorEdges: whatever the two limits, every facet's middle mirrors
// a ray along the limit of the other side into the exit's far edge, which is
// how the concentrator is defined (edge rays; Welford & Winston 1989, chapter
// 4), the two mirrors end where the other's edge ray passes, and what enters
// between the limits has the extent of the exit: width of the entrance seen
// from all directions between them = 2 x exit height (conservation of etendue).
func TestConcentratorEdges(t *testing.T) {
	for _, limits := range [][2]float64{{-30, 30}, {-45, 45}, {0, 90}, {20, 90}, {10, 70}, {25, 60}, {-20, 75}, {-80, -30}, {-90, 90}} {
		c := Concentrator{ExitHeightM: 0.5, LowRad: limits[0] * rad, HighRad: limits[1] * rad, KeepShare: 1}
		if err := c.check(); err != nil {
			t.Fatal(err)
		}
		below, above := c.mirrors(MirrorFacetRad)
		for _, m := range []struct {
			line  []plane
			from  float64
			focus plane
		}{{below, c.HighRad, plane{0, .5}}, {above, c.LowRad, plane{}}} {
			for i := 1; i < len(m.line); i++ {
				a, b := m.line[i-1], m.line[i]
				mid := plane{(a[0] + b[0]) / 2, (a[1] + b[1]) / 2}
				facet := b.minus(a).angle()
				// A ray from angle f leaves a mirror along 2 x facet - f - pi.
				leaves := 2*facet - m.from - math.Pi
				off := math.Abs(math.Remainder(leaves-m.focus.minus(mid).angle(), 2*math.Pi))
				if off > 2*MirrorFacetRad {
					t.Fatalf("%v: facet %d at %v throws the edge ray %.3f degrees off, want at most twice the facets' 0.1", limits, i, mid, off/rad)
				}
			}
		}
		b, a := plane(below[len(below)-1]), plane(above[len(above)-1])
		d := a.minus(b)
		// The integral over directions v of |d x v|, v from low to high.
		extent := d[0]*(math.Cos(c.HighRad)-math.Cos(c.LowRad)) + d[1]*(math.Sin(c.HighRad)-math.Sin(c.LowRad))
		if math.Abs(extent-2*c.ExitHeightM) > near {
			t.Errorf("%v: extent of what enters: got %g m, want %g, that of the exit", limits, extent, 2*c.ExitHeightM)
		}
		low, high := c.Admitted()
		if math.Abs(low-c.LowRad) > 1e-6 || math.Abs(high-c.HighRad) > 1e-6 {
			t.Errorf("%v: admits %g to %g", limits, low/rad, high/rad)
		}
	}
}

// TestFacets: no chord is further off its curve than asked for, at either end,
// and asking for more makes more.
func TestFacets(t *testing.T) {
	for _, limits := range [][2]float64{{-30, 30}, {0, 90}, {20, 90}, {-5, 5}} {
		was := 0
		for _, want := range []float64{1 * rad, MirrorFacetRad, 0.01 * rad} {
			c := Concentrator{ExitHeightM: 1, LowRad: limits[0] * rad, HighRad: limits[1] * rad, KeepShare: 1}
			b, _ := c.arcs()
			line := b.points(want)
			worst := 0.0
			for i := 1; i < len(line); i++ {
				chord := line[i].minus(line[i-1])
				for _, p := range line[i-1 : i+1] {
					// The tangent from the implicit form: the gradient of
					// |p-F| - (p-F).u is (p-F)/|p-F| - u.
					d := p.minus(b.focus)
					sin, cos := math.Sincos(b.axisRad)
					g := plane{d[0]/d.length() - cos, d[1]/d.length() - sin}
					worst = max(worst, math.Asin(math.Abs(chord[0]*g[0]+chord[1]*g[1])/chord.length()/g.length()))
				}
			}
			if worst > want*(1+1e-6) || worst < want/2 && len(line) > 2 || len(line) <= was {
				t.Errorf("%v: %d facets are %.4f degrees off, want at most %.4f and no needless ones", limits, len(line)-1, worst/rad, want/rad)
			}
			was = len(line)
		}
	}
}

// TestConcentratorWalls: the mesh is closed but for entrance and exit, its
// fronts inside, wherever the exit faces.
func TestConcentratorWalls(t *testing.T) {
	for _, exit := range []Rect{facing(1, 0, 0, 3, 2), facing(2, 90*rad, 0, 3, 2), facing(4, 20*rad, 0.3, 3, 2)} {
		c := symmetric(36, 0.8)
		faces, err := c.Walls(exit, 0, "mirror")
		if err != nil {
			t.Fatal(err)
		}
		below, above := c.Entrance()
		mid := (below[1] + above[1]) / 2
		inside := exit.Point(1.5, mid, c.ReachM()/2)
		for _, f := range faces {
			if r3.Dot(f.Normal(), r3.Sub(inside, f.V[0])) <= 0 {
				t.Fatalf("%+v faces away from the inside", f)
			}
		}
		holes := rims(faces)
		// The rims of entrance and exit, two rectangles.
		want := 2*(3+2) + 2*(3+above[1]-below[1])
		if math.Abs(holes-want) > 1e-6 {
			t.Errorf("edges of one face only: got %g m, want %g m", holes, want)
		}
	}
	if _, err := symmetric(30, 1).Walls(facing(1, 0, 0, 3, 1), 0, ""); err == nil {
		t.Error("an exit of another height is taken")
	}
}

// rims is the length of the edges that belong to one face only.
func rims(faces []Face) float64 {
	type point [3]int64
	at := func(v r3.Vec) point {
		const k = 1 << 30 // nanometres
		return point{int64(math.Round(v.X * k)), int64(math.Round(v.Y * k)), int64(math.Round(v.Z * k))}
	}
	count := map[[2]point]int{}
	long := map[[2]point]float64{}
	for _, f := range faces {
		for i := range 3 {
			a, b := f.V[i], f.V[(i+1)%3]
			if r3.Norm(r3.Sub(a, b)) < near {
				continue
			}
			count[[2]point{at(a), at(b)}]++
			count[[2]point{at(b), at(a)}]--
			long[[2]point{at(a), at(b)}] = r3.Norm(r3.Sub(a, b))
		}
	}
	sum := 0.0
	for e, n := range count {
		if n > 0 {
			sum += float64(n) * long[e]
		}
	}
	return sum
}
