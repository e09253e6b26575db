package photometry

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// readTable returns the rows of a file in testdata as maps from column to text.
func readTable(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	lines, err := r.ReadAll()
	if err != nil || len(lines) < 2 {
		t.Fatalf("%s: %d lines, %v", name, len(lines), err)
	}
	var rows []map[string]string
	for _, line := range lines[1:] {
		row := map[string]string{}
		for i, cell := range line {
			row[lines[0][i]] = cell
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t *testing.T, row map[string]string, key string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(row[key], 64)
	if err != nil {
		t.Fatalf("%s: %v", key, err)
	}
	return x
}

func TestPerez1990Coefficients(t *testing.T) {
	rows := readTable(t, "03a_perez1990_luminous_efficacy.csv")
	if len(rows) != 32 {
		t.Fatalf("got %d rows, want 32", len(rows))
	}
	for _, row := range rows {
		bin := int(number(t, row, "bin"))
		table := map[string]*[8][4]float64{
			"global": &perez1990.global, "diffuse": &perez1990.diffuse,
			"direct": &perez1990.direct, "zenith_luminance": &perez1990.zenith,
		}[row["quantity"]]
		for i, key := range []string{"a", "b", "c", "d"} {
			if got, want := table[bin-1][i], number(t, row, key); got != want { // Perez et al. (1990), table 4
				t.Errorf("%s, bin %d, %s: got %g, want %g", row["quantity"], bin, key, got, want)
			}
		}
		low := number(t, row, "eps_low_incl")
		if got := ClearnessBin(low); got != bin {
			t.Errorf("ClearnessBin(%g) = %d, want %d", low, got, bin)
		}
		if got := ClearnessBin(math.Nextafter(low, 0)); got != max(1, bin-1) {
			t.Errorf("ClearnessBin just below %g = %d, want %d", low, got, max(1, bin-1))
		}
	}
	if got := ClearnessBin(math.NaN()); got != 1 {
		t.Errorf("ClearnessBin(NaN) = %d, want 1", got)
	}
}

func TestPerez1990(t *testing.T) {
	rows := readTable(t, "03e_perez1990_efficacy_checks.csv")
	if len(rows) != 14 {
		t.Fatalf("got %d rows, want 14", len(rows))
	}
	for i, row := range rows {
		in := Irradiance{
			DHI: number(t, row, "DHI_Wm2"), DNI: number(t, row, "DNI_Wm2"),
			ZenithRad: number(t, row, "sun_zenith_deg") * degree,
			E0n:       number(t, row, "E0n_Wm2"), DewPointC: number(t, row, "dewpoint_C"),
		}
		got := Perez1990(in)
		if want := int(number(t, row, "bin")); got.Bin != want {
			t.Errorf("row %d: bin: got %d, want %d", i, got.Bin, want)
		}
		for _, c := range []struct {
			key       string
			got       float64
			tolerance float64 // half of the last digit given
		}{
			{"airmass_KastenYoung1989", AirMassKastenYoung1989(in.ZenithRad), 5.1e-7},
			{"W_cm", PrecipitableWaterCm(in.DewPointC), 5.1e-7},
			{"Delta", got.Brightness, 5.1e-7},
			{"eps", got.Clearness, 5.1e-7},
			{"Eglobal_lx", got.Global, 0.0051},
			{"Ediffuse_lx", got.Diffuse, 0.0051},
			{"Edirect_normal_lx", got.DirectNormal, 0.0051},
			{"Lzenith_cd_m2", got.ZenithLuminance, 0.0051},
		} {
			if want := number(t, row, c.key); math.Abs(c.got-want) > c.tolerance {
				t.Errorf("row %d: %s: got %.7g, want %.7g", i, c.key, c.got, want)
			}
		}
		in.AirMass = AirMassKastenYoung1989(in.ZenithRad)
		if again := Perez1990(in); again != got {
			t.Errorf("row %d: air mass given and air mass left out differ: %v, %v", i, again, got)
		}
	}
}

func TestPerez1990Limits(t *testing.T) {
	for name, in := range map[string]Irradiance{
		"night":          {ZenithRad: 2},
		"negative":       {DHI: -3, DNI: -1, ZenithRad: 1},
		"not numbers":    {DHI: math.NaN(), DNI: math.NaN(), ZenithRad: math.NaN(), E0n: math.NaN(), DewPointC: math.NaN(), AirMass: math.NaN()},
		"infinite":       {DHI: math.Inf(1), DNI: math.Inf(-1), ZenithRad: math.Inf(1), E0n: math.Inf(1), DewPointC: math.Inf(1), AirMass: math.Inf(1)},
		"almost nothing": {DHI: 5e-324, DNI: 800, ZenithRad: 1},
		"direct only":    {DNI: 800, ZenithRad: 0.5, DewPointC: 10},
		"sun set":        {DHI: 10, DNI: 5, ZenithRad: 1.6, DewPointC: -40},
		"hot and damp":   {DHI: 500, DNI: 900, ZenithRad: 0, DewPointC: 1e6},
	} {
		got := Perez1990(in)
		for _, x := range []float64{got.Diffuse, got.DirectNormal, got.Global, got.ZenithLuminance, got.Brightness} {
			if !(x >= 0) || math.IsInf(x, 1) {
				t.Errorf("%s: got %+v, want finite and not negative", name, got)
				break
			}
		}
		if got.Bin < 1 || got.Bin > 8 || !(got.Clearness >= 1) {
			t.Errorf("%s: bin %d, clearness %g", name, got.Bin, got.Clearness)
		}
	}
	got := Perez1990(Irradiance{DNI: 800, ZenithRad: 60 * degree, DewPointC: 10})
	// Class 8 of table 4 by hand: no diffuse light, so brightness 0.
	want := 800 * (101.18 + 1.58*math.Exp(0.07*10-0.075) - 1.10*math.Exp(5.73*math.Pi/3-5))
	if got.Bin != 8 || !math.IsInf(got.Clearness, 1) || got.Diffuse != 0 || !within(got.DirectNormal, want, 1e-12) || !within(got.Global, want/2, 1e-12) {
		t.Errorf("direct only: got %+v, want class 8 and %g lx", got, want)
	}
}

func BenchmarkPerez1990(b *testing.B) {
	in := Irradiance{DHI: 120, DNI: 600, ZenithRad: 1, E0n: 1361, DewPointC: 2, AirMass: 2}
	for b.Loop() {
		_ = Perez1990(in)
	}
}
