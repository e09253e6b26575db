package glare

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

const deg = math.Pi / 180

// row is a line of a table in testdata, by column name.
type row struct {
	t testing.TB
	m map[string]string
}

func (r row) num(name string) float64 {
	r.t.Helper()
	x, err := strconv.ParseFloat(r.m[name], 64)
	if err != nil {
		r.t.Fatalf("column %q: got %q, want a number", name, r.m[name])
	}
	return x
}

func table(t testing.TB, name string, rows int) []row {
	t.Helper()
	file, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != rows+1 {
		t.Fatalf("%s: got %d rows, want %d", name, len(all)-1, rows)
	}
	var out []row
	for _, line := range all[1:] {
		m := map[string]string{}
		for i, head := range all[0] {
			m[head] = line[i]
		}
		out = append(out, row{t, m})
	}
	return out
}

// near compares with a tolerance of one unit in the last printed digit.
func near(t testing.TB, what string, got, want, unit float64) {
	t.Helper()
	if !(math.Abs(got-want) <= unit) {
		t.Errorf("%s: got %.12g, want %.12g +- %.1g", what, got, want, unit)
	}
}

// polar is the direction sigma from the line of sight in the plane tau from
// the vertical.
func polar(tau, sigma float64) r3.Vec {
	sinS, cosS := math.Sincos(sigma)
	sinT, cosT := math.Sincos(tau)
	return r3.Vec{X: cosS, Y: sinS * sinT, Z: sinS * cosT}
}

// toward is the direction at azimuth az (positive to the left) and elevation
// el, in the view frame.
func toward(az, el float64) r3.Vec {
	sinA, cosA := math.Sincos(az)
	sinE, cosE := math.Sincos(el)
	return r3.Vec{X: cosE * cosA, Y: cosE * sinA, Z: sinE}
}

// scene is a disc of uniform luminance before a uniform background: a row of
// 06b.
type scene struct {
	name   string
	ls, lb float64 // cd/m2
	r      float64 // rad
	dir    r3.Vec
	row    row
}

func scenes(t testing.TB) []scene {
	var out []scene
	for _, r := range table(t, "06b_glare_checks.csv", 16) {
		out = append(out, scene{
			name: r.m["case"], ls: r.num("L_source_cd_m2"), lb: r.num("L_background_cd_m2"),
			r:   r.num("disc_angular_radius_deg") * deg,
			dir: toward(r.num("azimuth_deg")*deg, r.num("elevation_deg")*deg), row: r,
		})
	}
	return out
}

// capOmega is the solid angle of a cone of half angle r.
func capOmega(r float64) float64 { return 2 * math.Pi * (1 - math.Cos(math.Max(r, 0))) }
