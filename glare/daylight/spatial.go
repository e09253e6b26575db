package daylight

// Spatial holds the limits of spatial daylight autonomy.
type Spatial struct {
	ThresholdLx float64 // 300 lx
	TimeShare   float64 // 0.5 of the hours
	Shading     Shading // in the series
}

// Shading is how the sun protection stands in a series.
type Shading int

// What a series may have; IES LM-83-12 wants ByBlindRule for sDA and Unshaded
// for ASE.
const (
	Unshaded    Shading = iota // nothing that moves is closed
	ByBlindRule                // operated by DefaultBlindRule
	AsOperated                 // operated, by other rules or not all by that one
	AsStanding                 // closed, some of it, all the year
)

// String is what a metric is labelled with, "" for its own rule.
func (s Shading) String() string {
	return [...]string{Unshaded: "unshaded", ByBlindRule: "", AsOperated: "as operated", AsStanding: "shading as it stands"}[s]
}

func labelled(metric, words string) string {
	if words == "" {
		return metric
	}
	return metric + ", " + words
}

// DefaultSpatial is sDA(300 lx, 50 %). Source: IES LM-83-12.
var DefaultSpatial = Spatial{ThresholdLx: 300, TimeShare: 0.5}

// Preferred and nominally acceptable sDA. Source: IES LM-83-12, from memory.
const (
	SpatialPreferred  = 0.75
	SpatialAcceptable = 0.55
)

// SpatialResult is the share of sensors that reach the threshold often enough.
type SpatialResult struct {
	Share   Bracket
	Label   string // "sDA" where blinds are operated by its rule, else such as "sDA, unshaded"
	Shading Shading
	Hours   float64
}

// SDA is spatial daylight autonomy over the hours (Calendar.Clock(8, 18)), of
// perHour steps each. Source: IES LM-83-12.
func SDA(p Plane, hours Hours, s Spatial, perHour int) SpatialResult {
	return SpatialResult{p.SensorShare(hours, s.ThresholdLx, s.TimeShare), labelled("sDA", s.Shading.String()), s.Shading, float64(len(hours)) / float64(perHour)}
}

// Exposure holds the limits of annual sunlight exposure.
type Exposure struct {
	ThresholdLx float64 // 1000 lx of direct sun
	HoursLimit  int     // 250 h
	Shading     Shading // in the series; Unshaded is what the standard wants
}

// DefaultExposure is ASE(1000 lx, 250 h). Source: IES LM-83-12.
var DefaultExposure = Exposure{ThresholdLx: 1000, HoursLimit: 250}

// ExposureResult is the share of sensors that the sun strikes too often, and
// the hours above the threshold at each sensor.
type ExposureResult struct {
	Share       Bracket // all three readings agree: direct sun carries no noise
	Label       string  // "ASE" with blinds open, else such as "ASE, as operated"
	SensorHours []float64
	Hours       float64
}

// ASE is annual sunlight exposure: the share of sensors whose direct sun is
// above the threshold for more than the limit of hours, of perHour steps each,
// blinds open. Source: IES LM-83-12.
func ASE(direct [][]float32, hours Hours, x Exposure, perHour int) ExposureResult {
	words := x.Shading.String()
	switch x.Shading {
	case Unshaded:
		words = ""
	case ByBlindRule:
		words = AsOperated.String()
	}
	r := ExposureResult{Label: labelled("ASE", words), SensorHours: make([]float64, len(direct)), Hours: float64(len(hours)) / float64(perHour)}
	n := 0.0
	for s, d := range direct {
		above := 0
		for _, h := range hours {
			if float64(d[h]) > x.ThresholdLx {
				above++
			}
		}
		r.SensorHours[s] = float64(above) / float64(perHour)
		if above > x.HoursLimit*perHour {
			n++
		}
	}
	r.Share = Bracket{n, n, n}.over(float64(len(direct)))
	if len(hours) == 0 {
		r.Share = Bracket{}.over(0)
	}
	return r
}

// BlindRule says when the blinds of a group of windows close.
type BlindRule struct {
	ThresholdLx float64 // of direct sun through the group's windows
	SensorShare float64 // close when more than this share of the sensors is struck
}

// DefaultBlindRule closes blinds while more than 2 % of the sensors receive at
// least 1000 lx of direct sun. Source: IES LM-83-12, from memory.
var DefaultBlindRule = BlindRule{ThresholdLx: 1000, SensorShare: 0.02}

// Closed tells for each of n hours whether the blinds are closed; direct is
// the sun through the group's own windows, blinds open.
func (b BlindRule) Closed(direct [][]float32, n int) []bool {
	closed := make([]bool, n)
	for h := range closed {
		closed[h] = b.Closes(len(direct), func(sensor int) float32 { return direct[sensor][h] })
	}
	return closed
}

// Closes tells whether the blinds are closed at one moment; direct is the sun
// through the group's own windows on each of the sensors, blinds open.
func (b BlindRule) Closes(sensors int, direct func(sensor int) float32) bool {
	struck := 0
	for s := range sensors {
		if float64(direct(s)) >= b.ThresholdLx {
			struck++
		}
	}
	return float64(struck) > b.SensorShare*float64(sensors)
}
