package glare

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Method says what a pixel must exceed to belong to a glare source. The three
// are those of Wienold and Christoffersen, Energy and Buildings 38 (2006)
// 743-757 (from memory).
type Method int

const (
	// FixedLuminance: more than Options.ThresholdCdM2.
	FixedLuminance Method = iota
	// MultipleOfMean: more than Options.Multiple times the mean luminance of
	// the whole image.
	MultipleOfMean
	// MultipleOfTask: more than Options.Multiple times the mean luminance of
	// the zone the eye works in, a cone around Options.TaskCentre.
	MultipleOfTask
)

// PositionRule says where a source's position index is taken.
type PositionRule int

const (
	// AtCentroid takes it at the luminance-weighted centroid: published
	// practice.
	AtCentroid PositionRule = iota
	// Integrated takes the P for which omega/P^2 is the integral of
	// d(omega)/P^2 over the source: better for large sources.
	Integrated
)

// Defaults of Options.
const (
	// Pierson, Wienold, Bodart, review of factors influencing discomfort
	// glare, LEUKOS 14 (2018), recommend 2000 cd/m2 (from memory, fairly
	// sure); older works use 1000 to 3000 and more.
	DefaultThresholdCdM2 = 2000.0
	// 4 to 7 times the mean, 4 to 5 times the work zone's (Wienold and
	// Christoffersen 2006, from memory): the lower end of both.
	DefaultMultiple = 4.0
	// Own choice: a screen 0.4 m high at 0.65 m.
	DefaultTaskRadiusRad = 0.3
	// Own choice, 4 degrees: the diagonal step between pixels of a
	// hemispherical fisheye 64 pixels wide, so that finer images group what
	// that one cannot help grouping.
	DefaultGroupingRad = 4 * math.Pi / 180
)

// Options of source detection and evaluation. The zero value stands for the
// defaults.
type Options struct {
	Method Method // default FixedLuminance

	ThresholdCdM2 float64 // for FixedLuminance, cd/m2; 0 means DefaultThresholdCdM2
	Multiple      float64 // for the other two; 0 means DefaultMultiple

	TaskCentre    r3.Vec  // view frame; zero means the line of sight
	TaskRadiusRad float64 // half angle of the cone; 0 means DefaultTaskRadiusRad

	// GroupingRad merges groups of bright pixels of which two pixel centres
	// are at most this far apart. 0 means DefaultGroupingRad; negative means
	// that only pixels that touch, corners included, form a group.
	GroupingRad float64

	// CoreCdM2 separates bright cores: pixels above it (cd/m2) form sources
	// of their own, apart from the group around them. 0 means that they stay
	// in their group.
	CoreCdM2 float64

	Position PositionRule // default AtCentroid

	// LowLight multiplies DGP by the factor LowLight(Ev). Default: no.
	LowLight bool
}

func (o Options) multiple() float64 { return orDefault(o.Multiple, DefaultMultiple) }

func (o Options) zone() (centre r3.Vec, radiusRad float64) {
	centre = r3.Vec{X: 1}
	if o.TaskCentre != (r3.Vec{}) {
		centre = r3.Unit(o.TaskCentre)
	}
	return centre, orDefault(o.TaskRadiusRad, DefaultTaskRadiusRad)
}

func orDefault(x, byDefault float64) float64 {
	if x == 0 {
		return byDefault
	}
	return x
}
