package weather

import (
	"math"
	"time"

	"squint/scene/photometry"
)

// Step is one of the equal parts into which the hour of a record is cut.
type Step struct {
	Hour, Part  int       // record, and part of it, from 0
	Time        time.Time // at which the sun is to be taken, see SunlitMoment
	SunlitShare float64   // of the part, during which the sun is up
	// GHI, DNI, DHI in W/m2 are means over the whole part.
	GHI, DNI, DHI float64
}

// boundTurbidity is that of very clear cold air, at air mass 2: direct light
// does not pass the clear-sky bound with it as long as the record lets it.
// Source: Rigollier, Bauer, Wald 2000, Solar Energy 68(1), from memory.
const boundTurbidity = 2

// standardPa is the pressure to which air masses are related.
const standardPa = 101325

// Steps cuts every record into parts and spreads its light over them, in order
// of time: len(Records)*parts of them. offsetH is as in SunlitMoment; a record
// taken at an instant stands for the hour around it. sun returns the cosine of
// the zenith angle of the apparent sun for record i. With one part the
// irradiances are the record's own.
//
// The sun is that of each part. In it, the clearness index, GHI over the
// extraterrestrial irradiance of the level plane, and the diffuse fraction, DHI
// over GHI, are interpolated linearly between the middles of the records, where
// their neighbours have light too; then the parts are scaled so that their
// means are the record's GHI and DHI. What is left is direct, so that its own
// column counts no more, and is kept below the clear-sky bound of
// photometry.ClearDirectNormal by moving it to the other parts of the hour; a
// record with more than the bound lets through passes it everywhere by the same
// factor. Light of an hour without sun is spread evenly, without direct light.
//
// These are smooth days: no cloud passes within the hour that the record does
// not know of. The interpolation is our own; no published source.
func (y *Year) Steps(parts int, offsetH float64, sun func(i int, t time.Time) float64) []Step {
	steps := make([]Step, len(y.Records)*parts)
	cos := make([]float64, len(steps))
	mid, interval := intervalMiddleH(offsetH)
	if !interval {
		mid = offsetH
	}
	shapes := make([]clearness, len(y.Records))
	for i := range y.Records {
		r := &y.Records[i]
		cz := func(t time.Time) float64 { return sun(i, t) }
		for k := range parts {
			s := &steps[i*parts+k]
			s.Hour, s.Part = i, k
			if parts == 1 {
				s.Time, s.SunlitShare = y.SunlitMoment(i, offsetH, cz)
				s.GHI, s.DNI, s.DHI = r.GHI, r.DNI, r.DHI
				continue
			}
			width := 1 / float64(parts)
			s.Time, s.SunlitShare = y.sunlit(i, mid-0.5+(float64(k)+0.5)*width, width, cz)
			cos[i*parts+k] = math.Max(0, cz(s.Time))
			shapes[i].level += cos[i*parts+k] * s.SunlitShare * width
		}
		shapes[i].read(r)
	}
	if parts == 1 {
		return steps
	}
	for i := range y.Records {
		before, after := shapes[(i+len(shapes)-1)%len(shapes)], shapes[(i+1)%len(shapes)]
		y.Records[i].spread(steps[i*parts:(i+1)*parts], cos[i*parts:(i+1)*parts], before, shapes[i], after)
	}
	return steps
}

// clearness is the shape of a record's light.
type clearness struct {
	level   float64 // mean of the sun's cosine of the zenith angle, 0 while it is down
	index   float64 // GHI over it in W/m2: the clearness index but for the sun's distance
	diffuse float64 // DHI over GHI, at most 1
	lit     bool
}

func (c *clearness) read(r *Record) {
	if c.level <= 0 || r.GHI <= 0 {
		return
	}
	c.lit = true
	// At the horizon small errors make indices above 1.
	c.index = math.Min(r.GHI/c.level, photometry.SolarConstant)
	c.diffuse = math.Min(r.DHI/r.GHI, 1)
}

// spread fills the parts of a record; cos is the sun's in each.
func (r *Record) spread(parts []Step, cos []float64, before, own, after clearness) {
	n := float64(len(parts))
	global, diffuse, direct, most := make([]float64, len(parts)), make([]float64, len(parts)), make([]float64, len(parts)), make([]float64, len(parts))
	for k := range parts {
		// x is the place of the part, in hours from the record's middle.
		x, near := (float64(k)+0.5)/n-0.5, after
		if x < 0 {
			x, near = -x, before
		}
		shape := own
		if own.lit && near.lit {
			shape.index += x * (near.index - own.index)
			shape.diffuse += x * (near.diffuse - own.diffuse)
		}
		level := cos[k] * parts[k].SunlitShare
		global[k], diffuse[k] = level*shape.index, level*shape.index*shape.diffuse
		most[k] = level * r.clearBound(parts[k].Time, cos[k])
	}
	scale(global, r.GHI*n)
	scale(diffuse, r.DHI*n)
	for k := range parts {
		direct[k] = math.Max(0, global[k]-diffuse[k])
	}
	beam := own.lit && r.GHI > r.DHI
	if beam {
		fill(direct, most, (r.GHI-r.DHI)*n)
	}
	for k := range parts {
		s := &parts[k]
		s.GHI, s.DHI = global[k], diffuse[k]
		if beam && cos[k] > 0 {
			s.GHI = diffuse[k] + direct[k]
			// Beyond the extraterrestrial sun only columns that contradict
			// each other go.
			s.DNI = math.Min(direct[k]/cos[k], photometry.ExtraterrestrialNormal(s.Time.YearDay()))
		}
	}
}

// clearBound is the clear-sky bound of direct light on a plane facing the sun.
func (r *Record) clearBound(t time.Time, cosZ float64) float64 {
	mass := photometry.AirMassKastenYoung1989(math.Acos(math.Min(1, cosZ))) * r.PressurePa / standardPa
	return photometry.ClearDirectNormal(photometry.ExtraterrestrialNormal(t.YearDay()), mass, boundTurbidity)
}

// scale multiplies the values so that they add up to sum; zeros become alike.
func scale(values []float64, sum float64) {
	old := 0.0
	for _, v := range values {
		old += v
	}
	for k := range values {
		if old > 0 {
			values[k] *= sum / old
		} else {
			values[k] = sum / float64(len(values))
		}
	}
}

// fill scales the values so that they add up to sum, and moves what is above
// most to where there is room; where there is not enough, all are above by the
// same factor.
func fill(values, most []float64, sum float64) {
	bound := 0.0
	for _, m := range most {
		bound += m
	}
	if bound <= sum {
		copy(values, most)
		scale(values, sum)
		return
	}
	scale(values, sum)
	above, room := 0.0, 0.0
	for k, m := range most {
		above += math.Max(0, values[k]-m)
		room += math.Max(0, m-values[k])
	}
	for k, m := range most {
		values[k] = math.Min(values[k], m)
		values[k] += above * (m - values[k]) / room
	}
}
