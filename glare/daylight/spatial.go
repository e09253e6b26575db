package daylight

// Spatial holds the limits of spatial daylight autonomy.
type Spatial struct {
	ThresholdLx float64 // 300 lx
	TimeShare   float64 // 0.5 of the hours
	Blinds      bool    // the series has the blinds operated; otherwise the result is labelled unshaded
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
	Share Bracket
	Label string // "sDA", or "sDA, unshaded" without operated blinds
	Hours float64
}

// SDA is spatial daylight autonomy over the hours (Calendar.Clock(8, 18)), of
// perHour steps each. Source: IES LM-83-12.
func SDA(p Plane, hours Hours, s Spatial, perHour int) SpatialResult {
	label := "sDA, unshaded"
	if s.Blinds {
		label = "sDA"
	}
	return SpatialResult{p.SensorShare(hours, s.ThresholdLx, s.TimeShare), label, float64(len(hours)) / float64(perHour)}
}

// Exposure holds the limits of annual sunlight exposure.
type Exposure struct {
	ThresholdLx float64 // 1000 lx of direct sun
	HoursLimit  int     // 250 h
}

// DefaultExposure is ASE(1000 lx, 250 h). Source: IES LM-83-12.
var DefaultExposure = Exposure{ThresholdLx: 1000, HoursLimit: 250}

// ExposureResult is the share of sensors that the sun strikes too often, and
// the hours above the threshold at each sensor.
type ExposureResult struct {
	Share       Bracket // all three readings agree: direct sun carries no noise
	SensorHours []float64
	Hours       float64
}

// ASE is annual sunlight exposure: the share of sensors whose direct sun is
// above the threshold for more than the limit of hours, of perHour steps each,
// blinds open. Source: IES LM-83-12.
func ASE(direct [][]float32, hours Hours, x Exposure, perHour int) ExposureResult {
	r := ExposureResult{SensorHours: make([]float64, len(direct)), Hours: float64(len(hours)) / float64(perHour)}
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
