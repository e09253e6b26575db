package main

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"time"

	"gonum.org/v1/gonum/stat/distuv"

	"squint/scene/photometry"
	"squint/scene/sky"
	"squint/scene/weather"
)

// The invented place: a rock in the open Atlantic where no land is.
const (
	latitudeDeg  = 47.6
	longitudeDeg = -8.2
	elevationM   = 6
	seed         = 47
)

// monthlyCloud is the mean cloud cover, 0 to 1, at the middle of each month.
// Invented: a mild, cloudy sea coast with a brighter summer.
var monthlyCloud = [12]float64{.72, .70, .66, .61, .57, .54, .50, .50, .56, .64, .70, .73}

// How cloud cover varies about its mean. Beta distributions, mostly U-shaped,
// describe cloud cover after Falls 1974, The beta distribution: a statistical
// model for world cloud cover, J. Geophys. Res. 79(9). Their width and the
// hour-to-hour correlation here are invented.
const (
	cloudWidth       = 1.1  // sum of the beta distribution's parameters
	cloudCorrelation = 0.93 // from one hour to the next
)

// haurwitz is the global irradiance (W/m2) under a cloudless sky.
// Source: Haurwitz 1945, Insolation in relation to cloudiness and cloud
// density, J. Meteorology 2(3), in the form 1098 cosZ exp(-0.059/cosZ);
// coefficients from memory.
func haurwitz(cosZ float64) float64 {
	if cosZ <= 0 {
		return 0
	}
	return 1098 * cosZ * math.Exp(-0.059/cosZ)
}

// cloudTransmission is the part of the cloudless global irradiance that passes
// a cover of 0 to 1. Source: Kasten and Czeplak 1980, Solar and terrestrial
// radiation dependent on the amount and type of cloud, Solar Energy 24(2),
// 177-189: 1 - 0.75 (N/8)^3.4; from memory.
func cloudTransmission(cover float64) float64 { return 1 - 0.75*math.Pow(cover, 3.4) }

// diffuseFraction is the diffuse part of the global irradiance by the
// clearness index kt. Source: Erbs, Klein and Duffie 1982, Estimation of the
// diffuse radiation fraction for hourly, daily and monthly-average global
// radiation, Solar Energy 28(4), 293-302, equation 1; from memory.
func diffuseFraction(kt float64) float64 {
	switch {
	case kt <= 0.22:
		return 1 - 0.09*kt
	case kt <= 0.80:
		return 0.9511 + kt*(-0.1604+kt*(4.388+kt*(-16.638+kt*12.336)))
	}
	return 0.165
}

// cloudCover is the invented hourly cover: a first-order autoregressive
// Gaussian series, carried over to beta distributions with the month's mean.
func cloudCover() []float64 {
	random := rand.New(rand.NewPCG(seed, 1))
	cover := make([]float64, weather.HoursPerYear)
	g := random.NormFloat64()
	for i := range cover {
		g = cloudCorrelation*g + math.Sqrt(1-cloudCorrelation*cloudCorrelation)*random.NormFloat64()
		m := monthly(monthlyCloud, i)
		beta := distuv.Beta{Alpha: cloudWidth * m, Beta: cloudWidth * (1 - m)}
		cover[i] = beta.Quantile(distuv.UnitNormal.CDF(g))
	}
	return cover
}

// monthly interpolates between the middles of the months.
func monthly(means [12]float64, hour int) float64 {
	x := float64(hour)/weather.HoursPerYear*12 - 0.5
	f := math.Floor(x)
	a, b := (int(f)+12)%12, (int(f)+13)%12
	return means[a] + (x-f)*(means[b]-means[a])
}

// sunlit is the cosine of the sun's zenith angle at the moment a record stands
// for, the middle of the sunlit part of its hour, and that part's share.
func sunlit(y *weather.Year, i int, cosZ weather.CosZenith) (c, share float64) {
	moment, share := y.SunlitMoment(i, weather.IntervalOffsetH, cosZ)
	return cosZ(moment), share
}

func inventedYear() (*weather.Year, error) {
	y := &weather.Year{
		File: "skerrow.epw", Format: "EPW",
		Site: weather.Site{
			Name: "Skerrow (invented)", LatitudeDeg: latitudeDeg, LongitudeDeg: longitudeDeg,
			UTCOffsetH: 0, ElevationM: elevationM,
		},
		ReferenceYear: weather.DefaultReferenceYear,
		Invented:      true,
		Comments: []string{
			"invented weather of an invented place; not for use in any project",
			"global irradiance by Haurwitz 1945 and Kasten and Czeplak 1980, diffuse by Erbs, Klein and Duffie 1982, cloud cover from a seeded random series",
			"hours are the 60 minutes before the time stated; an hour with sunrise or sunset holds its hourly mean, for the sun at the middle of the sunlit part",
		},
	}
	for i := range weather.HoursPerYear {
		day := time.Date(y.ReferenceYear, time.January, 1+i/24, 0, 0, 0, 0, time.UTC)
		y.Records = append(y.Records, weather.Record{Month: int(day.Month()), Day: day.Day(), EndH: float64(i%24 + 1)})
	}
	var sunErr error
	cosZ := func(t time.Time) float64 {
		s, err := sky.SunAt(sky.Site{LatitudeDeg: latitudeDeg, LongitudeDeg: longitudeDeg, ElevationM: elevationM}, t)
		if err != nil {
			sunErr = err
		}
		return s.Direction.Z
	}
	cover := cloudCover()
	for i := range y.Records {
		r := &y.Records[i]
		fillAir(r, i, cover[i])
		c, share := sunlit(y, i, cosZ)
		if share <= 0 || c <= 0 {
			continue
		}
		global := haurwitz(c) * cloudTransmission(cover[i])
		kt := global / (photometry.ExtraterrestrialNormal(i/24+1) * c)
		diffuse := global * diffuseFraction(kt)
		// Rounded as the file holds them, and the global closed over the rounded two.
		r.DHI = hundredth(share * diffuse)
		r.DNI = hundredth(share * (global - diffuse) / c)
		r.GHI = hundredth(r.DHI + r.DNI*c)
	}
	if sunErr != nil {
		return nil, fmt.Errorf("invented year: %w", sunErr)
	}
	return y, nil
}

// fillAir sets invented temperatures: a mild sea climate, warmest in August,
// with less swing from day to night under cloud; and the standard pressure.
func fillAir(r *weather.Record, i int, cover float64) {
	day, hour := float64(i)/24, float64(i%24)+0.5
	r.DryBulbC = hundredth(11.5 - 4.5*math.Cos(2*math.Pi*(day-45)/365) - (3-2*cover)*math.Cos(2*math.Pi*(hour-3)/24))
	r.DewPointC = hundredth(r.DryBulbC - 1.5 - 3.5*(1-cover))
	r.PressurePa = 101325
	nan := math.NaN()
	r.GlobalLx, r.DirectLx, r.DiffuseLx, r.ZenithCdM2 = nan, nan, nan, nan
}

func hundredth(x float64) float64 { return math.Round(x*100) / 100 }

func inventedEPW() ([]byte, error) {
	y, err := inventedYear()
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := weather.WriteEPW(&b, y); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}
