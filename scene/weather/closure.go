package weather

import (
	"fmt"
	"math"
	"time"
)

const (
	// closureShare: columns that belong together close to a few per cent of the
	// mean GHI, even with the sun an hour wrong to about 15 %. Own choice.
	closureShare = 0.25
	// swapShare and swapGain tell columns in another order: theirs closes worse
	// than this share of the mean GHI, and another order that much better.
	swapShare = 0.08
	swapGain  = 4
	// diffuseAbove: share of hours with DHI clearly above GHI that only swapped
	// columns reach. Own choice.
	diffuseAbove = 0.2
)

// checkColumns refuses a year whose irradiances do not fit together at any
// moment within two hours, and looks for the reason. A sun good to a tenth of a
// degree is enough to tell.
func (y *Year) checkColumns() error {
	sun := y.Site.roughSun()
	lit, above := 0, 0
	for _, r := range y.Records {
		if max(r.GHI, r.DNI, r.DHI) <= fitGHI {
			continue
		}
		lit++
		if r.DHI > 1.1*r.GHI+10 {
			above++
		}
	}
	if lit == 0 {
		return &ParseError{File: y.File, Key: "irradiances", Got: fmt.Sprintf("none above %d W/m2 in the whole year", fitGHI),
			Want: "daylight", Do: "take a file with solar data", Err: ErrImplausible}
	}
	own, mean := y.closureOf(orders[0], sun)
	diffuseAboveGlobal := float64(above) > diffuseAbove*float64(lit)
	bad := diffuseAboveGlobal || own > closureShare*mean
	if !bad && own <= swapShare*mean {
		return nil
	}
	e := &ParseError{File: y.File, Key: "irradiances", Err: ErrImplausible,
		Got:  fmt.Sprintf("columns that disagree by %.0f W/m2 (root mean square) at the best moment, the mean GHI being %.0f W/m2", own, mean),
		Want: "GHI = DHI + DNI cos Z",
		Do:   "check the order of the columns, the latitude, the longitude and the time zone"}
	if diffuseAboveGlobal {
		e.Got = fmt.Sprintf("DHI above GHI in %d of %d hours", above, lit)
	}
	for _, o := range orders[1:] {
		if rms, otherMean := y.closureOf(o, sun); rms < own/swapGain && rms < closureShare*otherMean {
			e.Do = "the columns look swapped: those read as GHI, DNI and DHI seem to hold " + o.name
			return e
		}
	}
	if !bad {
		return nil
	}
	if h, rms := y.farOffset(sun); rms < own/swapGain {
		e.Do = fmt.Sprintf("they fit with the sun %s: check the signs of longitude and time zone", offsetWords(h))
	}
	return e
}

// closureOf returns the closure at the best moment with the columns taken in
// another order, and the mean of what is then GHI, over its hours above 50
// W/m². Without such hours the closure is infinite.
func (y *Year) closureOf(o order, sun CosZenith) (rms, mean float64) {
	other := &Year{Site: y.Site, ReferenceYear: y.ReferenceYear, Records: make([]Record, len(y.Records))}
	for i, r := range y.Records {
		r.GHI, r.DNI, r.DHI = o.pick(r)
		other.Records[i] = r
	}
	if o.horizontal {
		sun = func(time.Time) float64 { return 1 }
	}
	c := newClosure(other, sun)
	if len(c.hours) == 0 {
		return math.Inf(1), 0
	}
	for _, i := range c.hours {
		mean += other.Records[i].GHI / float64(len(c.hours))
	}
	offset, _ := c.search()
	return c.rms(offset), mean
}

// farOffset looks for the best moment anywhere within half a day.
func (y *Year) farOffset(sun CosZenith) (offsetH, rms float64) {
	c := &closure{year: y, cz: sun}
	for i, r := range y.Records {
		if r.GHI > fitGHI && i%5 == 0 { // any fifth hour is enough for a hint
			c.hours = append(c.hours, i)
		}
	}
	rms = math.Inf(1)
	if len(c.hours) == 0 {
		return 0, rms
	}
	for h := -12.0; h <= 12; h += coarseStepH {
		if v := c.rms(h); v < rms {
			offsetH, rms = h, v
		}
	}
	return offsetH, rms
}

// roughSun returns the cosine of the zenith angle from the series for
// declination and equation of time in Spencer 1971, Fourier series
// representation of the position of the sun, Search 2(5) (coefficients from
// memory; the author states 0.0006 rad and 0.0025 rad of hour angle).
func (s Site) roughSun() CosZenith {
	sinLat, cosLat := math.Sincos(s.LatitudeDeg * math.Pi / 180)
	return func(t time.Time) float64 {
		u := t.UTC()
		hour := float64(u.Hour()) + float64(u.Minute())/60 + float64(u.Second())/3600
		g := 2 * math.Pi * (float64(u.YearDay()-1) + hour/24) / 365
		s1, c1 := math.Sincos(g)
		s2, c2 := math.Sincos(2 * g)
		s3, c3 := math.Sincos(3 * g)
		decl := 0.006918 - 0.399912*c1 + 0.070257*s1 - 0.006758*c2 + 0.000907*s2 - 0.002697*c3 + 0.00148*s3
		eot := 0.000075 + 0.001868*c1 - 0.032077*s1 - 0.014615*c2 - 0.040849*s2 // rad
		hourAngle := (hour-12)*math.Pi/12 + s.LongitudeDeg*math.Pi/180 + eot
		sinDecl, cosDecl := math.Sincos(decl)
		return sinLat*sinDecl + cosLat*cosDecl*math.Cos(hourAngle)
	}
}

// order picks the global, direct and diffuse value of a record if its columns
// were written in another order.
type order struct {
	name string // what the columns read as GHI, DNI, DHI hold
	pick func(Record) (global, direct, diffuse float64)
	// horizontal: the direct column is taken as it is, without cos Z.
	horizontal bool
}

var orders = []order{
	{"GHI, DNI and DHI", func(r Record) (float64, float64, float64) { return r.GHI, r.DNI, r.DHI }, false},
	{"GHI, DHI and DNI", func(r Record) (float64, float64, float64) { return r.GHI, r.DHI, r.DNI }, false},
	{"DNI, GHI and DHI", func(r Record) (float64, float64, float64) { return r.DNI, r.GHI, r.DHI }, false},
	{"DHI, DNI and GHI", func(r Record) (float64, float64, float64) { return r.DHI, r.DNI, r.GHI }, false},
	{"DNI, DHI and GHI", func(r Record) (float64, float64, float64) { return r.DHI, r.GHI, r.DNI }, false},
	{"DHI, GHI and DNI", func(r Record) (float64, float64, float64) { return r.DNI, r.DHI, r.GHI }, false},
	{"GHI, direct on the horizontal (not normal to the sun) and DHI", func(r Record) (float64, float64, float64) { return r.GHI, r.DNI, r.DHI }, true},
}
