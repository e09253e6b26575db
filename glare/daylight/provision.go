package daylight

import (
	"math"
	"slices"
)

// ProvisionLevel is a level of daylight provision: for TimeShare of the
// daylight hours, TargetLx on TargetShare of the plane and MinimumLx on
// MinimumShare of it, where that is not 0.
type ProvisionLevel struct {
	Name                    string
	TargetLx, TargetShare   float64
	MinimumLx, MinimumShare float64
	TimeShare               float64
}

// ProvisionLevels are those of EN 17037:2018 for vertical and inclined
// openings, the illuminances as quoted in
// public summaries of the standard, the shares from memory.
var ProvisionLevels = []ProvisionLevel{
	{"minimum", 300, 0.5, 100, 0.95, 0.5},
	{"medium", 500, 0.5, 300, 0.95, 0.5},
	{"high", 750, 0.5, 500, 0.95, 0.5},
}

// RoofProvisionLevels are those of EN 17037:2018 for horizontal openings, such
// as roof lights: the target on 95 % of the plane, no minimum; from memory.
var RoofProvisionLevels = []ProvisionLevel{
	{"minimum", 300, 0.95, 0, 0, 0.5},
	{"medium", 500, 0.95, 0, 0, 0.5},
	{"high", 750, 0.95, 0, 0, 0.5},
}

// ProvisionResult holds the shares of the plane that reach the level's two
// illuminances for its share of the hours, and the illuminances themselves
// that TargetShare and MinimumShare of the plane reach.
type ProvisionResult struct {
	Level                          ProvisionLevel
	Target, Minimum                Bracket // share of sensors
	TargetReachedLx, MinReachedLx  Bracket // lx on TargetShare and MinimumShare of the plane
	Hours, Sensors                 int
	SurelyMet, EstimateMet, MayMet bool
}

// Provision evaluates one level over the daylight hours (SunHighest with
// DaylightHoursPerYear). Source: EN 17037:2018, 5.1 and annex A.
func Provision(p Plane, daylight Hours, l ProvisionLevel) ProvisionResult {
	r := ProvisionResult{
		Level:   l,
		Target:  p.SensorShare(daylight, l.TargetLx, l.TimeShare),
		Minimum: p.SensorShare(daylight, l.MinimumLx, l.TimeShare),
		Hours:   len(daylight), Sensors: len(p.E),
	}
	each := make([]Bracket, len(p.E))
	for s := range p.E {
		each[s] = p.Reached(s, daylight, l.TimeShare)
	}
	r.TargetReachedLx = reachedOnPlane(each, l.TargetShare)
	r.MinReachedLx = reachedOnPlane(each, l.MinimumShare)
	r.SurelyMet = r.Target.Surely >= l.TargetShare && r.Minimum.Surely >= l.MinimumShare
	r.EstimateMet = r.Target.Estimate >= l.TargetShare && r.Minimum.Estimate >= l.MinimumShare
	r.MayMet = r.Target.Possibly >= l.TargetShare && r.Minimum.Possibly >= l.MinimumShare
	return r
}

func reachedOnPlane(each []Bracket, share float64) Bracket {
	var lo, mid, hi []float64
	for _, b := range each {
		lo, mid, hi = append(lo, b.Surely), append(mid, b.Estimate), append(hi, b.Possibly)
	}
	return Bracket{reached(lo, share), reached(mid, share), reached(hi, share)}
}

// FactorStats describes the daylight factors of a plane (shares, 0.02 for 2 %).
type FactorStats struct {
	Mean, Median, Min, Max float64
	Uniformity             float64 // Min/Mean
	Target, Minimum        float64 // reached on 50 % and on 95 % of the plane
}

// Factors summarises daylight factors, one per sensor; all NaN where there are
// none. The median of an even number is the mean of the middle two. Uniformity
// is the smallest over the mean (EN 12665, as common practice has it).
func Factors(df []float64) FactorStats {
	if len(df) == 0 {
		n := math.NaN()
		return FactorStats{n, n, n, n, n, n, n}
	}
	v := slices.Clone(df)
	slices.Sort(v)
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	n := len(v)
	f := FactorStats{
		Mean: sum / float64(n), Min: v[0], Max: v[n-1],
		Median: (v[(n-1)/2] + v[n/2]) / 2,
	}
	f.Uniformity = f.Min / f.Mean
	f.Target, f.Minimum = reached(v, 0.5), reached(v, 0.95)
	return f
}

// FactorAsked is the daylight factor that gives targetLx under the site's
// median external diffuse illuminance: targetLx / medianDiffuseLx.
// Source: EN 17037:2018 annex A, from memory (London 14100 lx, 300 lx
// asks for 2.13 %).
func FactorAsked(targetLx, medianDiffuseLx float64) float64 { return targetLx / medianDiffuseLx }

// FactorPlane is daylight factors (shares) as a series of a single hour, 0.
func FactorPlane(df, stdErr []float64, z float64) Plane {
	p := Plane{Z: z}
	for i := range df {
		p.E = append(p.E, []float32{float32(df[i])})
		p.SE = append(p.SE, []float32{float32(stdErr[i])})
	}
	return p
}

// FactorProvision holds one level's daylight factors against those of a plane.
type FactorProvision struct {
	Level               ProvisionLevel
	MedianDiffuseLx     float64
	TargetDF, MinimumDF float64 // asked, shares
	Target, Minimum     Bracket // share of sensors
}

// ProvideByFactor evaluates one level by daylight factors (shares) with their
// standard errors, taken z wide. Source: EN 17037:2018 annex B, the daylight
// factor method, from memory.
func ProvideByFactor(df, stdErr []float64, z, medianDiffuseLx float64, l ProvisionLevel) FactorProvision {
	p := FactorPlane(df, stdErr, z)
	r := FactorProvision{Level: l, MedianDiffuseLx: medianDiffuseLx,
		TargetDF: FactorAsked(l.TargetLx, medianDiffuseLx), MinimumDF: FactorAsked(l.MinimumLx, medianDiffuseLx)}
	r.Target = p.SensorShare(Hours{0}, r.TargetDF, 1)
	r.Minimum = p.SensorShare(Hours{0}, r.MinimumDF, 1)
	return r
}

// MedianDiffuse is the horizontal diffuse illuminance (lx) reached in half of
// the daylight hours.
func MedianDiffuse(diffuseLx []float64, daylight Hours) float64 {
	v := make([]float64, 0, len(daylight))
	for _, h := range daylight {
		v = append(v, diffuseLx[h])
	}
	return reached(v, 0.5)
}
