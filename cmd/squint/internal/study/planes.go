package study

import (
	"math"
	"slices"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
)

// PlaneResult is one work plane's year. Series are [sensor][step] in lx, 0
// at night. StdErr is the standard error; after a further look with more batches
// it is less by as much as z would be.
type PlaneResult struct {
	Plane     scene.WorkPlane
	E, StdErr [][]float32
	Direct    [][]float32

	// Refined is the number of further looks that sensors near a limit got.
	Refined int

	DA, CDA []float64 // by sensor, shares
	UDI     []daylight.UsefulShares

	// Rear are the sensors furthest from the glass, a third of them, and RearDA
	// their mean autonomy: the light that a system is to bring there.
	Rear   []int
	RearDA float64

	MeanDA, MeanCDA float64
	MeanUDI         daylight.UsefulShares

	Factors     daylight.FactorStats
	Factor      []float64 // by sensor, share
	FactorError []float64

	SDA       daylight.SpatialResult
	ASE       daylight.ExposureResult
	Provision []daylight.ProvisionResult // by level
	Levels    []verdict.Verdict
	Asked     int // index of the level asked for, -1 for none

	// What follows is nil where it is not asked for.
	ByFactor    *daylight.FactorProvision
	ViewOut     *ViewOutResult
	Clear       daylight.Plane     // by moment of Result.ClearNames
	ClearShares []daylight.Bracket // of the plane between the illuminances asked for
}

// daThresholdLx is the threshold of DA and cDA; 300 lx as in IES LM-83-12 and
// EN 17037:2018's minimum target.
const daThresholdLx = 300

// judgePlanes spreads the sensors' series over the year and counts. sun is that of
// ASE, see openSun.
func (r *Result) judgePlanes(y *year, sun [][]float32, shaded daylight.Shading) {
	z := r.zSensors()
	r.Settings.ZSensors = z
	first := 0
	for i, w := range r.Scene.WorkPlanes {
		n := len(w.Sensors)
		p := PlaneResult{Plane: w, Asked: -1, Refined: y.looks[i]}
		p.E = r.spread(y.light.E[first : first+n])
		p.StdErr = r.spread(y.light.StdErr[first : first+n])
		open := r.spread(slices.Clone(sun[first : first+n]))
		p.Direct = r.spread(y.light.Direct[first : first+n])
		if y.clear != nil {
			p.Clear = daylight.Plane{E: y.clear.E[first : first+n], SE: y.clear.StdErr[first : first+n], Z: z}
		}
		p.Factor, p.FactorError = y.factors[first:first+n], y.factorE[first:first+n]
		first += n
		exposure := daylight.DefaultExposure
		exposure.Shading = shaded
		p.ASE = daylight.ASE(open, r.Clock, exposure, r.Climate.PerHour())
		r.judgePlane(&p, z)
		r.judgeFurther(&p, z)
		r.Planes = append(r.Planes, p)
	}
}

// spread makes series of the year of those of the moments, which it lets go of:
// in fine steps both together take much room.
func (r *Result) spread(byMoment [][]float32) [][]float32 {
	out := make([][]float32, len(byMoment))
	for s := range byMoment {
		out[s] = make([]float32, len(r.Climate.SinAltitude))
		for k, m := range r.Climate.Moments {
			out[s][m.Step] = byMoment[s][k]
		}
		byMoment[s] = nil
	}
	return out
}

func (r *Result) judgePlane(p *PlaneResult, z float64) {
	used := r.UseOf(p.Plane.Room).Hours
	for s := range p.E {
		p.DA = append(p.DA, daylight.DA(p.E[s], used, daThresholdLx))
		p.CDA = append(p.CDA, daylight.CDA(p.E[s], used, daThresholdLx))
		p.UDI = append(p.UDI, daylight.UDI(p.E[s], used, daylight.DefaultBins))
	}
	p.MeanDA, p.MeanCDA = mean(p.DA), mean(p.CDA)
	p.MeanUDI = meanUDI(p.UDI)
	p.Rear = rear(p.Plane.Sensors, r.Scene.Openings)
	for _, s := range p.Rear {
		p.RearDA += p.DA[s] / float64(len(p.Rear))
	}
	p.Factors = daylight.Factors(p.Factor)
	plane := daylight.Plane{E: p.E, SE: p.StdErr, Z: z}
	spatial := daylight.DefaultSpatial
	spatial.Shading = shading(r.Project)
	p.SDA = daylight.SDA(plane, r.Clock, spatial, r.Climate.PerHour())
	for k, l := range provisionLevels(r.Project) {
		res := daylight.Provision(plane, r.Daylight, l)
		v := verdict.Provision(p.Plane.Name, res)
		p.Provision = append(p.Provision, res)
		p.Levels = append(p.Levels, v)
		if l.Name == r.Project.Criteria.Provision {
			p.Asked = k
			r.Verdicts = append(r.Verdicts, v)
		}
	}
}

func mean(v []float64) float64 {
	if len(v) == 0 {
		return math.NaN()
	}
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	return sum / float64(len(v))
}

func meanUDI(v []daylight.UsefulShares) daylight.UsefulShares {
	var m daylight.UsefulShares
	n := float64(len(v))
	for _, u := range v {
		m.FellShort += u.FellShort / n
		m.Supplementary += u.Supplementary / n
		m.Autonomous += u.Autonomous / n
		m.Exceeded += u.Exceeded / n
	}
	return m
}
