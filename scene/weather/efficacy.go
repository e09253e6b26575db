package weather

import (
	"fmt"
	"math"
	"sort"
)

const (
	// Luminous efficacy of daylight lies well within these bounds, in lm/W,
	// for all weathers (sun near the horizon to blue sky; Littlefair 1985, The
	// luminous efficacy of daylight: a review, Lighting Research and Technology
	// 17; bounds widened, from memory). They are less than a factor of ten
	// apart, so that at most one power of ten fits.
	efficacyMin = 30
	efficacyMax = 200
	// pi times zenith luminance over diffuse illuminance is 1 for a uniform sky
	// and 9/7 for the CIE overcast sky (Moon, Spencer 1942, Illumination from a
	// non-uniform sky); clear skies with a low sun lie below. The bounds are
	// wide but again less than a factor of ten apart; own choice.
	zenithMin = 0.32
	zenithMax = 3.1
	// typicalDiffuse in lm/W turns diffuse irradiance into illuminance where
	// only its power of ten matters (order of the values in Littlefair 1985).
	typicalDiffuse = 115
)

// Efficacy says in which unit the illuminance columns of a file really are.
type Efficacy struct {
	// GlobalScale, DirectScale, DiffuseScale and ZenithScale are the powers of
	// ten that turn the columns as read into lx and cd/m². NaN: no values, or
	// no power of ten makes them plausible.
	GlobalScale, DirectScale, DiffuseScale, ZenithScale float64
	// GlobalLmPerW is the median efficacy of the global column after scaling;
	// NaN where GlobalScale is.
	GlobalLmPerW float64
	Text         string // one sentence for the user
}

// Efficacy decides the unit of the illuminance columns by the efficacy that
// they imply, over the hours in which the corresponding irradiance is above 50
// W/m²: its median must lie between 30 and 200 lm/W. Files exist whose header
// says lx and whose numbers are hundreds of lx. Nothing in this package
// computes with the columns; illuminance is to be had from the irradiances.
func (y *Year) Efficacy() Efficacy {
	var global, direct, diffuse, zenith []float64
	ratio := func(to *[]float64, column, irradiance float64) {
		if irradiance > fitGHI && !math.IsNaN(column) {
			*to = append(*to, column/irradiance)
		}
	}
	for _, r := range y.Records {
		ratio(&global, r.GlobalLx, r.GHI)
		ratio(&direct, r.DirectLx, r.DNI)
		ratio(&diffuse, r.DiffuseLx, r.DHI)
		ratio(&zenith, r.ZenithCdM2*math.Pi/typicalDiffuse, r.DHI)
	}
	e := Efficacy{
		GlobalScale:  powerOfTen(median(global), efficacyMin, efficacyMax),
		DirectScale:  powerOfTen(median(direct), efficacyMin, efficacyMax),
		DiffuseScale: powerOfTen(median(diffuse), efficacyMin, efficacyMax),
		ZenithScale:  powerOfTen(median(zenith), zenithMin, zenithMax),
	}
	e.GlobalLmPerW = median(global) * e.GlobalScale
	e.Text = e.text(y.File, len(global))
	return e
}

func (e Efficacy) text(file string, hours int) string {
	const use = "illuminances are computed from the irradiances in any case."
	switch {
	case hours == 0:
		return fmt.Sprintf("%s has no illuminance columns; %s", file, use)
	case math.IsNaN(e.GlobalScale):
		return fmt.Sprintf("The illuminance columns of %s are not plausible in any power of ten of lx; %s", file, use)
	case e.GlobalScale == 1 && (e.ZenithScale == 1 || math.IsNaN(e.ZenithScale)):
		return fmt.Sprintf("The illuminance columns of %s are in lx as stated (median %.0f lm/W); %s", file, e.GlobalLmPerW, use)
	}
	zenith := ""
	if !math.IsNaN(e.ZenithScale) {
		zenith = fmt.Sprintf(", zenith luminance in %g cd/m2", e.ZenithScale)
	}
	return fmt.Sprintf("The illuminance columns of %s are in units of %g lx (median %.0f lm/W)%s, not as stated; %s",
		file, e.GlobalScale, e.GlobalLmPerW, zenith, use)
}

// powerOfTen returns the power of ten from 1e-3 to 1e3 that brings v between
// lo and hi, or NaN.
func powerOfTen(v, lo, hi float64) float64 {
	for _, s := range []float64{1, 10, 100, 1000, 0.1, 0.01, 0.001} {
		if v*s >= lo && v*s <= hi {
			return s
		}
	}
	return math.NaN()
}

// median returns NaN for no values; it sorts its argument.
func median(v []float64) float64 {
	if len(v) == 0 {
		return math.NaN()
	}
	sort.Float64s(v)
	return (v[(len(v)-1)/2] + v[len(v)/2]) / 2
}
