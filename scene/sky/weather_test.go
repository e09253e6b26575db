package sky

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"
	"time"

	"squint/scene/photometry"
)

// openShared opens a file of ../shared beside the repository, and skips the test
// where it is absent, unless SQUINT_REQUIRE_SHARED=1.
func openShared(t *testing.T, name string) *os.File {
	t.Helper()
	root, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(root, "go.mod")); err == nil {
			break
		}
		up := filepath.Dir(root)
		if up == root {
			t.Fatal("no go.mod above the test")
		}
		root = up
	}
	f, err := os.Open(filepath.Join(root, "..", "shared", name))
	if errors.Is(err, fs.ErrNotExist) && os.Getenv("SQUINT_REQUIRE_SHARED") != "1" {
		t.Skipf("../shared/%s is absent: the comparison with a published weather year is left out.", name)
	}
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func median(xs []float64) float64 {
	slices.Sort(xs)
	return xs[len(xs)/2]
}

// TestTypicalYear is a check from outside. The makers of the typical year of
// Greensboro NC (National Solar Radiation Data Base, TMY3; Wilcox & Marion, Users
// manual for TMY3 data sets, NREL/TP-581-43156, 2008) computed illuminances and
// zenith luminance with the model of Perez et al. (1990).
func TestTypicalYear(t *testing.T) {
	f := openShared(t, "weather/greensboro-nc-tmy3.csv")
	defer f.Close()
	r := csv.NewReader(f)
	r.FieldsPerRecord = -1
	lines, err := r.ReadAll()
	if err != nil || len(lines) != 2+8760 {
		t.Fatalf("got %d lines, %v", len(lines), err)
	}
	column := func(name string) int {
		i := slices.Index(lines[1], name)
		if i < 0 {
			t.Fatalf("no column %q", name)
		}
		return i
	}
	dhi, dni, dew := column("DHI (W/m^2)"), column("DNI (W/m^2)"), column("Dew-point (C)")
	globalLx, zenithLum := column("GH illum (lx)"), column("Zenith lum (cd/m^2)")
	site := Site{LatitudeDeg: 36.1, LongitudeDeg: -79.95, ElevationM: 273} // line 1 of the file

	var global, zenith, patchSum []float64
	var daylight, clamped, diffuse, diffuseClamped float64
	patches := NewPatches(1)
	out := make([]float64, patches.Count())
	for n, line := range lines[2:] {
		value := func(i int) float64 {
			x, err := strconv.ParseFloat(line[i], 64)
			if err != nil {
				t.Fatalf("line %d: %v", n+3, err)
			}
			return x
		}
		day, err := time.ParseInLocation("01/02/2006", line[0], time.FixedZone("", -5*3600))
		if err != nil {
			t.Fatal(err)
		}
		var hour int
		if _, err := fmt.Sscanf(line[1], "%d:00", &hour); err != nil {
			t.Fatal(err)
		}
		// The label is the end of the hour.
		sun, err := SunAt(site, day.Add(time.Duration(hour)*time.Hour-30*time.Minute))
		if err != nil {
			t.Fatal(err)
		}
		if value(dhi) <= 0 || sun.Direction.Z <= 0 {
			continue
		}
		light := photometry.Perez1990(photometry.Irradiance{
			DHI: value(dhi), DNI: value(dni), ZenithRad: sun.ZenithRad,
			E0n: photometry.ExtraterrestrialNormal(day.YearDay()), DewPointC: value(dew),
		})
		s, clamp := NewPerez(sun.Direction, light.Clearness, light.Brightness, light.Diffuse)
		daylight++
		diffuse += value(dhi)
		if clamp.Clamped {
			clamped++
			diffuseClamped += value(dhi)
		}
		if value(dhi) < 20 || sun.ZenithRad > 80*degree {
			continue
		}
		// In this file "lx" are hundreds of lx and "cd/m^2" tens of cd/m2.
		global = append(global, light.Global/(100*value(globalLx))-1)
		zenith = append(zenith, light.ZenithLuminance/(10*value(zenithLum))-1)
		patches.Average(s, out)
		var sum float64
		for i, l := range out {
			sum += l * patches.ProjectedSolidAngle(i)
		}
		patchSum = append(patchSum, math.Abs(sum/light.Diffuse-1))
	}
	mg, mz := median(global), median(zenith)
	t.Logf("%d hours: global %+.2f %%, zenith luminance %+.2f %% in the median (5 to 95 %%: %+.1f to %+.1f, %+.1f to %+.1f)", len(global), 100*mg, 100*mz,
		100*global[len(global)/20], 100*global[len(global)*19/20], 100*zenith[len(zenith)/20], 100*zenith[len(zenith)*19/20])
	slices.Sort(patchSum)
	t.Logf("%.0f of %.0f hours clamped, with %.3f %% of the diffuse light; sum over 145 patches off by %.2f %% in the median, %.2f %% at most",
		clamped, daylight, 100*diffuseClamped/diffuse, 100*median(patchSum), 100*patchSum[len(patchSum)-1])
	if len(global) < 3000 {
		t.Errorf("got %d hours, want 3000 or more", len(global))
	}
	// The makers took hourly means of the sun's position and another solar
	// constant; global is a fit of its own that they then closed.
	if math.Abs(mz) > 0.005 {
		t.Errorf("zenith luminance: median off by %.2f %%, want 0.5 %%", 100*mz)
	}
	if math.Abs(mg) > 0.02 {
		t.Errorf("global illuminance: median off by %.2f %%, want 2 %%", 100*mg)
	}
	if clamped/daylight > 0.02 || diffuseClamped/diffuse > 0.002 {
		t.Errorf("clamped: %.0f of %.0f hours with %.2f %% of the diffuse light, want below 2 %% and 0.2 %%", clamped, daylight, 100*diffuseClamped/diffuse)
	}
}
