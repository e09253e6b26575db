package sky

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
)

const (
	// maxBrightness is the end of the range in which the polynomials were
	// examined; common practice, no published source.
	maxBrightness  = 0.6
	brightnessStep = 0.005
)

// Clamp says what NewPerez had to change. The zero value means nothing.
type Clamp struct {
	// Clamped tells whether the sky brightness was moved because the model
	// leaves its physical range at the one asked for.
	Clamped bool
	// From is the brightness asked for, To the one the sky was made with.
	From, To float64
	// GradationNegative, HorizonDiverges, IndicatrixNegative and IndicatrixGrows
	// say what was wrong at From: luminance negative towards the zenith (or the
	// horizon), b > 0, luminance negative at some angle to the sun, d > 0.
	GradationNegative, HorizonDiverges, IndicatrixNegative, IndicatrixGrows bool
	// OutOfRange tells that From was below 0, above 0.6 or not a number.
	OutOfRange bool
	// Uniform tells that no brightness gave a physical sky, so that a uniform one
	// was made.
	Uniform bool
}

// NewPerez returns the all-weather sky for a sun direction (unit vector), sky
// clearness (1 and more, may be +Inf) and brightness (0 to 0.6), such that it
// causes diffuseIlluminance (lx) on a level plane, to 1e-5 of its value. A sun
// below the horizon counts as on it where the coefficients are chosen. Clearness
// below 1 or NaN counts as 1, an illuminance that is not positive and finite as
// 0, a sun direction without length as the zenith.
//
// For some clearness, brightness and sun the published polynomials give negative
// luminance, or one that grows without bound at the horizon (b > 0) or away from
// the sun (d > 0). There the brightness is moved to the nearest at which they do
// not, and Clamp says so: the sky keeps a shape that the model has, and
// diffuseIlluminance as asked. To move the brightness is our choice, no published
// source. It concerns twilight: in a typical year (TMY3, Greensboro NC) 18 of
// 4,376 daylight hours with 0.05 % of the diffuse light. The skies at the border
// are poor ones, dark at the zenith and, for classes 3 to 5, glowing in a thin
// line along the horizon.
//
// Source: Perez, Seals & Michalsky, All-weather model for sky luminance
// distribution - preliminary configuration and validation, Solar Energy 50(3),
// 1993, 235-245, equations 1 to 8 and table 1, with the erratum in 51(5), 423.
func NewPerez(sun r3.Vec, clearness, brightness, diffuseIlluminance float64) (*Sky, Clamp) {
	sun = direction(sun)
	sunZenith := math.Min(zenithOf(sun), math.Pi/2)
	bin := photometry.ClearnessBin(clearness)
	sh, clamp := physicalPerez(bin, brightness, sunZenith)

	if !(diffuseIlluminance > 0) || math.IsInf(diffuseIlluminance, 1) {
		diffuseIlluminance = 0
	}
	integral := sh.horizontalIntegral(zenithOf(sun))
	if !(integral > 0) {
		sh, integral = shape{g0: 1, f0: 1}, math.Pi
		clamp.Uniform = true
	}
	return newSky(sh, sun, diffuseIlluminance/integral), clamp
}

// physicalPerez returns the shape at the physical brightness nearest to the one
// asked for.
func physicalPerez(bin int, brightness, sunZenith float64) (shape, Clamp) {
	at := func(delta float64) (shape, Clamp) {
		sh := perezShape(bin, delta, sunZenith)
		return sh, faults(sh, sunZenith)
	}
	start := brightness
	outOfRange := !(brightness >= 0 && brightness <= maxBrightness)
	if outOfRange {
		start = math.Min(math.Max(0, brightness), maxBrightness)
		if math.IsNaN(brightness) {
			start = 0
		}
	}
	sh, fault := at(start)
	if fault == (Clamp{}) && !outOfRange {
		return sh, Clamp{}
	}
	result := fault
	result.Clamped, result.OutOfRange = true, outOfRange
	result.From, result.To = brightness, start
	if fault == (Clamp{}) {
		return sh, result
	}
	for step := brightnessStep; step <= maxBrightness+brightnessStep; step += brightnessStep {
		for _, sign := range [2]float64{1, -1} {
			good := math.Min(math.Max(0, start+sign*step), maxBrightness)
			if _, f := at(good); f != (Clamp{}) {
				continue
			}
			bad := start + sign*(step-brightnessStep)
			for range 20 { // close in on the border, from the good side
				mid := (good + bad) / 2
				if _, f := at(mid); f == (Clamp{}) {
					good = mid
				} else {
					bad = mid
				}
			}
			sh, _ = at(good)
			result.To = good
			return sh, result
		}
	}
	result.Uniform = true
	return shape{g0: 1, f0: 1}, result
}

// faults examines a shape for the sun at a zenith angle up to pi/2.
func faults(sh shape, sunZenith float64) Clamp {
	var c Clamp
	c.HorizonDiverges = sh.b > 0
	c.IndicatrixGrows = sh.d > 0
	// For b <= 0 the gradation runs monotonically from 1 at the horizon to this.
	c.GradationNegative = 1+sh.a*math.Exp(sh.b) < 0
	// gamma runs to pi/2 + Z; 64 steps of 3 degrees or less find a minimum of so
	// flat a curve to 1e-4.
	const steps = 64
	for i := 0; i <= steps; i++ {
		gamma := (math.Pi/2 + sunZenith) * float64(i) / steps
		cos := math.Cos(gamma)
		if 1+sh.c*math.Exp(sh.d*gamma)+sh.e*cos*cos < 0 {
			c.IndicatrixNegative = true
			break
		}
	}
	return c
}

// perezShape evaluates the polynomials of the model for a clearness class (1 to
// 8), brightness and sun zenith angle (radians). Source: at NewPerez; equations
// 7 and 8 are those of c and d in class 1.
func perezShape(bin int, brightness, sunZenith float64) shape {
	k := &perez1993[bin-1]
	x := func(p [4]float64) float64 {
		return p[0] + p[1]*sunZenith + brightness*(p[2]+p[3]*sunZenith)
	}
	sh := shape{g0: 1, a: x(k.a), b: x(k.b), f0: 1, c: x(k.c), d: x(k.d), e: x(k.e)}
	if bin == 1 {
		sh.c = math.Exp(math.Pow(brightness*(k.c[0]+k.c[1]*sunZenith), k.c[2])) - k.c[3]
		sh.d = -math.Exp(brightness*(k.d[0]+k.d[1]*sunZenith)) + k.d[2] + brightness*k.d[3]
	}
	return sh
}

// direction returns a unit vector along v; the zenith for one without direction.
func direction(v r3.Vec) r3.Vec {
	n := r3.Norm(v)
	if !(n > 0) || math.IsInf(n, 1) {
		return r3.Vec{Z: 1}
	}
	return r3.Scale(1/n, v)
}

// perez1993 holds the coefficients x1 to x4 of a to e for each clearness class.
// Source: Perez, Seals & Michalsky (1993), table 1.
var perez1993 = [8]struct{ a, b, c, d, e [4]float64 }{
	{
		a: [4]float64{1.3525, -0.2576, -0.269, -1.4366},
		b: [4]float64{-0.767, 0.0007, 1.2734, -0.1233},
		c: [4]float64{2.8, 0.6004, 1.2375, 1.0},
		d: [4]float64{1.8734, 0.6297, 0.9738, 0.2809},
		e: [4]float64{0.0356, -0.1246, -0.5718, 0.9938},
	},
	{
		a: [4]float64{-1.2219, -0.773, 1.4148, 1.1016},
		b: [4]float64{-0.2054, 0.0367, -3.9128, 0.9156},
		c: [4]float64{6.975, 0.1774, 6.4477, -0.1239},
		d: [4]float64{-1.5798, -0.5081, -1.7812, 0.108},
		e: [4]float64{0.2624, 0.0672, -0.219, -0.4285},
	},
	{
		a: [4]float64{-1.1, -0.2515, 0.8952, 0.0156},
		b: [4]float64{0.2782, -0.1812, -4.5, 1.1766},
		c: [4]float64{24.7219, -13.0812, -37.7, 34.8438},
		d: [4]float64{-5.0, 1.5218, 3.9229, -2.6204},
		e: [4]float64{-0.0156, 0.1597, 0.4199, -0.5562},
	},
	{
		a: [4]float64{-0.5484, -0.6654, -0.2672, 0.7117},
		b: [4]float64{0.7234, -0.6219, -5.6812, 2.6297},
		c: [4]float64{33.3389, -18.3, -62.25, 52.0781},
		d: [4]float64{-3.5, 0.0016, 1.1477, 0.1062},
		e: [4]float64{0.4659, -0.3296, -0.0876, -0.0329},
	},
	{
		a: [4]float64{-0.6, -0.3566, -2.5, 2.325},
		b: [4]float64{0.2937, 0.0496, -5.6812, 1.8415},
		c: [4]float64{21.0, -4.7656, -21.5906, 7.2492},
		d: [4]float64{-3.5, -0.1554, 1.4062, 0.3988},
		e: [4]float64{0.0032, 0.0766, -0.0656, -0.1294},
	},
	{
		a: [4]float64{-1.0156, -0.367, 1.0078, 1.4051},
		b: [4]float64{0.2875, -0.5328, -3.85, 3.375},
		c: [4]float64{14.0, -0.9999, -7.1406, 7.5469},
		d: [4]float64{-3.4, -0.1078, -1.075, 1.5702},
		e: [4]float64{-0.0672, 0.4016, 0.3017, -0.4844},
	},
	{
		a: [4]float64{-1.0, 0.0211, 0.5025, -0.5119},
		b: [4]float64{-0.3, 0.1922, 0.7023, -1.6317},
		c: [4]float64{19.0, -5.0, 1.2438, -1.9094},
		d: [4]float64{-4.0, 0.025, 0.3844, 0.2656},
		e: [4]float64{1.0468, -0.3788, -2.4517, 1.4656},
	},
	{
		a: [4]float64{-1.05, 0.0289, 0.426, 0.359},
		b: [4]float64{-0.325, 0.1156, 0.7781, 0.0025},
		c: [4]float64{31.0625, -14.5, -46.1148, 55.375},
		d: [4]float64{-7.2312, 0.405, 13.35, 0.6234},
		e: [4]float64{1.5, -0.6426, 1.8564, 0.5636},
	},
}
