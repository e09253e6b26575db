package sky

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

type tableRow map[string]string

// readTable returns the rows of a file in testdata and demands their number.
func readTable(t testing.TB, name string, want int) []tableRow {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	lines, err := r.ReadAll()
	if err != nil || len(lines) != want+1 {
		t.Fatalf("%s: got %d lines, %v; want %d", name, len(lines), err, want+1)
	}
	var rows []tableRow
	for _, line := range lines[1:] {
		row := tableRow{}
		for i, cell := range line {
			row[lines[0][i]] = cell
		}
		rows = append(rows, row)
	}
	return rows
}

func (r tableRow) number(t testing.TB, key string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(r[key], 64)
	if err != nil {
		t.Fatalf("%s: %v", key, err)
	}
	return x
}

func (r tableRow) numbers(t testing.TB, keys ...string) []float64 {
	t.Helper()
	var xs []float64
	for _, k := range keys {
		xs = append(xs, r.number(t, k))
	}
	return xs
}

// at returns the direction at a zenith angle and azimuth in degrees.
func at(zenithDeg, azimuthDeg float64) r3.Vec {
	sinZ, cosZ := math.Sincos(zenithDeg * degree)
	sinA, cosA := math.Sincos(azimuthDeg * degree)
	return r3.Vec{X: sinZ * sinA, Y: sinZ * cosA, Z: cosZ}
}

func within(got, want, relative float64) bool {
	return math.Abs(got-want) <= relative*math.Abs(want)
}

// illuminance integrates LuminanceExact over the sky in zenith angle and azimuth,
// midpoint rule, for a plane with a normal: a route of its own beside
// horizontalIntegral, 1e-4 or so.
func illuminance(s *Sky, normal r3.Vec) float64 {
	const nz, na = 360, 720
	var sum float64
	for i := range nz {
		zenith := 90 * (float64(i) + 0.5) / nz
		var ring float64
		for j := range na {
			dir := at(zenith, 360*(float64(j)+0.5)/na)
			if cos := r3.Dot(dir, normal); cos > 0 {
				ring += cos * s.LuminanceExact(dir)
			}
		}
		sum += ring * math.Sin(zenith*degree)
	}
	return sum * (math.Pi / 2 / nz) * (2 * math.Pi / na)
}
